"""The outline of a cross-section: rectangle, box, circle, polygon, or a web with flanges, and what is measured on it.

- x runs to the right and y upwards from the lower left corner of the bounding box; mm throughout.
- Area A and perimeter u are those of the outer boundary, a void included (EN 1992-1-1, 6.3.2(1)).
- The width is kept as strips, linear in height: exact for straight edges. A circle has 24 strips at
  cosine-spaced heights, each with the area and first moment of its slice of the circle, so the area of a
  block is exact at their borders and within 2e-5 of the whole area between them.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from itertools import pairwise
from math import cos, hypot, inf, pi, sin, sqrt
from typing import TYPE_CHECKING

from checker.declared.flanges import FLANGED, flanged_sizes, outline_points
from checker.geometry import polygons
from checker.geometry.polygons import Point, Strip

if TYPE_CHECKING:
    from checker.declared.model import Section

CIRCLE_STRIPS = 24
"""Even, so that one border lies at mid-height."""


@dataclass(frozen=True, slots=True)
class Outline:
    """One cross-section's boundary. Make it by `rectangle`, `box`, `circle`, `polygon` or `outline_of`."""

    shape: str
    points: tuple[Point, ...]
    """Anticlockwise; empty for a circle."""
    width: float
    height: float
    strips: tuple[Strip, ...]
    """Concrete width (void excluded) from the bottom upwards."""
    circle_diameter: float | None = None
    void: tuple[float, float, float, float] | None = None
    """(x0, y0, x1, y1) of a box's void."""
    origin: Point = (0.0, 0.0)
    """Lower left corner of the bounding box in the coordinates of the file."""

    @property
    def area(self) -> float:
        """A in mm2, inside the outer boundary."""
        if self.circle_diameter is not None:
            return pi * self.circle_diameter**2 / 4
        return polygons.area(self.points)

    @property
    def perimeter(self) -> float:
        """u in mm, of the outer boundary."""
        if self.circle_diameter is not None:
            return pi * self.circle_diameter
        return polygons.perimeter(self.points)

    @property
    def kappa(self) -> float:
        """Sum of tan(phi/2) over the turning angles of the boundary: 4 for a rectangle, pi for a circle."""
        return pi if self.circle_diameter is not None else polygons.turning_sum(self.points)

    @property
    def concrete_area(self) -> float:
        """A_c in mm2, the void excluded."""
        if self.void is None:
            return self.area
        x0, y0, x1, y1 = self.void
        return self.area - (x1 - x0) * (y1 - y0)

    @property
    def centroid_height(self) -> float:
        """y_c in mm, of the concrete above the bottom."""
        if self.shape in ("rectangle", "circle"):
            return self.height / 2
        total = moment = 0.0
        for y0, y1, w0, w1 in self.strips:
            total += (y1 - y0) * (w0 + w1) / 2
            moment += (y1 - y0) * (y0 * (w0 + w1) / 2 + (y1 - y0) * (w0 + 2 * w1) / 6)
        return moment / total

    @property
    def least_dimension(self) -> float:
        """Least width over all directions, mm (9.2.3(3): the lesser dimension of the cross-section)."""
        if self.circle_diameter is not None or self.shape in ("rectangle", "box"):
            return min(self.width, self.height)
        return polygons.least_hull_width(self.points)

    @property
    def reentrant_corners(self) -> int:
        """How many corners point inwards; a straight corner is none."""
        return sum(
            1 for i in range(len(self.points)) if polygons.turning(self.points, i)[0] < -polygons.STRAIGHT
        )

    @property
    def thickness(self) -> float:
        """Least distance across the section between outer sides that face each other, mm."""
        if self.circle_diameter is not None or self.shape in ("rectangle", "box"):
            return min(self.width, self.height)
        return polygons.least_thickness(self.points)

    @property
    def least_wall(self) -> float:
        """Thinnest wall of a box, mm; infinite where there is no void."""
        if self.void is None:
            return inf
        x0, y0, x1, y1 = self.void
        return min(x0, y0, self.width - x1, self.height - y1)

    @property
    def corners(self) -> tuple[Point, ...]:
        """The corner points, anticlockwise; none on a circle."""
        return self.points

    def A_k(self, t: float) -> float:
        """Area in mm2 inside the centre-line of a wall of thickness t mm along the boundary (6.3.2(1))."""
        return self.area - self.perimeter * t / 2 + self.kappa * t**2 / 4

    def u_k(self, t: float) -> float:
        """Length in mm of the centre-line of a wall of thickness t mm along the boundary (6.3.2(1))."""
        return self.perimeter - self.kappa * t

    def width_at(self, y: float) -> float:
        """Concrete width in mm at height y; the smaller one where the width jumps, 0 outside."""
        if not 0 <= y <= self.height:
            return 0.0
        if self.circle_diameter is not None:
            return 2 * sqrt(y * (self.height - y))
        return min(_strip_width(strip, y) for strip in self.strips if strip[0] <= y <= strip[1])

    def least_width(self, y0: float, y1: float) -> float:
        """Least concrete width in mm between heights y0 < y1; a jump at an end counts inwards only."""
        if self.circle_diameter is not None or y0 >= y1:
            return min(self.width_at(y0), self.width_at(y1))
        widths = [
            _strip_width(strip, y)
            for strip in self.strips
            if strip[0] < y1 and strip[1] > y0
            for y in (max(strip[0], y0), min(strip[1], y1))
        ]
        return min(widths, default=0.0)

    def mean_width(self, y0: float, y1: float) -> float:
        """Mean concrete width in mm between the heights y0 < y1."""
        parts = []
        for strip in self.strips:
            low, high = max(strip[0], y0), min(strip[1], y1)
            if low < high:
                parts.append((high - low, (_strip_width(strip, low) + _strip_width(strip, high)) / 2))
        if len({width for _, width in parts}) == 1:
            return parts[0][1]
        return sum(length * width for length, width in parts) / (y1 - y0)

    def profile(self, from_top: bool) -> tuple[Strip, ...]:
        """Return the strips with levels as depths from the top (or from the bottom), in that order."""
        if not from_top:
            return self.strips
        h = self.height
        return tuple((h - y1, h - y0, w1, w0) for y0, y1, w0, w1 in reversed(self.strips))

    def distance_inside(self, point: Point) -> float:
        """Distance in mm from a point inside to the outer boundary."""
        if self.circle_diameter is not None:
            r = self.circle_diameter / 2
            return r - hypot(point[0] - r, point[1] - r)
        return polygons.distance_inside(self.points, point)

    def extent_at(self, y: float) -> tuple[float, float]:
        """Outermost left and right x in mm at height y."""
        if self.circle_diameter is not None:
            half = self.width_at(y) / 2
            return self.width / 2 - half, self.width / 2 + half
        return polygons.extent_at(self.points, y)


