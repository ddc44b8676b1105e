"""Roots and what is carried from them, the angle that numbers betray, and what link areas count."""

from __future__ import annotations

from typing import Any

import pytest

from tests.review.designer import roots_and_carried, submit, value_findings, work
from tests.sheet.designs import design, values_of

WRONG = {
    # the number that comes out wrong: its factor, and what has to hang on it
    "A_k": (1.25, {"T_Rd_max", "crush_sum", "A_sw_s_torsion", "A_sw_s_total", "A_sl_torsion", "T_Rd_s"}),
    "u_k": (1.2, {"A_sl_torsion"}),
    "f_cd": (1.5, {"V_Rd_max", "T_Rd_max", "crush_sum"}),
    "nu": (1.89, {"V_Rd_max", "T_Rd_max", "crush_sum"}),
    "f_ywd": (1.15, {"A_sw_s_shear", "A_sw_s_torsion", "A_sw_s_total", "V_Rd_s", "T_Rd_s"}),
    "f_yd": (1.15, {"A_sl_torsion", "A_s_shift"}),
    "t_ef": (0.6, {"A_k", "u_k", "T_Rd_max", "A_sw_s_torsion", "A_sw_s_total", "A_sl_torsion", "T_Rd_s"}),
    "A_sw_s_shear": (2.0, {"A_sw_s_total"}),
    "A_sw_s_torsion": (2.0, {"A_sw_s_total"}),
    "delta_F_td": (0.5, {"A_s_shift"}),
    "V_Rd_max": (1.11, {"crush_sum"}),
}


@pytest.mark.parametrize("symbol", WRONG)
def test_one_error_carried_on_is_one_root(symbol: str) -> None:
    factor, hanging = WRONG[symbol]
    roots, carried = roots_and_carried(submit(work(wrong={symbol: factor}, digits=4), "cot_theta: 2.0000"))
    assert roots == {symbol}
    assert set(carried) >= hanging
    assert set(carried.values()) == {symbol}


def test_two_errors_are_two_roots() -> None:
    roots, carried = roots_and_carried(
        submit(work(wrong={"f_cd": 1.5, "u_k": 1.2}, digits=4), "cot_theta: 2.0000")
    )
    assert roots == {"f_cd", "u_k"}
    assert carried == {"V_Rd_max": "f_cd", "T_Rd_max": "f_cd", "crush_sum": "f_cd", "A_sl_torsion": "u_k"}


def test_an_error_on_top_of_a_carried_one_is_a_root_of_its_own() -> None:
    roots, carried = roots_and_carried(
        submit(work(wrong={"A_k": 1.25, "A_sl_torsion": 0.5}, digits=4), "cot_theta: 2.0000")
    )
    assert roots == {"A_k", "A_sl_torsion"}
    assert "A_sl_torsion" not in carried


def test_errors_that_cancel_are_still_found() -> None:
    """A wrong A_k that was not carried on leaves the rest right: only A_k is wrong."""
    texts = work(digits=4)
    texts["A_k"] = work(["t_ef", "A_k"], wrong={"A_k": 1.3}, digits=4)["A_k"]
    assert roots_and_carried(submit(texts, "cot_theta: 2.0000")) == ({"A_k"}, {})


def test_the_inadmissible_lever_arm_carries_what_follows() -> None:
    symbols = ("A_sw_s_shear", "V_Rd_s", "V_Rd_max")
    texts = {"z": "640", **work(["z", *symbols], replaced={"z": "640"}, digits=4)}
    report = submit(texts, "cot_theta: 2.0000")
    assert "lever-arm.limit" in value_findings(report)
    roots, carried = roots_and_carried(report)
    assert carried == dict.fromkeys(symbols, "z")
    assert roots == {"z"}


@pytest.mark.parametrize(("said", "used"), [("cot_theta: 2.5", 1.0), ("theta: 45", 2.5), ("theta: 35", 2.2)])
def test_the_angle_really_used_is_found(said: str, used: float) -> None:
    """Every number worked with another angle than the one stated: one finding, not nine."""
    report = submit(work(used=used, digits=4), said)
    found = value_findings(report)
    assert "strut.angle-used" in found
    assert found["strut.angle-used"].implied_cot == pytest.approx(used, rel=0.01)
    roots, carried = roots_and_carried(report)
    assert roots == {said.split(":", maxsplit=1)[0]}
    assert set(found["strut.angle-used"].shows_in) >= {"V_Rd_s", "T_Rd_s"}
    assert {"V_Rd_s", "T_Rd_s", "A_sl_torsion", "A_sw_s_shear"} <= set(carried)


