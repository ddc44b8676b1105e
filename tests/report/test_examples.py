"""The examples, and the whole text of their reports: any change of a word or a digit shows here."""

from __future__ import annotations

import json
from pathlib import Path

import jsonschema
import pytest

from checker import audit
from checker.cli import main
from checker.report.schema import ReportModel, report_schema

ROOT = Path(__file__).parents[2]
EXPECTED = Path(__file__).parent / "expected"
EXAMPLES = {
    "edge-beam-sound.yaml": ("accept", 0),
    "edge-beam-mistakes.yaml": ("return", 1),
    "canopy-beam-dangerous.yaml": ("return", 1),
    "link-bridge-box.json": ("accept", 0),
    "typing-errors.yaml": ("incomplete", 2),
}


@pytest.fixture(autouse=True)
def _in_root(monkeypatch):
    """Files are named relative to where the run was started."""
    monkeypatch.chdir(ROOT)


def test_every_example_is_listed():
    files = {path.name for path in (ROOT / "examples" / "market-hall").iterdir()}
    assert files == set(EXAMPLES)


@pytest.mark.parametrize(("name", "ending"), EXAMPLES.items())
def test_outcome_and_exit_code(name, ending):
    report = audit(f"examples/market-hall/{name}")
    assert (report.outcome, report.exit_code) == ending


@pytest.mark.parametrize("name", [name for name in EXAMPLES if name != "typing-errors.yaml"])
def test_whole_text(name, capsys):
    main(["audit", "-v", f"examples/market-hall/{name}"])
    printed = capsys.readouterr().out
    expected = (EXPECTED / f"{name}.txt").read_text(encoding="utf-8")
    assert _without_digests(printed) == expected


def test_faults_word_for_word(capsys):
    assert main(["audit", "examples/market-hall/typing-errors.yaml"]) == 2
    captured = capsys.readouterr()
    assert captured.out == ""
    assert captured.err == (EXPECTED / "typing-errors.yaml.txt").read_text(encoding="utf-8")


def test_the_folder_gives_one_report(capsys):
    assert main(["audit", "examples", "--format", "json"]) == 2
    document = json.loads(capsys.readouterr().out)
    assert [member["member"] for member in document["members"]] == ["CB-03", "EB-02", "EB-01", "LB-02"]
    numbers = [finding["number"] for member in document["members"] for finding in member["findings"]]
    assert numbers == list(range(1, len(numbers) + 1))
    assert {fault["file"] for fault in document["faults"]} == {"examples/market-hall/typing-errors.yaml"}


@pytest.mark.parametrize("name", EXAMPLES)
def test_json_matches_its_schema_and_reads_back(name):
    report = audit(f"examples/market-hall/{name}")
    jsonschema.Draft202012Validator(report_schema()).validate(report.document())
    assert ReportModel.model_validate_json(report.to_json()).outcome == report.outcome


def test_committed_report_schema_is_the_models():
    committed = json.loads((ROOT / "schemas" / "report.schema.json").read_text(encoding="utf-8"))
    assert committed == report_schema()
    jsonschema.Draft202012Validator.check_schema(committed)


def _without_digests(text: str) -> str:
    """The stamp's digests change with every rule file; the rest must not."""
    import re

    return re.sub(r"(rules|sha256) [0-9a-f]{16}", r"\1 …", text)
