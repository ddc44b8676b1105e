"""Declared designs of every kind for the tests of the engine, as a designer would write them (all invented)."""

from __future__ import annotations

import random
from collections.abc import Mapping
from typing import Any

from checker.declared.build import load_text
from checker.declared.model import Design
from checker.geometry.measure import measure
from checker.pipeline import Options, engine_for
from checker.review.claims import case_row, claims_of, member_row
from checker.review.engine import Engine

SECTIONS = {
    "rectangle": "{shape: rectangle, b: 400, h: 700}",
    "box": "{shape: box, b: 900, h: 1200, walls: {side: 160, top: 180, bottom: 150}}",
    "circle": "{shape: circle, diameter: 800}",
    "polygon": "{shape: polygon, points: [[0, 0], [500, 0], [600, 800], [0, 900]]}",
    "tee": "{shape: polygon, points: [[300, 0], [700, 0], [700, 600], [1000, 600], "
    "[1000, 800], [0, 800], [0, 600], [300, 600]]}",
}
BARS = {
    "rectangle": "[{face: bottom, bars: 4H25}, {face: top, bars: 3H20}, "
    "{face: left, bars: 2H12}, {face: right, bars: 2H12}]",
    "box": "[{face: bottom, bars: 6H25}, {face: top, bars: 5H25}, {face: left, bars: 3H16}, {face: right, bars: 3H16}]",
    "circle": "[{face: round, bars: 12H25}]",
    "polygon": "[{face: corners, count: 4, diameter: 25}, {face: bottom, bars: 4H20}]",
    "tee": "[{face: corners, count: 6, diameter: 20}, {face: bottom, bars: 4H25}, {face: top, bars: 5H20}]",
}


def design(
    shape: str = "rectangle",
    *,
    cases: str = "{name: A, V_Ed: 310, T_Ed: 52, M_Ed: 240}",
    declared: str = "{}",
    annex: str = "recommended",
    f_ck: float = 30,
    links: str = "{mark: L1, diameter: 10, spacing: 150, legs: 2, place: perimeter, ends: hooks_135}",
    section: str = "",
    bars: str = "",
    cover: float = 35,
    extra: str = "",
) -> Design:
    """A sound design of a shape, with what is given changed."""
    text = f"""\
format: 1
member: D
annex: {annex}
section: {section or SECTIONS[shape]}
materials: {{f_ck: {f_ck}, f_yk: 500, f_ywk: 500}}
cover: {cover}
links: [{links}]
bars: {bars or BARS[shape]}
declared: {declared}
cases: [{cases}]
{extra}
"""
    return load_text(text, "d.yaml")


def rows_of(design: Design) -> tuple[Engine, list[Mapping[str, Any]]]:
    """The compiled sheet of a design, and one row of inputs for each of its cases."""
    measured = measure(design)
    compiled = engine_for(design, measured, Options())
    member = member_row(design, measured)
    inputs = frozenset((*compiled.scratch.inputs, *compiled.follow.inputs))
    rows: list[Mapping[str, Any]] = []
    for case in design.cases:
        claims = claims_of(case, measured)
        rows.append(case_row(member, case, claims, inputs))
    return compiled, rows


def values_of(design: Design) -> list[tuple[Engine, dict[str, Any]]]:
    """For each case: the engine, and all inputs and recomputed values by symbol."""
    compiled, rows = rows_of(design)
    return [(compiled, {**row, **compiled.scratch.run(row)}) for row in rows]


def _random_flanged(shape: str, r: random.Random) -> dict[str, Any]:
    """A web with flanges that share the torsion (or not), bars in the corners of each outstand."""
    b_w, h, h_f = r.randint(300, 500), r.randint(650, 1100), r.randint(180, 300)
    one_sided, flange = shape == "ell", r.choice(("top", "bottom"))
    b_f = b_w + r.randint(250, 700) * (1 if one_sided else 2)
    by, size = r.choice(("parts", "parts", "web")), r.choice((12, 16, 20))
    lies = {
        "i": f"b_f_bottom: {b_f}, h_f_bottom: {h_f}",
        "tee": f"flange: {flange}",
        "ell": f"flange: {flange}, side: left",
    }
    section = (
        f"{{shape: {shape}, b_w: {b_w}, h: {h}, b_f: {b_f}, h_f: {h_f}, {lies[shape]}, torsion_by: {by}}}"
    )
    out = b_f - b_w if one_sided else (b_f - b_w) // 2
    bars = [
        "{face: bottom, bars: 4H25}, {face: top, bars: 4H20}, {face: left, bars: 2H16}, {face: right, bars: 2H16}"
    ]
    for face in ("top", "bottom") if shape == "i" else (flange,):
        low = h - h_f if face == "top" else 0
        for left in (0,) if one_sided else (0, b_f - out):
            at = [[x, y] for x in (left + 60, left + out - 60) for y in (low + 60, low + h_f - 60)]
            bars.append(f"{{face: {face}, diameter: {size}, at: {at}}}")
    return {"section": section, "bars": f"[{', '.join(bars)}]"}


def random_section(shape: str, r: random.Random) -> dict[str, Any]:
    """Section and bars of a shape with random sizes, as arguments of `design`."""
    b, h = r.randint(350, 900), r.randint(450, 1200)
    bars = "[{face: bottom, bars: %dH%d}, {face: top, bars: %dH16}, {face: left, bars: 2H12}, {face: right, bars: 2H12}]"
    if shape == "rectangle":
        return {
            "section": f"{{shape: rectangle, b: {b}, h: {h}}}",
            "bars": bars % (r.randint(2, 4), r.choice((16, 25)), 3),
        }
    if shape == "box":
        walls = f"walls: {{side: {r.randint(130, 150)}, top: {r.randint(130, 150)}, bottom: {r.randint(130, 150)}}}"
        return {"section": f"{{shape: box, b: {b + 250}, h: {h + 100}, {walls}}}", "bars": bars % (4, 20, 4)}
    if shape == "circle":
        return {
            "section": f"{{shape: circle, diameter: {b + 100}}}",
            "bars": f"[{{face: round, bars: {r.randint(6, 9)}H{r.choice((16, 20, 25))}}}]",
        }
    if shape in ("tee", "ell", "i"):
        return _random_flanged(shape, r)
    top, wide, thick = r.randint(0, 150), b + r.randint(150, 500), r.randint(140, 250)
    left = (wide - b) // 2
    if r.random() < 0.5:
        points = f"[[0, 0], [{b}, 0], [{b + top}, {h}], [{-top}, {h}]]"
    else:
        points = (
            f"[[{left}, 0], [{left + b}, 0], [{left + b}, {h - thick}], [{wide}, {h - thick}], [{wide}, {h}], [0, {h}], "
            f"[0, {h - thick}], [{left}, {h - thick}]]"
        )
    corners = points.count("], [") + 1
    bar = f"[{{face: corners, count: {corners if corners == 4 else 6}, diameter: 16}}, {{face: bottom, bars: 3H20}}]"
    return {"section": f"{{shape: polygon, points: {points}}}", "bars": bar}
