"""Whether a log holds: every line an entry, every digest its own, every entry bound to the one before."""

from __future__ import annotations

from pathlib import Path

from checker.log.entry import FIRST, digest_of, read_entry
from checker.log.journal import BrokenLogError, lines


def verify(path: Path, head: str | None = None) -> tuple[int, str]:
    """How many entries hold, and the digest of the last, the log's head.

    Args:
        path: the log.
        head: the head that was noted elsewhere; only with it does a log show that nothing was cut off at its end.

    Raises:
        BrokenLogError: names the first entry that doesn't hold and why.
    """
    before, count = FIRST, 0
    for number, raw in lines(path):
        if not raw.endswith(b"\n"):
            raise BrokenLogError(f"{path.name}, line {number}: torn: it has no end")
        try:
            entry = read_entry(raw[:-1])
        except ValueError as error:
            raise BrokenLogError(f"{path.name}, line {number}: {error}") from None
        if entry["digest"] != digest_of(entry):
            raise BrokenLogError(f"{path.name}, entry {number}: was changed: it does not match its digest")
        if entry["sequence"] != number:
            raise BrokenLogError(f"{path.name}, entry {number}: says it is number {entry['sequence']}")
        if entry["before"] != before:
            raise BrokenLogError(f"{path.name}, entry {number}: does not follow the entry before it")
        before, count = entry["digest"], number
    if head is not None and head != before:
        raise BrokenLogError(
            f"{path.name}: its head is {before[:16]}…, not the one noted; entries were cut off or added"
        )
    return count, before
