"""The working of a quantity: its formula as it ran, with the numbers put in, and the result.

Numbers stand in inside units (N, mm, MPa), angles in degrees, so that the line can be followed with a calculator;
the result is given in the shown unit as well. Only the branch of a condition that ran is shown.
"""

from __future__ import annotations

import ast
import math
from collections.abc import Mapping
from typing import Any

from checker.sheet.expression import Expression, printed, scalar_code
from checker.sheet.program import scalar_namespace
from checker.sheet.quantities import Quantity, Sheet
from checker.sheet.shown import number, paper, with_unit

INSIDE_UNIT = {"kN": "N", "kN/m": "N/mm", "kNm": "Nmm"}
DIGITS = 7


def in_symbols(quantity: Quantity) -> str:
    """`V_Rd,max = α_cw · b_w · z · …`; empty for an input."""
    if quantity.formula is None:
        return ""
    return f"{paper(quantity.symbol)} = {printed(quantity.formula.tree, paper)}"


def in_numbers(sheet: Sheet, symbol: str, values: Mapping[str, Any], wrong: Expression | None = None) -> str:
    """The right-hand side with numbers, in inside units, of the branch that ran.

    Args:
        sheet: with the layers the values were computed under.
        symbol: the quantity.
        values: inside values of every symbol its formula names.
        wrong: a formula to show in place of the quantity's own (that of a slip).
    """
    formula = wrong or sheet.quantities[symbol].formula
    assert formula is not None
    namespace = scalar_namespace()

    def leaf(name: str) -> str:
        unit = sheet.quantities[name].unit
        value = values[name]
        if unit == "section":
            return "section"
        if unit == "deg":
            return number(math.degrees(value), DIGITS) + "°"
        return number(float(value), DIGITS)

    def choose(test: ast.expr) -> bool:
        code = scalar_code(test)
        return bool(eval(code, {**namespace, **values}))

    return printed(formula.tree, leaf, choose)


def working(sheet: Sheet, symbol: str, values: Mapping[str, Any], wrong: Expression | None = None) -> str:
    """One line: symbols = numbers = result with its unit, e.g. `V_Rd,max = … = 1 · 400 · … = 841.9 kN`.

    `wrong` shows a slip's formula in place of the quantity's own; `values` then has its result.
    """
    quantity = sheet.quantities[symbol]
    formula = wrong or quantity.formula
    result = with_unit(float(values[symbol]), quantity.unit, 5)
    if formula is None:
        return f"{paper(symbol)} = {result}"
    namespace = scalar_namespace()

    def choose(test: ast.expr) -> bool:
        return bool(eval(scalar_code(test), {**namespace, **values}))

    symbols = printed(formula.tree, paper, choose)
    numbers = in_numbers(sheet, symbol, values, wrong)
    if quantity.unit in INSIDE_UNIT:
        result = f"{number(float(values[symbol]), DIGITS)} {INSIDE_UNIT[quantity.unit]} = {result}"
    if isinstance(formula.tree, ast.Name | ast.Constant):  # taken over as it is: no need to say it twice
        numbers = symbols
    parts = [paper(symbol), symbols, numbers, result]
    shown = [part for index, part in enumerate(parts) if index == 0 or part != parts[index - 1]]
    return " = ".join(shown)
