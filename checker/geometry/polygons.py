"""Plain functions on simple polygons, given anticlockwise as corner points in mm.

- Edge i runs from corner i to corner i + 1; its inward normal is on its left.
- Everything is exact up to rounding: a simple polygon's width is linear between the heights of its corners.
"""

from __future__ import annotations

from itertools import pairwise
from math import hypot, inf
from typing import TypeAlias

Point: TypeAlias = tuple[float, float]
Strip: TypeAlias = tuple[float, float, float, float]
"""(y0, y1, w0, w1): between the levels y0 and y1 the width runs linearly from w0 to w1."""

STRAIGHT = 1e-9
"""Below this sine of the turning angle a corner is no corner: the two edges are one straight line."""


def direction(points: tuple[Point, ...], i: int) -> Point:
    """Return the unit vector along edge i."""
    (x0, y0), (x1, y1) = points[i % len(points)], points[(i + 1) % len(points)]
    length = hypot(x1 - x0, y1 - y0)
    return (x1 - x0) / length, (y1 - y0) / length


def turning(points: tuple[Point, ...], i: int) -> tuple[float, float]:
    """Return sine and cosine of the turning angle at corner i; the sine is negative at a reflex corner."""
    (ax, ay), (bx, by) = direction(points, i - 1), direction(points, i)
    return ax * by - ay * bx, ax * bx + ay * by


def area(points: tuple[Point, ...]) -> float:
    """Return the enclosed area in mm2, positive when the points run anticlockwise."""
    pairs = zip(points, points[1:] + points[:1], strict=True)
    return sum(x0 * y1 - x1 * y0 for (x0, y0), (x1, y1) in pairs) / 2


def perimeter(points: tuple[Point, ...]) -> float:
    """Return the length of the closed line through the points, mm."""
    pairs = zip(points, points[1:] + points[:1], strict=True)
    return sum(hypot(x1 - x0, y1 - y0) for (x0, y0), (x1, y1) in pairs)


def turning_sum(points: tuple[Point, ...]) -> float:
    """Return kappa, the sum of tan(phi/2) over the turning angles phi; reflex corners count negative."""
    total = 0.0
    for i in range(len(points)):
        sine, cosine = turning(points, i)
        total += sine / (1 + cosine)
    return total


def convex_corners(points: tuple[Point, ...]) -> tuple[int, ...]:
    """Return the numbers (from 0) of the corners that point outwards; points on a straight line are none."""
    return tuple(i for i in range(len(points)) if turning(points, i)[0] > STRAIGHT)


def strips(points: tuple[Point, ...]) -> tuple[Strip, ...]:
    """Return the polygon's width as strips from the lowest corner upwards, exact."""
    levels = sorted({y for _, y in points})
    edges = [edge for edge in zip(points, points[1:] + points[:1], strict=True) if edge[0][1] != edge[1][1]]
    result = []
    for low, high in pairwise(levels):
        # Across a strip the edges don't cross: sorted at mid-height they are in and out in turn.
        spans = []
        for edge in edges:
            if min(edge[0][1], edge[1][1]) <= low and max(edge[0][1], edge[1][1]) >= high:
                at_low, at_high = _x_at(edge, low), _x_at(edge, high)
                spans.append((at_low + at_high, at_low, at_high))
        spans.sort()
        w0 = sum(right[1] - left[1] for left, right in zip(spans[::2], spans[1::2], strict=True))
        w1 = sum(right[2] - left[2] for left, right in zip(spans[::2], spans[1::2], strict=True))
        result.append((low, high, w0, w1))
    return tuple(result)


def _x_at(edge: tuple[Point, Point], y: float) -> float:
    (x0, y0), (x1, y1) = edge
    if y == y1:
        return x1
    return x0 + (x1 - x0) * ((y - y0) / (y1 - y0))


def extent_at(points: tuple[Point, ...], y: float) -> tuple[float, float]:
    """Return the outermost left and right x of the polygon at height y (which it must reach)."""
    found: list[float] = []
    for edge in zip(points, points[1:] + points[:1], strict=True):
        (x0, y0), (x1, y1) = edge
        if min(y0, y1) <= y <= max(y0, y1):
            found += (x0, x1) if y0 == y1 else (_x_at(edge, y),)
    return min(found), max(found)


