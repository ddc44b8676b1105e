"""The finished report of a run: what every renderer and every caller from Python works with."""

from __future__ import annotations

from collections import Counter
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any, NamedTuple

from checker.errors import Fault
from checker.review.catalogue import GRAVITIES
from checker.review.drafts import CRASHED
from checker.review.findings import EXIT_CODES, Finding, MemberResult

if TYPE_CHECKING:
    import pandas as pd

    from checker.trail import Trail


class Input(NamedTuple):
    """A file that was audited, with the SHA-256 of its bytes."""

    file: str
    sha256: str


class Stamp(NamedTuple):
    """What a report rests on: tool and version, standard, annex, digest of every rule file."""

    tool: str
    version: str
    standard: str
    annex: str
    digest: str


@dataclass(frozen=True)
class AuditReport:
    """One report over all files of a run.

    Attributes:
        stamp: tool, standard, annex, rules digest.
        inputs: the files audited, in order.
        outcome: "accept", "accept with remarks", "return" or "incomplete".
        members: a result a member.
        faults: what made files unreadable; those files have no member here.
        trail: what became of the findings of an earlier report, where one was given.
    """

    stamp: Stamp
    inputs: tuple[Input, ...]
    outcome: str
    members: tuple[MemberResult, ...]
    faults: tuple[Fault, ...] = ()
    trail: Trail | None = None

    @property
    def findings(self) -> tuple[Finding, ...]:
        """All findings in the order of their numbers."""
        return tuple(finding for member in self.members for finding in member.findings)

    @property
    def counts(self) -> dict[str, int]:
        """How many findings of each gravity."""
        found = Counter(finding.draft.gravity for finding in self.findings)
        return {gravity: found[gravity] for gravity in GRAVITIES}

    @property
    def exit_code(self) -> int:
        """0 accept, 1 return, 2 a file that isn't a valid declared design, 3 a fault of the tool."""
        if any(check.status == CRASHED for member in self.members for check in member.checks):
            return 3
        return 2 if self.faults else EXIT_CODES[self.outcome]

    def document(self) -> dict[str, Any]:
        """The report as plain data, as `schemas/report.schema.json` describes it."""
        from checker.report.document import document_of

        return document_of(self)

    def to_json(self) -> str:
        """The document as JSON text; the same inputs, rules and version give the same text."""
        from checker.report.document import json_text

        return json_text(self)

    def text(self, *, workings: bool = False) -> str:
        """The report for a terminal or a letter."""
        from checker.report.text import text_of

        return text_of(self, workings=workings)

    def findings_frame(self) -> pd.DataFrame:
        """One row a finding, with the columns of the report's findings."""
        import pandas as pd

        rows = [
            {"member": member["member"], "file": member["file"], **finding}
            for member in self.document()["members"]
            for finding in member["findings"]
        ]
        return pd.DataFrame(rows)

    def quantities_frame(self) -> pd.DataFrame:
        """One row a recomputed quantity: member, case, symbol, value, unit, what was declared for it, and the ratio."""
        import pandas as pd

        from checker.report.document import quantity_rows

        columns = ["member", "case", "symbol", "value", "unit", "declared", "ratio"]
        return pd.DataFrame(quantity_rows(self), columns=columns)

    def _repr_html_(self) -> str:
        """How the report shows itself in a notebook: outcome and counts, and a row a finding."""
        from html import escape

        rows = "".join(
            f"<tr><td>{f.number}</td><td>{f.draft.gravity}</td><td>{escape(f.draft.says)}</td></tr>"
            for f in self.findings
        )
        head = "<tr><th>No.</th><th>gravity</th><th>finding</th></tr>"
        return f"<p><b>{escape(self.outcome)}</b></p><table>{head}{rows}</table>"
