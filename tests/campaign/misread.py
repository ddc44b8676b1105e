"""A file's steel misread by hand, one number at a time, to see whether a misreading that is named gives the value."""

from __future__ import annotations

from collections.abc import Iterator

from checker import audit
from checker.declared.build import load_text
from checker.errors import InputFaults
from tests.campaign.worked import Job

SIZES = (6, 8, 10, 12, 14, 16, 20, 25, 28, 32, 40)
MISREAD = {
    "link-size-misread": "diameter", "bar-size-misread": "diameter", "link-spacing-misread": "spacing",
    "link-legs-miscounted": "legs", "bars-miscounted": "count", "cover-misread": "cover",
}  # fmt: skip
"""Which key of the file each misreading changes."""


def gives(job: Job, name: str, symbol: str, declared: float, slack: float) -> bool:
    """Whether some misreading of that name gives the declared value (inside units) within the slack."""
    lines = job.text({s: t for s, t in job.work().printed.items() if s in job.design.fixed}).splitlines()
    for index, line in enumerate(lines):
        key, _, text = line.strip().removeprefix("- ").partition(": ")
        if key != MISREAD[name]:
            continue
        for other in _others(key, float(text)):
            changed = [*lines[:index], line.replace(text, f"{other:g}"), *lines[index + 1 :]]
            if abs(_worked("\n".join(changed), symbol) - declared) <= slack:
                return True
    return False


def _others(key: str, value: float) -> Iterator[float]:
    if key == "diameter":
        place = sorted({*SIZES, int(value)})
        at = place.index(int(value))
        yield from (place[i] for i in (at - 1, at + 1) if 0 <= i < len(place))
    elif key == "spacing":
        yield from (s for s in range(75, 325, 25) if s != value)
    elif key == "cover":
        yield from (value + step for step in (-10, -5, 5, 10) if value + step > 0)
    else:
        yield from (value + step for step in (-1, 1, 2) if value + step > 0)


def _worked(text: str, symbol: str) -> float:
    try:
        report = audit(load_text(text, "misread.yaml"))
    except InputFaults:
        return float("nan")  # a misreading that can't be built gives nothing
    return report.members[0].cases[0].values[symbol] if report.members else float("nan")
