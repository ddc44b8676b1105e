"""Dimensions of every formula, proved with pint on the formula's own text, apart from the product's own proof.

- Both branches of a condition are proved. A bare 0 fits any unit; any other bare number is a pure number.
- Angles are pure numbers here; what a solved function takes and gives is stated by its signature.
- Formulas marked empirical hide units in their numbers: they are listed, one by one, and nothing else may be marked.
"""

from __future__ import annotations

import ast
from pathlib import Path
from typing import Any

import pint
import pytest

from checker import shipped
from checker.errors import RuleFaults
from checker.review.engine import sheet_under
from checker.sheet.load import load_layers, load_sheet
from checker.sheet.quantities import Quantity, Sheet

UNITS: Any = pint.UnitRegistry()
PURE = UNITS.Quantity(1.0, "")
SHEET_UNITS = {
    "-": "", "deg": "", "flag": "", "mm": "mm", "mm2": "mm**2", "mm3": "mm**3", "mm4": "mm**4", "mm2/mm": "mm**2/mm",
    "kN": "kN", "kN/m": "kN/m", "kNm": "kN*m", "MPa": "MPa",
}  # fmt: skip
SIGNATURES = {
    # arguments after the section, and the result
    "block_area": (["", "mm"], "mm**2"),
    "block_moment": (["", "mm", "mm"], "mm**3"),
    "block_depth": (["", "mm**3", "mm"], "mm"),
    "bending_resistance": (["", "N", "MPa", "", "", "MPa", "MPa"], "N*mm"),
}
ANY = "any unit"
SECTION = "section"

STANDARD = "EN 1992-1-1:2004"
SHAPES = ("rectangle", "box", "flanged", "flanges-share", "links-aslant")
EMPIRICAL = {
    "f_cm", "f_ctm", "E_cm", "E_s", "lambda_c", "eta_c", "eps_cu3", "k", "v_min", "v_c", "nu", "nu_1_option",
    "rho_w_min", "s_t_max", "gap_bars_max",
    # lengths of the standard that stand in mm, and a stress and bar sizes that its coefficients take
    "alpha_5", "alpha_5_lap", "c_ground", "c_large_grain", "c_least", "c_min_dur", "c_min_dur_4", "clear_for_grain",
    "clear_grain_more", "delta_c_dev_usual", "eta_2", "eta_2_lap", "f_ctk_005_C60", "is_deep", "l_0_link", "l_0_min",
    "l_b_min", "l_bd_support", "lap_gap_allowed", "lap_needs_links", "mandrel_bar_least", "mandrel_link_least",
    "phi_bundle_max", "phi_large", "clear_for_size",
}  # fmt: skip
EMPIRICAL_UK = EMPIRICAL | {"f_ck_shear"}


class ClashError(ValueError):
    """A formula whose units don't go together."""


def measure_of(node: ast.expr, symbols: dict[str, Any]) -> Any:
    """What a formula measures, as a pint quantity of size 1; ANY for a bare zero."""
    match node:
        case ast.Constant(value=number):
            return ANY if number == 0 else PURE
        case ast.Name(id=name):
            return symbols[name]
        case ast.UnaryOp(operand=operand):
            return measure_of(operand, symbols)
        case ast.IfExp(test=test, body=body, orelse=orelse):
            measure_of(test, symbols)
            return same([measure_of(body, symbols), measure_of(orelse, symbols)])
        case ast.Compare(left=left, comparators=[right]):
            same([measure_of(left, symbols), measure_of(right, symbols)])
            return PURE
        case ast.BoolOp(values=values):
            for value in values:
                measure_of(value, symbols)
            return PURE
        case ast.Call(func=ast.Name(id=name), args=arguments):
            return call(name, arguments, symbols)
        case ast.BinOp(left=left, op=operator, right=right):
            return binary(measure_of(left, symbols), operator, right, symbols)
    raise ClashError(ast.dump(node))


def same(parts: list[Any]) -> Any:
    """What all parts measure alike."""
    known = [part for part in parts if part is not ANY]
    if any(isinstance(part, str) for part in known):
        raise ClashError("a section is not a number")
    for part in known[1:]:
        if part.dimensionality != known[0].dimensionality:
            raise ClashError(f"{known[0].units} with {part.units}")
    return known[0] if known else ANY


def call(name: str, arguments: list[ast.expr], symbols: dict[str, Any]) -> Any:
    measured = [measure_of(argument, symbols) for argument in arguments]
    if name in SIGNATURES:
        wanted, result = SIGNATURES[name]
        assert measured[0] == SECTION
        for part, unit in zip(measured[1:], wanted, strict=True):
            same([part, UNITS.Quantity(1.0, unit)])
        return UNITS.Quantity(1.0, result)
    if name in ("min", "max", "first_given", "abs"):
        return same(measured)
    if name == "given":
        return PURE
    (part,) = measured
    if name == "sqrt":
        return ANY if part is ANY else part**0.5
    assert name in ("sin", "cos", "tan", "cot", "atan", "log")
    same([part, PURE])
    return PURE


