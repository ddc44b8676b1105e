"""The literal text of a number to a value with its unit, its written decimals and its place.

- The text itself is read, never what a YAML loader makes of it: `0300` is 300, `12:30` and `yes` no numbers.
- A unit may follow the number; it must be of the dimension asked for.
- Decimals are written with a point; a comma is refused, because it may mean either thing.
"""

from __future__ import annotations

import math
import re

from checker.declared.model import Number, Place
from checker.declared.tree import Mapping, Node, Scalar, Sequence, shorten
from checker.declared.units import DIMENSION_NAMES, UNITS, dimension, normal, units_of

LITERAL = r"[+-]?(?:[0-9]+(?:\.[0-9]*)?|\.[0-9]+)(?:[eE][+-]?[0-9]+)?"
"""The forms of a number, as a regular expression of the common subset of dialects."""

LARGEST = 1e9
"""The largest size of any number, in the unit it is shown in; beyond that it is a slip of the keyboard."""

SMALLEST = 1e-9
"""The smallest size of a number that isn't zero, in the unit it is shown in."""

_MAX_LENGTH = 60
_NUMBER = re.compile(rf"({LITERAL})\s*(.*)", re.DOTALL)
_PARTS = re.compile(r"[+-]?([0-9]*)\.?([0-9]*)(?:[eE]([+-]?[0-9]+))?")
_WHOLE = re.compile(r"[+-]?[0-9]+")
_NOT_FINITE = re.compile(r"[+-]?\.?(inf(inity)?|nan)", re.IGNORECASE)
_DIGIT_COMMA = re.compile(r"[+-]?[0-9][0-9.]*,[0-9]")
_YES_NO = frozenset(("yes", "no", "true", "false", "on", "off", "y", "n"))


class LiteralError(ValueError):
    """The text isn't what was expected; the message says what is wrong and what was expected."""


def parse_number(node: Node, unit: str) -> Number:
    """The number a node holds, `unit` being the one a plain number is in; raises LiteralError.

    >>> parse_number(Scalar("420 mm2/m", False, 1, 1), "mm2/mm").value
    0.42
    """
    expected = _expected(unit)
    text = _scalar_text(node, expected)
    match = _NUMBER.fullmatch(text) if len(text) <= _MAX_LENGTH else None
    if match is None:
        raise LiteralError(_why_no_number(text, expected))
    literal, rest = match.groups()
    rest = rest.rstrip()
    written = unit
    if rest:
        written = normal(rest)
        if written not in UNITS:
            raise LiteralError(_why_no_number(text, expected) or _unknown_unit(rest, expected))
        if dimension(written) != dimension(unit):
            named = DIMENSION_NAMES[dimension(written)]
            raise LiteralError(f'"{shorten(text)}" is {named}; expected {expected}')
    factor = UNITS[written][1]
    value, step = float(literal) * factor, last_place(literal) * factor
    shown = abs(value) / UNITS[unit][1]
    if not math.isfinite(value) or shown > LARGEST:
        raise LiteralError(f'"{shorten(text)}" is beyond any real size; expected {expected}')
    if 0 < shown < SMALLEST or (value == 0 and literal.lower().split("e")[0].strip("+-.0")):
        raise LiteralError(
            f'"{shorten(text)}" is too small to be meant; expected 0 or a size that can be measured'
        )
    return Number(value, literal, written, step, Place(node.line, node.column))


def parse_count(node: Node) -> int:
    """The whole number a node holds, without sign tricks, decimals or units; raises LiteralError."""
    text = _scalar_text(node, "a whole number")
    quoted = isinstance(node, Scalar) and node.quoted
    if quoted or len(text) > 12 or not _WHOLE.fullmatch(text):
        raise LiteralError(f'{"the text " if quoted else ""}"{shorten(text)}" is not a whole number')
    return int(text)


def last_place(literal: str) -> float:
    """One unit in the last written place of a number: "0.42" gives 0.01, "310" gives 1, "1.5e3" gives 100."""
    match = _PARTS.fullmatch(literal)
    if match is None:
        raise LiteralError(f'"{shorten(literal)}" is not a number')
    exponent = int(match.group(3) or 0) - len(match.group(2))
    return float(f"1e{min(exponent, 300)}")


def _expected(unit: str) -> str:
    named = DIMENSION_NAMES[dimension(unit)]
    return named if unit == "-" else f"{named} in {unit}"


def _scalar_text(node: Node, expected: str) -> str:
    if isinstance(node, Mapping):
        raise LiteralError(f"a map stands here; expected {expected}")
    if isinstance(node, Sequence):
        raise LiteralError(f"a list stands here; expected {expected}")
    if node.is_empty:
        raise LiteralError(f"empty value; expected {expected}")
    return node.text.strip()


def _why_no_number(text: str, expected: str) -> str:
    """What is wrong with a text that should have been a number; empty if only its unit can be."""
    quoted = f'"{shorten(text)}"'
    if len(text) > _MAX_LENGTH:
        return f"{quoted} is too long for a number; expected {expected}"
    if _DIGIT_COMMA.match(text):
        return f"{quoted} has a comma; write decimals with a point (1.50) and thousands without a sign"
    if "_" in text and text.replace("_", "").isdigit():
        return f"{quoted} has an underscore; write the digits without a sign between them"
    if text.lower() in _YES_NO:
        return f"{quoted} is a yes or no; expected {expected}"
    if _NOT_FINITE.fullmatch(text):
        return f"{quoted} is not finite; expected {expected}"
    if text[:1].isdigit() and ":" in text:
        return f"{quoted} is not a plain number; expected {expected}"
    if _NUMBER.match(text):
        return ""
    return f"{quoted} is not a number; expected {expected}"


def _unknown_unit(rest: str, expected: str) -> str:
    kind = expected.partition(" in ")[0]
    wanted = next(key for key, named in DIMENSION_NAMES.items() if named == kind)
    return f'unknown unit "{shorten(rest)}"; expected {kind} in {", ".join(units_of(wanted))}'
