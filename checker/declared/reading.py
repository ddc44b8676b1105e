"""Text to a tree of nodes, each with its literal text and place; no value is interpreted, no object built.

- A scalar keeps its text as written, so `0300`, `1.50` and `no` reach the checks unharmed.
- Duplicate keys, keys that aren't plain text, tags and merge keys are faults, each at its place.
- Aliases are followed within a bound on the expanded size; one that names what it stands in is refused.
- Bounds: 1 MiB of text, 20 levels, 20,000 nodes; a hostile file costs no more than a big honest one.
"""

from __future__ import annotations

import hashlib
import re
from collections.abc import Iterator
from typing import Any, NamedTuple

import yaml
from yaml.events import AliasEvent, DocumentStartEvent, MappingStartEvent, ScalarEvent, SequenceStartEvent

from checker.declared.json_tokens import tokens
from checker.declared.tree import Mapping, Node, Scalar, Sequence, Tree, UnreadableTreeError
from checker.errors import Fault, InputFaults

__all__ = ["MAX_BYTES", "Mapping", "Node", "Scalar", "Sequence", "Source", "read", "read_tree"]

MAX_BYTES = 1024 * 1024
"""The largest file that is read, in bytes."""

_LOADER = getattr(yaml, "CSafeLoader", yaml.SafeLoader)
_UNREADABLE = re.compile("[^\t\n\r\x20-\x7e\x85\xa0-\ud7ff\ue000-\ufffd\U00010000-\U0010ffff]")


class Source(NamedTuple):
    """What a file held: its text without a byte-order mark, and the SHA-256 of its bytes in hex."""

    text: str
    sha256: str


def read(data: str | bytes, file: str) -> Source:
    """Decode a file's contents and refuse what can't be text; raises InputFaults.

    A str is taken as UTF-8 would have given it; its digest is that of its UTF-8 bytes.
    """
    if len(data) > MAX_BYTES:
        raise InputFaults([Fault(file, 1, 1, f"the file is larger than {MAX_BYTES // 1024} KiB")])
    text = data if isinstance(data, str) else _decode(data, file)
    text = text.removeprefix("\ufeff")
    unreadable = _UNREADABLE.search(text)
    if unreadable:
        line, column = _place(text, unreadable.start())
        code = f"U+{ord(unreadable.group()):04X}"
        raise InputFaults([Fault(file, line, column, f"the character {code} can't stand in a text file")])
    raw = data.encode() if isinstance(data, str) else data
    return Source(text, hashlib.sha256(raw).hexdigest())


def read_tree(text: str, file: str) -> tuple[Node | None, list[Fault]]:
    """The tree of a file's one document, with every fault of its form.

    A name ending in `.json` is read as JSON, anything else as YAML. The tree is None when
    nothing usable was read.
    """
    tree = Tree(file)
    try:
        if file.lower().endswith(".json"):
            for token in tokens(text, file):
                tree.take(token)
        else:
            _read_yaml(text, tree)
    except UnreadableTreeError:
        return None, tree.faults
    except InputFaults as unreadable:
        return None, [*tree.faults, *unreadable.faults]
    if tree.root is None and not tree.faults:
        tree.fault(1, 1, "the file is empty; expected a declared design (`samestrut new` prints one)")
    return tree.root, tree.faults


def _decode(data: bytes, file: str) -> str:
    try:
        return data.decode("utf-8")
    except UnicodeDecodeError as error:
        line, column = _place(data[: error.start].decode("utf-8"), None)
        raise InputFaults([Fault(file, line, column, "the file is not UTF-8 text from here on")]) from None


def _place(text: str, position: int | None) -> tuple[int, int]:
    before = text[:position].replace("\r\n", "\n").replace("\r", "\n")
    return before.count("\n") + 1, len(before) - before.rfind("\n")


def _read_yaml(text: str, tree: Tree) -> None:
    """Feed the events of the YAML text to the tree; stops at the first error of syntax."""
    documents = 0
    try:
        for event in _events(text):
            line, column = event.start_mark.line + 1, event.start_mark.column + 1
            kind = type(event)
            if kind is ScalarEvent:
                if event.tag is not None:
                    tree.tag(event.tag, line, column)
                tree.scalar(event.value, not event.implicit[0], line, column, event.anchor)
            elif kind is MappingStartEvent or kind is SequenceStartEvent:
                if event.tag is not None:
                    tree.tag(event.tag, line, column)
                tree.open(kind is MappingStartEvent, line, column, event.anchor)
            elif kind is AliasEvent:
                tree.alias(event.anchor, line, column)
            elif kind is DocumentStartEvent:
                documents += 1
                if documents > 1:
                    tree.stop(line, column, "a second document starts here; a file holds one declared design")
            elif kind in (yaml.events.MappingEndEvent, yaml.events.SequenceEndEvent):
                tree.close()
    except yaml.MarkedYAMLError as error:
        mark = error.problem_mark or error.context_mark
        line, column = (mark.line + 1, mark.column + 1) if mark else (1, 1)
        tree.stop(
            line, column, f"not readable as YAML: {_problem(error, text.splitlines()[line - 1 : line])}"
        )
    except yaml.YAMLError as error:
        tree.stop(1, 1, f"not readable as YAML: {' '.join(str(error).split())}")


def _events(text: str) -> Iterator[Any]:
    """The parser's events; their stubs don't tell the kinds apart, hence Any."""
    return yaml.parse(text, Loader=_LOADER)


def _problem(error: yaml.MarkedYAMLError, line: list[str]) -> str:
    problem = " ".join(part for part in (error.context, error.problem) if part)
    if any(part.lstrip(" ").startswith("\t") for part in line):
        return f"{problem} (indent with spaces, not with tabs)"
    return problem