def test_one_claim_but_two_angles_used() -> None:
    """Each side is told by itself, and what was worked with it hangs on it."""
    report = submit(work(used=1.0, torsion_on=1.6, digits=4), "cot_theta: 2.5")
    _, carried = roots_and_carried(report)
    told = {
        f.draft.quantity: f.draft.implied_cot
        for f in report.members[0].findings
        if f.draft.rule == "strut.angle-used"
    }
    assert told == {
        "theta_shear": pytest.approx(1.0, rel=0.01),
        "theta_torsion": pytest.approx(1.6, rel=0.01),
    }
    assert (carried["V_Rd_s"], carried["T_Rd_s"]) == ("theta_shear", "theta_torsion")


@pytest.mark.parametrize(
    ("said", "used", "rule"), [("cot_theta: 3.0", 3.0, "flattest"), ("theta: 60", 3**-0.5, "steepest")]
)
def test_an_angle_outside_the_limits_carries_both_sides(said: str, used: float, rule: str) -> None:
    """What is worked with it hangs on that one finding; it is not also told as an angle used beside the claim."""
    report = submit(work(used=used, digits=4), said)
    found = value_findings(report)
    assert f"strut.{rule}" in found
    assert "strut.angle-used" not in found
    roots, carried = roots_and_carried(report)
    assert roots == {said.split(":", maxsplit=1)[0]}
    assert {"V_Rd_s", "T_Rd_s", "A_sl_torsion", "A_sw_s_shear", "A_sw_s_total"} <= set(carried)


@pytest.mark.parametrize(("shear", "torsion"), [(2.5, 1.0), (1.0, 2.0), (2.5, 2.2)])
def test_two_angles_unsaid_are_betrayed_by_the_numbers(shear: float, torsion: float) -> None:
    symbols = ("A_sw_s_shear", "V_Rd_s", "delta_F_td", "A_sw_s_torsion", "T_Rd_s", "A_sl_torsion")
    report = submit(work(symbols, used=shear, torsion_on=torsion, digits=4))
    found = value_findings(report)
    assert found["strut.angle-used"].gravity == "breach"
    assert found["strut.angle-used"].implied_cot == pytest.approx(torsion, rel=0.01)


def test_one_angle_unsaid_is_no_finding() -> None:
    for used in (1.0, 1.6, 2.5):
        assert not value_findings(submit(work(used=used, digits=4)))


def test_two_angles_said_are_found_and_nothing_else() -> None:
    texts = work(used=2.5, torsion_on=1.0, digits=4)
    found = value_findings(submit(texts, "cot_theta_shear: 2.5, cot_theta_torsion: 1.0"))
    assert set(found) == {"strut.same-angle"}


def test_a_single_number_on_another_angle_is_its_own_root() -> None:
    """A strut limit at 45 degrees beside links at 21.8: the classical slip (from general professional knowledge)."""
    texts = work(used=2.5, digits=4)
    texts["V_Rd_max"] = work(["V_Rd_max"], used=1.0, digits=4)["V_Rd_max"]
    roots, _ = roots_and_carried(submit(texts, "cot_theta: 2.5"))
    assert roots == {"V_Rd_max"}


FOUR_LEGS = ", ".join(
    f"{{mark: {m}, diameter: 10, spacing: 150, legs: 2, place: {m}}}" for m in ("perimeter", "inner")
)
AREAS = ("A_sw_s_shear", "A_sw_s_torsion", "A_sw_s_total", "A_sw_s_provided")


def _areas(legs: int, **changed: Any) -> dict[str, float]:
    values = values_of(
        design(cases="{name: A, V_Ed: 180, T_Ed: 32, M_Ed: 160}", declared="{cot_theta: 2.0}", **changed)
    )[0][1]
    assert values["n_legs"] == legs
    return {symbol: values[symbol] for symbol in AREAS}


