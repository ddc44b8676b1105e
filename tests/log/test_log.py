"""The sign-off log: entries chained, durable over kills and torn writes, any change found, approval refused."""

from __future__ import annotations

import json
import os
import random
import signal
import subprocess
import sys
import time
from pathlib import Path

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from checker.cli import main
from checker.errors import UsageError
from checker.log.entry import FIRST, canonical, read_entry
from checker.log.journal import BrokenLogError, append
from checker.log.sign import add
from checker.log.verify import verify

ROOT = Path(__file__).parents[2]
PROCESSES, EACH = 8, int(os.environ.get("SAMESTRUT_LOG_ENTRIES", "500"))
FIELDS = {
    "time": "2026-01-02T03:04:05Z", "action": "audited", "person": "A. Person", "role": "checker", "member": "EB-01",
    "document": "d", "revision": "A", "digests": {}, "outcome": "accept", "counts": {}, "open": [], "note": "θ",
}  # fmt: skip

WRITER = f"""
import sys
from pathlib import Path
from checker.log.journal import append
log, acknowledged, name, count = Path(sys.argv[1]), sys.argv[2], sys.argv[3], int(sys.argv[4])
fields = {FIELDS!r}
start = sum(1 for _ in open(acknowledged))
with open(acknowledged, "a") as stream:
    for number in range(start, count):
        entry = append(log, {{**fields, "person": name, "note": str(number)}})
        stream.write(f"{{entry['sequence']}} {{entry['digest']}}\\n")
        stream.flush()
"""


def made(path: Path, count: int) -> list[bytes]:
    for number in range(count):
        append(path, {**FIELDS, "note": f"entry {number}"})
    return path.read_bytes().splitlines(keepends=True)


def test_entries_are_chained(tmp_path):
    log = tmp_path / "log.jsonl"
    lines = made(log, 3)
    first, second, third = (read_entry(line[:-1]) for line in lines)
    assert first["before"] == FIRST
    assert (second["before"], third["before"]) == (first["digest"], second["digest"])
    assert verify(log) == (3, third["digest"])


def test_processes_killed_at_random_lose_and_double_nothing(tmp_path):
    """Every entry that was acknowledged is there once; one that was written but not acknowledged may be there too."""
    log = tmp_path / "log.jsonl"
    rng = random.Random("kill")
    files = [tmp_path / f"acknowledged-{number}" for number in range(PROCESSES)]
    for file in files:
        file.touch()

    def start(number: int) -> subprocess.Popen[bytes]:
        command = [sys.executable, "-c", WRITER, str(log), str(files[number]), f"p{number}", str(EACH)]
        return subprocess.Popen(command, cwd=ROOT)

    running = {number: start(number) for number in range(PROCESSES)}
    kills = 0
    deadline = time.monotonic() + 300
    while running and time.monotonic() < deadline:
        time.sleep(0.05)
        for number, process in list(running.items()):
            if process.poll() is None:
                if kills < 3 * PROCESSES and rng.random() < 0.03:
                    process.send_signal(signal.SIGKILL)
                    process.wait()
                    kills += 1
                    running[number] = start(number)
            elif process.returncode == 0:
                del running[number]
            else:
                running[number] = start(number)
    assert not running
    assert kills > 0
    count, _ = verify(log)
    entries = [read_entry(line) for line in log.read_bytes().splitlines()]
    known = {(str(entry["sequence"]), entry["digest"]) for entry in entries}
    acknowledged = [tuple(line.split()) for file in files for line in file.read_text().splitlines()]
    assert len(acknowledged) == len(set(acknowledged)) >= PROCESSES * EACH - kills
    assert set(acknowledged) <= known
    assert count == len(known) <= len(acknowledged) + kills


@pytest.fixture(scope="module")
def whole(tmp_path_factory):
    log = tmp_path_factory.mktemp("log") / "log.jsonl"
    lines = made(log, 6)
    return lines, verify(log)[1]


def checked(tmp: Path, content: bytes, head: str) -> bool:
    path = tmp / "changed.jsonl"
    path.write_bytes(content)
    try:
        verify(path, head)
    except BrokenLogError:
        return False
    return True


@settings(max_examples=300, deadline=None, suppress_health_check=[HealthCheck.function_scoped_fixture])
@given(st.data())
def test_any_byte_flipped_is_found(whole, tmp_path, data):
    lines, head = whole
    content = bytearray(b"".join(lines))
    place = data.draw(st.integers(0, len(content) - 1))
    content[place] ^= data.draw(st.integers(1, 255))
    assert not checked(tmp_path, bytes(content), head)


@settings(max_examples=100, deadline=None, suppress_health_check=[HealthCheck.function_scoped_fixture])
@given(st.lists(st.integers(0, 5), max_size=8))
def test_lines_dropped_doubled_or_swapped_are_found(whole, tmp_path, order):
    lines, head = whole
    same = order == list(range(6))
    assert checked(tmp_path, b"".join(lines[i] for i in order), head) == same


def test_a_cut_end_shows_against_a_noted_head_only(whole, tmp_path):
    lines, head = whole
    content = b"".join(lines[:4])
    path = tmp_path / "cut.jsonl"
    path.write_bytes(content)
    assert verify(path)[0] == 4
    assert not checked(tmp_path, content, head)


