"""The JSON Schema: valid, the committed one, and of one mind with the reader wherever a schema can be."""

from __future__ import annotations

import copy
import json
import re
from pathlib import Path

import jsonschema
import pytest
import yaml
from hypothesis import given, settings
from hypothesis import strategies as st

from checker.declared.build import load_text
from checker.declared.check import check_record
from checker.declared.format import FORMAT, RECORDS, SHAPES
from checker.declared.found import Faults
from checker.declared.reading import read_tree
from checker.declared.schema import design_schema
from checker.declared.symbols import DECLARABLE
from checker.declared.template import template
from checker.errors import Fault, InputFaults
from tests.declared.base import BASE, SECTION

ROOT = Path(__file__).parents[2]
VALIDATOR = jsonschema.Draft202012Validator(design_schema())

STARTS = [
    yaml.safe_load(BASE),
    yaml.safe_load(
        BASE.replace(SECTION, "section: {shape: box, b: 400, h: 700, walls: {side: 90, top: 90, bottom: 90}}")
    ),
    yaml.safe_load(
        BASE.replace("count: 4, diameter: 25", "bars: 4H25").replace(
            "diameter: 10, spacing: 150", "links: H10-150"
        )
    ),
    yaml.safe_load(
        BASE.replace(
            SECTION, "section: {shape: polygon, points: [[0, 0], [400, 0], [400, 700], ['0 cm', 700]]}"
        )
    ),
    yaml.safe_load(template()),
]
VALUES = [
    None,
    True,
    False,
    0,
    1,
    2,
    -1,
    3,
    10,
    90,
    100,
    101,
    0.5,
    1e9,
    2e9,
    1e400,
    -5.5,
    "",
    " ",
    "x",
    "35",
    "35 mm",
    "3.5 cm",
    "35mm²",
    "310 kN",
    "0.31 MN",
    "52 kN m",
    "52 kN.m",
    "420 mm2/m",
    "1,5",
    "1_0",
    "yes",
    "nan",
    "30 N / mm²",
    "0.4 rad",
    "22 °",
    "4H25",
    "H10-150",
    "4x25",
    "H10",
    "perimeter",
    "inner",
    "adequate",
    "one leg",
    "hooks_90",
    "corners",
    "round",
    "circle",
    "polygon",
    "box",
    "rectangle",
    "tee",
    "ell",
    "i",
    "flange",
    "parts",
    "EN 1992-1-1:2004",
    "a\nb",
    "\u202e",
    "y" * 201,
    [],
    [1],
    [[1, 2], [3, 4], [5, 6]],
    [[1, 2, 3]],
    {},
    {"value": 1},
    {"value": 1, "counts": "all legs"},
    {"side": 90, "top": 90, "bottom": 90},
    {"shape": "circle", "diameter": 500},
    {"shape": "tee", "b_w": 300, "h": 700, "b_f": 900, "h_f": 200},
    {"dF": 200, "dx": 1000},
    {"l_0": 5000, "b_1": 900},
    {"a": 1},
]
KEYS = sorted(
    {key for record in (FORMAT, *RECORDS.values(), *SHAPES.values()) for key in record.by_key}
    | {"", "x", "spacng"}
)


OUT_OF_LIMITS = re.compile(r"is -?[0-9.]+ \S+; expected (?:[0-9]|more|at|less)|beyond any real size")


def paths(data: object, here: tuple[object, ...] = ()) -> list[tuple[object, ...]]:
    """The way to every part of the data."""
    found = [here]
    if isinstance(data, dict):
        for key, value in data.items():
            found += paths(value, (*here, key))
    elif isinstance(data, list):
        for index, value in enumerate(data):
            found += paths(value, (*here, index))
    return found


def mutate(draw: st.DrawFn, data: object) -> object:
    """One change somewhere: another value, a key taken out, or a key put in."""
    holder: list[object] = [copy.deepcopy(data)]
    path = (0, *draw(st.sampled_from(paths(holder[0]))))
    parent: object = holder
    for step in path[:-1]:
        parent = parent[step]  # type: ignore[index]
    last = path[-1]
    target = parent[last]  # type: ignore[index]
    change = draw(st.sampled_from(("value", "remove", "add")))
    if change == "add" and isinstance(target, dict):
        target[draw(st.sampled_from(KEYS))] = copy.deepcopy(draw(st.sampled_from(VALUES)))
    elif change == "remove" and len(path) > 1:
        del parent[last]  # type: ignore[attr-defined]
    else:
        parent[last] = copy.deepcopy(draw(st.sampled_from(VALUES)))  # type: ignore[index]
    return holder[0]


@st.composite
def mutants(draw: st.DrawFn) -> object:
    data = draw(st.sampled_from(STARTS))
    for _ in range(draw(st.integers(1, 2))):
        data = mutate(draw, data)
    return data


def form_faults(text: str) -> list[Fault]:
    """What the reader finds before it relates the values to each other."""
    root, found = read_tree(text, "a.json")
    faults = Faults("a.json")
    assert root is not None
    check_record(root, FORMAT, "the file", faults)
    return [*found, *faults.found]


def beyond_a_schema(fault: Fault, text: str) -> bool:
    """Whether a schema can't say this: the limits of a number written as text with a unit."""
    return text[fault.column - 1] == '"' and bool(OUT_OF_LIMITS.search(fault.message))


@settings(max_examples=400, deadline=None)
@given(mutants())
def test_schema_and_reader_agree(data: object) -> None:
    """Source of the other opinion: the jsonschema library."""
    text = json.dumps(data)
    said = [f"{list(error.path)}: {error.message}" for error in VALIDATOR.iter_errors(json.loads(text))]
    found = form_faults(text)
    if said:
        assert found, said
    elif found:
        assert all(beyond_a_schema(fault, text) for fault in found), found
    try:
        load_text(text, "a.json")
    except InputFaults:
        return
    assert not said


@pytest.mark.parametrize("index", range(len(STARTS)))
def test_the_starts_are_sound(index: int) -> None:
    VALIDATOR.validate(STARTS[index])
    assert load_text(json.dumps(STARTS[index]), "a.json").cases


def test_schema_is_valid() -> None:
    """Source: the 2020-12 meta-schema shipped with the jsonschema library."""
    jsonschema.Draft202012Validator.check_schema(design_schema())


def test_the_committed_schema_is_the_made_one() -> None:
    committed = (ROOT / "schemas" / "design.schema.json").read_text(encoding="utf-8")
    assert committed == json.dumps(design_schema(), indent=2, ensure_ascii=False) + "\n"


def test_every_key_is_described() -> None:
    schema = design_schema()
    for record in (schema, *schema["$defs"].values()):
        for key, value in record.get("properties", {}).items():
            assert value["description"].endswith("."), key
    declared = schema["$defs"]["declared"]["properties"]
    assert set(declared) == {*DECLARABLE, "verdict"}
    assert all(
        f"In {unit}," in declared[symbol]["description"] for symbol, unit in DECLARABLE.items() if unit != "-"
    )


def test_the_template_is_complete() -> None:
    """Every key, symbol and choice stands in what `samestrut new` prints."""
    text = template()
    assert load_text(text, "new.yaml").links[0].ends == "hooks_135"
    for record in (FORMAT, *RECORDS.values(), *SHAPES.values()):
        for key in record.by_key:
            assert key in text, key
    for field in RECORDS["links"].fields + RECORDS["bars"].fields:
        assert all(choice in text for choice in field.choices), field.key
