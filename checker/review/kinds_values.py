"""Kinds `agrees` and `basis`: declared numbers against recomputed ones, and what link areas count."""

from __future__ import annotations

import math

from checker.review.catalogue import Rule
from checker.review.claims import LEG_BASIS
from checker.review.compare import Comparison
from checker.review.drafts import (
    FAIL,
    NOT_CHECKED,
    PASS,
    Draft,
    apart,
    difference,
    direction_of,
    symbol_text,
)  # fmt: skip
from checker.review.subject import Outcome, Subject, draft_of, ended, words_of
from checker.sheet.shown import with_unit
from checker.sheet.workings import working


def agrees(rule: Rule, subject: Subject) -> Outcome:
    comparison = subject.compared.get(rule.quantity)
    if comparison is None:
        return ended(rule, subject, NOT_CHECKED, f"{symbol_text(rule.quantity)} is not declared"), []
    symbol, claim = rule.quantity, comparison.claim
    if math.isnan(comparison.recomputed):
        why = f"{symbol_text(symbol)} can't be recomputed for this section: its formula has no value"
        return ended(rule, subject, NOT_CHECKED, why), []
    gap = abs(claim.value - comparison.recomputed)
    margin = 1 - gap / comparison.tolerance if comparison.tolerance > 0 else None
    if symbol in subject.causes.carried or symbol in subject.causes.roots:
        return ended(rule, subject, FAIL, margin=margin), [_agrees_draft(rule, subject, comparison)]
    why = "by the legs it really counts: see links.leg-basis" if claim.swapped else ""
    return ended(rule, subject, PASS, why, margin=margin), []


def _agrees_draft(rule: Rule, subject: Subject, comparison: Comparison) -> Draft:
    case, symbol, claim = subject.case, rule.quantity, comparison.claim
    quantity = case.sheet.quantities[symbol]
    declared, recomputed = apart(claim.value, comparison.recomputed, quantity.unit)
    words = words_of(
        subject, symbol=_opening(symbol), declared=declared, recomputed=recomputed,
        difference=difference(claim.value, comparison.recomputed, quantity.unit),
    )  # fmt: skip
    above = subject.causes.carried.get(symbol, ())
    says = words.fill(rule.says)
    if above:
        named = " and ".join(_root_text(subject, root) for root in above)
        says += f" It follows from {named} and is right by that."
    implied = case.follow.get(f"cot_of_{symbol}")
    return draft_of(
        rule, subject, claim, quantity=symbol, unit=quantity.unit, clause=quantity.clause, key=symbol, says=says,
        declared=claim.value, recomputed=comparison.recomputed,
        tolerance=comparison.tolerance, hangs_on=above[0] if above else None,
        direction=direction_of(quantity.larger, claim.value, comparison.recomputed),
        implied_cot=float(implied) if implied is not None and math.isfinite(implied) else None,
        working=working(case.sheet, comparison.reading, case.scratch),
        todo=rule.todo if not above else "Follows the root finding.",
    )  # fmt: skip


def _opening(symbol: str) -> str:
    """A symbol as the first word of a sentence; sums of ratios have names of their own."""
    text = symbol_text(symbol)
    return f"The {text}" if " " in text else text


def _root_text(subject: Subject, root: str) -> str:
    claim = subject.claims[root]
    unit = subject.case.sheet.quantities[root].unit
    return f"{symbol_text(root)} = {with_unit(claim.value, unit)}"


def basis(rule: Rule, subject: Subject) -> Outcome:
    """Link areas that state what they count, and count something else; or don't state it and fit the other."""
    unsaid = rule.kind == "basis-unsaid"
    found: list[Draft] = []
    looked = 0
    for symbol in rule.quantities:
        comparison = subject.compared.get(symbol)
        if comparison is None or (comparison.claim.source.counts is None) != unsaid:
            continue
        looked += 1
        if comparison.claim.swapped:
            found.append(_basis_draft(rule, subject, comparison))
    if found:
        return ended(rule, subject, FAIL), found
    if not looked:
        what = "leaves its leg basis unsaid" if unsaid else "states its leg basis"
        return ended(rule, subject, NOT_CHECKED, f"no declared link area {what}"), []
    return ended(rule, subject, PASS), []


def _basis_draft(rule: Rule, subject: Subject, comparison: Comparison) -> Draft:
    claim, symbol = comparison.claim, comparison.claim.symbol
    quantity = subject.case.sheet.quantities[symbol]
    said = claim.source.counts or LEG_BASIS[symbol]
    meant = "one leg" if said == "all legs" else "all legs"
    written = claim.source.number.value
    needed = comparison.recomputed * written / claim.other
    other = comparison.recomputed * written / claim.value
    words = words_of(
        subject, symbol=symbol_text(symbol), declared=with_unit(written, quantity.unit), said=said, meant=meant,
        recomputed=with_unit(needed, quantity.unit), other=with_unit(other, quantity.unit),
    )  # fmt: skip
    return draft_of(
        rule, subject, claim, quantity=symbol, unit=quantity.unit, key=symbol, says=words.fill(rule.says),
        clause=quantity.clause, declared=written, recomputed=needed,
        tolerance=comparison.tolerance,
        direction=direction_of(quantity.larger, written, needed),
        working=working(subject.case.sheet, comparison.reading, subject.case.scratch),
    )  # fmt: skip
