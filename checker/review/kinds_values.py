"""Kinds `agrees` and `basis`: declared numbers against recomputed ones, and what link areas count."""

from __future__ import annotations

import math

from checker.review.bench import Explanation
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
from checker.review.slips import load_slips
from checker.review.solved import CHOICES, OTHERS
from checker.review.stretch import Stretch
from checker.review.subject import Outcome, Subject, draft_of, ended, words_of
from checker.sheet.shown import with_unit
from checker.sheet.workings import working


def agrees(rule: Rule, subject: Subject) -> Outcome:
    """A declared value against the recomputed one; or an undeclared one that wrong values betray."""
    comparison = subject.compared.get(rule.quantity)
    if comparison is None:
        betrayed = betrayed_draft(rule, subject, rule.quantity)
        if betrayed is not None:
            return ended(rule, subject, FAIL), [betrayed]
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


def traced(rule: Rule, subject: Subject) -> Outcome:
    """A stated size, action or lever arm that the declared values were not worked with."""
    if not subject.compared:
        return ended(rule, subject, NOT_CHECKED, "no value is declared"), []
    stated = [name for name in OTHERS if name not in CHOICES or name in subject.claims]
    found = [draft for name in stated if (draft := betrayed_draft(rule, subject, name)) is not None]
    return ended(rule, subject, FAIL if found else PASS), found


def _agrees_draft(rule: Rule, subject: Subject, comparison: Comparison) -> Draft:
    case, symbol, claim = subject.case, rule.quantity, comparison.claim
    quantity = case.sheet.quantities[symbol]
    declared, recomputed = apart(claim.value, comparison.recomputed, quantity.unit)
    words = words_of(
        subject, symbol=_opening(symbol), declared=declared, recomputed=recomputed,
        difference=difference(claim.value, comparison.recomputed, quantity.unit),
    )  # fmt: skip
    above = subject.roots_of(symbol)
    cause = subject.explained.get(symbol)
    own = cause is not None and cause.quantity == symbol
    says = " ".join(filter(None, (words.fill(rule.says), reason(subject, comparison, above, cause))))
    implied = case.follow.get(f"cot_of_{symbol}")
    return draft_of(
        rule, subject, claim, quantity=symbol, unit=quantity.unit, clause=quantity.clause, key=symbol, says=says,
        declared=claim.value, recomputed=comparison.recomputed,
        tolerance=comparison.tolerance, hangs_on=above[0] if above else None,
        direction=direction_of(quantity.larger, claim.value, comparison.recomputed),
        implied_cot=float(implied) if implied is not None and math.isfinite(implied) else None,
        working=working(case.sheet, comparison.reading, case.scratch),
        todo=rule.todo if not above else "Follows the root finding.",
        slip=cause.slip if cause and own else None, slips=cause.fits if cause and own else (),
        shows_in=others(cause, symbol) if cause and own else (),
        wrong_working=wrong_working_of(subject, cause) if cause and own else "",
    )  # fmt: skip


def reason(
    subject: Subject, comparison: Comparison, above: tuple[str, ...], cause: Explanation | None
) -> str:
    """Why the value is wrong: what it follows from, the slip that gives it, or that none is known."""
    symbol, claim = comparison.claim.symbol, comparison.claim
    unit = subject.case.sheet.quantities[symbol].unit
    if above:
        named = " and ".join(_root_text(subject, root) for root in above)
        return f"It follows from {named} and is right by that."
    fed = [
        s for s in subject.case.ancestors(symbol) if s in subject.causes.roots or s in subject.causes.carried
    ]
    part = ""
    if fed and abs(comparison.upstream - comparison.recomputed) > comparison.tolerance:
        upstream = with_unit(comparison.upstream, unit)
        share = difference(claim.value, comparison.upstream, unit)
        part = f" With the declared {', '.join(map(symbol_text, fed))} it would be {upstream}; {share} is its own error."
    if cause is None or not cause.says:
        return f"No known slip gives this value.{part}"
    if cause.slip is None:
        return f"No known slip gives this value; it is off by {cause.says}.{part}"
    return f"The number comes out if {_slip_text(subject, cause)}.{part}"


