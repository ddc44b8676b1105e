"""Rule files (sheet, layers, checks): opening one with every fault of its form, and the digest of them all."""

from __future__ import annotations

import hashlib
from functools import lru_cache
from pathlib import Path

from checker import shipped
from checker.declared.reading import read, read_tree
from checker.declared.tree import Mapping
from checker.errors import Fault, InputFaults, RuleFaults


def open_rules(path: Path, shown_as: str) -> Mapping:
    """The table at the top of a rule file.

    Raises:
        RuleFaults: it can't be read, isn't well formed, or isn't a table.
    """
    try:
        node, faults = read_tree(read(path.read_bytes(), shown_as).text, shown_as)
    except OSError as error:
        raise RuleFaults([Fault(shown_as, 1, 1, f"can't be read: {error.strerror}")]) from None
    except InputFaults as unreadable:
        raise RuleFaults(unreadable.faults) from None
    if faults or not isinstance(node, Mapping):
        raise RuleFaults(faults or [Fault(shown_as, 1, 1, "expected a table of keys")])
    return node


def rules_digest(extra: tuple[Path, ...] = ()) -> str:
    """SHA-256 over every shipped rule file, in order, and the extra ones; it names the rule set in a report."""
    digest = _shipped_rules().copy()
    for path in extra:
        _add(digest, path)
    return digest.hexdigest()


@lru_cache(maxsize=1)
def _shipped_rules() -> hashlib._Hash:
    """The shipped files, read once in a process: they don't change while it runs."""
    digest = hashlib.sha256()
    for path in sorted(shipped.folder("rules").rglob("*.yaml")):
        _add(digest, path)
    return digest


def _add(digest: hashlib._Hash, path: Path) -> None:
    base = shipped.folder("rules")
    name = path.relative_to(base).as_posix() if path.is_relative_to(base) else f"extra/{path.name}"
    content = path.read_bytes().replace(b"\r\n", b"\n")
    digest.update(f"{name}\n{len(content)}\n".encode())
    digest.update(content)
