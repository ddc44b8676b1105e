"""One case recomputed twice, with the means to ask how far a rounding upstream reaches."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

from checker.review.bases import settle_bases
from checker.review.claims import Claim
from checker.review.engine import ANGLES, Engine
from checker.declared.model import Case
from checker.sheet.load import DECLARED
from checker.sheet.program import RECOMPUTED
from checker.sheet.quantities import Sheet


@dataclass(frozen=True)
class Evaluated:
    """A case with both recomputations.

    Attributes:
        row: the inputs, claims included.
        scratch: symbol -> value from nothing but geometry, materials, steel, actions and admissible choices;
            the inputs are among them.
        follow: symbol -> value with the designer's numbers carried on; `X__own` is X before it was overruled.
    """

    case: Case
    claims: Mapping[str, Claim]
    engine: Engine
    row: Mapping[str, Any]
    scratch: Mapping[str, Any]
    follow: Mapping[str, Any]

    @property
    def sheet(self) -> Sheet:
        return self.engine.sheet

    def upstream(self, symbol: str) -> float:
        """X recomputed from the designer's nearest declared values."""
        own = RECOMPUTED.format(symbol)
        return float(self.follow[own] if own in self.follow else self.follow[symbol])

    def shifted(self, changes: Mapping[str, float]) -> Mapping[str, Any]:
        """The followed values with some declared values changed (symbol -> new value)."""
        row = {**self.row, **{f"{symbol}{DECLARED}": value for symbol, value in changes.items()}}
        return self.engine.follow.run(row)

    def inherited(self, symbol: str, reading: str) -> float:
        """How far the rounding of the declared values X rests on can have moved it, to first order.

        Sum of |dX/dx| times half a step of x over the nearest declared values x (inside units).
        """
        own = RECOMPUTED.format(symbol)
        key = own if reading == symbol and own in self.follow else reading
        total = 0.0
        for name in self.ancestors(symbol):
            claim = self.claims[name]
            moved = self.shifted({name: claim.value + claim.half_step})
            change = abs(float(moved[key]) - float(self.follow[key]))
            total += change if change == change else 0.0
        return total

    def ancestors(self, symbol: str) -> tuple[str, ...]:
        """The nearest declared symbols that X's formula rests on, in the order of the sheet."""
        return nearest_declared(self.sheet, symbol, frozenset(self.claims))


def evaluate(engine: Engine, case: Case, claims: Mapping[str, Claim], row: Mapping[str, Any]) -> Evaluated:
    """Run both recomputations on one row of plain numbers, link areas with the legs their numbers count."""
    scratch = {**row, **engine.scratch.run(row)}
    settled = settle_bases(claims, scratch)
    if any(claim.swapped for claim in settled.values()):
        row = {**row, **{f"{s}{DECLARED}": claim.value for s, claim in settled.items() if claim.swapped}}
        scratch = {**row, **engine.scratch.run(row)}
    return Evaluated(case, settled, engine, row, scratch, {**row, **engine.follow.run(row)})


def nearest_declared(sheet: Sheet, symbol: str, declared: frozenset[str]) -> tuple[str, ...]:
    """Walk up the formulas and stop at every declared symbol; a chosen angle stops the walk as well."""
    found: dict[str, None] = {}
    seen: set[str] = set()
    stack = [symbol]
    while stack:
        current = stack.pop()
        formula = sheet.quantities[current].formula
        if formula is None or (current in ANGLES and current != symbol):
            continue
        for name in formula.names:
            if name.endswith(DECLARED) or name in seen:
                continue
            seen.add(name)
            if name in declared:
                found[name] = None
            else:
                stack.append(name)
    position = {name: index for index, name in enumerate(sheet.order)}
    return tuple(sorted(found, key=position.__getitem__))
