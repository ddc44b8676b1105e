"""Which ending of a file makes which form of the report; what a form needs is imported when it is asked for."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path
from typing import TYPE_CHECKING

from checker.errors import UsageError

if TYPE_CHECKING:
    from checker.report.audit_report import AuditReport

Writer = Callable[["AuditReport", bool], str | bytes]
RESULTS = ("results", "quantities")
"""Words in the name of a .csv file that ask for the recomputed quantities; any other is the comment sheet."""


def writer_of(path: str) -> Writer:
    """What writes a file of this name.

    Raises:
        UsageError: an ending that nothing is written for.
    """
    kind = Path(path).suffix.lower()
    if kind not in WRITERS:
        shown = kind or "a file without an ending"
        raise UsageError(f"{path}: don't know how to write {shown}; known are {', '.join(WRITERS)}")
    if kind == ".csv" and any(word in Path(path).stem.lower() for word in RESULTS):
        return _results_csv
    return WRITERS[kind]


def _json(report: AuditReport, workings: bool) -> str:
    return report.to_json()


def _text(report: AuditReport, workings: bool) -> str:
    return report.text(workings=workings)


def _html(report: AuditReport, workings: bool) -> str:
    from checker.page.page import html_of

    return html_of(report)


def _pdf(report: AuditReport, workings: bool) -> bytes:
    from checker.outputs.printed import pdf_of

    return pdf_of(report)


def _markdown(report: AuditReport, workings: bool) -> str:
    from checker.outputs.markdown import markdown_of

    return markdown_of(report)


def _comments_csv(report: AuditReport, workings: bool) -> str:
    from checker.outputs.comments import comments_csv

    return comments_csv(report)


def _comments_xlsx(report: AuditReport, workings: bool) -> bytes:
    from checker.outputs.comments import comments_xlsx

    return comments_xlsx(report)


def _results_csv(report: AuditReport, workings: bool) -> str:
    return str(report.quantities_frame().to_csv(index=False, lineterminator="\n"))


def _results_parquet(report: AuditReport, workings: bool) -> bytes:
    import io

    stream = io.BytesIO()
    try:
        report.quantities_frame().to_parquet(stream, index=False)
    except ImportError:
        raise UsageError("a .parquet file needs pyarrow: pip install 'samestrut[parquet]'") from None
    return stream.getvalue()


WRITERS: dict[str, Writer] = {
    ".json": _json, ".txt": _text, ".html": _html, ".pdf": _pdf, ".md": _markdown, ".csv": _comments_csv,
    ".xlsx": _comments_xlsx, ".parquet": _results_parquet,
}  # fmt: skip
