"""Which rows of a block of member-cases could draw a finding: every rule asked at once, on numpy columns.

- The screen never judges. A row it lets pass draws no finding, not even a remark, when it is audited by itself; a row it
  holds back is audited like a single file, which may still find nothing (`tests/properties/test_screen.py`).
- It leans to the safe side: rounding that a value inherits is not counted, a kind of rule it doesn't know holds every
  row back.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from functools import lru_cache
from pathlib import Path
from typing import TYPE_CHECKING, Any, NamedTuple

from checker.review.catalogue import Catalogue, Rule, load_catalogue
from checker.review.causes import AGREE
from checker.review.compare import TINY
from checker.review.engine import ANGLES, sheet_under
from checker.review.kinds_limits import LIMIT_TOLERANCE
from checker.sheet.load import DECLARED
from checker.sheet.program import Program, build
from checker.sheet.quantities import Sheet

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

    Flags = NDArray[np.bool_]


class Block(NamedTuple):
    """Rows of one kind in columns; whatever is the same in all rows may be one plain number.

    Attributes:
        rows: how many there are.
        columns: the sheet's inputs in inside units, claims as `X_declared` (nan where unsaid, link areas on the leg
            basis of their formula).
        half_steps: claimed symbol -> half a step of its last written place.
        denied: fact -> where the section, its bars or links say no.
        refused: where the designer's verdict is "not adequate".
    """

    rows: int
    columns: Mapping[str, Any]
    half_steps: Mapping[str, Any]
    denied: Mapping[str, Any]
    refused: Any = False


class Screen(NamedTuple):
    """What rows of one kind are screened with: a program that computes what the rules compare, and nothing else."""

    program: Program
    sheet: Sheet
    catalogue: Catalogue


@lru_cache(maxsize=64)
def screen_of(standard: str, annex: str, layers: tuple[str, ...], office: Path | None = None) -> Screen:
    """The screen for a standard, an annex, shape layers and an office's file."""
    catalogue = load_catalogue(office, office.name if office else "")
    sheet = sheet_under(standard, annex, layers, office)
    named = {symbol for rule in catalogue.rules.values() for symbol in rule.symbols}
    known = {s for s in (*named, *ANGLES, "has_both") if s in sheet.quantities}
    wanted = sorted(s for s in known if not sheet.quantities[s].is_input)
    return Screen(build(sheet, wanted, columns=True), sheet, catalogue)


def suspects(screen: Screen, block: Block) -> Flags:
    """Where a row may draw a finding."""
    import numpy as np

    program, sheet, catalogue = screen
    with np.errstate(all="ignore"):
        look = _Look(block, program.run({name: block.columns[name] for name in program.inputs}), sheet)
        held = np.zeros(block.rows, dtype=bool)
        for rule in catalogue.rules.values():
            applies = np.asarray(look.value(rule.applies), dtype=bool) if rule.applies else np.True_
            for name in rule.needs:
                applies = applies & np.isfinite(look.value(name))
            if applies.any():
                held |= applies & (_KINDS[rule.kind](look, rule) if rule.kind in _KINDS else True)
        result: Flags = held | look.parted()
        return result


class _Look:
    """One block as the rules look at it."""

    def __init__(self, block: Block, values: Mapping[str, Any], sheet: Sheet) -> None:
        self.block = block
        self.values = values
        self.sheet = sheet

    def value(self, symbol: str) -> Any:
        columns = self.block.columns
        return columns[symbol] if symbol in columns else self.values[symbol]

    def claim(self, symbol: str) -> Any | None:
        """The declared values, nan where unsaid; None where no row declares it."""
        return self.block.columns.get(f"{symbol}{DECLARED}") if symbol in self.block.half_steps else None

    def any_claimed(self, symbols: tuple[str, ...]) -> Any:
        import numpy as np

        found: Any = False
        for symbol in symbols:
            for name in (symbol, *((f"cot_{symbol}",) if "theta" in symbol else ())):
                claim = self.claim(name)
                if claim is not None:
                    found = found | np.isfinite(claim)
        return found

    def parted(self) -> Any:
        """Where one side's angle is read from its values and is not the other's."""
        import numpy as np

        shear, torsion = (self.value(angle) for angle in ANGLES)
        both: Any = True
        for angle in ANGLES:
            claim = self.claim(angle)
            both = both & (np.isfinite(claim) if claim is not None else np.False_)
        apart = np.abs(shear - torsion) > 0.5 * AGREE * np.maximum(shear, torsion)
        return apart & np.asarray(self.value("has_both"), dtype=bool) & ~np.asarray(both)


def _agrees(look: _Look, rule: Rule) -> Any:
    import numpy as np

    claim = look.claim(rule.quantity)
    if claim is None:
        return False
    readings = [look.value(name) for name in (rule.quantity, *rule.or_) if name in look.sheet.quantities]
    gap = np.abs(claim - readings[0])
    size = np.abs(readings[0])
    for reading in readings[1:]:
        gap = np.fmin(gap, np.abs(claim - reading))
        size = np.fmin(size, np.abs(reading))
    scale = np.abs(look.value(rule.scale)) if rule.scale else 0.0
    allowed = look.block.half_steps[rule.quantity] + rule.tolerance * np.maximum(size, scale)
    return np.isfinite(claim) & ~(gap <= allowed + TINY * np.abs(claim))


def _limit(look: _Look, rule: Rule) -> Any:
    import numpy as np

    limit = look.value(rule.limit)
    held: Any = False
    for symbol in rule.provided:
        value = look.value(symbol) if not symbol.endswith(DECLARED) else None
        half: Any = 0.0
        if value is None:
            value = look.claim(symbol.removesuffix(DECLARED))
            if value is None:
                continue
            half = look.block.half_steps[symbol.removesuffix(DECLARED)]
        over = value - limit if rule.kind == "at_most" else limit - value
        beyond = ~(over <= half + (rule.tolerance or LIMIT_TOLERANCE) * np.abs(limit))
        if symbol in look.block.columns:  # what isn't stated is not held against anything
            beyond = beyond & (np.isfinite(value) | (value == np.inf))
        held = held | beyond
    return held & look.any_claimed(rule.declared) if rule.declared else held


def _holds(look: _Look, rule: Rule) -> Any:
    import numpy as np

    if not rule.flag:
        return look.block.denied[rule.fact]
    return ~np.asarray(look.value(rule.flag), dtype=bool) & look.any_claimed(rule.declared)


def _same(look: _Look, rule: Rule) -> Any:
    import numpy as np

    first, second = (look.claim(f"cot_{symbol}") for symbol in rule.quantities)
    if first is None or second is None:
        return False
    steps = sum(look.block.half_steps[f"cot_{symbol}"] for symbol in rule.quantities)
    return np.abs(first - second) > steps + AGREE * np.maximum(first, second)


def _verdict(look: _Look, rule: Rule) -> Any:
    return look.block.refused


def _nothing(look: _Look, rule: Rule) -> Any:
    """A kind that only speaks where a declared value is wrong, which the rule of that value holds back."""
    return False


_KINDS: dict[str, Callable[[_Look, Rule], Any]] = {
    "agrees": _agrees, "at_most": _limit, "at_least": _limit, "holds": _holds, "same": _same, "verdict": _verdict,
    "traced": _nothing, "implied": _nothing, "basis": _nothing, "basis-unsaid": _nothing,
}  # fmt: skip
