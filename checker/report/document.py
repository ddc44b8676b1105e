"""The report as plain data: the public, versioned JSON form; never a dump of internals.

- Angles are in degrees, everything else in the shown units; values that don't exist are null.
- No clock, no path of a machine: the same inputs, rules and version give the same bytes.
"""

from __future__ import annotations

import json
import math
from typing import TYPE_CHECKING, Any

from checker.geometry.counted import bars_counted, links_counted
from checker.review.drafts import Check, Draft
from checker.review.findings import CaseResult, Finding, MemberResult
from checker.review.window import Span, common_span, degrees_of
from checker.sheet.shown import to_shown

if TYPE_CHECKING:
    from checker.report.audit_report import AuditReport

FORMAT = 1
DIGITS = 9  # significant digits written: more is noise, fewer would hide a rounding


def document_of(report: AuditReport) -> dict[str, Any]:
    """The whole report as dictionaries and lists."""
    stamp = report.stamp
    document = {
        "format": FORMAT,
        "tool": {"name": stamp.tool, "version": stamp.version},
        "rules": {"standard": stamp.standard, "annex": stamp.annex, "digest": stamp.digest},
        "inputs": [{"file": item.file, "sha256": item.sha256} for item in report.inputs],
        "outcome": report.outcome,
        "counts": report.counts,
        "members": [_member(member) for member in report.members],
        "faults": [
            {"file": fault.file, "line": fault.line, "column": fault.column, "says": fault.message}
            for fault in report.faults
        ],
    }
    if report.trail is not None:
        steps = [step._asdict() for step in report.trail.steps]
        document["trail"] = {**report.trail._asdict(), "steps": steps, "differs": list(report.trail.differs)}
    return document


def json_text(report: AuditReport) -> str:
    return json.dumps(document_of(report), ensure_ascii=False, indent=1) + "\n"


def _member(member: MemberResult) -> dict[str, Any]:
    return {
        "member": member.member,
        "file": member.file,
        "revision": member.revision,
        "outcome": member.outcome,
        "findings": [_finding(finding, member.file) for finding in member.findings],
        "checks": [_check(check) for check in member.checks],
        "cases": [_case(case) for case in member.cases],
        "window": _span(common_span(case.window for case in member.cases)),
        "steel": _steel(member),
    }


def _steel(member: MemberResult) -> dict[str, Any] | None:
    """What each group of bars and each set of links counts for (mm, mm2, mm2/mm)."""
    if member.design is None or member.measured is None:
        return None
    return {
        "bars": [
            {**bars._asdict(), **{key: _rounded(getattr(bars, key)) for key in ("area", "bottom", "top")}}
            for bars in bars_counted(member.design, member.measured)
        ],
        "links": [
            {**links._asdict(), "shear": _rounded(links.shear), "torsion": _rounded(links.torsion)}
            for links in links_counted(member.design)
        ],
    }


def quantity_rows(report: AuditReport) -> list[tuple[Any, ...]]:
    """Member, case, symbol, value, unit, declared, declared over recomputed: a row a quantity, in shown units."""
    rows: list[tuple[Any, ...]] = []
    for member in report.members:
        claims = {case.name: case.declared for case in member.design.cases} if member.design else {}
        for case in member.cases:
            for symbol, value in case.values.items():
                unit = case.units[symbol]
                claim = claims.get(case.case, {}).get(symbol)
                declared = None if claim is None else claim.number.value
                ratio = None if declared is None or not value else _rounded(declared / value)
                shown = _shown(declared, unit)
                rows.append((member.member, case.case, symbol, _shown(value, unit), unit, shown, ratio))
    return rows


def _finding(finding: Finding, file: str) -> dict[str, Any]:
    draft = finding.draft
    return {
        "number": finding.number,
        "id": finding.id,
        "rule": draft.rule,
        "gravity": draft.gravity,
        "direction": draft.direction,
        "case": draft.case,
        "cases": list(draft.cases),
        "quantity": draft.quantity or None,
        "unit": draft.unit or None,
        "declared": draft.declared_text
        if draft.quantity == "verdict"
        else _shown(draft.declared, draft.unit),
        "recomputed": _shown(draft.recomputed, draft.unit),
        "limit": _shown(draft.limit, draft.unit),
        "tolerance": _shown(draft.tolerance, draft.unit),
        "ratio": _rounded(draft.ratio),
        "clause": draft.clause,
        "where": [{"file": file, "line": place.line, "column": place.column} for place in draft.where],
        "says": draft.says,
        "todo": draft.todo,
        "slip": draft.slip,
        "slips": list(draft.slips),
        "shows_in": list(draft.shows_in),
        "carried_from": finding.carried_from,
        "implied_theta": _implied(draft),
        "workings": {"right": draft.working or None, "wrong": draft.wrong_working or None},
    }


def _implied(draft: Draft) -> float | None:
    if draft.implied_cot is None or draft.implied_cot <= 0:
        return None
    return _rounded(math.degrees(math.atan2(1.0, draft.implied_cot)))


def _check(check: Check) -> dict[str, Any]:
    return {
        "rule": check.rule,
        "case": check.case,
        "status": check.status,
        "why": check.why or None,
        "margin": _rounded(check.margin),
    }


def _case(case: CaseResult) -> dict[str, Any]:
    window = case.window
    return {
        "case": case.case,
        "quantities": {
            symbol: {"value": _shown(value, case.units[symbol]), "unit": case.units[symbol]}
            for symbol, value in case.values.items()
        },
        "window": {
            name: _span(getattr(window, name)) for name in ("links", "concrete", "bars", "admissible")
        },
        "holds": window.holds,
        "reserve": {
            name: {
                "factor": _rounded(reserve.factor),
                "theta": _rounded(math.degrees(math.atan2(1.0, reserve.cot))),
                "governs": reserve.governs,
            }
            for name, reserve in zip(("used", "best"), case.reserve, strict=True)
        },
    }


def _span(span: Span | None) -> list[float | None] | None:
    degrees = degrees_of(span)
    return None if degrees is None else [_rounded(end) for end in degrees]


def _shown(value: float | None, unit: str) -> float | None:
    return None if value is None else _rounded(to_shown(value, unit or "-"))


def _rounded(value: float | None) -> float | None:
    """A float that JSON can hold, without the noise of its last bits; None where there is no number."""
    if value is None or not math.isfinite(value):
        return None
    return float(f"{value:.{DIGITS}g}")
