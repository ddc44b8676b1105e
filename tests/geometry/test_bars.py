"""Where bars stand and what is measured on them; expected places are worked out by hand beside each check."""

from __future__ import annotations

from itertools import pairwise
from math import hypot, pi

import pytest
import shapely
from hypothesis import given
from hypothesis import strategies as st

from checker.errors import InputFaults
from checker.geometry import steel
from checker.geometry.bars import cage_of, place_bars
from checker.geometry.outline import outline_of

TRAPEZOID = ((0.0, 0.0), (300.0, 0.0), (500.0, 600.0), (-200.0, 600.0))
DIAMOND = ((300.0, 0.0), (600.0, 400.0), (300.0, 800.0), (0.0, 400.0))


def placed(design):
    outline = outline_of(design.section)
    return place_bars(design, outline), outline, cage_of(design)


def centres(bars, face):
    return sorted((round(bar.x, 6), round(bar.y, 6)) for bar in bars if bar.face == face)


def test_rows_run_between_the_corners_and_sides_between_the_corner_bars(sound_beam):
    bars, _, _ = placed(sound_beam())
    # cover 35 + link 10 + 25/2 = 57.5; 20/2: 55; 12/2: 51; sides at thirds of 57.5 to 645.
    assert centres(bars, "bottom") == [(57.5, 57.5), (152.5, 57.5), (247.5, 57.5), (342.5, 57.5)]
    assert centres(bars, "top") == [(55, 645), (200, 645), (345, 645)]
    third = (645 - 57.5) / 3
    assert centres(bars, "left") == [(51, pytest.approx(57.5 + third)), (51, pytest.approx(645 - third))]
    assert centres(bars, "right") == [(349, pytest.approx(57.5 + third)), (349, pytest.approx(645 - third))]
    assert [bar.group_index for bar in bars] == [0] * 4 + [1] * 3 + [2] * 2 + [3] * 2
    assert bars[0].area == pytest.approx(pi * 25**2 / 4)


def test_effective_depth_of_one_layer_is_height_less_cover_link_and_half_a_bar(build):
    # d = h - c - phi_link - phi/2: common practice, no source; figures worked by hand.
    beam = build.design(
        build.section("rectangle", b=300, h=600), build.group("bottom", 3, 20), cover=build.number(30)
    )
    bars, outline, cage = placed(beam)
    group = steel.bottom_group(bars, outline)
    assert 600 - steel.a_s_bottom(group, 20, cage) == 550


@pytest.mark.parametrize(("aggregate", "clear"), [(None, 25.0), (16.0, 25.0), (32.0, 37.0), (10.0, 25.0)])
def test_second_layer_keeps_the_clear_distance(build, aggregate, clear):
    # EN 1992-1-1, 8.2(2): largest of the diameters, aggregate + 5, 20 mm; the bars below are 25.
    beam = build.design(
        build.section("rectangle", b=400, h=700),
        build.group("bottom", 4, 25),
        build.group("bottom", 2, 16, layer=2),
        aggregate=None if aggregate is None else build.number(aggregate),
    )
    bars, outline, cage = placed(beam)
    second = [bar for bar in bars if bar.layer == 2]
    y = 57.5 + 12.5 + clear + 8
    assert [(bar.x, bar.y) for bar in second] == [(35 + 10 + 8, y), (400 - 53, y)]
    first, extra = 4 * 25**2, 2 * 16**2
    expected = (first * 57.5 + extra * y) / (first + extra)
    assert steel.a_s_bottom(steel.bottom_group(bars, outline), 25, cage) == pytest.approx(expected)


def test_groups_of_one_layer_share_a_row_and_the_first_has_the_corners(build):
    beam = build.design(
        build.section("rectangle", b=400, h=700), build.group("bottom", 3, 25), build.group("bottom", 2, 16)
    )
    bars, _, _ = placed(beam)
    row = sorted((bar.x, bar.diameter) for bar in bars)
    assert [diameter for _, diameter in row] == [25, 16, 25, 16, 25]
    assert [x for x, _ in row] == pytest.approx([57.5, 128.75, 200, 271.25, 342.5])
    assert {bar.y for bar in bars if bar.diameter == 16} == {53}


