"""Published numbers as data: reading the files, and running an entry through the tool's own formulas.

- Nothing here computes a quantity: values come from `recompute`, from `audit` or from `measure`.
- An entry that can't be read (unknown key, unit, status) is an error, never skipped.
- `data/README.md` says what the files hold.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Mapping
from dataclasses import dataclass, replace
from pathlib import Path
from typing import Any

import yaml

from checker import audit
from checker.declared.build import load_text
from checker.declared.units import UNITS
from checker.geometry.measure import measure
from checker.report.audit_report import AuditReport
from checker.review.engine import recompute
from checker.review.findings import Finding

DATA = Path(__file__).parent / "data"
STATUSES = ("read", "memory", "computed")
ABOUT = {"id", "title", "source", "status", "annex", "extra", "layers", "note"}
EXPECTED = {"symbol", "published", "unit", "within", "by", "ratio", "case", "note"}
NOISE = 1e-9
"""What a sum in floating point may add to a stated allowance, relative."""


@dataclass(frozen=True, slots=True)
class Origin:
    """Where an entry comes from and what it is worked under."""

    id: str
    title: str
    source: str
    status: str
    annex: str
    extra: Path | None
    layers: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class Expected:
    """One published number in its own unit; None where the source says that there is no value."""

    symbol: str
    published: float | None
    unit: str
    within: float
    by: float
    ratio: float
    case: str | None = None

    def fault(self, inside: float) -> str | None:
        """What is wrong with a recomputed inside value, or None."""
        ours = inside / UNITS[self.unit][1]
        if self.published is None:
            return (
                None if math.isnan(ours) else f"{self.symbol}: no value is published, recomputed {ours:.6g}"
            )
        allowed = self.within * abs(ours) * self.ratio + self.by + NOISE * abs(ours)
        if abs(self.published - self.ratio * ours) <= allowed:
            return None
        said = f"{self.symbol}: published {self.published:g} {self.unit}, recomputed {ours:.6g}"
        return f"{said}, ratio {self.published / ours if ours else math.inf:.5f}, allowed {self.ratio:g}"


@dataclass(frozen=True, slots=True)
class Check:
    """Given values, or a declared design, with the published numbers for it."""

    origin: Origin
    given: Mapping[str, float]
    file: Path | None
    expect: tuple[Expected, ...]
    findings: tuple[Mapping[str, Any], ...] = ()


@dataclass(frozen=True, slots=True)
class Steel:
    """Published areas of bars and links; `bars` has (count, diameter, area)."""

    origin: Origin
    bars: tuple[tuple[int, float, Expected], ...]
    links: tuple[tuple[int, float, float, Expected], ...]


def load_checks(folder: Path = DATA) -> list[Check]:
    """Every check and every cell of every table, in the order of the files."""
    found: list[Check] = []
    for path in sorted(folder.glob("*.yaml")):
        record = _open(path)
        found += [_check(entry, path) for entry in record.get("checks", [])]
        for table in record.get("tables", []):
            found += _cells(table, path)
    return found


def load_steel(folder: Path = DATA) -> list[Steel]:
    """Every table of steel areas."""
    return [
        _steel(entry, path)
        for path in sorted(folder.glob("*.yaml"))
        for entry in _open(path).get("steel", [])
    ]


def run_given(check: Check) -> list[str]:
    """The faults of a check that recomputes single quantities."""
    symbols = list(dict.fromkeys(expected.symbol for expected in check.expect))
    origin = check.origin
    values = recompute(symbols, check.given, annex=origin.annex, layers=origin.layers, office=origin.extra)
    return _faults((expected, values[expected.symbol]) for expected in check.expect)


def run_file(check: Check) -> list[str]:
    """The faults of a check that audits a declared design: its numbers, and exactly the findings it says."""
    assert check.file is not None
    report = audit(check.file)
    faults = [str(fault) for fault in report.faults]
    if faults:
        return faults
    (member,) = report.members
    for expected in check.expect:
        cases = [case for case in member.cases if expected.case in (None, case.case)]
        if not cases:
            faults.append(f"no case {expected.case!r}")
        faults += _faults((expected, case.values[expected.symbol]) for case in cases)
    return faults + _finding_faults(check, report)


def run_steel(steel: Steel) -> list[str]:
    """The faults of a table of areas."""
    faults = _faults((expected, bar_area(count, diameter)) for count, diameter, expected in steel.bars)
    return faults + _faults(
        (expected, link_area(legs, diameter, spacing)) for legs, diameter, spacing, expected in steel.links
    )


def bar_area(count: int, diameter: float) -> float:
    """Area in mm2 that the tool measures for bars in the bottom of a wide beam."""
    return float(measured(f"{{face: bottom, count: {count}, diameter: {diameter:g}}}")["A_s_all"])


def link_area(legs: int, diameter: float, spacing: float) -> float:
    """Area of all legs over the spacing in mm2/mm that the tool measures."""
    sets = f"{{mark: L, diameter: {diameter:g}, spacing: {spacing:g}, legs: {legs}, place: perimeter}}"
    return float(measured("{face: bottom, count: 2, diameter: 12}", sets)["A_sw_s_all"])


def measured(
    bars: str, links: str = "{mark: L, diameter: 8, spacing: 200, legs: 2, place: perimeter}"
) -> Any:
    """What is measured on a wide beam with these bars and links."""
    text = f"""\
