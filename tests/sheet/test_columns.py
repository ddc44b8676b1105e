"""Plain numbers and numpy columns are the same sheet: thousands of random rows, every quantity, to 1e-12.

- Random sections of every shape, every sign of moment, with and without axial force and declared values.
- nan and infinity stand in the same places. Where large terms cancel, 1e-12 counts from 1 in the inside unit.
"""

from __future__ import annotations

import math
import random
from typing import Any

import numpy as np
import pytest

from checker.declared.model import Design
from checker.geometry.profile import ProfileColumns
from checker.review.engine import Engine, engine
from tests.sheet.designs import design, random_section, rows_of

DESIGNS, CASES = 20, 25
RELATIVE = 1e-12
DECLARED = {
    # symbol: what a designer may have written in the shown unit, least and most
    "d": (500, 800), "z": (400, 700), "t_ef": (80, 200), "A_k": (1e5, 4e5), "u_k": (1e3, 2e3), "f_cd": (10, 30),
    "nu": (0.4, 0.6), "cot_theta_shear": (0.8, 2.8), "cot_theta_torsion": (0.8, 2.8), "V_Rd_max": (200, 2000),
    "V_Rd_s": (50, 900), "T_Rd_max": (30, 400), "T_Rd_s": (10, 200), "A_sw_s_shear": (0, 2), "A_sw_s_torsion": (0, 1),
    "A_sw_s_total": (0, 3), "A_sl_torsion": (0, 2000), "A_s_shift": (0, 1000), "delta_F_td": (0, 400), "crush_sum": (0, 1.5),
}  # fmt: skip


def _case(k: int, r: random.Random) -> str:
    V, T = r.choice((0, 1, -1)) * r.uniform(1, 900), r.choice((0, 1, 1, -1)) * r.uniform(1, 150)
    M, N = r.choice((0, 1, -1)) * r.uniform(1, 900), r.choice((0, 0, 1, -1)) * r.uniform(1, 2500)
    said = r.sample(sorted(DECLARED), r.choice((0, 0, 2, 5)))
    declared = ", ".join(f"{symbol}: {r.uniform(*DECLARED[symbol]):.4g}" for symbol in said)
    largest = f", M_Ed_max: {M * r.uniform(1, 1.3):.1f}" if M and r.random() < 0.3 else ""
    return f"{{name: C{k}, V_Ed: {V:.1f}, T_Ed: {T:.2f}, M_Ed: {M:.1f}, N_Ed: {N:.0f}{largest}, declared: {{{declared}}}}}"


def _random_design(shape: str, angle: int, r: random.Random) -> Design:
    size, spacing = r.choice((8, 10, 12)), r.randint(80, 250)
    links = f"{{mark: L, diameter: {size}, spacing: {spacing}, legs: 2, place: perimeter, angle: {angle}}}"
    return design(
        links=links, cover=r.randint(25, 40), f_ck=r.choice((20, 25, 30, 40, 50, 55, 70, 90)),
        cases=", ".join(_case(k, r) for k in range(CASES)), **random_section(shape, r),
    )  # fmt: skip


def _stacked(rows: list[dict[str, Any]]) -> dict[str, Any]:
    columns: dict[str, Any] = {}
    for name in rows[0]:
        if name == "section":
            columns[name] = ProfileColumns.stack([row[name] for row in rows])
        elif all(name in row for row in rows):
            columns[name] = np.array([float(row[name]) for row in rows])
    return columns


def _apart(name: str, scalar: list[dict[str, Any]], columns: dict[str, Any], count: int) -> str | None:
    """What parts the two ways for one quantity, or None."""
    left = np.array([float(row[name]) for row in scalar])
    right = np.broadcast_to(np.asarray(columns[name], dtype=float), (count,))
    if not (
        np.array_equal(np.isnan(left), np.isnan(right)) and np.array_equal(np.isinf(left), np.isinf(right))
    ):
        k = int(np.argmax((np.isnan(left) != np.isnan(right)) | (np.isinf(left) != np.isinf(right))))
        return f"{name}: row {k} has {left[k]} alone and {right[k]} in columns"
    finite = np.isfinite(left)
    if not np.array_equal(left[~finite], right[~finite], equal_nan=True):
        return f"{name}: infinities of another sign"
    gap = np.abs(left - right)[finite]
    bad = gap > RELATIVE * np.maximum(np.abs(left[finite]), 1.0)
    return f"{name}: {gap[bad].max():.3g} apart at {left[finite][bad][0]!r}" if bad.any() else None


@pytest.mark.parametrize("angle", [90, 60])
@pytest.mark.parametrize("shape", ["rectangle", "box", "circle", "polygon", "tee", "i"])
def test_scalar_and_columns_agree(shape: str, angle: int) -> None:
    r = random.Random(f"{shape}{angle}")
    rows: list[dict[str, Any]] = []
    compiled: Engine | None = None
    for _ in range(DESIGNS):
        compiled, some = rows_of(_random_design(shape, angle, r))
        rows += [dict(row) for row in some]
    assert compiled is not None
    assert len(rows) == DESIGNS * CASES
    layers = tuple(name for name in compiled.sheet.layers if name not in ("recommended", "uk"))
    columnar = engine("EN 1992-1-1:2004", "recommended", layers, columns=True)
    assert columnar.scratch.inputs == compiled.scratch.inputs
    stacked = _stacked(rows)
    with np.errstate(all="ignore"):
        for one, many in ((compiled.scratch, columnar.scratch), (compiled.follow, columnar.follow)):
            scalar = [one.run(row) for row in rows]
            columns = many.run(stacked)
            assert set(columns) == set(scalar[0])
            found = [_apart(name, scalar, columns, len(rows)) for name in columns]
            assert [said for said in found if said] == []
            finite = sum(math.isfinite(float(row[name])) for row in scalar for name in row)
            assert finite > 0.7 * len(rows) * len(columns)