def _said(values: dict[str, tuple[float, str | None]]) -> dict[str, str]:
    return {
        symbol: f"{value:.4f}" if counts is None else f"{{value: {value:.4f}, counts: {counts}}}"
        for symbol, (value, counts) in values.items()
    }


@pytest.mark.parametrize("legs", [2, 4])
def test_link_areas_said_rightly_on_either_basis(legs: int) -> None:
    links: dict[str, Any] = {"links": FOUR_LEGS} if legs == 4 else {}
    areas = _areas(legs, **links)
    by_all = {"A_sw_s_shear": 1, "A_sw_s_torsion": 2, "A_sw_s_total": 1, "A_sw_s_provided": 1}
    by_one = {
        "A_sw_s_shear": 1 / legs,
        "A_sw_s_torsion": 1,
        "A_sw_s_total": 1 / legs,
        "A_sw_s_provided": 1 / legs,
    }
    for factors, counts in ((by_all, "all legs"), (by_one, "one leg")):
        texts = _said({symbol: (areas[symbol] * factors[symbol], counts) for symbol in AREAS})
        assert not value_findings(submit(texts, "cot_theta: 2.0000", **links)), counts
    plain = _said({symbol: (areas[symbol], None) for symbol in AREAS})
    assert not value_findings(submit(plain, "cot_theta: 2.0000", **links)), (
        "unsaid, on the basis of the formula"
    )


@pytest.mark.parametrize("symbol", AREAS)
def test_a_leg_basis_said_wrongly(symbol: str) -> None:
    """The number counts one thing, the word beside it says the other: one finding on that number, and no wrong sum."""
    areas = _areas(2)
    right, wrong = ("one leg", "all legs") if symbol == "A_sw_s_torsion" else ("all legs", "one leg")
    said = {other: (areas[other], "one leg" if other == "A_sw_s_torsion" else "all legs") for other in AREAS}
    found = value_findings(submit(_said({**said, symbol: (areas[symbol], wrong)}), "cot_theta: 2.0000"))
    assert set(found) == {"links.leg-basis"}
    assert found["links.leg-basis"].quantity == symbol
    assert f"said to count {wrong}" in found["links.leg-basis"].says
    assert f"the number is that of {right}" in found["links.leg-basis"].says


def test_a_leg_basis_unsaid_but_shown_by_the_total() -> None:
    areas = _areas(2)
    texts = _said({
        "A_sw_s_shear": (areas["A_sw_s_shear"], None), "A_sw_s_torsion": (2 * areas["A_sw_s_torsion"], None),
        "A_sw_s_total": (areas["A_sw_s_total"], None),
    })  # fmt: skip
    found = value_findings(submit(texts, "cot_theta: 2.0000"))
    assert set(found) == {"links.leg-basis-unsaid"}
    assert found["links.leg-basis-unsaid"].gravity == "remark"


def test_unlike_areas_added_up_are_a_wrong_sum() -> None:
    """All legs of shear plus one leg of torsion (from general professional knowledge): the total is short."""
    areas = _areas(2)
    short = areas["A_sw_s_shear"] + areas["A_sw_s_torsion"]
    texts = _said({
        "A_sw_s_shear": (areas["A_sw_s_shear"], "all legs"), "A_sw_s_torsion": (areas["A_sw_s_torsion"], "one leg"),
        "A_sw_s_total": (short, "all legs"),
    })  # fmt: skip
    found = value_findings(submit(texts, "cot_theta: 2.0000"))
    assert set(found) == {"agrees.A_sw_s_total"}
    assert found["agrees.A_sw_s_total"].direction == "unsafe side"


def test_the_doubled_torsion_leg_without_a_total_is_a_mismatch() -> None:
    areas = _areas(2)
    found = value_findings(
        submit(_said({"A_sw_s_torsion": (2 * areas["A_sw_s_torsion"], None)}), "cot_theta: 2.0000")
    )
    assert set(found) == {"agrees.A_sw_s_torsion"}
    assert found["agrees.A_sw_s_torsion"].ratio == pytest.approx(2.0, rel=0.001)
