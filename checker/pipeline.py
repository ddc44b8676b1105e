"""From files to a report: the one way through all stages, for a file, for many, and for a design in memory.

- `load` reads one declared design; `audit` takes paths or designs and gives an `AuditReport`.
- A file that can't be read is kept among the report's faults; the others are still audited.
"""

from __future__ import annotations

import os
from collections.abc import Iterable, Iterator, Mapping
from contextlib import suppress
from functools import cache, partial
from pathlib import Path
from typing import NamedTuple

from checker import __version__
from checker.declared.build import load_file
from checker.declared.model import NOWHERE, Design
from checker.errors import Fault, InputFaults, UsageError
from checker.geometry.measure import Measured, measure
from checker.progress import Progress
from checker.report.audit_report import AuditReport, Input, Stamp
from checker.review.catalogue import Catalogue, load_catalogue
from checker.review.claims import case_row, claims_of, member_row
from checker.review.drafts import Check, Draft
from checker.review.engine import Engine, annex_path, engine, shape_layers, sheet_under
from checker.review.evaluated import evaluate
from checker.review.findings import INCOMPLETE, CaseResult, MemberResult, number_findings, outcome_of, worst
from checker.review.judge import judge
from checker.review.subject import Subject, subject_of
from checker.review.variants import variants_of
from checker.review.window import reserves_of
from checker.sheet.rulefile import rules_digest

SUFFIXES = (".yaml", ".yml", ".json")
STANDARD = "EN 1992-1-1:2004"
NOT_SHOWN = ("section", "flag")

Item = str | Path | Design


class Options(NamedTuple):
    """What a run may change: an annex for all files, an office's file of rules or layers."""

    annex: str | None = None
    rules: Path | None = None


def load(path: str | Path) -> Design:
    """Read one declared design.

    Raises:
        InputFaults: every fault of the file, each with line and column.
    """
    return load_file(Path(path), _named(Path(path)))


def _named(path: Path) -> str:
    """A file's name in messages and reports: relative to where the run was started."""
    if path.is_absolute():
        with suppress(ValueError):  # another drive
            path = Path(os.path.relpath(path))
    return path.as_posix()


def audit(
    items: Item | Iterable[Item],
    *,
    annex: str | None = None,
    rules: str | Path | None = None,
    progress: Progress | None = None,
    previous: str | Path | None = None,
    renamed: Mapping[str, str] | None = None,
) -> AuditReport:
    """Audit declared designs and give one report over all of them.

    Args:
        items: files, folders, or designs already loaded.
        annex: national layer to use instead of the one each file names (a name or a layer file).
        rules: a file of rules and layers of an office.
        progress: called before each file and at the end.
        previous: an earlier report (JSON) whose numbers are kept.
        renamed: old name of a member in it -> its name now.

    Raises:
        RuleFaults: the annex or the rule file can't be used.
    """
    options = Options(annex, Path(rules) if rules is not None else None)
    catalogue = load_catalogue(options.rules, options.rules.name if options.rules else "")
    if annex is not None or rules is not None:
        sheet_under(
            STANDARD, annex or "recommended", (), options.rules
        )  # a fault here is the run's, not a file's
    members: list[MemberResult] = []
    inputs: list[Input] = []
    faults: list[Fault] = []
    annexes: dict[str, None] = {}
    every = list(_expanded([items] if isinstance(items, str | Path | Design) else items, faults))
    for done, item in enumerate(every):
        if progress is not None:
            progress(done, len(every), item.member if isinstance(item, Design) else Path(item).name)
        try:
            design = item if isinstance(item, Design) else load(item)
            used = _annex_of(design, options)
            start = 1 + sum(len(member.findings) for member in members)
            members.append(audit_member(design, measure(design), catalogue, options, start))
        except InputFaults as error:
            faults += error.faults
            continue
        annexes[used] = None
        inputs.append(Input(design.file, design.sha256))
    if progress is not None:
        progress(len(every), len(every), "")
    outcome = worst([*(member.outcome for member in members), *([INCOMPLETE] if faults else [])])
    stamp = _stamp(annexes, options)
    if previous is None:
        return AuditReport(stamp, tuple(inputs), outcome, tuple(members), tuple(faults))
    from checker.saved import read_saved
    from checker.trail import continued

    said = {
        "standard": stamp.standard,
        "annex": stamp.annex,
        "digest": stamp.digest,
        "version": stamp.version,
    }
    before, _ = read_saved(Path(previous))
    kept, trail = continued(members, before, renamed or {}, said)
    return AuditReport(stamp, tuple(inputs), outcome, kept, tuple(faults), trail)


