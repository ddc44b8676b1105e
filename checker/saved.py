"""A report that was written to a file, read back: what a later run and the sign-off log start from."""

from __future__ import annotations

import hashlib
import json
from pathlib import Path
from typing import Any

from checker.errors import UsageError

_KEYS = {"tool", "rules", "inputs", "outcome", "counts", "members"}


def read_saved(path: Path) -> tuple[dict[str, Any], str]:
    """A report's document, and the SHA-256 of its bytes.

    Raises:
        UsageError: it can't be read, or is no report.
    """
    try:
        raw = path.read_bytes()
        document = json.loads(raw)
    except (OSError, ValueError) as error:
        raise UsageError(f"{path}: can't be read as a report: {error}") from None
    if not isinstance(document, dict) or not set(document) >= _KEYS:
        raise UsageError(f"{path}: is not a report (expected what samestrut audit -o report.json writes)")
    return document, hashlib.sha256(raw).hexdigest()
