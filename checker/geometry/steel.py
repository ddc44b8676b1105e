"""What is measured on the placed bars: groups, centroids, halves, corners and gaps along the link.

- A bar belongs to the bottom or top group by its face; a corner bar or one of a ring by its height.
- Distances are in mm, areas in mm2; a_s is measured from the face of the group.
"""

from __future__ import annotations

from itertools import pairwise
from math import atan2, hypot, pi

from checker.geometry import polygons
from checker.geometry.bars import Bar, Cage
from checker.geometry.outline import Outline

RECTANGLE_CORNERS = ("bottom left", "bottom right", "top right", "top left")


def bottom_group(bars: tuple[Bar, ...], outline: Outline) -> tuple[Bar, ...]:
    """Return the bars of the bottom chord; one exactly at the centroid height belongs to neither."""
    middle = outline.centroid_height - 1e-9 * outline.height
    return tuple(b for b in bars if b.face == "bottom" or (b.face in ("corners", "round") and b.y < middle))


def top_group(bars: tuple[Bar, ...], outline: Outline) -> tuple[Bar, ...]:
    """Return the bars of the top chord; one exactly at the centroid height belongs to neither."""
    middle = outline.centroid_height + 1e-9 * outline.height
    return tuple(b for b in bars if b.face == "top" or (b.face in ("corners", "round") and b.y > middle))


def area(bars: tuple[Bar, ...]) -> float:
    """Return the area of some bars, mm2."""
    return sum((bar.area for bar in bars), 0.0)


def largest(bars: tuple[Bar, ...]) -> float:
    """Return the largest diameter, mm; 0 without bars."""
    return max((bar.diameter for bar in bars), default=0.0)


def a_s_bottom(group: tuple[Bar, ...], phi_long_max: float, cage: Cage) -> float:
    """Return the height of the bottom group's centroid; without a group, where a bar would stand."""
    if not group:
        return cage.axis(phi_long_max)
    if len({bar.y for bar in group}) == 1:
        return group[0].y
    return sum(bar.area * bar.y for bar in group) / area(group)


def a_s_top(group: tuple[Bar, ...], phi_long_max: float, cage: Cage, h: float) -> float:
    """Return the depth of the top group's centroid; without a group, where a bar would stand."""
    if not group:
        return cage.axis(phi_long_max)
    if len({bar.y for bar in group}) == 1:
        return h - group[0].y
    return sum(bar.area * (h - bar.y) for bar in group) / area(group)


def area_half_bottom(bars: tuple[Bar, ...], y_bottom: float, y_top: float) -> float:
    """Return the steel that counts to the bottom chord, shared by the lever rule between the chord levels.

    The rest counts to the top chord. Chords that don't lie one above the other share half and half.
    """
    if y_top <= y_bottom:
        return area(bars) / 2
    span = y_top - y_bottom
    return sum((bar.area * min(max((y_top - bar.y) / span, 0.0), 1.0) for bar in bars), 0.0)


def corner_bars(bars: tuple[Bar, ...], outline: Outline, cage: Cage) -> dict[int, list[Bar]]:
    """Return, for each convex corner of the outline, the bars that stand in it; empty for a circle."""
    if not outline.points:
        return {}
    corners = polygons.convex_corners(outline.points)
    return {i: [bar for _, bar in cage.in_corner(outline, i, bars)] for i in corners}


def corner_name(outline: Outline, i: int) -> str:
    """Return what a person calls corner i, a polygon's by its number and place in the file's coordinates."""
    if outline.shape in ("rectangle", "box"):
        return RECTANGLE_CORNERS[i]
    x, y = outline.points[i]
    return f"corner {i + 1} ({x + outline.origin[0]:.6g}, {y + outline.origin[1]:.6g})"


def c_axis(bars: tuple[Bar, ...], outline: Outline, cage: Cage, in_corners: dict[int, list[Bar]]) -> float:
    """Return the largest distance from the outer face to the centre of a corner bar, mm (6.3.2(1)).

    Circle: of any bar that holds the link. Without a bar in a corner: the smallest of any bar; without bars:
    where the smallest could stand.
    """
    if outline.circle_diameter is not None:
        distances = [d for bar in bars if (d := outline.distance_inside((bar.x, bar.y))) <= _reach(bar, cage)]
    else:
        held = [bar for group in in_corners.values() for bar in group]
        distances = [outline.distance_inside((bar.x, bar.y)) for bar in held]
    if distances:
        return max(distances)
    everywhere = (outline.distance_inside((bar.x, bar.y)) for bar in bars)
    return min(everywhere, default=cage.axis(0.0))


def gap_bars(bars: tuple[Bar, ...], outline: Outline, cage: Cage) -> float:
    """Return the largest distance between neighbouring bars along the centre-line of the link, mm (9.2.3(4))."""
    return widest_gap(bars, outline, cage)[0]


def widest_gap(bars: tuple[Bar, ...], outline: Outline, cage: Cage) -> tuple[float, float]:
    """Return the widest gap between bars along the centre-line of the link, and where its middle lies along it, mm.

    Measured anticlockwise from the first corner, on a circle from its right. A bar counts on each leg it stands
    at, so that a corner bar is measured from its own centre either way.
    """
    inwards = cage.cover + cage.phi_link / 2
    if outline.circle_diameter is not None:
        radius = outline.circle_diameter / 2
        length = 2 * pi * (radius - inwards)
        feet = [
            (atan2(bar.y - radius, bar.x - radius) % (2 * pi)) * (radius - inwards)
            for bar in bars
            if outline.distance_inside((bar.x, bar.y)) <= _reach(bar, cage)
        ]
    else:
        feet, length = _feet(bars, outline, cage)
    if not feet:
        return length, 0.0
    feet.sort()
    width, start = max((b - a, a) for a, b in pairwise((*feet, feet[0] + length)))
    return width, (start + width / 2) % length


def _reach(bar: Bar, cage: Cage) -> float:
    """How far from the outer face a bar may stand and still count as one along the link.

    A bar of an inner layer counts where it touches a leg all the same, as at the ends of its row.
    """
    touching = cage.cover + cage.phi_link + bar.diameter
    return 1.5 * touching if bar.layer == 1 else touching


def _feet(bars: tuple[Bar, ...], outline: Outline, cage: Cage) -> tuple[list[float], float]:
    """Return each bar's places along the link, one for each leg it stands at, and the link's length."""
    line = polygons.inset(outline.points, cage.cover + cage.phi_link / 2)
    feet: list[float] = []
    passed = 0.0
    for i, (x0, y0) in enumerate(line):
        ux, uy = polygons.direction(outline.points, i)
        ox, oy = outline.points[i]
        x1, y1 = line[(i + 1) % len(line)]
        length = hypot(x1 - x0, y1 - y0)
        for bar in bars:
            off = ux * (bar.y - oy) - uy * (bar.x - ox)
            along = ux * (bar.x - x0) + uy * (bar.y - y0)
            if 0 <= off <= _reach(bar, cage) and -cage.cover <= along <= length + cage.cover:
                feet.append(passed + min(max(along, 0.0), length))
        passed += length
    return feet, passed
