"""One entry of the log: its fields, its canonical bytes, and its digest.

- A line is the entry as JSON with sorted keys, no spaces, UTF-8; nothing else is a valid line.
- `digest` is the SHA-256 of the line without its own digest; `before` is the digest of the entry before, or 64 zeros.
"""

from __future__ import annotations

import hashlib
import json
from collections.abc import Mapping
from typing import Any

FIRST = "0" * 64
FIELDS = (
    "sequence", "time", "action", "person", "role", "member", "document", "revision", "digests", "outcome", "counts",
    "open", "note", "before", "digest",
)  # fmt: skip


def canonical(fields: Mapping[str, Any]) -> bytes:
    """The bytes of an entry, without the end of the line."""
    return json.dumps(fields, sort_keys=True, separators=(",", ":"), ensure_ascii=False).encode()


def digest_of(fields: Mapping[str, Any]) -> str:
    """The digest of an entry over everything but itself."""
    return hashlib.sha256(canonical({k: v for k, v in fields.items() if k != "digest"})).hexdigest()


def sealed(fields: Mapping[str, Any], sequence: int, before: str) -> dict[str, Any]:
    """The entry with its place in the chain and its digest."""
    entry = {**fields, "sequence": sequence, "before": before}
    return {**entry, "digest": digest_of(entry)}


def read_entry(line: bytes) -> dict[str, Any]:
    """An entry from its line.

    Raises:
        ValueError: the line is not an entry in canonical form.
    """
    try:
        entry = json.loads(line)
    except (ValueError, UnicodeDecodeError):
        raise ValueError("is not an entry (not JSON)") from None
    if not isinstance(entry, dict) or set(entry) != set(FIELDS):
        raise ValueError("is not an entry (its fields are not those of an entry)")
    if canonical(entry) != line:
        raise ValueError("is not written as an entry is")
    return entry
