"""Every rule on one case: one of the five outcomes each, and a draft of a finding where it fails.

- One small function a kind; what a rule compares is named in its entry, never here.
- A fault of ours in one rule becomes that rule's outcome ("crashed"); the others go on.
"""

from __future__ import annotations

from collections.abc import Callable

from checker.review.catalogue import Rule
from checker.review.drafts import (
    CRASHED,
    FAIL,
    NOT_APPLICABLE,
    NOT_CHECKED,
    PASS,
    SAFE_SIDE,
    UNSAFE_SIDE,
    Check,
    Draft,
)  # fmt: skip
from checker.review.kinds_limits import at_limit, holds
from checker.review.kinds_strut import implied, same
from checker.review.kinds_values import agrees, basis, traced
from checker.review.subject import Outcome, Subject, draft_of, ended, words_of
from checker.sheet.quantities import Sheet


def judge(subject: Subject) -> tuple[list[Check], list[Draft]]:
    """All rules on one case, the verdict last because it looks at what the others found."""
    checks: list[Check] = []
    drafts: list[Draft] = []
    rules = sorted(subject.catalogue.rules.values(), key=lambda rule: rule.kind == "verdict")
    for rule in rules:
        try:
            check, found = _outcome(rule, subject, drafts)
        except Exception as error:
            check, found = ended(rule, subject, CRASHED, f"{type(error).__name__}: {error}"), []
        checks.append(check)
        drafts += found
    return checks, drafts


def _outcome(rule: Rule, subject: Subject, before: list[Draft]) -> Outcome:
    values = subject.case.scratch
    if rule.applies and not values[rule.applies]:
        quantity = subject.case.sheet.quantities[rule.applies]
        return ended(rule, subject, NOT_APPLICABLE, quantity.note or f"not so: {quantity.name}"), []
    for name in rule.needs:
        if values[name] != values[name]:  # nan: the file doesn't say it
            return ended(rule, subject, NOT_CHECKED, unstated(subject.case.sheet, name)), []
    if rule.kind == "verdict":
        return _verdict(rule, subject, before)
    return _KINDS[rule.kind](rule, subject)


def unstated(sheet: Sheet, name: str) -> str:
    """What is missing, and the key of the file that would say it."""
    quantity = sheet.quantities[name]
    return f"{quantity.name} is not stated" + (f" (key {quantity.note})" if quantity.note else "")


def _verdict(rule: Rule, subject: Subject, before: list[Draft]) -> Outcome:
    verdict = subject.case.case.verdict
    if verdict is None:
        return ended(rule, subject, NOT_CHECKED, "no verdict is declared"), []
    said, place = verdict
    unsafe = [draft for draft in before if draft.gravity == "unsafe"]
    if said == "adequate" and unsafe:
        names = ", ".join(dict.fromkeys(draft.rule for draft in unsafe))
        found, gravity, direction = f"as provided it is not ({names})", rule.gravity, UNSAFE_SIDE
    elif said != "adequate" and not unsafe and not any(draft.gravity == "breach" for draft in before):
        found, gravity, direction = "as provided nothing was found against it", "mismatch", SAFE_SIDE
    else:
        return ended(rule, subject, PASS), []
    says = words_of(subject, declared=f"“{said}”", found=found).fill(rule.says)
    draft = draft_of(
        rule, subject, quantity="verdict", key=rule.id, says=says, declared_text=said, gravity=gravity,
        direction=direction, where=(place,),
    )  # fmt: skip
    return ended(rule, subject, FAIL), [draft]


_KINDS: dict[str, Callable[[Rule, Subject], Outcome]] = {
    "agrees": agrees, "traced": traced, "same": same, "implied": implied, "at_most": at_limit, "at_least": at_limit,
    "holds": holds, "basis": basis, "basis-unsaid": basis,
}  # fmt: skip
