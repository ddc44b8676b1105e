"""The bench on which explanations are tried: how well wrong formulas land on declared values, and what speaks against.

- A wrong formula *fits* a value when it lands on it within rounding: its own, and what it inherits from above.
- It is refuted by a right declared value that it would have moved.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Mapping
from typing import Any, NamedTuple

from checker.declared.symbols import DECLARABLE
from checker.review.causes import Causes
from checker.review.compare import Comparison
from checker.review.evaluated import Evaluated
from checker.review.slips import Slip
from checker.review.stretch import Stretch, solve_back
from checker.sheet.expression import Expression
from checker.sheet.load import DECLARED

CONSTANTS = 5.5e-4
"""Relative slack for constants that the trade rounds: 0.87 for 1/1.15, 1.33 for 4/3, 78.5 for 78.54."""


class Explanation(NamedTuple):
    """One cause.

    - `quantity`: where the slip was made, declared or not.
    - `slip`, `fits`: the likeliest slip's id and all that fit equally; None and () where none is known.
    - `says`: the slip in words.
    - `shows_in`: the declared roots it explains, in the order of the sheet.
    - `replaced`: the wrong formula that was used, for the working.
    - `used`: the value it gives for `quantity`, inside units (nan where that is the declared value itself).
    - `beside`: a second slip that was needed as well.
    """

    quantity: str
    slip: str | None
    fits: tuple[str, ...]
    says: str
    shows_in: tuple[str, ...]
    replaced: Mapping[str, Expression]
    used: float = math.nan
    beside: tuple[Slip, ...] = ()


class Fit(NamedTuple):
    slips: tuple[Slip, ...]
    explained: tuple[str, ...]
    misfit: float  # over what rounding allows, in halves
    spared: int = 0  # declared quantities the slips replace that came out right all the same

    @property
    def rank(self) -> tuple[float, ...]:
        weight = min(slip.weight for slip in self.slips)
        return (len(self.slips), math.ceil(self.misfit * 2), self.spared, -weight, -len(self.explained))

    @property
    def replaced(self) -> dict[str, Expression]:
        return {symbol: formula for slip in self.slips for symbol, formula in slip.replaces.items()}


class Bench:
    """One case with its comparisons and causes, and the stretches that have been opened."""

    def __init__(self, case: Evaluated, compared: Mapping[str, Comparison], causes: Causes) -> None:
        self.case = case
        self.compared = compared
        wrong = {*causes.roots, *causes.carried}
        self.right = [symbol for symbol in compared if symbol not in wrong and not self._is_choice(symbol)]
        self._stretches: dict[str, Stretch] = {}

    def stretch(self, symbol: str) -> Stretch:
        if symbol not in self._stretches:
            self._stretches[symbol] = Stretch(self.case, symbol)
        return self._stretches[symbol]

    def is_hidden(self, symbol: str) -> bool:
        """A quantity a designer works with but has not declared here."""
        return symbol in DECLARABLE and "theta" not in symbol and symbol not in self.case.claims

    def _is_choice(self, symbol: str) -> bool:
        """What a designer may choose: that it is admissible speaks for nothing."""
        return self.case.sheet.quantities[symbol].kind == "choice"

    def misfit(self, symbol: str, replaced: Mapping[str, Expression]) -> float | None:
        """How well wrong formulas land on a declared value, as a share of what rounding allows; None: they don't."""
        claim = self.compared[symbol].claim
        stretch = self.stretch(symbol)
        gap = abs(stretch.result(replaced) - claim.value)
        if not gap <= claim.half_step + 0.05 * max(abs(claim.value), abs(self.compared[symbol].upstream)):
            return None
        allowed = claim.half_step + stretch.inherited(replaced) + CONSTANTS * abs(claim.value) + 1e-12
        return gap / allowed if gap <= allowed else None

    def fit(self, slips: tuple[Slip, ...], roots: Iterable[str]) -> Fit | None:
        """The roots that slips explain, unless a right declared value speaks against them."""
        replaced = {symbol: formula for slip in slips for symbol, formula in slip.replaces.items()}
        explained, worst = [], 0.0
        for symbol in roots:
            if all(name not in self.stretch(symbol) for name in replaced):
                continue
            misfit = self.misfit(symbol, replaced)
            if misfit is not None:
                explained.append(symbol)
                worst = max(worst, misfit)
        if not explained:
            return None
        spared = sum(name in replaced and self._moves(name, replaced) for name in self.right)
        if spared and all(name not in replaced for name in explained):
            return None  # who declares one of its quantities rightly did not make it at its twin
        hidden = {name: formula for name, formula in replaced.items() if name not in self.compared}
        for symbol in self.right:
            if any(name in self.stretch(symbol) for name in hidden) and self._moves(symbol, hidden):
                return None
        return Fit(slips, tuple(explained), worst, spared)

    def chance(self, symbol: str, candidates: int) -> float:
        """How many of so many candidates would land on a random value between a third and three times this one."""
        claim = self.compared[symbol].claim
        allowed = claim.half_step + self.stretch(symbol).inherited({}) + CONSTANTS * abs(claim.value)
        return candidates * allowed / abs(claim.value) if claim.value else math.inf

    def lands(self, symbol: str, changes: Mapping[str, Any]) -> bool:
        """Whether other inputs, carried through the stretch, give the declared value within rounding."""
        claim, stretch = self.compared[symbol].claim, self.stretch(symbol)
        row = {**self.case.row, **changes, f"{symbol}{DECLARED}": math.nan}
        result = float(self.case.engine.follow.run(row)[symbol])
        allowed = claim.half_step + stretch.inherited({}) + CONSTANTS * abs(claim.value)
        return abs(result - claim.value) <= allowed

    def _moves(self, symbol: str, replaced: Mapping[str, Expression]) -> bool:
        """Whether wrong formulas move a right declared value away from what is declared."""
        comparison = self.compared[symbol]
        stretch = self.stretch(symbol)
        result = stretch.result(replaced)
        if not math.isfinite(result):
            return True
        allowed = comparison.claim.half_step + comparison.relative(comparison.recomputed)
        if abs(result - comparison.claim.value) <= allowed:
            return False
        return abs(result - comparison.claim.value) > allowed + stretch.inherited(replaced)

    def band(self, symbol: str, name: str, start: float) -> tuple[float, float, float] | None:
        """The value of `name` that lands on a declared one, with what its rounding leaves open."""
        if not (math.isfinite(start) and start > 0):
            return None
        claim = self.compared[symbol].claim
        stretch = self.stretch(symbol)

        def work(value: float) -> float:
            return stretch.with_value(name, value)

        reach = claim.half_step + stretch.inherited({}) + CONSTANTS * abs(claim.value)
        solved = [solve_back(work, claim.value + sign * reach, start) for sign in (0, -1, 1)]
        if any(value is None for value in solved):
            return None
        values = [value for value in solved if value is not None]
        return values[0], min(values), max(values)

    def refuted(self, name: str, value: float) -> bool:
        for symbol in self.right:
            if name in self.stretch(symbol) or self.rests_on_input(symbol, name):
                comparison = self.compared[symbol]
                result = self.stretch(symbol).with_value(name, value)
                if not abs(result - comparison.claim.value) <= comparison.tolerance:
                    return True
        return False

    def rests_on_input(self, symbol: str, name: str) -> bool:
        quantities = self.case.sheet.quantities
        return any(
            (formula := quantities[inner].formula) is not None and name in formula.names
            for inner in self.stretch(symbol).inner
        )
