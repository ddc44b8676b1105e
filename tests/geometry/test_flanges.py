"""Tees, ells and I sections measured: effective width by hand, web and outstands apart, and laws of symmetry.

Everything not derived here by hand is a law: mirroring, moving, turning or listing in another order changes no number.
"""

from __future__ import annotations

import math
import random
from typing import Any

import pytest

from checker.declared.model import Design
from checker.geometry.measure import Measured, measure
from checker.geometry.outline import polygon
from tests.sheet.designs import design, values_of

EFFECTIVE = [
    # shape, b_w, l_0, b_1, b_2, expected b_eff in mm, worked by hand from 5.3.2.1(3)
    # 0.2 x 900 + 0.1 x 5600 = 740 < 900 and < 1120; 0.2 x 1100 + 560 = 780 < 1100: 400 + 740 + 780
    ("tee", 400, 5600, 900, 1100, 1920),
    # 0.2 l_0 = 400 limits both sides (0.2 x 2000 + 200 = 600): 300 + 800
    ("tee", 300, 2000, 2000, 2000, 1100),
    # b_i itself limits: 0.2 x 150 + 0.1 x 8000 = 830, b_i = 150: 300 + 300
    ("tee", 300, 8000, 150, 150, 600),
    # an ell has one side: 0.2 x 1000 + 0.1 x 4000 = 600: 350 + 600
    ("ell", 350, 4000, 1000, 1000, 950),
]
LINKS = (
    "{mark: L1, diameter: 12, spacing: 100, legs: 2, ends: hooks_135, tail: 80}, "
    "{mark: L2, diameter: 10, spacing: 125, legs: 2, place: flange, ends: welded}"
)
WEB_BARS = (
    "{face: bottom, bars: 4H25}, {face: top, bars: 3H20}, {face: left, bars: 2H16}, {face: right, bars: 2H16}"
)


def made(section: str, bars: str = WEB_BARS, spans: str = "", **changed: Any) -> Design:
    extra = f"spans: {{{spans}}}" if spans else ""
    return design(section=f"{{{section}}}", bars=f"[{bars}]", extra=extra, **{"links": LINKS, **changed})


@pytest.mark.parametrize(("shape", "b_w", "l_0", "b_1", "b_2", "expected"), EFFECTIVE)
def test_effective_width_by_hand(shape, b_w, l_0, b_1, b_2, expected):
    spans = f"l_0: {l_0}, b_1: {b_1}" + (f", b_2: {b_2}" if shape == "tee" else "")
    for b_f, holds in ((expected, True), (expected + 10, False)):
        measured = measure(made(f"shape: {shape}, b_w: {b_w}, h: 800, b_f: {b_f}, h_f: 200", spans=spans))
        assert measured.inputs["b_eff"] == pytest.approx(expected)
        assert measured.facts["effective_width"].ok is holds
        # Bending takes no more than the effective width.
        assert measured.section.strips_sagging[0] == pytest.approx((0, 200, expected, expected))


def test_without_spans_the_width_is_taken_and_not_checked():
    measured = measure(made("shape: tee, b_w: 300, h: 800, b_f: 3000, h_f: 200"))
    fact = measured.facts["effective_width"]
    assert (fact.ok, fact.applies) == (None, True)
    assert "spans" in fact.says
    assert measured.section.strips_sagging[0][2:] == (3000, 3000)


def test_the_web_is_what_the_perimeter_link_encloses():
    """Faces, corners, gaps, legs and the tube are those of a rectangle b_w x h; bending is the whole section's."""
    bars = WEB_BARS + ", {face: top, diameter: 12, at: [[50, 750], [200, 750], [1000, 750]]}"
    tee = measure(made("shape: tee, b_w: 300, h: 800, b_f: 1100, h_f: 200", bars))
    web = measure(
        design(
            section="{shape: rectangle, b: 300, h: 800}",
            bars=f"[{WEB_BARS}]",
            links=LINKS[: LINKS.index(", {")],
        )
    )
    same = "A u kappa c_axis gap_bars b_least leg_gap n_legs A_sw_s_all A_leg_s s_links s_perimeter eta_leg b_w_sagging"
    assert {key: tee.inputs[key] for key in same.split()} == {key: web.inputs[key] for key in same.split()}
    assert tee.inputs["A_c"] == 300 * 800 + 800 * 200
    assert tee.inputs["y_c"] == pytest.approx((300 * 600 * 300 + 1100 * 200 * 700) / 400_000)
    assert tee.inputs["A_s_top"] == pytest.approx(web.inputs["A_s_top"] + 3 * math.pi * 36)
    assert tee.facts["corners_filled"].ok is True
    assert not tee.solid_rectangle
    # Web bars stand in the middle of the whole section.
    assert sorted(bar.x for bar in tee.bars if bar.face == "bottom")[0] == pytest.approx(400 + 35 + 12 + 12.5)