def binary(left: Any, operator: ast.operator, right: ast.expr, symbols: dict[str, Any]) -> Any:
    if isinstance(operator, ast.Pow):
        if left is ANY or left.dimensionless:
            return PURE
        return left ** float(eval(compile(ast.Expression(right), "", "eval"), {"__builtins__": {}}))
    other = measure_of(right, symbols)
    if isinstance(operator, ast.Add | ast.Sub):
        return same([left, other])
    left, other = (PURE if part is ANY else part for part in (left, other))
    return left * other if isinstance(operator, ast.Mult) else left / other


def prove(sheet: Sheet, quantity: Quantity, text: str | None = None) -> None:
    """Raise ClashError unless the quantity's formula measures what its unit says."""
    symbols = {
        symbol: SECTION if other.unit == "section" else UNITS.Quantity(1.0, SHEET_UNITS[other.unit])
        for symbol, other in sheet.quantities.items()
    }
    assert quantity.formula is not None
    found = measure_of(ast.parse(text or quantity.formula.text, mode="eval").body, symbols)
    same([found, symbols[quantity.symbol]])


def layered() -> dict[str, tuple[Sheet, set[str]]]:
    """Every sheet in use, each with its layers on, and the symbols that are marked empirical."""
    sheets = {"base": (load_sheet(), EMPIRICAL)}
    for path in sorted((shipped.folder("rules") / "annexes").glob("*.yaml")):
        for shape in (
            (),
            *((name,) for name in SHAPES),
            ("rectangle", "links-aslant"),
            ("box", "links-aslant"),
        ):
            marked = EMPIRICAL_UK if path.stem == "uk" else EMPIRICAL
            sheets[f"{path.stem} {' '.join(shape)}"] = sheet_under(STANDARD, path.stem, shape), marked
    return sheets


SHEETS = layered()
FORMULAS = list({
    (q.symbol, q.formula.text): (sheet, q)
    for sheet, _ in SHEETS.values()
    for q in sheet.quantities.values()
    if q.formula is not None and not q.empirical
}.values())  # fmt: skip


@pytest.mark.parametrize(("sheet", "quantity"), FORMULAS, ids=lambda x: getattr(x, "symbol", ""))
def test_formula_measures_what_its_unit_says(sheet: Sheet, quantity: Quantity) -> None:
    prove(sheet, quantity)


@pytest.mark.parametrize("name", SHEETS)
def test_empirical_formulas_are_these_and_no_others(name: str) -> None:
    sheet, expected = SHEETS[name]
    assert {q.symbol for q in sheet.quantities.values() if q.empirical} == expected
    assert len(EMPIRICAL) == 40


def test_every_layer_that_ships_was_proved() -> None:
    folder = shipped.folder("rules") / "en1992-1-1-2004"
    assert set(load_layers(folder / "shapes.yaml")) == set(SHAPES)


WRONG = {
    "V_Rd_max": "alpha_cw * b_w * nu_1 * f_cd / (cot(theta_shear) + tan(theta_shear))",
    "A_sw_s_torsion": "T / (2 * A_k * cot_theta_torsion)",
    "t_ef": "min(max(A / u, 2 * A), t_wall)",
    "crush_sum": "T / V_Rd_max + V / V_Rd_max",
    "F_shift": "delta_F_td if M > F_M_max else delta_F_td",
    "z": "d if given(d) else 0.9",
    "M_Rd": "bending_resistance(section, hogging, f_c, N_Ed, lambda_c, eps_cu3, f_yd, E_s)",
    "V_Rd_c": "sqrt(v_c) * b_w * d",
    "theta_shear": "atan(d)",
}


@pytest.mark.parametrize("symbol", WRONG)
def test_a_wrong_formula_is_noticed(symbol: str) -> None:
    """By this proof, and by the product's own on a layer file."""
    sheet = load_sheet()
    with pytest.raises(ClashError):
        prove(sheet, sheet.quantities[symbol], WRONG[symbol])


@pytest.mark.parametrize("symbol", WRONG)
def test_a_unit_clash_in_a_layer_is_a_fault_with_its_place(symbol: str, tmp_path: Path) -> None:
    text = f'format: 1\nlayers:\n  o:\n    name: o\n    quantities:\n      {symbol}: {{formula: "{WRONG[symbol]}"}}\n'
    layer = tmp_path / f"{symbol}.yaml"
    layer.write_text(text, encoding="utf-8")
    for annex, office in (("recommended", layer), (layer.as_posix(), None)):
        with pytest.raises(RuleFaults) as caught:
            sheet_under(STANDARD, annex, (), office)
        (fault,) = caught.value.faults
        assert fault.file.endswith(f"{symbol}.yaml")
        assert fault.line == 6
        assert fault.column >= text.splitlines()[5].index('"') + 2
