"""The links, bars and cases of a file: values that are sound one by one become records."""

from __future__ import annotations

import math
from itertools import count

from checker.declared.details import details_of
from checker.declared.details_format import OF_CASE
from checker.declared.flanges import FLANGED
from checker.declared.found import Faults, Values
from checker.declared.model import BarGroup, Case, DeclaredValue, LinkSet, Number, Place, Section, WebFlange
from checker.declared.symbols import DECLARABLE, STRUT_ANGLES
from checker.declared.tree import shorten

Declared = dict[str, DeclaredValue]


def build_links(sets: list[Values], faults: Faults) -> list[LinkSet]:
    """The sets of links that are sound; marks are given where none is written."""
    marks = _marks(sets, "L", faults)
    links = []
    for values, mark in zip(sets, marks, strict=True):
        if not values.sound:
            continue
        if values.get("links", tuple) is not None:
            diameter, spacing = values.need("links", tuple)
        else:
            diameter, spacing = values.need("diameter", Number), values.need("spacing", Number)
        where, legs = values.get("place", str) or "perimeter", values.need("legs", int)
        if where != "inner" and legs < 2:
            encloses = "section" if where == "perimeter" else "flange"
            faults.add(
                values.spot("legs"), f"a {where} link encloses the {encloses} with 2 legs or more, not {legs}"
            )
            continue
        angle = values.get("angle", Number)
        at = values.get("at", list)
        if at is not None and (where != "inner" or len(at) != legs):
            faults.add(values.spot("at"), f"at gives the place of each leg of an inner link, here {legs}")
            continue
        links.append(
            LinkSet(
                mark=mark,
                diameter=diameter,
                spacing=spacing,
                legs=legs,
                where=where,
                ends=values.get("ends", str),
                angle=math.pi / 2 if angle is None else angle.value,
                lap=values.get("lap", Number),
                tail=values.get("tail", Number),
                place=values.place,
                f_ywk=values.get("f_ywk", Number),
                mandrel=values.get("mandrel", Number),
                lap_on=values.get("lap_on", str),
                at=tuple(number.value for number in at or ()),
            )
        )
    return links


def build_bars(groups: list[Values], corners: int | None, faults: Faults) -> list[tuple[BarGroup, Place]]:
    """The groups of bars that are sound, each with the place of its count; unwritten marks are given.

    `corners` is the number of corners of the outline, None where the outline isn't known.
    """
    marks = _marks(groups, "B", faults)
    bars = []
    for values, mark in zip(groups, marks, strict=True):
        group = _bar_group(values, mark, corners, faults) if values.sound else None
        if group is not None:
            bars.append((group, values.spot("count", "bars")))
    return bars


def build_cases(
    cases: list[Values], shared: Values | None, section: Section | None, faults: Faults
) -> list[Case]:
    """The load cases that are sound, the member's declared values merged in; `section` is None where unsound."""
    member = {s: value._replace(member_wide=True) for s, value in _declared(shared, faults).items()}
    built: list[Case] = []
    first: dict[str, Place] = {}
    for values in cases:
        name = values.get("name", str)
        if name is not None:
            _twice(name, "case", values.spot("name"), first, faults)
        own = _declared(values.get("declared", Values), faults)
        if name is None or not values.sound:
            continue
        verdict = _verdict(values.get("declared", Values)) or _verdict(shared)
        built.append(
            Case(
                name=name,
                V_Ed=values.need("V_Ed", Number),
                T_Ed=values.need("T_Ed", Number),
                M_Ed=values.need("M_Ed", Number),
                N_Ed=values.get("N_Ed", Number) or Number(0.0, "0", "kN", 0.0, values.place),
                M_Ed_max=values.get("M_Ed_max", Number),
                declared=_merged(member, own),
                verdict=verdict,
                place=values.place,
                web_flange=_web_flange(values.get("web_flange", Values), section, faults),
                details=details_of(values, OF_CASE),
            )
        )
    return built


def _web_flange(values: Values | None, section: Section | None, faults: Faults) -> WebFlange | None:
    """The shear between the web and one of the section's flanges; the top one of an i where it is unsaid."""
    if values is None or section is None:
        return None
    if section.shape not in FLANGED:
        faults.add(values.place, f"web_flange is for sections with flanges, not for a {section.shape}")
        return None
    flange = values.get("flange", str) or section.flange
    if section.shape != "i" and flange != section.flange:
        faults.add(values.spot("flange"), f"this section has no {flange} flange")
    return WebFlange(
        dF=values.need("dF", Number),
        dx=values.need("dx", Number),
        A_sf_s=values.get("A_sf_s", Number),
        cot_theta_f=values.get("cot_theta_f", Number),
        at_top=flange == "top",
    )