def least_hull_width(points: tuple[Point, ...]) -> float:
    """Return the least width over all directions, mm; it is always met square to an edge of the hull."""
    hull = _hull(points)
    widths = []
    for i, (vx, vy) in enumerate(hull):
        ux, uy = direction(hull, i)
        widths.append(max(ux * (y - vy) - uy * (x - vx) for x, y in hull))
    return min(widths)


def _hull(points: tuple[Point, ...]) -> tuple[Point, ...]:
    """Return the convex hull, anticlockwise (Andrew's monotone chain)."""

    def chain(ordered: list[Point]) -> list[Point]:
        line: list[Point] = []
        for x, y in ordered:
            while len(line) >= 2:
                (ax, ay), (bx, by) = line[-2], line[-1]
                if (bx - ax) * (y - ay) - (by - ay) * (x - ax) > 0:
                    break
                line.pop()
            line.append((x, y))
        return line[:-1]

    ordered = sorted(set(points))
    return tuple(chain(ordered) + chain(ordered[::-1]))


def inset_corner(points: tuple[Point, ...], i: int, before: float, after: float) -> Point:
    """Return the point near corner i, `before` mm inside edge i - 1 and `after` mm inside edge i."""
    x, y = points[i % len(points)]
    (ax, ay), (bx, by) = direction(points, i - 1), direction(points, i)
    cosine = ax * bx + ay * by
    squared_sine = (ax * by - ay * bx) ** 2
    if squared_sine < STRAIGHT**2:
        return x - by * (before + after) / 2, y + bx * (before + after) / 2
    p, q = (before - after * cosine) / squared_sine, (after - before * cosine) / squared_sine
    return x - p * ay - q * by, y + p * ax + q * bx


def inset(points: tuple[Point, ...], distance: float) -> tuple[Point, ...]:
    """Return the polygon with every edge moved inwards by `distance` mm, corners mitred.

    Valid while no edge vanishes.
    """
    return tuple(inset_corner(points, i, distance, distance) for i in range(len(points)))


def least_thickness(points: tuple[Point, ...]) -> float:
    """Return the least distance across the section between two sides that face each other, mm; inf if none do.

    A tube whose wall is thicker than that doesn't fit into the outline.
    """
    count = len(points)
    least = inf
    for i in range(count):
        x, y = points[i]
        for k in range(count):
            if k in (i, (i - 1) % count) or not _faces(points, i, k):
                continue
            (x0, y0), (dx, dy) = points[k], direction(points, k)
            along = (x - x0) * dx + (y - y0) * dy
            across = dx * (y - y0) - dy * (x - x0)
            (x1, y1) = points[(k + 1) % count]
            if -STRAIGHT <= along <= hypot(x1 - x0, y1 - y0) + STRAIGHT and across > STRAIGHT:
                least = min(least, across)
    return least


def _faces(points: tuple[Point, ...], i: int, k: int) -> bool:
    """Whether a side that ends in corner i runs against side k, within 60 degrees."""
    dx, dy = direction(points, k)
    sides = (direction(points, i - 1), direction(points, i))
    return any(ax * dx + ay * dy < -0.5 for ax, ay in sides)


def distance_inside(points: tuple[Point, ...], point: Point) -> float:
    """Return the distance in mm from a point to the nearest edge."""
    x, y = point
    nearest = float("inf")
    for (x0, y0), (x1, y1) in zip(points, points[1:] + points[:1], strict=True):
        dx, dy = x1 - x0, y1 - y0
        share = ((x - x0) * dx + (y - y0) * dy) / (dx * dx + dy * dy)
        share = 0.0 if share < 0 else 1.0 if share > 1 else share
        nearest = min(nearest, hypot(x - x0 - share * dx, y - y0 - share * dy))
    return nearest


def flat_edge(points: tuple[Point, ...], side: str) -> int | None:
    """Return the longest straight edge that lies on the given side of the bounding box, or None.

    `side` is "bottom", "top", "left" or "right".
    """
    axis = 1 if side in ("bottom", "top") else 0
    values = [point[axis] for point in points]
    extreme = min(values) if side in ("bottom", "left") else max(values)
    reach = STRAIGHT * (max(values) - min(values))
    best, longest = None, 0.0
    for i, (start, end) in enumerate(zip(points, points[1:] + points[:1], strict=True)):
        length = abs(end[1 - axis] - start[1 - axis])
        if abs(start[axis] - extreme) <= reach and abs(end[axis] - extreme) <= reach and length > longest:
            best, longest = i, length
    return best
