"""A declared value against the recomputed one: rounding first, then the rule's relative tolerance.

A value agrees when |declared - recomputed| <= own rounding + inherited rounding + relative tolerance.
The relative tolerance of a small difference is a share of its terms (`scale` in the rule).
It *follows* when the same holds against the value recomputed from the designer's own upstream numbers.
"""

from __future__ import annotations

import math
from typing import NamedTuple

from checker.review.catalogue import Catalogue, Rule
from checker.review.claims import Claim
from checker.review.evaluated import Evaluated

TINY = 1e-9
COMPARED = ("agrees", "at_most")


class Comparison(NamedTuple):
    """One declared value held against both recomputations (inside units).

    Attributes:
        reading: the accepted quantity that lies nearest (the symbol itself, or one of the rule's `or`).
        recomputed: its value from scratch.
        upstream: its value from the designer's own upstream numbers.
        tolerance: the whole allowance: rounding, inherited rounding, relative tolerance.
        scale: size of the terms that the value is a difference of; 0 where it is none.
        agrees: right from scratch.
        follows: right from the designer's own upstream numbers.
    """

    claim: Claim
    rule: Rule
    reading: str
    recomputed: float
    upstream: float
    tolerance: float
    agrees: bool
    follows: bool
    scale: float = 0.0

    def relative(self, value: float) -> float:
        """The rule's relative tolerance of a value (inside units)."""
        return self.rule.tolerance * max(abs(value), self.scale)


def compare_all(case: Evaluated, catalogue: Catalogue) -> dict[str, Comparison]:
    """Every declared number that an `agrees` rule, or the limit of a choice, speaks of, in the order of the sheet."""
    position = {symbol: index for index, symbol in enumerate(case.sheet.order)}
    found: dict[str, Comparison] = {}
    rules = {
        rule.quantity: rule for rule in catalogue.rules.values() if rule.kind in COMPARED and rule.quantity
    }
    for symbol in sorted((s for s in case.claims if s in rules), key=position.__getitem__):
        found[symbol] = compare(case, case.claims[symbol], rules[symbol])
    return found


def compare(case: Evaluated, claim: Claim, rule: Rule) -> Comparison:
    """Hold one declared value against every accepted reading and keep the nearest."""
    symbol = claim.symbol
    readings = [symbol, *(name for name in rule.or_ if name in case.sheet.quantities)]
    from_scratch = {name: float(case.scratch[name]) for name in readings}
    reading = _nearest(claim.value, from_scratch)
    recomputed = from_scratch[reading]
    scale = abs(float(case.scratch[rule.scale])) if rule.scale else 0.0
    allowed = claim.half_step + rule.tolerance * max(abs(recomputed), scale)
    if _within(claim.value, recomputed, allowed):
        return Comparison(claim, rule, reading, recomputed, recomputed, allowed, True, True, scale)
    from_upstream = case.upstream(symbol, readings)
    follows_reading = _nearest(claim.value, from_upstream)
    upstream = from_upstream[follows_reading]
    inherited = case.inherited(symbol, follows_reading)
    following = claim.half_step + inherited + rule.tolerance * max(abs(upstream), scale)
    follows = _within(claim.value, upstream, following)
    allowed += inherited
    agrees = _within(claim.value, recomputed, allowed)
    return Comparison(claim, rule, reading, recomputed, upstream, allowed, agrees, follows, scale)


def _nearest(value: float, readings: dict[str, float]) -> str:
    """The reading nearest to a value; the rule's own symbol where nothing can be compared."""
    first = next(iter(readings))
    best, gap = first, abs(value - readings[first])
    for name, reading in readings.items():
        if not gap <= abs(value - reading):
            best, gap = name, abs(value - reading)
    return first if math.isnan(gap) else best


def _within(a: float, b: float, allowed: float) -> bool:
    return abs(a - b) <= allowed + TINY * max(abs(a), abs(b))
