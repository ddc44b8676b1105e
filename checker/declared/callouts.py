"""The trade's short forms for steel: bars `4H25` (count, diameter), links `H10-150` (diameter, spacing).

- Between count and diameter of bars stands one of H T B R Y D, a diameter sign, x or -.
- For links it stands in front and may be left out; the spacing follows after `-`, `@` or `/`.
- The letter says nothing here: the strength stands under `materials` (common practice, no source).
"""

from __future__ import annotations

import re
from typing import NamedTuple

GRADE_MARKS = "HTBRYDØøφΦ⌀"
_BARS = rf"([0-9]{{1,4}}) ?[{GRADE_MARKS}x\u00d7-] ?([0-9]{{1,3}}(?:\.[0-9]{{1,2}})?)"
_LINKS = rf"[{GRADE_MARKS}]? ?([0-9]{{1,3}}(?:\.[0-9]{{1,2}})?) ?[-@/] ?([0-9]{{1,4}})"

PATTERNS = {"bar callout": _BARS, "link callout": _LINKS}
"""The short forms as regular expressions of the common subset of dialects."""


class BarCallout(NamedTuple):
    """How many bars, and the diameter in mm as written."""

    number: int
    diameter: str


class LinkCallout(NamedTuple):
    """Diameter and spacing in mm, as written."""

    diameter: str
    spacing: str


def parse_bars(text: str) -> BarCallout | None:
    """Read `4H25`; None if the text is no such callout."""
    match = re.fullmatch(_BARS, text)
    return BarCallout(int(match.group(1)), match.group(2)) if match else None


def parse_links(text: str) -> LinkCallout | None:
    """Read `H10-150`; None if the text is no such callout."""
    match = re.fullmatch(_LINKS, text)
    return LinkCallout(match.group(1), match.group(2)) if match else None
