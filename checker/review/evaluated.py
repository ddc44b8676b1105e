"""One case recomputed twice, with the means to ask how far a rounding upstream reaches."""

from __future__ import annotations

import math
from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from typing import Any

from checker.declared.model import Case
from checker.review.bases import settle_bases
from checker.review.claims import Claim
from checker.review.engine import ANGLES, Engine
from checker.review.rounding import hidden_steps
from checker.sheet.load import DECLARED
from checker.sheet.quantities import Sheet


@dataclass(frozen=True)
class Evaluated:
    """A case with both recomputations.

    Attributes:
        row: the inputs, claims included.
        scratch: symbol -> value from nothing but geometry, materials, steel, actions and admissible choices;
            the inputs are among them.
        follow: symbol -> value with the designer's own numbers carried on wherever they are declared.
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

    def upstream(self, symbol: str, readings: Iterable[str]) -> dict[str, float]:
        """X, and other readings of it, recomputed from the designer's nearest declared values, X's own set aside."""
        free = self.shifted({symbol: math.nan})
        return {name: float(free[name]) for name in readings}

    def shifted(self, changes: Mapping[str, float]) -> Mapping[str, Any]:
        """The followed values with some declared values changed (symbol -> new value)."""
        row = {**self.row, **{f"{symbol}{DECLARED}": value for symbol, value in changes.items()}}
        return self.engine.follow.run(row)

    def inherited(self, symbol: str, reading: str) -> float:
        """How far the rounding of the declared values X rests on can have moved it, to first order.

        Sum of |dX/dx| times half a step of x over the nearest declared values x (inside units), those among
        them that a strut angle left unsaid was read from; and of the numbers between that a designer writes down
        on the way without declaring them, each by its usual rounding.
        """
        free = {symbol: math.nan}
        values = self.shifted(free)
        base = float(values[reading])
        total = 0.0
        for name, half in hidden_steps(self.between(symbol), self.claims).items():
            nudged = self.shifted({**free, name: float(values[name]) + half})
            change = abs(float(nudged[reading]) - base)
            total += change if math.isfinite(change) else 0.0
        for name in dict.fromkeys((*self.ancestors(symbol), *self.angle_sources())):
            if name == symbol:
                continue
            claim = self.claims[name]
            moved = [
                abs(float(self.shifted({**free, name: claim.value + step})[reading]) - base)
                for step in (-claim.half_step, claim.half_step)
            ]
            total += max((change for change in moved if math.isfinite(change)), default=0.0)
        return total

    def angle_sources(self) -> tuple[str, ...]:
        """The declared values that the strut angles left unsaid were read from."""
        found: dict[str, None] = {}
        for side in ANGLES:
            other = ANGLES[1 - ANGLES.index(side)]
            if side not in self.claims:
                source = self._implying(side) or (other if other in self.claims else self._implying(other))
                found |= {source: None} if source else {}
        return tuple(found)

    def _implying(self, side: str) -> str | None:
        """The first declared value, in the order of the sheet, that an angle can be solved back from."""
        formula = self.sheet.quantities[side.replace("cot_theta", "cot_implied")].formula
        names = formula.names if formula is not None else ()
        solved = (name.removeprefix("cot_of_") for name in names if math.isfinite(self.scratch[name]))
        return next((name for name in solved if name in self.claims), None)

    def read_rounding(self, provided: str, limit: str) -> float:
        """How far the rounding of the values that unsaid strut angles were read from can have moved a gap."""
        base = float(self.scratch[provided]) - float(self.scratch[limit])
        total = 0.0
        for name in self.angle_sources():
            moved: list[float] = []
            for step in (-1, 1):
                value = self.claims[name].value + step * self.claims[name].half_step
                values = {**self.row, **self.engine.scratch.run({**self.row, f"{name}{DECLARED}": value})}
                moved.append(abs(float(values[provided]) - float(values[limit]) - base))
            total += max((change for change in moved if math.isfinite(change)), default=0.0)
        return total

    def ancestors(self, symbol: str) -> tuple[str, ...]:
        """The nearest declared symbols that X's formula rests on, in the order of the sheet."""
        return nearest_declared(self.sheet, symbol, frozenset(self.claims))

    def between(self, symbol: str) -> tuple[str, ...]:
        """The undeclared quantities that lie between X and those, in the order of the sheet."""
        quantities = self.sheet.quantities
        found: set[str] = set()
        stack = [symbol]
        while stack:
            formula = quantities[stack.pop()].formula
            for name in formula.names if formula is not None else ():
                stop = name in self.claims or name in ANGLES or name.endswith(DECLARED)
                if stop or name in found or quantities[name].is_input:
                    continue
                found.add(name)
                stack.append(name)
        return tuple(name for name in self.sheet.order if name in found and name != symbol)


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
