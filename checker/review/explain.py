"""Why a declared number is wrong: the slip, or smallest set of slips, that lands on it within rounding.

Order in which explanations are looked for, and the stated order among those that fit equally:
1. one slip that explains several wrong values at once, on a quantity that isn't declared or made at several; an earlier
   size of the section, where that explains more of them;
2. one slip on the value itself, then on an undeclared quantity above it;
3. two slips on the stretch, where so many pairs were not bound to hit by chance;
4. a misreading of the steel (a link size, a spacing, a bar count …);
5. a plain factor.
A value solved back (an earlier size of the section, other actions, a hidden number) needs two values that bear it out: one
number always fits one unknown.
Within a step: fewest changes, closest fit (in halves of what rounding allows), fewest declared values that the slip would
have moved with its own but that are right, catalogue weight, other declared values explained too. A slip on an undeclared
quantity that fits as well as one on the value itself is named behind it. One known slip that gives all the values from
which another strut angle could be read comes before that angle. A slip that a right declared value speaks against is no
explanation. Nothing is named whose fit is worse than rounding.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Mapping
from itertools import combinations

from checker.review.bench import CONSTANTS, Bench, Explanation, Fit
from checker.review.causes import AngleUsed, Causes, find_causes
from checker.review.compare import Comparison
from checker.review.evaluated import Evaluated
from checker.review.slips import Slip, Slips
from checker.review.solved import shared_value
from checker.review.variants import Variant

MOST_CHANCE = 0.1
"""Expected number of candidates that would land on a random value; above it a hit says nothing."""

MOST_CHANCE_TO_PLACE = 1.0
"""The same, above which one value alone doesn't move the finding to a quantity that isn't declared."""


def reasoned(
    case: Evaluated,
    compared: Mapping[str, Comparison],
    broken_choices: tuple[str, ...],
    known: Callable[[], Slips],
    variants: Callable[[], tuple[Variant, ...]] = tuple,
) -> tuple[Causes, list[Explanation]]:
    """Causes and explanations of one case.

    `known` gives the slips and `variants` the misreadings of the steel, each only where there is something to explain.
    """
    causes = find_causes(case, compared, broken_choices)
    claimed = [angle for angle in causes.angles if angle.claim is not None]
    if claimed:
        plain = find_causes(case, compared, broken_choices, ())
        found = Reasoner(case, compared, plain, known(), variants).explain()
        stand = tuple(a for a in causes.angles if a.claim is None or not _one_slip(a, plain, found))
        if len(stand) < len(causes.angles):
            causes = find_causes(case, compared, broken_choices, stand)
    if not causes.roots:
        return causes, []
    return causes, Reasoner(case, compared, causes, known(), variants).explain()


def _one_slip(angle: AngleUsed, causes: Causes, found: list[Explanation]) -> bool:
    """Whether one known slip gives all the values that seem to betray another angle."""
    roots = set(angle.shows_in) & set(causes.roots)
    return any(roots and roots <= set(item.shows_in) and item.replaced and not item.beside for item in found)


def rank(fit: Fit) -> tuple[float, ...]:
    return fit.rank


class Reasoner:
    """Explains the roots of one case."""

    def __init__(
        self,
        case: Evaluated,
        compared: Mapping[str, Comparison],
        causes: Causes,
        slips: Slips,
        variants: Callable[[], tuple[Variant, ...]] = tuple,
    ) -> None:
        self.bench = Bench(case, compared, causes)
        self.slips = slips
        self.variants = variants
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
            if (len(slip.replaces) > 1 or any(self.bench.is_hidden(name) for name in slip.replaces))
            and (fit := self.bench.fit((slip,), left)) is not None
            and len(fit.explained) > 1
        ]
        most = max((len(fit.explained) for fit in fits), default=0)
        if fits and most == len(left):
            return self._explanation(sorted((fit for fit in fits if len(fit.explained) == most), key=rank))
        value = shared_value(self.bench, left)
        if fits and (value is None or value.slip is None or len(value.shows_in) <= most):
            return self._explanation(sorted((fit for fit in fits if len(fit.explained) == most), key=rank))
        return value

    def _single(self, symbol: str) -> list[Explanation]:
        """One root: one slip, two slips, a wrong dimension, a plain factor, or nothing known."""
        near = self._near(symbol)
        own = [slip for slip in near if symbol in slip.replaces]
        groups = (own, [slip for slip in near if slip not in own])
        fits = [
            sorted(
                (fit for slip in group if (fit := self.bench.fit((slip,), [symbol])) is not None), key=rank
            )
            for group in groups
        ]
        if any(fits):
            return [self._explanation([*fits[0], *fits[1]])]
        together = [(a, b) for a, b in combinations(near, 2) if not set(a.replaces) & set(b.replaces)]
        if self.bench.chance(symbol, len(together)) <= MOST_CHANCE:
            pairs = [fit for pair in together if (fit := self.bench.fit(pair, [symbol])) is not None]
            if pairs:
                return [self._explanation(sorted(pairs, key=rank))]
        return [self._misread(symbol) or self._factor(symbol)]

    def _near(self, symbol: str) -> list[Slip]:
        """The slips that could have been made on the stretch of a value."""
        stretch = self.bench.stretch(symbol)
        return [slip for slip in self.slips.slips if any(name in stretch for name in slip.replaces)]

    def _misread(self, symbol: str) -> Explanation | None:
        """A misreading of the steel that lands on the value; several are named together."""
        variants = self.variants()
        if self.bench.chance(symbol, len(variants)) > MOST_CHANCE:
            return None
        found = [variant for variant in variants if self.bench.lands(symbol, variant.changes)]
        if not found:
            return None
        names = tuple(dict.fromkeys(variant.id for variant in found))
        says = ", or ".join(dict.fromkeys(variant.says for variant in found))
        return Explanation(symbol, found[0].id, names, says, (symbol,), {})

    def _explanation(self, ordered: list[Fit]) -> Explanation:
        """The first of the fits, with all that fit as well named behind it."""
        best = ordered[0]
        slip = best.slips[0]
        shows = best.explained
        names = tuple(dict.fromkeys(" + ".join(s.id for s in fit.slips) for fit in ordered))
        quantity = self._place(slip, shows) if len(best.slips) == 1 else shows[0]
        if len(shows) == 1 and self.bench.chance(shows[0], len(self._near(shows[0]))) > MOST_CHANCE_TO_PLACE:
            quantity = shows[0]  # a coarse number alone is no witness for one that isn't declared
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
        known = (
            self.slips.factors if self.bench.chance(symbol, len(self.slips.factors)) <= MOST_CHANCE else ()
        )
        for factor in known:
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
