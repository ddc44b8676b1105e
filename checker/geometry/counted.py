"""Which bars and legs count for what, worked out from where they are, for people to look over."""

from __future__ import annotations

from typing import TYPE_CHECKING, NamedTuple

from checker.geometry.facts import is_upright
from checker.geometry.links import counted_leg
from checker.geometry.steel import area_half_bottom, bottom_group, top_group

if TYPE_CHECKING:
    from checker.declared.model import Design, LinkSet
    from checker.geometry.measure import Measured


class BarsCount(NamedTuple):
    """One group of bars: how many, of what size (mm), and what of its area (mm2) counts where.

    `bottom` and `top` are what the halves of the section have of it, for bending and for torsion alike; `chord` is the
    group whose centroid gives d ("bottom", "top" or "").
    """

    mark: str
    number: int
    diameter: float
    area: float
    bottom: float
    top: float
    chord: str


class LinksCount(NamedTuple):
    """One set of links: all its legs for shear, one of them for torsion (mm2/mm), and why not where it is none."""

    mark: str
    legs: int
    diameter: float
    spacing: float
    shear: float
    torsion: float
    why_not: str


def bars_counted(design: Design, measured: Measured) -> tuple[BarsCount, ...]:
    """Return what each group of bars counts for, in the order of the file."""
    inputs = measured.inputs
    y_bottom, y_top = inputs["a_s_bottom"], measured.outline.height - inputs["a_s_top"]
    low = set(bottom_group(measured.bars, measured.outline))
    high = set(top_group(measured.bars, measured.outline))
    found = []
    for index, group in enumerate(design.bars):
        own = tuple(bar for bar in measured.bars if bar.group_index == index)
        total = sum(bar.area for bar in own)
        bottom = area_half_bottom(own, y_bottom, y_top)
        chords = {"bottom" if bar in low else "top" if bar in high else "" for bar in own}
        chord = chords.pop() if len(chords) == 1 else "both"
        count = len(own) * group.bundle
        found.append(BarsCount(group.mark, count, group.diameter.value, total, bottom, total - bottom, chord))
    return tuple(found)


def links_counted(design: Design) -> tuple[LinksCount, ...]:
    """Return what each set of links counts for, in the order of the file."""
    found = []
    for links in design.links:
        leg, why = counted_leg(design, links), _no_torsion(links)
        shear = 0.0 if links.where == "flange" else leg * links.legs
        size, spacing = links.diameter.value, links.spacing.value
        torsion = 0.0 if why else leg
        found.append(LinksCount(links.mark, links.legs, size, spacing, shear, torsion, why))
    return tuple(found)


def _no_torsion(links: LinkSet) -> str:
    if links.where == "inner":
        return "an inner link does not enclose the section"
    if not is_upright(links):
        return "a link that leans carries torsion of one sense only"
    return ""
