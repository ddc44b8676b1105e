"""Appending to the log and reading it: locked across processes, on disk before it is said to be.

- An entry is written in one go, flushed and synced, and the folder too when the file is new.
- A last line without its end was torn by a crash: it is set aside in a file of its own and said so, never repaired in
  silence; nothing else is touched.
- Appending reads only the end of the file.
"""

from __future__ import annotations

import os
import sys
from collections.abc import Iterator, Mapping
from contextlib import contextmanager
from pathlib import Path
from typing import Any

from checker.errors import UsageError
from checker.log.entry import FIRST, canonical, digest_of, read_entry, sealed

_CHUNK = 65_536


class BrokenLogError(UsageError):
    """The log doesn't hold; says which entry is the first that doesn't, and why."""


def append(path: Path, fields: Mapping[str, Any]) -> dict[str, Any]:
    """Add one entry; it is on disk when this returns.

    Raises:
        UsageError: the file can't be written.
        BrokenLogError: its last entry doesn't hold, so that nothing may follow it.
    """
    try:
        new = not path.exists()
        with _locked(path) as handle:
            size = _set_aside_torn(path, handle)
            last = _last_entry(handle, size)
            entry = sealed(fields, last["sequence"] + 1 if last else 1, last["digest"] if last else FIRST)
            _write_whole(handle, size, canonical(entry) + b"\n")
            if new:
                _sync_folder(path.parent)
            return entry
    except OSError as error:
        raise UsageError(f"{path}: can't be written: {error.strerror}; nothing was added") from None


def lines(path: Path) -> Iterator[tuple[int, bytes]]:
    """The lines with their numbers, each with its end."""
    try:
        with open(path, "rb") as stream:
            yield from enumerate(stream, 1)
    except OSError as error:
        raise UsageError(f"{path}: can't be read: {error.strerror}") from None


def entries(path: Path) -> Iterator[dict[str, Any]]:
    """The entries, each read for itself; whether the chain holds is for `verify`.

    Raises:
        BrokenLogError: a line that is no entry.
    """
    for number, raw in lines(path):
        try:
            yield read_entry(raw.rstrip(b"\n"))
        except ValueError as error:
            raise BrokenLogError(f"{path}, line {number}: {error}") from None


@contextmanager
def _locked(path: Path) -> Iterator[int]:
    """The file open under a lock that ends with the process, whatever ends that."""
    import fcntl

    handle = os.open(path, os.O_RDWR | os.O_CREAT | os.O_CLOEXEC, 0o644)
    try:
        fcntl.flock(handle, fcntl.LOCK_EX)
        yield handle
    finally:
        os.close(handle)


def _set_aside_torn(path: Path, handle: int) -> int:
    """The size up to the last whole line; what stands behind it is moved to a file beside the log."""
    size = os.fstat(handle).st_size
    whole = _end_of_last_line(handle, size)
    if whole == size:
        return size
    torn = os.pread(handle, size - whole, whole)
    aside = path.with_name(f"{path.name}.torn-{whole}")
    with open(aside, "wb") as stream:
        stream.write(torn)
        stream.flush()
        os.fsync(stream.fileno())
    os.ftruncate(handle, whole)
    os.fsync(handle)
    _sync_folder(path.parent)
    print(
        f"{path}: the last line was torn ({len(torn)} bytes without an end); it is set aside in {aside.name}",
        file=sys.stderr,
    )
    return whole


def _end_of_last_line(handle: int, size: int) -> int:
    """Where the last line end stands, looked for from the end."""
    end = size
    while end > 0:
        start = max(0, end - _CHUNK)
        found = os.pread(handle, end - start, start).rfind(b"\n")
        if found >= 0:
            return start + found + 1
        end = start
    return 0


def _last_entry(handle: int, size: int) -> dict[str, Any] | None:
    if size == 0:
        return None
    before = _end_of_last_line(handle, size - 1)
    line = os.pread(handle, size - before - 1, before)
    try:
        entry = read_entry(line)
    except ValueError as error:
        raise BrokenLogError(f"the last entry {error}; verify the log before adding to it") from None
    if digest_of(entry) != entry["digest"]:
        raise BrokenLogError("the last entry does not match its digest; verify the log before adding to it")
    return entry


def _write_whole(handle: int, size: int, line: bytes) -> None:
    """Write at the end and sync; what was written in part is taken back."""
    try:
        written = 0
        while written < len(line):
            written += os.pwrite(handle, line[written:], size + written)
        os.fsync(handle)
    except OSError:
        os.ftruncate(handle, size)
        raise


def _sync_folder(folder: Path) -> None:
    handle = os.open(folder, os.O_RDONLY)
    try:
        os.fsync(handle)
    finally:
        os.close(handle)
