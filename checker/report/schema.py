"""The report's public shape as typed models: the source of its JSON Schema, and how a report is read back.

Only loaded where a schema is made or a report is read, never on the way of an audit.
"""

from __future__ import annotations

from typing import Annotated, Any, Literal

from pydantic import BaseModel, ConfigDict, Field

Gravity = Literal["unsafe", "breach", "mismatch", "remark"]
Outcome = Literal["accept", "accept with remarks", "return", "incomplete"]
Digest = Annotated[str, Field(pattern="^[0-9a-f]{64}$")]
Line = Annotated[int, Field(ge=1)]
Angle = Annotated[float, Field(ge=0, le=90, description="degrees")]
Span = Annotated[list[Angle], Field(min_length=2, max_length=2, description="from, to, in degrees")]


class _Model(BaseModel):
    model_config = ConfigDict(extra="forbid", strict=True)


class Tool(_Model):
    name: Literal["samestrut"]
    version: str


class Rules(_Model):
    standard: str
    annex: str
    digest: Digest = Field(description="SHA-256 over every rule file that took part")


class InputFile(_Model):
    file: str = Field(description="relative to where the run was started")
    sha256: Digest


class Counts(_Model):
    unsafe: int = Field(ge=0)
    breach: int = Field(ge=0)
    mismatch: int = Field(ge=0)
    remark: int = Field(ge=0)


class Where(_Model):
    file: str
    line: Line
    column: Line


class Workings(_Model):
    right: str | None
    wrong: str | None


class FindingModel(_Model):
    """One numbered finding; numbers are in `unit`, angles in degrees."""

    number: int = Field(ge=1)
    id: str = Field(pattern="^[0-9a-f]{10}$", description="lasting: digest of member, rule, case, quantity")
    rule: str
    gravity: Gravity
    direction: Literal["unsafe side", "safe side", "either side"]
    case: str | None = Field(description="null where it concerns the member as a whole")
    cases: list[str] = Field(description="the cases it was found in")
    quantity: str | None
    unit: str | None
    declared: float | str | None
    recomputed: float | None
    limit: float | None
    tolerance: float | None
    ratio: float | None = Field(description="declared over recomputed, or provided over limit")
    clause: str
    where: list[Where]
    says: str
    todo: str
    slip: str | None
    slips: list[str]
    shows_in: list[str]
    carried_from: int | None = Field(description="number of the root finding")
    implied_theta: Angle | None
    workings: Workings


class CheckModel(_Model):
    rule: str
    case: str | None
    status: Literal["pass", "fail", "not applicable", "not checked", "crashed"]
    why: str | None
    margin: float | None = Field(description="share of the limit, or of the tolerance, left over")


class QuantityModel(_Model):
    value: float | None
    unit: str


class WindowModel(_Model):
    links: Span | None
    concrete: Span | None
    bars: Span | None
    admissible: Span | None = Field(description="strut angles on which all hold together")


class ReserveModel(_Model):
    """How much all actions together could grow on a strut angle; null factor: without limit."""

    factor: float | None
    theta: Angle | None
    governs: Literal["links", "concrete", "bars"]


class ReservesModel(_Model):
    used: ReserveModel
    best: ReserveModel


class CaseModel(_Model):
    case: str
    quantities: dict[str, QuantityModel]
    window: WindowModel
    holds: Literal["as claimed", "on another angle", "on no angle"]
    reserve: ReservesModel


class BarsModel(_Model):
    """A group of bars: areas in mm2 that the bottom and the top half have of it, sizes in mm."""

    mark: str
    number: int
    diameter: float
    area: float
    bottom: float
    top: float
    chord: Literal["bottom", "top", "both", ""]


class LinksModel(_Model):
    """A set of links: area of all legs for shear and of one for torsion, mm2/mm; sizes in mm."""

    mark: str
    legs: int
    diameter: float
    spacing: float
    shear: float
    torsion: float
    why_not: str


class SteelModel(_Model):
    bars: list[BarsModel]
    links: list[LinksModel]


class MemberModel(_Model):
    member: str
    file: str
    revision: str
    outcome: Outcome
    findings: list[FindingModel]
    checks: list[CheckModel]
    cases: list[CaseModel]
    window: Span | None = Field(description="strut angles that hold in every case")
    steel: SteelModel | None = Field(description="what each group of bars and set of links counts for")


class FaultModel(_Model):
    file: str
    line: Line
    column: Line
    says: str


class StepModel(_Model):
    """What became of one finding of an earlier report, or a new one; values in the shown unit."""

    number: Line
    id: str
    member: str
    rule: str
    state: Literal[
        "new", "still open", "changed for the better", "changed for the worse", "settled", "lost from sight"
    ]
    was: float | None
    now: float | None
    unit: str


class TrailModel(_Model):
    """What became of the findings since an earlier report; `highest` is the highest number ever given."""

    since: str
    highest: int
    steps: list[StepModel]
    differs: list[str]


class ReportModel(_Model):
    """The report of one run of `samestrut audit`."""

    format: Literal[1]
    tool: Tool
    rules: Rules
    inputs: list[InputFile]
    outcome: Outcome
    counts: Counts
    members: list[MemberModel]
    faults: list[FaultModel] = Field(description="what kept files from being audited")
    trail: TrailModel | None = Field(default=None, description="only where an earlier report was given")


def report_schema() -> dict[str, Any]:
    """The JSON Schema (2020-12) of the report; `schemas/report.schema.json` holds the same."""
    schema = ReportModel.model_json_schema()
    return {"$schema": "https://json-schema.org/draft/2020-12/schema", **schema}
