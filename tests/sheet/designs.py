"""Declared designs of every kind for the tests of the engine, built from text as a designer would write it (all invented)."""

from __future__ import annotations

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
    "tee": "{shape: polygon, points: [[300, 0], [700, 0], [700, 600], [1000, 600], [1000, 800], [0, 800], [0, 600], [300, 600]]}",
}
BARS = {
    "rectangle": "[{face: bottom, bars: 4H25}, {face: top, bars: 3H20}, {face: left, bars: 2H12}, {face: right, bars: 2H12}]",
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
    rows = []
    for case in design.cases:
        claims = claims_of(case, measured)
        rows.append(case_row(member, case, claims, inputs))
    return compiled, rows


def values_of(design: Design) -> list[tuple[Engine, dict[str, Any]]]:
    """For each case: the engine, and all inputs and recomputed values by symbol."""
    compiled, rows = rows_of(design)
    return [(compiled, {**row, **compiled.scratch.run(row)}) for row in rows]
