"""Outlines against a general-purpose geometry library (shapely) and against closed forms."""

from __future__ import annotations

from itertools import pairwise
from math import acos, atan2, cos, hypot, inf, pi, sin, sqrt, tan

import pytest
import shapely
from hypothesis import assume, given, settings
from hypothesis import strategies as st

from checker.geometry import polygons
from checker.geometry.outline import Outline, box, circle, outline_of, polygon, rectangle

coordinate = st.integers(0, 2000).map(float)
TEE = (
    (0.0, 0.0),
    (300.0, 0.0),
    (300.0, 400.0),
    (700.0, 400.0),
    (700.0, 600.0),
    (-400.0, 600.0),
    (-400.0, 400.0),
)
TEE = (*TEE, (0.0, 400.0))


@st.composite
def convex(draw: st.DrawFn) -> shapely.Polygon:
    points = draw(st.lists(st.tuples(coordinate, coordinate), min_size=3, max_size=12))
    hull = shapely.MultiPoint(points).convex_hull
    assume(isinstance(hull, shapely.Polygon) and hull.area > 1e4)
    return shapely.geometry.polygon.orient(hull)


@st.composite
def star(draw: st.DrawFn) -> shapely.Polygon:
    """A simple polygon, mostly not convex: radii drawn round a point."""
    radii = draw(st.lists(st.integers(200, 1000), min_size=5, max_size=12))
    n = len(radii)
    return shapely.Polygon([(r * cos(2 * pi * k / n), r * sin(2 * pi * k / n)) for k, r in enumerate(radii)])


def outline_from(shape: shapely.Polygon) -> Outline:
    return polygon(tuple(shape.exterior.coords[:-1]))


def thickest_before_an_edge_vanishes(points: tuple[tuple[float, float], ...]) -> float:
    """Inset at which the first edge has shrunk to nothing, from the half turning angles at its ends."""
    n = len(points)
    angles = [
        atan2(points[(i + 1) % n][1] - p[1], points[(i + 1) % n][0] - p[0]) for i, p in enumerate(points)
    ]
    turns = [(angles[i] - angles[i - 1] + pi) % (2 * pi) - pi for i in range(n)]
    rates = [tan(turns[i] / 2) + tan(turns[(i + 1) % n] / 2) for i in range(n)]
    lengths = [
        hypot(points[(i + 1) % n][0] - p[0], points[(i + 1) % n][1] - p[1]) for i, p in enumerate(points)
    ]
    return min(length / rate if rate > 1e-9 else inf for length, rate in zip(lengths, rates, strict=True))


@settings(deadline=None, max_examples=150)
@given(convex(), st.floats(0.05, 0.95))
def test_area_and_length_of_the_centre_line_are_those_of_a_mitred_inset_of_a_convex_polygon(shape, share):
    # Source: shapely's buffer with mitred joins, an independent implementation of the same geometry.
    outline = outline_from(shape)
    inset = share * thickest_before_an_edge_vanishes(outline.points)
    smaller = shape.buffer(-inset, join_style="mitre", mitre_limit=1e6)
    assert outline.A_k(2 * inset) == pytest.approx(smaller.area, rel=1e-6, abs=1e-2)
    assert outline.u_k(2 * inset) == pytest.approx(smaller.length, rel=1e-6, abs=1e-2)


@settings(deadline=None, max_examples=150)
@given(star())
def test_area_and_length_of_the_centre_line_hold_for_polygons_that_are_not_convex(shape):
    outline = outline_from(shape)
    inset = min(0.1 * thickest_before_an_edge_vanishes(outline.points), 20.0)
    smaller = shape.buffer(-inset, join_style="mitre", mitre_limit=1e6)
    assume(isinstance(smaller, shapely.Polygon) and len(smaller.exterior.coords) == len(outline.points) + 1)
    assert outline.A_k(2 * inset) == pytest.approx(smaller.area, rel=1e-6)
    assert outline.u_k(2 * inset) == pytest.approx(smaller.length, rel=1e-6)


