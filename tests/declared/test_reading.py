"""Reading: positions, raw text, JSON beside YAML, and hostile files, which must cost little."""

from __future__ import annotations

import hashlib
import json
import time
from pathlib import Path

import pytest
import yaml
from hypothesis import given, settings
from hypothesis import strategies as st

import checker.declared.reading
from checker.declared.build import load_file, load_text
from checker.declared.reading import MAX_BYTES, Mapping, Node, Scalar, Sequence, read, read_tree
from checker.declared.tree import MAX_DEPTH, MAX_NODES
from checker.errors import Fault, InputFaults
from tests.declared.base import BASE, refused


def tree(text: str, file: str = "a.yaml") -> Node:
    root, faults = read_tree(text, file)
    assert not faults
    assert root is not None
    return root


def plain(node: Node) -> object:
    """The node as maps, lists and texts."""
    if isinstance(node, Mapping):
        return {key: plain(entry.node) for key, entry in node.entries.items()}
    return [plain(item) for item in node.items] if isinstance(node, Sequence) else node.text


def test_text_and_places() -> None:
    root = tree("a: 0300  # c\nb:\n  - {c: '1.50', d: no}\n  - ~\n")
    assert isinstance(root, Mapping)
    assert root.entries["a"].key == Scalar("a", False, 1, 1)
    assert root.entries["a"].node == Scalar("0300", False, 1, 4)
    items = root.entries["b"].node
    assert isinstance(items, Sequence)
    first, second = items.items
    assert isinstance(first, Mapping)
    assert first[1:] == (3, 5)
    assert first.entries["c"].node == Scalar("1.50", True, 3, 9)
    assert first.entries["d"].node == Scalar("no", False, 3, 20)
    assert isinstance(second, Scalar)
    assert second.is_empty


def test_an_alias_stands_for_what_it_names() -> None:
    assert plain(tree("a: &x [1, 2]\nb: *x\nc: {d: *x}")) == {
        "a": ["1", "2"],
        "b": ["1", "2"],
        "c": {"d": ["1", "2"]},
    }


@pytest.mark.parametrize("text", [BASE, BASE.replace("\n", "\r\n"), "\ufeff" + BASE])
def test_line_ends_and_byte_order_mark_change_nothing(text: str) -> None:
    plain_design, design = load_text(BASE, "a.yaml"), load_text(text.encode(), "a.yaml")
    assert design.cases == plain_design.cases
    assert design.places == plain_design.places
    assert design.sha256 == hashlib.sha256(text.encode()).hexdigest()
    assert load_text(text, "a.yaml") == design


def test_columns_count_characters_not_bytes() -> None:
    text = BASE.replace("member: EB-07", "member: {é: 1}").replace("revision: B", "r: Ωß😀, designer: [x]")
    column = text.splitlines()[2].index("[x]") + 1
    assert [fault[:2] for fault in refused(text.encode())] == [(2, 9), (3, column)]


def as_data(text: str) -> object:
    """The base file as data whose numbers are JSON numbers (it has no text that YAML 1.1 would misread)."""
    return yaml.safe_load(text)


@pytest.mark.parametrize("indent", [None, 2, "\t"])
def test_json_gives_the_same_design_but_for_places(indent: int | str | None) -> None:
    text = json.dumps(as_data(BASE), indent=indent)
    by_json, by_yaml = load_text(text, "a.json"), load_text(text.replace("\t", " "), "a.yaml")
    assert by_json.cases[0].place.line == (1 if indent is None else text[: text.index('"name"')].count("\n"))
    for name in (
        "member",
        "submission",
        "standard",
        "annex",
        "torsion",
        "section",
        "materials",
        "cover",
        "links",
        "bars",
        "cases",
    ):
        assert getattr(by_json, name) == getattr(by_yaml, name), name
    own = load_text(BASE, "a.yaml")
    assert [(case.V_Ed.value, case.V_Ed.text) for case in by_json.cases] == [(310e3, "310")]
    assert {s: v.number.text for s, v in by_json.cases[0].declared.items()} == {
        s: v.number.text for s, v in own.cases[0].declared.items()
    }


