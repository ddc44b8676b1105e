"""What is measured on the links: areas by length, legs, spacings, and how much of a leg acts vertically.

- Areas by length are in mm2/mm, spacings in mm and infinite where there is no such link.
- A perimeter link has two outer legs; the rest of its legs, and all of an inner link's, stand upright
  between them. Links of flanges count apart.
"""

from __future__ import annotations

from collections.abc import Iterable
from itertools import pairwise
from math import asin, cos, hypot, inf, pi, sin, sqrt
from typing import TYPE_CHECKING

from checker.geometry import polygons
from checker.geometry.bars import Cage
from checker.geometry.facts import is_upright
from checker.geometry.outline import Outline

if TYPE_CHECKING:
    from checker.declared.model import Design, LinkSet

SAME_ANGLE = 1e-9


def leg_area_by_length(links: LinkSet) -> float:
    """Return the area of one leg by length of the member, mm2/mm."""
    return pi * links.diameter.value**2 / 4 / links.spacing.value


def counted_leg(design: Design, links: LinkSet) -> float:
    """Return the area of one leg by length as it counts, mm2/mm: a set of another grade by its share of f_ywk."""
    grade = 1.0 if links.f_ywk is None else links.f_ywk.value / design.materials.f_ywk.value
    return leg_area_by_length(links) * grade


def A_sw_s_all(design: Design) -> float:
    """Return the area of all legs of all links by length, mm2/mm."""
    return sum((links.legs * counted_leg(design, links) for links in web_links(design)), 0.0)


def A_leg_s(design: Design) -> float:
    """Return the area of one leg of the upright perimeter links by length, mm2/mm (for torsion)."""
    upright = (links for links in perimeter_links(design) if is_upright(links))
    return sum((counted_leg(design, links) for links in upright), 0.0)


def n_legs(design: Design) -> int:
    """Return the number of legs of all sets."""
    return sum(links.legs for links in web_links(design))


def perimeter_links(design: Design) -> list[LinkSet]:
    """Return the sets that enclose the section."""
    return [links for links in design.links if links.where == "perimeter"]


def web_links(design: Design) -> list[LinkSet]:
    """Return the sets that carry shear: all but those of flanges, which carry the flange's own torsion."""
    return [links for links in design.links if links.where != "flange"]


def largest_spacing(links: Iterable[LinkSet]) -> float:
    """Return the largest spacing of some sets, mm; infinite without any."""
    return max((one.spacing.value for one in links), default=inf)


def common_angle(design: Design) -> float:
    """Return the angle of all links to the member's axis in rad; pi/2 when they differ or there are none."""
    angles = [links.angle for links in web_links(design)]
    if angles and max(angles) - min(angles) <= SAME_ANGLE:
        return angles[0]
    return pi / 2


def S_sin(design: Design, eta_leg: float) -> float:
    """Return the sum of leg areas by length times sin(alpha), mm2/mm (6.13); outer legs by `eta_leg`."""
    total = 0.0
    for links in web_links(design):
        outer = 2 if links.where == "perimeter" else 0
        total += (links.legs - outer + outer * eta_leg) * counted_leg(design, links) * sin(links.angle)
    return total


def S_cos(design: Design) -> float:
    """Return the sum of leg areas by length times cos(alpha), mm2/mm (6.13); upright links give exactly 0."""
    inclined = (links for links in web_links(design) if abs(links.angle - pi / 2) > SAME_ANGLE)
    return sum((links.legs * counted_leg(design, links) * cos(links.angle) for links in inclined), 0.0)


def leg_gap(design: Design, outline: Outline, cage: Cage) -> float:
    """Return the largest horizontal distance between neighbouring legs at mid-height, mm (9.2.2(8)).

    The outer legs stand in the cover, the others evenly between them, or where `at` says. In a box each side
    wall is looked at by itself, with half of the other legs: from its outer leg to the cover of its inner face.
    """
    inner = n_legs(design) - 2 * len(perimeter_links(design))
    edge = cage.cover + cage.phi_link / 2
    if outline.void is not None:
        return max(outline.void[0] - 2 * edge, 0.0) / max(inner // 2, 1)
    left, right = outline.extent_at(outline.height / 2)
    places = [x for links in web_links(design) for x in links.at]
    if places and len(places) == inner:
        line = sorted((left + edge, *places, right - edge))
        return max(b - a for a, b in pairwise(line))
    return max(right - left - 2 * edge, 0.0) / (inner + 1)


def eta_leg(outline: Outline, cage: Cage, y0: float, y1: float) -> float:
    """Return the vertical share of an outer leg, the mean over the heights y0 < y1 between the chords.

    1 for upright legs. Circle: mean of sqrt(1 - (y/r)^2), in closed form, r the radius of the link's
    centre-line. Polygon: mean of the legs' vertical direction cosine, of the left and the right chain.
    """
    inwards = cage.cover + cage.phi_link / 2
    if outline.circle_diameter is not None:
        centre, r = outline.height / 2, outline.height / 2 - inwards
        t0, t1 = max((y0 - centre) / r, -1.0), min((y1 - centre) / r, 1.0)
        if t0 >= t1:  # no link between the chords: bars placed outside it
            return 0.0
        return (_under_arc(t1) - _under_arc(t0)) / (t1 - t0)
    if outline.shape in ("rectangle", "box"):
        return 1.0
    line = polygons.inset(outline.points, inwards)
    edges = [edge for edge in zip(line, line[1:] + line[:1], strict=True) if edge[0][1] != edge[1][1]]
    levels = sorted({y0, y1, *(y for _, y in line if y0 < y < y1)})
    parts: list[tuple[float, float]] = []
    for low, high in pairwise(levels):
        middle = (low + high) / 2
        crossing = sorted(_crossing(edge, middle) for edge in edges if _spans(edge, middle))
        if crossing:
            parts.append((high - low, (crossing[0][1] + crossing[-1][1]) / 2))
    if all(cosine == 1.0 for _, cosine in parts):
        return 1.0
    return sum(length * cosine for length, cosine in parts) / sum(length for length, _ in parts)


def _under_arc(t: float) -> float:
    """Integral of sqrt(1 - t^2) from 0 to t."""
    return (asin(t) + t * sqrt(1 - t * t)) / 2


def _spans(edge: tuple[polygons.Point, polygons.Point], y: float) -> bool:
    return min(edge[0][1], edge[1][1]) <= y <= max(edge[0][1], edge[1][1])


def _crossing(edge: tuple[polygons.Point, polygons.Point], y: float) -> tuple[float, float]:
    """Return where an edge crosses height y, and its vertical direction cosine."""
    (x0, y0), (x1, y1) = edge
    return x0 + (x1 - x0) * (y - y0) / (y1 - y0), abs(y1 - y0) / hypot(x1 - x0, y1 - y0)