def test_side_bars_reach_where_a_corner_bar_would_be_when_there_is_none(build):
    beam = build.design(build.section("rectangle", b=400, h=700), build.group("left", 1, 12))
    bars, _, _ = placed(beam)
    assert (bars[0].x, bars[0].y) == (51, 350)


def test_a_single_bar_in_a_row_stands_in_the_middle(build):
    beam = build.design(build.section("rectangle", b=400, h=700), build.group("bottom", 1, 20))
    assert centres(placed(beam)[0], "bottom") == [(200, 55)]


def test_a_row_follows_slanting_sides(build):
    beam = build.design(
        build.section("polygon", points=TRAPEZOID),
        build.group("bottom", 3, 20),
        build.group("bottom", 2, 20, layer=2),
        build.group("top", 4, 20),
        build.group("corners", 4, 20),
    )
    bars, outline, _ = placed(beam)
    ring = shapely.Polygon(TRAPEZOID).buffer(-55, join_style="mitre").exterior
    # Every end of a row touches the link: its centre lies on shapely's inset of 55 mm.
    for face, layer in (("bottom", 1), ("bottom", 2), ("top", 1)):
        row = sorted(bar.x for bar in bars if (bar.face, bar.layer) == (face, layer))
        y = next(bar.y for bar in bars if (bar.face, bar.layer) == (face, layer))
        for x in (row[0], row[-1]):
            assert ring.distance(shapely.Point(x + outline.origin[0], y)) < 1e-9
    inset = {(round(x - outline.origin[0], 6), round(y, 6)) for x, y in ring.coords}
    assert set(centres(bars, "corners")) == inset


def test_bars_round_a_circle_start_at_the_bottom(build):
    beam = build.design(build.section("circle", diameter=600), build.group("round", 8, 20))
    bars, outline, cage = placed(beam)
    assert (bars[0].x, bars[0].y) == pytest.approx((300, 55))
    assert all(hypot(bar.x - 300, bar.y - 300) == pytest.approx(245) for bar in bars)
    low, high = steel.bottom_group(bars, outline), steel.top_group(bars, outline)
    assert (len(low), len(high)) == (3, 3)  # the two at mid-height belong to neither
    assert steel.c_axis(bars, outline, cage, {}) == pytest.approx(55)
    # Centre-line of the link: radius 300 - 35 - 5, an eighth of its length between bars.
    assert steel.gap_bars(bars, outline, cage) == pytest.approx(2 * pi * 260 / 8)


def test_bars_round_a_polygon_stand_evenly_along_its_inset(build):
    beam = build.design(build.section("polygon", points=DIAMOND), build.group("round", 10, 16))
    bars, _, _ = placed(beam)
    ring = shapely.Polygon(DIAMOND).buffer(-53, join_style="mitre").exterior
    along = sorted(ring.project(shapely.Point(bar.x, bar.y)) for bar in bars)
    steps = [b - a for a, b in pairwise(along)]
    assert all(ring.distance(shapely.Point(bar.x, bar.y)) < 1e-9 for bar in bars)
    assert steps == pytest.approx([ring.length / 10] * 9)


def test_exact_places_are_kept_and_a_polygon_has_its_own_coordinates(build):
    beam = build.design(
        build.section("polygon", points=TRAPEZOID),
        build.group("bottom", 2, 20, at=((60.0, 70.0), (200.0, 70.0))),
    )
    bars, outline, _ = placed(beam)
    assert [(bar.x, bar.y) for bar in bars] == [(260, 70), (400, 70)]
    assert steel.bottom_group(bars, outline) == bars


@pytest.mark.parametrize(
    ("shape", "face", "says"),
    [
        ({"shape": "circle", "diameter": 500}, "bottom", "no flat bottom; use at: or face: round"),
        ({"shape": "polygon", "points": DIAMOND}, "top", "no flat top"),
        ({"shape": "polygon", "points": TRAPEZOID}, "left", "no flat left side"),
        ({"shape": "circle", "diameter": 500}, "corners", "no corners"),
    ],
)
def test_a_face_the_outline_does_not_have_is_a_fault_at_its_line(build, shape, face, says):
    beam = build.design(build.section(**shape), build.group(face, 2, 20, line=31))
    with pytest.raises(InputFaults, match=says) as caught:
        placed(beam)
    assert [(fault.file, fault.line, fault.column) for fault in caught.value.faults] == [("beam.yaml", 31, 5)]


