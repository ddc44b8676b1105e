"""Why a declared number is wrong: the slip, or smallest set of slips, that lands on it within rounding.

Order in which explanations are looked for, and the stated order among those that fit equally:
1. one slip on a quantity that isn't declared and that explains several wrong values at once;
2. one slip on the value itself, then on an undeclared quantity above it;
3. two slips on the stretch;
4. a wrong dimension of the section that several values, or a round size, bear out;
5. a plain factor.
Within a step: fewest changes, closest fit (in halves of what rounding allows), catalogue weight, other declared values
explained too. A slip that a right declared value speaks against is no explanation. Nothing is named whose fit is
worse than rounding.
"""

from __future__ import annotations

import math
from collections.abc import Mapping
from itertools import combinations

from checker.review.bench import CONSTANTS, Bench, Explanation, Fit
from checker.review.causes import Causes
from checker.review.compare import Comparison
from checker.review.evaluated import Evaluated
from checker.review.slips import Slip, Slips
from checker.review.solved import shared_value, wrong_size


class Reasoner:
    """Explains the roots of one case."""

    def __init__(
        self, case: Evaluated, compared: Mapping[str, Comparison], causes: Causes, slips: Slips
    ) -> None:
        self.bench = Bench(case, compared, causes)
        self.slips = slips
        self.roots = list(causes.roots)

    def explain(self) -> list[Explanation]:
        """Every root, each in exactly one explanation."""
        found: list[Explanation] = []
        left = list(self.roots)
        while shared := self._shared(left):
            found.append(shared)
            left = [symbol for symbol in left if symbol not in shared.shows_in]
        for symbol in left:
            found += self._single(symbol)
        return self._merged(found)

    def _merged(self, found: list[Explanation]) -> list[Explanation]:
        """One slip made at several declared values at once (a strength left unfactored) is one cause."""
        merged: dict[str, Explanation] = {}
        for item in found:
            made_at_once = item.slip is not None and len(item.replaced) > 1 and not item.beside
            key = item.slip if made_at_once and item.slip else f"{item.quantity} {item.shows_in}"
            known = merged.get(key)
            if known is None:
                merged[key] = item
            else:
                merged[key] = known._replace(shows_in=(*known.shows_in, *item.shows_in))
        return list(merged.values())

    def _shared(self, left: list[str]) -> Explanation | None:
        """One cause behind several wrong values: a known slip, else one value of an undeclared quantity."""
        if len(left) < 2:
            return None
        fits = [
            fit
            for slip in self.slips.slips
            if any(self.bench.is_hidden(name) for name in slip.replaces)
            and (fit := self.bench.fit((slip,), left)) is not None
            and len(fit.explained) > 1
        ]
        if fits:
            most = max(len(fit.explained) for fit in fits)
            return self._explanation([fit for fit in fits if len(fit.explained) == most])
        return shared_value(self.bench, left)

    def _single(self, symbol: str) -> list[Explanation]:
        """One root: one slip, two slips, a wrong dimension, a plain factor, or nothing known."""
        stretch = self.bench.stretch(symbol)
        near = [slip for slip in self.slips.slips if any(name in stretch for name in slip.replaces)]
        own = [slip for slip in near if symbol in slip.replaces]
        for group in (own, [slip for slip in near if slip not in own]):
            fits = [fit for slip in group if (fit := self.bench.fit((slip,), [symbol])) is not None]
            if fits:
                return [self._explanation(fits)]
        pairs = [
            fit
            for one, two in combinations(near, 2)
            if not set(one.replaces) & set(two.replaces)
            and (fit := self.bench.fit((one, two), [symbol])) is not None
        ]
        if pairs:
            return [self._explanation(pairs)]
        return [wrong_size(self.bench, symbol) or self._factor(symbol)]

    def _explanation(self, fits: list[Fit]) -> Explanation:
        """The likeliest of the fits, with all that fit equally well named behind it."""
        ordered = sorted(fits, key=lambda fit: fit.rank)
        best = ordered[0]
        slip = best.slips[0]
        shows = best.explained
        names = tuple(dict.fromkeys(" + ".join(s.id for s in fit.slips) for fit in ordered))
        quantity = self._place(slip, shows)
        beside = best.slips[1:]
        used = math.nan
        if quantity not in self.bench.compared:
            used = float(self.bench.stretch(shows[0]).worked(best.replaced)[quantity])
        says = "; and ".join(s.says for s in best.slips)
        return Explanation(quantity, slip.id, names, says, shows, best.replaced, used, beside)

    def _place(self, slip: Slip, shows: tuple[str, ...]) -> str:
        """Where the slip was made: on a declared root it replaces, else on the hidden quantity it replaces."""
        for symbol in shows:
            if symbol in slip.replaces:
                return symbol
        for name in slip.replaces:
            if self.bench.is_hidden(name) and name in self.bench.stretch(shows[0]):
                return name
        return shows[0]

    def _factor(self, symbol: str) -> Explanation:
        """A plain factor, or nothing."""
        claim = self.bench.compared[symbol].claim
        upstream = float(self.bench.stretch(symbol).base[symbol])
        for factor in self.slips.factors:
            allowed = (
                claim.half_step
                + (CONSTANTS * abs(claim.value))
                + factor.factor * self.bench.stretch(symbol).inherited({})
            )
            if abs(factor.factor * upstream - claim.value) <= allowed and claim.half_step < 0.02 * abs(
                claim.value
            ):
                return Explanation(symbol, None, (), factor.says, (symbol,), {})
        return Explanation(symbol, None, (), "", (symbol,), {})