JSON_VALUES = st.recursive(
    st.none()
    | st.booleans()
    | st.integers()
    | st.floats(allow_nan=False, allow_infinity=False)
    | st.text(st.characters(exclude_categories=("Cs",)), max_size=8),
    lambda inner: st.lists(inner, max_size=4) | st.dictionaries(st.text(max_size=4), inner, max_size=4),
    max_leaves=20,
)


def literal(value: object) -> object:
    """Data as maps, lists and the texts that `json` writes."""
    if isinstance(value, dict):
        return {key: literal(item) for key, item in value.items()}
    if isinstance(value, list):
        return [literal(item) for item in value]
    return value if isinstance(value, str) else json.dumps(value)


@given(JSON_VALUES, st.sampled_from([None, 1, "\t"]), st.booleans())
def test_json_route_reads_what_json_writes(value: object, indent: int | str | None, ascii_only: bool) -> None:
    """Source: Python's json module, round trip."""
    text = json.dumps(value, indent=indent, ensure_ascii=ascii_only)
    root, faults = read_tree(text, "a.json")
    assert not faults
    assert root is not None
    assert plain(root) == literal(value)


@pytest.mark.parametrize(
    ("text", "line", "column", "says"),
    [
        ('{"a": 1,}', 1, 9, "not readable as JSON"),
        ('{"a": 1\n "b": 2}', 2, 2, "not readable as JSON"),
        ('{"a": 1,\n "a": 2}', 2, 2, 'the key "a" stands twice; first at line 1, column 2'),
        ('{"a": "\\ud800"}', 1, 7, "surrogate"),
        ("[" * 100_000, 1, 1, "nested far too deep"),
        ("[" * 30 + "]" * 30, 1, 21, "nested deeper than 20 levels"),
        ("", 1, 1, "not readable as JSON"),
    ],
)
def test_json_faults(text: str, line: int, column: int, says: str) -> None:
    faults = refused(text, "a.json")
    assert (line, column) in [fault[:2] for fault in faults]
    assert any(says in fault[2] for fault in faults)


LAUGHS = "a0: &a0 [x, x]\n" + "".join(
    f"a{i}: &a{i} [{', '.join([f'*a{i - 1}'] * 9)}]\n" for i in range(1, 12)
)

HOSTILE = {
    "empty": ("", 1, 1, "the file is empty"),
    "only a comment": ("# nothing\n", 1, 1, "the file is empty"),
    "billion laughs": (LAUGHS, None, None, f"more than {MAX_NODES:,} values"),
    "alias within itself": ("a: &a [*a]", 1, 8, "stands inside what it names"),
    "deep by flow": ("[" * 900, 1, MAX_DEPTH + 1, "nested deeper"),
    "deep by block": ("- " * 900 + "x", 1, 2 * MAX_DEPTH + 1, "nested deeper"),
    "deep by alias": (
        "a: &a " + "[" * 15 + "]" * 15 + "\nb: " + "[" * 10 + "*a" + "]" * 10,
        2,
        14,
        "nested deeper",
    ),
    "many values": ("- 1\n" * (MAX_NODES + 1), MAX_NODES, 3, "more than"),
    "object": (
        "a: !!python/object/apply:os.system [echo]",
        1,
        4,
        'leave out "!!python/object/apply:os.system"',
    ),
    "own tag": ("a: !x 1", 1, 4, "tags are not read"),
    "nul": ("a: 1\nb: \x00", 2, 4, "U+0000"),
    "surrogate": ("a: \ud800", 1, 4, "U+D800"),
    "not utf-8": (b"a: 1\nb: caf\xe9", 2, 7, "not UTF-8"),
    "utf-16": (BASE.encode("utf-16"), 1, 1, "not UTF-8"),
    "binary": (bytes(range(256)), 3, 0x80 - 0x0E + 1, "not UTF-8"),
    "huge": ("#" * (MAX_BYTES + 1), 1, 1, "larger than 1024 KiB"),
    "tabs": ("a:\n\tb: 1", 2, 1, "indent with spaces"),
    "unclosed": ("a: [1,\n", None, None, "not readable as YAML"),
    "unclosed quote": ('a: "x\n', None, None, "not readable as YAML"),
}


