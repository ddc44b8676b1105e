"""Where on the section a finding has its place: the corner, the leg, the bar or the gap it is about (mm)."""

from __future__ import annotations

from collections.abc import Callable
from functools import cached_property
from itertools import pairwise
from math import cos, hypot, pi, sin
from typing import TYPE_CHECKING

from checker.geometry import details, polygons, steel
from checker.geometry.bars import Bar, Cage, cage_of
from checker.geometry.outline import Outline, web_of

if TYPE_CHECKING:
    from checker.declared.model import Design
    from checker.geometry.measure import Measured
    from checker.review.findings import Finding

Point = tuple[float, float]


class Places:
    """The section of one member, asked where its findings lie."""

    def __init__(self, design: Design, measured: Measured) -> None:
        self.design = design
        self.measured = measured
        self.cage: Cage = cage_of(design)
        self.web: Outline = web_of(design.section, measured.outline)
        self.shift = self.web.origin[0] if self.web is not measured.outline else 0.0
        self.bars = measured.bars
        self.inwards = self.cage.cover + self.cage.phi_link / 2

    def of(self, finding: Finding) -> Point | None:
        """The place of a finding; None where it is about no part of the section."""
        rule, quantity = finding.draft.rule, finding.draft.quantity
        find = _BY_RULE.get(rule) or _BY_RULE.get(rule.split(".")[0]) or _BY_QUANTITY.get(quantity)
        return find(self, finding) if find is not None else None

    @cached_property
    def web_bars(self) -> tuple[Bar, ...]:
        """The bars within the web, in its own coordinates, as they are measured."""
        own = (bar._replace(x=bar.x - self.shift) for bar in self.bars)
        return tuple(bar for bar in own if self.web is self.measured.outline or 0 <= bar.x <= self.web.width)

    def link_line(self) -> tuple[Point, ...]:
        """The centre-line of the perimeter link; a circle as 48 points."""
        return self.wall_line(self.inwards)

    def wall_line(self, t: float) -> tuple[Point, ...]:
        """The outline moved inwards by some part of the equivalent wall."""
        if self.web.circle_diameter is not None:
            r = self.web.circle_diameter / 2
            steps = [2 * pi * k / 48 for k in range(48)]
            return tuple((r + (r - t) * cos(a), r + (r - t) * sin(a)) for a in steps)
        return tuple((x + self.shift, y) for x, y in polygons.inset(self.web.points, t))

    def hook(self) -> Point:
        """Where the perimeter link ends: its upper left corner."""
        return max(self.link_line(), key=lambda point: point[1] - point[0])

    def leg(self) -> Point:
        """The middle of the right leg."""
        level = self.web.height / 2
        right = self.web.extent_at(level)[1]
        return right - self.inwards + self.shift, level

    def corner_without_bar(self) -> Point:
        for i, found in steel.corner_bars(self.web_bars, self.web, self.cage).items():
            if not found:
                line = self.link_line()
                corner = self.web.points[i]
                return min(line, key=lambda p: hypot(p[0] - corner[0] - self.shift, p[1] - corner[1]))
        return self.hook()

    def thinnest_corner_bar(self) -> Point:
        held = [
            max(f, key=lambda b: b.diameter)
            for f in steel.corner_bars(self.web_bars, self.web, self.cage).values()
            if f
        ]
        if not held:
            return self.hook()
        bar = min(held, key=lambda b: b.diameter)
        return bar.x + self.shift, bar.y

    def widest_gap(self) -> Point:
        """The middle, along the link, of the widest gap between bars."""
        _, along = steel.widest_gap(self.web_bars, self.web, self.cage)
        if self.web.circle_diameter is not None:
            centre = self.web.circle_diameter / 2
            r = centre - self.inwards
            return centre + r * cos(along / r), centre + r * sin(along / r)
        line = self.link_line()
        for a, b in pairwise((*line, line[0])):
            length = hypot(b[0] - a[0], b[1] - a[1])
            if along <= length:
                return a[0] + along / length * (b[0] - a[0]), a[1] + along / length * (b[1] - a[1])
            along -= length
        return line[0]

    def nearest_pair(self) -> Point:
        """Between the two bars that stand nearest for their size."""
        found = details.nearest_pair(self.web_bars)
        if found is None:
            return self.leg()
        a, b = found
        return (a.x + b.x) / 2 + self.shift, (a.y + b.y) / 2

    def chord(self, finding: Finding, *, tension: bool) -> Point:
        """The middle of the tension or the compression row of the finding's first case."""
        names = finding.draft.cases
        case = next((case for case in self.design.cases if case.name in names), self.design.cases[0])
        at_top = (case.M_Ed.value < 0) == tension
        inputs = self.measured.inputs
        h = self.measured.outline.height
        level = h - inputs["a_s_top"] if at_top else inputs["a_s_bottom"]
        return self.web.width / 2 + self.shift, level

    def largest_bar(self) -> Point:
        bar = max(self.bars, key=lambda b: (b.diameter, -b.y, -b.x))
        return bar.x, bar.y

    def bundle(self) -> Point:
        bundled = [bar for bar in self.bars if self.design.bars[bar.group_index].bundle > 1]
        bar = max(bundled, key=lambda b: b.diameter) if bundled else self.bars[0]
        return bar.x, bar.y

    def cover(self) -> Point:
        return self.web.width * 0.25 + self.shift, self.cage.cover / 2

    def side(self) -> Point:
        """The middle of the side with less steel along it."""
        left = sum(bar.area for bar in self.bars if bar.face == "left")
        right = sum(bar.area for bar in self.bars if bar.face == "right")
        level = self.web.height / 2
        low, high = self.web.extent_at(level)
        axis = self.cage.axis(16.0)
        return (low + axis if left <= right else high - axis) + self.shift, level

    def between_legs(self) -> Point:
        return self.web.width / 2 + self.shift, self.web.height / 2

    def wall(self) -> Point:
        """The centre-line of the equivalent wall, at its upper right."""
        return max(
            self.wall_line(max(self.measured.inputs["c_axis"], 1.0)), key=lambda point: point[0] + point[1]
        )