def audit_member(
    design: Design, measured: Measured, catalogue: Catalogue, options: Options, start: int = 1
) -> MemberResult:
    """Recompute, compare and judge one member; findings are numbered from `start`."""
    compiled = engine_for(design, measured, options)
    row = member_row(design, measured)
    inputs = frozenset((*compiled.scratch.inputs, *compiled.follow.inputs))
    checks: dict[tuple[str, str | None], Check] = {}
    drafts: list[Draft] = []
    cases: list[CaseResult] = []
    variants = cache(partial(variants_of, design))
    for case in design.cases:
        claims = claims_of(case, measured)
        case_values = evaluate(compiled, case, claims, case_row(row, case, claims, inputs))
        subject = subject_of(case_values, catalogue, measured.facts, design.places, variants)
        found, drafted = judge(subject)
        for check in found:
            _keep(checks, check)
        drafts += drafted
        cases.append(_result(subject, compiled))
    findings = number_findings(design.member, drafts, start)
    outcome = outcome_of((finding.draft.gravity for finding in findings), checks.values())
    revision = design.submission.get("revision", "")
    return MemberResult(
        design.member, design.file, revision, outcome, findings, tuple(checks.values()), tuple(cases),
        design, measured,
    )  # fmt: skip


def engine_for(design: Design, measured: Measured, options: Options) -> Engine:
    """The compiled sheet that a design's standard, annex, shape and links call for."""
    return engine(design.standard, _annex_of(design, options), layers_for(measured), options.rules)


def layers_for(measured: Measured) -> tuple[str, ...]:
    """The layers that a measured section and its links call for."""
    aslant = (
        abs(measured.inputs["S_sin"] - measured.inputs["A_sw_s_all"]) > 1e-9 * measured.inputs["A_sw_s_all"]
    )
    aslant = aslant or measured.inputs["S_cos"] > 1e-9
    return shape_layers(measured.shape, aslant=aslant, parts=measured.inputs["torsion_parts"] > 0)


def _annex_of(design: Design, options: Options) -> str:
    """The annex of a run, else the file's own; a layer file is looked for beside the design that names it.

    Raises:
        InputFaults: the file names an annex that doesn't exist.
    """
    if options.annex is not None:
        return options.annex
    beside = Path(design.file).parent / design.annex
    if design.annex.endswith((".yaml", ".yml")) and not Path(design.annex).is_file() and beside.is_file():
        return beside.as_posix()
    try:
        annex_path(design.annex)
    except UsageError as error:
        place = design.places.get("annex", NOWHERE)
        raise InputFaults([Fault(design.file, place.line, place.column, f"annex: {error}")]) from None
    return design.annex


_ORDER = ("crashed", "fail", "pass", "not checked", "not applicable")


def _keep(checks: dict[tuple[str, str | None], Check], check: Check) -> None:
    """One outcome a rule and case; for member-wide rules the one that says most over all cases."""
    known = checks.get((check.rule, check.case))
    if known is None or _ORDER.index(check.status) < _ORDER.index(known.status):
        checks[check.rule, check.case] = check


def _result(subject: Subject, compiled: Engine) -> CaseResult:
    """The quantities worth showing: all but the inputs that only carry claims, flags and the section itself."""
    quantities = compiled.sheet.quantities
    shown = {
        symbol: float(value)
        for symbol, value in subject.case.scratch.items()
        if symbol in quantities
        and quantities[symbol].unit not in NOT_SHOWN
        and not symbol.endswith("_declared")
        and not symbol.startswith("cot_of_")
        and symbol not in ("unsaid", "one", "nothing")
    }
    units = {symbol: quantities[symbol].unit for symbol in shown}
    claimed = any("theta" in symbol for symbol in subject.case.case.declared)
    reserve = reserves_of(subject.case.scratch)
    return CaseResult(subject.case.case.name, shown, units, subject.window, reserve, claimed)


def _expanded(items: Iterable[Item], faults: list[Fault]) -> Iterator[Item]:
    """Files as they come, folders by their declared designs in order of name; each file once."""
    seen: set[Path] = set()
    for item in items:
        if isinstance(item, Design):
            yield item
            continue
        path = Path(item)
        found = [path]
        if path.is_dir():
            found = sorted(p for p in path.rglob("*") if p.suffix.lower() in SUFFIXES and p.is_file())
            if not found:
                said = f"no declared designs in this folder; expected files that end in {', '.join(SUFFIXES)}"
                faults.append(Fault(_named(path), 1, 1, said))
        for file in found:
            if file.resolve() not in seen:
                seen.add(file.resolve())
                yield file


def _stamp(annexes: Iterable[str], options: Options) -> Stamp:
    outside = tuple(dict.fromkeys(annex_path(annex) for annex in annexes))
    extra = (*outside, *((options.rules,) if options.rules else ()))
    names = ", ".join(dict.fromkeys(Path(annex).name for annex in annexes)) or options.annex or "recommended"
    digest = rules_digest(tuple(path for path in extra if path is not None))
    return Stamp("samestrut", __version__, STANDARD, names, digest)
