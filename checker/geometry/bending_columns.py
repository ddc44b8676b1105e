"""The functions of `bending` for many rows at once, on numpy arrays; imported only when rows come in columns.

- Same sums in the same order as the scalar code, so that both agree to rounding.
"""

from __future__ import annotations

from collections.abc import Callable
from typing import Any

import numpy as np

from checker.geometry.bending import FAR, ROUNDING, STEPS, TOLERANCE
from checker.geometry.profile import Floats, ProfileColumns


def block_area(section: ProfileColumns, hogging: Any, a: Any) -> Floats:
    """Return `bending.block_area` for every row."""
    return _area_and_width(_strips(section, hogging), np.asarray(a, dtype=np.float64))[0]


def block_moment(section: ProfileColumns, hogging: Any, a: Any, d: Any) -> Floats:
    """Return `bending.block_moment` for every row."""
    return _moment_and_width(_strips(section, hogging), np.asarray(a, dtype=np.float64), d)[0]


def block_depth(section: ProfileColumns, hogging: Any, S: Any, d: Any) -> Floats:
    """Return `bending.block_depth` for every row."""
    strips = _strips(section, hogging)
    deepest = np.minimum(d, section.levels[0, section.index])
    most = _moment_and_width(strips, deepest, d)[0]
    reached = most * ROUNDING >= S
    S = np.minimum(S, most)
    positive = ~np.less_equal(S, np.zeros_like(deepest))

    def excess(a: Floats) -> tuple[Floats, Floats]:
        moment, width = _moment_and_width(strips, a, d)
        return moment - S, width * (d - a)

    a = _increasing_roots(excess, deepest, deepest / 4, ~(reached & positive))
    return np.where(positive, np.where(reached, a, np.nan), 0.0)


def bending_resistance(
    section: ProfileColumns,
    hogging: Any,
    N: Any,
    f_c: Any,
    lambda_c: Any,
    eps_cu: Any,
    f_yd: Any,
    E_s: Any,
) -> Floats:
    """Return `bending.bending_resistance` for every row."""
    strips = _strips(section, hogging)
    h, y_c = section.levels[:, section.index]
    y, area = section.bars[:, :, section.index]
    depth = np.where(_senses(section, hogging), y, h - y)
    centroid = np.where(_senses(section, hogging), y_c, h - y_c)
    stress = E_s * eps_cu

    def excess(x: Floats) -> tuple[Floats, Floats]:
        block, width = _area_and_width(strips, lambda_c * x)
        sigma = stress * (1 - depth / x)
        elastic = np.where(np.abs(sigma) <= f_yd, area * stress * depth / (x * x), 0.0)
        force = f_c * block + _total(area * np.clip(sigma, -f_yd, f_yd))
        return force - N, f_c * lambda_c * width + _total(elastic)

    # Padding has no area, but its depth would count in the largest one.
    deepest = np.max(np.where(area > 0, depth, 0.0), axis=0, initial=0.0)
    far = np.maximum(deepest / np.maximum(1 - f_yd / stress, 1 / FAR), h / lambda_c)
    takes = ~((N + f_yd * _total(area) <= 0) | ~(excess(far)[0] >= 0))
    x = _increasing_roots(excess, far, h / 4, ~takes)
    moment = f_c * _moment_and_width(strips, lambda_c * x, centroid)[0]
    sigma = np.clip(stress * (1 - depth / x), -f_yd, f_yd)
    moment = moment + _total(area * sigma * (centroid - depth))
    return np.where(takes, np.maximum(moment, 0.0), 0.0)


def _senses(section: ProfileColumns, hogging: Any) -> Any:
    return np.broadcast_to(np.asarray(hogging, dtype=bool), section.index.shape)


def _strips(section: ProfileColumns, hogging: Any) -> Floats:
    """Return the strips of every row, (5, strips, rows): y0, y1, w0, w1, slope."""
    sections = section.strips.shape[2] // 2
    rows: Floats = section.strips[:, :, section.index + sections * _senses(section, hogging)]
    return rows


def _total(terms: Floats) -> Floats:
    """Add up along the first axis, from its first term on."""
    total: Floats = terms.sum(axis=0)
    return total


def _area_and_width(strips: Floats, a: Floats) -> tuple[Floats, Floats]:
    y0, y1, w0, _, slope = strips
    depth = np.maximum(np.minimum(a, y1) - y0, 0.0)
    width = w0 + slope * depth
    area = _total(depth * (w0 + slope * depth / 2))
    return area, _total(np.where((y0 < a) & (a <= y1), width, 0.0))


def _moment_and_width(strips: Floats, a: Floats, d: Any) -> tuple[Floats, Floats]:
    y0, y1, w0, _, slope = strips
    depth = np.maximum(np.minimum(a, y1) - y0, 0.0)
    arm = d - y0
    moment = _total(depth * (w0 * arm + depth * ((slope * arm - w0) / 2 - slope * depth / 3)))
    return moment, _total(np.where((y0 < a) & (a <= y1), w0 + slope * depth, 0.0))


def _increasing_roots(
    excess: Callable[[Floats], tuple[Floats, Floats]], high: Floats, x: Floats, done: Any
) -> Floats:
    """Return `bending._increasing_root` of every row that isn't done yet."""
    low, last = np.zeros_like(x), np.full_like(x, np.inf)
    for _ in range(STEPS):
        if done.all():
            break
        value, slope = excess(x)
        low = np.where(value < 0, x, low)
        high = np.where(value > 0, x, high)
        newton = x - value / np.where(slope > 0, slope, np.nan)
        close = np.abs(newton - x) <= TOLERANCE * x
        inside = (low < newton) & (newton < high) & (np.abs(newton - x) <= last / 2)
        following = np.where(close | inside, newton, low + (high - low) / 2)
        following = np.where(value == 0, x, following)
        last = np.abs(following - x)
        found = close | (last <= TOLERANCE * x)
        x = np.where(done, x, following)
        done = done | found
    return x
