"""Bending with axial force against closed forms and against independent fibre integration (numpy, scipy)."""

from __future__ import annotations

from math import isnan, pi, sqrt

import numpy as np
import pytest
import shapely
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.optimize import brentq

from checker.geometry import bending
from checker.geometry.bending import (
    Profile,
    ProfileColumns,
    bending_resistance,
    block_area,
    block_depth,
    block_moment,
)
from checker.geometry.outline import Outline, box, circle, polygon, rectangle

F_C, F_YD, E_S, EPS_CU, LAMBDA = 20.0, 500 / 1.15, 200_000.0, 0.0035, 0.8
STEEL = (EPS_CU, F_YD, E_S)
NOTCHED = ((0.0, 0.0), (500.0, 0.0), (500.0, 250.0), (350.0, 300.0), (600.0, 800.0), (-100.0, 800.0))
OUTLINES = {
    "rectangle": rectangle(400.0, 700.0),
    "box": box(1200.0, 1000.0, side=250.0, top=180.0, bottom=200.0),
    "circle": circle(600.0),
    "polygon": polygon(NOTCHED),
}


def section_of(outline: Outline, *bars: tuple[float, float]) -> Profile:
    return Profile(
        outline.profile(True), outline.profile(False), bars, outline.height, outline.centroid_height
    )


def resistance(section: Profile, N: float = 0.0, hogging: bool = False, f_c: float = F_C) -> float:
    return bending_resistance(section, hogging, N, f_c, LAMBDA, *STEEL)


def widths(name: str, heights: np.ndarray) -> np.ndarray:
    """Width at each height, without the strips of the code under test."""
    if name == "rectangle":
        return np.full_like(heights, 400.0)
    if name == "box":
        return np.where((heights > 200) & (heights < 820), 500.0, 1200.0)
    if name == "circle":
        return 2 * np.sqrt(heights * (600 - heights))
    shape = shapely.Polygon(NOTCHED)
    lines = shapely.linestrings([[(-1000.0, y), (1000.0, y)] for y in heights])
    return shapely.length(shapely.intersection(shape, lines))


def fibre_resistance(name: str, outline: Outline, bars, N: float, hogging: bool, f_c: float = F_C) -> float:
    """Sum over 4000 fibres, each pressed by its share in the block; scipy finds the neutral axis."""
    n, h = 4000, outline.height
    edges = np.linspace(0, h, n + 1)
    middle = (edges[:-1] + edges[1:]) / 2
    fibres = widths(name, middle) * h / n
    y_c = (fibres * middle).sum() / fibres.sum()
    y_bar, a_bar = np.array([b[0] for b in bars]), np.array([b[1] for b in bars])
    depth, depth_bar = (middle, y_bar) if hogging else (h - middle, h - y_bar)
    centroid = y_c if hogging else h - y_c

    def forces(x: float):
        covered = np.clip((LAMBDA * x - depth) / (h / n) + 0.5, 0, 1)
        sigma = np.clip(E_S * EPS_CU * (x - depth_bar) / x, -F_YD, F_YD)
        return f_c * fibres * covered, a_bar * sigma

    def out_of_balance(x: float) -> float:
        concrete, steel = forces(x)
        return concrete.sum() + steel.sum() - N

    concrete, steel = forces(brentq(out_of_balance, 1e-3, 50 * h, xtol=1e-10))
    return float((concrete * (centroid - depth)).sum() + (steel * (centroid - depth_bar)).sum())


def bars_of(outline: Outline) -> tuple[tuple[float, float], ...]:
    h = outline.height
    return ((60.0, 4 * pi * 12.5**2), (0.5 * h, 2 * pi * 36.0), (h - 55.0, 3 * pi * 100.0))


@given(st.floats(150, 1500), st.floats(200, 2000), st.floats(0.001, 0.012), st.floats(12, 60))
def test_singly_reinforced_rectangle_is_the_closed_form(b, h, ratio, f_c):
    # EN 1992-1-1, 3.1.7(3) and 3.2.7(2)b: T = A f_yd at d, C = T over the depth T/(f_c b); the bars yield.
    d, area = 0.9 * h, ratio * b * h * f_c / 60
    depth = area * F_YD / (f_c * b)
    section = section_of(rectangle(b, h), (h - d, area))
    assert resistance(section, f_c=f_c) == pytest.approx(area * F_YD * (d - depth / 2), rel=1e-12)


def test_over_reinforced_rectangle_is_the_root_of_its_quadratic():
    # Steel stays elastic: f_c b lambda x = A E eps (d - x)/x, worked out by hand.
    b, h, d, area = 300.0, 600.0, 550.0, 9000.0
    p, q = F_C * b * LAMBDA, area * E_S * EPS_CU
    x = (-q + sqrt(q * q + 4 * p * q * d)) / (2 * p)
    assert E_S * EPS_CU * (d - x) / x < F_YD
    expected = p * x * (d - LAMBDA * x / 2)
    assert resistance(section_of(rectangle(b, h), (50.0, area))) == pytest.approx(expected, rel=1e-12)


