"""Cross-sections measured without the product: closed forms for circles and rectangles, a plain polygon else.

- y runs upwards from the lowest point; mm throughout. Offsets of polygons come from a general geometry library.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property, lru_cache
from itertools import pairwise
from math import acos, asin, hypot, inf, pi, sin, sqrt

import shapely

Point = tuple[float, float]


@dataclass(frozen=True)
class Shape:
    """An outline: `points` anticlockwise with the lower left of their box at the origin, none for a circle."""

    kind: str
    points: tuple[Point, ...] = ()
    diameter: float = 0.0
    void: tuple[float, float, float, float] | None = None
    """x0, y0, x1, y1."""

    @cached_property
    def h(self) -> float:
        return self.diameter or max(y for _, y in self.points)

    @cached_property
    def A(self) -> float:
        return pi * self.diameter**2 / 4 if self.diameter else shoelace(self.points)[0]

    @cached_property
    def u(self) -> float:
        if self.diameter:
            return pi * self.diameter
        return sum(hypot(x1 - x0, y1 - y0) for (x0, y0), (x1, y1) in ring(self.points))

    @cached_property
    def A_c(self) -> float:
        if self.void is None:
            return self.A
        x0, y0, x1, y1 = self.void
        return self.A - (x1 - x0) * (y1 - y0)

    @cached_property
    def y_c(self) -> float:
        area, depth = self.block(self.h, hogging=False)
        assert abs(area - self.A_c) < 1e-6 * self.A_c
        return self.h - depth

    @cached_property
    def wall(self) -> float:
        if self.void is None:
            return inf
        x0, y0, x1, y1 = self.void
        width = max(x for x, _ in self.points)
        return min(x0, y0, width - x1, self.h - y1)

    @cached_property
    def least_dimension(self) -> float:
        """Least width over all directions; it is reached across an edge of the hull."""
        if self.diameter:
            return self.diameter
        hull = list(shapely.Polygon(self.points).convex_hull.exterior.coords)
        return min(
            max(abs((x - x0) * (y1 - y0) - (y - y0) * (x1 - x0)) for x, y in hull) / hypot(x1 - x0, y1 - y0)
            for (x0, y0), (x1, y1) in pairwise(hull)
        )

    def inside(self, t: float) -> tuple[float, float]:
        """Area and length of the line that runs t inside the outer boundary."""
        if self.diameter:
            return pi * (self.diameter - 2 * t) ** 2 / 4, pi * (self.diameter - 2 * t)
        moved = shapely.Polygon(self.points).buffer(-t, join_style="mitre", mitre_limit=100)
        return moved.area, moved.exterior.length

    def width(self, y: float) -> float:
        """Concrete width at a height that is no vertex's."""
        if self.diameter:
            return 2 * sqrt(max(0.0, y * (self.diameter - y)))
        left, right = self.reach(y)
        if self.void is not None and self.void[1] < y < self.void[3]:
            return right - left - (self.void[2] - self.void[0])
        return right - left

    def reach(self, y: float) -> Point:
        """Outermost left and right at a height that is no vertex's."""
        if self.diameter:
            half = self.width(y) / 2
            return self.diameter / 2 - half, self.diameter / 2 + half
        xs = [at_height(edge, y) for edge in ring(self.points) if spans(edge, y)]
        return min(xs), max(xs)

    def narrowest(self, y0: float, y1: float) -> float:
        """Least width between two heights; widths are linear between vertices."""
        levels = {y0, y1, *(y for _, y in self.points), *(self.void or ())[1::2]}
        inner = [y for y in levels if y0 < y < y1]
        near = [y + step for y in (y0, y1, *inner) for step in (-1e-7, 1e-7) if y0 < y + step < y1]
        return min(self.width(y) for y in near)

    def mean_width(self, y0: float, y1: float) -> float:
        upper, lower = self.block(self.h - y0, hogging=False)[0], self.block(self.h - y1, hogging=False)[0]
        return (upper - lower) / (y1 - y0)

    def narrows(self, hogging: bool) -> bool:
        """Whether the compression zone gets narrower towards its outer fibre."""
        if self.diameter:
            return True
        near, deeper = (1e-3, 2e-3) if hogging else (self.h - 1e-3, self.h - 2e-3)
        return self.width(near) < self.width(deeper) - 1e-9

    def block(self, a: float, hogging: bool) -> tuple[float, float]:
        """Concrete area from the compression face to the depth a, and the depth of its centroid."""
        if self.diameter:
            return segment(self.diameter, min(a, self.h))
        area, moment = cut(self.points, self.h, a, hogging)
        if self.void is not None:
            x0, y0, x1, y1 = self.void
            hole, taken = cut(((x0, y0), (x1, y0), (x1, y1), (x0, y1)), self.h, a, hogging)
            area, moment = area - hole, moment - taken
        return area, moment / area if area > 0 else 0.0

    def upright_share(self, inwards: float, y0: float, y1: float) -> float:
        """Vertical part of an outer leg, the mean between two heights (as a share of its length)."""
        if self.diameter:
            r, centre = self.diameter / 2 - inwards, self.diameter / 2
            t0, t1 = max((y0 - centre) / r, -1.0), min((y1 - centre) / r, 1.0)
            return ((asin(t1) + t1 * sqrt(1 - t1**2)) - (asin(t0) + t0 * sqrt(1 - t0**2))) / 2 / (t1 - t0)
        line = inset(self.points, inwards)
        y0, y1 = max(y0, min(y for _, y in line)), min(y1, max(y for _, y in line))
        levels = sorted({y0, y1, *(y for _, y in line if y0 < y < y1)})
        total = 0.0
        for low, high in pairwise(levels):
            middle = (low + high) / 2
            crossed = sorted((at_height(e, middle), e) for e in ring(line) if spans(e, middle))
            for _, ((xa, ya), (xb, yb)) in (crossed[0], crossed[-1]):
                total += (high - low) / 2 * abs(yb - ya) / hypot(xb - xa, yb - ya)
        return total / (y1 - y0)


