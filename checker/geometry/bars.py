"""Puts every declared bar at its place in the cross-section.

- A bar stands inside the link: its centre is cover + link diameter + half its own diameter from the outer
  face.
- Bottom and top rows run between the two corners of that flat edge, side rows between the corner bars of
  that side.
- Several groups on one face and layer share one evenly spread row; the group named first takes the outermost
  places.
- A further layer keeps the clear distance of EN 1992-1-1, 8.2(2) from the layer outside it.
"""

from __future__ import annotations

from collections.abc import Iterable
from math import cos, hypot, pi, sin
from typing import TYPE_CHECKING, NamedTuple

from checker.errors import Fault, InputFaults
from checker.geometry import polygons
from checker.geometry.outline import Outline
from checker.geometry.polygons import Point

if TYPE_CHECKING:
    from checker.declared.model import BarGroup, Design

SIDES = ("left", "right")
FLAT = ("bottom", "top", *SIDES)


class Bar(NamedTuple):
    """One bar: centre (mm from the lower left of the bounding box), diameter in mm, area in mm2."""

    x: float
    y: float
    diameter: float
    area: float
    face: str
    mark: str
    group_index: int
    """Number of its group in the design, from 0."""
    layer: int = 1


class Cage(NamedTuple):
    """What the links and the cover fix for every bar, mm."""

    cover: float
    phi_link: float
    """Diameter of the largest perimeter link; 0 when there is none."""

    def axis(self, diameter: float) -> float:
        """Distance in mm from the outer face to the centre of a bar that touches the link."""
        return self.cover + self.phi_link + diameter / 2

    def in_corner(self, outline: Outline, i: int, bars: Iterable[Bar]) -> list[tuple[float, Bar]]:
        """Return the bars that stand in corner i of the link, each with its distance from its ideal place.

        Ideal is a bar that touches both legs. Half its diameter and two link diameters off that still counts:
        two link diameters are the inner radius of the tightest permitted bend (8.3, mandrel of 4 diameters).
        """
        x, y = outline.points[i]
        mitre_x, mitre_y = polygons.inset_corner(outline.points, i, 1.0, 1.0)
        found = []
        for bar in bars:
            axis = self.axis(bar.diameter)
            off = hypot(bar.x - x - axis * (mitre_x - x), bar.y - y - axis * (mitre_y - y))
            if off <= bar.diameter / 2 + 2 * self.phi_link + 1e-6:
                found.append((off, bar))
        return found


def cage_of(design: Design) -> Cage:
    """Return the cover and the largest perimeter link of a design."""
    perimeter = [links.diameter.value for links in design.links if links.where == "perimeter"]
    return Cage(design.cover.value, max(perimeter, default=0.0))


def place_bars(design: Design, outline: Outline) -> tuple[Bar, ...]:
    """Return every bar of a design in the order of its groups.

    Raises `InputFaults` for a face the outline doesn't have and for a layer with none outside it.
    """
    return _Placing(design, outline).all_bars()


