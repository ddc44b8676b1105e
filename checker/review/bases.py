"""What a declared link area really counts: one leg or all legs, whatever it says.

- A stated basis under which the number is wrong, while under the other it is right, is contradicted by the number.
- An unstated basis is read as the formula's own, unless only the other fits *and* the declared total shows that it
  was added rightly.
- What follows is carried on with the number's own meaning, so that a wrong word is not also a wrong sum.
"""

from __future__ import annotations

import math
from collections.abc import Mapping
from typing import Any

from checker.review.claims import LEG_BASIS, Claim

SHARE = 0.01


def settle_bases(claims: Mapping[str, Claim], scratch: Mapping[str, Any]) -> dict[str, Claim]:
    """The claims, link areas brought to the basis their number fits; `swapped` marks those that changed."""
    settled = dict(claims)
    total = claims.get("A_sw_s_total")
    total_stands = total is not None and _fits(total.value, total.half_step, float(scratch["A_sw_s_total"]))
    for symbol in LEG_BASIS:
        claim = claims.get(symbol)
        if claim is None or math.isnan(claim.other) or claim.value == 0:
            continue
        target = float(scratch[symbol])
        other_step = claim.half_step * claim.other / claim.value
        if _fits(claim.value, claim.half_step, target) or not _fits(claim.other, other_step, target):
            continue
        if claim.source.counts is not None or (total_stands and symbol in ("A_sw_s_shear", "A_sw_s_torsion")):
            settled[symbol] = claim._replace(
                value=claim.other, half_step=other_step, other=claim.value, swapped=True
            )
    return settled


def _fits(value: float, half_step: float, target: float) -> bool:
    return abs(value - target) <= half_step + SHARE * abs(target)
