"""What a report says about one design, reduced to what is counted, and the counts themselves."""

from __future__ import annotations

from collections import Counter
from dataclasses import dataclass, field

from checker import audit
from checker.declared.build import load_text
from checker.review.findings import MemberResult

ON_VALUES = ("agrees.", "values.other-inputs", "strut.", "lever-arm.")
"""Rules that speak of declared values and choices; the others hold what is provided against limits."""


@dataclass(frozen=True)
class Root:
    quantity: str
    slip: str | None
    slips: tuple[str, ...]


@dataclass(frozen=True)
class Seen:
    """The roots among the mismatches of one design, and how many mismatches hang on them."""

    roots: tuple[Root, ...]
    carried: int
    complaints: tuple[str, ...]
    """Rules of all findings above a remark, in order."""
    member: MemberResult

    @property
    def found(self) -> bool:
        return bool(self.roots)

    def stands_on(self, quantities: set[str]) -> bool:
        return any(root.quantity in quantities for root in self.roots)

    def first(self, slip: str) -> bool:
        return any(root.slip == slip for root in self.roots)

    def named(self, slip: str) -> bool:
        """A pair of slips made at once counts for both of them."""
        return any(slip in " + ".join(root.slips).split(" + ") for root in self.roots)

    def told(self) -> str:
        return "; ".join(f"{r.quantity}: {', '.join(r.slips) or 'no name'}" for r in self.roots) or "nothing"


def look(text: str) -> Seen:
    """Audit a file; nothing in it may crash a rule."""
    (member,) = audit(load_text(text, "campaign.yaml")).members
    crashed = [check.rule for check in member.checks if check.status == "crashed"]
    assert not crashed, f"{crashed}\n{text}"
    above = [f for f in member.findings if f.draft.gravity != "remark"]
    complaints = tuple(f.draft.rule for f in above)
    above = [
        f for f in above if f.draft.rule.startswith(ON_VALUES) and f.draft.gravity in ("mismatch", "breach")
    ]
    roots = tuple(
        Root(f.draft.quantity, f.draft.slip, f.draft.slips) for f in above if f.carried_from is None
    )
    return Seen(roots, len(above) - len(roots), complaints, member)


@dataclass
class Tally:
    """Counts of one question: figure -> (how often asked, how often so), and the designs that missed."""

    asked: Counter[str] = field(default_factory=Counter)
    so: Counter[str] = field(default_factory=Counter)
    missed: list[tuple[str, str, str]] = field(default_factory=list)
    """(figure, which design, what was told)"""

    def count(self, figure: str, holds: bool, which: str = "", told: str = "") -> None:
        self.asked[figure] += 1
        self.so[figure] += bool(holds)
        if not holds:
            self.missed.append((figure, which, told))

    def add(self, other: Tally) -> None:
        self.asked += other.asked
        self.so.update(other.so)
        self.missed += other.missed

    def share(self, figure: str) -> float:
        """Per cent; a figure that was never asked is nan."""
        return 100 * self.so[figure] / self.asked[figure] if self.asked[figure] else float("nan")
