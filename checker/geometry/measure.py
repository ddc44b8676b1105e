"""From a declared design to everything the formulas and the yes-or-no rules are told about it.

- `inputs` holds the measured quantities the sheet starts from, in N, mm, rad; infinite where there is no
  such thing (the wall of a solid section, the spacing of absent links).
- For each sense of bending the web is the least width between the tension bars and 0.9 d above them.
"""

from __future__ import annotations

from collections.abc import Mapping
from typing import TYPE_CHECKING, NamedTuple

from checker.declared.flanges import FLANGED
from checker.geometry import details, links, steel
from checker.geometry.bars import Bar, Cage, cage_of, place_bars
from checker.geometry.facts import Fact, corners_fact, link_facts
from checker.geometry.outline import Outline, flanged, outline_of, web_of
from checker.geometry.profile import Profile

if TYPE_CHECKING:
    from checker.declared.model import Design

LEVER = 0.9
"""z/d where nothing better is known (EN 1992-1-1, 6.2.3(1))."""


class Measured(NamedTuple):
    """What was measured on one design."""

    inputs: Mapping[str, float]
    shape: str
    solid_rectangle: bool
    section: Profile
    bars: tuple[Bar, ...]
    outline: Outline
    facts: Mapping[str, Fact]


def measure(design: Design) -> Measured:
    """Return everything measured on a design.

    Raises `InputFaults` where a bar's face doesn't exist on the outline.
    """
    outline = outline_of(design.section)
    web = web_of(design.section, outline)
    acting = _acting(design, outline)
    cage = cage_of(design)
    placed = place_bars(design, web)
    bars = placed if web is outline else tuple(bar._replace(x=bar.x + web.origin[0]) for bar in placed)
    round_web = placed if web is outline else tuple(bar for bar in placed if 0 <= bar.x <= web.width)
    in_corners = steel.corner_bars(round_web, web, cage)
    inputs = _outline_inputs(acting, web)
    inputs |= _bar_inputs(bars, acting, cage)
    inputs["gap_bars"] = steel.gap_bars(round_web, web, cage)
    inputs |= details.detail_inputs(design, round_web, web, cage, in_corners)
    inputs["c_axis"] = steel.c_axis(round_web, web, cage, in_corners)
    inputs |= _web_inputs(acting, inputs["a_s_bottom"], inputs["a_s_top"])
    inputs |= _link_inputs(design, web, cage, inputs["a_s_bottom"], inputs["a_s_top"])
    profile = Profile(
        strips_sagging=acting.profile(from_top=True),
        strips_hogging=acting.profile(from_top=False),
        bars=tuple((bar.y, bar.area) for bar in bars),
        h=outline.height,
        y_c=inputs["y_c"],
    )
    facts = link_facts(design)
    facts["corners_filled"] = corners_fact(in_corners, web, design.places.get("bars"))
    facts |= details.detail_facts(design, round_web, cage, facts["perimeter_link"])
    flange_inputs, flange_facts = _flanges(design, bars)
    inputs |= flange_inputs
    facts |= flange_facts
    return Measured(
        inputs, outline.shape, _is_solid_rectangle(outline, inputs["A"]), profile, bars, outline, facts
    )


def _acting(design: Design, outline: Outline) -> Outline:
    """What acts in bending: flanges no wider than their effective width."""
    if design.section.shape not in FLANGED:
        return outline
    from checker.geometry import flanges

    most = flanges.b_eff(design.section)
    return outline if most >= outline.width else flanged(design.section, most)


def _flanges(design: Design, bars: tuple[Bar, ...]) -> tuple[dict[str, float], dict[str, Fact]]:
    """Inputs and facts of the flanges; a section without any doesn't pay for the import."""
    if design.section.shape not in FLANGED:
        none = Fact(None, "the section has no flanges", None, applies=False)
        return {"n_flanges": 0.0, "torsion_parts": 0.0}, {"flange_corners": none, "effective_width": none}
    from checker.geometry import flanges

    return flanges.flange_inputs(design, bars), {
        "flange_corners": flanges.flange_corners_fact(design, bars),
        "effective_width": flanges.effective_width_fact(design.section),
    }


