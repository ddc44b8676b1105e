"""The section drawn to scale: concrete, links with their ends, every bar, the equivalent wall, and the findings on it."""

from __future__ import annotations

from collections.abc import Iterator
from typing import TYPE_CHECKING

from checker.page import svg
from checker.page.places import Places, Point
from checker.page.svg import Frame
from checker.sheet.shown import number

if TYPE_CHECKING:
    from checker.declared.model import LinkSet
    from checker.review.findings import Finding, MemberResult

ROOM = 330.0  # units of the drawing for the longer side of the section
MARGIN_LEFT, MARGIN_TOP, MARGIN_RIGHT, MARGIN_BOTTOM = 62.0, 30.0, 62.0, 44.0
BADGE = 9.0


Marks = list[tuple["Finding", Point]]
"""Findings with their places on the section, mm."""


def section_drawing(member: MemberResult, places: Places, marks: Marks, name: str) -> str:
    """The drawing of one member, its findings as numbered marks that lead to them."""
    outline = places.measured.outline
    scale = ROOM / max(outline.width, outline.height)
    frame = Frame(scale, MARGIN_LEFT, MARGIN_TOP + outline.height * scale)
    width = MARGIN_LEFT + outline.width * scale + MARGIN_RIGHT
    height = MARGIN_TOP + outline.height * scale + MARGIN_BOTTOM
    body = [
        *_concrete(places, frame), *_wall(member, places, frame), *_links(places, frame), *_bars(places, frame),
        *_dimensions(member, places, frame), *_badges(marks, frame),
    ]  # fmt: skip
    title = f"Section of {member.member}"
    return svg.picture(name, width, height, title, described(places, marks), body, role="group")


def marked(member: MemberResult, places: Places) -> Marks:
    """The findings that have a place on the section, with that place."""
    found = ((finding, places.of(finding)) for finding in member.findings)
    return [(finding, place) for finding, place in found if place is not None]


def described(places: Places, marks: Marks) -> str:
    """The same facts in words."""
    design, inputs = places.design, places.measured.inputs
    outline = places.measured.outline
    parts = [
        f"{design.section.shape}, {number(outline.width)} mm wide, {number(outline.height)} mm high, "
        f"cover {number(design.cover.value)} mm"
    ]
    parts += [
        f"{one.mark}: {one.where} links of {number(one.diameter.value)} mm at {number(one.spacing.value)} mm, "
        f"{one.legs} legs, ends {(one.ends or 'not stated').replace('_', ' ')}"
        for one in design.links
    ]
    parts += [
        f"{group.mark}: {group.count} bars of {number(group.diameter.value)} mm, {group.face}"
        for group in design.bars
    ]
    parts.append(f"distance from the face to the corner bars {number(inputs['c_axis'])} mm")
    parts += [
        f"No. {finding.number} at {number(x, 3)}, {number(y, 3)} mm: {finding.draft.rule}"
        for finding, (x, y) in marks
    ]
    return "; ".join(parts) + "."


def _concrete(places: Places, frame: Frame) -> Iterator[str]:
    outline, sizes = places.measured.outline, places.design.section.sizes
    if outline.circle_diameter is not None:
        r = outline.circle_diameter / 2
        yield svg.circle(frame.at((r, r)), r * frame.scale, fill=svg.CONCRETE, width=1.5)
        return
    yield svg.path(map(frame.at, outline.points), fill=svg.CONCRETE, width=1.5)
    if "wall_side" in sizes:
        side, top, low = (sizes[key].value for key in ("wall_side", "wall_top", "wall_bottom"))
        w, h = outline.width, outline.height
        void = ((side, low), (w - side, low), (w - side, h - top), (side, h - top))
        yield svg.path(map(frame.at, void), fill=svg.PAPER, width=1.5)


def _wall(member: MemberResult, places: Places, frame: Frame) -> Iterator[str]:
    """The inner face of the equivalent wall and its centre-line, where torsion counts."""
    values = member.cases[0].values if member.cases else {}
    t_ef = values.get("t_ef")
    if not t_ef or not any(case.values.get("T", 0.0) > 0 for case in member.cases):
        return
    if "wall_side" not in places.design.section.sizes:
        yield svg.path(map(frame.at, places.wall_line(t_ef)), stroke=svg.WALL, dash="5 3")
    yield svg.path(map(frame.at, places.wall_line(t_ef / 2)), stroke=svg.WALL, dash="9 3 2 3")
    where = frame.at((places.web.width / 2 + places.shift, places.web.height * 0.7))
    yield svg.text(where, f"t_ef {number(t_ef)} mm", size=10, anchor="middle", fill=svg.WALL)


def _links(places: Places, frame: Frame) -> Iterator[str]:
    for one in places.design.links:
        thick = max(one.diameter.value * frame.scale, 1.5)
        if one.where == "perimeter":
            yield from _perimeter_link(places, frame, one, thick)
        elif one.where == "inner":
            yield from _inner_legs(places, frame, one, thick)