def _strip_width(strip: Strip, y: float) -> float:
    y0, y1, w0, w1 = strip
    if w0 == w1:
        return w0
    return w0 + (w1 - w0) * ((y - y0) / (y1 - y0))


def rectangle(b: float, h: float) -> Outline:
    """Return a solid rectangle of width b and height h, mm."""
    return Outline("rectangle", _rectangle_points(b, h), b, h, ((0.0, h, b, b),))


def box(b: float, h: float, side: float, top: float, bottom: float) -> Outline:
    """Return a rectangle b x h with one rectangular void; `side`, `top`, `bottom` are its walls, mm."""
    strips = (
        (0.0, bottom, b, b),
        (bottom, h - top, 2 * side, 2 * side),
        (h - top, h, b, b),
    )
    void = (side, bottom, b - side, h - top)
    return Outline("box", _rectangle_points(b, h), b, h, strips, void=void)


def circle(diameter: float) -> Outline:
    """Return a solid circle, mm."""
    return Outline("circle", (), diameter, diameter, _circle_strips(diameter), circle_diameter=diameter)


def polygon(points: tuple[Point, ...]) -> Outline:
    """Return a solid simple polygon from its corners, anticlockwise, mm, in any coordinates."""
    left, low = min(x for x, _ in points), min(y for _, y in points)
    shifted = tuple((x - left, y - low) for x, y in points)
    width, height = max(x for x, _ in shifted), max(y for _, y in shifted)
    return Outline("polygon", shifted, width, height, polygons.strips(shifted), origin=(left, low))


def outline_of(section: Section) -> Outline:
    """Return the outline of a declared section."""
    size = {name: number.value for name, number in section.sizes.items()}
    if section.shape == "rectangle":
        return rectangle(size["b"], size["h"])
    if section.shape == "box":
        return box(size["b"], size["h"], size["wall_side"], size["wall_top"], size["wall_bottom"])
    if section.shape == "circle":
        return circle(size["diameter"])
    if section.shape in FLANGED:
        return flanged(section)
    return polygon(section.points)


def flanged(section: Section, b_most: float = inf) -> Outline:
    """Return a tee, ell or i, its flanges no wider than `b_most` mm (by their effective width, say)."""
    points = outline_points(flanged_sizes(section, b_most))
    return replace(polygon(points), shape=section.shape)


def web_of(section: Section, outline: Outline) -> Outline:
    """Return what the perimeter link follows: of a tee, ell or i the web, else the whole outline."""
    if section.shape not in FLANGED:
        return outline
    sizes = flanged_sizes(section)
    return replace(rectangle(sizes.b_w, sizes.h), origin=(sizes.web_left, 0.0))


def _rectangle_points(b: float, h: float) -> tuple[Point, ...]:
    return (0.0, 0.0), (b, 0.0), (b, h), (0.0, h)


def _circle_strips(diameter: float) -> tuple[Strip, ...]:
    """Return strips that each have the area and the first moment of their slice of the circle."""
    r = diameter / 2
    levels = []
    for k in range(CIRCLE_STRIPS + 1):
        angle = pi * k / CIRCLE_STRIPS
        area = r * r * (angle - sin(angle) * cos(angle))
        # Area below y = r (1 - cos angle), and its first moment about y = 0, both closed forms.
        levels.append((r * (1 - cos(angle)), area, r * area - 2 / 3 * (r * sin(angle)) ** 3))
    strips = []
    for (y0, area0, moment0), (y1, area1, moment1) in pairwise(levels):
        depth, area = y1 - y0, area1 - area0
        moment = moment1 - moment0 - y0 * area
        w0 = 4 * area / depth - 6 * moment / depth**2
        w1 = 6 * moment / depth**2 - 2 * area / depth
        strips.append((y0, y1, w0, w1))
    return tuple(strips)