@pytest.mark.parametrize("hogging", [False, True])
@pytest.mark.parametrize("share", [-0.5, 0.0, 0.1, 0.35, 0.6, 0.85])
@pytest.mark.parametrize("name", OUTLINES)
def test_any_outline_with_axial_force_is_the_sum_of_its_fibres(name, share, hogging):
    # Independent: fibres and a library root finder. Tension is a share of the bars', compression of the
    # concrete's capacity.
    outline = OUTLINES[name]
    bars = bars_of(outline)
    whole = F_C * outline.concrete_area if share > 0 else F_YD * sum(area for _, area in bars)
    expected = fibre_resistance(name, outline, bars, share * whole, hogging)
    section = section_of(outline, *bars)
    scale = F_C * outline.concrete_area * outline.height
    found = resistance(section, share * whole, hogging)
    assert found == pytest.approx(expected, rel=3e-4, abs=2e-6 * scale)
    assert found > 0


def test_force_beyond_what_the_section_can_take_leaves_nothing():
    section = section_of(OUTLINES["rectangle"], *bars_of(OUTLINES["rectangle"]))
    steel = sum(area for _, area in section.bars) * F_YD
    most = F_C * 400 * 700 + steel
    assert resistance(section, most * 1.0001) == 0.0
    assert resistance(section, -steel * 1.0001) == 0.0
    assert resistance(section, most * 0.999, hogging=True) > 0
    # More steel below than above: pressed evenly, the section itself hogs, so no sagging moment is left.
    assert resistance(section, most * 0.999) == 0.0
    assert resistance(section, -steel * 0.999) > 0


def test_without_bars_only_compression_gives_a_moment():
    plain = section_of(OUTLINES["rectangle"])
    empty = section_of(OUTLINES["rectangle"], (50.0, 0.0), (650.0, 0.0))
    for section in (plain, empty):
        assert resistance(section) == 0.0
        # Block of depth N/(f_c b) = 125 mm at the edge: M = N (h - 125)/2.
        assert resistance(section, 1e6) == pytest.approx(1e6 * (700 - 125) / 2, rel=1e-12)


def test_steel_that_never_yields_in_compression_is_still_solved():
    # f_yd above E_s eps_cu, as with high strength concrete: bars stay elastic however deep the neutral axis.
    section = section_of(OUTLINES["rectangle"], *bars_of(OUTLINES["rectangle"]))
    found = [
        bending_resistance(section, False, N, 50.0, 0.7, 0.0026, 560.0, E_S) for N in (0.0, 5e6, 13e6, 14.9e6)
    ]
    assert all(moment > 0 for moment in found)
    assert bending_resistance(section, False, 2e7, 50.0, 0.7, 0.0026, 560.0, E_S) == 0.0


section_parts = st.tuples(
    st.sampled_from(sorted(OUTLINES)),
    st.lists(st.tuples(st.floats(0.05, 0.95), st.floats(50, 6000)), min_size=1, max_size=8),
)


def drawn(parts) -> Profile:
    name, bars = parts
    outline = OUTLINES[name]
    return section_of(outline, *((share * outline.height, area) for share, area in bars))


@given(section_parts, st.floats(1.01, 3))
def test_more_steel_at_the_tension_face_never_resists_less(parts, factor):
    section = drawn(parts)
    (y, area), *rest = sorted(section.bars)
    if y > section.y_c:
        return
    stronger = Profile(
        section.strips_sagging, section.strips_hogging, ((y, area * factor), *rest), section.h, section.y_c
    )
    assert resistance(stronger) >= resistance(section) * (1 - 1e-9)


@given(section_parts, st.floats(-0.5, 0.9), st.booleans())
def test_a_section_upside_down_resists_the_other_sense_alike(parts, share, hogging):
    section = drawn(parts)
    turned = Profile(
        section.strips_hogging,
        section.strips_sagging,
        tuple((section.h - y, area) for y, area in section.bars),
        section.h,
        section.h - section.y_c,
    )
    N = share * F_C * block_area(section, False, section.h)
    scale = F_C * block_area(section, False, section.h) * section.h
    assert resistance(turned, N, not hogging) == pytest.approx(
        resistance(section, N, hogging), abs=1e-11 * scale
    )


@settings(max_examples=300)
@given(section_parts, st.floats(-0.6, 1.2), st.floats(5, 80), st.booleans(), st.floats(0.0026, 0.0035))
def test_the_neutral_axis_is_found_in_few_steps(parts, share, f_c, hogging, eps_cu):
    section = drawn(parts)
    calls = 0
    honest = bending._steel_force

    def counting(*args):
        nonlocal calls
        calls += 1
        return honest(*args)

    bending._steel_force = counting
    try:
        N = share * f_c * block_area(section, False, section.h)
        bending_resistance(section, hogging, N, f_c, LAMBDA, eps_cu, F_YD, E_S)
    finally:
        bending._steel_force = honest
    assert calls <= 30


