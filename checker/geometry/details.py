"""What the detailing rules measure: clear distances, bends, bars held by the links, steel on the sides.

- Lengths in mm, areas in mm2; infinite or nan where there is no such thing or the file leaves it unsaid.
- A bundle counts as one bar of the same area (EN 1992-1-1, 8.9.1(2)).
"""

from __future__ import annotations

from itertools import combinations
from math import hypot, inf, nan, sin
from typing import TYPE_CHECKING

from checker.geometry.bars import Bar, Cage
from checker.geometry.facts import Fact, is_upright
from checker.geometry.links import leg_area_by_length, perimeter_links, web_links
from checker.geometry.outline import Outline

if TYPE_CHECKING:
    from checker.declared.model import Design

LARGEST_SMALL_BAR = 16.0
"""Up to this size a bend may be tighter (Table 8.1N), mm."""


def detail_inputs(
    design: Design, bars: tuple[Bar, ...], outline: Outline, cage: Cage, in_corners: dict[int, list[Bar]]
) -> dict[str, float]:
    """Return every measured quantity that only detailing rules ask for."""
    clear, by_size, size = _clear_distances(bars)
    filled = [max(bar.diameter for bar in found) for found in in_corners.values() if found]
    enclosing_upright = any(is_upright(links) for links in perimeter_links(design))
    leaning = [links for links in design.links if links.where == "inner" and not is_upright(links)]
    return {
        "clear_least": clear,
        "clear_by_size": by_size,
        "phi_clear": size,
        "phi_corner_least": min(filled, default=inf),
        "phi_bundle": max((g.size for g in design.bars if g.bundle > 1), default=nan),
        "n_bundle": max((float(g.bundle) for g in design.bars if g.bundle > 1), default=nan),
        "phi_single_max": max(group.diameter.value for group in design.bars),
        "phi_least_bottom": _least_on(bars, "bottom"),
        "phi_least_top": _least_on(bars, "top"),
        "n_aslant_inner": float(len(leaning)) if enclosing_upright else 0.0,
        "A_enclosing_s": sum(
            links.legs * leg_area_by_length(links) * sin(links.angle) for links in perimeter_links(design)
        ),
        "A_legs_s": sum(links.legs * leg_area_by_length(links) for links in web_links(design)),
        **_sides(bars, outline),
        **_bends(design),
        **_link_lap(design, outline.height),
    }


def detail_facts(design: Design, bars: tuple[Bar, ...], cage: Cage, enclosing: Fact) -> dict[str, Fact]:
    """Return the facts `torsion_bars_anchored`, `hooks_bent_in`, `lap_leg` and `inner_bends_filled`."""
    return {
        "torsion_bars_anchored": _anchored(design),
        "hooks_bent_in": _hooks(design, enclosing),
        "lap_leg": _lap_leg(design, enclosing),
        "inner_bends_filled": _inner_bends(design, bars, cage),
    }


def _clear(a: Bar, b: Bar) -> float:
    return hypot(a.x - b.x, a.y - b.y) - (a.diameter + b.diameter) / 2


def nearest_pair(bars: tuple[Bar, ...]) -> tuple[Bar, Bar] | None:
    """Return the two bars with least between them beyond the size of the larger (8.2(2)); None of fewer than two."""
    pairs = combinations(sorted(bars, key=lambda bar: (bar.x, bar.y)), 2)
    return min(pairs, key=lambda pair: _clear(*pair) - max(pair[0].diameter, pair[1].diameter), default=None)


def _clear_distances(bars: tuple[Bar, ...]) -> tuple[float, float, float]:
    """Return the least clear distance, and that of the nearest pair for its size, with the size."""
    nearest = nearest_pair(bars)
    if nearest is None:
        return inf, inf, 0.0
    least = min(_clear(a, b) for a, b in combinations(bars, 2))
    return least, _clear(*nearest), max(nearest[0].diameter, nearest[1].diameter)


def _least_on(bars: tuple[Bar, ...], face: str) -> float:
    return min((bar.diameter for bar in bars if bar.face == face), default=inf)


def _sides(bars: tuple[Bar, ...], outline: Outline) -> dict[str, float]:
    """Return the steel along the sides: between the rows for skin, and with half of each end bar for torsion."""
    h, middle = outline.height, outline.height / 2
    rows = [bar.y for bar in bars if bar.face in ("bottom", "top")]
    low, high = min(rows, default=0.0), max(rows, default=h)
    between = [b for b in bars if low + 1e-6 < b.y < high - 1e-6 and b.face not in ("bottom", "top")]
    ends = [[bar for bar in bars if bar.y == level] for level in {low, high}]
    weaker = []
    for side, outermost in (("left", min), ("right", max)):
        own = sum(bar.area for bar in bars if bar.face == side)
        weaker.append(own + sum(outermost(row, key=lambda bar: bar.x).area / 2 for row in ends if row))
    return {
        "A_skin_sagging": sum(bar.area for bar in between if bar.y <= middle + 1e-6),
        "A_skin_hogging": sum(bar.area for bar in between if bar.y >= middle - 1e-6),
        "A_side_least": min(weaker),
    }


