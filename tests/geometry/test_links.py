"""What is measured on links: areas, angles, legs and the yes-or-no facts of 8.5 and 9.2.3."""

from __future__ import annotations

from math import cos, inf, pi, radians, sin, sqrt

import pytest
from hypothesis import given
from hypothesis import strategies as st

from checker.geometry import links
from checker.geometry.bars import Cage, cage_of
from checker.geometry.facts import link_facts
from checker.geometry.outline import circle, outline_of, polygon, rectangle

SECTION = {"shape": "rectangle", "b": 400, "h": 700}


@pytest.fixture
def with_links(build):
    def make(*sets, shape=None, **changed):
        return build.design(
            build.section(**(shape or SECTION)), build.group("bottom", 2, 20), links=sets, **changed
        )

    return make


@pytest.mark.parametrize(
    ("diameter", "spacing", "by_metre"),
    [(8, 100, 503), (10, 150, 524), (10, 200, 393), (12, 100, 1131), (16, 300, 670)],
)
def test_area_of_one_leg_is_that_of_the_tables_of_the_trade(build, diameter, spacing, by_metre):
    # Areas in mm2 per metre, common table of the trade, values from memory.
    links_set = build.link(diameter=diameter, spacing=spacing)
    assert round(links.leg_area_by_length(links_set) * 1000) == by_metre


def test_all_legs_count_for_shear_and_one_upright_perimeter_leg_for_torsion(build, with_links):
    design = with_links(
        build.link("L1", 12, 150, legs=4),
        build.link("L2", 10, 200, legs=2, where="inner"),
        build.link("L3", 10, 300, legs=2, angle=radians(60)),
    )
    one, inner, slant = (pi * 36 / 150, pi * 25 / 200, pi * 25 / 300)
    assert links.A_sw_s_all(design) == pytest.approx(4 * one + 2 * inner + 2 * slant)
    assert links.A_leg_s(design) == pytest.approx(one)
    assert links.n_legs(design) == 8
    assert links.largest_spacing(design.links) == 300
    assert links.S_cos(design) == pytest.approx(2 * slant * cos(radians(60)))
    assert links.S_sin(design, 0.8) == pytest.approx(3.6 * one + 2 * inner + 1.6 * slant * sin(radians(60)))
    assert links.common_angle(design) == pi / 2


def test_upright_links_have_no_cosine_and_inclined_ones_a_common_angle(build, with_links):
    assert links.S_cos(with_links(build.link())) == 0.0
    assert links.common_angle(with_links(build.link(angle=radians(45)))) == radians(45)


def test_without_links_areas_are_nothing_and_spacings_infinite(with_links):
    design = with_links()
    assert (links.A_sw_s_all(design), links.A_leg_s(design), links.n_legs(design)) == (0, 0, 0)
    assert links.largest_spacing(design.links) == inf
    assert links.largest_spacing(links.perimeter_links(design)) == inf
    assert cage_of(design) == Cage(35, 0)


def test_gap_of_legs_is_shared_evenly_by_inner_legs(build, with_links):
    # 400 - 2 x (35 + 5) = 320 between the centres of the outer legs.
    outline = rectangle(400, 700)
    for legs, gap in ((2, 320), (3, 160), (4, 320 / 3)):
        design = with_links(build.link(legs=legs))
        assert links.leg_gap(design, outline, cage_of(design)) == pytest.approx(gap)
    design = with_links(build.link(), build.link("L2", legs=2, where="inner"))
    assert links.leg_gap(design, outline, cage_of(design)) == pytest.approx(320 / 3)


def test_legs_of_a_box_stand_in_its_walls(build, with_links):
    shape = {"shape": "box", "b": 1500, "h": 1200, "wall_side": 300, "wall_top": 200, "wall_bottom": 200}
    for inner, gap in ((0, 220), (2, 220), (4, 110)):
        sets = [build.link()] + ([build.link("L2", legs=inner, where="inner")] if inner else [])
        design = with_links(*sets, shape=shape)
        assert links.leg_gap(design, outline_of(design.section), cage_of(design)) == pytest.approx(gap)


@given(st.floats(400, 2000), st.floats(0.12, 0.3), st.floats(0.7, 0.9))
def test_share_of_a_round_leg_is_the_mean_of_its_upright_part(diameter, start, end):
    # Source: the integral of sqrt(1 - (y/r)^2), here by the midpoint rule.
    cage, outline = Cage(35, 10), circle(diameter)
    r = diameter / 2 - 40
    low = diameter / 2 - r
    y0, y1 = low + start * r, low + end * 2 * r
    n = 4000
    heights = (y0 + (y1 - y0) * (k + 0.5) / n - diameter / 2 for k in range(n))
    mean = sum(sqrt(1 - (y / r) ** 2) for y in heights) / n
    assert links.eta_leg(outline, cage, y0, y1) == pytest.approx(mean, rel=1e-5)


