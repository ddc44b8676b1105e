"""Whatever a valid file says, the audit ends in a report without a crashed check.

- Valid files with numbers changed wildly: huge moments, no shear, no torsion, large axial forces, tiny sections, weak and
  strong materials, faces without bars, a single bar, no links, declared values from nothing to far too much.
- What the reader refuses is refused as a fault of the file, never by another error.
"""

from __future__ import annotations

import json
from copy import deepcopy
from random import Random
from typing import Any

import yaml
from hypothesis import HealthCheck, assume, given, settings
from hypothesis import strategies as st

from checker import audit
from checker.declared.build import load_text
from checker.declared.model import Design
from checker.declared.symbols import DECLARABLE
from checker.errors import InputFaults
from tests.properties.members import SHAPES
from tests.properties.sound import sound_design

Tree = dict[str, Any]
SIZES = st.sampled_from([10, 40, 90, 150, 300, 600, 1500, 5000, 100000])
ACTIONS = st.sampled_from([0, 0.001, 1, 50, 400, -400, 3000, -3000, 1e5, -1e6, 1e9, -1e9])
BASES = tuple(
    yaml.safe_load(sound_design(Random(f"base {kind} {seed}"), kind, exact=True).text())
    for kind in SHAPES
    for seed in range(6)
)


@st.composite
def changed(draw: st.DrawFn) -> Tree:
    """A valid file with some of its numbers replaced."""
    tree: Tree = deepcopy(draw(st.sampled_from(BASES)))
    for case in tree["cases"]:
        for name in ("V_Ed", "T_Ed", "M_Ed", "N_Ed", "M_Ed_max"):
            if draw(st.integers(0, 2)) == 0:
                case[name] = draw(ACTIONS)
        _declare(draw, case.setdefault("declared", {}))
    if draw(st.integers(0, 3)) == 0:
        for key in set(tree["section"]) & {"b", "h", "diameter", "wall"}:
            tree["section"][key] = draw(SIZES)
        tree["cover"] = draw(st.sampled_from([1, 5, 30]))
    if draw(st.booleans()):
        tree["materials"] = {
            "f_ck": draw(st.sampled_from([5, 12, 30, 50, 51, 90, 200])),
            "f_yk": draw(st.sampled_from([100, 500, 2000])),
            "f_ywk": draw(st.sampled_from([100, 500, 2000])),
        }
    for factor in ("gamma_C", "gamma_S"):
        if draw(st.integers(0, 4)) == 0:
            tree["materials"][factor] = draw(st.sampled_from([0.01, 1, 1.5, 5]))
    _steel(draw, tree)
    return tree


def _declare(draw: st.DrawFn, declared: Tree) -> None:
    for symbol in draw(st.lists(st.sampled_from(sorted(DECLARABLE)), max_size=6)):
        largest = 89.0 if symbol.startswith("theta") else 1e9
        declared[symbol] = draw(st.sampled_from([1e-3, 0.5, 1.0, 2.5, 45.0, min(800.0, largest), largest]))
        if draw(st.integers(0, 5)) == 0:
            declared[symbol] = 0


def _steel(draw: st.DrawFn, tree: Tree) -> None:
    if draw(st.integers(0, 3)) == 0:
        kept = draw(st.lists(st.sampled_from(tree["bars"]), min_size=1, max_size=2, unique_by=id))
        tree["bars"] = kept
    if draw(st.integers(0, 4)) == 0 and "at" not in tree["bars"][0]:
        tree["bars"][0]["count"] = draw(st.sampled_from([1, 2, 3, 40]))
    what = draw(st.integers(0, 5))
    if what == 0:
        tree["links"] = []
    elif what == 1:
        for links in tree["links"]:
            links["spacing"] = draw(st.sampled_from([1, 40, 10000]))
            links["diameter"] = draw(st.sampled_from([3, 10, 40]))
            links["angle"] = draw(st.sampled_from([0.001, 10, 45, 90]))
            links["place"] = draw(st.sampled_from(["inner", "perimeter"]))
            links["ends"] = draw(st.sampled_from(["open", "hooks_90", "lapped"]))
    if draw(st.integers(0, 4)) == 0:
        tree["torsion"] = "compatibility"


def read(tree: Tree) -> Design | None:
    try:
        return load_text(json.dumps(tree), "wild.json")
    except InputFaults:
        return None


@settings(max_examples=120, deadline=None, derandomize=True, suppress_health_check=list(HealthCheck))
@given(changed())
def test_no_check_crashes(tree):
    design = read(tree)
    assume(design is not None)
    report = audit(design)
    crashed = [
        f"{check.rule}: {check.why}" for check in report.members[0].checks if check.status == "crashed"
    ]
    assert not crashed, "\n".join(crashed) + "\n" + yaml.safe_dump(tree, sort_keys=False)
    assert report.outcome in ("accept", "accept with remarks", "return")
    assert report.text()