@given(st.floats(100, 3000), st.floats(0.01, 0.99))
def test_area_and_length_of_the_centre_line_of_a_circle(diameter, share):
    t = share * diameter
    outline = circle(diameter)
    assert outline.kappa == pi
    assert outline.A_k(t) == pytest.approx(pi * (diameter - t) ** 2 / 4)
    assert outline.u_k(t) == pytest.approx(pi * (diameter - t))


def test_rectangle_centre_line_is_the_product_of_the_reduced_sides():
    outline = rectangle(300.0, 600.0)
    assert (outline.A_k(100.0), outline.u_k(100.0), outline.kappa) == (200 * 500, 1400, 4)


@settings(deadline=None, max_examples=150)
@given(star())
def test_polygon_numbers_are_those_of_a_geometry_library(shape):
    outline = outline_from(shape)
    low = shape.bounds[1]
    assert outline.area == pytest.approx(shape.area)
    assert outline.perimeter == pytest.approx(shape.length)
    assert outline.centroid_height == pytest.approx(shape.centroid.y - low)
    for share in (0.13, 0.37, 0.5, 0.71, 0.93):
        y = share * outline.height
        cut = shape.intersection(shapely.LineString([(-2000, low + y), (2000, low + y)]))
        assert outline.width_at(y) == pytest.approx(cut.length, rel=1e-9, abs=1e-6)
        left, right = outline.extent_at(y)
        assert (left + shape.bounds[0], right + shape.bounds[0]) == pytest.approx(
            (cut.bounds[0], cut.bounds[2])
        )
        half = shape.intersection(shapely.box(-2000, low, 2000, low + y))
        assert outline.mean_width(0.0, y) * y == pytest.approx(half.area, rel=1e-9)
    inside = shape.representative_point()
    point = (inside.x - shape.bounds[0], inside.y - low)
    assert outline.distance_inside(point) == pytest.approx(shape.exterior.distance(inside))


@settings(deadline=None, max_examples=100)
@given(star())
def test_least_dimension_is_the_least_extent_over_all_directions(shape):
    outline = outline_from(shape)
    least = min(
        max(x * cos(a) + y * sin(a) for x, y in outline.points)
        - min(x * cos(a) + y * sin(a) for x, y in outline.points)
        for a in (pi * k / 720 for k in range(720))
    )
    # Half a step of the search turns the farthest corner by at most 2000 mm x pi/1440.
    assert least - 4.5 <= outline.least_dimension <= least + 1e-9
    around = shape.minimum_rotated_rectangle.exterior.coords
    sides = [hypot(x1 - x0, y1 - y0) for (x0, y0), (x1, y1) in pairwise(around[:3])]
    assert outline.least_dimension <= min(sides) + 1e-6


@settings(deadline=None, max_examples=100)
@given(star(), st.floats(0.02, 0.9), st.floats(0.02, 0.5))
def test_least_width_is_met_at_no_height_between(shape, start, share):
    outline = outline_from(shape)
    y0 = start * outline.height
    y1 = y0 + share * (outline.height - y0)
    least = outline.least_width(y0, y1)
    heights = [y0 + (y1 - y0) * k / 50 for k in range(51)]
    assert all(outline.width_at(y) >= least - 1e-6 for y in heights[1:-1])
    # And it is met: just inside an end, or beside a corner between them.
    levels = [y0, y1, *(y for _, y in outline.points if y0 < y < y1)]
    near = [y + step for y in levels for step in (-1e-7, 0.0, 1e-7) if y0 <= y + step <= y1]
    assert min(outline.width_at(y) for y in near) == pytest.approx(least, abs=1e-3)


def test_width_of_a_tee_jumps_at_the_flange():
    outline = polygon(TEE)
    assert outline.origin == (-400.0, 0.0)
    assert [outline.width_at(y) for y in (0, 399, 400, 401, 600, 601)] == [300, 300, 300, 1100, 1100, 0]
    assert outline.least_width(400.0, 600.0) == 1100
    assert outline.least_width(100.0, 500.0) == 300
    assert outline.profile(from_top=True) == ((0, 200, 1100, 1100), (200, 600, 300, 300))
    assert outline.kappa == pytest.approx(4)


