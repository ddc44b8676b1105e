"""Bending with axial force: the rectangular stress block on any outline, for one section or many rows.

- Depths are measured from the compression face: the top when sagging, the bottom when hogging.
- `section` is a `Profile` and all else plain floats, or a `ProfileColumns` and all else arrays of as many
  rows (or plain floats, for what is common to all); both do the same sums in the same order.
- Concrete displaced by bars is not deducted (common practice, no source).
"""

from __future__ import annotations

from collections.abc import Callable
from math import inf, nan
from typing import Any, overload

from checker.geometry.polygons import Strip
from checker.geometry.profile import Floats, Profile, ProfileColumns

__all__ = ["Profile", "ProfileColumns", "bending_resistance", "block_area", "block_depth", "block_moment"]

TOLERANCE = 1e-13
"""A root is found when a step of Newton's method is this small beside it; the step is still taken."""

ROUNDING = 1 + 1e-12
"""How far a moment may pass the largest one by rounding alone."""

STEPS = 60
FAR = 1e4
"""Neutral axis depth, in section depths, beyond which a section counts as evenly compressed."""


@overload
def block_area(section: Profile, hogging: bool, a: float) -> float: ...
@overload
def block_area(section: ProfileColumns, hogging: Any, a: Any) -> Floats: ...
def block_area(section: Profile | ProfileColumns, hogging: Any, a: Any) -> float | Floats:
    """Return the concrete area in mm2 from the compression face to the depth a in mm."""
    if isinstance(section, Profile):
        return _area_and_width(_strips(section, hogging), a)[0]
    from checker.geometry import bending_columns

    return bending_columns.block_area(section, hogging, a)


@overload
def block_moment(section: Profile, hogging: bool, a: float, d: float) -> float: ...
@overload
def block_moment(section: ProfileColumns, hogging: Any, a: Any, d: Any) -> Floats: ...
def block_moment(section: Profile | ProfileColumns, hogging: Any, a: Any, d: Any) -> float | Floats:
    """Return the first moment in mm3 about depth d of the concrete from the compression face to depth a."""
    if isinstance(section, Profile):
        return _moment_and_width(_strips(section, hogging), a, d)[0]
    from checker.geometry import bending_columns

    return bending_columns.block_moment(section, hogging, a, d)


@overload
def block_depth(section: Profile, hogging: bool, S: float, d: float) -> float: ...
@overload
def block_depth(section: ProfileColumns, hogging: Any, S: Any, d: Any) -> Floats: ...
def block_depth(section: Profile | ProfileColumns, hogging: Any, S: Any, d: Any) -> float | Floats:
    """Return the depth a <= d in mm whose `block_moment` about d is S mm3.

    0 for S <= 0; nan when no depth reaches S.
    """
    if not isinstance(section, Profile):
        from checker.geometry import bending_columns

        return bending_columns.block_depth(section, hogging, S, d)
    if S <= 0:
        return 0.0
    strips = _strips(section, hogging)
    deepest = min(d, section.h)
    most = _moment_and_width(strips, deepest, d)[0]
    if not most * ROUNDING >= S:
        return nan
    S = min(S, most)

    def excess(a: float) -> tuple[float, float]:
        moment, width = _moment_and_width(strips, a, d)
        return moment - S, width * (d - a)

    return _increasing_root(excess, deepest, deepest / 4)


@overload
def bending_resistance(
    section: Profile,
    hogging: bool,
    N: float,
    f_c: float,
    lambda_c: float,
    eps_cu: float,
    f_yd: float,
    E_s: float,
) -> float: ...
@overload
def bending_resistance(
    section: ProfileColumns,
    hogging: Any,
    N: Any,
    f_c: Any,
    lambda_c: Any,
    eps_cu: Any,
    f_yd: Any,
    E_s: Any,
) -> Floats: ...
def bending_resistance(
    section: Profile | ProfileColumns,
    hogging: Any,
    N: Any,
    f_c: Any,
    lambda_c: Any,
    eps_cu: Any,
    f_yd: Any,
    E_s: Any,
) -> float | Floats:
    """Return the resistance |M| in N*mm about the concrete's centroid, with N (compression positive).

    Stress block f_c MPa over the depth lambda_c x, extreme compressive strain eps_cu (EN 1992-1-1,
    3.1.7(3)); steel elastic-plastic with f_yd MPa, E_s MPa and no strain limit (3.2.7(2)b). 0 where the
    section can't take N or where N leaves no moment in this sense.
    """
    if not isinstance(section, Profile):
        from checker.geometry import bending_columns

        return bending_columns.bending_resistance(section, hogging, N, f_c, lambda_c, eps_cu, f_yd, E_s)
    return _resistance(section, hogging, N, f_c, lambda_c, E_s * eps_cu, f_yd)


