"""The strut window in closed form against a brute-force scan of the angle, on random designs of every shape.

- The scan declares each angle in turn and looks whether the resistances as provided hold; it knows no closed form.
"""

from __future__ import annotations

import math
import random
from typing import Any

import pytest

from checker import audit
from checker.geometry.measure import measure
from checker.pipeline import Options, engine_for
from checker.report.audit_report import AuditReport
from checker.review.window import NO_ANGLE, Window, degrees_of
from tests.sheet.designs import design, random_section, rows_of

DESIGNS, STEPS = 30, 76
COTS = [1.0 + 1.5 * k / (STEPS - 1) for k in range(STEPS)]
NEAR = 1e-5
RESISTANCES = {
    "links": ("links.all-legs", "links.perimeter-leg"),
    "concrete": ("strut.crushing",),
    "bars": ("bars.tension-half", "bars.compression-half"),
}


def _holds(values: dict[str, Any]) -> dict[str, bool]:
    """What holds on the angle that the values were worked out with."""
    close = 1 + 1e-9
    return {
        "links": values["A_sw_s_needed"] <= values["A_sw_s_all"] * close
        and values["A_sw_s_leg_needed"] <= values["A_leg_s"] * close,
        "concrete": values["crush_sum"] <= close,
        "bars": values["A_s_tension_needed"] <= values["A_s_tension_provided"] * close
        and values["A_s_compression_needed"] <= values["A_s_compression_provided"] * close,
    }


def _inside(span: tuple[float, float] | None, cot: float) -> bool:
    return span is not None and span[0] <= cot <= span[1]


def _on_edge(span: tuple[float, float] | None, cot: float) -> bool:
    return span is not None and any(abs(cot - edge) <= NEAR * cot for edge in span)


def _random(shape: str, r: random.Random, angle: int = 90) -> dict[str, Any]:
    large = {"rectangle": 1.0, "box": 4.0, "circle": 1.2, "polygon": 1.2}[shape]
    V, T, M = (
        r.uniform(5, 550) * large,
        r.choice((0, 1, 1)) * r.uniform(1, 90) * large,
        r.uniform(-260, 260) * large,
    )
    if angle != 90:
        T = 0.0
    N = r.choice((0, 0, 600, -200))
    largest = f", M_Ed_max: {M * r.uniform(1, 1.2):.1f}" if r.random() < 0.5 else ""
    size, spacing = r.choice((8, 10, 12)), r.randint(80, 250)
    links = f"{{mark: L, diameter: {size}, spacing: {spacing}, legs: 2, place: perimeter, angle: {angle}}}"
    case = f"name: A, V_Ed: {V:.1f}, T_Ed: {T:.2f}, M_Ed: {M:.1f}, N_Ed: {N}{largest}"
    return {
        "case": case,
        "links": links,
        "cover": r.randint(25, 40),
        "f_ck": r.choice((20, 30, 50, 70)),
        **random_section(shape, r),
    }


def _audit(given: dict[str, Any], declared: str = "") -> AuditReport:
    given = dict(given)
    case = given.pop("case")
    return audit(design(cases=f"{{{case}, declared: {{{declared}}}}}", **given))


def _window(report: AuditReport) -> Window:
    return report.members[0].cases[0].window


def _scan(given: dict[str, Any]) -> list[dict[str, bool]]:
    given = dict(given)
    case = given.pop("case")
    one = design(cases=f"{{{case}}}", **given)
    compiled, (row,) = rows_of(one)
    assert compiled.sheet.layers == engine_for(one, measure(one), Options()).sheet.layers
    found = []
    for cot in COTS:
        claimed = {**row, "cot_theta_shear_declared": cot, "cot_theta_torsion_declared": cot}
        found.append(_holds({**claimed, **compiled.scratch.run(claimed)}))
    return found


@pytest.mark.parametrize(
    ("shape", "angle"), [("rectangle", 90), ("box", 90), ("circle", 90), ("polygon", 90), ("rectangle", 60)]
)
def test_window_against_a_scan(shape: str, angle: int) -> None:
    r = random.Random(f"window{shape}{angle}")
    seen = {"open": 0, "shut": 0, "part": 0}
    for _ in range(DESIGNS):
        given = _random(shape, r, angle)
        window = _window(_audit(given))
        for cot, holds in zip(COTS, _scan(given), strict=True):
            for name in RESISTANCES:
                span = getattr(window, name)
                if not _on_edge(span, cot):
                    assert _inside(span, cot) == holds[name], (name, cot, span, given)
            if not _on_edge(window.admissible, cot):
                assert _inside(window.admissible, cot) == all(holds.values()), (cot, window, given)
        spans = window.admissible
        seen["shut" if spans is None else "open" if spans[0] < 1.001 and spans[1] > 2.499 else "part"] += 1
    assert seen["part"] >= 3
    assert seen["shut"] >= 1


@pytest.mark.parametrize("shape", ["rectangle", "box", "circle"])
def test_the_report_says_the_same_for_a_claimed_angle(shape: str) -> None:
    """Rules fail on a claimed angle exactly where the window says that they do; their gravity follows from it."""
    r = random.Random(f"claim{shape}")
    for _ in range(12):
        given = _random(shape, r)
        for cot in (1.0, round(r.uniform(1, 2.5), 3), 2.5):
            report = _audit(given, f"cot_theta: {cot}")
            window = _window(report)
            failed = {f.draft.rule: f.draft.gravity for f in report.members[0].findings}
            for name, rules in RESISTANCES.items():
                span = getattr(window, name)
                if not _on_edge(span, cot):
                    assert _inside(span, cot) == (not failed.keys() & set(rules)), (name, cot, given)
            gravities = {failed[rule] for rules in RESISTANCES.values() for rule in rules if rule in failed}
            assert gravities <= ({"unsafe"} if window.holds == NO_ANGLE else {"breach"}), (cot, window, given)
            if window.holds == "as claimed":
                assert not gravities


def test_bending_that_fails_leaves_no_angle() -> None:
    report = audit(design(cases="{name: A, V_Ed: 10, T_Ed: 0, M_Ed: 2500}"))
    assert _window(report).holds == NO_ANGLE
    assert "bending.resistance" in {
        f.draft.rule for f in report.members[0].findings if f.draft.gravity == "unsafe"
    }


def test_angles_are_shown_flattest_first() -> None:
    assert degrees_of(None) is None
    low, high = degrees_of((1.0, 2.5)) or (0.0, 0.0)
    assert low == pytest.approx(math.degrees(math.atan(0.4)))
    assert high == pytest.approx(45.0)