def test_bars_and_links_of_the_outstands():
    left = "{mark: F1, face: top, diameter: 12, at: [[50, 750], [350, 750], [50, 650], [350, 650]]}"
    right = "{mark: F2, face: top, diameter: 16, at: [[760, 750], [1050, 750], [1050, 650]]}"
    section = "shape: tee, b_w: 300, h: 800, b_f: 1100, h_f: 200, torsion_by: parts"
    measured = measure(made(section, f"{WEB_BARS}, {left}, {right}"))
    inputs = measured.inputs
    assert (inputs["n_out"], inputs["b_out"], inputs["h_out"], inputs["n_out_2"]) == (2, 400, 200, 0)
    assert inputs["A_sl_flange"] == pytest.approx(min(4 * 36, 3 * 64) * math.pi)
    assert inputs["c_axis_flange"] == 50
    assert inputs["A_leg_s_flange"] == pytest.approx(math.pi * 25 / 125)
    assert (
        measured.facts["flange_corners"].says == "no bar in the corner: bottom left of the right top flange"
    )


@pytest.mark.parametrize("flange", ["top", "bottom"])
def test_a_tee_bends_as_its_outline_given_as_a_polygon(flange):
    points = (
        "[[400, 0], [700, 0], [700, 600], [1100, 600], [1100, 800], [0, 800], [0, 600], [400, 600]]"
        if flange == "top"
        else "[[0, 0], [1100, 0], [1100, 200], [700, 200], [700, 800], [400, 800], [400, 200], [0, 200]]"
    )
    places = (
        "{face: bottom, diameter: 25, at: [[450, 60], [650, 60]]}, "
        "{face: top, diameter: 20, at: [[450, 740], [650, 740]]}"
    )
    cases = "{name: A, V_Ed: 100, T_Ed: 0, M_Ed: 200}, {name: B, V_Ed: 100, T_Ed: 0, M_Ed: -150, N_Ed: 80}"
    tee = made(f"shape: tee, b_w: 300, h: 800, b_f: 1100, h_f: 200, flange: {flange}", places, cases=cases)
    outline = made(
        f"shape: polygon, points: {points}", places, cases=cases, links=LINKS[: LINKS.index(", {")]
    )
    for (_, one), (_, other) in zip(values_of(tee), values_of(outline), strict=True):
        for symbol in (
            "A_c",
            "y_c",
            "d",
            "z",
            "M_Rd",
            "A_s_bending",
            "b_w",
            "V_Rd_c",
            "V_Rd_s",
            "V_Rd_max",
            "b_t",
        ):
            assert one[symbol] == pytest.approx(other[symbol], rel=1e-9), symbol


def numbers(one: Design) -> list[dict[str, float]]:
    return [
        {symbol: float(value) for symbol, value in values.items() if symbol != "section"}
        for _, values in values_of(one)
    ]


def assert_same(one: Design, other: Design) -> None:
    for first, second in zip(numbers(one), numbers(other), strict=True):
        assert first == pytest.approx(second, rel=1e-9, abs=1e-9, nan_ok=True)


def ell(r: random.Random) -> tuple[dict[str, int], list[tuple[str, int, list[list[float]]]]]:
    """Sizes of an ell whose flange stands out to the right, and groups of bars at exact places."""
    sizes = {"b_w": r.randint(280, 500), "h": r.randint(600, 1000), "h_f": r.randint(160, 260)}
    sizes["b_f"] = sizes["b_w"] + r.randint(300, 900)
    w, h, f, b = sizes["b_w"], sizes["h"], sizes["h_f"], sizes["b_f"]
    web = [("bottom", 25, [[60, 60], [w - 60, 60]]), ("top", 20, [[57, h - 57], [w - 57, h - 57]])]
    flange = ("top", 16, [[x, y] for x in (w + 55, b - 55) for y in (h - 55, h - f + 55)])
    return sizes, [*web, ("left", 12, [[50, h / 2]]), ("right", 12, [[w - 50, h / 2]]), flange]


def ell_text(
    sizes: dict[str, int], bars: list[tuple[str, int, list[list[float]]]], side: str, by: str
) -> Design:
    section = ", ".join(f"{key}: {value}" for key, value in sizes.items())
    groups = ", ".join(
        f"{{mark: {face[0]}{d}, face: {face}, diameter: {d}, at: {at}}}" for face, d, at in bars
    )
    cases = (
        "{name: A, V_Ed: 250, T_Ed: 50, M_Ed: 300, web_flange: {dF: 200, dx: 1200, A_sf_s: 0.4}}, "
        "{name: B, V_Ed: 250, T_Ed: -50, M_Ed: -200}"
    )
    return made(f"shape: ell, {section}, side: {side}, torsion_by: {by}", groups, cases=cases)


