"""Every published number of `data/` against the tool's own formulas; each test is named after its entry and status.

- Sources stand beside the numbers in `data/*.yaml` and in the failure message. "memory" in a test's name means that the
  source was recalled and not opened, "computed" that it is a hand working and not a publication.
"""

from __future__ import annotations

from dataclasses import replace

import pytest

from tests.outside.published import Check, Steel, load_checks, load_steel, run_file, run_given, run_steel

CHECKS = load_checks()
GIVEN = [check for check in CHECKS if check.file is None]
FILES = [check for check in CHECKS if check.file is not None]
STEEL = load_steel()


def _name(entry: Check | Steel) -> str:
    return f"{entry.origin.id} ({entry.origin.status})"


@pytest.mark.parametrize("check", GIVEN, ids=_name)
def test_recomputed(check: Check) -> None:
    assert not run_given(check), check.origin.source


@pytest.mark.parametrize("check", FILES, ids=_name)
def test_audited(check: Check) -> None:
    assert not run_file(check), check.origin.source


@pytest.mark.parametrize("steel", STEEL, ids=_name)
def test_steel_areas(steel: Steel) -> None:
    assert not run_steel(steel), steel.origin.source


def test_nothing_is_left_out() -> None:
    """Counted by hand from the sources: 42 cells of Table 3.1, 88 + 11 of v_Rd,c, 18 of v_Rd,max, 80 bar areas."""
    names = [check.origin.id for check in CHECKS]
    assert len(names) == len(set(names))
    for start, cells in (("t1-strengths", 42), ("t2-without", 99), ("t2-strength", 7), ("t3-struts", 18)):
        assert sum(name.startswith(start) for name in names) == cells
    assert sum(len(steel.bars) for steel in STEEL) == 80
    for example in ("r1", "r2", "r3", "r4", "r5", "r7", "m1", "m2", "m3", "m4", "m5", "anchor"):
        assert any(name.startswith(f"{example}-") for name in names)


def test_memory_is_said() -> None:
    """What was recalled says so in its source as well as in its status."""
    for check in CHECKS:
        assert ("from memory" in check.origin.source) == (check.origin.status == "memory")


@pytest.mark.parametrize("check", [c for c in CHECKS if all(e.published for e in c.expect)], ids=_name)
def test_a_wrong_number_would_be_noticed(check: Check) -> None:
    """Each number moved by 5 % either way is a fault: no allowance is so wide that it hides one."""
    for factor in (0.95, 1.05):
        expect = tuple(replace(e, published=factor * (e.published or 0.0)) for e in check.expect)
        moved = replace(check, expect=expect)
        loose = [e for e in expect if e.by > 0.025 * abs(e.published or 0.0)]
        faults = run_given(moved) if check.file is None else run_file(moved)
        assert len(faults) >= len(expect) - len(loose)
