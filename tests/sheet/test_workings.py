"""The printed working of every formula: read back as a person with a calculator would, it gives the number beside it."""

from __future__ import annotations

import math
import re
from collections.abc import Callable, Mapping
from typing import Any

import pytest

from checker.declared.model import Design
from checker.geometry import bending
from checker.sheet.expression import parse, printed
from checker.sheet.quantities import Sheet
from checker.sheet.shown import SHOWN_FACTOR
from checker.sheet.workings import in_numbers, working
from tests.sheet.designs import design, values_of

INCLINED = "{mark: L1, diameter: 10, spacing: 150, legs: 2, place: perimeter, ends: hooks_135, angle: 60}"
V_M_N = "{name: A, V_Ed: 310, T_Ed: 52, M_Ed: 240}"
DESIGNS: dict[str, Callable[[], Design]] = {
    "rectangle": lambda: design(cases=V_M_N),
    "rectangle, declared": lambda: design(
        declared="{cot_theta_shear: 2.0, theta_torsion: 35, z: 560, V_Rd_max: 900, T_Rd_max: 150, V_Rd_s: 400}"
    ),
    "rectangle, torsion alone": lambda: design(cases="{name: A, V_Ed: 0, T_Ed: 40, M_Ed: 0}"),
    "rectangle, small actions": lambda: design(cases="{name: A, V_Ed: 30, T_Ed: 2, M_Ed: 20}"),
    "rectangle, compression": lambda: design(
        cases="{name: A, V_Ed: 310, T_Ed: 52, M_Ed: 240, N_Ed: 900}", f_ck=60
    ),
    "rectangle, heavy compression": lambda: design(
        cases="{name: A, V_Ed: 310, T_Ed: 52, M_Ed: 40, N_Ed: 4500}"
    ),
    "rectangle, tension": lambda: design(
        cases="{name: A, V_Ed: -310, T_Ed: 52, M_Ed: 240, N_Ed: -300}", annex="uk"
    ),
    "rectangle, hogging": lambda: design(cases="{name: A, V_Ed: 310, T_Ed: -52, M_Ed: -240, M_Ed_max: -300}"),
    "rectangle, large moment": lambda: design(cases="{name: A, V_Ed: 310, T_Ed: 52, M_Ed: 1900}"),
    "rectangle, 0.8 f_ywk": lambda: design(declared="{f_ywd: 400, nu_1: 0.6}"),
    "box": lambda: design("box", cases="{name: A, V_Ed: 900, T_Ed: 700, M_Ed: 1500, N_Ed: 300}", f_ck=55),
    "circle": lambda: design("circle", cases="{name: A, V_Ed: 300, T_Ed: 80, M_Ed: 350}"),
    "circle, hogging": lambda: design(
        "circle", cases="{name: A, V_Ed: 300, T_Ed: 80, M_Ed: -350, N_Ed: 500}"
    ),
    "polygon": lambda: design("polygon", cases="{name: A, V_Ed: 300, T_Ed: 80, M_Ed: 350}"),
    "tee, hogging": lambda: design("tee", cases="{name: A, V_Ed: 300, T_Ed: 60, M_Ed: -350}"),
    "inclined links": lambda: design(links=INCLINED, cases="{name: A, V_Ed: 310, T_Ed: 0, M_Ed: 240}"),
    "inclined links, declared": lambda: design(
        links=INCLINED,
        declared="{A_sw_s_shear: 0.7, V_Rd_s: 500, delta_F_td: 200, A_s_shift: 400, V_Rd_max: 800}",
        cases="{name: A, V_Ed: 310, T_Ed: 0, M_Ed: -240, N_Ed: 200}",
        annex="uk",
    ),
    "uk": lambda: design(annex="uk", f_ck=70, declared="{f_cd: 39.7}"),
}

SIGNS = {"·": "*", "−": "-", "^": "**", "≤": "<=", "≥": ">=", "≠": "!=", "°": " * (pi / 180)"}
DIGITS = 5e-7
"""What a number with seven digits may be off by, relative."""


def _nan_safe(function: Callable[..., float]) -> Callable[..., float]:
    def safe(*values: float) -> float:
        return math.nan if any(map(math.isnan, values)) else function(*values)

    return safe


def _root(value: float) -> float:
    return math.sqrt(value) if value >= 0 else math.nan


def _first_given(*values: float) -> float:
    return next((value for value in values[:-1] if math.isfinite(value)), values[-1])


NAMES: dict[str, Any] = {
    "__builtins__": {}, "pi": math.pi, "nan": math.nan, "inf": math.inf, "min": _nan_safe(min), "max": _nan_safe(max),
    "abs": abs, "sqrt": _root, "log": math.log, "sin": math.sin, "cos": math.cos, "tan": math.tan,
    "cot": lambda angle: 1 / math.tan(angle), "atan": math.atan, "given": math.isfinite, "first_given": _first_given,
    "block_area": bending.block_area, "block_moment": bending.block_moment, "block_depth": bending.block_depth,
    "bending_resistance": bending.bending_resistance,
}  # fmt: skip


