"""One member on the page: who, the drawings, the numbered findings, what passed and what was not checked."""

from __future__ import annotations

from html import escape
from typing import TYPE_CHECKING

from checker.page.charts import interaction_drawing, perimeter_drawing, window_drawing
from checker.page.places import Places
from checker.page.section import marked, section_drawing
from checker.review.drafts import CRASHED, NOT_APPLICABLE, NOT_CHECKED, PASS, difference
from checker.sheet.shown import number, paper, with_unit

if TYPE_CHECKING:
    from checker.review.findings import Finding, MemberResult


def member_part(member: MemberResult, index: int) -> str:
    """The member's part of the page; `index` counts members from 1 and makes its ids unique."""
    said = member.design.submission if member.design is not None else {}
    who = "".join(f"<div><dt>{escape(key)}</dt><dd>{escape(text)}</dd></div>" for key, text in said.items())
    drawings, drawn = _drawings(member, index)
    findings = _findings(member, drawn) or "<p>Nothing was found.</p>"
    return (
        f'<section class="member" id="member-{index}" data-outcome="{member.outcome}" '
        f'data-name="{escape(member.member)}" aria-labelledby="member-{index}-head">'
        f'<h2 id="member-{index}-head">{index}. {escape(member.member)} — {member.outcome}</h2>'
        f'<dl class="facts">{who}<div><dt>file</dt><dd>{escape(member.file)}</dd></div></dl>'
        f"<h3>{index}.1 Drawings</h3>{drawings}"
        f"<h3>{index}.2 Findings</h3>{findings}"
        f"<h3>{index}.3 Checks</h3>{_checks(member)}</section>"
    )


def _drawings(member: MemberResult, index: int) -> tuple[str, set[int]]:
    """The drawings, and the numbers of the findings that have a mark on them."""
    if member.measured is None or member.design is None or not member.cases:
        return "", set()
    places = Places(member.design, member.measured)
    marks = marked(member, places)
    drawn = [
        (
            "Section, to scale; numbers lead to the findings",
            section_drawing(member, places, marks, f"s{index}"),
        ),
        (
            "Strut window: the angles on which links, struts and bars hold",
            window_drawing(member, f"w{index}"),
        ),
        ("Torsion against shear", interaction_drawing(member, f"i{index}")),
        ("Longitudinal steel, needed and provided", perimeter_drawing(member, f"p{index}")),
    ]
    figures = "".join(
        f"<figure>{picture}<figcaption>{words}</figcaption></figure>" for words, picture in drawn
    )
    return f'<div class="drawings">{figures}</div>', {finding.number for finding, _ in marks}


def _findings(member: MemberResult, drawn: set[int]) -> str:
    """Roots in the order of their numbers, each with what is carried folded under it."""
    carried: dict[int, list[Finding]] = {}
    for finding in member.findings:
        if finding.carried_from is not None:
            carried.setdefault(finding.carried_from, []).append(finding)
    roots = (finding for finding in member.findings if finding.carried_from is None)
    return "".join(_finding(finding, member, carried, drawn) for finding in roots)


def _finding(
    finding: Finding, member: MemberResult, carried: dict[int, list[Finding]], drawn: set[int]
) -> str:
    draft = finding.draft
    under = carried.get(finding.number, [])
    inner = "".join(_finding(one, member, carried, drawn) for one in under)
    folded = (
        f'<details class="carried"><summary>{len(under)} carried from No. {finding.number}: '
        f"{', '.join(f'No. {one.number}' for one in under)}</summary>{inner}</details>"
        if under
        else ""
    )
    back = f'<p><a href="#mark-{finding.number}">On the drawing</a></p>' if finding.number in drawn else ""
    facts = "".join(
        f"<div><dt>{name}</dt><dd>{escape(text)}</dd></div>" for name, text in _facts(finding, member)
    )
    return (
        f'<article class="finding" id="finding-{finding.number}" data-gravity="{draft.gravity}" '
        f'data-rule="{escape(draft.rule)}" tabindex="-1"><h4>No. {finding.number} {draft.gravity.upper()} '
        f'<span class="quiet">({escape(draft.direction)}) {escape(draft.rule)} '
        f'<span class="mono">[{finding.id}]</span></span></h4>'
        f"<p>{escape(draft.says)}</p><p><b>To do:</b> {escape(draft.todo)}</p>"
        f'<dl class="facts">{facts}</dl>{back}{_workings(finding)}{folded}</article>'
    )


def _facts(finding: Finding, member: MemberResult) -> list[tuple[str, str]]:
    draft = finding.draft
    unit = draft.unit or "-"
    found: list[tuple[str, str]] = []
    if draft.declared is not None:
        found.append(("declared", f"{paper(draft.quantity)} = {with_unit(draft.declared, unit)}"))
    elif draft.declared_text:
        found.append(("declared", draft.declared_text))
    for name, value in (("recomputed or provided", draft.recomputed), ("limit", draft.limit)):
        if value is not None:
            found.append((name, with_unit(value, unit)))
    if draft.declared is not None and draft.recomputed is not None:
        found.append(("difference", difference(draft.declared, draft.recomputed, unit)))
    if draft.tolerance is not None:
        found.append(("tolerance", with_unit(draft.tolerance, unit)))
    if draft.clause:
        found.append(("clause", draft.clause))
    found.append(("case", ", ".join(draft.case_names)))
    places = draft.places(member.file)
    return [*found, ("place", places)] if places else found


def _workings(finding: Finding) -> str:
    draft = finding.draft
    parts = [
        f'<div><p class="quiet">{name}</p><p class="mono">{escape(words)}</p></div>'
        for name, words in (("Wrong working", draft.wrong_working), ("Right working", draft.working))
        if words
    ]
    if not parts:
        return ""
    return f'<div class="two">{"".join(parts)}</div>'


def _checks(member: MemberResult) -> str:
    passed = [check for check in member.checks if check.status == PASS]
    unchecked = [check for check in member.checks if check.status in (NOT_CHECKED, CRASHED)]
    silent = sum(check.status == NOT_APPLICABLE for check in member.checks)
    rows = "".join(
        f"<tr><td>{escape(check.rule)}</td><td>{escape(check.case or 'member')}</td>"
        f"<td>{'–' if check.margin is None else f'{number(check.margin * 100, 3)} %'}</td></tr>"
        for check in passed
    )
    reasons: dict[str, list[str]] = {}
    for check in unchecked:
        reasons.setdefault(check.why, []).append(check.rule)
    missing = "".join(
        f"<li>{escape(', '.join(dict.fromkeys(rules)))}: {escape(why)}</li>" for why, rules in reasons.items()
    )
    return (
        f"<details><summary>{len(passed)} passed</summary><table><caption>What passed, and the share of the limit "
        'or tolerance left over</caption><thead><tr><th scope="col">Rule</th><th scope="col">Case</th>'
        f'<th scope="col">Left over</th></tr></thead><tbody>{rows}</tbody></table></details>'
        f"<details><summary>{len(unchecked)} not checked</summary><ul>{missing}</ul></details>"
        f"<p>{silent} not applicable.</p>"
    )