def _bends(design: Design) -> dict[str, float]:
    """Return the mandrel of the tightest bend of links and of bars, by its own diameter."""
    found: dict[str, float] = {}
    for name, items in (("link", design.links), ("bar", design.bars)):
        stated = [
            (one.mandrel.value, one.diameter.value) for one in items if one.mandrel is not None
        ]  # (mandrel, diameter)
        mandrel, size = min(
            stated,
            key=lambda pair: pair[0] / pair[1] / (4 if pair[1] <= LARGEST_SMALL_BAR else 7),
            default=(nan, nan),
        )
        found |= {f"mandrel_{name}": mandrel, f"phi_mandrel_{name}": size}
    return found


def _link_lap(design: Design, height: float) -> dict[str, float]:
    """Return the lap of the links that is shortest for what it needs, its diameter, and whether its bond is good.

    A lap on the top leg lies in the worse concrete above 250 mm (8.4.2(2)); so it is taken where the leg is unsaid.
    """
    laps = [
        (links.lap.value, links.diameter.value, float(links.lap_on in ("side", "bottom") or height <= 250))
        for links in design.links
        if links.ends == "lapped" and links.lap is not None
    ]
    lap, size, good = min(
        laps, key=lambda one: one[0] / one[1] * (1.0 if one[2] else 0.7), default=(nan, nan, nan)
    )
    return {"lap_link": lap, "phi_lap_link": size, "lap_link_good": good}


def _anchored(design: Design) -> Fact:
    said = [group for group in design.bars if group.anchored is not None]
    short = [group for group in said if not group.anchored]
    if short:
        marks = ", ".join(group.mark for group in short)
        return Fact(False, f"{marks} are not anchored beyond the section", short[0].place)
    if not said:
        return Fact(
            None, "the bars don't say whether they are anchored beyond the section (key bars: anchored)", None
        )
    return Fact(True, "every bar that says so is anchored beyond the section", said[0].place)


def _hooks(design: Design, enclosing: Fact) -> Fact:
    hooked = [one for one in perimeter_links(design) if one.ends in ("hooks_90", "hooks_135")]
    if not hooked:
        return Fact(None, "the perimeter links have no hooks", enclosing.place, applies=False)
    flat = [one for one in hooked if one.ends == "hooks_90"]
    if flat:
        return Fact(False, f"{flat[0].mark} ends in hooks of 90°", flat[0].place)
    return Fact(True, "the hooks are bent into the core", hooked[0].place)


def _lap_leg(design: Design, enclosing: Fact) -> Fact:
    lapped = [one for one in perimeter_links(design) if one.ends == "lapped"]
    if not lapped:
        return Fact(None, "the perimeter links are not lapped", enclosing.place, applies=False)
    for one in lapped:
        if one.lap_on == "side":
            return Fact(False, f"{one.mark} is lapped on a leg at the side", one.place)
    unsaid = [one for one in lapped if one.lap_on is None]
    if unsaid:
        return Fact(
            None,
            f"{unsaid[0].mark} doesn't say which leg its lap lies on (key links: lap_on)",
            unsaid[0].place,
        )
    return Fact(True, f"{lapped[0].mark} is lapped on the {lapped[0].lap_on} leg", lapped[0].place)


def _inner_bends(design: Design, bars: tuple[Bar, ...], cage: Cage) -> Fact:
    """A bar beside every leg of an inner link, at its top and at its bottom."""
    inner = [one for one in design.links if one.where == "inner"]
    if not inner:
        return Fact(None, "there are no inner links", None, applies=False)
    placed = [one for one in inner if one.at]
    for one in placed:
        reach = one.diameter.value / 2
        for x in one.at:
            for face in ("bottom", "top"):
                row = [bar for bar in bars if bar.face == face]
                near = any(abs(bar.x - x) <= reach + bar.diameter / 2 + 2 * one.diameter.value for bar in row)
                if not near:
                    says = f"no {face} bar in the bend of {one.mark} at {x:g} mm"
                    return Fact(False, says, one.place)
    if len(placed) < len(inner):
        return Fact(None, "the inner links don't say where their legs stand (key links: at)", inner[0].place)
    return Fact(True, "every bend of the inner links holds a bar", placed[0].place)