def read_back(text: str, values: Mapping[str, Any], stretch: float = 1.0, which: int = -1) -> float:
    """The value of a line of numbers; the number at place `which` may be stretched, to see how much its rounding does."""
    plain = (
        text.replace("−without limit", "(-inf)").replace("without limit", "inf").replace("not defined", "nan")
    )
    for sign, code in SIGNS.items():
        plain = plain.replace(sign, code)
    count = iter(range(10**6))

    def number(match: re.Match[str]) -> str:
        return repr(float(match[0]) * (stretch if next(count) == which else 1.0))

    plain = re.sub(r"(?<![\w.])\d+\.?\d*(?:e[-+]?\d+)?", number, plain)
    try:
        return float(eval(plain, {**NAMES, "section": values.get("section")}))
    except ZeroDivisionError:
        return math.nan


def allowed(text: str, value: float, values: Mapping[str, Any]) -> float:
    """To first order, how far the rounding of each printed number can move the value."""
    places = len(re.findall(r"(?<![\w.])\d+\.?\d*", text))
    total = 1e-9 * abs(value)
    for k in range(places):
        moved = [abs(read_back(text, values, 1 + side * 2 * DIGITS, k) - value) for side in (1, -1)]
        total += max((gap for gap in moved if not math.isnan(gap)), default=0.0)
    return total


def follow(sheet: Sheet, symbol: str, values: Mapping[str, Any]) -> str | None:
    """What is wrong with the working of one quantity, or None."""
    text = in_numbers(sheet, symbol, values)
    ours, told = read_back(text, values), float(values[symbol])
    if not math.isfinite(told):
        return None if not math.isfinite(ours) else f"{symbol} = {text}: {ours}, not {told}"
    if abs(ours - told) <= allowed(text, ours, values):
        return None
    return f"{symbol} = {text}: {ours!r}, not {told!r}"


@pytest.mark.parametrize("name", DESIGNS)
def test_every_working_gives_its_number(name: str) -> None:
    for engine, values in values_of(DESIGNS[name]()):
        formulas = [q.symbol for q in engine.sheet.quantities.values() if q.formula is not None]
        assert len(formulas) > 100
        assert [fault for symbol in formulas if (fault := follow(engine.sheet, symbol, values))] == []


@pytest.mark.parametrize("name", DESIGNS)
def test_the_line_ends_with_the_value_in_its_unit(name: str) -> None:
    for engine, values in values_of(DESIGNS[name]()):
        for quantity in engine.sheet.quantities.values():
            value = float(values.get(quantity.symbol, math.nan)) if quantity.unit != "section" else math.nan
            if quantity.formula is None or not math.isfinite(value) or quantity.unit == "section":
                continue
            line = working(engine.sheet, quantity.symbol, values)
            last = line.rsplit(" = ", 1)[-1].replace("−", "-").replace("°", "").split(" ")[0]
            shown = float(value) * SHOWN_FACTOR[quantity.unit]
            assert float(last) == pytest.approx(shown, rel=6e-5, abs=1e-12), line


def test_only_the_branch_that_ran_is_printed() -> None:
    ((engine, values),) = values_of(design(cases="{name: A, V_Ed: 310, T_Ed: 52, M_Ed: -240}"))
    assert in_numbers(engine.sheet, "a_s", values) == f"{values['a_s_top']:.7g}"
    assert working(engine.sheet, "T", values).startswith("T = abs(T_Ed) = abs(")


@pytest.mark.parametrize(
    ("text", "printed_as"),
    [
        ("a - (b - c)", "a − (b − c)"), ("a - b - c", "a − b − c"), ("a / (b * c)", "a / (b · c)"),
        ("a / b * c", "a / b · c"), ("(-a) ** 2", "(−a)^2"), ("-a ** 2", "−a^2"), ("a ** (b + c)", "a^(b + c)"),
        ("(a ** b) ** c", "(a^b)^c"), ("a * (b + c)", "a · (b + c)"), ("a - -b", "a − (−b)"),
        ("1 if a <= 1 and (b > 0 or c > 0) else 0", "1 if a ≤ 1 and (b > 0 or c > 0), else 0"),
        ("1 if a <= 1 and b > 0 or c > 0 else 0", "1 if a ≤ 1 and b > 0 or c > 0, else 0"),
        ("1 if not (a > 0 and b > 0) else 0", "1 if not (a > 0 and b > 0), else 0"),
        ("a + (b if c > 0 else d)", "a + (b if c > 0, else d)"),
        ("min(a, b if c > 0 else d)", "min(a, (b if c > 0, else d))"),
    ],
)  # fmt: skip
def test_brackets_survive_printing(text: str, printed_as: str) -> None:
    assert printed(parse(text).tree, str) == printed_as


def test_a_wrong_working_would_be_noticed() -> None:
    ((engine, values),) = values_of(design())
    for symbol in ("V_Rd_max", "A_sw_s_torsion", "M_Rd", "crush_sum"):
        assert follow(engine.sheet, symbol, {**values, symbol: 1.001 * values[symbol]})
