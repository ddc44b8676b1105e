"""Opening a rule file (sheet, layers, checks): its table of keys, or every fault of its form."""

from __future__ import annotations

from pathlib import Path

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
