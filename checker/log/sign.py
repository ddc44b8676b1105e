"""Making an entry from a report: what it says of members, outcome and open findings, and when approval is refused."""

from __future__ import annotations

import hashlib
from collections.abc import Mapping
from datetime import UTC, datetime
from pathlib import Path
from typing import Any

from checker.errors import UsageError
from checker.log.journal import append, entries
from checker.saved import read_saved

Fields = dict[str, Any]


def add(
    log: Path, action: str, person: str, role: str, report: Path, *, note: str = "", same_person: str = "",
    now: datetime | None = None,
) -> Fields:  # fmt: skip
    """Add an entry about a report.

    Args:
        log: the log's file.
        action: one of `checker.log.ACTIONS`.
        report: the report's JSON file.
        same_person: why the approver may be the checker.
        now: the time to write (the present one where left out).

    Raises:
        UsageError: the report can't be read, or approval is refused.
    """
    document, digest = read_saved(report)
    fields = {**_about(document), "digests": _digests(document, digest)}
    if action == "approved":
        _may_approve(log, person, document, report, digest, same_person)
    when = (now or datetime.now(UTC)).strftime("%Y-%m-%dT%H:%M:%SZ")
    said = " ".join(
        filter(None, (note, f"Checker and approver are one person: {same_person}" if same_person else ""))
    )
    return append(
        log, {**fields, "time": when, "action": action, "person": person, "role": role, "note": said}
    )


def _about(document: Mapping[str, Any]) -> Fields:
    members = document["members"]
    unique = dict.fromkeys
    return {
        "member": ", ".join(unique(member["member"] for member in members)),
        "document": ", ".join(unique(member["file"] for member in members)),
        "revision": ", ".join(unique(member["revision"] for member in members if member["revision"])),
        "outcome": document["outcome"],
        "counts": document["counts"],
        "open": [
            finding["number"] for member in members for finding in member["findings"] if finding["gravity"] != "remark"
        ],
    }  # fmt: skip


def _digests(document: Mapping[str, Any], digest: str) -> Fields:
    inputs = {item["file"]: item["sha256"] for item in document["inputs"]}
    return {"report": digest, "rules": document["rules"]["digest"], "inputs": inputs}


def _may_approve(
    log: Path, person: str, document: Mapping[str, Any], report: Path, digest: str, same_person: str
) -> None:
    unsafe = [
        f["number"] for member in document["members"] for f in member["findings"] if f["gravity"] == "unsafe"
    ]
    if unsafe:
        raise UsageError(
            f"not approved: finding{'s' * (len(unsafe) > 1)} No. {', '.join(map(str, unsafe))} unsafe"
        )
    if document["outcome"] == "incomplete":
        raise UsageError("not approved: the report is incomplete")
    for item in document["inputs"]:
        path = report.parent / item["file"] if not Path(item["file"]).exists() else Path(item["file"])
        if not path.exists() or hashlib.sha256(path.read_bytes()).hexdigest() != item["sha256"]:
            raise UsageError(f"not approved: {item['file']} is no longer what the report was made from")
    checked = [
        entry
        for entry in (entries(log) if log.exists() else ())
        if entry["action"] == "checked" and entry["digests"]["report"] == digest
    ]
    if not checked:
        raise UsageError("not approved: nobody has logged this report as checked")
    if checked[-1]["person"] == person and not same_person:
        raise UsageError(
            f"not approved: {person} checked it; say why with --same-person-because if that is meant"
        )
