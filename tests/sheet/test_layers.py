"""Layers change what they say and nothing else; the laws that the sheet's results obey whatever the numbers."""

from __future__ import annotations

import math
from pathlib import Path
from typing import Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from checker import shipped
from checker.review.engine import recompute, sheet_under
from checker.sheet.load import load_layers
from tests.sheet.designs import BARS, design, values_of

STANDARD = "EN 1992-1-1:2004"
RULES = shipped.folder("rules")
SHAPES = load_layers(RULES / "en1992-1-1-2004" / "shapes.yaml")
ANNEXES = {path.stem: path for path in sorted((RULES / "annexes").glob("*.yaml"))}


def formulas(*layers: str, annex: str = "recommended") -> dict[str, str]:
    quantities = sheet_under(STANDARD, annex, layers).quantities
    return {symbol: q.formula.text if q.formula else "" for symbol, q in quantities.items()}


@pytest.mark.parametrize("annex", ANNEXES)
def test_an_annex_changes_exactly_what_it_says(annex: str) -> None:
    base, under = formulas(), formulas(annex=annex)
    entries = {
        symbol: fields
        for layer in load_layers(ANNEXES[annex]).values()
        for symbol, fields in layer.entries.items()
    }
    known = {symbol for symbol in under if not symbol.endswith("_declared")}
    assert known == {symbol for symbol in base if not symbol.endswith("_declared")}
    changed = {symbol for symbol in known if base[symbol] != under[symbol]}
    assert changed <= set(entries)
    for symbol, fields in entries.items():
        assert under[symbol] == fields["formula"].text  # type: ignore[attr-defined]
        assert (
            sheet_under(STANDARD, annex, ()).quantities[symbol].unit
            == sheet_under(STANDARD, "recommended", ()).quantities[symbol].unit
        )


@pytest.mark.parametrize("shape", SHAPES)
def test_a_shape_changes_exactly_what_it_says(shape: str) -> None:
    base, under = formulas(), formulas(shape)
    changed = {
        symbol for symbol in under if base.get(symbol) != under[symbol] and not symbol.endswith("_declared")
    }
    assert changed == set(SHAPES[shape].entries) - {
        s for s in SHAPES[shape].entries if base.get(s) == under[s]
    }
    assert sheet_under(STANDARD, "uk", (shape,)).layers == (shape, "uk")


UK = {
    # on a C60 beam: symbol, by recommended values, by the annex (values from memory, as the annex says)
    "f_cd_b": (40.0, 34.0),
    "nu": (0.6 * (1 - 60 / 250), 0.6 * (1 - 50 / 250)),
    "f_ck_shear": (60.0, 50.0),
    "alpha_cc": (1.0, 1.0),
    "f_cd": (40.0, 40.0),
    "cot_max": (2.5, 2.5),
}


@pytest.mark.parametrize("symbol", UK)
def test_uk_values(symbol: str) -> None:
    for annex, expected in zip(("recommended", "uk"), UK[symbol], strict=True):
        values = values_of(design(annex=annex, f_ck=60))[0][1]
        assert values[symbol] == pytest.approx(expected, rel=1e-12)


def test_uk_with_external_tension() -> None:
    cases = "{name: A, V_Ed: 310, T_Ed: 52, M_Ed: 240, N_Ed: -100}"
    assert values_of(design(annex="uk", cases=cases))[0][1]["cot_max"] == 1.0
    assert values_of(design(cases=cases))[0][1]["cot_max"] == 2.5


def test_uk_takes_085_throughout_where_it_is_declared() -> None:
    assert values_of(design(annex="uk", declared="{f_cd: 17.0}"))[0][1]["f_cd"] == pytest.approx(17.0)
    assert values_of(design(annex="uk", declared="{f_cd: 18.0}"))[0][1]["f_cd"] == pytest.approx(20.0)