format: 1
member: W
section: {{shape: rectangle, b: 3000, h: 1000}}
materials: {{f_ck: 30, f_yk: 500}}
cover: 30
links: [{links}]
bars: [{bars}]
cases: [{{name: C, V_Ed: 1, T_Ed: 0, M_Ed: 0}}]
"""
    return measure(load_text(text, "wide.yaml")).inputs


def above_remark(report: AuditReport) -> list[Finding]:
    """The findings of a report that need an answer."""
    return [
        finding
        for member in report.members
        for finding in member.findings
        if finding.draft.gravity != "remark"
    ]


def _finding_faults(check: Check, report: AuditReport) -> list[str]:
    faults: list[str] = []
    found = {(f.draft.rule, f.draft.quantity): f.draft.ratio for f in above_remark(report)}
    wanted = {(entry["rule"], entry["quantity"]): entry for entry in check.findings}
    faults += [f"found besides: {rule} on {quantity}" for rule, quantity in found.keys() - wanted.keys()]
    for key, entry in wanted.items():
        ratio = found.get(key)
        if ratio is None or abs(ratio / entry["ratio"] - 1) > entry["within"]:
            faults.append(f"{key[0]} on {key[1]}: expected ratio {entry['ratio']:g}, found {ratio}")
    return sorted(faults)


def _faults(pairs: Iterable[tuple[Expected, Any]]) -> list[str]:
    return [fault for expected, value in pairs if (fault := expected.fault(float(value))) is not None]


def inside(text: object) -> float:
    """`"300 mm"`, or a bare number, in inside units."""
    number, _, unit = str(text).partition(" ")
    return float(number) * UNITS[unit or "-"][1]


def _open(path: Path) -> Mapping[str, Any]:
    record: Mapping[str, Any] = yaml.safe_load(path.read_text(encoding="utf-8"))
    if record.get("format") != 1 or set(record) - {"format", "about", "checks", "tables", "steel"}:
        raise ValueError(f"{path.name}: not a file of published numbers, format 1")
    return record


def _origin(entry: Mapping[str, Any], path: Path, others: set[str]) -> Origin:
    unknown = set(entry) - ABOUT - others
    if unknown or entry["status"] not in STATUSES:
        raise ValueError(f"{path.name}: {entry.get('id')}: {sorted(unknown) or entry['status']}")
    annex = entry.get("annex", "recommended")
    if annex.endswith(".yaml"):
        annex = (path.parent / annex).resolve().as_posix()
    extra = (path.parent / entry["extra"]).resolve() if "extra" in entry else None
    layers = tuple(entry.get("layers", ["rectangle"]))
    return Origin(entry["id"], entry["title"], entry["source"], entry["status"], annex, extra, layers)


def _check(entry: Mapping[str, Any], path: Path) -> Check:
    origin = _origin(entry, path, {"given", "file", "expect", "findings"})
    given = {symbol: inside(value) for symbol, value in entry.get("given", {}).items()}
    file = (path.parent / entry["file"]).resolve() if "file" in entry else None
    expect = tuple(_expected(item) for item in entry["expect"])
    return Check(origin, given, file, expect, tuple(entry.get("findings", ())))


def _cells(table: Mapping[str, Any], path: Path) -> list[Check]:
    """One check for each cell, named after its row and column."""
    origin = _origin(table, path, {"given", "along", "series"})
    along = table["along"]
    checks: list[Check] = []
    for row, series in enumerate(table["series"], 1):
        constant = {**table.get("given", {}), **series.get("given", {})}
        item = {key: value for key, value in series.items() if key != "given"}
        for value, published in zip(along["values"], series["published"], strict=True):
            name = f"{origin.id}-{row}-{along['symbol']}-{value}"
            given = {**constant, along["symbol"]: f"{value} {along['unit']}"}
            expected = _expected({**item, "published": published})
            inner = {symbol: inside(text) for symbol, text in given.items()}
            checks.append(Check(replace(origin, id=name), inner, None, (expected,)))
    return checks


def _steel(entry: Mapping[str, Any], path: Path) -> Steel:
    origin = _origin(entry, path, {"counts", "rows", "links", "within", "by"})
    rough = {"symbol": "A_s", "unit": "mm2", "within": entry.get("within", 0), "by": entry.get("by", 0)}
    bars = tuple(
        (count, float(diameter), _expected({**rough, "published": area}))
        for diameter, row in entry.get("rows", {}).items()
        for count, area in zip(entry["counts"], row, strict=True)
    )
    sizes = ("legs", "diameter", "spacing")
    links = tuple(
        (*(item[key] for key in sizes), _expected({"symbol": "A_sw_s", **_without(item, sizes)}))
        for item in entry.get("links", [])
    )
    return Steel(origin, bars, links)


def _without(item: Mapping[str, Any], keys: Iterable[str]) -> dict[str, Any]:
    return {key: value for key, value in item.items() if key not in keys}


def _expected(item: Mapping[str, Any]) -> Expected:
    if set(item) - EXPECTED:
        raise ValueError(f"unknown keys {sorted(set(item) - EXPECTED)}")
    published = None if item["published"] == "undefined" else float(item["published"])
    if published is not None and not ("within" in item or "by" in item):
        raise ValueError(f"{item['symbol']}: needs an allowance, within or by")
    numbers = {"within": 0.0, "by": 0.0, "ratio": 1.0}
    numbers |= {key: float(item[key]) for key in numbers if key in item}
    return Expected(item["symbol"], published, item["unit"], **numbers, case=item.get("case"))
