"""What became of the findings since an earlier report, in the text form."""

from __future__ import annotations

from typing import TYPE_CHECKING

from checker.sheet.shown import number

if TYPE_CHECKING:
    from checker.report.audit_report import AuditReport
    from checker.trail import Step


def trail_text(report: AuditReport) -> str:
    """A line a finding by number; nothing where no earlier report was given."""
    trail = report.trail
    if trail is None:
        return ""
    from tabulate import tabulate

    since = f"Since revision {trail.since}" if trail.since else "Since the earlier report"
    rows = [[step.number, step.state, step.member, step.rule, _values(step)] for step in trail.steps]
    heads = ["No.", "what became of it", "member", "rule", "before → now"]
    lines = [since, *(f"Not the same as before: {text}" for text in trail.differs)]
    return "\n".join([*lines, str(tabulate(rows, heads, tablefmt="plain", disable_numparse=True))])


def _values(step: Step) -> str:
    if step.was is None or step.now is None or step.was == step.now:
        return ""
    unit = {"-": "", "deg": "°"}.get(step.unit, f" {step.unit}")
    return f"{number(step.was)} → {number(step.now)}{unit}"
