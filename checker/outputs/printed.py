"""The page printed to PDF by a browser that is already on the machine: A4, tagged, with an outline of its headings."""

from __future__ import annotations

import shutil
import tempfile
from pathlib import Path
from typing import TYPE_CHECKING

from checker.errors import UsageError
from checker.page.page import html_of

if TYPE_CHECKING:
    from checker.report.audit_report import AuditReport

BROWSERS = ("chromium", "chromium-browser")


def pdf_of(report: AuditReport) -> bytes:
    """The report as PDF; it holds what the page holds.

    Raises:
        UsageError: the extra or the browser is missing.
    """
    try:
        from playwright.sync_api import sync_playwright
    except ImportError:
        raise UsageError("a .pdf file needs the extra: pip install 'samestrut[pdf]'") from None
    browser = next((found for name in BROWSERS if (found := shutil.which(name))), None)
    if browser is None:
        raise UsageError(
            "a .pdf file is printed by Chromium, which is not installed; print the .html file instead"
        )
    with tempfile.TemporaryDirectory() as folder, sync_playwright() as player:
        page_file = Path(folder) / "report.html"
        page_file.write_text(html_of(report), encoding="utf-8")
        opened = player.chromium.launch(executable_path=browser, args=["--no-sandbox"])
        try:
            page = opened.new_page()
            page.goto(page_file.as_uri())
            page.evaluate("document.querySelectorAll('details').forEach((one) => { one.open = true; })")
            return page.pdf(prefer_css_page_size=True, tagged=True, outline=True)
        finally:
            opened.close()