def test_inclined_links_at_the_uk_reduce_the_struts() -> None:
    links = "{mark: L1, diameter: 10, spacing: 150, legs: 2, place: perimeter, angle: 60}"
    cases = "{name: A, V_Ed: 310, T_Ed: 0, M_Ed: 240}"
    upright = values_of(design(annex="uk", cases=cases))[0][1]
    inclined = values_of(design(annex="uk", cases=cases, links=links))[0][1]
    assert upright["nu_1"] == pytest.approx(upright["nu"])
    assert inclined["nu_1"] == pytest.approx(inclined["nu"] * (1 - 0.5 * math.cos(math.radians(60))))


def test_a_layer_by_path_as_annex_and_as_office_file(tmp_path: Path) -> None:
    path = tmp_path / "north.yaml"
    path.write_text(
        "layers: {north: {name: n, quantities: {nu: {formula: 0.5}, cot_max: {formula: 2}}}}",
        encoding="utf-8",
    )
    for annex, office in ((path.as_posix(), None), ("recommended", path)):
        sheet = sheet_under(STANDARD, annex, ("rectangle",), office)
        assert sheet.quantities["nu"].formula.text == "0.5"  # type: ignore[union-attr]
        assert (
            sheet.quantities["nu"].clause == sheet_under(STANDARD, "recommended", ()).quantities["nu"].clause
        )
        assert recompute(["nu", "cot_max"], {"f_ck": 30.0}, annex=annex, office=office) == {
            "nu": 0.5,
            "cot_max": 2.0,
        }


def test_the_rectangle_layer_is_the_general_outline() -> None:
    """The plain formulas of the rectangle give what the general ones give for the same outline as a polygon."""
    polygon = "{shape: polygon, points: [[0, 0], [400, 0], [400, 700], [0, 700]]}"
    actions = ("T_Ed: 52, M_Ed: 240", "T_Ed: 52, M_Ed: -240, N_Ed: 500", "T_Ed: 0, M_Ed: 1400")
    cases = ", ".join(f"{{name: C{k}, V_Ed: 310, {case}}}" for k, case in enumerate(actions))
    plain = values_of(design(cases=cases))
    general = values_of(design(cases=cases, section=polygon, bars=BARS["rectangle"]))
    for (_, one), (_, other) in zip(plain, general, strict=True):
        for symbol in (
            "A",
            "u",
            "A_k",
            "u_k",
            "M_lim",
            "a_b",
            "F_b",
            "z_b",
            "M_Rd",
            "T_Rd_max",
            "V_Rd_c",
            "cot_best",
            "A_s_tension",
        ):
            assert one[symbol] == pytest.approx(other[symbol], rel=1e-9), symbol


sizes = st.floats(250, 1500)
strengths = st.floats(12, 90)
cots = st.floats(1.0, 2.5)


@given(sizes, sizes, st.floats(30, 60), st.floats(0.25, 4))
@settings(max_examples=80, deadline=None)
def test_lengths_scale(b: float, h: float, c_axis: float, scale: float) -> None:
    """A section k times as large has k times the wall and centre-line, k^2 the area, k^3 the cracking torsion."""
    wanted = {"t_ef": 1, "u_k": 1, "A_k": 2, "A": 2, "u": 1, "T_Rd_c": 3}
    fixed = {"f_ck": 30.0, "t_wall": math.inf}
    one = recompute(wanted, {**fixed, "b": b, "h": h, "c_axis": c_axis})
    other = recompute(wanted, {**fixed, "b": scale * b, "h": scale * h, "c_axis": scale * c_axis})
    for symbol, power in wanted.items():
        assert other[symbol] == pytest.approx(one[symbol] * scale**power, rel=1e-9), symbol


@given(strengths, st.floats(1.0, 10.0))
@settings(max_examples=80, deadline=None)
def test_struts_are_symmetric_about_45_degrees(f_ck: float, cot: float) -> None:
    def limit(cot: float) -> float:
        row = {"b_w": 400.0, "z": 578.0, "f_ck": f_ck, "N_Ed": 0.0, "A_c": 280000.0, "cot_theta_shear": cot}
        return float(recompute(["V_Rd_max"], row)["V_Rd_max"])

    assert limit(cot) == pytest.approx(limit(1 / cot), rel=1e-9)
    assert limit(cot) <= limit(1.0) * (1 + 1e-12)


