"""Values solved back from wrong declared ones: a hidden quantity, or a size of the section, that was something else."""

from __future__ import annotations

from checker.review.bench import Bench, Explanation

SIZES = ("b", "h", "diameter", "wall_side", "wall_top", "wall_bottom")
ACTIONS = ("V_Ed", "T_Ed", "M_Ed")
CHOICES = ("z",)
STALE = "stale-value"
OTHERS = (*SIZES, *ACTIONS, *CHOICES)
"""What declared values can be solved back to though it is stated: a size, an action, the lever arm."""


def shared_value(bench: Bench, left: list[str]) -> Explanation | None:
    """A hidden quantity, or a dimension, that several wrong values imply with one and the same value."""
    stated = [
        *sizes_of(bench),
        *(name for name in ACTIONS if bench.case.row[name] > 0),
        *_claimed_choices(bench),
    ]
    hidden = [name for name in bench.case.sheet.order if bench.is_hidden(name) and name in bench.case.scratch]
    best: Explanation | None = None
    for name in [*hidden, *stated]:
        agreed = _agreed(bench, name, left)
        if agreed is not None and (best is None or len(agreed[1]) > len(best.shows_in)):
            value, shows = agreed
            slip = STALE if name in stated else None
            best = Explanation(name, slip, (), f"another value of {name} was used", shows, {}, value)
    if best is not None and best.slip:
        best = best._replace(fits=(best.slip,))
    return best


def _agreed(bench: Bench, name: str, left: list[str]) -> tuple[float, tuple[str, ...]] | None:
    bands = []
    start = float(bench.case.scratch[name])
    for symbol in left:
        rests = name in bench.stretch(symbol) or bench.rests_on_input(symbol, name)
        band = bench.band(symbol, name, start) if rests else None
        if band is not None:
            bands.append((symbol, *band))
    for _, solved, _, _ in bands:
        value = solved
        holding = [band for band in bands if band[2] <= value <= band[3]]
        low, high = max(band[2] for band in holding), min(band[3] for band in holding)
        if low <= high:
            value = _roundest(solved, low, high)
        if len(holding) > 1 and not bench.refuted(name, value):
            return value, tuple(band[0] for band in holding)
    return None


def _roundest(value: float, low: float, high: float) -> float:
    """The number with the fewest digits that lies in a band: what a designer is likely to have had."""
    for digits in range(1, 8):
        rounded = float(f"{value:.{digits}g}")
        if low <= rounded <= high:
            return rounded
    return value


def _claimed_choices(bench: Bench) -> list[str]:
    """Choices that are claimed, and that the values beside them may not have been worked with."""
    return [name for name in CHOICES if name in bench.case.claims]


def sizes_of(bench: Bench) -> list[str]:
    """The sizes the section was stated with; an outline of points has none."""
    row = bench.case.row
    return [name for name in SIZES if name in row and (name != "h" or "b" in row)]
