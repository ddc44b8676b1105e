"""Two revisions held together: old numbers kept, new ones never used before, and what became of each old finding.

- Findings are matched by their lasting id alone. A renamed member's are looked for under its old name.
- A number is never used again: the report carries the highest one ever given.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Mapping
from typing import Any, NamedTuple

from checker.review.drafts import NOT_CHECKED
from checker.review.findings import Finding, MemberResult, identity
from checker.sheet.shown import to_shown

NEW, OPEN, BETTER, WORSE, SETTLED, LOST = (
    "new", "still open", "changed for the better", "changed for the worse", "settled", "lost from sight",
)  # fmt: skip


class Step(NamedTuple):
    """What became of one finding: its number, member and rule, and its value before and now, in the shown unit."""

    number: int
    id: str
    member: str
    rule: str
    state: str
    was: float | None = None
    now: float | None = None
    unit: str = ""


class Trail(NamedTuple):
    """What became of every finding since the report before.

    Attributes:
        since: the revisions of the report before.
        highest: the highest number ever given.
        steps: by number.
        differs: what else is not the same: standard, annex, rules, version.
    """

    since: str
    highest: int
    steps: tuple[Step, ...]
    differs: tuple[str, ...]


def continued(
    members: Iterable[MemberResult],
    before: Mapping[str, Any],
    renamed: Mapping[str, str],
    stamp: Mapping[str, str],
) -> tuple[tuple[MemberResult, ...], Trail]:
    """The members with their old numbers back, and what became of each finding.

    Args:
        members: this run's, numbered from 1.
        before: the earlier report's document.
        renamed: old name of a member -> its new name.
        stamp: this run's standard, annex, digest and version.
    """
    old = [(finding, member) for member in before["members"] for finding in member["findings"]]
    highest = max([before.get("trail", {}).get("highest", 0), *(finding["number"] for finding, _ in old)])
    waiting: dict[str, list[dict[str, Any]]] = {}
    for finding, _ in old:
        waiting.setdefault(finding["id"], []).append(finding)
    was_called = {new: name for name, new in renamed.items()}
    steps: list[Step] = []
    kept: list[MemberResult] = []
    for member in members:
        numbers: dict[int, int] = {}
        for finding in member.findings:
            called = was_called.get(member.member)
            id_ = identity(called, finding.draft) if called else finding.id
            known = waiting.get(id_)
            if known:
                earlier = known.pop(0)
                numbers[finding.number] = earlier["number"]
                steps.append(_compared(finding, earlier, member.member))
            else:
                highest += 1
                numbers[finding.number] = highest
                draft = finding.draft
                steps.append(Step(highest, finding.id, member.member, draft.rule, NEW))
        kept.append(member._replace(findings=tuple(_renumbered(f, numbers) for f in member.findings)))
    steps += _gone(waiting, old, kept, renamed)
    since = ", ".join(dict.fromkeys(m["revision"] for m in before["members"] if m["revision"]))
    return tuple(kept), Trail(
        since, highest, tuple(sorted(steps, key=lambda step: step.number)), _differs(before, stamp)
    )


def _renumbered(finding: Finding, numbers: Mapping[int, int]) -> Finding:
    root = finding.carried_from
    return finding._replace(
        number=numbers[finding.number], carried_from=None if root is None else numbers[root]
    )


def _compared(finding: Finding, earlier: Mapping[str, Any], member: str) -> Step:
    """Nearer to what it is held against is better; the same value is still open."""
    draft = finding.draft
    unit = draft.unit or "-"
    stated = draft.declared if draft.declared is not None else draft.recomputed
    now = None if stated is None or not math.isfinite(stated) else float(f"{to_shown(stated, unit):.9g}")
    was = earlier["declared"] if draft.declared is not None else earlier["recomputed"]
    ratio_now, ratio_was = draft.ratio, earlier.get("ratio")
    state = OPEN
    if isinstance(was, int | float) and now is not None and ratio_now and ratio_was and was != now:
        further = abs(math.log(abs(ratio_now))) - abs(math.log(abs(ratio_was)))
        state = OPEN if abs(further) < 1e-9 else BETTER if further < 0 else WORSE
    number = was if isinstance(was, int | float) else None
    return Step(earlier["number"], finding.id, member, draft.rule, state, number, now, draft.unit)


def _gone(
    waiting: Mapping[str, list[dict[str, Any]]],
    old: list[tuple[dict[str, Any], dict[str, Any]]],
    members: list[MemberResult],
    renamed: Mapping[str, str],
) -> list[Step]:
    """Old findings that don't stand any more: settled, or lost from sight where their rule wasn't checked now."""
    left = {id(finding) for findings in waiting.values() for finding in findings}
    steps = []
    for finding, member in old:
        if id(finding) not in left:
            continue
        name = renamed.get(member["member"], member["member"])
        checks = [check for one in members if one.member == name for check in one.checks]
        statuses = {check.status for check in checks if check.rule == finding["rule"]}
        state = LOST if not statuses or statuses == {NOT_CHECKED} else SETTLED
        steps.append(Step(finding["number"], finding["id"], name, finding["rule"], state))
    return steps


def _differs(before: Mapping[str, Any], stamp: Mapping[str, str]) -> tuple[str, ...]:
    was = {**before["rules"], "version": before["tool"]["version"]}
    return tuple(
        f"{name}: {str(was.get(name))[:16]} before, {value[:16]} now"
        for name, value in stamp.items()
        if was.get(name) != value
    )
