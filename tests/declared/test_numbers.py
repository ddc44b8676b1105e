"""Numbers and units: the literal text is kept, and every factor agrees with a units library."""

from __future__ import annotations

import math

import pint
import pytest
from hypothesis import given
from hypothesis import strategies as st

from checker.declared.callouts import parse_bars, parse_links
from checker.declared.model import Place
from checker.declared.numbers import LiteralError, last_place, parse_count, parse_number
from checker.declared.symbols import DECLARABLE, LINK_AREAS, MEANINGS
from checker.declared.tree import Scalar
from checker.declared.units import DIMENSION_NAMES, UNITS, dimension, factor, normal
from checker.errors import UsageError

REGISTRY = pint.UnitRegistry()
INSIDE = {
    "length": "mm",
    "area": "mm**2",
    "area/length": "mm**2/mm",
    "force": "N",
    "force/length": "N/mm",
    "moment": "N*mm",
    "stress": "MPa",
    "angle": "rad",
    "none": "",
}
SPELLED_OUT = {"-": "", "%": "percent", "‰": "permille", "°": "degree"}


def scalar(text: str) -> Scalar:
    return Scalar(text, False, 3, 7)


@pytest.mark.parametrize("unit", UNITS)
def test_factor_agrees_with_pint(unit: str) -> None:
    """Source: the definitions of the Pint units library."""
    spelled = SPELLED_OUT.get(unit, unit.replace("2", "**2"))
    for glued, apart in (("Nmm", "N*mm"), ("Ncm", "N*cm"), ("Nm", "N*m")):
        spelled = spelled if "*m" in spelled else spelled.replace(glued, apart)
    known, scale = UNITS[unit]
    assert scale == pytest.approx(REGISTRY.Quantity(1, spelled).to(INSIDE[known]).magnitude, rel=1e-14)
    assert (dimension(unit), factor(unit)) == UNITS[unit]


@pytest.mark.parametrize(
    ("written", "meant"),
    [
        ("mm²", "mm2"),
        ("mm^2", "mm2"),
        ("mm² / m", "mm2/m"),
        ("N / mm²", "N/mm2"),
        ("kN m", "kN*m"),
        ("kN.m", "kN*m"),
        ("kN·m", "kN*m"),
        ("kN * m", "kN*m"),
        ("º", "°"),
    ],
)
def test_spellings(written: str, meant: str) -> None:
    assert normal(written) == meant
    assert factor(written) == UNITS[meant][1]


def test_an_unknown_unit_is_a_wrong_use() -> None:
    with pytest.raises(UsageError, match="unknown unit"):
        factor("furlong")


@pytest.mark.parametrize(
    ("written", "unit", "value", "text", "own_unit", "step"),
    [
        ("0.42", "mm2/mm", 0.42, "0.42", "mm2/mm", 0.01),
        ("0.42 mm2/mm", "mm2/mm", 0.42, "0.42", "mm2/mm", 0.01),
        ("420 mm2/m", "mm2/mm", 0.42, "420", "mm2/m", 0.001),
        ("310", "kN", 310e3, "310", "kN", 1e3),
        ("0.31 MN", "kN", 310e3, "0.31", "MN", 1e4),
        ("0.31MN", "kN", 310e3, "0.31", "MN", 1e4),
        ("1.5e3", "-", 1500.0, "1.5e3", "-", 100.0),
        ("1.2e6", "mm2", 1.2e6, "1.2e6", "mm2", 1e5),
        ("400.", "mm", 400.0, "400.", "mm", 1.0),
        (".5", "-", 0.5, ".5", "-", 0.1),
        ("0300", "mm", 300.0, "0300", "mm", 1.0),
        ("1.50", "-", 1.5, "1.50", "-", 0.01),
        ("-52", "kNm", -52e6, "-52", "kNm", 1e6),
        ("+2.5E-1", "-", 0.25, "+2.5E-1", "-", 0.01),
        ("1.2 %", "-", 0.012, "1.2", "%", 0.001),
        ("22 deg", "deg", math.radians(22), "22", "deg", math.radians(1)),
        ("0", "kN", 0.0, "0", "kN", 1e3),
    ],
)
def test_number(written: str, unit: str, value: float, text: str, own_unit: str, step: float) -> None:
    number = parse_number(scalar(written), unit)
    assert number.value == pytest.approx(value, rel=1e-15)
    assert number.step == pytest.approx(step, rel=1e-15)
    assert number.half_step == number.step / 2
    assert (number.text, number.unit, number.place) == (text, own_unit, Place(3, 7))


@pytest.mark.parametrize(
    "text", ["", "1e", "e5", ".", "+", "--1", "1 000", "1'000", "٣", "１", "1..2", "0o17", "#", "1e999"]
)
def test_no_number(text: str) -> None:
    with pytest.raises(LiteralError):
        parse_number(scalar(text), "mm")


@given(st.decimals(min_value=-(10**6), max_value=10**6, places=3, allow_nan=False))
def test_decimals_are_kept(written) -> None:
    """Source: Python's decimal module, for the value and the last place of the digits as written."""
    text = format(written, "f")
    if 0 < abs(written) < 1e-9:
        return
    number = parse_number(scalar(text), "mm")
    assert number.text == text
    assert number.value == float(written)
    assert number.step == pytest.approx(10.0 ** written.as_tuple().exponent, rel=1e-15)


@given(st.floats(min_value=1e-6, max_value=1e8, allow_nan=False), st.sampled_from(sorted(UNITS)))
def test_a_converted_number_is_the_same_number(value: float, unit: str) -> None:
    own = parse_number(scalar(f"{value!r} {unit}"), unit)
    assert own.value == pytest.approx(value * UNITS[unit][1], rel=1e-15)
    assert last_place(own.text) <= value * 1.0000001 or "." not in own.text


@pytest.mark.parametrize("text", ["4.0", "-", "1e3", "four", "0x4", "4 ", " 4", "99999999999999"])
def test_count(text: str) -> None:
    if text.strip() == "4":
        assert parse_count(scalar(text)) == 4
        return
    with pytest.raises(LiteralError):
        parse_count(scalar(text))


@pytest.mark.parametrize(
    ("text", "meant"),
    [
        ("4H25", (4, "25")),
        ("12 T 16", (12, "16")),
        ("4Ø25", (4, "25")),
        ("4φ25", (4, "25")),
        ("4x25", (4, "25")),
        ("4-25", (4, "25")),
        ("4H9.5", (4, "9.5")),
        ("425", None),
        ("H25", None),
        ("4Q25", None),
        ("4H25B1", None),
        ("4HH25", None),
    ],
)
def test_bar_callout(text: str, meant: tuple[int, str] | None) -> None:
    assert parse_bars(text) == meant


@pytest.mark.parametrize(
    ("text", "meant"),
    [
        ("H10-150", ("10", "150")),
        ("Ø10/150", ("10", "150")),
        ("T10 @ 150", ("10", "150")),
        ("10-150", ("10", "150")),
        ("H10", None),
        ("H10-", None),
        ("2H10-150", None),
    ],
)
def test_link_callout(text: str, meant: tuple[str, str] | None) -> None:
    assert parse_links(text) == meant


def test_every_symbol_has_a_known_unit_and_a_meaning() -> None:
    assert set(DECLARABLE) == set(MEANINGS)
    assert {dimension(unit) for unit in DECLARABLE.values()} <= set(DIMENSION_NAMES)
    assert all(DECLARABLE[symbol] == "mm2/mm" for symbol in LINK_AREAS)
    assert "verdict" not in DECLARABLE
