"""Kinds `same` and `implied`: the strut angle claimed in shear and torsion, and the one really used."""

from __future__ import annotations

import math

from checker.review.catalogue import Rule
from checker.review.causes import AngleUsed
from checker.review.drafts import EITHER_SIDE, FAIL, NOT_CHECKED, PASS, Draft, apart, symbol_text
from checker.review.subject import Outcome, Subject, draft_of, ended, words_of
from checker.sheet.shown import with_unit


def same(rule: Rule, subject: Subject) -> Outcome:
    """Two declared angles; they are claimed as cotangents inside, and shown as angles."""
    claims = [subject.claims.get(f"cot_{symbol}") for symbol in rule.quantities]
    first, second = claims
    if first is None or second is None:
        missing = " and ".join(
            symbol_text(s) for s, c in zip(rule.quantities, claims, strict=True) if c is None
        )
        return ended(rule, subject, NOT_CHECKED, f"{missing} is not declared"), []
    allowed = first.half_step + second.half_step + 0.01 * max(first.value, second.value)
    if abs(first.value - second.value) <= allowed:
        return ended(rule, subject, PASS), []
    degrees = [math.atan2(1.0, claim.value) for claim in (first, second)]
    texts = apart(degrees[0], degrees[1], "deg")
    words = words_of(subject, **dict(zip(rule.quantities, texts, strict=True)))
    draft = draft_of(
        rule, subject, second if first.source.member_wide else None,
        quantity=rule.quantities[1], unit="deg", key=rule.id, says=words.fill(rule.says),
        declared=degrees[1], declared_text=second.source.number.text, recomputed=degrees[0],
        where=(first.source.place, second.source.place), direction=EITHER_SIDE,
    )  # fmt: skip
    return ended(rule, subject, FAIL), [draft]


def implied(rule: Rule, subject: Subject) -> Outcome:
    angles = subject.causes.angles
    if not angles:
        declared = [s for s in subject.case.engine.sheet.quantities if s.startswith("cot_of_")]
        if not any(name.removeprefix("cot_of_") in subject.claims for name in declared):
            return ended(rule, subject, NOT_CHECKED, "no declared value rests on the strut angle"), []
        return ended(rule, subject, PASS), []
    return ended(rule, subject, FAIL), [_angle_draft(rule, subject, angle) for angle in angles]


def _angle_draft(rule: Rule, subject: Subject, angle: AngleUsed) -> Draft:
    """The angle that was used, against the claimed one, or torsion's against shear's where none is claimed."""
    used = math.atan2(1.0, angle.used)
    shown = ", ".join(symbol_text(symbol) for symbol in angle.shows_in)
    if angle.claim is None:
        against, gravity, quantity = math.atan2(1.0, angle.other), "breach", angle.side.removeprefix("cot_")
        here, there = ("torsion", "shear") if quantity == "theta_torsion" else ("shear", "torsion")
        said_of_it = "is declared with" if f"cot_theta_{there}" in subject.claims else "was worked with"
        declared, recomputed = used, against
        where = tuple(subject.claims[symbol].source.place for symbol in angle.shows_in)
        said = f"No strut angle is declared for {here}: {there} {said_of_it} {with_unit(against, 'deg', 3)},"
        found = f"but {here} was worked with {with_unit(used, 'deg', 3)} ({shown})."
    else:
        against, gravity, quantity = (
            math.atan2(1.0, angle.claim.value),
            rule.gravity,
            _told_as(angle, subject),
        )
        declared, recomputed = against, used
        where = (angle.claim.source.place,)
        said = f"The strut angle is declared as {with_unit(against, 'deg', 3)},"
        found = f"but {shown} were worked with {with_unit(used, 'deg', 3)}."
    return draft_of(
        rule, subject, angle.claim, quantity=quantity, unit="deg", key=angle.side, where=where, gravity=gravity,
        says=words_of(subject, claim=said, implied=found).fill(rule.says), declared=declared, recomputed=recomputed,
        direction=EITHER_SIDE, shows_in=angle.shows_in, implied_cot=angle.used,
    )  # fmt: skip


def _told_as(angle: AngleUsed, subject: Subject) -> str:
    """The symbol a claimed angle is told under: as it was claimed, or by its side where one claim is told twice."""
    assert angle.claim is not None
    symbol = angle.claim.source.symbol
    general = symbol in ("theta", "cot_theta")
    return f"theta_{angle.side.split('_')[-1]}" if general and len(subject.causes.angles) > 1 else symbol
