"""The report as Markdown: for a repository, a ticket or a wiki; what a person wrote is escaped."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING

from checker.report.text import CAUTIONS, OUTCOME_WORDS, about_text, value_text
from checker.review.drafts import NOT_CHECKED

if TYPE_CHECKING:
    from checker.report.audit_report import AuditReport
    from checker.review.findings import Finding, MemberResult

VALUES = ("declared", "recomputed", "limit")
_MARKS = re.compile(r"([\\`*_{}\[\]()#+!|<>~&])")


def markdown_of(report: AuditReport) -> str:
    """The whole report."""
    counts = ", ".join(f"{count} {gravity}" for gravity, count in report.counts.items())
    stamp = report.stamp
    parts = [
        "# Audit report",
        f"**{plain(OUTCOME_WORDS[report.outcome])}**",
        f"{len(report.members)} members audited to {plain(stamp.standard)}, annex {plain(stamp.annex)}. Findings: {counts}.",
        *(_member(member) for member in report.members),
        *_faults(report),
        f"## Cautions\n\n{plain(CAUTIONS)}",
        f"## Stamp\n\n{plain(stamp.tool)} {plain(stamp.version)}; rules {stamp.digest[:16]}",
        *(f"- {plain(item.file)}: sha256 {item.sha256}" for item in report.inputs),
    ]
    return "\n\n".join(parts) + "\n"


def plain(text: str) -> str:
    """Text in which nothing is a mark of Markdown or HTML, on one line."""
    return _MARKS.sub(r"\\\1", " ".join(text.split()))


def _member(member: MemberResult) -> str:
    rows = [
        (
            str(f.number),
            f.draft.gravity,
            f.draft.case or "member",
            about_text(f),
            *(value_text(f, name) for name in VALUES),
            f.draft.clause,
        )
        for f in member.findings
    ]
    revision = f", revision {member.revision}" if member.revision else ""
    parts = [f"## Member {plain(member.member + revision)} ({plain(member.file)}): {member.outcome}"]
    if rows:
        heads = ("No.", "gravity", "case", "about", "declared", "recomputed or provided", "limit", "clause")
        lines = [heads, ("---",) * len(heads), *(tuple(map(plain, row)) for row in rows)]
        parts.append("\n".join("| " + " | ".join(row) + " |" for row in lines))
    parts += [_finding(finding, member.file) for finding in member.findings]
    unchecked = dict.fromkeys(check.rule for check in member.checks if check.status == NOT_CHECKED)
    if unchecked:
        parts.append(f"Not checked: {plain(', '.join(unchecked))}.")
    return "\n\n".join(parts)


def _finding(finding: Finding, file: str) -> str:
    draft = finding.draft
    hangs = f", carried from No. {finding.carried_from}" if finding.carried_from else ""
    lines = [
        f"### No. {finding.number} {draft.gravity} ({plain(draft.direction)}{hangs}): {plain(draft.rule)}",
        plain(draft.says),
        f"**To do:** {plain(draft.todo)}",
        f"Clause {plain(draft.clause)}; {plain(draft.places(file))}; id {finding.id}",
    ]
    if draft.wrong_working:
        lines.append(f"Wrong working: {plain(draft.wrong_working)}")
    if draft.working:
        lines.append(f"Right working: {plain(draft.working)}")
    return "\n\n".join(lines)


def _faults(report: AuditReport) -> list[str]:
    if not report.faults:
        return []
    lines = (
        f"- {plain(f'{fault.file}:{fault.line}:{fault.column}: {fault.message}')}" for fault in report.faults
    )
    return ["## Files that could not be read\n\n" + "\n".join(lines)]
