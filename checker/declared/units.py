"""The units a number may be written in, and their factors to the units used inside (N, mm, N*mm, MPa, rad).

- A unit belongs to one dimension; a number is only converted within its dimension.
- Superscripts, a caret, spaces round `/`, and `*`, `.`, a raised dot or a space between factors are accepted.
"""

from __future__ import annotations

import math
import re

from checker.errors import UsageError

UNITS: dict[str, tuple[str, float]] = {
    "mm": ("length", 1.0),
    "cm": ("length", 10.0),
    "m": ("length", 1000.0),
    "mm2": ("area", 1.0),
    "cm2": ("area", 1e2),
    "m2": ("area", 1e6),
    "mm2/mm": ("area/length", 1.0),
    "mm2/m": ("area/length", 1e-3),
    "cm2/m": ("area/length", 0.1),
    "cm2/cm": ("area/length", 10.0),
    "cm2/mm": ("area/length", 1e2),
    "N": ("force", 1.0),
    "kN": ("force", 1e3),
    "MN": ("force", 1e6),
    "kN/m": ("force/length", 1.0),
    "N/mm": ("force/length", 1.0),
    "Nmm": ("moment", 1.0),
    "N*mm": ("moment", 1.0),
    "Nm": ("moment", 1e3),
    "N*m": ("moment", 1e3),
    "kNmm": ("moment", 1e3),
    "kN*mm": ("moment", 1e3),
    "kNcm": ("moment", 1e4),
    "kN*cm": ("moment", 1e4),
    "kNm": ("moment", 1e6),
    "kN*m": ("moment", 1e6),
    "MNm": ("moment", 1e9),
    "MN*m": ("moment", 1e9),
    "MPa": ("stress", 1.0),
    "N/mm2": ("stress", 1.0),
    "MN/m2": ("stress", 1.0),
    "GPa": ("stress", 1e3),
    "kN/mm2": ("stress", 1e3),
    "kN/cm2": ("stress", 10.0),
    "kPa": ("stress", 1e-3),
    "kN/m2": ("stress", 1e-3),
    "Pa": ("stress", 1e-6),
    "N/m2": ("stress", 1e-6),
    "rad": ("angle", 1.0),
    "deg": ("angle", math.pi / 180),
    "°": ("angle", math.pi / 180),
    "-": ("none", 1.0),
    "%": ("none", 1e-2),
    "‰": ("none", 1e-3),
}
"""Each unit with its dimension and its factor to the unit used inside."""

DIMENSION_NAMES = {
    "length": "a length",
    "area": "an area",
    "area/length": "an area per length",
    "force": "a force",
    "force/length": "a force per length",
    "moment": "a moment",
    "stress": "a stress",
    "angle": "an angle",
    "none": "a pure number",
}
"""How each dimension is named to a reader."""

_ALIKE = str.maketrans({"²": "2", "^": None, "·": "*", "⋅": "*", ".": "*", "º": "°"})
_ROUND_SIGN = re.compile(r"\s*([/*])\s*")
_SPACES = re.compile(r"\s+")


def normal(unit: str) -> str:
    """The spelling of a unit used as a key of `UNITS`: "mm² / m" gives "mm2/m", "kN m" gives "kN*m"."""
    if unit in UNITS:
        return unit
    return _SPACES.sub("*", _ROUND_SIGN.sub(r"\1", unit.strip().translate(_ALIKE)))


def factor(unit: str) -> float:
    """What one of this unit is in the unit used inside; an unknown unit is a UsageError."""
    return _known(unit)[1]


def dimension(unit: str) -> str:
    """The dimension of a unit, such as "area/length"; an unknown unit is a UsageError."""
    return _known(unit)[0]


def units_of(wanted: str) -> tuple[str, ...]:
    """All the units of a dimension, in the order of the table."""
    return tuple(unit for unit, (its_dimension, _) in UNITS.items() if its_dimension == wanted)


def pattern_of(wanted: str) -> str:
    """A regular expression (of the common subset of dialects) for every spelling of a dimension's units."""
    return "|".join(_spellings(unit) for unit in units_of(wanted))


def _known(unit: str) -> tuple[str, float]:
    try:
        return UNITS[normal(unit)]
    except KeyError:
        raise UsageError(f'unknown unit "{unit}"') from None


def _spellings(unit: str) -> str:
    parts = {"/": r"\s*/\s*", "*": r"(?:\s*[*.·⋅]\s*|\s+)", "2": r"\^?[2²]", "°": "[°º]", "-": "-"}
    return "".join(parts.get(sign, sign) for sign in unit)
