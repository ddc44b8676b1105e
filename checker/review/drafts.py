"""What a rule says about a case before findings are numbered: checks, and drafts of findings."""

from __future__ import annotations

import math
from dataclasses import dataclass, field
from typing import Any, NamedTuple

from checker.declared.model import Place
from checker.sheet.quantities import Sheet
from checker.sheet.shown import number, paper, to_shown, with_unit

PASS, FAIL, NOT_APPLICABLE, NOT_CHECKED, CRASHED = "pass", "fail", "not applicable", "not checked", "crashed"
UNSAFE_SIDE, SAFE_SIDE, EITHER_SIDE = "unsafe side", "safe side", "either side"


class Check(NamedTuple):
    """How one rule ended for one case (None: for the member). `margin` is the share of the limit left over."""

    rule: str
    case: str | None
    status: str
    why: str = ""
    margin: float | None = None


class Draft(NamedTuple):
    """A finding before it has a number. Numbers are in inside units; `key` is what others hang on."""

    rule: str
    gravity: str
    direction: str
    case: str | None
    quantity: str
    unit: str
    clause: str
    says: str
    todo: str
    key: str = ""
    declared: float | None = None
    declared_text: str = ""
    recomputed: float | None = None
    limit: float | None = None
    tolerance: float | None = None
    where: tuple[Place, ...] = ()
    slip: str | None = None
    slips: tuple[str, ...] = ()
    shows_in: tuple[str, ...] = ()
    hangs_on: str | None = None
    implied_cot: float | None = None
    working: str = ""
    wrong_working: str = ""
    cases: tuple[str, ...] = ()

    @property
    def case_names(self) -> tuple[str, ...]:
        """The case it stands for, or all of those it was found in where it stands for the whole member."""
        return (self.case,) if self.case else self.cases

    def places(self, file: str) -> str:
        """Where it stands in the file, as `beam.yaml:12:5`, all places in one line."""
        return ", ".join(f"{file}:{spot.line}:{spot.column}" for spot in self.where)

    @property
    def ratio(self) -> float | None:
        """Declared over recomputed, or provided over limit."""
        base = self.recomputed if self.declared is not None else self.limit
        value = self.declared if self.declared is not None else self.recomputed
        if value is None or base is None or base == 0 or not math.isfinite(value / base):
            return None
        return value / base


@dataclass(slots=True)
class Words:
    """Fills the placeholders of a rule's sentence: given words first, then any symbol of the sheet with its unit."""

    sheet: Sheet
    values: Any
    given: dict[str, str] = field(default_factory=dict)

    def __getitem__(self, name: str) -> str:
        if name in self.given:
            return self.given[name]
        quantity = self.sheet.quantities.get(name)
        if quantity is None:
            raise KeyError(f"the sentence of a rule speaks of {name!r}, which is neither a word nor a symbol")
        return with_unit(float(self.values[name]), quantity.unit)

    def fill(self, sentence: str) -> str:
        return sentence.format_map(self)


def apart(first: float, second: float, unit: str) -> tuple[str, str]:
    """Two values with enough digits to tell them apart."""
    for digits in range(4, 9):
        texts = with_unit(first, unit, digits), with_unit(second, unit, digits)
        if texts[0] != texts[1]:
            return texts
    return texts


def difference(declared: float, recomputed: float, unit: str) -> str:
    """`+12 %`, or the plain difference where there is no ratio."""
    if recomputed == 0 or not math.isfinite(declared / recomputed):
        return f"difference {number(to_shown(declared - recomputed, unit))} {unit}".strip()
    share = (declared / recomputed - 1) * 100
    sign = "+" if share > 0 else "−"
    return f"{sign}{number(abs(share), 3)} %"


def direction_of(larger: str, declared: float, recomputed: float) -> str:
    """Which side an error lies on, from which way a larger value errs."""
    if larger == "mixed" or declared == recomputed:
        return EITHER_SIDE
    return UNSAFE_SIDE if (declared > recomputed) == (larger == "unsafe") else SAFE_SIDE


def symbol_text(symbol: str) -> str:
    return paper(symbol.removesuffix("_declared").removesuffix("_stated"))