class _Placing:
    """One run of `place_bars`: what is placed so far, and what can't be."""

    def __init__(self, design: Design, outline: Outline) -> None:
        self.design = design
        self.outline = outline
        self.cage = cage_of(design)
        self.placed: dict[int, list[Bar]] = {}
        self.faults: list[Fault] = []

    def all_bars(self) -> tuple[Bar, ...]:
        """Place rows of one face and layer together; the sides last, as they stand between corner bars."""
        rows: dict[tuple[str, int], list[int]] = {}
        for index, group in enumerate(self.design.bars):
            if group.at:
                left, low = self.outline.origin
                self._put(index, ((x - left, y - low) for x, y in group.at))
            else:
                rows.setdefault((group.face, group.layer), []).append(index)
        for (face, layer), members in sorted(rows.items(), key=lambda row: row[0][0] in SIDES):
            fault = self._missing(face, layer)
            if fault:
                group = self.design.bars[members[0]]
                self.faults.append(Fault(self.design.file, *group.place, fault))
            elif face in FLAT:
                self._row(face, layer, members)
            else:
                for index in members:
                    place = self._corners if face == "corners" else self._round
                    self._put(index, place(self.design.bars[index]))
        if self.faults:
            raise InputFaults(self.faults)
        return tuple(bar for index in range(len(self.design.bars)) for bar in self.placed[index])

    def _missing(self, face: str, layer: int) -> str | None:
        points = self.outline.points
        if face in FLAT and (not points or polygons.flat_edge(points, face) is None):
            shape = "bottom" if face == "bottom" else "top" if face == "top" else f"{face} side"
            return f"this outline has no flat {shape}; use at: or face: round"
        if face == "corners" and not points:
            return "a circle has no corners; use at: or face: round"
        if layer > 1 and not self._largest(face, layer - 1):
            return f"layer {layer} needs a layer {layer - 1} on the same face ({face})"
        return None

    def _largest(self, face: str, layer: int) -> float:
        """Largest diameter of a face's layer, 0 when there is none."""
        same = (g.size for g in self.design.bars if (g.face, g.layer) == (face, layer))
        return max(same, default=0.0)

    def _depth(self, face: str, layer: int, diameter: float) -> float:
        """Distance from the outer face to the centre of a bar in the given layer."""
        aggregate = self.design.aggregate
        least = max(25.0 if aggregate is None else aggregate.value + 5, 20.0)
        reached = self.cage.cover + self.cage.phi_link
        for outer in range(1, layer):
            below, above = self._largest(face, outer), self._largest(face, outer + 1)
            reached += below + max(below, above, least)
        return reached + diameter / 2

    def _put(self, index: int, places: Iterable[Point]) -> None:
        group = self.design.bars[index]
        self.placed.setdefault(index, []).extend(_bar(group, index, place) for place in places)

    def _row(self, face: str, layer: int, members: list[int]) -> None:
        """Spread the bars of one face and layer evenly along its edge."""
        points = self.outline.points
        edge = polygons.flat_edge(points, face)
        assert edge is not None  # `_missing` has looked
        groups = self.design.bars
        row = _spread(members, [groups[index].count for index in members])
        diameters = [groups[index].size for index in row]
        ux, uy = polygons.direction(points, edge)
        start = self._end(face, layer, edge, 0, diameters[0])
        finish = self._end(face, layer, edge, 1, diameters[-1])
        for position, (index, diameter) in enumerate(zip(row, diameters, strict=True)):
            if face in SIDES:
                share = (position + 1) / (len(row) + 1)
            else:
                share = position / (len(row) - 1) if len(row) > 1 else 0.5
            along, inwards = start + (finish - start) * share, self._depth(face, layer, diameter)
            x, y = points[edge]
            self._put(index, [(x + ux * along - uy * inwards, y + uy * along + ux * inwards)])

    def _end(self, face: str, layer: int, edge: int, end: int, diameter: float) -> float:
        """Where a row begins (end 0) or finishes (end 1): mm along its edge from the edge's first corner."""
        points = self.outline.points
        corner = (edge + end) % len(points)
        beside, inwards = self.cage.axis(diameter), self._depth(face, layer, diameter)
        there = self._corner_bar(corner) if face in SIDES else None
        if there is None:
            inwards = beside if face in SIDES else inwards
            before, after = (beside, inwards) if end == 0 else (inwards, beside)
            there = polygons.inset_corner(points, corner, before, after)
        ux, uy = polygons.direction(points, edge)
        return (there[0] - points[edge][0]) * ux + (there[1] - points[edge][1]) * uy

    def _corner_bar(self, corner: int) -> Point | None:
        """Centre of the bar that fills a corner, the nearest to its ideal place; None when there is none."""
        placed = (bar for bars in self.placed.values() for bar in bars)
        found = self.cage.in_corner(self.outline, corner, placed)
        if not found:
            return None
        _, bar = min(found, key=lambda pair: pair[0])
        return bar.x, bar.y

    def _corners(self, group: BarGroup) -> list[Point]:
        distance = self._depth("corners", group.layer, group.size)
        points = self.outline.points
        return [polygons.inset_corner(points, i, distance, distance) for i in polygons.convex_corners(points)]

    def _round(self, group: BarGroup) -> list[Point]:
        """Spread a group evenly along the inset outline from its lowest point (polygon: its first corner)."""
        distance = self._depth("round", group.layer, group.size)
        if self.outline.circle_diameter is not None:
            r = self.outline.circle_diameter / 2
            angles = (2 * pi * k / group.count - pi / 2 for k in range(group.count))
            return [(r + (r - distance) * cos(a), r + (r - distance) * sin(a)) for a in angles]
        line = polygons.inset(self.outline.points, distance)
        length = polygons.perimeter(line)
        return [_along(line, length * k / group.count) for k in range(group.count)]


def _bar(group: BarGroup, index: int, place: Point) -> Bar:
    diameter = group.size
    area = pi * diameter**2 / 4
    return Bar(place[0], place[1], diameter, area, group.face, group.mark, index, group.layer)


def _spread(members: list[int], counts: list[int]) -> list[int]:
    """Return which group each bar of a row belongs to, end to end, as symmetrically as it goes.

    The first group takes the outermost pairs, the next the pairs inside them; an odd bar goes to the middle.
    """
    outside: list[int] = []
    odd: list[int] = []
    for index, count in zip(members, counts, strict=True):
        outside += [index] * (count // 2)
        odd += [index] * (count % 2)
    return outside + odd + outside[::-1]


def _along(line: tuple[Point, ...], distance: float) -> Point:
    """Return the point at a distance along a closed line from its first corner."""
    for i, (x, y) in enumerate(line):
        x1, y1 = line[(i + 1) % len(line)]
        length = hypot(x1 - x, y1 - y)
        if distance <= length or i == len(line) - 1:
            share = min(distance / length, 1.0)
            return x + (x1 - x) * share, y + (y1 - y) * share
        distance -= length
    raise ValueError("a closed line needs corners")