def test_a_torn_write_at_every_offset_is_reported_and_set_aside(whole, tmp_path, capsys):
    lines, _ = whole
    kept = b"".join(lines[:5])
    for offset in range(1, len(lines[5])):
        log = tmp_path / "torn.jsonl"
        log.write_bytes(kept + lines[5][:offset])
        with pytest.raises(BrokenLogError, match="line 6: torn"):
            verify(log)
        entry = append(log, FIELDS)
        assert "was torn" in capsys.readouterr().err
        assert entry["sequence"] == 6
        assert log.read_bytes().startswith(kept)
        aside = log.with_name(f"torn.jsonl.torn-{len(kept)}")
        assert aside.read_bytes() == lines[5][:offset]
        assert verify(log)[0] == 6


def test_nothing_follows_a_broken_end(whole, tmp_path):
    lines, _ = whole
    log = tmp_path / "broken.jsonl"
    log.write_bytes(lines[0] + lines[1].replace(b"EB-01", b"EB-02"))
    with pytest.raises(BrokenLogError, match="does not match its digest"):
        append(log, FIELDS)


def test_a_full_disk_leaves_nothing_half_written(whole, tmp_path):
    """The limit on a file's size stands in for the full disk: a write stops in the middle."""
    lines, head = whole
    log = tmp_path / "full.jsonl"
    log.write_bytes(b"".join(lines))
    size = log.stat().st_size
    code = (
        "import resource, signal, sys; from pathlib import Path; from checker.log.journal import append\n"
        "signal.signal(signal.SIGXFSZ, signal.SIG_IGN)\n"
        f"resource.setrlimit(resource.RLIMIT_FSIZE, ({size + 100}, {size + 100}))\n"
        "from checker.errors import UsageError\n"
        f"try: append(Path({str(log)!r}), {FIELDS!r})\n"
        "except UsageError as error: print(error); sys.exit(7)\n"
    )
    done = subprocess.run([sys.executable, "-c", code], cwd=ROOT, capture_output=True, text=True, check=False)
    assert done.returncode == 7
    assert "nothing was added" in done.stdout
    assert log.stat().st_size == size
    assert verify(log, head)[0] == 6


def test_a_folder_that_is_not_there_is_a_clear_error(tmp_path):
    with pytest.raises(UsageError, match="can't be written"):
        append(tmp_path / "missing" / "log.jsonl", FIELDS)


def report(tmp_path: Path, name: str) -> Path:
    target = tmp_path / "report.json"
    main(["audit", str(ROOT / "examples/market-hall" / name), "-q", "-o", str(target)])
    return target


def test_approval(tmp_path):
    log, sound = tmp_path / "log.jsonl", report(tmp_path, "edge-beam-sound.yaml")
    add(log, "audited", "A. Person", "checker", sound)
    with pytest.raises(UsageError, match="nobody has logged this report as checked"):
        add(log, "approved", "B. Person", "approver", sound)
    add(log, "checked", "A. Person", "checker", sound)
    with pytest.raises(UsageError, match="say why with --same-person-because"):
        add(log, "approved", "A. Person", "approver", sound)
    entry = add(log, "approved", "A. Person", "approver", sound, same_person="one-person office")
    assert "one-person office" in entry["note"]
    assert verify(log)[0] == 3


def test_an_unsafe_finding_is_not_approved(tmp_path):
    log, flawed = tmp_path / "log.jsonl", report(tmp_path, "canopy-beam-dangerous.yaml")
    add(log, "checked", "A. Person", "checker", flawed)
    with pytest.raises(UsageError, match=r"not approved: findings No\. 1, 2, 3"):
        add(log, "approved", "B. Person", "approver", flawed)


def test_a_changed_input_is_not_approved(tmp_path):
    design = tmp_path / "beam.yaml"
    design.write_bytes((ROOT / "examples/market-hall/edge-beam-sound.yaml").read_bytes())
    target = tmp_path / "report.json"
    main(["audit", str(design), "-q", "-o", str(target)])
    log = tmp_path / "log.jsonl"
    add(log, "checked", "A. Person", "checker", target)
    design.write_bytes(design.read_bytes() + b"# changed\n")
    with pytest.raises(UsageError, match="is no longer what the report was made from"):
        add(log, "approved", "B. Person", "approver", target)


def test_commands(tmp_path, capsys):
    log, sound = str(tmp_path / "log.jsonl"), str(report(tmp_path, "edge-beam-sound.yaml"))
    assert main(["log", "add", log, "audited", "--report", sound, "--person", "A. Person"]) == 0
    assert main(["log", "add", log, "checked", "--report", sound, "--person", "A. Person"]) == 0
    capsys.readouterr()
    assert main(["log", "head", log]) == 0
    head = capsys.readouterr().out.strip()
    assert main(["log", "verify", log, "--head", head]) == 0
    assert "2 entries hold" in capsys.readouterr().out
    assert main(["log", "show", log, "--action", "checked"]) == 0
    shown = capsys.readouterr().out
    assert "checked" in shown
    assert "audited" not in shown
    lines = Path(log).read_bytes().splitlines(keepends=True)
    Path(log).write_bytes(lines[1])
    assert main(["log", "verify", log]) == 1
    assert "entry 1: says it is number 2" in capsys.readouterr().err


def test_canonical_form():
    assert canonical({"b": 1, "a": "é"}) == '{"a":"é","b":1}'.encode()
    with pytest.raises(ValueError, match="its fields are not those of an entry"):
        read_entry(json.dumps({"a": 1}).encode())