def _resistance(
    section: Profile, hogging: bool, N: float, f_c: float, lambda_c: float, stress: float, f_yd: float
) -> float:
    """Solve one section; `stress` is E_s eps_cu, what an elastic bar at the compression face would carry."""
    h = section.h
    strips = _strips(section, hogging)
    bars = tuple((y if hogging else h - y, area) for y, area in section.bars if area > 0)
    centroid = section.y_c if hogging else h - section.y_c

    def excess(x: float) -> tuple[float, float]:
        block, width = _area_and_width(strips, lambda_c * x)
        force, slope = _steel_force(bars, stress, f_yd, x)
        return f_c * block + force - N, f_c * lambda_c * width + slope

    # Past this depth every bar yields and the block covers the section: no more compression is to be had.
    far = max((depth for depth, _ in bars), default=0.0) / max(1 - f_yd / stress, 1 / FAR)
    far = max(far, h / lambda_c)
    if N + f_yd * sum(area for _, area in bars) <= 0 or not excess(far)[0] >= 0:
        return 0.0
    x = _increasing_root(excess, far, h / 4)
    steel = 0.0
    for depth, area in bars:
        steel += area * min(max(stress * (1 - depth / x), -f_yd), f_yd) * (centroid - depth)
    return max(f_c * _moment_and_width(strips, lambda_c * x, centroid)[0] + steel, 0.0)


def _steel_force(
    bars: tuple[tuple[float, float], ...], stress: float, f_yd: float, x: float
) -> tuple[float, float]:
    """Return the bars' compressive force at the neutral axis depth x, and how it grows with x."""
    force, slope = 0.0, 0.0
    for depth, area in bars:
        sigma = stress * (1 - depth / x)
        if sigma > f_yd:
            sigma = f_yd
        elif sigma < -f_yd:
            sigma = -f_yd
        else:
            slope += area * stress * depth / (x * x)
        force += area * sigma
    return force, slope


def _strips(section: Profile, hogging: bool) -> tuple[Strip, ...]:
    return section.strips_hogging if hogging else section.strips_sagging


def _area_and_width(strips: tuple[Strip, ...], a: float) -> tuple[float, float]:
    """Return the area to the depth a and the width there (0 below the section)."""
    area, width = 0.0, 0.0
    for y0, y1, w0, w1 in strips:
        if a <= y0:
            break
        slope = (w1 - w0) / (y1 - y0)
        depth = (a if a < y1 else y1) - y0
        area += depth * (w0 + slope * depth / 2)
        width = w0 + slope * depth if a <= y1 else 0.0
    return area, width


def _moment_and_width(strips: tuple[Strip, ...], a: float, d: float) -> tuple[float, float]:
    """Return the first moment about d of the area to depth a, and the width at a (0 below the section)."""
    moment, width = 0.0, 0.0
    for y0, y1, w0, w1 in strips:
        if a <= y0:
            break
        slope = (w1 - w0) / (y1 - y0)
        depth = (a if a < y1 else y1) - y0
        arm = d - y0
        moment += depth * (w0 * arm + depth * ((slope * arm - w0) / 2 - slope * depth / 3))
        width = w0 + slope * depth if a <= y1 else 0.0
    return moment, width


def _increasing_root(excess: Callable[[float], tuple[float, float]], high: float, x: float) -> float:
    """Return the root between 0 and `high` of a non-decreasing function that is negative at 0.

    `excess` gives value and slope. Newton's method from x, kept inside the bracket; a step out of it, or one
    that isn't at most half the step before, is replaced by halving the bracket.
    """
    low, last = 0.0, inf
    for _ in range(STEPS):
        value, slope = excess(x)
        if value == 0:
            return x
        if value < 0:
            low = x
        else:
            high = x
        newton = x - value / slope if slope > 0 else inf
        if abs(newton - x) <= TOLERANCE * x:
            return newton
        following = newton
        if not low < newton < high or abs(newton - x) > last / 2:
            following = low + (high - low) / 2
        last = abs(following - x)
        if last <= TOLERANCE * x:
            return following
        x = following
    return x
