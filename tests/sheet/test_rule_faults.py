"""Faults of rule files: each told with file, line and column, several at once, and never as a traceback."""

from __future__ import annotations

import shutil
from pathlib import Path

import pytest

from checker import shipped
from checker.errors import RuleFaults, UsageError
from checker.review.engine import annex_path, sheet_under
from checker.sheet.load import load_layers, load_sheet

STANDARD = "EN 1992-1-1:2004"
HEAD = "format: 1\nover: EN 1992-1-1:2004\nlayers:\n  office:\n    name: an office\n    quantities:\n"
HERE = "«"
FAULTS = {
    "unknown symbol": ("      z: {formula: «0.9 * dd}", "unknown symbol 'dd'"),
    "new without a unit": ("      z_new: {formula: «0.9 * d}", "needs a name and a unit"),
    "cycle": ("      d: {formula: «z / 0.9}\n      z: {formula: 0.9 * d}", "a cycle: "),
    "own cycle": ("      d: {formula: «d + 1}", "a cycle: d -> d"),
    "unit clash": ("      z: {formula: 0.9 * d + «A}", "units don't go together"),
    "other unit": ("      z: {formula: «0.9 * d * d}", "z is in mm"),
    "unknown key": ("      z: {«formul: 0.9 * d}", "unknown key 'formul'"),
    "unknown unit": ("      z: {unit: «furlong}", "unit is one of"),
    "unknown direction": ("      z: {larger: «better}", "larger is one of"),
    "unknown kind": ("      z: {kind: «guess}", "kind is one of"),
    "formula is a list": ("      z: {formula: «[0.9, d]}", "must be plain text"),
    "not arithmetic": ("      z: {formula: «d.real}", "Attribute is not arithmetic"),
    "late in the formula": ("      z: {formula: 0.9 * «cosh(d)}", "unknown function 'cosh'"),
    "late in a quoted one": ('      z: {formula: "0.9 * «abs(d, h)"}', "abs takes 1 to 1"),
    "symbol with a dash": ("      «z-limit: {formula: d}", "is not a symbol"),
    "symbol that is a word of the language": (
        "      «lambda: {name: n, unit: mm, formula: d}",
        "is not a symbol",
    ),
    "symbol that is a function": ("      «min: {name: n, unit: mm, formula: d}", "is not a symbol"),
    "hidden symbol": ("      «_z: {name: n, unit: mm, formula: d}", "is not a symbol"),
    "not a table": ("      «z: 0.9", "expected a table"),
    "same symbol twice": ("      z: {formula: d}\n      «z: {formula: h}", "z"),
}


@pytest.mark.parametrize("name", FAULTS)
def test_layer(name: str, tmp_path: Path) -> None:
    marked, said = FAULTS[name]
    before = (HEAD + marked).split(HERE)[0]
    line, column = before.count("\n") + 1, len(before) - before.rfind("\n")
    path = tmp_path / "office.yaml"
    path.write_text((HEAD + marked).replace(HERE, "") + "\n", encoding="utf-8")
    with pytest.raises(RuleFaults) as caught:
        sheet_under(STANDARD, "recommended", (), path)
    fault = caught.value.faults[0]
    assert said in fault.message
    assert (fault.file, fault.line, fault.column) == ("office.yaml", line, column)


def test_all_faults_at_once(tmp_path: Path) -> None:
    path = tmp_path / "office.yaml"
    path.write_text(
        HEAD + "      z: {formul: d}\n      d: {unit: ell}\n      h: {formula: a.b}\n", encoding="utf-8"
    )
    with pytest.raises(RuleFaults) as caught:
        load_layers(path, shown_as="office.yaml")
    assert [fault.line for fault in caught.value.faults] == [7, 8, 9]


@pytest.mark.parametrize(
    ("text", "said"),
    [
        ("", "office.yaml:1:1"), ("- 1", "expected a table"), ("format: 1", "expected 'layers:'"),
        ("layers: [a]", "expected 'layers:'"), ("layers: {a: 1}", "expected a table"),
        ("layers: {a: {name: n}}", "expected 'quantities:'"), ("layers: {a: {quantities: }}", "quantities"),
        ("layers: {a: {quantities: {z: {formula: d}}", "office.yaml:"),
    ],
)  # fmt: skip
def test_form_of_a_layer_file(text: str, said: str, tmp_path: Path) -> None:
    path = tmp_path / "office.yaml"
    path.write_text(text, encoding="utf-8")
    with pytest.raises(RuleFaults, match=said):
        load_layers(path, shown_as="office.yaml")


def test_unreadable_files_are_faults(tmp_path: Path) -> None:
    with pytest.raises(UsageError, match="no such annex; known are recommended, uk"):
        annex_path("atlantis")
    with pytest.raises(UsageError, match="no such annex"):
        annex_path((tmp_path / "missing.yaml").as_posix())
    with pytest.raises(RuleFaults, match="can't be read"):
        load_layers(tmp_path / "missing.yaml", shown_as="missing.yaml")
    (tmp_path / "latin.yaml").write_bytes(b"layers: \xff")
    with pytest.raises(RuleFaults, match=r"latin\.yaml:1:"):
        load_layers(tmp_path / "latin.yaml", shown_as="latin.yaml")


def _sheet_folder(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    """A copy of the shipped rules that a test may spoil."""
    rules = tmp_path / "rules"
    shutil.copytree(shipped.folder("rules"), rules)
    monkeypatch.setattr(shipped, "folder", lambda name: tmp_path / name)
    return rules / "en1992-1-1-2004"


def test_symbol_twice_in_the_base_sheet(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """In two files of the sheet: told at the second."""
    folder = _sheet_folder(tmp_path, monkeypatch)
    with (folder / "torsion.yaml").open("a", encoding="utf-8") as stream:
        stream.write('  f_cd: {name: again, unit: MPa, formula: "f_ck / 1.5"}\n')
    lines = (folder / "torsion.yaml").read_text(encoding="utf-8").splitlines()
    with pytest.raises(RuleFaults, match="f_cd stands twice in the sheet") as caught:
        load_sheet()
    (fault,) = caught.value.faults
    assert fault.file.endswith("torsion.yaml")
    assert fault.line == len(lines)
    assert fault.column == lines[-1].index("f_ck / 1.5") + 1


def test_cycle_in_the_base_sheet(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    folder = _sheet_folder(tmp_path, monkeypatch)
    text = (folder / "section.yaml").read_text(encoding="utf-8")
    assert text.count("formula: h - a_s,") == 1
    (folder / "section.yaml").write_text(
        text.replace("formula: h - a_s,", "formula: h - a_s + 0 * z,"), encoding="utf-8"
    )
    with pytest.raises(RuleFaults, match=r"a cycle: .*d.*->.*d"):
        load_sheet()


def test_the_shipped_rules_are_whole() -> None:
    for shape in ((), ("rectangle",), ("box",), ("rectangle", "links-aslant"), ("box", "links-aslant")):
        for annex in ("recommended", "uk"):
            sheet_under(STANDARD, annex, shape).check_units()