def _is_solid_rectangle(outline: Outline, area: float) -> bool:
    """Whether a section is one solid rectangle, were it written as a polygon."""
    if outline.shape == "polygon":
        return area >= outline.width * outline.height * (1 - 1e-9)
    return outline.shape == "rectangle"


def _outline_inputs(acting: Outline, web: Outline) -> dict[str, float]:
    """What bends and what the torsion of the perimeter link runs round; the same but for flanged sections."""
    return {
        "h": acting.height,
        "b_least": web.least_dimension,
        "A": web.area,
        "u": web.perimeter,
        "kappa": web.kappa,
        "A_c": acting.concrete_area,
        "y_c": acting.centroid_height,
        "t_wall": web.least_wall,
        "thickness": web.thickness,
        "reentrant_corners": float(web.reentrant_corners),
    }


def _bar_inputs(bars: tuple[Bar, ...], outline: Outline, cage: Cage) -> dict[str, float]:
    phi_long_max = steel.largest(bars)
    bottom, top = steel.bottom_group(bars, outline), steel.top_group(bars, outline)
    a_s_bottom = steel.a_s_bottom(bottom, phi_long_max, cage)
    a_s_top = steel.a_s_top(top, phi_long_max, cage, outline.height)
    total = steel.area(bars)
    half_bottom = steel.area_half_bottom(bars, a_s_bottom, outline.height - a_s_top)
    return {
        "cover": cage.cover,
        "a_s_bottom": a_s_bottom,
        "a_s_top": a_s_top,
        "A_s_bottom": steel.area(bottom),
        "A_s_top": steel.area(top),
        "A_half_bottom": half_bottom,
        "A_half_top": total - half_bottom,
        "A_s_all": total,
        "phi_long_max": phi_long_max,
    }


def _sagging_chords(h: float, a_s: float) -> tuple[float, float]:
    """Heights of the tension bars at the bottom and of the point 0.9 d above them."""
    return a_s, a_s + LEVER * (h - a_s)


def _hogging_chords(h: float, a_s: float) -> tuple[float, float]:
    """Heights of the point 0.9 d below the tension bars at the top, and of these."""
    return h - a_s - LEVER * (h - a_s), h - a_s


def _web_inputs(outline: Outline, a_s_bottom: float, a_s_top: float) -> dict[str, float]:
    h = outline.height
    return {
        "b_w_sagging": outline.least_width(*_sagging_chords(h, a_s_bottom)),
        "b_w_hogging": outline.least_width(*_hogging_chords(h, a_s_top)),
        "b_t_sagging": outline.mean_width(0.0, h / 2),
        "b_t_hogging": outline.mean_width(h / 2, h),
    }


def _link_inputs(
    design: Design, outline: Outline, cage: Cage, a_s_bottom: float, a_s_top: float
) -> dict[str, float]:
    h = outline.height
    # One number for both senses of bending: the smaller, on the safe side.
    eta_leg = min(
        links.eta_leg(outline, cage, *_sagging_chords(h, a_s_bottom)),
        links.eta_leg(outline, cage, *_hogging_chords(h, a_s_top)),
    )
    return {
        "phi_link": cage.phi_link,
        "s_perimeter": links.largest_spacing(links.perimeter_links(design)),
        "s_links": links.largest_spacing(links.web_links(design)),
        "n_legs": float(links.n_legs(design)),
        "A_sw_s_all": links.A_sw_s_all(design),
        "A_leg_s": links.A_leg_s(design),
        "S_sin": links.S_sin(design, eta_leg),
        "S_cos": links.S_cos(design),
        "alpha": links.common_angle(design),
        "eta_leg": eta_leg,
        "leg_gap": links.leg_gap(design, outline, cage),
    }
