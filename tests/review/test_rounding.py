"""The decimals written are evidence: rounding is never a finding, and never a cloak for an error."""

from __future__ import annotations

from typing import Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from tests.review.designer import USUAL, roots_and_carried, submit, value_findings, work

SHAPES = ("rectangle", "box", "circle", "polygon", "tee")
CASES = {
    "rectangle": "V_Ed: 180, T_Ed: 32, M_Ed: 160",
    "box": "V_Ed: 900, T_Ed: 700, M_Ed: 800",
    "circle": "V_Ed: 200, T_Ed: 60, M_Ed: 150",
    "polygon": "V_Ed: 200, T_Ed: 40, M_Ed: 150",
    "tee": "V_Ed: 250, T_Ed: 40, M_Ed: -150",
}


@pytest.mark.parametrize("digits", [3, 4, 5])
@pytest.mark.parametrize("used", [1.0, 1.7, 2.5])
@pytest.mark.parametrize("shape", SHAPES)
def test_an_honest_calculation_has_no_findings(shape: str, used: float, digits: int) -> None:
    """Three digits carried on from line to line."""
    texts = work(shape=shape, case=CASES[shape], used=used, digits=digits)
    assert not value_findings(submit(texts, f"cot_theta: {used}", shape=shape, case=CASES[shape]))
    assert not value_findings(submit(texts, shape=shape, case=CASES[shape])), "without saying the angle"


@given(
    st.integers(300, 900), st.integers(400, 1200), st.sampled_from([20, 30, 45, 60]), st.floats(1.0, 2.5),
    st.integers(50, 400), st.integers(5, 80), st.integers(-300, 300),
)  # fmt: skip
@settings(max_examples=40, deadline=None)
def test_honest_whatever_the_beam(b: int, h: int, f_ck: int, used: float, V: int, T: int, M: int) -> None:
    cot = round(used, 2)
    given: dict[str, Any] = {
        "section": f"{{shape: rectangle, b: {b}, h: {h}}}",
        "f_ck": f_ck,
        "bars": "[{face: bottom, bars: 3H25}, {face: top, bars: 3H25}]",
    }
    case = f"V_Ed: {V}, T_Ed: {T}, M_Ed: {M}"
    texts = work(used=cot, case=case, digits=4, **given)
    assert not value_findings(submit(texts, f"cot_theta: {cot}", case=case, **given))


HABITS = {
    # a habit of the trade: what is written in place of the exact number (common practice, no source)
    "0.87 for 1/1.15": {"f_yd": "435", "f_ywd": "435.0"},
    "fcd with one decimal": {"f_cd": "20.0"},
    "nu with two decimals": {"nu": "0.53"},
    "wall to the nearest millimetre": {"t_ef": "127"},
    "area in square metres": {"A_k": "0.156 m2"},
    "area in square centimetres": {"A_k": "1562 cm2"},
    "depth to the nearest millimetre": {"d": "643"},
}


@pytest.mark.parametrize("habit", HABITS)
def test_habits_are_no_findings(habit: str) -> None:
    replaced = HABITS[habit]
    bare = {symbol: text for symbol, text in replaced.items() if " " not in text}
    texts = work(replaced=bare) | replaced
    assert not value_findings(submit(texts, "cot_theta: 2.0000"))


@pytest.mark.parametrize(
    ("said", "used"), [("theta: 22", 2.5), ("theta: 21.8", 2.5), ("theta: 27", 2.0), ("theta: 45", 1.0)]
)
def test_an_angle_in_whole_degrees_covers_its_rounding(said: str, used: float) -> None:
    assert not value_findings(submit(work(used=used), said))


@pytest.mark.parametrize("said", ["theta: 23.5", "theta: 20", "cot_theta: 2.2"])
def test_but_no_more_than_that(said: str) -> None:
    assert value_findings(submit(work(used=2.5), said))


@pytest.mark.parametrize("factor", [0.95, 1.05])
@pytest.mark.parametrize("symbol", USUAL)
def test_one_wrong_number_is_one_root(symbol: str, factor: float) -> None:
    """5 % on a single number that nobody carried on with: that number, and no other declared one, is found."""
    texts = work(digits=4)
    texts[symbol] = work([*USUAL[: USUAL.index(symbol) + 1]], digits=4, wrong={symbol: factor})[symbol]
    report = submit(texts, "cot_theta: 2.0000")
    roots, carried = roots_and_carried(report)
    assert {quantity for quantity in roots | set(carried) if quantity in texts} == {symbol}
    supposed = [f.draft for f in report.members[0].findings if f.draft.quantity in roots - {symbol}]
    assert all(draft.shows_in == (symbol,) for draft in supposed), (
        "a cause that isn't declared shows in it alone"
    )


@pytest.mark.parametrize(
    ("text", "found"),
    [("0.12", False), ("0.118", False), ("0.1", False), ("0.2", True), ("0.11", True), ("0.125", True)],
)
def test_coarse_numbers_are_held_to_their_own_decimals(text: str, found: bool) -> None:
    """Recomputed 0.1178: 0.1 says 0.05 to 0.15, but 0.11 says 0.105 to 0.115."""
    report = submit({"A_sw_s_torsion": text}, "cot_theta: 2.0000")
    assert ("agrees.A_sw_s_torsion" in value_findings(report)) is found


def test_inherited_rounding_is_allowed_only_where_it_was_inherited() -> None:
    """t_ef written as 130 (13 cm) moves A_k; A_k without that t_ef has no such excuse."""
    texts = {"t_ef": "13 cm", "A_k": "153900"}
    both = value_findings(submit(texts))
    alone = value_findings(submit({"A_k": "153900"}))
    assert set(both) == set()
    assert set(alone) == {"agrees.A_k"}