def test_all_faults_of_the_bars_come_at_once(build):
    beam = build.design(
        build.section("circle", diameter=500),
        build.group("bottom", 2, 20, line=31),
        build.group("round", 4, 20, layer=2, line=32),
    )
    with pytest.raises(InputFaults) as caught:
        placed(beam)
    assert [fault.line for fault in caught.value.faults] == [31, 32]


@given(st.lists(st.tuples(st.floats(50, 350), st.floats(50, 650), st.floats(8, 40)), min_size=1, max_size=8))
def test_the_lever_rule_keeps_area_and_moment_of_bars_between_the_chords(build, spots):
    groups = [build.group("left", 1, phi, at=((x, y),)) for x, y, phi in spots]
    bars, _, _ = placed(build.design(build.section("rectangle", b=400, h=700), *groups))
    low, high = 50.0, 650.0
    bottom = steel.area_half_bottom(bars, low, high)
    top = steel.area(bars) - bottom
    moment = sum(bar.area * bar.y for bar in bars)
    assert bottom * low + top * high == pytest.approx(moment)


def test_bars_beyond_a_chord_count_to_it_whole_and_one_at_mid_depth_by_halves(build):
    spots = (((200.0, 30.0),), ((200.0, 350.0),), ((200.0, 690.0),))
    groups = [build.group("left", 1, 20, at=at) for at in spots]
    bars, _, _ = placed(build.design(build.section("rectangle", b=400, h=700), *groups))
    assert steel.area_half_bottom(bars, 50.0, 650.0) == pytest.approx(1.5 * bars[0].area)


def test_an_empty_group_stands_where_its_bars_would(build):
    bars, outline, cage = placed(
        build.design(build.section("rectangle", b=400, h=700), build.group("bottom", 2, 32))
    )
    assert steel.top_group(bars, outline) == ()
    assert steel.a_s_top((), 32, cage, 700) == 35 + 10 + 16
    assert steel.area(()) == 0


def test_a_missing_corner_bar_is_told_by_name(build):
    # EN 1992-1-1, 9.2.3(4): a bar in each corner of the links. Two bars 60 mm away from the corners.
    beam = build.design(
        build.section("rectangle", b=400, h=700),
        build.group("bottom", 2, 20),
        build.group("top", 2, 20, at=((115.0, 645.0), (345.0, 645.0))),
    )
    bars, outline, cage = placed(beam)
    found = steel.corner_bars(bars, outline, cage)
    empty = [steel.corner_name(outline, i) for i, held in found.items() if not held]
    assert empty == ["top left"]


def test_a_bar_fills_a_corner_up_to_the_bend(build):
    # Reach: half the bar (10) and two link diameters (20) from the ideal place at 55, 55.
    for off, filled in ((29.9, True), (30.1, False)):
        beam = build.design(
            build.section("rectangle", b=400, h=700), build.group("bottom", 1, 20, at=((55 + off, 55.0),))
        )
        bars, outline, cage = placed(beam)
        assert bool(steel.corner_bars(bars, outline, cage)[0]) is filled


def test_corners_of_a_polygon_are_named_by_place_and_reflex_ones_hold_no_bar(build):
    ell = ((10.0, 20.0), (610.0, 20.0), (610.0, 320.0), (310.0, 320.0), (310.0, 820.0), (10.0, 820.0))
    beam = build.design(build.section("polygon", points=ell), build.group("corners", 5, 16))
    bars, outline, cage = placed(beam)
    found = steel.corner_bars(bars, outline, cage)
    assert list(found) == [0, 1, 2, 4, 5]
    assert all(found.values())
    assert steel.corner_name(outline, 4) == "corner 5 (310, 820)"


def test_c_axis_is_that_of_the_farthest_corner_bar(sound_beam, build):
    bars, outline, cage = placed(sound_beam())
    corners = steel.corner_bars(bars, outline, cage)
    assert steel.c_axis(bars, outline, cage, corners) == 57.5
    middle = build.design(
        build.section("rectangle", b=400, h=700),
        build.group("bottom", 1, 20),
        build.group("top", 1, 32),
    )
    bars, outline, cage = placed(middle)
    none = steel.corner_bars(bars, outline, cage)
    assert steel.c_axis(bars, outline, cage, none) == 55  # no bar in a corner: the nearest of any


