"""The stretch of the sheet between a wrong declared value and its nearest declared ancestors, worked again with slips.

- Values outside the stretch stay as the designer's own numbers make them; inside it a slip's wrong formula replaces
  the right one and what rests on it follows.
- Formulas are compiled one by one when first needed: reasoning looks at a handful of short stretches.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Mapping
from functools import lru_cache
from types import CodeType
from typing import Any

from checker.review.evaluated import Evaluated
from checker.review.rounding import hidden_steps
from checker.sheet.expression import Expression, scalar_code
from checker.sheet.load import DECLARED
from checker.sheet.program import scalar_namespace

Formulas = Mapping[str, Expression]
NAMESPACE = scalar_namespace()
NOTHING: Mapping[str, Any] = {}


@lru_cache(maxsize=4096)
def _compiled(formula: Expression) -> CodeType:
    return compile(scalar_code(formula.tree), formula.text, "eval")


def value_of(formula: Expression, values: Mapping[str, Any]) -> float:
    """A formula on plain numbers (inside units); nan where a symbol isn't known."""
    try:
        return float(eval(_compiled(formula), NAMESPACE, values))
    except (NameError, OverflowError):
        return math.nan


class Stretch:
    """What lies between one declared value and the declared values above it.

    - `symbol`: the declared value.
    - `inner`: the quantities of the stretch in the order of the sheet, the symbol last.
    - `base`: all values with the designer's own numbers carried on and the symbol's own set aside.
    """

    def __init__(self, case: Evaluated, symbol: str) -> None:
        self.case = case
        self.symbol = symbol
        self.inner = (*case.between(symbol), symbol)
        self.base: dict[str, Any] = {**self._free, **case.shifted({symbol: math.nan})}
        self._shifted: dict[str, dict[str, Any]] = {}

    @property
    def _free(self) -> dict[str, Any]:
        """The inputs of the row, the symbol's own declared value set aside."""
        return {**self.case.row, f"{self.symbol}{DECLARED}": math.nan}

    def __contains__(self, symbol: object) -> bool:
        return symbol in self.inner

    def worked(
        self, replaced: Formulas, base: Mapping[str, Any] | None = None, fixed: Mapping[str, float] = NOTHING
    ) -> dict[str, Any]:
        """All values with wrong formulas in place, or with values fixed; only what rests on them is worked again."""
        values = {**(self.base if base is None else base), **fixed}
        changed: set[str] = set(fixed)
        quantities = self.case.sheet.quantities
        for name in self.inner:
            if name in fixed:
                continue
            wrong = replaced.get(name)
            if wrong is not None:
                values[name] = value_of(wrong, values)
                changed.add(name)
                continue
            formula = quantities[name].formula
            if formula is not None and changed and not changed.isdisjoint(formula.names):
                values[name] = value_of(formula, values)
                changed.add(name)
        return values

    def _declared_above(self, replaced: Formulas) -> list[str]:
        """The declared values that the formulas of the stretch, right and wrong, speak of."""
        quantities = self.case.sheet.quantities
        named: set[str] = set()
        for inner in self.inner:
            formula = replaced.get(inner) or quantities[inner].formula
            named |= set(formula.names if formula is not None else ())
        return [name for name in self.case.claims if name in named and name != self.symbol]

    def result(self, replaced: Formulas) -> float:
        """The declared quantity with wrong formulas in place."""
        return float(self.worked(replaced)[self.symbol])

    def with_value(self, name: str, value: float) -> float:
        """The declared quantity if a quantity of the stretch, or an input, had another value."""
        return float(self.worked(NOTHING, fixed={name: value})[self.symbol])

    def inherited(self, replaced: Formulas) -> float:
        """How far the rounding of the declared values above can move the result, wrong formulas in place."""
        result = self.result(replaced)
        total = 0.0
        for name in self._declared_above(replaced):
            claim = self.case.claims[name]
            if name not in self._shifted:
                moved = self.case.shifted({self.symbol: math.nan, name: claim.value + claim.half_step})
                self._shifted[name] = {**self._free, **moved}
            change = abs(float(self.worked(replaced, self._shifted[name])[self.symbol]) - result)
            total += 0.0 if math.isnan(change) else change
        return total + self._hidden_rounding(replaced, result)

    def _hidden_rounding(self, replaced: Formulas, result: float) -> float:
        """How far the usual rounding of undeclared numbers on the way can move the result."""
        values = self.worked(replaced)
        total = 0.0
        for name, half in hidden_steps(self.inner[:-1], ()).items():
            nudged = self.worked(replaced, fixed={name: float(values[name]) + half})
            change = abs(float(nudged[self.symbol]) - result)
            total += change if math.isfinite(change) else 0.0
        return total


def solve_back(work: Callable[[float], float], target: float, start: float) -> float | None:
    """The value whose result is the target, by secants from a start; None where it isn't found."""
    first, second = start, start * 1.01
    f_first, f_second = work(first) - target, work(second) - target
    for _ in range(40):
        if not math.isfinite(f_second) or f_second == f_first:
            return None
        third = second - f_second * (second - first) / (f_second - f_first)
        if not 0 < third < 20 * start:
            return None
        if abs(third - second) <= 1e-12 * abs(second):
            return third
        first, f_first, second = second, f_second, third
        f_second = work(second) - target
        if f_second == 0:
            return second
    return second if abs(f_second) <= 1e-9 * abs(target) else None
