"""Anchorage and lap lengths, clear distances and mandrels against published tables (`anchorage.yaml` names them)."""

from __future__ import annotations

import math
from pathlib import Path
from typing import Any

import pytest
import yaml

from checker.review.engine import recompute

TABLE = yaml.safe_load((Path(__file__).parent / "anchorage.yaml").read_text(encoding="utf-8"))
ALPHA_6 = {0.33: 1.15, 0.50: 1.4, 1.00: 1.5}
"""Table 8.3 of EN 1992-1-1 prints the root of the share over 25 % with these digits (memory)."""

BASE: dict[str, Any] = {"f_ck": 25.0, "f_yk": 500.0, "f_ywk": 500.0}


def worked(row: dict[str, Any], size: float) -> float:
    good = 1.0 if row["bond"] == "good" else 0.0
    if row["what"] == "lap":
        lap = {"phi_lapped": size, "lap_bond": good, "c_d_lap": 25.0, "lap_bent": 0.0, "sigma_lap": 435.0}
        given = {
            **BASE,
            **lap,
            "p_lap": math.nan,
            "lap_share": row["share"],
            "alpha_6": ALPHA_6[row["share"]],
        }
        return float(recompute(["l_0"], given)["l_0"])
    bar = {"phi_anchored": size, "anchor_bond": good, "c_d_anchor": 25.0, "sigma_anchor": 435.0}
    given = {**BASE, **bar, "anchor_bent": float(row["bent"]), "anchor_pressed": 0.0, "p_anchor": math.nan}
    if row["bent"]:
        given["alpha_1"] = 1.0
    return float(recompute(["l_bd"], given)["l_bd"])


def test_the_table_of_80_lengths() -> None:
    """74 cells as "rounded up" to 10 mm; the other six are of 8 mm bars and one step lower."""
    off: list[tuple[int, int]] = []
    for row in TABLE["rows"]:
        for size, printed in zip(TABLE["sizes"], row["printed"], strict=True):
            up = math.ceil(worked(row, size) / 10 - 1e-9) * 10
            if up != printed:
                off.append((size, printed - up))
    assert sum(len(row["printed"]) for row in TABLE["rows"]) == 80
    assert off == [(TABLE["low"], -10)] * len(off)
    assert len(off) == 6


@pytest.mark.parametrize("f_ck", TABLE["class_factors"])
def test_class_factors(f_ck: int) -> None:
    row, size = TABLE["rows"][1], 40  # far from every floor
    given = {"phi_anchored": size, "anchor_bond": 0.0, "sigma_anchor": 435.0}
    lengths = [
        float(recompute(["l_b_rqd"], {**BASE, **given, "f_ck": float(f)})["l_b_rqd"]) for f in (f_ck, 25)
    ]
    assert row["bond"] == "other"
    assert lengths[0] / lengths[1] == pytest.approx(TABLE["class_factors"][f_ck], abs=0.005)


@pytest.mark.parametrize("bond", ["good", "other"])
def test_multiples_of_an_office_table(bond: str) -> None:
    table = TABLE["multiples"]
    given = {"phi_anchored": 20.0, "anchor_bond": float(bond == "good"), "sigma_anchor": math.nan}
    length = recompute(["l_b_rqd"], {**BASE, **given, "f_ck": float(table["f_ck"])})["l_b_rqd"]
    assert float(length) / 20 == pytest.approx(table[bond], abs=0.5)


def test_clear_distance() -> None:
    clear = TABLE["details"]["clear"]
    given = {"d_g": float(clear["aggregate"]), "phi_clear": float(clear["size"])}
    found = recompute(["clear_for_grain", "clear_for_size"], given)
    assert max(found.values()) == clear["printed"]


@pytest.mark.parametrize("size", TABLE["details"]["mandrels"])
def test_mandrels(size: int) -> None:
    given = {"phi_mandrel_link": float(size), "phi_mandrel_bar": float(size)}
    found = recompute(["mandrel_link_least", "mandrel_bar_least"], given)
    assert set(found.values()) == {TABLE["details"]["mandrels"][size]}
