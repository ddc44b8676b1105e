"""The other drawings of a member: the strut window, torsion against shear, and the steel needed against provided."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from checker.page import svg
from checker.review.window import Span, common_span
from checker.sheet.shown import number, with_unit

if TYPE_CHECKING:
    from checker.review.findings import CaseResult, MemberResult

LEFT, WIDE, ROW = 150.0, 300.0, 15.0
STEEPEST, FLATTEST = 1.0, 2.5  # cot θ at the ends of the axis (6.7N)
PARTS = ("links", "concrete", "bars")


def _degrees(cot: float) -> float:
    return math.degrees(math.atan2(1.0, cot))


def _angle(cot: float) -> str:
    return f"{number(_degrees(cot), 3)}°"


def _along(cot: float) -> float:
    """Where an angle stands on the axis: even in cot θ, 45° at the left."""
    return LEFT + WIDE * (min(max(cot, STEEPEST), FLATTEST) - STEEPEST) / (FLATTEST - STEEPEST)


def _span_words(span: Span | None) -> str:
    return "nowhere" if span is None else f"from {_angle(span[1])} to {_angle(span[0])}"


def window_drawing(member: MemberResult, name: str) -> str:
    """For each case the angles on which links, struts and bars hold, what is common, and the angles used."""
    body, told, y = [], [], 24.0
    for cot in (1.0, 1.25, 1.5, 1.75, 2.0, 2.25, 2.5):
        body.append(svg.text((_along(cot), 14), _angle(cot), size=10, anchor="middle", fill=svg.QUIET))
    top = y
    for case in member.cases:
        body.append(svg.text((4, y + 11), case.case[:24], size=11))
        told.append(
            f"case {case.case}: " + ", ".join(f"{p} {_span_words(getattr(case.window, p))}" for p in PARTS)
        )
        for part in PARTS:
            span = getattr(case.window, part)
            body.append(svg.text((LEFT - 6, y + 10), part, size=10, anchor="end", fill=svg.QUIET))
            if span is None:
                body.append(svg.text((LEFT + 4, y + 10), "holds on no angle", size=10, fill=svg.ALARM))
            else:
                width = max(_along(span[1]) - _along(span[0]), 2.0)
                body.append(svg.rect((_along(span[0]), y + 3), width, 8, fill=svg.CONCRETE, stroke=svg.STEEL))
            y += ROW
        y += 6
    common = common_span(case.window for case in member.cases)
    body.append(svg.text((LEFT - 6, y + 11), "all together", size=11, anchor="end"))
    if common is None:
        body.append(svg.text((LEFT + 4, y + 11), "no common angle", size=11, fill=svg.ALARM))
    else:
        width = max(_along(common[1]) - _along(common[0]), 2.0)
        body.append(svg.rect((_along(common[0]), y + 2), width, 11, fill=svg.GOOD, stroke=svg.INK))
    told.append(f"all cases together {_span_words(common)}")
    for case in member.cases:
        for side, mark in (("shear", "V"), ("torsion", "T")):
            if not case.values[mark]:
                continue
            cot = case.values[f"cot_theta_{side}"]
            body.append(svg.line((_along(cot), top), (_along(cot), y + 16), stroke=svg.INK, dash="2 2"))
            said = "claimed" if case.claimed else "worked out"
            told.append(f"case {case.case}: {said} for {side} {_angle(cot)}")
    cots = dict.fromkeys(
        round(c.values[f"cot_theta_{s}"], 3) for c in member.cases for s in ("shear", "torsion")
    )
    y += 28
    for cot in cots:
        body.append(svg.text((_along(cot), y), f"▲ {_angle(cot)}", size=10, anchor="middle"))
    for finding in member.findings:
        used = finding.draft.implied_cot
        if used is not None:
            body.append(
                svg.text(
                    (_along(used), y + 13), f"◆ {_angle(used)}", size=10, anchor="middle", fill=svg.ALARM
                )
            )
            told.append(f"No. {finding.number}: the values imply {_angle(used)}")
    body.append(
        svg.text(
            (4, y + 28),
            "▲ angle claimed or taken   ◆ angle that declared values imply",
            size=10,
            fill=svg.QUIET,
        )
    )
    title = f"Strut angles of {member.member}"
    return svg.picture(name, LEFT + WIDE + 30, y + 36, title, "; ".join(told) + ".", body)


def interaction_drawing(member: MemberResult, name: str) -> str:
    """Torsion against shear: the crushing line at the angle used in the first case, the cracking line, the cases."""
    first = member.cases[0].values
    crush = first["V_Rd_max"], first["T_Rd_max"]
    crack = first["V_Rd_c"], first["T_Rd_c"]
    most_v = 1.12 * max(crush[0], *(case.values["V"] for case in member.cases)) or 1.0
    most_t = 1.12 * max(crush[1], *(case.values["T"] for case in member.cases)) or 1.0
    left, base, size = 52.0, 250.0, 230.0

    def at(v: float, t: float) -> tuple[float, float]:
        return left + size * v / most_v, base - size * t / most_t

    body = [
        svg.line(at(0, 0), at(most_v, 0)), svg.line(at(0, 0), at(0, most_t)),
        svg.line(at(crush[0], 0), at(0, crush[1]), stroke=svg.ALARM, width=2),
        svg.line(at(crack[0], 0), at(0, crack[1]), stroke=svg.QUIET, width=1.5, dash="6 3"),
        svg.text(at(crush[0] * 0.86, crush[1] * 0.2), "struts crush", size=10, fill=svg.ALARM),
        svg.text((at(crack[0], 0)[0] * 0.5 + left * 0.5, at(0, crack[1] * 0.5)[1] - 4), "cracks", size=10, fill=svg.QUIET),
        svg.text((left + size, base + 16), f"V, to {with_unit(most_v, 'kN', 3)}", size=10, anchor="end", fill=svg.QUIET),
        svg.text((left - 8, base - size + 4), f"T, to {with_unit(most_t, 'kNm', 3)}", size=10, fill=svg.QUIET),
    ]  # fmt: skip
    told = [f"struts crush at V {with_unit(crush[0], 'kN', 3)} or T {with_unit(crush[1], 'kNm', 3)}",
            f"concrete cracks at V {with_unit(crack[0], 'kN', 3)} or T {with_unit(crack[1], 'kNm', 3)}"]  # fmt: skip
    for index, case in enumerate(member.cases, 1):
        x, y = at(case.values["V"], case.values["T"])
        body += [
            svg.circle((x, y), 4, fill=svg.STEEL),
            svg.text((x + 6, y - 5), f"{index} {case.case[:20]}", size=10),
        ]
        told.append(
            f"case {case.case}: V {with_unit(case.values['V'], 'kN', 3)}, T {with_unit(case.values['T'], 'kNm', 3)}"
        )
    title = f"Torsion against shear, {member.member}"
    return svg.picture(name, left + size + 40, base + 26, title, "; ".join(told) + ".", body)


def perimeter_drawing(member: MemberResult, name: str) -> str:
    """Longitudinal steel needed (hatched outline) against provided (filled), for each half and the weaker side."""
    worst: dict[str, tuple[CaseResult, float, float]] = {}
    for case in member.cases:
        v = case.values
        for part, wanted, given in (
            ("tension half", "A_s_tension_needed", "A_s_tension_provided"),
            ("compression half", "A_s_compression_needed", "A_s_compression_provided"),
            ("weaker side", "A_sl_side", "A_side_least"),
        ):
            if wanted in v and given in v and math.isfinite(v[wanted]):
                known = worst.get(part)
                if known is None or v[wanted] - v[given] > known[1] - known[2]:
                    worst[part] = case, v[wanted], v[given]
    most = max((max(need, have) for _, need, have in worst.values()), default=1.0) or 1.0
    body, told, y = [], [], 10.0
    for part, (case, need, have) in worst.items():
        body.append(svg.text((4, y + 12), part, size=11))
        body.append(svg.text((4, y + 26), case.case[:22], size=10, fill=svg.QUIET))
        body += _needed_and_provided(need, have, most, y)
        y += 2 * ROW
        told.append(f"{part}, case {case.case}: needed {number(need)} mm², provided {number(have)} mm²")
        y += 10
    title = f"Longitudinal steel of {member.member}"
    return svg.picture(name, LEFT + 390, max(y, 20), title, "; ".join(told) + ".", body)


def _needed_and_provided(need: float, have: float, most: float, y: float) -> list[str]:
    """The dashed bar of what is needed over the full one of what is provided, with their numbers (mm2)."""
    short = have < need * (1 - 1e-6)
    below = y + ROW
    words = f"provided {number(have)} mm²{' — short' if short else ''}"
    return [
        svg.rect((LEFT, y + 2), 200 * need / most, 11, fill="none", extra=' stroke-dasharray="4 2"'),
        svg.text((LEFT + 206, y + 12), f"needed {number(need)} mm²", size=10),
        svg.rect((LEFT, below + 2), 200 * have / most, 11, fill=svg.STEEL),
        svg.text((LEFT + 206, below + 12), words, size=10, fill=svg.ALARM if short else svg.INK),
    ]
