"""The comment sheet of the trade: a row a finding, with room for the designer's response and the checker's closing.

- The columns and the words for a response are lasting: the filled-in sheet is read back by them.
- A cell that a spreadsheet would take for a formula is text: marked as such in .xlsx, after an apostrophe in .csv.
"""

from __future__ import annotations

import csv
import io
from datetime import datetime
from typing import TYPE_CHECKING

from checker.errors import UsageError

if TYPE_CHECKING:
    from checker.report.audit_report import AuditReport

COLUMNS: dict[str, int] = {
    "No.": 6, "Id": 12, "Member": 14, "Case": 14, "Place": 26, "Clause": 18, "Gravity": 11, "Comment": 60,
    "Action": 36, "Response state": 16, "Response": 40, "Responded by": 16, "Responded on": 14, "Closing": 14,
    "Closed by": 16, "Closed on": 14,
}  # fmt: skip
"""Heading -> width in characters; those from "Response state" on are left empty."""

RESPONSE_STATES = ("corrected", "explained", "disagreed", "open")
CLOSINGS = ("closed", "still open")
FORMULA_STARTS = ("=", "+", "-", "@", "\t", "\r")


def comment_rows(report: AuditReport) -> list[list[str | int]]:
    """One row a finding, in the order of the numbers; the columns to fill in are empty."""
    rows: list[list[str | int]] = []
    for member in report.members:
        for finding in member.findings:
            draft = finding.draft
            place, case = draft.places(member.file), ", ".join(draft.case_names)
            told = f" (carried from No. {finding.carried_from})" if finding.carried_from else ""
            filled: list[str | int] = [finding.number, finding.id, member.member, case, place, draft.clause, draft.gravity,
                      draft.says + told, draft.todo]  # fmt: skip
            rows.append([*filled, *[""] * (len(COLUMNS) - len(filled))])
    return rows


def comments_csv(report: AuditReport) -> str:
    """The sheet as CSV (RFC 4180, UTF-8)."""
    stream = io.StringIO()
    writer = csv.writer(stream, lineterminator="\r\n")
    writer.writerow(COLUMNS)
    for row in comment_rows(report):
        writer.writerow(
            [
                "'" + cell if isinstance(cell, str) and cell.startswith(FORMULA_STARTS) else cell
                for cell in row
            ]
        )
    return stream.getvalue()


def comments_xlsx(report: AuditReport) -> bytes:
    """The sheet as XLSX: headings that stay, wrapped text, filters, lists to choose a state from; the same bytes twice.

    Raises:
        UsageError: the extra that writes it is missing.
    """
    try:
        import xlsxwriter
    except ImportError:
        raise UsageError("an .xlsx file needs the extra: pip install 'samestrut[sheets]'") from None
    stream = io.BytesIO()
    options = {
        "in_memory": True,
        "strings_to_formulas": False,
        "strings_to_urls": False,
        "strings_to_numbers": False,
    }
    with xlsxwriter.Workbook(stream, options) as book:
        book.set_properties({"title": "Comment sheet", "created": datetime(2004, 12, 1)})
        sheet = book.add_worksheet("Comments")
        head = book.add_format({"bold": True, "text_wrap": True, "valign": "top", "bottom": 2})
        wrapped = book.add_format({"text_wrap": True, "valign": "top"})
        for column, (name, width) in enumerate(COLUMNS.items()):
            sheet.set_column(column, column, width, wrapped)
            sheet.write_string(0, column, name, head)
        rows = comment_rows(report)
        for number, row in enumerate(rows, 1):
            for column, cell in enumerate(row):
                if isinstance(cell, int):
                    sheet.write_number(number, column, cell, wrapped)
                elif cell:
                    sheet.write_string(number, column, _cell(cell), wrapped)
        last = max(len(rows), 1)
        names = list(COLUMNS)
        for name, words in (("Response state", RESPONSE_STATES), ("Closing", CLOSINGS)):
            column = names.index(name)
            sheet.data_validation(1, column, last, column, {"validate": "list", "source": list(words)})
        sheet.freeze_panes(1, 1)
        sheet.autofilter(0, 0, last, len(COLUMNS) - 1)
        sheet.set_landscape()
        sheet.set_paper(9)
        sheet.fit_to_pages(1, 0)
        sheet.repeat_rows(0)
    return stream.getvalue()


def _cell(text: str) -> str:
    """What a cell can hold: no control characters, at most 32,767 characters, and said where it was cut."""
    kept = "".join(c for c in text if c >= " " or c in "\n\t")
    return kept if len(kept) <= 32_767 else kept[:32_740] + " … (cut to fit the cell)"
