"""The report as text: what a checker reads in a minute, and can put in a letter.

- The outcome first, then the numbered findings, what wasn't checked, the cautions and the stamp.
- Colour is added by the command line, never here.
"""

from __future__ import annotations

import math
import re
import textwrap
from typing import TYPE_CHECKING

from checker.report.steel_text import steel_text
from checker.report.trail_text import trail_text
from checker.review.drafts import CRASHED, FAIL, NOT_APPLICABLE, NOT_CHECKED, PASS
from checker.review.findings import CaseResult, Finding, MemberResult
from checker.review.window import AS_CLAIMED, Span, common_span, degrees_of
from checker.sheet.shown import number, paper, with_unit

if TYPE_CHECKING:
    from checker.report.audit_report import AuditReport

WIDTH = 100

CAUTIONS = (
    "This report compares a declared design with rules of the standard named above; it is not a strength prediction "
    "and does not replace the judgement of a licensed engineer. The local code, the national annex and the project's "
    "own specification go before it. What is listed as not checked was not checked. Values marked “memory” in the "
    "rules (samestrut sheet) want the text of the standard beside them."
)

OUTCOME_WORDS = {
    "accept": "ACCEPT — nothing was found",
    "accept with remarks": "ACCEPT WITH REMARKS — nothing that needs an answer",
    "return": "RETURN — findings need an answer",
    "incomplete": "INCOMPLETE — not everything could be checked; don't rely on what is missing here",
}


def text_of(report: AuditReport, *, workings: bool = False) -> str:
    """The whole report; `workings` adds the right working under each finding."""
    parts = [_head(report), trail_text(report)]
    parts += [_member(member, workings=workings) for member in report.members]
    parts.append(_foot(report))
    return "\n\n".join(part for part in parts if part) + "\n"


def _head(report: AuditReport) -> str:
    counts = ", ".join(f"{count} {gravity}" for gravity, count in report.counts.items())
    members = len(report.members)
    lines = [
        OUTCOME_WORDS[report.outcome],
        f"{members} member{'s' if members != 1 else ''} audited to {report.stamp.standard}, "
        f"annex: {report.stamp.annex}. Findings: {counts}.",
    ]
    if report.faults:
        files = len({fault.file for fault in report.faults})
        lines.append(
            f"{files} file{'s' if files != 1 else ''} could not be read as a declared design; see the messages."
        )
    return "\n".join(lines)


def _member(member: MemberResult, *, workings: bool) -> str:
    title = f"Member {member.member}" + (f", revision {member.revision}" if member.revision else "")
    lines = [
        f"{title} ({member.file}): {member.outcome}",
        "─" * min(WIDTH, len(title) + len(member.file) + 30),
    ]
    lines.append(_cases(member.cases))
    blocks = ["\n".join(lines)]
    if member.findings:
        blocks.append(_overview(member))
    blocks += [_finding(finding, member.file, workings=workings) for finding in member.findings]
    if workings:
        blocks.append(steel_text(member))
    blocks.append(_checks(member))
    return "\n\n".join(blocks)


def _cases(cases: tuple[CaseResult, ...]) -> str:
    from tabulate import tabulate

    rows = [
        [
            case.case,
            *(_action(case, symbol) for symbol in ("V_Ed", "T_Ed", "M_Ed", "N_Ed")),
            _angles(case.window.admissible),
            _held(case),
            _reserve(case),
        ]
        for case in cases
    ]
    heads = [
        "case",
        "V_Ed",
        "T_Ed",
        "M_Ed",
        "N_Ed",
        "strut angles\nthat hold",
        "links, struts, bars\nhold as provided",
        _GROWTH,
    ]
    table = str(tabulate(rows, heads, tablefmt="plain", disable_numparse=True))
    if len(cases) > 1:
        table += (
            f"\nStrut angles that hold in every case: {_angles(common_span(case.window for case in cases))}"
        )
    return table


def _held(case: CaseResult) -> str:
    """What the window says; where no angle is claimed, that it is the one worked out here."""
    if case.window.holds == AS_CLAIMED and not case.claimed:
        return "on the angle worked out"
    return case.window.holds


_GROWTH = "actions may be scaled to\n(angle used / best)"


def _angles(span: Span | None) -> str:
    degrees = degrees_of(span)
    if degrees is None:
        return "none"
    return " to ".join(dict.fromkeys(f"{number(end, 3)}°" for end in degrees))


def _reserve(case: CaseResult) -> str:
    """`1.12 (bars) / 1.31 at 33° (links)`: the factor on all actions, and what gives way first."""
    used, best = case.reserve
    if not math.isfinite(used.factor):
        return "without limit"
    angle = number(math.degrees(math.atan2(1.0, best.cot)), 3)
    return (
        f"{number(used.factor, 3)} ({used.governs}) / {number(best.factor, 3)} at {angle}° ({best.governs})"
    )


