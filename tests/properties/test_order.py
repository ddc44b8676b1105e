"""The order in which things are listed, where the section stands, the side of it and the file's name change nothing.

- Neither the identity of a finding nor its numbers.

- Flawed designs, so that there are findings to keep: sound ones under larger actions, with two values changed.
- Groups of one face keep their order among themselves: the first named stands outermost, so there it has a meaning.
"""

from __future__ import annotations

import json
from math import nan
from random import Random
from typing import Any

import pytest
import yaml

from checker import audit
from checker.declared.build import load_text
from tests.properties.members import SHAPES
from tests.properties.sound import sound_design

DESIGNS = 10
Tree = dict[str, Any]


def flawed(rng: Random, kind: str) -> Tree:
    design = sound_design(rng, kind, exact=True)
    for case in design.cases:
        for symbol in rng.sample(list(case.declared), 2):
            if "theta" not in symbol:
                case.declared[symbol] = f"{float(case.declared[symbol]) * 1.3 + 1:.4f}"
    tree: Tree = yaml.safe_load(design.text())
    for case in tree["cases"]:
        case["T_Ed"] = round(case["T_Ed"] * 1.4, 1)
    return tree


class Same(dict[str, tuple[float, ...]]):
    """Identity -> numbers of a finding; equal where the identities are the same and the numbers but for noise."""

    def __eq__(self, other: object) -> bool:
        if not isinstance(other, dict) or set(self) != set(other):
            return False
        return all(self[key] == pytest.approx(other[key], rel=1e-6, abs=1e-9, nan_ok=True) for key in self)

    __hash__ = None  # type: ignore[assignment]


def identities(tree: Tree, file: str = "one.json") -> Same:
    report = audit(load_text(json.dumps(tree), file))
    found = Same()
    for finding in report.findings:
        numbers = (finding.draft.recomputed, finding.draft.limit, finding.draft.tolerance)
        found[finding.id] = tuple(nan if number is None else number for number in numbers)
    return found


def in_other_order(rng: Random, tree: Tree) -> Tree:
    groups = list(tree["bars"])
    faces = sorted({group["face"] for group in groups})
    rng.shuffle(faces)
    bars = [group for face in faces for group in groups if group["face"] == face]
    keys = list(tree)
    rng.shuffle(keys)
    changed = {**tree, "bars": bars, "links": tree["links"][::-1], "cases": tree["cases"][::-1]}
    return {key: changed[key] for key in keys}


def mirrored(tree: Tree, axis: int) -> Tree:
    """Left for right (axis 0), or upside down with the moments turned (axis 1)."""
    names = {"left": "right", "right": "left"} if axis == 0 else {"bottom": "top", "top": "bottom"}
    section = dict(tree["section"])

    def turned(point: list[float]) -> list[float]:
        return [-point[0], point[1]] if axis == 0 else [point[0], -point[1]]

    if "points" in section:
        section["points"] = [turned(point) for point in section["points"]]
    if axis == 1 and "walls" in section:
        section["walls"] = {names.get(name, name): wall for name, wall in section["walls"].items()}
    bars = []
    for group in tree["bars"]:
        other = {**group, "face": names.get(group["face"], group["face"])}
        if "at" in other:
            other["at"] = [turned(place) for place in other["at"]]
        bars.append(other)
    sign = -1 if axis == 1 else 1
    cases = []
    for case in tree["cases"]:
        moments = {key: sign * case[key] for key in ("M_Ed", "M_Ed_max") if key in case}
        cases.append({**case, **moments})
    return {**tree, "section": section, "bars": bars, "cases": cases}


@pytest.mark.parametrize("kind", SHAPES)
def test_the_order_of_a_list_changes_no_identity(kind):
    for seed in range(DESIGNS):
        rng = Random(f"order {kind} {seed}")
        tree = flawed(rng, kind)
        found = identities(tree)
        assert found
        assert identities(in_other_order(rng, tree)) == found, yaml.safe_dump(tree, sort_keys=False)


@pytest.mark.parametrize("axis", [0, 1])
@pytest.mark.parametrize("kind", SHAPES)
def test_a_mirror_changes_no_identity(kind, axis):
    """A ring of bars begins at its lowest point, and without a moment the bottom is taken: these aren't turned."""
    turned = 0
    for seed in range(DESIGNS):
        tree = flawed(Random(f"mirror {kind} {seed}"), kind)
        if axis == 1 and (kind == "circle" or any(case["M_Ed"] == 0 for case in tree["cases"])):
            continue
        turned += 1
        assert identities(mirrored(tree, axis)) == identities(tree), yaml.safe_dump(tree, sort_keys=False)
    assert turned or (kind, axis) == ("circle", 1)


def moved(tree: Tree, by: tuple[float, float]) -> Tree:
    """A polygon with its bars somewhere else on the paper."""

    def put(place: list[float]) -> list[float]:
        return [place[0] + by[0], place[1] + by[1]]

    section = {**tree["section"], "points": [put(point) for point in tree["section"]["points"]]}
    bars = [
        {**group, **({"at": [put(p) for p in group["at"]]} if "at" in group else {})}
        for group in tree["bars"]
    ]
    return {**tree, "section": section, "bars": bars}


def test_moving_a_section_changes_nothing():
    for seed in range(DESIGNS):
        rng = Random(f"move {seed}")
        tree = flawed(rng, "polygon")
        by = (rng.randrange(-5000, 5000), rng.randrange(-5000, 5000))
        assert identities(moved(tree, by)) == identities(tree), yaml.safe_dump(tree, sort_keys=False)


def test_turning_a_section_upside_down_with_its_moments_changes_nothing():
    """Half a turn is both mirrors together; it keeps the order of corners, which a mirror turns round."""
    for seed in range(DESIGNS):
        kind = SHAPES[seed % len(SHAPES)]
        tree = flawed(Random(f"turn {seed}"), kind)
        if kind == "circle" or any(case["M_Ed"] == 0 for case in tree["cases"]):
            continue
        turned = mirrored(mirrored(tree, 0), 1)
        assert identities(turned) == identities(tree), yaml.safe_dump(tree, sort_keys=False)


def test_the_name_of_the_file_changes_no_identity():
    for seed in range(DESIGNS):
        tree = flawed(Random(f"name {seed}"), SHAPES[seed % 4])
        assert identities(tree, "beams/EB-07 rev B.json") == identities(tree)


def test_the_name_of_the_member_is_part_of_the_identity():
    tree = flawed(Random("member"), "rectangle")
    assert not set(identities({**tree, "member": "M-2"})) & set(identities(tree))
