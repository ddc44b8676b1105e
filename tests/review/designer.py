"""A designer at work: numbers worked out one after the other, each rounded and carried on, some of them wrong.

- Every number comes from the tool's own sheet, from the numbers written down before it.
- What the designer gets wrong is stated by the test: a factor on one number, or another formula's value.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from math import floor, log10
from typing import Any

from checker import audit
from checker.report.audit_report import AuditReport
from checker.review.drafts import Draft
from checker.review.engine import recompute
from checker.sheet.shown import SHOWN_FACTOR
from tests.sheet.designs import design, rows_of

USUAL = (
    "f_cd", "f_yd", "f_ywd", "d", "t_ef", "A_k", "u_k", "nu", "V_Rd_max", "T_Rd_max", "crush_sum", "A_sw_s_shear",
    "A_sw_s_torsion", "A_sw_s_total", "A_sl_torsion", "delta_F_td", "A_s_shift", "V_Rd_s", "T_Rd_s",
)  # fmt: skip
"""What a calculation states, in the order in which it is worked out."""

CASE = "V_Ed: 180, T_Ed: 32, M_Ed: 160"


def written(value: float, digits: int) -> str:
    """A number with so many significant digits, as a person writes it."""
    if value == 0:
        return "0"
    places = digits - 1 - floor(log10(abs(value)))
    return f"{round(value, places):.{max(places, 0)}f}"


def work(
    symbols: Iterable[str] = USUAL,
    *,
    digits: int = 3,
    used: float = 2.0,
    wrong: Mapping[str, float] | None = None,
    replaced: Mapping[str, str] | None = None,
    shape: str = "rectangle",
    case: str = CASE,
    torsion_on: float | None = None,
    **changed: Any,
) -> dict[str, str]:
    """What the designer writes down: symbol -> text in the shown unit.

    Args:
        digits: significant digits kept, in what is written and in what is carried on.
        used: cot of the strut angle the numbers are worked with (`torsion_on`: another one for torsion).
        wrong: factor by which a number comes out wrong.
        replaced: text written in place of a number, and carried on with.
    """
    plain = design(shape, cases=f"{{name: A, {case}}}", **changed)
    compiled, (row,) = rows_of(plain)
    layers = tuple(name for name in (shape, "links-aslant") if name in compiled.sheet.layers)
    shown = {s: SHOWN_FACTOR[q.unit] for s, q in compiled.sheet.quantities.items()}
    known: dict[str, Any] = dict(row)
    known |= {"cot_theta_shear": used, "cot_theta_torsion": used if torsion_on is None else torsion_on}
    texts: dict[str, str] = {}
    for symbol in symbols:
        value = float(recompute([symbol], known, annex=plain.annex, layers=layers)[symbol])
        text = written(value * shown[symbol] * (wrong or {}).get(symbol, 1.0), digits)
        texts[symbol] = (replaced or {}).get(symbol, text)
        known[symbol] = float(texts[symbol]) / shown[symbol]
    return texts


def submit(
    texts: Mapping[str, str], said: str = "", *, shape: str = "rectangle", case: str = CASE, **changed: Any
) -> AuditReport:
    """Audit what was written down, with further entries of `declared:` such as `cot_theta: 2.0`."""
    entries = ", ".join([*(f"{symbol}: {text}" for symbol, text in texts.items()), *([said] if said else [])])
    return audit(design(shape, cases=f"{{name: A, {case}, declared: {{{entries}}}}}", **changed))


def value_findings(report: AuditReport) -> dict[str, Draft]:
    """The findings about declared numbers, angles and leg bases, by rule; nothing may have crashed."""
    (member,) = report.members
    assert not report.faults
    assert not [check for check in member.checks if check.status == "crashed"]
    kinds = (
        "agrees.",
        "strut.same",
        "strut.angle",
        "links.leg-basis",
        "lever-arm",
        "strut.flattest",
        "strut.steepest",
    )
    found = {f.draft.rule: f.draft for f in member.findings if f.draft.rule.startswith(kinds)}
    return found


def roots_and_carried(report: AuditReport) -> tuple[set[str], dict[str, str]]:
    """The quantities found wrong on their own account, and the carried ones with the quantity they hang on."""
    (member,) = report.members
    by_number = {finding.number: finding.draft for finding in member.findings}
    values = [f for f in member.findings if f.draft.rule.startswith(("agrees.", "strut.", "lever-arm"))]
    roots = {f.draft.quantity for f in values if f.carried_from is None}
    carried = {
        f.draft.quantity: by_number[f.carried_from].quantity for f in values if f.carried_from is not None
    }
    return roots, carried
