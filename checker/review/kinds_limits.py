"""Kinds `at_most`, `at_least` and `holds`: something provided, or measured, against what the standard asks."""

from __future__ import annotations

import math

from checker.declared.model import Place
from checker.review.catalogue import BY_WINDOW, Rule
from checker.review.claims import Claim
from checker.review.drafts import (
    FAIL,
    NOT_APPLICABLE,
    NOT_CHECKED,
    PASS,
    SAFE_SIDE,
    UNSAFE_SIDE,
    Draft,
    apart,
    symbol_text,
)  # fmt: skip
from checker.review.kinds_values import betrayed_draft, others, reason, wrong_working_of
from checker.review.subject import Outcome, Subject, draft_of, ended, words_of
from checker.review.window import NO_ANGLE, Window, degrees_of
from checker.sheet.load import DECLARED
from checker.sheet.shown import number
from checker.sheet.workings import working

LIMIT_TOLERANCE = 1e-6
"""What a provided value may miss a limit by: only the noise of floating-point numbers."""


def at_limit(rule: Rule, subject: Subject) -> Outcome:
    """Provided against a limit, both quantities of the sheet; a claim that stands for two of them speaks once."""
    case = subject.case
    if rule.declared and not any(symbol in case.case.declared for symbol in rule.declared):
        return ended(rule, subject, NOT_CHECKED, f"{symbol_text(rule.provided[0])} is not declared"), []
    limit = float(case.scratch[rule.limit])
    margins: list[float] = []
    failed: dict[Place | None, Draft] = {}
    for symbol in rule.provided:
        value = float(case.row[symbol] if symbol in case.row else case.scratch[symbol])
        if not math.isfinite(value) and symbol in case.row and value != math.inf:
            continue
        claim = subject.claims.get(symbol.removesuffix(DECLARED)) if symbol.endswith(DECLARED) else None
        slack = (claim.half_step if claim else 0.0) + (rule.tolerance or LIMIT_TOLERANCE) * abs(limit)
        over = value - limit if rule.kind == "at_most" else limit - value
        if over > slack and claim is None:
            slack += case.read_rounding(symbol, rule.limit)
        if math.isnan(over) or over > slack:
            place = claim.source.place if claim else None
            failed.setdefault(place, _limit_draft(rule, subject, symbol, value, limit, claim))
        margins.append(_spare(over, limit))
    if failed:
        return ended(rule, subject, FAIL, margin=min(margins)), list(failed.values())
    betrayed = betrayed_draft(rule, subject, rule.quantity) if rule.quantity and not margins else None
    if betrayed is not None:
        return ended(rule, subject, FAIL), [betrayed]
    if not margins:
        return ended(rule, subject, NOT_CHECKED, f"{symbol_text(rule.provided[0])} is not stated"), []
    return ended(rule, subject, PASS, margin=min(margins)), []


def _spare(over: float, limit: float) -> float:
    return -over / abs(limit) if limit else -over


def _limit_draft(
    rule: Rule, subject: Subject, symbol: str, value: float, limit: float, claim: Claim | None
) -> Draft:
    case = subject.case
    unit = case.sheet.quantities[symbol.removesuffix(DECLARED)].unit
    provided, allowed = apart(value, limit, unit)
    declared, bound = (claim.value if claim else None), limit
    words = words_of(subject, provided=provided, limit=allowed, window=_window_text(subject.window))
    gravity = rule.gravity
    if gravity == BY_WINDOW:
        gravity = "unsafe" if subject.window.holds == NO_ANGLE else "breach"
    name = symbol.removesuffix(DECLARED)
    shown = claim.source.symbol if claim is not None else name
    if shown.startswith("theta"):  # claimed as an angle, compared as its cotangent
        unit, declared, bound = "deg", math.atan2(1.0, value), math.atan2(1.0, limit)
    safe = rule.id in ("lever-arm.below-usual",)
    place = claim.source.place if claim else _place_of(subject, rule)
    why = _traced_back(rule, subject)
    says = " ".join(filter(None, (words.fill(rule.says), str(why.pop("reason", "")))))
    return draft_of(
        rule, subject, claim, quantity=shown, unit=unit, key=name if claim else rule.id, says=says, **why,
        gravity=gravity, declared=declared,
        recomputed=bound if claim else value, limit=bound, where=(place,) if place else (),
        direction=SAFE_SIDE if safe else UNSAFE_SIDE,
        working=working(case.sheet, rule.limit, case.scratch),
    )  # fmt: skip


def _traced_back(rule: Rule, subject: Subject) -> dict[str, object]:
    """For a choice beyond its limit: the slip that gives it, or the root it follows from."""
    comparison = subject.compared.get(rule.quantity)
    if comparison is None or comparison.agrees:
        return {}
    above, cause = subject.roots_of(rule.quantity), subject.explained.get(rule.quantity)
    found: dict[str, object] = {"reason": reason(subject, comparison, above, cause)}
    if above:
        return {**found, "hangs_on": above[0], "todo": "Follows the root finding."}
    if cause is None or cause.quantity != rule.quantity:
        return found
    return {
        **found, "slip": cause.slip, "slips": cause.fits, "shows_in": others(cause, rule.quantity),
        "wrong_working": wrong_working_of(subject, cause),
    }  # fmt: skip


def _place_of(subject: Subject, rule: Rule) -> Place | None:
    """Where the thing a rule is about stands: its links, its bars, or the case."""
    for word, key in (
        ("links", "links"),
        ("bars", "bars"),
        ("factors", "materials"),
        ("torsion", "torsion"),
        ("cover", "cover"),
        ("anchorage", "anchorage"),
        ("laps", "lap"),
        ("support", "support"),
        ("bundles", "bars"),
    ):
        if rule.id.startswith(word) and key in subject.places:
            return subject.places[key]
    return subject.case.case.place


def _window_text(window: Window) -> str:
    """What the strut window makes of it, as the end of a sentence."""
    span = degrees_of(window.admissible)
    if span is None:
        return "; on no admissible strut angle do links, struts and bars hold together"
    low, high = (number(value, 3) for value in span)
    where = f"at {low}°" if low == high else f"between {low}° and {high}°"
    return f"; with a common strut angle {where} links, struts and bars do hold"


def holds(rule: Rule, subject: Subject) -> Outcome:
    case = subject.case
    if rule.declared and not any(symbol in case.case.declared for symbol in rule.declared):
        return ended(rule, subject, NOT_CHECKED, f"{symbol_text(rule.declared[0])} is not declared"), []
    if rule.flag:
        if case.scratch[rule.flag]:
            return ended(rule, subject, PASS), []
        claim = subject.claims[rule.declared[0]]
        draft = draft_of(
            rule, subject, claim, quantity=rule.declared[0], unit=case.sheet.quantities[rule.declared[0]].unit,
            key=rule.id, says=words_of(subject).fill(rule.says), declared=claim.value,
        )  # fmt: skip
        return ended(rule, subject, FAIL), [draft]
    fact = subject.facts[rule.fact]
    if not fact.applies:
        return ended(rule, subject, NOT_APPLICABLE, fact.says), []
    if fact.ok is None:
        return ended(rule, subject, NOT_CHECKED, fact.says), []
    if fact.ok:
        return ended(rule, subject, PASS, fact.says), []
    says = words_of(subject, fact=fact.says + ".").fill(rule.says)
    place = (fact.place,) if fact.place else ()
    return ended(rule, subject, FAIL, fact.says), [
        draft_of(rule, subject, says=says, key=rule.id, where=place)
    ]
