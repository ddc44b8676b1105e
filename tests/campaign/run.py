"""Putting the questions: how many designs each, the bounds their figures must keep, and the time that reasoning takes."""

from __future__ import annotations

import time
from collections.abc import Callable
from random import Random

from checker import audit
from checker.declared.build import load_text
from checker.declared.model import Design
from tests.campaign import questions, strut
from tests.campaign.questions import IDS
from tests.campaign.seen import Tally
from tests.campaign.worked import draw_job

Question = Callable[[int, Tally], None]

FULL: dict[Question, int] = {
    questions.clean: 600,
    questions.one_slip: 2000,
    questions.one_slip_in_part: 1500,
    questions.two_slips: 500,
    questions.unknown: 500,
    questions.rounded_work: 500,
    strut.windows: 5000,
    strut.steel_by_slip: 600,
}
"""Designs a question in the full run."""

BOUNDS: dict[str, float] = {
    "clean": 100,
    "one slip: found": 100,
    "one slip: root right": 99.5,
    "one slip: one root": 99,
    "one slip: first, or one of the same value": 97,
    "one slip: first, where no other": 97,
    "one slip: named": 99.5,
    "half: found": 100,
    "half: named": 99,
    "half: one cause": 95,
    "quarter: found": 100,
    "quarter: named": 95,
    "final: found": 100,
    "final: named": 95,
    "two slips: both roots": 97,
    "two slips: both named": 95,
    "unknown: found": 100,
    "unknown: names land": 100,
    "habits": 100,
    "steel by slip": 100,
    "window": 100,
    "reserve": 100,
}
"""Least share in per cent; a name stands for all figures that begin with it."""


def bound_of(figure: str) -> float | None:
    """The bound a figure must keep; None for those that are only printed."""
    return next((bound for name, bound in BOUNDS.items() if figure.startswith(name)), None)


def put(question: Question, designs: int) -> Tally:
    """Put one question to so many designs, always the same ones."""
    tally = Tally()
    for seed in range(designs):
        question(seed, tally)
    return tally


def time_ratio(members: int) -> float:
    """Auditing flawed members, reasoning included, over auditing the same members without the flaw."""
    clean: list[Design] = []
    flawed: list[Design] = []
    for seed in range(members):
        rng = Random(f"time {seed}")
        slip = IDS[seed % len(IDS)]
        drawn = questions.possible(rng, [slip], tries=3)
        job = drawn[0] if drawn else draw_job(rng)
        if drawn is None:
            continue
        clean.append(load_text(job.text(job.work().printed), "clean.yaml"))
        flawed.append(load_text(job.text(drawn[1].printed), "flawed.yaml"))
    audit([clean[0], flawed[0]])
    start = time.perf_counter()
    for design in clean:
        audit(design)
    middle = time.perf_counter()
    for design in flawed:
        audit(design)
    return (time.perf_counter() - middle) / (middle - start)