def test_gap_is_the_distance_of_centres_along_a_leg(sound_beam, build):
    bars, outline, cage = placed(sound_beam())
    assert steel.gap_bars(bars, outline, cage) == pytest.approx((645 - 57.5) / 3)
    bare = sound_beam(bars=(build.group("bottom", 4, 25), build.group("top", 3, 20)))
    bars, outline, cage = placed(bare)
    assert steel.gap_bars(bars, outline, cage) == pytest.approx(645 - 57.5)


def test_gap_goes_round_an_empty_corner_along_the_link(build):
    # Bars at the middle of each side of a square of 600, its link at 40: a quarter of 4 x 520 between.
    spots = ((300.0, 55.0), (545.0, 300.0), (300.0, 545.0), (55.0, 300.0))
    beam = build.design(build.section("rectangle", b=600, h=600), build.group("bottom", 4, 20, at=spots))
    assert steel.gap_bars(*placed(beam)) == pytest.approx(520)
    alone = build.design(
        build.section("rectangle", b=600, h=600), build.group("bottom", 1, 20, at=(spots[0],))
    )
    assert steel.gap_bars(*placed(alone)) == pytest.approx(4 * 520)
    deep = build.design(
        build.section("rectangle", b=600, h=600), build.group("bottom", 1, 20, at=((300.0, 300.0),))
    )
    assert steel.gap_bars(*placed(deep)) == pytest.approx(4 * 520)


def test_bars_of_an_inner_layer_don_t_close_a_gap_unless_they_touch_a_leg(build):
    first, second = build.group("bottom", 2, 20), build.group("bottom", 3, 20, layer=2)
    wide = build.section("rectangle", b=900, h=500)
    bars, outline, cage = placed(build.design(wide, first, second, build.group("top", 7, 20)))
    # Bottom: 55 to 845 in one gap though a bar of layer 2 stands above its middle.
    assert steel.gap_bars(bars, outline, cage) == pytest.approx(790)
    # Thick cover, thin bars: layer 2 at 78 + 8 + 25 + 8 = 119 lies near the face, but not at a leg.
    thin = [build.group("bottom", 2, 16), build.group("bottom", 3, 16, layer=2), build.group("top", 7, 16)]
    bars, outline, cage = placed(build.design(wide, *thin, cover=build.number(60)))
    assert steel.gap_bars(bars, outline, cage) == pytest.approx(900 - 2 * 78)
    tall = build.section("rectangle", b=300, h=900)
    bars, outline, cage = placed(build.design(tall, first, second, build.group("top", 2, 20)))
    # Sides: the ends of layer 2, at 55 + 10 + 25 + 10 = 100, touch the legs.
    assert steel.gap_bars(bars, outline, cage) == pytest.approx(900 - 55 - 100)


@given(st.integers(2, 8), st.integers(2, 8), st.integers(0, 5), st.sampled_from([12.0, 16.0, 25.0]))
def test_turning_the_cage_upside_down_swaps_bottom_and_top(build, low, high, side, phi):
    def inputs(below, above):
        groups = [build.group("bottom", below, 25), build.group("top", above, 16)]
        if below != low:
            groups = [build.group("bottom", below, 16), build.group("top", above, 25)]
        if side:
            groups += [build.group("left", side, phi), build.group("right", side, phi)]
        bars, outline, cage = placed(build.design(build.section("rectangle", b=500, h=800), *groups))
        bottom = steel.a_s_bottom(steel.bottom_group(bars, outline), 25, cage)
        top = steel.a_s_top(steel.top_group(bars, outline), 25, cage, 800)
        half = steel.area_half_bottom(bars, bottom, 800 - top)
        return bottom, top, half, steel.area(bars) - half, steel.gap_bars(bars, outline, cage)

    high = high + (high == low)
    a_b, a_t, half_b, half_t, gap = inputs(low, high)
    b_b, b_t, other_b, other_t, other_gap = inputs(high, low)
    assert (a_b, a_t, half_b, half_t, gap) == pytest.approx((b_t, b_b, other_t, other_b, other_gap))
