"""Whether the declared steel can stand in the declared section at all.

- Only what can't be built is a fault here; a broken rule of spacing or cover is for the audit.
- Bars fit side by side with zero clear distance; the standard's clear distances are not asked for.
"""

from __future__ import annotations

import math
from collections.abc import Iterator

from checker.declared.fit import (
    Point,
    convex_corners,
    distance_to_outline,
    extents,
    flat_edge,
    inside,
    perimeter_inset,
)
from checker.declared.flanges import FLANGED
from checker.declared.model import BarGroup, LinkSet, Number, Place, Section

FLAT_FACES = ("bottom", "top", "left", "right")
_SLACK = 1e-6  # mm
Found = Iterator[tuple[Place, str]]


def outline_of(section: Section) -> tuple[Point, ...]:
    """The outer corners in mm, anticlockwise from the lower left; none for a circle."""
    if section.shape == "polygon" or section.shape in FLANGED:
        return section.points
    if section.shape == "circle":
        return ()
    b, h = section.sizes["b"].value, section.sizes["h"].value
    return ((0.0, 0.0), (b, 0.0), (b, h), (0.0, h))


def corners_of(section: Section) -> int:
    """How many corners take a bar: 4 of a rectangle, none of a circle, those turning outward of a polygon."""
    outline = linked_outline(section)
    return convex_corners(outline) if outline else 0


def linked_outline(section: Section) -> tuple[Point, ...]:
    """The outline in mm that the perimeter link follows: of a tee, ell or i the web alone."""
    if section.shape not in FLANGED:
        return outline_of(section)
    b, h = section.sizes["b_web"].value, section.sizes["h"].value
    return ((0.0, 0.0), (b, 0.0), (b, h), (0.0, h))


def width_and_height(section: Section) -> tuple[float, float]:
    """Width and height in mm of the bounding box of what the perimeter link follows."""
    if section.shape == "circle":
        return (section.sizes["diameter"].value,) * 2
    return extents(linked_outline(section))


def link_faults(section: Section, cover: Number, links: list[LinkSet]) -> Found:
    """Links whose legs have no room within the cover."""
    width, height = width_and_height(section)
    for item in links:
        used = cover.value + item.diameter.value
        if item.where == "flange":
            yield from _flange_link_faults(section, item, used)
            continue
        steel = f"cover {cover.value:g} and link {item.diameter.value:g} mm"
        if 2 * used >= min(width, height) - _SLACK:
            size = f"{width:g} x {height:g} mm"
            yield item.place, f"{item.mark}: {steel} on both sides leave nothing of a section of {size}"
        elif item.legs * item.diameter.value > width - 2 * cover.value + _SLACK:
            yield (
                item.place,
                f"{item.mark}: {item.legs} legs don't fit side by side in a width of {width:g} mm",
            )
        elif section.shape == "box" and item.where == "perimeter":
            wall = min(section.sizes[key].value for key in ("wall_side", "wall_top", "wall_bottom"))
            if used > wall + _SLACK:
                yield item.place, f"{item.mark}: {steel} reach through a wall of {wall:g} mm"


def _flange_link_faults(section: Section, item: LinkSet, used: float) -> Found:
    if section.shape not in FLANGED:
        yield (
            item.place,
            f"{item.mark}: place: flange is for sections with flanges, not for a {section.shape}",
        )
        return
    least = min(section.sizes[key].value for key in ("h_f", "h_f_bottom") if key in section.sizes)
    if 2 * used >= least - _SLACK:
        said = f"cover and link take {used:g} mm on both sides of a flange of {least:g} mm"
        yield item.place, f"{item.mark}: {said}"


def bar_faults(
    section: Section,
    cover: Number,
    aggregate: Number | None,
    links: list[LinkSet],
    bars: list[tuple[BarGroup, Place]],
) -> Found:
    """Bars that stand outside the concrete, beyond the middle, or in each other."""
    phi_link = max((item.diameter.value for item in links if item.where == "perimeter"), default=0.0)
    inset = cover.value + phi_link
    clear = 25.0 if aggregate is None else max(aggregate.value + 5, 20.0)
    layers = {(group.face, group.layer) for group, _ in bars}
    stands = True
    for group, spot in bars:
        if group.at:
            reason = next(_misplaced(section, group), "")
        else:
            reason = _beyond(section, group, inset, clear) or _crowded_round(section, group, inset)
            if not reason and group.layer > 1 and (group.face, group.layer - 1) not in layers:
                reason = (
                    f"layer {group.layer} needs a layer {group.layer - 1} on the same face ({group.face})"
                )
        if reason:
            stands = False
            yield spot, f"{group.mark}: {reason}"
    yield from _overlaps(bars)
    if stands:
        yield from _crowded_faces(section, bars, inset)


def _beyond(section: Section, group: BarGroup, inset: float, clear: float) -> str:
    """Why the group's layer can't be where its face and number put it; empty if it can."""
    width, height = width_and_height(section)
    phi = group.size
    if section.shape == "circle" and group.face not in ("round", "corners"):
        return f"a circle has no flat {group.face}; use face: round, or exact places (at)"
    flat = group.face in FLAT_FACES
    if section.shape == "polygon" and flat and flat_edge(section.points, group.face, 0.0) is None:
        side = " side" if group.face in ("left", "right") else ""
        return f"this outline has no flat {group.face}{side}; use face: round, or exact places (at)"
    depths = {"bottom": height, "top": height, "left": width, "right": width}
    depth = depths.get(group.face, min(width, height))
    first = inset + phi / 2
    centre = first + (group.layer - 1) * (phi + max(clear, phi))
    if first > depth / 2 + _SLACK:
        return f"cover, link and half the bar take {first:g} mm, more than half the section's {depth:g} mm"
    if centre > depth - first + _SLACK:
        return f"layer {group.layer} would stand {centre:g} mm deep, beyond the far side's bars"
    return _in_void(section, group, centre + phi / 2)


