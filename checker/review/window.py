"""The strut window of one case, read from the values: where links, concrete and bars hold, and what follows."""

from __future__ import annotations

import math
from collections.abc import Iterable, Mapping
from typing import Any, NamedTuple

AS_CLAIMED, OTHER_ANGLE, NO_ANGLE = "as claimed", "on another angle", "on no angle"
CLOSE = 1e-6
FAR = 1000.0  # the sheet's stand-in for "no bound"

Span = tuple[float, float]


class Window(NamedTuple):
    """Spans of cot θ, least and largest; None where nothing is left.

    `links`, `concrete` and `bars` are cut to what the standard allows; `admissible` is what all have in common.
    """

    links: Span | None
    concrete: Span | None
    bars: Span | None
    admissible: Span | None
    holds: str


class Reserve(NamedTuple):
    """How much all actions together could grow on a strut angle, and what gives way first."""

    factor: float
    cot: float
    governs: str


def reserves_of(values: Mapping[str, Any]) -> tuple[Reserve, Reserve]:
    """The reserve on the angle used and on the best angle; `factor` is inf where nothing limits it."""

    def reserve(which: str, cot: str) -> Reserve:
        parts = {part: float(values[f"reserve_{part}_{which}"]) for part in ("links", "concrete", "bars")}
        governs = min(parts, key=lambda part: parts[part] if math.isfinite(parts[part]) else -1.0)
        factor = parts[governs]
        return Reserve(math.inf if factor >= FAR else factor, float(values[cot]), governs)

    return reserve("used", "cot_used"), reserve("best", "cot_reserve")


def common_span(windows: Iterable[Window]) -> Span | None:
    """The strut angles (as cot θ) that hold in every case."""
    low, high = 0.0, math.inf
    for window in windows:
        if window.admissible is None:
            return None
        low, high = max(low, window.admissible[0]), min(high, window.admissible[1])
    return (low, high) if low <= high * (1 + CLOSE) else None


def window_of(values: Mapping[str, Any]) -> Window:
    """The window of one case from its recomputed values."""
    low, high = float(values["cot_min"]), float(values["cot_max"])

    def span(start: float, end: float) -> Span | None:
        if not (math.isfinite(start) and math.isfinite(end)):
            return None
        start, end = max(start, low), min(end, high)
        return (start, max(start, end)) if start <= end * (1 + CLOSE) else None

    admissible = span(float(values["cot_from"]), float(values["cot_to"]))
    bends = float(values["M_Rd"]) >= float(values["M"]) * (1 - CLOSE)
    holds = NO_ANGLE
    if admissible is not None and bends:
        holds = AS_CLAIMED if _claimed_angle_holds(values, admissible) else OTHER_ANGLE
    return Window(
        links=span(float(values["cot_links_from"]), FAR),
        concrete=span(float(values["cot_concrete_from"]), float(values["cot_concrete_to"])),
        bars=span(0.0, float(values["cot_bars_to"])),
        admissible=admissible,
        holds=holds,
    )


def _claimed_angle_holds(values: Mapping[str, Any], admissible: Span) -> bool:
    used = []
    if values["has_shear"]:
        used.append(float(values["cot_theta_shear"]))
    if values["has_torsion"]:
        used.append(float(values["cot_theta_torsion"]))
    if not used:
        return True
    if max(used) - min(used) > 0.01 * max(used):
        return False
    return all(admissible[0] * (1 - CLOSE) <= cot <= admissible[1] * (1 + CLOSE) for cot in used)


def degrees_of(span: Span | None) -> tuple[float, float] | None:
    """A span of cot θ as angles in degrees, the flattest first."""
    if span is None:
        return None
    return tuple(sorted(math.degrees(math.atan2(1.0, cot)) for cot in span))  # type: ignore[return-value]
