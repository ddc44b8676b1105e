"""The same member with one thing of its steel read wrong: a link size, a spacing, legs, a bar count, a bar size, the cover.

Tried only where a wrong declared value has no other explanation: each variant is measured and recomputed anew.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import replace
from typing import Any, NamedTuple

from checker.declared.model import BarGroup, Design, LinkSet, Number
from checker.errors import InputFaults
from checker.geometry.measure import measure
from checker.review.claims import member_row
from checker.sheet.shown import number

SIZES = (6.0, 8.0, 10.0, 12.0, 14.0, 16.0, 20.0, 25.0, 28.0, 32.0, 40.0)
"""Bar and link sizes of the trade in mm (common practice, no source)."""

SPACINGS = tuple(float(s) for s in range(75, 325, 25))
COVER_STEPS = (-10.0, -5.0, 5.0, 10.0)


class Variant(NamedTuple):
    """One misreading: its slip id, what it says, and the inputs that change with it."""

    id: str
    says: str
    changes: Mapping[str, Any]


def variants_of(design: Design) -> tuple[Variant, ...]:
    """Every single misreading of the steel that can be built."""
    return tuple(_built(design))


def _built(design: Design) -> Iterator[Variant]:
    original = member_row(design, measure(design))
    for id_, says, changed in _changed_designs(design):
        try:
            row = member_row(changed, measure(changed))
        except (InputFaults, ValueError, ZeroDivisionError):
            continue  # a misreading that can't be built explains nothing
        changes = {name: value for name, value in row.items() if value != original.get(name)}
        if changes:
            yield Variant(id_, says, changes)


def _changed_designs(design: Design) -> Iterator[tuple[str, str, Design]]:
    for index, links in enumerate(design.links):
        for id_, says, changed in _link_misreadings(links):
            sets = (*design.links[:index], changed, *design.links[index + 1 :])
            yield id_, says, design._replace(links=sets)
    for index, group in enumerate(design.bars):
        for id_, says, bars in _bar_misreadings(group):
            groups = (*design.bars[:index], bars, *design.bars[index + 1 :])
            yield id_, says, design._replace(bars=groups)
    for step in COVER_STEPS:
        cover = design.cover.value + step
        if cover > 0:
            says = f"the cover was read as {number(cover)} mm"
            yield "cover-misread", says, design._replace(cover=_with(design.cover, cover))


def _link_misreadings(links: LinkSet) -> Iterator[tuple[str, str, LinkSet]]:
    for size in _neighbours(links.diameter.value):
        says = f"{links.mark} was read as links of {number(size)} mm"
        yield "link-size-misread", says, links._replace(diameter=_with(links.diameter, size))
    for spacing in SPACINGS:
        if abs(spacing - links.spacing.value) > 1:
            says = f"{links.mark} was read at a spacing of {number(spacing)} mm"
            yield "link-spacing-misread", says, links._replace(spacing=_with(links.spacing, spacing))
    for legs in (links.legs - 1, links.legs + 1, links.legs + 2):
        if legs > 0:
            yield (
                "link-legs-miscounted",
                f"{links.mark} was counted with {legs} legs",
                links._replace(legs=legs),
            )


def _bar_misreadings(group: BarGroup) -> Iterator[tuple[str, str, BarGroup]]:
    for size in _neighbours(group.diameter.value):
        says = f"{group.mark} was read as bars of {number(size)} mm"
        yield "bar-size-misread", says, replace(group, diameter=_with(group.diameter, size))
    if group.at or group.face == "corners":
        return
    for count in (group.count - 1, group.count + 1):
        if count > 0:
            yield (
                "bars-miscounted",
                f"{group.mark} was counted with {count} bars",
                replace(group, count=count),
            )


def _neighbours(size: float) -> tuple[float, ...]:
    """One size down and one size up."""
    below = [known for known in SIZES if known < size - 0.1]
    above = [known for known in SIZES if known > size + 0.1]
    return (*below[-1:], *above[:1])


def _with(original: Number, value: float) -> Number:
    return original._replace(value=value)
