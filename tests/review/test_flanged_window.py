"""Web and flanges that share the torsion: one window for all parts, against a scan of the angle; and the sharing itself.

- The scan declares each angle in turn and looks whether every part as provided holds; it knows no closed form.
"""

from __future__ import annotations

import random
from typing import Any

import pytest

from checker.geometry.measure import measure
from checker.pipeline import Options, audit, engine_for
from checker.review.window import window_of
from tests.sheet.designs import design, random_section, rows_of

SHAPES = ("tee", "ell", "i")
COTS = [1.0 + 1.5 * k / 60 for k in range(61)]


def _random(shape: str, r: random.Random) -> Any:
    large = r.choice((0.4, 1.0, 1.6))
    V, T, M = r.uniform(5, 600) * large, r.uniform(5, 140) * large, r.uniform(-400, 600)
    links = (
        "{mark: L1, diameter: 12, spacing: 100, legs: 2, ends: welded}, "
        f"{{mark: L2, diameter: {r.choice((6, 8, 10))}, spacing: 100, legs: 2, place: flange, ends: welded}}"
    )
    section = random_section(shape, r)
    section["section"] = section["section"].replace("torsion_by: web", "torsion_by: parts")
    case = f"V_Ed: {V:.2f}, T_Ed: {T:.2f}, M_Ed: {M:.2f}"
    return design(links=links, cases=f"{{name: A, {case}}}", f_ck=r.choice((20, 30, 45)), cover=30, **section)


def _holds(values: dict[str, Any]) -> bool:
    """Whether every part as provided holds on the angle that the values were worked out with."""
    close = 1 + 1e-9
    return (
        values["A_sw_s_needed"] <= values["A_sw_s_all"] * close
        and values["A_sw_s_leg_needed"] <= values["A_leg_s"] * close
        and values["A_sw_s_torsion_flange"] <= values["A_leg_s_flange"] * close
        and values["crush_sum"] <= close
        and values["crush_flange"] <= close
        and values["use_bars_flange"] <= close
        and values["A_s_tension_needed"] <= values["A_s_tension_provided"] * close
        and values["A_s_compression_needed"] <= values["A_s_compression_provided"] * close
    )


@pytest.mark.parametrize("shape", SHAPES)
def test_the_window_is_where_every_part_holds(shape: str) -> None:
    r = random.Random(shape)
    open_windows = 0
    for _ in range(25):
        made = _random(shape, r)
        compiled, (row,) = rows_of(made)
        base = {**row, **compiled.scratch.run(row)}
        window = window_of(base).admissible
        open_windows += window is not None
        for cot in COTS:
            if window is not None and any(abs(cot - edge) < 1e-5 for edge in window):
                continue
            declared = {**row, "cot_theta_shear_declared": cot, "cot_theta_torsion_declared": cot}
            values = {**row, **compiled.scratch.run(declared)}
            inside = window is not None and window[0] <= cot <= window[1]
            assert _holds(values) == inside, (made.section, cot, window)
    assert 5 < open_windows < 25


@pytest.mark.parametrize("shape", SHAPES)
def test_the_reserve_is_how_far_all_actions_can_grow(shape: str) -> None:
    """Without bending, scaling V and T by the reserve on the best angle leaves a window of one angle."""
    r = random.Random(f"reserve {shape}")
    tried = 0
    for _ in range(12):
        made = _random(shape, r)
        compiled, (row,) = rows_of(made)
        free = {**row, "M_Ed": 0.0}
        best = float(compiled.scratch.run(free)["reserve_best"])
        for factor, holds in ((0.995, True), (1.005, False)):
            scaled = {**free, "V_Ed": row["V_Ed"] * best * factor, "T_Ed": row["T_Ed"] * best * factor}
            window = window_of({**scaled, **compiled.scratch.run(scaled)})
            assert (window.admissible is not None) == holds
        tried += 1
    assert tried == 12


@pytest.mark.parametrize("shape", SHAPES)
def test_the_parts_carry_all_of_the_torsion(shape: str) -> None:
    r = random.Random(f"sum {shape}")
    for _ in range(20):
        made = _random(shape, r)
        compiled, (row,) = rows_of(made)
        values = {**row, **compiled.scratch.run(row)}
        parts = values["n_out"] * values["T_flange"] + values["n_out_2"] * values["T_flange_2"]
        assert values["T"] + parts == pytest.approx(abs(row["T_Ed"]), rel=1e-12)
        assert 0 < values["share_web"] < 1


def test_the_web_alone_takes_all_where_nothing_else_is_said() -> None:
    section = "{shape: tee, b_w: 400, h: 700, b_f: 1200, h_f: 200}"
    bars = "[{face: bottom, bars: 4H25}, {face: top, bars: 3H20}, {face: left, bars: 2H12}, {face: right, bars: 2H12}]"
    made = design(section=section, bars=bars)
    compiled = engine_for(made, measure(made), Options())
    assert "T_flange" not in compiled.sheet.quantities
    (member,) = audit(made).members
    (case,) = member.cases
    assert case.values["T"] == pytest.approx(52e6)
    assert case.values["A_k"] == pytest.approx((400 - case.values["t_ef"]) * (700 - case.values["t_ef"]))
    status = {check.rule: (check.status, check.why) for check in member.checks}
    assert status["torsion.flange-links"] == ("not applicable", "no torsion is shared with flanges")
    assert status["web-flange.steel"] == ("not checked", "A_sf,s is not stated")
    assert status["section.effective-width"][0] == "not checked"
    assert "crashed" not in {check.status for check in member.checks}


def test_the_cracking_sum_covers_no_flanged_section() -> None:
    """(6.31) is for approximately rectangular solid sections: links are needed however small the torsion."""
    section = "{shape: tee, b_w: 400, h: 700, b_f: 1200, h_f: 200}"
    made = design(section=section, bars="[{face: bottom, bars: 4H25}, {face: top, bars: 3H20}]",
                  cases="{name: A, V_Ed: 20, T_Ed: 2, M_Ed: 40}")  # fmt: skip
    compiled, (row,) = rows_of(made)
    values = compiled.scratch.run(row)
    assert values["crack_sum"] < 1
    assert not values["links_not_needed"]
    assert values["A_sw_s_leg_needed"] > 0
