"""The comment sheet, Markdown, PDF and the recomputed quantities: whole, readable by others, and harmless."""

from __future__ import annotations

import csv
import io
import shutil
from pathlib import Path

import openpyxl
import pandas as pd
import pytest
from markdown_it import MarkdownIt
from python_calamine import CalamineWorkbook

from checker import audit, load
from checker.cli import main
from checker.errors import UsageError
from checker.outputs.comments import COLUMNS, RESPONSE_STATES, comment_rows, comments_csv, comments_xlsx
from checker.outputs.markdown import markdown_of, plain
from checker.outputs.writers import writer_of
from checker.progress import progress_on_terminal

EXAMPLES = Path(__file__).parents[2] / "examples/market-hall"
FLAWED = [EXAMPLES / "canopy-beam-dangerous.yaml", EXAMPLES / "edge-beam-mistakes.yaml"]
HOSTILE = [
    "=1+1",
    "+1",
    "-1",
    "@x",
    "<script>alert(1)</script>",
    "a|b`c`\n# d",
    "\u202etxt",
    "x" * 40_000,
    "\x00\x07ok",
]


def hostile(word: str):
    design = load(FLAWED[0])
    return audit(design._replace(member=word))


def test_the_sheet_opens_with_two_readers_and_keeps_every_value():
    report = audit(FLAWED)
    rows = comment_rows(report)
    assert [row[0] for row in rows] == [finding.number for finding in report.findings]
    book = openpyxl.load_workbook(io.BytesIO(comments_xlsx(report)))
    sheet = book["Comments"]
    read = [["" if cell is None else cell for cell in row] for row in sheet.iter_rows(values_only=True)]
    assert read == [list(COLUMNS), *rows]
    assert sheet.freeze_panes == "B2"
    assert sheet.auto_filter.ref
    lists = {rule.formula1 for rule in sheet.data_validations.dataValidation}
    assert f'"{",".join(RESPONSE_STATES)}"' in lists
    other = (
        CalamineWorkbook.from_filelike(io.BytesIO(comments_xlsx(report)))
        .get_sheet_by_name("Comments")
        .to_python()
    )
    assert [[int(c) if isinstance(c, float) else c for c in row][:9] for row in other[1:]] == [
        row[:9] for row in rows
    ]


def test_the_sheet_is_the_same_twice():
    report = audit(FLAWED)
    assert comments_xlsx(report) == comments_xlsx(report)


@pytest.mark.parametrize("word", HOSTILE)
def test_hostile_words_stay_text(word):
    report = hostile(word)
    cell = openpyxl.load_workbook(io.BytesIO(comments_xlsx(report)))["Comments"]["C2"]
    assert cell.data_type == "s"
    assert cell.value.startswith("".join(c for c in word[:100] if c >= " " or c == "\n"))
    rows = list(csv.reader(io.StringIO(comments_csv(report), newline="")))
    assert not rows[1][2].startswith(("=", "+", "-", "@"))
    assert rows[1][2].lstrip("'") == word
    tokens = MarkdownIt("commonmark").enable("table").parse(markdown_of(report))
    assert not [token for token in tokens if token.type in ("html_block", "html_inline")]
    assert not [c for token in tokens for c in token.children or () if c.type == "html_inline"]


def test_markdown_tables_have_as_many_cells_in_every_row():
    html = MarkdownIt("commonmark").enable("table").render(markdown_of(audit(FLAWED)))
    assert html.count("<table>") == len(FLAWED)
    for table in html.split("<table>")[1:]:
        rows = table.split("</table>")[0].split("<tr>")[1:]
        assert {row.count("<td") + row.count("<th>") for row in rows} == {8}


def test_markdown_says_what_was_written():
    words = "a|b <i> *c* `d` [e](f) #g"
    shown = MarkdownIt("commonmark").parse(plain(words))[1].children
    assert "".join(token.content for token in shown) == words


def test_every_quantity_has_its_row(tmp_path):
    report = audit(FLAWED)
    frame = report.quantities_frame()
    assert len(frame) == sum(len(case.values) for member in report.members for case in member.cases)
    row = frame[(frame.member == "CB-03") & (frame.symbol == "A_sw_s_total")].iloc[0]
    assert row.ratio == pytest.approx(row.declared / row.value)
    for name in ("results.csv", "q.parquet"):
        main(["audit", *map(str, FLAWED), "-q", "-o", str(tmp_path / name)])
        read = pd.read_csv(tmp_path / name) if name.endswith("csv") else pd.read_parquet(tmp_path / name)
        assert list(read.columns) == list(frame.columns)
        assert read.value.to_numpy() == pytest.approx(frame.value.astype(float).to_numpy(), nan_ok=True)


def test_a_notebook_shows_the_report():
    shown = hostile("<script>")._repr_html_()
    assert "return" in shown
    assert "<script>" not in shown


def test_an_unknown_ending_names_the_known_ones():
    with pytest.raises(
        UsageError, match=r"known are \.json, \.txt, \.html, \.pdf, \.md, \.csv, \.xlsx, \.parquet"
    ):
        writer_of("report.doc")


def test_pdf_holds_every_number(tmp_path):
    if shutil.which("chromium") is None:
        pytest.skip("no chromium on this machine: apt-get install chromium")
    from pypdf import PdfReader

    target = tmp_path / "report.pdf"
    main(["audit", *map(str, FLAWED), "-q", "-o", str(target)])
    reader = PdfReader(target)
    text = " ".join(page.extract_text() for page in reader.pages)
    assert all(f"No. {finding.number} " in text for finding in audit(FLAWED).findings)
    assert reader.outline
    assert reader.root_object["/MarkInfo"]["/Marked"]


def test_progress_is_silent_where_nobody_looks(capsys, monkeypatch):
    assert progress_on_terminal(quiet=False) is None
    monkeypatch.setattr("sys.stderr.isatty", lambda: True)
    assert progress_on_terminal(quiet=True) is None
    show = progress_on_terminal(quiet=False)
    assert show is not None
    monkeypatch.setattr("checker.progress.AFTER", 0.0)
    monkeypatch.setattr("checker.progress.EVERY", 0.0)
    show(3, 10, "beam.yaml")
    assert "3 of 10 files" in capsys.readouterr().err


def test_progress_is_told_of_every_file():
    told: list[tuple[int, int]] = []
    audit(FLAWED, progress=lambda done, total, name: told.append((done, total)))
    assert told == [(0, 2), (1, 2), (2, 2)]