def _perimeter_link(places: Places, frame: Frame, one: LinkSet, thick: float) -> Iterator[str]:
    line = list(map(frame.at, places.link_line()))
    start = places.hook()
    x, y = frame.at(start)
    tail = max((one.tail.value if one.tail else 60.0) * frame.scale, 10)
    if one.ends == "open":
        first = min(range(len(line)), key=lambda i: abs(line[i][0] - x) + abs(line[i][1] - y))
        ring = [*line[first:], *line[:first]]
        a, b = ring[-1], ring[0]
        near = (b[0] + (a[0] - b[0]) * 0.18, b[1] + (a[1] - b[1]) * 0.18)
        yield svg.path([*ring, near], closed=False, stroke=svg.STEEL, width=thick)
        return
    yield svg.path(line, stroke=svg.STEEL, width=thick, extra=' stroke-linejoin="round"')
    if one.ends == "hooks_135":
        reach = tail * 0.7
        for shift in (0.0, thick + 1.5):
            yield svg.line((x + shift, y), (x + shift + reach, y + reach), stroke=svg.STEEL, width=thick)
    elif one.ends == "hooks_90":
        yield svg.line((x + thick, y + thick), (x + thick + tail, y + thick), stroke=svg.STEEL, width=thick)
    elif one.ends == "lapped":
        yield from _lap(places, frame, one, thick)
    elif one.ends == "welded":
        yield svg.circle((x, y), thick + 1.5, fill=svg.STEEL, stroke=svg.STEEL)


def _lap(places: Places, frame: Frame, one: LinkSet, thick: float) -> Iterator[str]:
    """A second bar beside the leg that the lap lies on; the top where it is unsaid."""
    line = places.link_line()
    xs, ys = [p[0] for p in line], [p[1] for p in line]
    length = one.lap.value if one.lap else (max(xs) - min(xs)) * 0.6
    off = one.diameter.value * 1.3
    if one.lap_on == "side":
        x, middle = min(xs) + off, (min(ys) + max(ys)) / 2
        half = min(length, max(ys) - min(ys)) / 2
        ends = ((x, middle - half), (x, middle + half))
    else:
        y = (min(ys) + off) if one.lap_on == "bottom" else (max(ys) - off)
        middle, half = (min(xs) + max(xs)) / 2, min(length, max(xs) - min(xs)) / 2
        ends = ((middle - half, y), (middle + half, y))
    yield svg.line(frame.at(ends[0]), frame.at(ends[1]), stroke=svg.STEEL, width=thick)


def _inner_legs(places: Places, frame: Frame, one: LinkSet, thick: float) -> Iterator[str]:
    web, edge = places.web, places.inwards
    left, right = web.extent_at(web.height / 2)
    spread = [left + edge + (right - left - 2 * edge) * (k + 1) / (one.legs + 1) for k in range(one.legs)]
    for x in one.at or spread:
        ends = ((x + places.shift, edge), (x + places.shift, web.height - edge))
        yield svg.line(frame.at(ends[0]), frame.at(ends[1]), stroke=svg.STEEL, width=thick, dash="7 2")


def _bars(places: Places, frame: Frame) -> Iterator[str]:
    for bar in places.bars:
        radius = max(bar.diameter / 2 * frame.scale, 1.8)
        yield svg.circle(frame.at((bar.x, bar.y)), radius, fill=svg.INK, stroke=svg.INK)


def _dimensions(member: MemberResult, places: Places, frame: Frame) -> Iterator[str]:
    outline, cover = places.measured.outline, places.design.cover.value
    w, h = outline.width, outline.height
    (x0, y0), (x1, y1) = frame.at((0.0, 0.0)), frame.at((w, h))
    yield svg.dimension((x0, y0 + 30), (x1, y0 + 30), f"{number(w)} mm")
    yield svg.dimension((x0 - 40, y0), (x0 - 40, y1), f"{number(h)} mm")
    d = member.cases[0].values.get("d") if member.cases else None
    if d and member.cases[0].values.get("hogging"):
        yield svg.dimension((x1 + 26, y0), (x1 + 26, frame.at((0.0, d))[1]), f"d {number(d)} mm")
    elif d:
        yield svg.dimension((x1 + 26, y1), (x1 + 26, frame.at((0.0, h - d))[1]), f"d {number(d)} mm")
    low = frame.at((w * 0.75, cover))
    yield svg.line((low[0], y0), low, stroke=svg.QUIET)
    yield svg.text((low[0] + 3, y0 + 12), f"c {number(cover)} mm", size=10, fill=svg.QUIET)


def _badges(marks: Marks, frame: Frame) -> Iterator[str]:
    """Numbers on the things they are about; those of one place stand side by side."""
    taken: dict[tuple[int, int], int] = {}
    for finding, place in marks:
        x, y = frame.at(place)
        spot = (round(x / 8), round(y / 8))
        x += taken.get(spot, 0) * (2 * BADGE + 2)
        taken[spot] = taken.get(spot, 0) + 1
        shape = svg.circle((x, y), BADGE, fill=svg.PAPER, stroke=svg.ALARM, width=2)
        words = svg.text((x, y + 3.8), str(finding.number), size=10.5, anchor="middle")
        grave = finding.draft.gravity
        yield (
            f'<a id="mark-{finding.number}" href="#finding-{finding.number}" class="badge" data-number="{finding.number}" '
            f'aria-label="Finding {finding.number}, {grave}">{shape}{words}</a>'
        )