@settings(deadline=None)
@given(
    st.lists(
        st.tuples(section_parts, st.floats(-0.5, 1.1), st.floats(8, 60), st.booleans()),
        min_size=1,
        max_size=12,
    )
)
def test_columns_give_the_scalar_numbers(rows):
    sections = [drawn(parts) for parts, *_ in rows]
    whole = [block_area(section, False, section.h) for section in sections]
    N = [share * f_c * area for (_, share, f_c, _), area in zip(rows, whole, strict=True)]
    f_c, hogging = [row[2] for row in rows], [row[3] for row in rows]
    # The index names each section twice, the second time backwards.
    index = [*range(len(rows)), *reversed(range(len(rows)))]
    columns = ProfileColumns.stack(sections, index)
    found = bending_resistance(
        columns, np.array(hogging)[index], np.array(N)[index], np.array(f_c)[index], LAMBDA, *STEEL
    )
    for k, i in enumerate(index):
        scalar = bending_resistance(sections[i], hogging[i], N[i], f_c[i], LAMBDA, *STEEL)
        scale = f_c[i] * whole[i] * sections[i].h
        assert found[k] == pytest.approx(scalar, rel=1e-12, abs=1e-13 * scale)


@settings(deadline=None)
@given(section_parts, st.floats(0.01, 1.0), st.floats(0.3, 1.0), st.booleans())
def test_blocks_are_the_same_in_columns_and_depth_is_the_inverse_of_moment(parts, a_share, d_share, hogging):
    section = drawn(parts)
    d = d_share * section.h
    a = a_share * d
    columns = ProfileColumns.stack([section])
    moment = block_moment(section, hogging, a, d)
    back = block_depth(section, hogging, moment, d)
    assert block_moment(section, hogging, back, d) == pytest.approx(moment, rel=1e-12)
    # Near d the moment hardly grows with the depth, so that the depth is only known to the root of rounding.
    assert back == pytest.approx(a, rel=1e-9 if a_share < 0.9 else 1e-6)
    assert block_area(columns, hogging, np.array([a]))[0] == pytest.approx(
        block_area(section, hogging, a), rel=1e-13
    )
    assert block_moment(columns, hogging, np.array([a]), np.array([d]))[0] == pytest.approx(moment, rel=1e-13)
    columns_back = block_depth(columns, hogging, np.array([moment]), np.array([d]))[0]
    assert columns_back == pytest.approx(back, rel=1e-12 if a_share < 0.9 else 1e-6)


def test_block_of_a_rectangle_is_the_closed_form():
    section = section_of(OUTLINES["rectangle"])
    assert block_area(section, False, 100.0) == 40_000
    assert block_area(section, False, 900.0) == 280_000
    assert block_moment(section, False, 100.0, 640.0) == pytest.approx(40_000 * 590)
    S = 40_000 * 590.0
    assert block_depth(section, False, S, 640.0) == pytest.approx(640 - sqrt(640**2 - 2 * S / 400), rel=1e-12)


def test_block_of_a_circle_is_its_segment():
    # Source: closed form of the circular segment; the strips are within 2e-5 of the whole area.
    section = section_of(OUTLINES["circle"])
    for a in (30.0, 150.0, 300.0, 444.0):
        angle = np.arccos(1 - a / 300)
        exact = 300**2 * (angle - np.sin(angle) * np.cos(angle))
        assert block_area(section, True, a) == pytest.approx(exact, abs=2e-5 * pi * 300**2)
        moment = exact * (500 - 300) + 2 / 3 * (300 * np.sin(angle)) ** 3
        assert block_moment(section, True, a, 500.0) == pytest.approx(moment, abs=2e-5 * pi * 300**3)


def test_block_depth_of_nothing_and_of_too_much():
    section = section_of(OUTLINES["box"])
    most = block_moment(section, False, 900.0, 900.0)
    assert block_depth(section, False, 0.0, 900.0) == 0.0
    assert block_depth(section, False, -5.0, 900.0) == 0.0
    assert isnan(block_depth(section, False, most * 1.001, 900.0))
    columns = ProfileColumns.stack([section], [0, 0, 0])
    found = block_depth(columns, False, np.array([0.0, most * 1.001, most / 2]), 900.0)
    assert found[0] == 0.0
    assert np.isnan(found[1])
    assert found[2] == pytest.approx(block_depth(section, False, most / 2, 900.0), rel=1e-12)


def test_block_of_rows_is_the_rows_of_the_whole():
    sections = [section_of(outline, *bars_of(outline)) for outline in OUTLINES.values()]
    columns = ProfileColumns.stack(sections, [0, 1, 2, 3, 2, 1])
    N = np.array([0.0, 1e5, 2e5, 3e5, 4e5, 5e5])
    whole = bending_resistance(columns, False, N, F_C, LAMBDA, *STEEL)
    part = bending_resistance(columns.block(2, 5), False, N[2:5], F_C, LAMBDA, *STEEL)
    assert part.tolist() == whole[2:5].tolist()