def _action(case: CaseResult, symbol: str) -> str:
    return with_unit(case.values[symbol], case.units[symbol])


def _overview(member: MemberResult) -> str:
    from tabulate import tabulate

    rows = [
        [
            finding.number,
            finding.draft.gravity,
            finding.draft.case or "member",
            about_text(finding),
            value_text(finding, "declared"),
            value_text(finding, "recomputed"),
            value_text(finding, "limit"),
            finding.draft.clause,
        ]
        for finding in member.findings
    ]
    heads = ["No.", "gravity", "case", "about", "declared", "recomputed\nor provided", "limit", "clause"]
    return str(tabulate(rows, heads, tablefmt="plain", disable_numparse=True, maxcolwidths=[None] * 7 + [26]))


def about_text(finding: Finding) -> str:
    """The declared symbol, else the rule: what a reader can find again in the file or in the catalogue."""
    draft = finding.draft
    stands = draft.declared is not None or draft.declared_text
    return paper(draft.quantity) if draft.quantity and stands else draft.rule


def value_text(finding: Finding, name: str) -> str:
    """One of its numbers (declared, recomputed or limit) with its unit; a dash where there is none."""
    draft = finding.draft
    if name == "declared" and draft.declared is None:
        return draft.declared_text or "–"
    value = getattr(draft, name)
    return "–" if value is None else with_unit(value, draft.unit or "-")


def _finding(finding: Finding, file: str, *, workings: bool) -> str:
    draft = finding.draft
    names = draft.case_names
    case = f"case{'s' if len(names) > 1 else ''} {', '.join(names)}"
    hangs = f", carried from No. {finding.carried_from}" if finding.carried_from else ""
    head = f"No. {finding.number}  {draft.gravity.upper()} ({draft.direction}{hangs})  {draft.rule} [{finding.id}]"
    body = [draft.says, f"To do: {draft.todo}"]
    facts = "; ".join(
        filter(None, (f"Clause {draft.clause}" if draft.clause else "", case, draft.places(file)))
    )
    lines = [head, *(_wrapped(text) for text in body), _wrapped(facts)]
    if workings and draft.wrong_working:
        lines.append(_wrapped("Wrong: " + draft.wrong_working))
    if workings and draft.working:
        lines.append(_wrapped("Right: " + draft.working))
    return "\n".join(lines)


def _wrapped(text: str) -> str:
    return textwrap.fill(
        text,
        WIDTH,
        initial_indent="    ",
        subsequent_indent="    ",
        break_long_words=False,
        break_on_hyphens=False,
    )


def _checks(member: MemberResult) -> str:
    counts = dict.fromkeys((PASS, FAIL, NOT_APPLICABLE, NOT_CHECKED, CRASHED), 0)
    for check in member.checks:
        counts[check.status] += 1
    lines = ["Rules: " + ", ".join(f"{count} {status}" for status, count in counts.items() if count) + "."]
    reasons: dict[str, list[str]] = {}
    for check in member.checks:
        if check.status in (NOT_CHECKED, CRASHED):
            reasons.setdefault(check.why, []).append(check.rule)
    undeclared = [rule for why, rules in reasons.items() if why.endswith("is not declared") for rule in rules]
    keys = {why: found[1] for why in reasons if (found := re.search(r"\(key (.+)\)$", why))}
    for why, rules in reasons.items():
        if not why.endswith("is not declared") and why not in keys:
            lines.append(_wrapped(f"Not checked: {', '.join(dict.fromkeys(rules))} — {why}."))
    if keys:
        named = [f"{rule} ({key})" for why, key in keys.items() for rule in dict.fromkeys(reasons[why])]
        lines.append(_wrapped(f"Not checked, for want of the key in brackets: {', '.join(named)}."))
    if undeclared:
        names = ", ".join(dict.fromkeys(rule.removeprefix("agrees.") for rule in undeclared))
        lines.append(_wrapped(f"Not checked, because nothing is declared for it: {names}."))
    return "\n".join(lines)


def _foot(report: AuditReport) -> str:
    stamp = report.stamp
    lines = ["Cautions", _wrapped(CAUTIONS), "Stamp"]
    lines.append(
        _wrapped(
            f"{stamp.tool} {stamp.version}; {stamp.standard}; annex {stamp.annex}; rules {stamp.digest[:16]}"
        )
    )
    lines += [_wrapped(f"{item.file}: sha256 {item.sha256[:16]}") for item in report.inputs]
    return "\n".join(lines)