def ring(points: tuple[Point, ...]) -> list[tuple[Point, Point]]:
    return list(zip(points, points[1:] + points[:1], strict=True))


def spans(edge: tuple[Point, Point], y: float) -> bool:
    return min(edge[0][1], edge[1][1]) < y < max(edge[0][1], edge[1][1])


def at_height(edge: tuple[Point, Point], y: float) -> float:
    (x0, y0), (x1, y1) = edge
    return x0 + (x1 - x0) * (y - y0) / (y1 - y0)


def shoelace(points: tuple[Point, ...]) -> tuple[float, float]:
    """Area, and first moment about y = 0."""
    area = moment = 0.0
    for (x0, y0), (x1, y1) in ring(points):
        cross = x0 * y1 - x1 * y0
        area += cross / 2
        moment += cross * (y0 + y1) / 6
    return area, moment


def cut(points: tuple[Point, ...], h: float, a: float, hogging: bool) -> tuple[float, float]:
    """Area and first moment about the compression face of what lies within the depth a of it."""
    line = [(x, y) for x, y in points] if hogging else [(-x, h - y) for x, y in points]
    kept: list[Point] = []
    for (x0, y0), (x1, y1) in ring(tuple(line)):
        if y0 <= a:
            kept.append((x0, y0))
        if (y0 < a < y1) or (y1 < a < y0):
            kept.append((x0 + (x1 - x0) * (a - y0) / (y1 - y0), a))
    if len(kept) < 3:
        return 0.0, 0.0
    area, moment = shoelace(tuple(kept))
    return abs(area), abs(moment)


@lru_cache(maxsize=4096)
def segment(diameter: float, a: float) -> tuple[float, float]:
    """Area of a circle's segment of height a, and the depth of its centroid."""
    r = diameter / 2
    half = acos(max(-1.0, min(1.0, 1 - a / r)))
    area = r * r * (half - sin(2 * half) / 2)
    return (area, r - 2 / 3 * (r * sin(half)) ** 3 / area) if area > 0 else (0.0, 0.0)


def inset(points: tuple[Point, ...], distance: float) -> tuple[Point, ...]:
    """The corners of the line that runs inside the outline at a distance, one for each corner."""
    moved = []
    for i, (x, y) in enumerate(points):
        (xa, ya), (xb, yb) = points[i - 1], points[(i + 1) % len(points)]
        u1, u2 = unit(x - xa, y - ya), unit(xb - x, yb - y)
        share = distance / (1 + u1[0] * u2[0] + u1[1] * u2[1])
        moved.append((x - share * (u1[1] + u2[1]), y + share * (u1[0] + u2[0])))
    return tuple(moved)


def unit(x: float, y: float) -> Point:
    return x / hypot(x, y), y / hypot(x, y)
