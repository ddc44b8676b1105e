"""The plain geometry of outlines, held against the Shapely library."""

from __future__ import annotations

import math

import pytest
import shapely
from hypothesis import assume, given
from hypothesis import strategies as st

from checker.declared.fit import (
    convex_corners,
    crossing,
    distance_to_outline,
    extents,
    flat_edge,
    inside,
    perimeter_inset,
    signed_area,
    turnings,
    without_straight_points,
)

COORDINATE = st.integers(0, 12)
POINTS = st.lists(st.tuples(COORDINATE, COORDINATE), min_size=3, max_size=8, unique=True).map(tuple)
SQUARE = ((0.0, 0.0), (10.0, 0.0), (10.0, 10.0), (0.0, 10.0))


@given(POINTS)
def test_area_crossing_and_extents(points: tuple[tuple[float, float], ...]) -> None:
    """Source: Shapely (signed area by ring orientation, validity of a polygon, bounds)."""
    polygon = shapely.Polygon(points)
    x0, y0, x1, y1 = polygon.bounds
    assert extents(points) == pytest.approx((x1 - x0, y1 - y0))
    simple = polygon.is_valid and polygon.area > 0 and polygon.exterior.is_simple
    assert (crossing(points) is None) == simple
    if simple:
        ring = shapely.LinearRing(points)
        assert signed_area(points) == pytest.approx(polygon.area * (1 if ring.is_ccw else -1))


def turned(points: tuple[tuple[float, float], ...]) -> tuple[tuple[float, float], ...]:
    return points if signed_area(points) > 0 else tuple(reversed(points))


@given(POINTS, st.tuples(st.floats(-2, 14), st.floats(-2, 14)))
def test_inside_and_distance(points: tuple[tuple[float, float], ...], point: tuple[float, float]) -> None:
    """Source: Shapely (containment, distance to the boundary)."""
    assume(crossing(points) is None)
    polygon = shapely.Polygon(points)
    distance = polygon.exterior.distance(shapely.Point(point))
    assert distance_to_outline(point, points) == pytest.approx(distance, abs=1e-9)
    if distance > 1e-9:
        assert inside(point, points) == polygon.contains(shapely.Point(point))


@given(POINTS)
def test_turnings(points: tuple[tuple[float, float], ...]) -> None:
    assume(crossing(points) is None)
    points = turned(points)
    assert sum(turnings(points)) == pytest.approx(2 * math.pi)
    hull = shapely.Polygon(points).convex_hull
    assert convex_corners(points) >= 3
    if hull.equals(shapely.Polygon(points)):
        assert convex_corners(points) == len(without_straight_points(points))


@given(POINTS, st.floats(0.01, 0.2))
def test_perimeter_of_the_outline_moved_inward(points: tuple[tuple[float, float], ...], inset: float) -> None:
    """Source: Shapely's inward buffer with mitred corners, of convex outlines."""
    hull = shapely.Polygon(points).convex_hull
    assume(hull.geom_type == "Polygon")
    inner = hull.buffer(-inset, join_style="mitre", mitre_limit=1000)
    corners = turned(tuple(hull.exterior.coords[:-1]))
    assume(inner.geom_type == "Polygon" and len(inner.exterior.coords) == len(corners) + 1)
    assert perimeter_inset(corners, inset) == pytest.approx(inner.exterior.length, rel=1e-6)


def test_flat_edge() -> None:
    assert flat_edge(SQUARE, "bottom", 0) == 10
    assert flat_edge(SQUARE, "top", 2) == pytest.approx(6)
    assert flat_edge(((0, 0), (5, 0), (10, 0), (10, 10), (0, 10)), "bottom", 0) == 10
    assert flat_edge(((5, 0), (10, 5), (5, 10), (0, 5)), "bottom", 0) is None
    trapezoid = ((2.0, 0.0), (8.0, 0.0), (10.0, 10.0), (0.0, 10.0))
    inner = shapely.Polygon(trapezoid).buffer(-1, join_style="mitre", mitre_limit=100)
    lower = sorted(x for x, y in inner.exterior.coords if abs(y - 1) < 1e-9)
    assert flat_edge(trapezoid, "bottom", 1) == pytest.approx(lower[-1] - lower[0])
    assert flat_edge(trapezoid, "left", 0) is None
    assert flat_edge(SQUARE, "left", 1) == flat_edge(SQUARE, "right", 1) == pytest.approx(8)
