"""Which declared values are wrong on their own account, and which only carry another's error.

- A *root* is wrong from scratch and wrong from the designer's own upstream numbers.
- A *carried* value is wrong from scratch but right from those; it names the root it hangs on.
- A claimed strut angle that the values beside it don't bear out is itself a root.
"""

from __future__ import annotations

import math
from collections.abc import Mapping
from typing import NamedTuple

from checker.review.claims import Claim
from checker.review.compare import Comparison
from checker.review.evaluated import Evaluated

SIDES: dict[str, tuple[str, ...]] = {
    "cot_theta_shear": ("V_Rd_s", "A_sw_s_shear", "delta_F_td", "A_s_shift", "V_Rd_max"),
    "cot_theta_torsion": ("T_Rd_s", "A_sw_s_torsion", "A_sl_torsion", "T_Rd_max"),
}
"""The declared values that each angle can be solved back from (the sheet's `cot_of_X`)."""

PEAKED = ("V_Rd_max", "T_Rd_max")  # largest at 45°: above that no angle gives them

AGREE = 0.01  # two implied angles count as one when their bands, this much wider, overlap


class Band(NamedTuple):
    """cot θ implied by one declared value, with what its rounding leaves open."""

    symbol: str
    cot: float
    low: float
    high: float

    def holds(self, cot: float) -> bool:
        return self.low * (1 - AGREE) <= cot <= self.high * (1 + AGREE)


class AngleUsed(NamedTuple):
    """An angle that was used beside the one claimed, or beside the other side's.

    Attributes:
        side: cot_theta_shear or cot_theta_torsion.
        claim: what was claimed; None where nothing was, and the two sides part.
        used: the cot θ the values imply.
        shows_in: the values it shows in.
        other: the other side's angle, where nothing was claimed.
        both: one claim stands for shear and torsion, and both were worked with `used`.
    """

    side: str
    claim: Claim | None
    used: float
    shows_in: tuple[str, ...]
    other: float = math.nan
    both: bool = False


class Causes(NamedTuple):
    """What was found out about the declared values of one case.

    Attributes:
        roots: symbols that are wrong on their own account, in the order of the sheet.
        carried: symbol -> the roots it hangs on, in the order of the sheet.
        angles: strut angles used beside the claimed ones.
    """

    roots: tuple[str, ...]
    carried: Mapping[str, tuple[str, ...]]
    angles: tuple[AngleUsed, ...]


def find_causes(
    case: Evaluated,
    compared: Mapping[str, Comparison],
    broken_choices: tuple[str, ...],
    angles: tuple[AngleUsed, ...] | None = None,
) -> Causes:
    """Sort the declared values that disagree into roots and carried ones.

    Args:
        case: the case.
        compared: its comparisons in the order of the sheet.
        broken_choices: choices (z, cot θ) whose claim was not admissible, so that what follows hangs on them.
        angles: the angles to go by, where they aren't all that the values betray.
    """
    if angles is None:
        angles = angles_used(case, compared)
    hangs_on: dict[str, tuple[str, ...]] = {
        choice: (_root(case, choice),)
        for choice in broken_choices
        if choice not in compared or compared[choice].agrees
    }
    roots: list[str] = []
    carried: dict[str, tuple[str, ...]] = {}
    for angle in angles:
        if angle.claim is None:
            continue
        for side in SIDES if angle.both else (angle.side,):
            hangs_on.setdefault(side, (angle.side,))
        for symbol in angle.shows_in:
            hangs_on[symbol] = carried[symbol] = (angle.side,)
    for symbol, comparison in compared.items():
        if comparison.agrees or symbol in carried:
            continue
        above = [root for name in case.ancestors(symbol) for root in hangs_on.get(name, ())]
        wrong = tuple(dict.fromkeys(above))
        if not comparison.follows:
            roots.append(symbol)
            hangs_on[symbol] = (symbol,)
        elif wrong:
            hangs_on[symbol] = carried[symbol] = wrong
    return Causes(tuple(roots), carried, angles)