_LEG = ("spacing-shear", "spacing-perimeter", "spacing-least-dimension", "spacing-strict", "minimum", "all-legs",
        "perimeter-leg", "mandrel", "share-enclosing", "effective-cap")  # fmt: skip
_END = ("perimeter", "closed", "upright", "hook-tails", "hooks-into-core", "lap-leg", "lap-length")

_BY_RULE: dict[str, Callable[[Places, Finding], Point]] = {
    **{f"links.{name}": lambda places, _: places.leg() for name in _LEG},
    **{f"links.{name}": lambda places, _: places.hook() for name in _END},
    "links.leg-spacing": lambda places, _: places.between_legs(),
    "links.inner-bends": lambda places, _: places.between_legs(),
    "bars.corner": lambda places, _: places.corner_without_bar(),
    "bars.corner-size": lambda places, _: places.thinnest_corner_bar(),
    "bars.perimeter-gap": lambda places, _: places.widest_gap(),
    "bars.clear-for-size": lambda places, _: places.nearest_pair(),
    "bars.clear-for-aggregate": lambda places, _: places.nearest_pair(),
    "bars.large": lambda places, _: places.largest_bar(),
    "bars.mandrel": lambda places, _: places.largest_bar(),
    "bars.skin": lambda places, _: places.side(),
    "bars.torsion-spread": lambda places, _: places.side(),
    "bars.torsion-anchored": lambda places, _: places.side(),
    "bars.compression-half": lambda places, finding: places.chord(finding, tension=False),
    "bars.compression-held": lambda places, finding: places.chord(finding, tension=False),
    "bars": lambda places, finding: places.chord(finding, tension=True),
    "bending": lambda places, finding: places.chord(finding, tension=True),
    "bundles": lambda places, _: places.bundle(),
    "cover": lambda places, _: places.cover(),
}  # fmt: skip
"""Rule, or the first word of its id, -> place."""

_BY_QUANTITY: dict[str, Callable[[Places, Finding], Point]] = {
    "d": lambda places, finding: places.chord(finding, tension=True),
    "t_ef": lambda places, _: places.wall(),
    "A_k": lambda places, _: places.wall(),
    "u_k": lambda places, _: places.wall(),
    "A_sw_s_provided": lambda places, _: places.leg(),
    "A_s_tension": lambda places, finding: places.chord(finding, tension=True),
    "A_s_bending": lambda places, finding: places.chord(finding, tension=True),
}