@pytest.mark.parametrize("loader", ["CSafeLoader", "SafeLoader"])
@pytest.mark.parametrize("name", HOSTILE)
def test_hostile_file(name: str, loader: str, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(checker.declared.reading, "_LOADER", getattr(yaml, loader))
    text, line, column, says = HOSTILE[name]
    start = time.perf_counter()
    faults = refused(text)
    assert time.perf_counter() - start < 2
    assert any(
        line in (None, fault[0]) and column in (None, fault[1]) and says in fault[2] for fault in faults
    ), faults


def test_both_loaders_give_the_same_tree(monkeypatch: pytest.MonkeyPatch) -> None:
    by_c = read_tree(BASE, "a.yaml")
    monkeypatch.setattr(checker.declared.reading, "_LOADER", yaml.SafeLoader)
    assert read_tree(BASE, "a.yaml") == by_c


def test_quoted_text_in_messages_stays_one_short_line() -> None:
    assert all(len(fault[2]) < 400 for fault in refused('"' + "k" * 5000 + '": 1\n"a\\nb\\eu": 2\n'))


@settings(max_examples=150)
@given(st.text(max_size=200) | st.binary(max_size=200))
def test_any_text_gives_a_design_or_faults(text: str | bytes) -> None:
    for file in ("a.yaml", "a.json"):
        with pytest.raises(InputFaults):
            load_text(text, file)


@settings(max_examples=200)
@given(st.integers(0, len(BASE)), st.integers(0, 12), st.text(st.characters(codec="utf-8"), max_size=12))
def test_any_change_gives_a_design_or_faults(start: int, length: int, new: str) -> None:
    text = BASE[:start] + new + BASE[start + length :]
    lines = text.count("\n") + 2 + sum(text.count(sign) for sign in "\r\x85\u2028\u2029")
    assert all(1 <= fault.line <= lines and fault.column >= 1 for fault in faults_of(text))


def faults_of(text: str) -> tuple[Fault, ...]:
    """The faults of a text; none if it is a design."""
    try:
        load_text(text, "a.yaml")
    except InputFaults as error:
        return error.faults
    return ()


def test_load_file(tmp_path: Path) -> None:
    path = tmp_path / "EB-07.yaml"
    path.write_text(BASE, encoding="utf-8")
    design = load_file(path, "sub/EB-07.yaml")
    assert design.file == "sub/EB-07.yaml"
    assert design.sha256 == hashlib.sha256(BASE.encode()).hexdigest()
    assert load_file(str(path)).file == str(path)


def test_a_file_that_cannot_be_read(tmp_path: Path) -> None:
    for path, says in ((tmp_path / "none.yaml", "No such file"), (tmp_path, "directory")):
        with pytest.raises(InputFaults, match="can't be read") as caught:
            load_file(path, "x.yaml")
        (fault,) = caught.value.faults
        assert fault[:3] == ("x.yaml", 1, 1)
        assert says in fault.message


def test_a_file_larger_than_allowed(tmp_path: Path) -> None:
    path = tmp_path / "big.yaml"
    path.write_bytes(b"#" * (MAX_BYTES + 10))
    with pytest.raises(InputFaults, match="larger than"):
        load_file(path, "big.yaml")


def test_read_keeps_the_digest_of_the_bytes() -> None:
    assert read("\ufeffa: é", "a").sha256 == hashlib.sha256("\ufeffa: é".encode()).hexdigest()
    assert read("\ufeffa: é", "a").text == "a: é"
