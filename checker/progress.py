"""How far a long run has come, on standard error of a terminal; silent anywhere else."""

from __future__ import annotations

import sys
import time
from collections.abc import Callable

Progress = Callable[[int, int, str], None]
"""Called with how many files are done, how many there are, and the one that is next ("" at the end)."""

AFTER, EVERY = 1.0, 0.2  # seconds


def progress_on_terminal(*, quiet: bool) -> Progress | None:
    """Something to call between files; None where nobody is looking."""
    if quiet or not sys.stderr.isatty():
        return None
    start = time.monotonic()
    last = start

    def show(done: int, total: int, name: str) -> None:
        nonlocal last
        now = time.monotonic()
        if now - start < AFTER or (now - last < EVERY and done < total):
            return
        last = now
        left = (now - start) / done * (total - done) if done else 0.0
        words = f"{done} of {total} files, {left:.0f} s left: {name}" if done < total else ""
        sys.stderr.write(f"\r\x1b[K{words[:100]}")
        sys.stderr.flush()

    return show
