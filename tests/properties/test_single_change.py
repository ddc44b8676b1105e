"""Changing one declared value by more than its tolerance gives a finding on that very value.

- Every symbol that may be declared, on every shape that it applies to, up and down, by 1.5 tolerances and by two.
- The tolerance is the one the report gives for the value; for a strut angle it is its rounding and 1 %.
- The values are printed with two decimals more than usual: a value that follows from its rounded neighbours may
  part from the recomputed one by their rounding twice over.
"""

from __future__ import annotations

from math import degrees, tan
from random import Random

import pytest

from checker import audit
from checker.declared.build import load_text
from checker.declared.symbols import DECLARABLE
from checker.review.drafts import Draft
from tests.properties.members import SHAPES
from tests.properties.sound import UNIT, Sound, sound_design

DESIGNS = 3
"""Of each shape; all their declared values are changed."""

ANGLES = {s for s in DECLARABLE if "theta" in s}
BEYOND = 1.5


def findings_on(design: Sound, number: int, symbol: str, text: str) -> list[Draft]:
    """The findings on a symbol's quantity once it is declared as `text` in one case."""
    declared = design.cases[number].declared
    before = declared[symbol]
    declared[symbol] = text
    try:
        report = audit(load_text(design.text(), "changed.yaml"))
    finally:
        declared[symbol] = before
    quantities = ANGLES if symbol in ANGLES else {symbol}
    drafts = [finding.draft for finding in report.findings]
    return [d for d in drafts if d.quantity in quantities and f"C{number + 1}" in d.cases]


def last_place(text: str) -> float:
    return 10.0 ** -len(text.partition(".")[2])


def written(value: float, like: str) -> str:
    """A value with two more decimals than the one it stands for, so that its own rounding counts for nothing."""
    return f"{value:.{len(like.partition('.')[2]) + 2}f}"


def changed_values(design: Sound, number: int, symbol: str) -> list[float]:
    """What to declare instead: twice and half, and just beyond the tolerance on both sides."""
    text = design.cases[number].declared[symbol]
    value = float(text)
    if symbol in ANGLES:
        return changed_angles(symbol, value, last_place(text))
    if value == 0:  # steel may be nothing as the difference of two large terms, which its tolerance goes by
        return [2000.0 if symbol in ("A_s_bending", "A_s_tension") else 40 * last_place(text)]
    values = [2 * value, value / 2]
    unit = UNIT.get(symbol, 1.0)
    for factor, side in ((2.2, 1), (0.45, -1)):
        drafts = findings_on(design, number, symbol, written(value * factor, text))
        for draft in drafts:
            if (
                draft.rule.startswith("agrees.")
                and draft.tolerance is not None
                and draft.recomputed is not None
            ):
                values.append((draft.recomputed + side * BEYOND * draft.tolerance) / unit)
    return values


def changed_angles(symbol: str, value: float, step: float) -> list[float]:
    """An angle a little, and far, off; one outside 45° to cot 2.5 as well."""
    if symbol.startswith("cot_"):
        slack = BEYOND * (step / 2 + 0.01 * value)
        return [value + slack, value - slack, 2 * value, value / 2]
    cot = 1 / tan(value * 3.141592653589793 / 180)
    slack = BEYOND * (step / 2 + degrees(0.01 * cot / (1 + cot**2)))
    return [value + slack, value - slack, min(89.0, 2 * value), value / 2]


@pytest.mark.parametrize("kind", SHAPES)
def test_a_single_change_is_found(kind):
    seen: set[str] = set()
    for seed in range(DESIGNS):
        rng = Random(f"change {kind} {seed}")
        design = sound_design(rng, kind, exact=True, finer=2)
        number = rng.randrange(len(design.cases))
        for symbol in list(design.cases[number].declared):
            seen.add(symbol)
            for value in changed_values(design, number, symbol):
                if value <= 0:
                    continue
                said = design.cases[number].declared[symbol]
                found = findings_on(design, number, symbol, written(value, said))
                assert found, f"seed {seed}: {symbol} {said} changed to {value:.12g}\n\n{design.text()}"
    missing = set(DECLARABLE) - seen - ANGLES
    assert missing <= (set() if kind == "rectangle" else {"crack_sum"})


@pytest.mark.parametrize("kind", SHAPES)
def test_a_wrong_verdict_is_found(kind):
    for seed in range(20):
        design = sound_design(Random(f"verdict {kind} {seed}"), kind, exact=True)
        design.cases[0].verdict = "not adequate"
        report = audit(load_text(design.text(), "verdict.yaml"))
        assert "verdict" in {finding.draft.quantity for finding in report.findings}


def test_every_symbol_is_reached():
    """Between them the designs declare all that may be declared, every form of the angle included."""
    seen: set[str] = set()
    for seed in range(40):
        for case in sound_design(Random(f"all {seed}"), "rectangle", exact=True).cases:
            seen |= set(case.declared)
    assert seen == set(DECLARABLE)
