"""A sound design gives no finding above a remark: thousands of random ones, of every shape, at any strut angle.

- The designs and their numbers come from `sound`, which knows nothing of the product.
- The design that fails is printed as the file it is.
"""

from __future__ import annotations

from random import Random

import pytest

from checker import audit
from checker.declared.build import load_text
from tests.properties.members import SHAPES
from tests.properties.sound import DECIMALS, sound_design

DESIGNS = 500
"""Of each shape."""


def complaints(text: str) -> list[str]:
    report = audit(load_text(text, "sound.yaml"))
    found = [f"{f.draft.rule}: {f.draft.says}" for f in report.findings if f.draft.gravity != "remark"]
    checks = report.members[0].checks
    return found + [f"{check.rule} crashed: {check.why}" for check in checks if check.status == "crashed"]


def assert_accepted(text: str, seed: int) -> None:
    found = complaints(text)
    assert not found, f"seed {seed}\n" + "\n".join(found) + "\n\n" + text


@pytest.mark.parametrize("kind", SHAPES)
def test_a_sound_design_is_accepted(kind):
    """Every second designer goes on with the numbers as printed, the others keep all digits."""
    for seed in range(DESIGNS):
        design = sound_design(Random(f"{kind} {seed}"), kind, exact=seed % 2 == 0)
        assert_accepted(design.text(), seed)


@pytest.mark.parametrize("kind", SHAPES)
def test_a_sound_design_is_accepted_whatever_of_it_is_declared(kind):
    """Each value is kept with probability 1/2; a choice that the others rest on stays."""
    for seed in range(DESIGNS // 2):
        rng = Random(f"part of {kind} {seed}")
        design = sound_design(rng, kind, exact=True)
        for case in design.cases:
            case.declared = {
                s: v for s, v in case.declared.items() if s in design.fixed or rng.random() < 0.5
            }
            case.verdict = rng.choice(("adequate", ""))
        assert_accepted(design.text(), seed)


@pytest.mark.parametrize("kind", SHAPES)
def test_the_designs_are_worth_accepting(kind):
    """They use what they have, and between them declare every symbol at angles from flat to steep."""
    designs = [sound_design(Random(f"{kind} {seed}"), kind, exact=True) for seed in range(60)]
    cases = [case for design in designs for case in design.cases]
    symbols = {symbol for case in cases for symbol in case.declared}
    assert symbols >= set(DECIMALS) - ({"crack_sum"} if kind not in ("rectangle",) else set()) - {"T_Rd_s"}
    cots = [float(case.declared[s]) for case in cases for s in case.declared if s.startswith("cot_theta")]
    assert min(cots) < 1.2
    assert max(cots) > 2.3
    used = [float(case.declared["A_sw_s_total"]) / float(case.declared["A_sw_s_provided"]) for case in cases]
    assert sum(use > 0.9 for use in used) > len(used) / 4