@pytest.mark.parametrize("seed", range(20))
@pytest.mark.parametrize("by", ["parts", "web"])
def test_mirroring_an_ell_or_listing_its_bars_in_another_order_changes_no_number(seed, by):
    r = random.Random(seed)
    sizes, bars = ell(r)
    one = ell_text(sizes, bars, "right", by)
    swap = {"left": "right", "right": "left"}
    turned = [(swap.get(face, face), d, [[sizes["b_f"] - x, y] for x, y in at]) for face, d, at in bars]
    assert_same(one, ell_text(sizes, turned, "left", by))
    shuffled = r.sample([(face, d, r.sample(at, len(at))) for face, d, at in bars], len(bars))
    assert_same(one, ell_text(sizes, shuffled, "right", by))


@pytest.mark.parametrize("seed", range(10))
def test_a_tee_upside_down_under_the_opposite_moment(seed):
    r = random.Random(seed)
    h, b_f = r.randint(600, 1000), r.randint(800, 1600)
    at = [[60, h - 60], [250, h - 60], [60, h - 140], [b_f - 60, h - 60], [b_f - 60, h - 140]]
    results = []
    for flange, bars, sign, places in (
        ("top", WEB_BARS, 1, at),
        ("bottom", WEB_BARS.replace("bottom", "TOP").replace("top", "bottom").replace("TOP", "top"), -1,
         [[x, h - y] for x, y in at]),
    ):  # fmt: skip
        own = f"{bars}, {{face: {flange}, diameter: 12, at: {places}}}"
        case = "{{name: {}, V_Ed: 200, T_Ed: 40, M_Ed: {}}}"
        cases = f"{case.format('A', sign * 300)}, {case.format('B', -sign * 150)}"
        sizes = f"shape: tee, b_w: 300, h: {h}, b_f: {b_f}, h_f: 200, flange: {flange}, torsion_by: parts"
        results.append(values_of(made(sizes, own, cases=cases)))
    for (_, one), (_, other) in zip(*results, strict=True):
        for symbol in ("d", "z", "M_Rd", "A_s_tension_needed", "A_s_compression_needed", "cot_from", "cot_to", "share_web",
                       "crush_flange", "use_bars_flange", "reserve_used", "F_T_cot", "F_T_cot_c"):  # fmt: skip
            assert one[symbol] == pytest.approx(other[symbol], rel=1e-9), symbol


@pytest.mark.parametrize("seed", range(20))
def test_moving_and_turning_a_polygon_changes_no_measure_of_its_tube(seed):
    r = random.Random(seed)
    left, w, wide = r.randint(0, 300), r.randint(250, 400), r.randint(800, 1500)
    points = [
        (left, 0),
        (left + w, 0),
        (left + w, 500),
        (wide, 500),
        (wide, 700),
        (0, 700),
        (0, 500),
        (left, 500),
    ]
    points = [point for k, point in enumerate(points) if point != points[k - 1]]
    base = polygon(tuple(points))
    angle, dx, dy = r.uniform(0, 2 * math.pi), r.uniform(-900, 900), r.uniform(-900, 900)
    c, s = math.cos(angle), math.sin(angle)
    start = r.randrange(len(points))
    moved = polygon(
        tuple((c * x - s * y + dx, s * x + c * y + dy) for x, y in points[start:] + points[:start])
    )
    for name in ("area", "perimeter", "kappa", "least_dimension"):
        assert getattr(moved, name) == pytest.approx(getattr(base, name), rel=1e-9)
    assert (moved.A_k(90), moved.u_k(90)) == pytest.approx((base.A_k(90), base.u_k(90)), rel=1e-9)


@pytest.mark.parametrize(("dx", "dy"), [(1000, -300), (-0.5, 12345.25)])
def test_moving_a_polygon_with_its_bars_changes_no_number(dx, dy):
    def moved(dx: float, dy: float) -> Measured:
        def at(places: list[list[float]]) -> str:
            return str([[x + dx, y + dy] for x, y in places])

        bottom = f"{{face: bottom, diameter: 25, at: {at([[60, 60], [440, 60]])}}}"
        top = f"{{face: top, diameter: 20, at: {at([[60, 820], [530, 750]])}}}"
        section = f"shape: polygon, points: {at([[0, 0], [500, 0], [600, 800], [0, 900]])}"
        return measure(made(section, f"{bottom}, {top}", links=LINKS[: LINKS.index(", {")]))

    found = moved(0, 0), moved(dx, dy)
    assert dict(found[0].inputs) == pytest.approx(dict(found[1].inputs), rel=1e-9, nan_ok=True)


def test_links_of_flanges_are_no_shear_links():
    both = measure(made("shape: tee, b_w: 300, h: 800, b_f: 1100, h_f: 200")).inputs
    alone = measure(
        made("shape: tee, b_w: 300, h: 800, b_f: 1100, h_f: 200", links=LINKS[: LINKS.index(", {")])
    ).inputs
    for key in ("A_sw_s_all", "S_sin", "n_legs", "s_links", "A_leg_s"):
        assert both[key] == alone[key]
