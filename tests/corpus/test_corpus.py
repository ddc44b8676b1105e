"""For each rule of the catalogue one file that passes it and one that fails it, differing in one line.

- `<rule>/pass.yaml`: the rule's check is "pass", and there is no finding above a remark.
- `<rule>/fail.yaml`: the rule's check is "fail", its finding is there, and no other above a remark; values that are
  carried from that finding may stand under it.
- Where one error can't come alone, `BESIDE` names what comes with it, and why.
"""

from __future__ import annotations

from itertools import zip_longest
from pathlib import Path

import pytest

from checker import audit, load
from checker.review.catalogue import load_catalogue
from checker.review.findings import Finding, MemberResult

HERE = Path(__file__).parent
RULES = tuple(load_catalogue().rules)

BESIDE: dict[str, dict[str, str]] = {
    "links.perimeter": {
        "links.spacing-perimeter": "links that aren't there have no spacing that could be near enough",
        "links.spacing-least-dimension": "links that aren't there have no spacing that could be near enough",
        "cover.bond-bars": "without a link the bars have nothing but the nominal cover",
    },
    "bars.used-twice": {
        "bars.tension-half": "it says why the tension half falls short",
    },
    "box.side-wall-crushing": {
        "strut.crushing": "the sum over the whole box takes the thinnest wall, so it is never below a side wall's",
    },
}
"""Rule -> other rules that fail with it unavoidably -> why."""


def audited(rule: str, name: str) -> MemberResult:
    return audit(HERE / rule / f"{name}.yaml").members[0]


def statuses(member: MemberResult, rule: str) -> set[str]:
    return {check.status for check in member.checks if check.rule == rule}


def grave(member: MemberResult) -> list[Finding]:
    return [finding for finding in member.findings if finding.draft.gravity != "remark"]


def test_every_rule_has_its_pair_and_nothing_else_stands_here():
    folders = {path.name for path in HERE.iterdir() if path.is_dir() and path.name != "__pycache__"}
    assert folders == set(RULES)
    for rule in RULES:
        assert {path.name for path in (HERE / rule).iterdir()} == {"pass.yaml", "fail.yaml"}


@pytest.mark.parametrize("rule", RULES)
def test_the_pair_loads_and_differs_in_one_thing(rule):
    passing, failing = ((HERE / rule / f"{name}.yaml") for name in ("pass", "fail"))
    texts = [path.read_text(encoding="utf-8").splitlines() for path in (passing, failing)]
    assert texts[0][0].startswith(f"# Passes {rule} ")
    assert texts[1][0].startswith(f"# Fails {rule} ")
    different = [pair for pair in zip_longest(texts[0][1:], texts[1][1:]) if pair[0] != pair[1]]
    assert len(different) == 1
    assert load(passing).member == load(failing).member


@pytest.mark.parametrize("rule", RULES)
def test_the_passing_file_passes(rule):
    member = audited(rule, "pass")
    assert statuses(member, rule) == {"pass"}
    assert [finding.draft.rule for finding in grave(member)] == []


@pytest.mark.parametrize("rule", RULES)
def test_the_failing_file_fails_this_rule_and_no_other(rule):
    member = audited(rule, "fail")
    assert "fail" in statuses(member, rule)
    own = [finding for finding in member.findings if finding.draft.rule == rule]
    assert own
    numbers = {finding.number for finding in own}
    others = [f for f in grave(member) if f.draft.rule != rule and f.carried_from not in numbers]
    assert {finding.draft.rule for finding in others} == set(BESIDE.get(rule, {}))


def test_the_files_are_of_every_shape_and_both_senses_of_bending():
    """One beam copied for every rule would show little."""
    designs = [load(HERE / rule / "pass.yaml") for rule in RULES]
    assert {design.section.shape for design in designs} == {
        "rectangle", "box", "circle", "polygon", "tee", "ell", "i",
    }  # fmt: skip
    assert {case.M_Ed.value < 0 for design in designs for case in design.cases} == {True, False}
    assert len({design.materials.f_ck.value for design in designs}) > 5
