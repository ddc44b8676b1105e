"""What a rule is given to look at, and the two things it hands back: a check and drafts of findings."""

from __future__ import annotations

import math
from collections.abc import Callable, Mapping
from functools import partial
from typing import NamedTuple

from checker.declared.model import Place
from checker.geometry.facts import Fact
from checker.review.bench import Explanation
from checker.review.catalogue import Catalogue, Rule
from checker.review.causes import Causes
from checker.review.claims import Claim
from checker.review.compare import Comparison, compare_all
from checker.review.drafts import UNSAFE_SIDE, Check, Draft, Words
from checker.review.evaluated import Evaluated
from checker.review.explain import reasoned
from checker.review.slips import load_slips
from checker.review.variants import Variant
from checker.review.window import Window, window_of


class Subject(NamedTuple):
    """What the rules look at: a case, its comparisons and causes, its window and the member's facts."""

    case: Evaluated
    catalogue: Catalogue
    compared: Mapping[str, Comparison]
    causes: Causes
    window: Window
    facts: Mapping[str, Fact]
    places: Mapping[str, Place]
    explained: Mapping[str, Explanation]

    @property
    def claims(self) -> Mapping[str, Claim]:
        return self.case.claims

    def roots_of(self, symbol: str) -> tuple[str, ...]:
        """What a carried value hangs on: declared roots, or the undeclared quantity they show."""
        above = self.causes.carried.get(symbol, (symbol,) if symbol in self.causes.roots else ())
        named = (self.explained[root].quantity if root in self.explained else root for root in above)
        roots = [root for root in dict.fromkeys(named) if root != symbol]
        return tuple(sorted(roots, key=self._right_by))

    def _right_by(self, root: str) -> float:
        """How near a root is to right: what is furthest off is named first as the cause."""
        comparison = self.compared.get(root)
        if comparison is None or not comparison.recomputed * comparison.claim.value > 0:
            return -math.inf
        return -abs(math.log(comparison.claim.value / comparison.recomputed))


Outcome = tuple[Check, list[Draft]]


def subject_of(
    case: Evaluated,
    catalogue: Catalogue,
    facts: Mapping[str, Fact],
    places: Mapping[str, Place],
    variants: Callable[[], tuple[Variant, ...]] = tuple,
) -> Subject:
    """Compare, find causes, open the window: all that rules look at.

    `variants` gives the misreadings of the steel, asked for only where nothing else explains a wrong value.
    """
    compared = compare_all(case, catalogue)
    known = partial(load_slips, catalogue.office)
    causes, found = reasoned(case, compared, _broken_choices(case), known, variants)
    explained = {symbol: cause for cause in found for symbol in cause.shows_in}
    return Subject(case, catalogue, compared, causes, window_of(case.scratch), facts, places, explained)


def ended(rule: Rule, subject: Subject, status: str, why: str = "", margin: float | None = None) -> Check:
    case = None if rule.scope == "member" else subject.case.case.name
    return Check(rule.id, case, status, why, margin if margin is None or math.isfinite(margin) else None)


def draft_of(rule: Rule, subject: Subject, claim: Claim | None = None, **fields: object) -> Draft:
    """A draft of a finding of this rule, about a claim or about the case.

    What stands for the whole member (a claim under the member's `declared`, a rule of that scope) names no case.
    """
    wide = rule.scope == "member" or (claim is not None and claim.source.member_wide)
    defaults: dict[str, object] = {
        "rule": rule.id,
        "gravity": rule.gravity,
        "direction": UNSAFE_SIDE,
        "case": None if wide else subject.case.case.name,
        "cases": (subject.case.case.name,),
        "quantity": "",
        "unit": "",
        "clause": rule.clause,
        "says": "",
        "todo": rule.todo,
        "declared_text": claim.source.number.text if claim is not None else "",
        "where": (claim.source.place,) if claim is not None else (),
    }
    return Draft(**{**defaults, **fields})  # type: ignore[arg-type]


def words_of(subject: Subject, **given: str) -> Words:
    return Words(subject.case.sheet, subject.case.scratch, given)


def _broken_choices(case: Evaluated) -> tuple[str, ...]:
    """Choices whose claim was cut back to a limit, so that what the designer carried on hangs on them."""
    return tuple(
        symbol
        for symbol in ("z", "cot_theta_shear", "cot_theta_torsion")
        if (claim := case.claims.get(symbol)) is not None
        and abs(float(case.scratch[symbol]) - claim.value) > claim.half_step + 1e-6 * claim.value
    )
