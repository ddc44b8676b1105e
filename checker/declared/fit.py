"""Plain geometry of outlines, as far as it takes to tell whether a section is one and steel can stand in it.

- Points are (x, y) in mm, x to the right and y up; an outline is a closed run of corners, anticlockwise.
- Measuring for the audit is done elsewhere; nothing here depends on the rest of the model.
"""

from __future__ import annotations

import math
from collections.abc import Iterator
from itertools import pairwise

Point = tuple[float, float]

_FLAT = 1e-6  # mm; how level an edge must be to count as flat


def signed_area(points: tuple[Point, ...]) -> float:
    """Area in mm2 by the shoelace formula; positive when the points run anticlockwise."""
    return sum(x0 * y1 - x1 * y0 for (x0, y0), (x1, y1) in edges(points)) / 2


def edges(points: tuple[Point, ...]) -> Iterator[tuple[Point, Point]]:
    """The edges in order; the last one closes the outline."""
    return pairwise((*points, points[0]))


def extents(points: tuple[Point, ...]) -> tuple[float, float]:
    """Width and height in mm of the bounding box."""
    xs, ys = zip(*points, strict=True)
    return max(xs) - min(xs), max(ys) - min(ys)


def crossing(points: tuple[Point, ...]) -> tuple[int, int] | None:
    """The first two edges (counted from 0) that cross, touch or fold back on each other."""
    sides = list(edges(points))
    count = len(sides)
    for i in range(count):
        a, b = sides[i]
        c = sides[(i + 1) % count][1]
        if _turn(a, b, c) == 0 and _along(b, a, c) > 0:
            return i, (i + 1) % count
        for j in range(i + 2, count - (i == 0)):
            if _touch(a, b, *sides[j]):
                return i, j
    return None


def inside(point: Point, points: tuple[Point, ...]) -> bool:
    """Whether a point lies within the outline (even-odd rule; points on an edge may fall either way)."""
    x, y = point
    odd = False
    for (x0, y0), (x1, y1) in edges(points):
        if (y0 > y) != (y1 > y) and x < x0 + (y - y0) * (x1 - x0) / (y1 - y0):
            odd = not odd
    return odd


def distance_to_outline(point: Point, points: tuple[Point, ...]) -> float:
    """Distance in mm from a point to the nearest edge."""
    return min(_distance(point, start, end) for start, end in edges(points))


def turnings(points: tuple[Point, ...]) -> list[float]:
    """The turning angle in rad at each point, positive to the left; they add up to 2 pi."""
    count = len(points)
    angles = []
    for i, (x, y) in enumerate(points):
        (xb, yb), (xn, yn) = points[i - 1], points[(i + 1) % count]
        ahead, behind = (xn - x, yn - y), (x - xb, y - yb)
        cross = behind[0] * ahead[1] - behind[1] * ahead[0]
        angles.append(math.atan2(cross, behind[0] * ahead[0] + behind[1] * ahead[1]))
    return angles


def without_straight_points(points: tuple[Point, ...]) -> tuple[Point, ...]:
    """The outline without the points at which it doesn't turn."""
    return tuple(point for point, angle in zip(points, turnings(points), strict=True) if abs(angle) > 1e-9)


def convex_corners(points: tuple[Point, ...]) -> int:
    """How many corners turn outward, each of which takes a bar of its own."""
    return sum(angle > 1e-9 for angle in turnings(points))


def perimeter_inset(points: tuple[Point, ...], inset: float) -> float:
    """Length in mm of the outline moved inward by `inset`: u - 2 inset sum tan(turning/2)."""
    outer = sum(math.dist(start, end) for start, end in edges(points))
    return outer - 2 * inset * sum(math.tan(angle / 2) for angle in turnings(points))


def flat_edge(points: tuple[Point, ...], face: str, inset: float) -> float | None:
    """Length in mm of the longest straight edge along a face, moved in with its neighbours by `inset`.

    `face` is bottom, top, left or right. None when the outline has no level (or upright) edge at its extreme
    there; negative when the neighbours meet before.
    """
    corners = without_straight_points(points)
    angles = turnings(corners)
    axis = 1 if face in ("bottom", "top") else 0
    ends = [point[axis] for point in corners]
    extreme = min(ends) if face in ("bottom", "left") else max(ends)
    lengths = [
        math.dist(start, end)
        - inset * (math.tan(angles[i] / 2) + math.tan(angles[(i + 1) % len(corners)] / 2))
        for i, (start, end) in enumerate(edges(corners))
        if abs(start[axis] - extreme) <= _FLAT and abs(end[axis] - extreme) <= _FLAT
    ]
    return max(lengths, default=None)


def _turn(a: Point, b: Point, c: Point) -> float:
    return (b[0] - a[0]) * (c[1] - a[1]) - (b[1] - a[1]) * (c[0] - a[0])


def _along(origin: Point, a: Point, b: Point) -> float:
    return (a[0] - origin[0]) * (b[0] - origin[0]) + (a[1] - origin[1]) * (b[1] - origin[1])


def _between(a: Point, b: Point, c: Point) -> bool:
    """Whether c, known to be in line with a and b, lies between them."""
    return min(a[0], b[0]) <= c[0] <= max(a[0], b[0]) and min(a[1], b[1]) <= c[1] <= max(a[1], b[1])


def _touch(a: Point, b: Point, c: Point, d: Point) -> bool:
    """Whether the segments a-b and c-d have a point in common."""
    turn_c, turn_d = _turn(a, b, c), _turn(a, b, d)
    turn_a, turn_b = _turn(c, d, a), _turn(c, d, b)
    if turn_c * turn_d < 0 and turn_a * turn_b < 0:
        return True
    ends = ((turn_c, a, b, c), (turn_d, a, b, d), (turn_a, c, d, a), (turn_b, c, d, b))
    return any(turn == 0 and _between(start, end, point) for turn, start, end, point in ends)


def _distance(point: Point, start: Point, end: Point) -> float:
    length = math.dist(start, end)
    share = _along(start, end, point) / length**2
    share = min(1.0, max(0.0, share))
    foot = (start[0] + share * (end[0] - start[0]), start[1] + share * (end[1] - start[1]))
    return math.dist(point, foot)
