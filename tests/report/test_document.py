"""The report as data: determinism, identities, frames."""

from __future__ import annotations

import os
import subprocess
import sys
from pathlib import Path

from checker import audit

ROOT = Path(__file__).parents[2]
FLAWED = "examples/market-hall/edge-beam-mistakes.yaml"


def _in_a_fresh_process(seed: str) -> bytes:
    environment = {**os.environ, "PYTHONHASHSEED": seed}
    command = [sys.executable, "-m", "checker", "audit", "examples", "--format", "json"]
    return subprocess.run(command, cwd=ROOT, env=environment, capture_output=True, check=False).stdout


def test_same_bytes_in_fresh_processes():
    first = _in_a_fresh_process("1")
    assert first
    assert first == _in_a_fresh_process("2")


def test_cache_changes_nothing(monkeypatch, tmp_path):
    """A compiled sheet kept from an earlier run gives the same bytes as one compiled now."""
    from checker.review.engine import engine, sheet_under

    def report() -> str:
        engine.cache_clear()
        sheet_under.cache_clear()
        return audit(ROOT / FLAWED).to_json()

    monkeypatch.setenv("SAMESTRUT_CACHE", "off")
    without = report()
    monkeypatch.delenv("SAMESTRUT_CACHE")
    monkeypatch.setenv("XDG_CACHE_HOME", str(tmp_path))
    assert report() == without
    assert list(tmp_path.rglob("*.kept"))
    assert report() == without
    for kept in tmp_path.rglob("*.kept"):
        kept.write_bytes(kept.read_bytes()[:100])  # torn
    assert report() == without


def test_identity_outlives_values_and_lines(tmp_path):
    text = (ROOT / FLAWED).read_text(encoding="utf-8")
    changed = "# a line more\n" + text.replace("t_ef: 70 ", "t_ef: 71 ")
    one, two = tmp_path / "one.yaml", tmp_path / "two.yaml"
    one.write_text(text, encoding="utf-8")
    two.write_text(changed, encoding="utf-8")
    first = {f.draft.quantity: f.id for f in audit(one).findings if f.draft.quantity == "t_ef"}
    assert first == {f.draft.quantity: f.id for f in audit(two).findings if f.draft.quantity == "t_ef"}
    assert first


def test_carried_findings_name_an_earlier_root():
    findings = audit(ROOT / FLAWED).findings
    carried = [finding for finding in findings if finding.carried_from is not None]
    assert carried
    roots = {finding.number: finding for finding in findings}
    for finding in carried:
        root = roots[finding.carried_from]
        assert root.number < finding.number
        assert root.carried_from is None
        assert root.draft.quantity in ("t_ef", "f_ctd")


def test_frames_have_the_same_facts():
    report = audit(ROOT / FLAWED)
    frame = report.findings_frame()
    assert list(frame["number"]) == [finding.number for finding in report.findings]
    quantities = report.quantities_frame().set_index("symbol")
    assert quantities.loc["t_ef", "value"] == 127.272727
    assert quantities.loc["t_ef", "unit"] == "mm"


def test_no_clock_and_no_absolute_path(monkeypatch):
    monkeypatch.chdir(ROOT)
    text = audit(FLAWED).to_json()
    assert str(ROOT) not in text
    assert str(Path.home()) not in text