def test_share_of_a_whole_round_leg_is_a_quarter_of_pi():
    # Closed form over the full height of the link; pi/4 is the known efficiency of circular links.
    assert links.eta_leg(circle(600), Cage(35, 10), 40, 560) == pytest.approx(pi / 4)


def test_share_of_a_polygon_s_legs():
    cage = Cage(35, 10)
    upright = polygon(((0.0, 0.0), (300.0, 0.0), (300.0, 600.0), (0.0, 600.0)))
    assert links.eta_leg(upright, cage, 50, 550) == 1.0
    slope = 600 / sqrt(600**2 + 200**2)
    trapezoid = polygon(((0.0, 0.0), (300.0, 0.0), (500.0, 600.0), (-200.0, 600.0)))
    assert links.eta_leg(trapezoid, cage, 50, 550) == pytest.approx(slope)
    one_side = polygon(((0.0, 0.0), (300.0, 0.0), (500.0, 600.0), (0.0, 600.0)))
    assert links.eta_leg(one_side, cage, 50, 550) == pytest.approx((1 + slope) / 2)


@pytest.mark.parametrize(
    ("ends", "ok"),
    [
        ("hooks_135", True),
        ("hooks_90", True),
        ("lapped", True),
        ("welded", True),
        ("open", False),
        (None, None),
    ],
)
def test_torsion_links_must_be_closed(build, with_links, ends, ok):
    fact = link_facts(with_links(build.link(ends=ends, line=12)))["links_closed"]
    assert (fact.ok, fact.place.line) == (ok, 12)


@pytest.mark.parametrize(
    ("angle", "ok"), [(90, True), (89.6, True), (90.4, True), (89.4, False), (45, False)]
)
def test_torsion_links_must_stand_upright(build, with_links, angle, ok):
    # EN 1992-1-1, 9.2.3(1): 90 degrees to the axis.
    assert link_facts(with_links(build.link(angle=radians(angle))))["links_upright"].ok is ok


@pytest.mark.parametrize(
    ("ends", "diameter", "tail", "ok"),
    [
        ("hooks_90", 8, 80, True),
        ("hooks_90", 6, 69, False),
        ("hooks_90", 12, 119, False),
        ("hooks_90", 12, 120, True),
        ("hooks_135", 8, 49, False),
        ("hooks_135", 8, 50, True),
        ("hooks_135", 12, 59, False),
        ("hooks_135", 12, 60, True),
        ("hooks_135", 12, None, None),
        (None, 12, None, None),
    ],
)
def test_hooks_need_a_straight_length(build, with_links, ends, diameter, tail, ok):
    # EN 1992-1-1, 8.5(2): 10 diameters or 70 mm after a right angle, 5 diameters or 50 mm after 135 degrees.
    fact = link_facts(with_links(build.link(diameter=diameter, ends=ends, tail=tail)))["hook_tails"]
    assert (fact.ok, fact.applies) == (ok, True)


def test_links_without_hooks_have_no_tail_to_judge(build, with_links):
    fact = link_facts(with_links(build.link(ends="welded")))["hook_tails"]
    assert (fact.ok, fact.applies) == (None, False)
    assert fact.says == "L1 has no hooks (welded)"


def test_the_worst_of_several_perimeter_links_is_told_and_inner_ones_are_not_judged(build, with_links):
    design = with_links(
        build.link("L1", ends=None),
        build.link("L2", ends="open"),
        build.link("L3"),
        build.link("L4", where="inner", ends="open", angle=1.0),
    )
    facts = link_facts(design)
    assert facts["links_closed"].says == "L2 is open, not closed"
    assert facts["links_upright"].ok is True
    unsaid = link_facts(with_links(build.link("L1"), build.link("L2", ends=None)))
    assert unsaid["links_closed"].ok is None


def test_no_perimeter_link_fails_that_fact_and_leaves_the_others_without_object(build, with_links):
    facts = link_facts(with_links(build.link(where="inner")))
    assert facts["perimeter_link"].ok is False
    assert facts["perimeter_link"].place.line == 9
    rest = [fact for name, fact in facts.items() if name != "perimeter_link"]
    assert all(fact.ok is None and not fact.applies for fact in rest)
