"""The sound file the tests of the reader start from, and the marks that say where a fault must be told."""

from __future__ import annotations

import pytest

from checker.declared.build import load_text
from checker.errors import InputFaults

BASE = """\
format: 1
member: EB-07
submission: {project: Invented hall, revision: B}
standard: EN 1992-1-1:2004
annex: recommended
section: {shape: rectangle, b: 400, h: 700}
materials: {f_ck: 30, f_yk: 500, f_ywk: 500}
torsion: equilibrium
cover: 35
aggregate: 20
links:
  - {mark: L1, diameter: 10, spacing: 150, legs: 2, place: perimeter, ends: hooks_135}
bars:
  - {mark: B1, face: bottom, count: 4, diameter: 25}
  - {mark: T1, face: top, count: 3, diameter: 20}
  - {mark: S1, face: left, count: 2, diameter: 12}
  - {mark: S2, face: right, count: 2, diameter: 12}
declared: {d: 642.5, t_ef: 127.3, A_k: 156200, u_k: 1691, f_cd: 20.0, theta: 21.8}
cases:
  - name: ULS-1
    V_Ed: 310
    T_Ed: 52
    M_Ed: 240
    N_Ed: 0
    declared:
      theta_shear: 21.8
      A_sw_s_torsion: {value: 0.15, counts: one leg}
      verdict: adequate
"""
"""The example of the format's contract, invented like everything in it."""

SECTION = "section: {shape: rectangle, b: 400, h: 700}"
LINK = "{mark: L1, diameter: 10, spacing: 150, legs: 2, place: perimeter, ends: hooks_135}"
SIDE_BARS = """\
  - {mark: S1, face: left, count: 2, diameter: 12}
  - {mark: S2, face: right, count: 2, diameter: 12}
"""
BARS = (
    """\
  - {mark: B1, face: bottom, count: 4, diameter: 25}
  - {mark: T1, face: top, count: 3, diameter: 20}
"""
    + SIDE_BARS
)

HERE = "«"
"""Stands in a changed text where the fault must be told, and is taken out before reading."""


def changed(*changes: tuple[str, str]) -> str:
    """The sound file with parts replaced, each of which must be there exactly once."""
    text = BASE
    for old, new in changes:
        assert text.count(old) == 1, old
        text = text.replace(old, new)
    return text


def places(marked: str) -> tuple[str, list[tuple[int, int]]]:
    """The text without its marks, and the line and column of each."""
    found = []
    lines = []
    for number, line in enumerate(marked.split("\n"), 1):
        while HERE in line:
            found.append((number, line.index(HERE) + 1))
            line = line.replace(HERE, "", 1)  # noqa: PLW2901
        lines.append(line)
    return "\n".join(lines), found


def refused(text: str | bytes, file: str = "a.yaml") -> list[tuple[int, int, str]]:
    """The faults of a text that must be refused: line, column, message."""
    with pytest.raises(InputFaults) as caught:
        load_text(text, file)
    assert caught.value.faults
    assert all(fault.file == file and "\n" not in fault.message for fault in caught.value.faults)
    return [(fault.line, fault.column, fault.message) for fault in caught.value.faults]
