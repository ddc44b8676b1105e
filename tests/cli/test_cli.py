"""The command line: exit codes, what goes where, whole files or none."""

from __future__ import annotations

import json
import os
import subprocess
import sys
from pathlib import Path

import jsonschema
import pytest
import yaml

from checker import shipped
from checker.cli import main, write_whole
from checker.errors import UsageError
from checker.review.catalogue import load_catalogue
from checker.review.engine import sheet_under

ROOT = Path(__file__).parents[2]
SOUND = str(ROOT / "examples/market-hall/edge-beam-sound.yaml")
FLAWED = str(ROOT / "examples/market-hall/edge-beam-mistakes.yaml")


@pytest.mark.parametrize(("path", "code"), [(SOUND, 0), (FLAWED, 1), ("missing.yaml", 2)])
def test_exit_codes(path, code, capsys):
    assert main(["audit", path]) == code
    captured = capsys.readouterr()
    assert (captured.err != "") == (code == 2)


def test_a_bad_file_does_not_stop_the_others(capsys):
    assert main(["audit", "missing.yaml", FLAWED]) == 2
    captured = capsys.readouterr()
    assert captured.err.startswith("missing.yaml:1:1: ")
    assert "Member EB-02" in captured.out
    assert captured.out.startswith("INCOMPLETE")


def test_a_crashed_rule_is_an_outcome_not_a_traceback(monkeypatch, capsys):
    from checker.review import judge

    def broken(rule, subject):
        raise ZeroDivisionError("planted")

    monkeypatch.setitem(judge._KINDS, "same", broken)
    assert main(["audit", SOUND]) == 3
    out = capsys.readouterr().out
    assert "INCOMPLETE" in out
    assert "strut.same-angle — ZeroDivisionError: planted" in out


def test_output_files(tmp_path, capsys):
    report, text = tmp_path / "r.json", tmp_path / "r.txt"
    assert main(["audit", FLAWED, "-o", str(report), "-o", str(text), "-q"]) == 1
    assert capsys.readouterr().out == ""
    assert json.loads(report.read_text(encoding="utf-8"))["outcome"] == "return"
    assert text.read_text(encoding="utf-8").startswith("RETURN")
    assert sorted(p.name for p in tmp_path.iterdir()) == ["r.json", "r.txt"]


def test_unknown_ending_is_refused_before_anything_is_read(tmp_path, capsys):
    assert main(["audit", FLAWED, "-o", str(tmp_path / "r.docx")]) == 2
    assert "don't know how to write .docx" in capsys.readouterr().err
    assert not list(tmp_path.iterdir())


def test_nothing_half_written(tmp_path):
    target = tmp_path / "r.txt"
    target.write_text("before", encoding="utf-8")
    with pytest.raises(UnicodeEncodeError):
        write_whole(target, "\ud800")
    assert target.read_text(encoding="utf-8") == "before"
    assert [p.name for p in tmp_path.iterdir()] == ["r.txt"]
    with pytest.raises(UsageError, match="can't be written"):
        write_whole(tmp_path / "no" / "r.txt", "text")


def test_new_file_audits_as_it_stands(tmp_path, capsys):
    assert main(["new"]) == 0
    path = tmp_path / "new.yaml"
    path.write_text(capsys.readouterr().out, encoding="utf-8")
    assert main(["audit", str(path)]) == 0
    assert capsys.readouterr().out.startswith("ACCEPT — nothing was found")


def test_every_rule_can_be_explained(capsys):
    for rule in load_catalogue().rules.values():
        assert main(["rules", rule.id]) == 0
        out = capsys.readouterr().out
        assert rule.id in out
        assert rule.why.split()[0] in out
    assert main(["rules"]) == 0
    assert len(capsys.readouterr().out.splitlines()) == len(load_catalogue().rules) + 1


def test_every_slip_can_be_shown(capsys):
    from checker.review.slips import load_slips

    for slip in load_slips().slips:
        assert main(["slips", slip.id]) == 0
        assert slip.says.split()[0] in capsys.readouterr().out
    assert main(["slips"]) == 0
    assert len(capsys.readouterr().out.splitlines()) == len(load_slips().slips) + 1


def test_every_quantity_can_be_shown(capsys):
    for symbol in sheet_under("EN 1992-1-1:2004", "recommended", ("rectangle",)).quantities:
        assert main(["sheet", symbol]) == 0
        assert symbol in capsys.readouterr().out


@pytest.mark.parametrize(
    ("arguments", "hint"), [(["rules", "links.close"], "links.closed"), (["sheet", "V_Rdmax"], "V_Rd_max")]
)
def test_near_misses_are_hinted_at(arguments, hint, capsys):
    assert main(arguments) == 2
    assert hint in capsys.readouterr().err


@pytest.mark.parametrize("name", ["design", "report", "rules", "sheet"])
def test_schemas_are_valid(name, capsys):
    assert main(["schema", name]) == 0
    jsonschema.Draft202012Validator.check_schema(json.loads(capsys.readouterr().out))


def test_shipped_rule_files_match_their_schemas():
    rules = shipped.folder("rules")
    schemas = {
        n: json.loads((shipped.folder("schemas") / f"{n}.schema.json").read_text())
        for n in ("rules", "sheet")
    }
    for path in rules.rglob("*.yaml"):
        kind = "rules" if path.parent.name == "checks" or path.name == "slips.yaml" else "sheet"
        data = yaml.safe_load(path.read_text(encoding="utf-8"))
        jsonschema.Draft202012Validator(schemas[kind]).validate(data)