def angles_used(case: Evaluated, compared: Mapping[str, Comparison]) -> tuple[AngleUsed, ...]:
    """The strut angles that the declared values betray, where they part from the claim or from each other."""
    found: list[AngleUsed] = []
    for side, symbols in SIDES.items():
        claim = case.claims.get(side)
        failing = [s for s in symbols if s in compared and not compared[s].agrees]
        if claim is None or len(failing) < 2:
            continue
        bands = bands_of(case, symbols)
        used = _common(bands, failing)
        if used is None or _is(claim.value, used):
            continue
        first = found[0] if found else None
        if first is not None and _root(case, side) == first.side and _is(first.used, used):
            found[0] = first._replace(shows_in=(*first.shows_in, *failing), both=True)
        else:
            found.append(AngleUsed(side, claim, used, tuple(failing)))
    if not found and not all(side in case.claims for side in SIDES):
        found += _parted(case)
    return tuple(found)


def _root(case: Evaluated, choice: str) -> str:
    """The choice itself, or shear's angle where one claim stands for both: what is said of it is said once."""
    shear, torsion = (case.claims.get(side) for side in SIDES)
    shared = shear is not None and torsion is not None and shear.source is torsion.source
    return "cot_theta_shear" if shared and choice in SIDES else choice


def bands_of(case: Evaluated, symbols: tuple[str, ...]) -> dict[str, Band]:
    """The angle each declared value implies, with its rounding solved back as well."""
    bands: dict[str, Band] = {}
    for symbol in symbols:
        claim = case.claims.get(symbol)
        if claim is None:
            continue
        name = f"cot_of_{symbol}"
        reach = claim.half_step + AGREE * abs(claim.value)
        peaked = symbol in PEAKED
        cots = [_solved(case.follow[name], peaked)]
        for value in (claim.value - reach, claim.value + reach):
            cots.append(_solved(case.shifted({symbol: value})[name], peaked))
        if all(math.isfinite(cot) and cot > 0 for cot in cots):
            bands[symbol] = Band(symbol, cots[0], min(cots), max(cots))
    return bands


def _solved(cot: float, peaked: bool) -> float:
    """A strut limit above its peak at 45° has no solution; the peak is the nearest."""
    return 1.0 if peaked and math.isnan(cot) else float(cot)


def _common(bands: Mapping[str, Band], failing: list[str]) -> float | None:
    """The angle that all failing values share, if no agreeing value speaks against it."""
    wrong = [bands[symbol] for symbol in failing if symbol in bands]
    if len(wrong) < 2:
        return None
    narrowest = min(wrong, key=lambda band: band.high / band.low)
    used = narrowest.cot
    return used if all(band.holds(used) for band in bands.values()) else None


def _parted(case: Evaluated) -> list[AngleUsed]:
    """Shear and torsion worked on angles without a band in common, where not both are claimed."""
    bands: dict[str, Band] = {}
    for side, symbols in SIDES.items():
        claim = case.claims.get(side)
        if claim is not None:
            reach = claim.half_step
            bands[side] = Band(side, claim.value, claim.value - reach, claim.value + reach)
            continue
        implied = bands_of(case, symbols)
        if not implied:
            return []
        bands[side] = min(implied.values(), key=lambda band: band.high / band.low)
    shear, torsion = bands["cot_theta_shear"], bands["cot_theta_torsion"]
    apart = shear.high * (1 + AGREE) < torsion.low or torsion.high * (1 + AGREE) < shear.low
    if not apart or not case.scratch["has_both"]:
        return []
    side, other = (
        ("cot_theta_torsion", shear)
        if "cot_theta_torsion" not in case.claims
        else ("cot_theta_shear", torsion)
    )
    shows = tuple(symbol for symbol in SIDES[side] if symbol in case.claims)
    return [AngleUsed(side, None, bands[side].cot, shows, other.cot)]


def _is(a: float, b: float) -> bool:
    return abs(a - b) <= AGREE * max(abs(a), abs(b))
