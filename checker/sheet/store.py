"""Compiled sheets kept between runs, so that a single audit doesn't read and compile every formula again.

- A file in the user's cache folder, named by a digest of every rule file, of the code that reads and compiles them, and
  of Python's version; a change in any of them makes another name, so nothing stale is ever used.
- Plain data and code objects only (`marshal`, as Python keeps its own compiled modules beside the source).
- Where nothing can be written, or `SAMESTRUT_CACHE` is `off`, everything works as before, a little slower.
"""

from __future__ import annotations

import hashlib
import marshal
import os
import sys
import tempfile
from pathlib import Path
from typing import Any

from checker import __version__

KEPT_AT_MOST = 40  # files; older ones are swept when a new one is written


def key_of(*parts: str) -> str:
    """The name under which something compiled from `parts` is kept."""
    digest = hashlib.sha256("\x1f".join((__version__, sys.version, *parts)).encode())
    for path in sorted(Path(__file__).parent.glob("*.py")):
        digest.update(path.read_bytes())
    return digest.hexdigest()


def recall(key: str) -> Any:
    """What was kept under a key, or None."""
    folder = _folder()
    if folder is None:
        return None
    try:
        return marshal.loads((folder / f"{key}.kept").read_bytes())
    except (OSError, EOFError, ValueError, TypeError):
        return None


def keep(key: str, value: Any) -> None:
    """Keep plain data and code objects; a failure to write is no failure."""
    folder = _folder()
    if folder is None:
        return
    try:
        folder.mkdir(parents=True, exist_ok=True)
        handle, temporary = tempfile.mkstemp(dir=folder, suffix=".part")
        with os.fdopen(handle, "wb") as stream:
            stream.write(marshal.dumps(value))
        os.replace(temporary, folder / f"{key}.kept")
        _sweep(folder)
    except (OSError, ValueError):
        return


def _sweep(folder: Path) -> None:
    kept = sorted(folder.glob("*.kept"), key=lambda path: path.stat().st_mtime)
    for path in kept[:-KEPT_AT_MOST]:
        path.unlink(missing_ok=True)


def _folder() -> Path | None:
    if os.environ.get("SAMESTRUT_CACHE", "").lower() == "off":
        return None
    base = os.environ.get("XDG_CACHE_HOME") or os.environ.get("LOCALAPPDATA")
    try:
        return (Path(base) if base else Path.home() / ".cache") / "samestrut"
    except RuntimeError:
        return None
