"""What is measured on flanges: their effective width, and the outstands as parts that share the torsion.

- A part is the rectangle of one outstand, thickness h_f; the web is b_w x h over the full height.
- Torsion is shared by the section as declared; bending takes flanges no wider than their effective width.
- Only for tee, ell and i.
- Flange 1 is the flange of a tee or ell, or the top flange of an i; flange 2 is the bottom flange of an i.
"""

from __future__ import annotations

from collections.abc import Iterator
from math import inf, nan
from typing import TYPE_CHECKING, NamedTuple

from checker.declared.flanges import flanged_sizes
from checker.geometry import links, steel
from checker.geometry.bars import Bar, Cage
from checker.geometry.facts import Fact
from checker.geometry.outline import Outline, rectangle

if TYPE_CHECKING:
    from checker.declared.model import Design, Section


class Outstand(NamedTuple):
    """One outstand: its flange (1 or 2), what a person calls it, its lower left corner, its rectangle."""

    flange: int
    name: str
    x: float
    y: float
    outline: Outline

    def holds(self, bar: Bar) -> bool:
        """Whether a bar, in the coordinates of the whole section, has its centre in this outstand."""
        inside = self.outline
        return self.x < bar.x < self.x + inside.width and self.y < bar.y < self.y + inside.height

    def own(self, bars: tuple[Bar, ...]) -> tuple[Bar, ...]:
        """Return the bars in this outstand, in its own coordinates."""
        return tuple(bar._replace(x=bar.x - self.x, y=bar.y - self.y) for bar in bars if self.holds(bar))


def b_eff(section: Section) -> float:
    """Return the effective width of the flanges in mm (5.3.2.1(3)); infinite where no spans are given.

    b_w plus, for each side, min(0.2 b_i + 0.1 l_0, 0.2 l_0, b_i).
    """
    if not section.spans:
        return inf
    l_0 = section.spans["l_0"].value
    sides = [section.spans["b_1"].value]
    if section.side == "both":
        sides.append(section.spans.get("b_2", section.spans["b_1"]).value)
    return section.sizes["b_web"].value + sum(min(0.2 * b + 0.1 * l_0, 0.2 * l_0, b) for b in sides)


def effective_width_fact(section: Section) -> Fact:
    """Return the fact `effective_width`: no flange is wider than what acts with the web (5.3.2.1)."""
    acting = b_eff(section)
    if acting == inf:
        return Fact(None, "the file gives no spans; spans: {l_0, b_1, b_2} would let it be checked", None)
    widths = [section.sizes[key] for key in ("b_f", "b_f_bottom") if key in section.sizes]
    widest = max(widths, key=lambda number: number.value)
    says = f"{widest.value:g} mm are declared, {acting:.6g} mm act"
    return Fact(widest.value <= acting * (1 + 1e-9), says, widest.place)


def outstands(section: Section) -> Iterator[Outstand]:
    """Yield every outstand of a tee, ell or i, from the left, flange by flange."""
    sizes = flanged_sizes(section)
    web_right = sizes.web_left + sizes.b_w
    where = (
        ("top", sizes.b_top, sizes.h_top, sizes.h - sizes.h_top),
        ("bottom", sizes.b_bottom, sizes.h_bottom, 0.0),
    )
    flange = 0
    for name, width, thickness, y in where:
        if not width:
            continue
        flange += 1
        left, right = sizes.span_of(width)
        for side, x, length in (
            ("left", left, sizes.web_left - left),
            ("right", web_right, right - web_right),
        ):
            if length > 0:
                yield Outstand(flange, f"{side} {name} flange", x, y, rectangle(length, thickness))


def flange_inputs(design: Design, bars: tuple[Bar, ...]) -> dict[str, float]:
    """Return the inputs of the parts; `bars` in the coordinates of the whole section.

    Of a flange's outstands, which are alike, the least of the bars and the largest distance to a corner bar count.
    """
    section = design.section
    parts = list(outstands(section))
    counted = {"n_flanges": float(len({part.flange for part in parts}))}
    counted["torsion_parts"] = 1.0 if section.torsion_by == "parts" else 0.0
    flange_links = [one for one in design.links if one.where == "flange"]
    cage = flange_cage(design)
    counted |= {
        "b_eff": b_eff(section),
        "h_f_top": max((part.outline.height for part in parts if part.y > 0), default=nan),
        "h_f_bottom": max((part.outline.height for part in parts if part.y == 0), default=nan),
        "flange_at_top": 1.0 if section.shape == "i" or section.flange == "top" else 0.0,
        "A_leg_s_flange": sum((links.leg_area_by_length(one) for one in flange_links), 0.0),
        "s_flange": links.largest_spacing(flange_links),
    }
    for flange, suffix in ((1, ""), (2, "_2")):
        own = [part for part in parts if part.flange == flange]
        held = [part.own(bars) for part in own]
        counted |= {
            f"n_out{suffix}": float(len(own)),
            f"b_out{suffix}": max((part.outline.width for part in own), default=0.0),
            f"h_out{suffix}": max((part.outline.height for part in own), default=0.0),
            f"A_sl_flange{suffix}": min(map(steel.area, held), default=0.0),
            f"c_axis_flange{suffix}": max(
                (_c_axis(part.outline, some, cage) for part, some in zip(own, held, strict=True)),
                default=0.0,
            ),
        }
    return counted


def flange_cage(design: Design) -> Cage:
    """Return the cover and the largest link of the flanges."""
    sizes = [one.diameter.value for one in design.links if one.where == "flange"]
    return Cage(design.cover.value, max(sizes, default=0.0))


def _c_axis(outline: Outline, bars: tuple[Bar, ...], cage: Cage) -> float:
    return steel.c_axis(bars, outline, cage, steel.corner_bars(bars, outline, cage))


def flange_corners_fact(design: Design, bars: tuple[Bar, ...]) -> Fact:
    """Return the fact `flange_corners`: every corner of the links in the outstands has a bar in it (9.2.3(4))."""
    section, place = design.section, design.places.get("bars")
    if section.torsion_by != "parts":
        return Fact(None, "torsion isn't shared with flanges", place, applies=False)
    cage = flange_cage(design)
    empty = [
        f"{steel.corner_name(part.outline, i)} of the {part.name}"
        for part in outstands(section)
        for i, held in steel.corner_bars(part.own(bars), part.outline, cage).items()
        if not held
    ]
    if not empty:
        return Fact(True, "every corner of the flange links has a bar in it", place)
    return Fact(False, f"no bar in the corner{'s' * (len(empty) > 1)}: {', '.join(empty)}", place)
