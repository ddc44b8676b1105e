"""`python -m tests.report.rewrite`: writes the expected report texts anew. Read the diff before you commit it."""

from __future__ import annotations

import contextlib
import io
import re
from pathlib import Path

from checker.cli import main

EXPECTED = Path(__file__).parent / "expected"
FOLDER = Path("examples/market-hall")


def rewrite() -> None:
    for path in sorted(FOLDER.iterdir()):
        out, err = io.StringIO(), io.StringIO()
        with contextlib.redirect_stdout(out), contextlib.redirect_stderr(err):
            main(["audit", "-v", path.as_posix()])
        text = re.sub(r"(rules|sha256) [0-9a-f]{16}", r"\1 …", out.getvalue()) or err.getvalue()
        (EXPECTED / f"{path.name}.txt").write_text(text, encoding="utf-8")


if __name__ == "__main__":
    rewrite()
