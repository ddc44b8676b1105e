"""Revisions: numbers are kept and never used again, and every old finding is told of."""

from __future__ import annotations

import json
from pathlib import Path
from random import Random

import jsonschema
import pytest

from checker import audit, load
from checker.cli import main
from checker.errors import UsageError

ROOT = Path(__file__).parents[2]
MISTAKES = ROOT / "examples/market-hall/edge-beam-mistakes.yaml"
SOUND = ROOT / "examples/market-hall/edge-beam-sound.yaml"


def written(path: Path, report) -> Path:
    path.write_text(report.to_json(), encoding="utf-8")
    return path


def revised(tmp_path: Path, name: str, *changes: tuple[str, str]) -> Path:
    text = MISTAKES.read_text(encoding="utf-8")
    for old, new in changes:
        assert old in text, old
        text = text.replace(old, new)
    path = tmp_path / name
    path.write_text(text, encoding="utf-8")
    return path


def test_three_revisions_keep_their_numbers(tmp_path):
    first = audit(MISTAKES)
    b = audit(
        revised(tmp_path, "b.yaml", ("t_ef: 70", "t_ef: 127.3")), previous=written(tmp_path / "a.json", first)
    )
    numbers = {finding.id: finding.number for finding in first.findings}
    assert all(finding.number == numbers[finding.id] for finding in b.findings if finding.id in numbers)
    states = {step.number: step.state for step in b.trail.steps}
    assert states[numbers_of(first, "t_ef")] == "settled"
    assert set(states) >= set(numbers.values())
    c = audit(MISTAKES, previous=written(tmp_path / "b.json", b))
    again = numbers_of(c, "t_ef")
    assert again > max(numbers.values()), "a number that was settled is not used again"
    assert {step.number: step.state for step in c.trail.steps}[again] == "new"


def numbers_of(report, quantity: str) -> int:
    return next(finding.number for finding in report.findings if finding.draft.quantity == quantity)


def test_a_value_that_comes_nearer_is_better(tmp_path):
    before = written(tmp_path / "a.json", audit(MISTAKES))
    for text, state in (("t_ef: 100", "changed for the better"), ("t_ef: 60", "changed for the worse")):
        report = audit(revised(tmp_path, "b.yaml", ("t_ef: 70", text)), previous=before)
        step = next(step for step in report.trail.steps if step.rule == "agrees.t_ef")
        assert step.state == state
        assert (step.was, step.now) == (70, float(text.split(": ")[1]))


def test_what_is_not_declared_any_more_is_lost_from_sight(tmp_path):
    before = written(tmp_path / "a.json", audit(MISTAKES))
    report = audit(
        revised(
            tmp_path,
            "b.yaml",
            ("  t_ef: 70 ", "  # "),
        ),
        previous=before,
    )
    found = [step.state for step in report.trail.steps if step.rule == "agrees.t_ef"]
    assert found in (["lost from sight"], ["still open"], ["lost from sight", "new"])
    gone = audit(SOUND, previous=before)
    assert {step.state for step in gone.trail.steps} == {"lost from sight"}


def test_a_renamed_member_keeps_its_numbers(tmp_path):
    first = audit(MISTAKES)
    before = written(tmp_path / "a.json", first)
    design = load(MISTAKES)._replace(member="EB-99")
    report = audit(design, previous=before, renamed={first.members[0].member: "EB-99"})
    assert {step.state for step in report.trail.steps} == {"still open"}
    assert [f.number for f in report.findings] == [f.number for f in first.findings]


def test_numbers_are_never_used_again_over_random_chains(tmp_path):
    """Random values right and wrong over ten revisions; the same number always means the same finding."""
    rng = Random("chain")
    values = {"t_ef: 70": "t_ef: 127.3", "A_k: 207900": "A_k: 156200"}
    text = MISTAKES.read_text(encoding="utf-8")
    swaps = [(old, new) for old, new in values.items() if old in text]
    assert swaps
    meant: dict[int, str] = {}
    previous = None
    alive: dict[str, int] = {}
    for turn in range(10):
        chosen = [pair for pair in swaps if rng.random() < 0.5]
        report = audit(revised(tmp_path, "x.yaml", *chosen), previous=previous)
        for finding in report.findings:
            assert meant.setdefault(finding.number, finding.id) == finding.id
            if finding.id in alive:
                assert alive[finding.id] == finding.number
            elif turn:
                assert finding.number == max(meant) or finding.number in meant
        alive = {finding.id: finding.number for finding in report.findings}
        previous = written(tmp_path / f"{turn}.json", report)


def test_the_report_fits_its_schema_and_tells_it_in_words(tmp_path, capsys):
    before = written(tmp_path / "a.json", audit(MISTAKES))
    main(["audit", str(SOUND), str(MISTAKES), "--previous", str(before), "-o", str(tmp_path / "b.json")])
    out = capsys.readouterr().out
    assert "Since revision" in out
    assert "still open" in out
    schema = json.loads((ROOT / "schemas/report.schema.json").read_text(encoding="utf-8"))
    jsonschema.validate(json.loads((tmp_path / "b.json").read_text(encoding="utf-8")), schema)


def test_another_annex_is_said(tmp_path):
    before = written(tmp_path / "a.json", audit(MISTAKES))
    report = audit(MISTAKES, previous=before, annex="uk")
    assert any(text.startswith("annex: recommended before, uk now") for text in report.trail.differs)


def test_what_is_no_report_is_said(tmp_path):
    path = tmp_path / "no.json"
    path.write_text("{}", encoding="utf-8")
    with pytest.raises(UsageError, match="is not a report"):
        audit(MISTAKES, previous=path)
    assert main(["audit", str(MISTAKES), "--renamed", "x"]) == 2
