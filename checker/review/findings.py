"""From drafts to numbered findings: merging over cases, identity, order, the outcome and the exit code.

- Everything about gravity, numbering and outcome is here and nowhere else.
- Within a member roots come first, by gravity (a verdict that doesn't stand before all), then by place in the file;
  what is carried follows its root. Numbers run on through the report.
- `id` is a short digest of member, rule, case and quantity: it outlives values, wording, line and order.
"""

from __future__ import annotations

import hashlib
import math
from collections.abc import Iterable, Mapping
from typing import TYPE_CHECKING, NamedTuple

from checker.review.catalogue import GRAVITIES
from checker.review.drafts import CRASHED, Check, Draft
from checker.review.window import Reserve, Window

if TYPE_CHECKING:
    from checker.declared.model import Design
    from checker.geometry.measure import Measured

ACCEPT, WITH_REMARKS, RETURN, INCOMPLETE = "accept", "accept with remarks", "return", "incomplete"
EXIT_CODES = {ACCEPT: 0, WITH_REMARKS: 0, RETURN: 1, INCOMPLETE: 3}


class Finding(NamedTuple):
    """One numbered finding; `draft` has all its facts, `carried_from` is the number of its root."""

    number: int
    id: str
    draft: Draft
    carried_from: int | None


class CaseResult(NamedTuple):
    """What was recomputed for one case: values worth showing (inside units), window, reserve as used and at best."""

    case: str
    values: Mapping[str, float]
    units: Mapping[str, str]
    window: Window
    reserve: tuple[Reserve, Reserve]
    claimed: bool = True


class MemberResult(NamedTuple):
    """One member of a report; with what was read and measured, for those who show it."""

    member: str
    file: str
    revision: str
    outcome: str
    findings: tuple[Finding, ...]
    checks: tuple[Check, ...]
    cases: tuple[CaseResult, ...]
    design: Design | None = None
    measured: Measured | None = None


def identity(member: str, draft: Draft) -> str:
    """The lasting id of a finding."""
    parts = "\x1f".join((member, draft.rule, draft.case or "", draft.quantity))
    return hashlib.sha256(parts.encode()).hexdigest()[:10]


def merge_cases(drafts: Iterable[Draft]) -> list[Draft]:
    """One draft for what several cases say of the same thing: the one that is furthest off, naming all cases."""
    merged: dict[tuple[object, ...], Draft] = {}
    for draft in drafts:
        key = (draft.rule, draft.case, draft.quantity, draft.where)
        known = merged.get(key)
        if known is None:
            merged[key] = draft
            continue
        worse = min(known, draft, key=lambda d: (GRAVITIES.index(d.gravity), -_off(d)))
        cases = tuple(dict.fromkeys((*known.cases, *draft.cases)))
        says = worse.says
        if known.recomputed != draft.recomputed and not says.startswith("In case "):
            says = f"In case {worse.cases[0]}: {says}"
        merged[key] = worse._replace(cases=cases, says=says)
    return list(merged.values())


def _off(draft: Draft) -> float:
    ratio = draft.ratio
    return abs(math.log(ratio)) if ratio is not None and ratio > 0 else 0.0


def number_findings(member: str, drafts: Iterable[Draft], start: int) -> tuple[Finding, ...]:
    """Give numbers, roots first, each with what it carries right behind it."""
    ordered = sorted(merge_cases(drafts), key=_rank)
    roots = [d for d in ordered if d.hangs_on is None or not _root_of(d, ordered)]
    found: list[Finding] = []
    for root in roots:
        found.append(Finding(start + len(found), identity(member, root), root, None))
        number = found[-1].number
        for draft in ordered:
            if draft not in roots and _root_of(draft, ordered) is root:
                found.append(Finding(start + len(found), identity(member, draft), draft, number))
    return tuple(found)


def _root_of(draft: Draft, ordered: list[Draft]) -> Draft | None:
    """The draft that a carried one hangs on: the same case first, then one of the whole member."""
    same = [d for d in ordered if d.hangs_on is None and d.key == draft.hangs_on and d is not draft]
    for candidate in same:
        if candidate.case == draft.case or set(candidate.cases) & set(draft.cases):
            return candidate
    return same[0] if same else None


def _rank(draft: Draft) -> tuple[object, ...]:
    place = draft.where[0] if draft.where else (10**9, 0)
    verdict_last = 0 if draft.quantity == "verdict" else 1
    return (
        GRAVITIES.index(draft.gravity),
        verdict_last,
        *place,
        draft.rule,
        draft.case or "",
        draft.quantity,
    )


def outcome_of(gravities: Iterable[str], checks: Iterable[Check]) -> str:
    """The outcome that gravities and checks add up to."""
    found = set(gravities)
    if any(check.status == CRASHED for check in checks):
        return INCOMPLETE
    if found & {"unsafe", "breach", "mismatch"}:
        return RETURN
    return WITH_REMARKS if found else ACCEPT


def worst(outcomes: Iterable[str]) -> str:
    """The outcome of several members together."""
    order = (INCOMPLETE, RETURN, WITH_REMARKS, ACCEPT)
    found = set(outcomes)
    return next((outcome for outcome in order if outcome in found), ACCEPT)
