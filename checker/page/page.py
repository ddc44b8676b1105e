"""The whole page: outcome, index, members, cautions and stamp, in one self-contained file.

- Made from the finished report alone; everything a person wrote is escaped.
- It works without script: the script only filters, sorts and folds.
"""

from __future__ import annotations

from html import escape
from pathlib import Path
from typing import TYPE_CHECKING

from checker.page.member import member_part
from checker.report.text import CAUTIONS, OUTCOME_WORDS

if TYPE_CHECKING:
    from checker.report.audit_report import AuditReport

_HERE = Path(__file__).parent


def html_of(report: AuditReport) -> str:
    """The report as one HTML file (UTF-8), without any reference to the outside."""
    style = (_HERE / "style.css").read_text(encoding="utf-8")
    script = (_HERE / "script.js").read_text(encoding="utf-8")
    return (
        '<!doctype html>\n<html lang="en"><head><meta charset="utf-8">'
        '<meta name="viewport" content="width=device-width, initial-scale=1">'
        "<meta http-equiv=\"Content-Security-Policy\" content=\"default-src 'none'; style-src 'unsafe-inline'; "
        "script-src 'unsafe-inline'; img-src data:\">"
        f"<title>{escape(_title(report))}</title><style>{style}{_stamp_style(report)}</style></head><body>"
        '<a class="skip" href="#members">To the members</a>'
        f"{_head(report)}<main>{_index(report)}{_tools(report)}"
        f'<div id="members">{"".join(member_part(m, i) for i, m in enumerate(report.members, 1))}</div></main>'
        f"{_foot(report)}<script>{script}</script></body></html>\n"
    )


def _title(report: AuditReport) -> str:
    names = ", ".join(member.member for member in report.members[:3])
    more = f" and {len(report.members) - 3} more" if len(report.members) > 3 else ""
    return f"Audit of {names}{more}" if names else "Audit"


def _stamp_words(report: AuditReport) -> str:
    stamp = report.stamp
    return f"{stamp.tool} {stamp.version}; {stamp.standard}; annex {stamp.annex}; rules {stamp.digest[:16]}"


def _stamp_style(report: AuditReport) -> str:
    """The stamp at the foot of each printed page; as a string of CSS it needs an escape of its own."""
    words = "".join(c if c.isalnum() or c in " .:;,-" else f"\\{ord(c):x} " for c in _stamp_words(report))
    small = "font: 8pt Georgia, serif; color: #444"
    return (
        f'@media print {{ @page {{ @bottom-left {{ content: "{words}"; {small} }} '
        f'@bottom-right {{ content: counter(page) " of " counter(pages); {small} }} }} }}'
    )


def _head(report: AuditReport) -> str:
    counts = "".join(f"<li><b>{count}</b> {gravity}</li>" for gravity, count in report.counts.items())
    faults = "".join(
        f"<li>{escape(f'{fault.file}:{fault.line}:{fault.column}: {fault.message}')}</li>"
        for fault in report.faults
    )
    unread = f"<h2>Files that could not be read</h2><ul>{faults}</ul>" if faults else ""
    return (
        f"<header><h1>{escape(_title(report))}</h1>"
        f'<p class="outcome" data-outcome="{report.outcome}">{escape(OUTCOME_WORDS[report.outcome])}</p>'
        f'<ul class="counts" aria-label="Findings by gravity">{counts}</ul>'
        f'<p class="quiet">{escape(_stamp_words(report))}</p><p>{escape(CAUTIONS)}</p>{unread}</header>'
    )


def _index(report: AuditReport) -> str:
    rows = []
    for number, member in enumerate(report.members, 1):
        found = [finding.draft.gravity for finding in member.findings]
        counts = "".join(f"<td>{found.count(gravity)}</td>" for gravity in report.counts)
        rows.append(
            f'<tr data-member="member-{number}"><td><a href="#member-{number}">{escape(member.member)}</a></td>'
            f"<td>{escape(member.revision)}</td><td>{member.outcome}</td>{counts}<td>{escape(member.file)}</td></tr>"
        )
    heads = ["Member", "Revision", "Outcome", *(gravity.capitalize() for gravity in report.counts), "File"]
    head = "".join(f'<th scope="col">{name}</th>' for name in heads)
    return (
        '<section aria-labelledby="index-head"><h2 id="index-head">Members</h2>'
        '<div class="wide" tabindex="0" role="region" aria-label="Table of members"><table id="index">'
        "<caption>Every member with its outcome and the number of its findings</caption>"
        f"<thead><tr>{head}</tr></thead><tbody>{''.join(rows)}</tbody></table></div></section>"
    )


def _tools(report: AuditReport) -> str:
    def choice(name: str, label: str, values: list[str]) -> str:
        options = "".join(f"<option>{escape(value)}</option>" for value in values)
        return f'<label>{label}<select id="by-{name}"><option value="">all</option>{options}</select></label>'

    outcomes = list(dict.fromkeys(member.outcome for member in report.members))
    gravities = [gravity for gravity, count in report.counts.items() if count]
    rules = sorted({finding.draft.rule for finding in report.findings})
    return (
        '<div class="tools" id="tools" role="search" aria-label="Filter" hidden>'
        + choice("outcome", "Outcome", outcomes)
        + choice("gravity", "Gravity", gravities)
        + choice("rule", "Rule", rules)
        + '<label>Words<input id="by-words" type="search"></label>'
        '<button type="button" id="all-open">Unfold all</button>'
        '<button type="button" id="all-shut">Fold all</button>'
        '<p id="told" class="quiet" aria-live="polite"></p></div>'
    )


def _foot(report: AuditReport) -> str:
    files = "".join(
        f'<li>{escape(item.file)}: <span class="mono">sha256 {item.sha256}</span></li>'
        for item in report.inputs
    )
    return f"<footer><h2>Stamp</h2><p>{escape(_stamp_words(report))}</p><ul>{files}</ul></footer>"