def _bar_group(values: Values, mark: str, corners: int | None, faults: Faults) -> BarGroup | None:
    face = values.need("face", str)
    at = tuple((x.value, y.value) for x, y in values.get("at", list) or ())
    if values.get("bars", tuple) is not None:
        written, diameter = values.need("bars", tuple)
    else:
        written, diameter = values.get("count", int), values.need("diameter", Number)
    if at:
        expected, why = len(at), f"{len(at)} places are given under at"
    elif face == "corners" and corners is not None:
        expected, why = corners, f"the outline has {corners} corners"
    else:
        expected, why = written, ""
    if written is not None and written != expected:
        faults.add(values.spot("count", "bars"), f"{mark}: {written} bars, but {why}")
        return None
    if not expected:
        if corners == 0:
            faults.add(
                values.spot("face"), f"{mark}: a circle has no corners; use face: round, or exact places (at)"
            )
        return None
    layer = values.get("layer", int) or 1
    said = values.get("anchored", str)
    return BarGroup(
        mark, face, expected, diameter, layer, at, values.place, values.get("bundle", int) or 1,
        values.get("mandrel", Number), None if said is None else said == "fully",
    )  # fmt: skip


def _marks(items: list[Values], letter: str, faults: Faults) -> list[str]:
    """The mark of each item, with the next free number where none is written."""
    first: dict[str, Place] = {}
    for values in items:
        mark = values.get("mark", str)
        if mark is not None:
            _twice(mark, "mark", values.spot("mark"), first, faults)
    marks = []
    for number, values in enumerate(items, 1):
        mark = values.get("mark", str)
        if mark is None:
            mark = next(free for i in count(number) if (free := f"{letter}{i}") not in first)
            first[mark] = values.place
        marks.append(mark)
    return marks


def _twice(name: str, what: str, spot: Place, first: dict[str, Place], faults: Faults) -> None:
    if name in first:
        faults.add(spot, f'{what} "{shorten(name)}" stands twice; first at line {first[name].line}')
    first.setdefault(name, spot)


def _declared(values: Values | None, faults: Faults) -> Declared:
    """The declared numbers of one map; an angle and its cotangent must not contradict each other."""
    if values is None:
        return {}
    declared: Declared = {}
    for symbol in DECLARABLE:
        area = values.get(symbol, Values)
        number = values.get(symbol, Number) if area is None else area.get("value", Number)
        if number is not None:
            counts = None if area is None else area.get("counts", str)
            declared[symbol] = DeclaredValue(symbol, number, counts, number.place)
    for symbol in STRUT_ANGLES:
        angle, cotangent = declared.get(symbol), declared.get(f"cot_{symbol}")
        if angle and cotangent and not _same_angle(angle.number, cotangent.number):
            later = max(angle, cotangent, key=lambda value: value.place)
            said = f"{symbol} {angle.number.text} and cot_{symbol} {cotangent.number.text}"
            faults.add(later.place, f"{said} contradict each other")
    return declared


def _same_angle(angle: Number, cotangent: Number) -> bool:
    """Whether an angle and a cotangent can be one, each within the rounding of its decimals."""
    low = max(angle.value - angle.half_step, 1e-12)
    high = min(angle.value + angle.half_step, math.pi - 1e-12)
    least, most = math.cos(high) / math.sin(high), math.cos(low) / math.sin(low)
    slack = 1e-9 * (1 + abs(cotangent.value))
    return (
        least - slack <= cotangent.value + cotangent.half_step
        and cotangent.value - cotangent.half_step <= most + slack
    )


def _merged(member: Declared, own: Declared) -> Declared:
    """The case's own values over the member's; an own angle also replaces the member's cotangent."""
    replaced = set(own)
    for symbol in STRUT_ANGLES:
        if symbol in own or f"cot_{symbol}" in own:
            replaced |= {symbol, f"cot_{symbol}"}
    return {symbol: value for symbol, value in member.items() if symbol not in replaced} | own


def _verdict(values: Values | None) -> tuple[str, Place] | None:
    word = None if values is None else values.get("verdict", str)
    return None if values is None or word is None else (word, values.spot("verdict"))
