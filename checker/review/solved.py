"""Values solved back from wrong declared ones: a hidden quantity, or a size of the section, that was something else."""

from __future__ import annotations

from checker.review.bench import Bench, Explanation

SIZES = ("b", "h", "diameter", "wall_side", "wall_top", "wall_bottom")
ROUND_TO = (25.0, 10.0, 5.0)
STALE = "stale-value"


def shared_value(bench: Bench, left: list[str]) -> Explanation | None:
    """A hidden quantity, or a dimension, that several wrong values imply with one and the same value."""
    sizes = [name for name in SIZES if name in bench.case.row]
    hidden = [name for name in bench.case.sheet.order if bench.is_hidden(name) and name in bench.case.scratch]
    best: Explanation | None = None
    for name in [*hidden, *sizes]:
        agreed = _agreed(bench, name, left)
        if agreed is not None and (best is None or len(agreed[1]) > len(best.shows_in)):
            value, shows = agreed
            what = "another size of the section" if name in sizes else "another value of it"
            best = Explanation(name, STALE if name in sizes else None, (), what, shows, {}, value)
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
    for _, value, _, _ in bands:
        holding = tuple(s for s, _, low, high in bands if low <= value <= high)
        if len(holding) > 1 and not bench.refuted(name, value):
            return value, holding
    return None


def wrong_size(bench: Bench, symbol: str) -> Explanation | None:
    """A stale dimension: a round size that lands on the value and that no other value speaks against."""
    for name in SIZES:
        if name not in bench.case.row or not bench.rests_on_input(symbol, name):
            continue
        start = float(bench.case.row[name])
        band = bench.band(symbol, name, start)
        if band is None:
            continue
        for grid in ROUND_TO:
            size = round(band[0] / grid) * grid
            if band[1] <= size <= band[2] and abs(size - start) > 1 and not bench.refuted(name, size):
                return Explanation(
                    name,
                    STALE,
                    (STALE,),
                    "another size of the section",
                    (symbol,),
                    {},
                    size,
                )
    return None