def _in_void(section: Section, group: BarGroup, reach: float) -> str:
    if section.shape != "box":
        return ""
    side, top, bottom = (section.sizes[f"wall_{key}"].value for key in ("side", "top", "bottom"))
    walls = {"bottom": bottom, "top": top, "left": side, "right": side, "round": min(side, top, bottom)}
    wall = walls.get(group.face, max(side, min(top, bottom)))  # a corner bar needs only one of its two walls
    if reach <= wall + _SLACK:
        return ""
    return f"the bars reach {reach:g} mm in, through a wall of {wall:g} mm into the void"


def _crowded_round(section: Section, group: BarGroup, inset: float) -> str:
    if group.face != "round":
        return ""
    phi = group.size
    if section.shape == "circle":
        radius = section.sizes["diameter"].value / 2 - inset - phi / 2
        apart = 2 * radius * math.sin(math.pi / group.count) if group.count > 1 else math.inf
        fits = apart >= phi - _SLACK
    else:
        fits = group.count * phi <= perimeter_inset(linked_outline(section), inset + phi / 2) + _SLACK
    return "" if fits else f"{group.count} bars of {phi:g} mm don't fit side by side along the link"


def _crowded_faces(section: Section, bars: list[tuple[BarGroup, Place]], inset: float) -> Found:
    """All bars of a face and layer, side by side, against the room between its corners."""
    rows: dict[tuple[str, int], list[tuple[BarGroup, Place]]] = {}
    for group, spot in bars:
        if not group.at and group.face in FLAT_FACES:
            rows.setdefault((group.face, group.layer), []).append((group, spot))
    for (face, _), row in rows.items():
        largest = max(group.size for group, _ in row)
        room = _room(section, face, inset, largest)
        if face in ("left", "right") and room is not None:
            room -= _corner_steel(bars)
        needed = sum(group.count * group.size for group, _ in row)
        if room is not None and needed > room + _SLACK:
            group, spot = row[-1]
            size = f"{needed:g} mm of bars side by side in {max(room, 0.0):g} mm between the links"
            yield spot, f"{group.mark}: the {face} bars don't fit, {size}"


def _room(section: Section, face: str, inset: float, phi: float) -> float | None:
    """Clear length in mm for bars along a face; None for a polygon's sides, which need not be straight."""
    if section.shape != "polygon":
        width, height = width_and_height(section)
        return (width if face in ("bottom", "top") else height) - 2 * inset
    if face in ("left", "right"):
        return None
    centres = flat_edge(section.points, face, inset + phi / 2)
    return None if centres is None else centres + phi


def _corner_steel(bars: list[tuple[BarGroup, Place]]) -> float:
    """Height in mm taken by the corner bars of a side: the largest at the bottom and at the top."""
    taken = 0.0
    for face in ("bottom", "top"):
        taken += max(
            (g.size for g, _ in bars if g.layer == 1 and not g.at and g.face in (face, "corners")),
            default=0.0,
        )
    return taken


def _misplaced(section: Section, group: BarGroup) -> Iterator[str]:
    """Bars at exact places that aren't wholly in the concrete."""
    radius = group.size / 2
    outline = outline_of(section)
    for x, y in group.at:
        if section.shape == "circle":
            outer = section.sizes["diameter"].value / 2
            whole = math.hypot(x - outer, y - outer) <= outer - radius + _SLACK
        else:
            whole = inside((x, y), outline) and distance_to_outline((x, y), outline) >= radius - _SLACK
        if not whole:
            yield f"the bar at [{x:g}, {y:g}] isn't wholly inside the outline"
        elif section.shape == "box" and _void_distance(section, x, y) < radius - _SLACK:
            yield f"the bar at [{x:g}, {y:g}] reaches into the void"


def _void_distance(section: Section, x: float, y: float) -> float:
    """Distance in mm from a point to the void of a box; 0 within it."""
    b, h, side, top, bottom = (
        section.sizes[k].value for k in ("b", "h", "wall_side", "wall_top", "wall_bottom")
    )
    return math.hypot(max(side - x, 0.0, x - (b - side)), max(bottom - y, 0.0, y - (h - top)))


def _overlaps(bars: list[tuple[BarGroup, Place]]) -> Found:
    """Bars at exact places that stand in each other; found by cells, so that many bars cost little."""
    placed = [(x, y, group, spot) for group, spot in bars for x, y in group.at]
    cell = max((group.size for _, _, group, _ in placed), default=1.0)
    cells: dict[tuple[int, int], list[tuple[float, float, float]]] = {}
    for x, y, group, spot in placed:
        column, row, radius = math.floor(x / cell), math.floor(y / cell), group.size / 2
        near = (
            other
            for i in (column - 1, column, column + 1)
            for j in (row - 1, row, row + 1)
            for other in cells.get((i, j), ())
        )
        if any(math.hypot(x - ox, y - oy) < radius + other - _SLACK for ox, oy, other in near):
            yield spot, f"{group.mark}: the bar at [{x:g}, {y:g}] stands in another bar"
        cells.setdefault((column, row), []).append((x, y, radius))