def _slip_text(subject: Subject, cause: Explanation) -> str:
    """The slip in words, and the others that fit as well."""
    chosen = " + ".join((cause.slip or "", *(slip.id for slip in cause.beside)))
    words = {slip.id: slip.says for slip in load_slips(subject.catalogue.office).slips}
    others = [words[name] for name in cause.fits if name != chosen and name in words]
    others = [text for text in dict.fromkeys(others) if text != cause.says]
    if not others:
        return cause.says
    more = f", and {len(others) - 2} more" if len(others) > 2 else ""
    return f"{cause.says} (it would also come out if {'; or if '.join(others[:2])}{more})"


def others(cause: Explanation, symbol: str) -> tuple[str, ...]:
    return tuple(name for name in cause.shows_in if name != symbol)


def wrong_working_of(subject: Subject, cause: Explanation) -> str:
    """The working with the slip in it, on the designer's own numbers."""
    lines = []
    stretch = Stretch(subject.case, cause.shows_in[0])
    values = stretch.worked(cause.replaced)
    for symbol, formula in cause.replaced.items():
        if symbol in stretch:
            lines.append(working(subject.case.sheet, symbol, values, formula))
    return "; ".join(lines)


def betrayed_draft(rule: Rule, subject: Subject, name: str) -> Draft | None:
    """A quantity that isn't declared, but that wrong declared values show to have been something else."""
    cause = _solved(subject, name)
    if cause is None:
        return None
    case, quantity = subject.case, subject.case.sheet.quantities[name]
    right = subject.claims[name].value if name in subject.claims else abs(float(case.scratch[name]))
    claims = [subject.claims[symbol] for symbol in cause.shows_in]
    used, recomputed = apart(cause.used, right, quantity.unit)
    shown = ", ".join(symbol_text(symbol) for symbol in cause.shows_in)
    if name in OTHERS and (name in subject.claims or name in case.row):
        says = f"{_opening(name)} is stated as {recomputed}, but {shown} came out as if it were {used}."
    elif len(claims) > 1:
        says = f"{_opening(name)} is not declared, but {shown} came out as if it were {used}; it is {recomputed}."
    else:
        says = (
            f"{_opening(name)} is not declared; {shown} would come out with {used}, but it is {recomputed}."
        )
    if cause.slip not in (None, "stale-value"):
        says += f" That is so if {_slip_text(subject, cause)}."
    wide = all(claim.source.member_wide for claim in claims)
    return draft_of(
        rule, subject, claims[0] if wide else None, quantity=name, unit=quantity.unit, key=name, says=says,
        clause=quantity.clause, recomputed=right, direction=direction_of(quantity.larger, cause.used, right),
        where=tuple(claim.source.place for claim in claims), declared_text="", slip=cause.slip, slips=cause.fits,
        shows_in=cause.shows_in, working=working(case.sheet, name, case.scratch),
        wrong_working=wrong_working_of(subject, cause),
        todo="Work the values again with the right one, or say on what they rest.",
    )  # fmt: skip


def _opening(symbol: str) -> str:
    """A symbol as the first word of a sentence; sums of ratios have names of their own."""
    text = symbol_text(symbol)
    return f"The {text}" if " " in text else text


def _solved(subject: Subject, name: str) -> Explanation | None:
    """The cause that other declared values show in a quantity, with the value they were worked with."""
    causes = (c for c in subject.explained.values() if c.quantity == name and math.isfinite(c.used))
    return next(causes, None)


def _root_text(subject: Subject, root: str) -> str:
    unit = subject.case.sheet.quantities[root].unit
    cause = _solved(subject, root)
    if cause is not None:
        stated = (root in OTHERS and root in subject.case.row) or root in subject.claims
        return f"{symbol_text(root)} = {with_unit(cause.used, unit)} ({'not what is stated' if stated else 'not declared'})"
    return f"{symbol_text(root)} = {with_unit(subject.claims[root].value, unit)}"


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