@given(strengths, strengths, cots)
@settings(max_examples=80, deadline=None)
def test_struts_grow_with_the_concrete(one: float, other: float, cot: float) -> None:
    low, high = sorted((one, other))
    row = {"b_w": 400.0, "z": 578.0, "N_Ed": 0.0, "A_c": 280000.0, "cot_theta_shear": cot}
    weak, strong = (recompute(["V_Rd_max", "f_cd"], {**row, "f_ck": f_ck}) for f_ck in (low, high))
    assert weak["V_Rd_max"] <= strong["V_Rd_max"] * (1 + 1e-12)
    assert weak["f_cd"] <= strong["f_cd"]


@given(st.floats(0.1, 5), st.floats(0, 3), cots, st.sampled_from([45.0, 60.0, 90.0]))
@settings(max_examples=80, deadline=None)
def test_more_links_never_carry_less(area: float, more: float, cot: float, angle: float) -> None:
    alpha = math.radians(angle)
    row = {
        "z": 578.0,
        "f_ywk": 500.0,
        "cot_theta_shear": cot,
        "share_sin": math.sin(alpha),
        "share_cos": math.cos(alpha),
    }
    shape = ("rectangle", "links-aslant") if angle < 90 else ("rectangle",)
    less, greater = (
        float(recompute(["V_Rd_s"], {**row, "A_sw_s_provided": a}, layers=shape)["V_Rd_s"])
        for a in (area, area + more)
    )
    assert less <= greater


@given(cots, cots)
@settings(max_examples=60, deadline=None)
def test_flatter_struts_trade_links_for_bars(one: float, other: float) -> None:
    steep, flat = sorted((one, other))
    row: dict[str, Any] = {
        "V_Ed": 310e3, "T_Ed": 52e6, "z": 578.0, "f_ywk": 500.0, "f_yk": 500.0, "A_k": 156e3, "u_k": 1690.0,
    }  # fmt: skip
    wanted = ["A_sw_s_total", "A_sl_torsion", "delta_F_td"]
    first, second = (
        recompute(wanted, {**row, "cot_theta_shear": c, "cot_theta_torsion": c}) for c in (steep, flat)
    )
    assert first["A_sw_s_total"] >= second["A_sw_s_total"]
    assert first["A_sl_torsion"] <= second["A_sl_torsion"]
    assert first["A_sw_s_total"] * first["A_sl_torsion"] == pytest.approx(
        second["A_sw_s_total"] * second["A_sl_torsion"]
    )


@given(st.permutations(range(4)))
@settings(max_examples=24, deadline=None)
def test_the_order_of_bars_and_links_does_not_matter(order: list[int]) -> None:
    groups = BARS["rectangle"].strip("[]").split(", {")
    groups = [group if group.startswith("{") else "{" + group for group in groups]
    links = [
        "{mark: L1, diameter: 10, spacing: 150, legs: 2, place: perimeter}",
        "{mark: L2, diameter: 8, spacing: 150, legs: 2, place: inner}",
    ]
    plain = values_of(design(bars=f"[{', '.join(groups)}]", links=", ".join(links)))[0][1]
    mixed = values_of(
        design(bars=f"[{', '.join(groups[k] for k in order)}]", links=", ".join(reversed(links)))
    )[0][1]
    for symbol, value in plain.items():
        if symbol != "section" and math.isfinite(value):
            assert mixed[symbol] == pytest.approx(value, rel=1e-10, abs=1e-12), symbol


@given(st.floats(-1, 1).filter(lambda v: v != 0), st.floats(-1, 1).filter(lambda v: v != 0))
@settings(max_examples=40, deadline=None)
def test_signs_of_shear_and_torsion_do_not_matter(v: float, t: float) -> None:
    row = {"z": 578.0, "f_ywk": 500.0, "A_k": 156e3, "cot_theta_shear": 2.0, "cot_theta_torsion": 2.0}
    plain = recompute(["A_sw_s_total"], {**row, "V_Ed": abs(v) * 3e5, "T_Ed": abs(t) * 5e7})
    signed = recompute(["A_sw_s_total"], {**row, "V_Ed": v * 3e5, "T_Ed": t * 5e7})
    assert plain == signed
