"""Random arrangements of bars, measured by brute force with a general geometry library (Shapely)."""

from __future__ import annotations

import json
from itertools import combinations
from math import hypot
from random import Random
from typing import Any

import pytest
import shapely

from checker.declared.build import load_text
from checker.errors import InputFaults
from checker.geometry.measure import Measured, measure

ARRANGEMENTS = 150
SIZES = (12, 16, 20, 25, 32)


def drawn(rng: Random) -> dict[str, Any]:
    b, h = rng.randrange(350, 900, 25), rng.randrange(450, 990, 10)
    cover, link = rng.choice((25, 30, 40)), rng.choice((8, 10, 12))
    edge = cover + link

    def row(face: str, count: int, layer: int) -> dict[str, Any]:
        size = rng.choice(SIZES)
        axis = edge + size / 2 + (layer - 1) * 70
        y = axis if face == "bottom" else h - axis
        xs = sorted(rng.uniform(edge + size / 2, b - edge - size / 2) for _ in range(count))
        if rng.random() < 0.8:
            xs[0], xs[-1] = edge + size / 2, b - edge - size / 2
        return {"face": face, "diameter": size, "at": [[round(x, 2), round(y, 2)] for x in xs]}

    bars = [row("bottom", rng.randrange(2, 5), 1), row("top", rng.randrange(2, 4), 1)]
    if rng.random() < 0.4:
        bars.append(row("bottom", 2, 2))
    for face in ("left", "right"):
        size = rng.choice(SIZES[:3])
        x = edge + size / 2 if face == "left" else b - edge - size / 2
        ys = [rng.uniform(200, h - 200) for _ in range(rng.randrange(1, 3))]
        bars.append({"face": face, "diameter": size, "at": [[x, round(y, 2)] for y in ys]})
    return {
        "format": 1, "member": "R", "section": {"shape": "rectangle", "b": b, "h": h},
        "materials": {"f_ck": 30, "f_yk": 500}, "cover": cover,
        "links": [{"diameter": link, "spacing": 150, "legs": 2}], "bars": bars,
        "cases": [{"name": "1", "V_Ed": 1, "T_Ed": 1, "M_Ed": 1}],
    }  # fmt: skip


def arrangements() -> list[tuple[dict[str, Any], Measured]]:
    found = []
    for seed in range(3 * ARRANGEMENTS):
        tree = drawn(Random(f"arrangement {seed}"))
        try:
            found.append((tree, measure(load_text(json.dumps(tree), "r.json"))))
        except InputFaults:
            continue  # bars on top of each other
    return found[:ARRANGEMENTS]


FOUND = arrangements()


def every(tree: dict[str, Any], *faces: str) -> list[tuple[float, float, float]]:
    return [(x, y, g["diameter"]) for g in tree["bars"] if g["face"] in faces for x, y in g["at"]]


def test_enough_can_be_built():
    assert len(FOUND) == ARRANGEMENTS


def test_depth_of_the_tension_bars():
    for tree, measured in FOUND:
        bars = every(tree, "bottom")
        centroid = sum(s * s * y for _, y, s in bars) / sum(s * s for *_, s in bars)
        assert measured.inputs["a_s_bottom"] == pytest.approx(centroid)


def test_gaps_round_the_perimeter():
    for tree, measured in FOUND:
        b, h = tree["section"]["b"], tree["section"]["h"]
        inwards = tree["cover"] + tree["links"][0]["diameter"] / 2
        ring = shapely.box(inwards, inwards, b - inwards, h - inwards).exterior
        face = shapely.box(0, 0, b, h).exterior
        touching = [
            (x, y)
            for g in tree["bars"]
            for x, y in g["at"]
            if face.distance(shapely.Point(x, y))
            <= 1.5 * (tree["cover"] + tree["links"][0]["diameter"] + g["diameter"])
        ]
        places = sorted(ring.project(shapely.Point(point)) for point in touching)
        gaps = [y - x for x, y in zip(places, [*places[1:], places[0] + ring.length], strict=True)]
        # The tool measures a bar in a corner from its centre on either leg, which can't lengthen a gap.
        assert measured.inputs["gap_bars"] <= max(gaps) + 2 * inwards + 40
        assert measured.inputs["gap_bars"] >= max(gaps) - 2 * inwards - 40


def test_corners():
    for tree, measured in FOUND:
        b, h = tree["section"]["b"], tree["section"]["h"]
        edge, link = tree["cover"] + tree["links"][0]["diameter"], tree["links"][0]["diameter"]

        def held(x0: float, y0: float, tree=tree, b=b, h=h, edge=edge, link=link) -> bool:
            for x, y, size in every(tree, "bottom", "top", "left", "right"):
                axis = edge + size / 2
                ideal = (axis if x0 == 0 else b - axis, axis if y0 == 0 else h - axis)
                if hypot(x - ideal[0], y - ideal[1]) <= size / 2 + 2 * link + 1e-6:
                    return True
            return False

        corners = [(0.0, 0.0), (b, 0.0), (b, h), (0.0, h)]
        assert measured.facts["corners_filled"].ok is all(held(*corner) for corner in corners)


def test_clear_distances():
    for tree, measured in FOUND:
        discs = [(shapely.Point(x, y), s) for x, y, s in every(tree, "bottom", "top", "left", "right")]
        clear = min(p.distance(q) - (s + t) / 2 for (p, s), (q, t) in combinations(discs, 2))
        assert measured.inputs["clear_least"] == pytest.approx(clear)
        spare = min(p.distance(q) - (s + t) / 2 - max(s, t) for (p, s), (q, t) in combinations(discs, 2))
        assert measured.inputs["clear_by_size"] - measured.inputs["phi_clear"] == pytest.approx(spare)


def test_halves_by_the_lever_rule():
    for tree, measured in FOUND:
        h, inputs = tree["section"]["h"], measured.inputs
        low, high = inputs["a_s_bottom"], h - inputs["a_s_top"]
        bars = every(tree, "bottom", "top", "left", "right")
        moment = sum(
            3.141592653589793 * s * s / 4 * min(max((high - y) / (high - low), 0), 1) for _, y, s in bars
        )
        assert inputs["A_half_bottom"] == pytest.approx(moment)