def test_module_and_pipe_and_no_colour():
    command = [sys.executable, "-m", "checker", "audit", FLAWED]
    done = subprocess.run(command, cwd=ROOT, capture_output=True, text=True, check=False)
    assert done.returncode == 1
    assert "\x1b" not in done.stdout
    piped = subprocess.run(
        f"{sys.executable} -m checker audit {FLAWED} | head -1", cwd=ROOT, shell=True, capture_output=True, text=True,
        check=False,
    )  # fmt: skip
    assert piped.stderr == ""


def test_a_terminal_without_greek_letters():
    done = subprocess.run(
        [sys.executable, "-m", "checker", "audit", FLAWED], cwd=ROOT, capture_output=True, check=False,
        env={**os.environ, "PYTHONIOENCODING": "ascii"},
    )  # fmt: skip
    assert done.returncode == 1
    assert b"RETURN" in done.stdout


def test_one_audit_loads_nothing_heavy():
    """A single file pays for the standard library, PyYAML and tabulate, and for nothing else."""
    code = (
        "import sys; from checker.cli import main; main(['audit', sys.argv[1]]); "
        "print([m for m in ('numpy', 'pandas', 'pydantic', 'jsonschema', 'matplotlib') if m in sys.modules])"
    )
    done = subprocess.run(
        [sys.executable, "-c", code, SOUND], cwd=ROOT, capture_output=True, text=True, check=True,
        env={**os.environ, "SAMESTRUT_CACHE": "off"},
    )  # fmt: skip
    assert done.stdout.splitlines()[-1] == "[]"


def test_office_rules(tmp_path, capsys):
    office = tmp_path / "office.yaml"
    office.write_text("format: 1\nrules:\n  links.spacing-strict: {gravity: breach}\n", encoding="utf-8")
    main(["audit", FLAWED, "--rules", str(office), "--format", "json"])
    found = json.loads(capsys.readouterr().out)["members"][0]["findings"]
    assert [f["gravity"] for f in found if f["rule"] == "links.spacing-strict"] == ["breach"]


def test_office_limits_are_a_layer(tmp_path, capsys):
    office = tmp_path / "office.yaml"
    office.write_text(
        "format: 1\nover: EN 1992-1-1:2004\nlayers:\n  office:\n    name: our limits\n    quantities:\n"
        "      cot_max: {formula: 1.5, clause: office manual}\n",
        encoding="utf-8",
    )
    assert main(["audit", SOUND, "--rules", str(office)]) == 1
    assert "at most 1.5 is allowed" in capsys.readouterr().out


@pytest.mark.parametrize(
    ("text", "said"),
    [
        ("format: 1\nrules:\n  links.closed: {gravityy: breach}\n", ":3:18: links.closed: unknown key 'gravityy'"),
        ("format: 1\nlayers:\n  x: {name: x, quantities: {cot_max: {formula: 2.5 kN}}}\n", ":3:"),
        ("format: 1\nlayers:\n  x: {name: x, quantities: {z: {formula: V_Ed / 2}}}\n", "z is in mm, its formula gives kN"),
        ("format: 1\nlayers:\n  x: {name: x, quantities: {d: {formula: z / 2}}}\n", "a cycle: "),
        ("format: 1\nlayers:\n  x: {name: x, quantities: {d: {formula: depth - 2}}}\n", "unknown symbol 'depth'"),
        ("- 1\n", "expected a table of keys"),
    ],
)  # fmt: skip
def test_bad_office_files_are_faults_with_places(tmp_path, capsys, text, said):
    office = tmp_path / "office.yaml"
    office.write_text(text, encoding="utf-8")
    assert main(["audit", SOUND, "--rules", str(office)]) == 2
    captured = capsys.readouterr()
    assert captured.out == ""
    assert "office.yaml:" in captured.err
    assert said in captured.err


def test_unknown_annex(capsys):
    assert main(["audit", SOUND, "--annex", "atlantis"]) == 2
    assert "no such annex; known are recommended, uk" in capsys.readouterr().err


def test_a_report_is_never_written_over_what_is_audited(tmp_path, capsys):
    path = tmp_path / "beam.json"
    path.write_bytes((ROOT / "examples/market-hall/link-bridge-box.json").read_bytes())
    before = path.read_bytes()
    for given in (path, tmp_path):
        assert main(["audit", str(given), "-o", str(path)]) == 2
        assert "is one of the files to audit" in capsys.readouterr().err
    assert path.read_bytes() == before


def test_an_unknown_annex_in_one_file_leaves_the_others(tmp_path, capsys):
    path = tmp_path / "beam.yaml"
    text = (ROOT / "examples/market-hall/edge-beam-sound.yaml").read_text(encoding="utf-8")
    path.write_text(text.replace("annex: recommended", "annex: atlantis"), encoding="utf-8")
    assert main(["audit", str(path), SOUND]) == 2
    captured = capsys.readouterr()
    assert "beam.yaml:6:1: annex: atlantis: no such annex; known are recommended, uk" in captured.err
    assert captured.out.count("Member EB-01") == 1


def test_the_same_file_twice_is_one_member(capsys):
    main(["audit", SOUND, SOUND, str(ROOT / "examples/market-hall"), "--format", "json"])
    members = [member["member"] for member in json.loads(capsys.readouterr().out)["members"]]
    assert members.count("EB-01") == 1
