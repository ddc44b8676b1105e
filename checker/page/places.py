"""Where on the section a finding has its place: the corner, the leg, the bar or the gap it is about (mm)."""

from __future__ import annotations

from collections.abc import Callable
from itertools import combinations, pairwise
from math import atan2, cos, hypot, pi, sin
from typing import TYPE_CHECKING

from checker.geometry import polygons, steel
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

    def link_line(self) -> tuple[Point, ...]:
        """The centre-line of the perimeter link; a circle as 48 points."""
        if self.web.circle_diameter is not None:
            r = self.web.circle_diameter / 2
            steps = [2 * pi * k / 48 for k in range(48)]
            return tuple((r + (r - self.inwards) * cos(a), r + (r - self.inwards) * sin(a)) for a in steps)
        line = polygons.inset(self.web.points, self.inwards)
        return tuple((x + self.shift, y) for x, y in line)

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
        own = tuple(bar._replace(x=bar.x - self.shift) for bar in self.bars)
        for i, found in steel.corner_bars(own, self.web, self.cage).items():
            if not found:
                line = self.link_line()
                corner = self.web.points[i]
                return min(line, key=lambda p: hypot(p[0] - corner[0] - self.shift, p[1] - corner[1]))
        return self.hook()

    def thinnest_corner_bar(self) -> Point:
        own = tuple(bar._replace(x=bar.x - self.shift) for bar in self.bars)
        held = [
            max(f, key=lambda b: b.diameter)
            for f in steel.corner_bars(own, self.web, self.cage).values()
            if f
        ]
        if not held:
            return self.hook()
        bar = min(held, key=lambda b: b.diameter)
        return bar.x + self.shift, bar.y

    def widest_gap(self) -> Point:
        """The middle, along the link, of the widest gap between bars."""
        line = self.link_line()
        along = [0.0]
        for a, b in pairwise((*line, line[0])):
            along.append(along[-1] + hypot(b[0] - a[0], b[1] - a[1]))
        feet = sorted(self._foot(bar, line, along) for bar in self.bars if self._touches(bar))
        if not feet:
            return line[0]
        gaps = [(b - a, a) for a, b in pairwise((*feet, feet[0] + along[-1]))]
        width, start = max(gaps)
        return self._point_along(line, along, (start + width / 2) % along[-1])

    def _touches(self, bar: Bar) -> bool:
        edge = self.measured.outline.distance_inside((bar.x, bar.y))
        return edge <= 1.5 * (self.cage.cover + self.cage.phi_link + bar.diameter)

    def _foot(self, bar: Bar, line: tuple[Point, ...], along: list[float]) -> float:
        best, place = float("inf"), 0.0
        for k, (a, b) in enumerate(pairwise((*line, line[0]))):
            length = hypot(b[0] - a[0], b[1] - a[1]) or 1.0
            t = ((bar.x - a[0]) * (b[0] - a[0]) + (bar.y - a[1]) * (b[1] - a[1])) / length**2
            t = min(max(t, 0.0), 1.0)
            off = hypot(a[0] + t * (b[0] - a[0]) - bar.x, a[1] + t * (b[1] - a[1]) - bar.y)
            if off < best - 1e-9:
                best, place = off, along[k] + t * length
        return place

    def _point_along(self, line: tuple[Point, ...], along: list[float], distance: float) -> Point:
        for k, (a, b) in enumerate(pairwise((*line, line[0]))):
            if distance <= along[k + 1] + 1e-9:
                t = (distance - along[k]) / ((along[k + 1] - along[k]) or 1.0)
                return a[0] + t * (b[0] - a[0]), a[1] + t * (b[1] - a[1])
        return line[0]

    def nearest_pair(self) -> Point:
        """Between the two bars that stand nearest for their size."""

        def spare(pair: tuple[Bar, Bar]) -> float:
            a, b = pair
            gap = hypot(a.x - b.x, a.y - b.y) - (a.diameter + b.diameter) / 2
            return gap - max(a.diameter, b.diameter)

        if len(self.bars) < 2:
            return self.leg()
        a, b = min(combinations(self.bars, 2), key=spare)
        return (a.x + b.x) / 2, (a.y + b.y) / 2

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
        """The centre-line of the equivalent wall, at the right of the top."""
        line = self.wall_line(max(self.measured.inputs["c_axis"], 1.0))
        return max(
            line,
            key=lambda p: atan2(p[1] - self.web.height / 2, p[0] - self.web.width / 2 - self.shift) < 1.2,
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