def test_box_counts_its_void_out_of_the_concrete_only():
    outline = box(1000.0, 800.0, side=150.0, top=200.0, bottom=180.0)
    assert (outline.area, outline.perimeter, outline.kappa) == (800_000, 3600, 4)
    void = shapely.box(150, 180, 850, 600)
    concrete = shapely.box(0, 0, 1000, 800).difference(void)
    assert outline.concrete_area == concrete.area
    assert outline.centroid_height == pytest.approx(concrete.centroid.y)
    assert outline.least_wall == 150
    assert outline.least_width(100.0, 700.0) == 300
    assert outline.width_at(100.0) == 1000
    assert outline.mean_width(0.0, 400.0) == pytest.approx((180 * 1000 + 220 * 300) / 400)


def test_circle_strips_hold_area_and_moment_of_every_segment():
    # Source: closed form of a circular segment, r^2 (angle - sin cos), and its first moment.
    outline, r = circle(600.0), 300.0
    for k in range(1, 300):
        depth = 2.0 * k
        angle = acos(1 - depth / r)
        exact = r * r * (angle - sin(angle) * cos(angle))
        area = outline.mean_width(0.0, depth) * depth
        assert abs(area - exact) < 2e-5 * outline.area
    assert outline.mean_width(0.0, 300.0) == pytest.approx(outline.area / 600, rel=1e-12)
    assert outline.width_at(60.0) == pytest.approx(2 * sqrt(300**2 - 240**2))
    assert outline.least_width(60.0, 400.0) == outline.width_at(60.0)
    assert outline.distance_inside((300.0, 50.0)) == pytest.approx(50)


def test_mean_width_of_a_rectangle_is_exactly_its_width():
    for h in (333.3, 700.0, 1e3 / 3):
        assert rectangle(0.1 + 0.2, h).mean_width(0.0, h / 2) == 0.1 + 0.2


def test_outline_of_reads_every_shape(build):
    assert outline_of(build.section("rectangle", b=400, h=700)) == rectangle(400, 700)
    walls = {"wall_side": 150, "wall_top": 200, "wall_bottom": 180}
    assert outline_of(build.section("box", b=1000, h=800, **walls)) == box(1000, 800, 150, 200, 180)
    assert outline_of(build.section("circle", diameter=600)) == circle(600)
    assert outline_of(build.section("polygon", points=TEE)) == polygon(TEE)


def test_a_point_on_a_straight_line_is_no_corner():
    points = ((0.0, 0.0), (100.0, 0.0), (300.0, 0.0), (300.0, 500.0), (0.0, 500.0))
    assert polygons.convex_corners(points) == (0, 2, 3, 4)
    assert polygon(points).kappa == pytest.approx(4)
    assert polygons.inset_corner(points, 1, 40.0, 40.0) == pytest.approx((100, 40))


def test_thickness_is_the_thinnest_part_between_facing_sides() -> None:
    """A hand-made tee: 180 mm of flange, a web of 575; a chamfer is no part of its own."""
    tee = ((0.0, 0.0), (575.0, 0.0), (575.0, 1120.0), (775.0, 1120.0), (775.0, 1300.0), (0.0, 1300.0))
    assert polygons.least_thickness(tee) == pytest.approx(180.0)
    chamfered = ((30.0, 0.0), (370.0, 0.0), (400.0, 30.0), (400.0, 700.0), (0.0, 700.0), (0.0, 30.0))
    assert polygons.least_thickness(chamfered) == pytest.approx(400.0)
    turned = tuple((x * 0.6 - y * 0.8, x * 0.8 + y * 0.6) for x, y in tee)
    assert polygons.least_thickness(turned) == pytest.approx(180.0)
