"""The node tree and its builder, which both the YAML and the JSON route feed.

- Nodes are immutable; lines and columns count from 1.
- A fault of form (a duplicate key, a tag, a merge key) is noted and reading goes on; a broken bound stops it.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import NamedTuple, NoReturn, TypeAlias

from checker.errors import Fault

MAX_DEPTH = 20
MAX_NODES = 20_000

_EMPTY = frozenset(("", "~", "null", "Null", "NULL"))


class Scalar(NamedTuple):
    """A single value as written; `quoted` when it stands in quotes or as a block of text."""

    text: str
    quoted: bool
    line: int
    column: int

    @property
    def is_empty(self) -> bool:
        """Nothing is written, or a plain `~` or `null`."""
        return not self.quoted and self.text in _EMPTY


class Sequence(NamedTuple):
    """A list."""

    items: tuple[Node, ...]
    line: int
    column: int


class Entry(NamedTuple):
    """A key of a map and what it holds."""

    key: Scalar
    node: Node


class Mapping(NamedTuple):
    """A map; the entries stand in the order of the file."""

    entries: dict[str, Entry]
    line: int
    column: int


Node: TypeAlias = Scalar | Sequence | Mapping


class Token(NamedTuple):
    """A step of building: `kind` is scalar, map, list or close."""

    kind: str
    text: str
    quoted: bool
    line: int
    column: int


class UnreadableTreeError(Exception):
    """Reading can't go on; the reason is among the tree's faults."""


@dataclass(slots=True)
class _Open:
    """A map or list under construction; `height` is the number of levels below it so far."""

    is_map: bool
    line: int
    column: int
    anchor: str | None
    nodes_before: int
    entries: dict[str, Entry] = field(default_factory=dict)
    items: list[Node] = field(default_factory=list)
    key: Scalar | None = None
    skip_value: bool = False
    height: int = 0


class _Anchored(NamedTuple):
    node: Node
    nodes: int
    height: int


class Tree:
    """Builds the tree of one document from its parts in order, with the bounds and the faults of form."""

    def __init__(self, file: str) -> None:
        self.root: Node | None = None
        self.faults: list[Fault] = []
        self._file = file
        self._stack: list[_Open] = []
        self._anchors: dict[str, _Anchored] = {}
        self._nodes = 0

    def fault(self, line: int, column: int, message: str) -> None:
        """Note what is wrong, and go on."""
        self.faults.append(Fault(self._file, line, column, message))

    def stop(self, line: int, column: int, message: str) -> NoReturn:
        """Note what is wrong, and stop reading."""
        self.fault(line, column, message)
        raise UnreadableTreeError

    def tag(self, tag: str, line: int, column: int) -> None:
        """A YAML tag was written."""
        name = tag.replace("tag:yaml.org,2002:", "!!")
        self.fault(line, column, f'tags are not read: leave out "{shorten(name)}" and write the plain value')

    def take(self, token: Token) -> None:
        """One step of the JSON route."""
        if token.kind == "scalar":
            self.scalar(token.text, token.quoted, token.line, token.column, None)
        elif token.kind == "close":
            self.close()
        else:
            self.open(token.kind == "map", token.line, token.column, None)

    def scalar(self, text: str, quoted: bool, line: int, column: int, anchor: str | None) -> None:
        """A single value, or the key of a map."""
        node = Scalar(text, quoted, line, column)
        self._count(1, line, column)
        if anchor is not None:
            self._anchors[anchor] = _Anchored(node, 1, 0)
        self._put(node)

    def open(self, is_map: bool, line: int, column: int, anchor: str | None) -> None:
        """A map or a list starts."""
        self._count(1, line, column)
        if len(self._stack) >= MAX_DEPTH:
            self.stop(line, column, f"nested deeper than {MAX_DEPTH} levels")
        part = _Open(is_map, line, column, anchor, self._nodes - 1)
        self._stack.append(part)

    def close(self) -> None:
        """The innermost map or list ends."""
        part = self._stack.pop()
        node: Node
        if part.is_map:
            node = Mapping(part.entries, part.line, part.column)
        else:
            node = Sequence(tuple(part.items), part.line, part.column)
        if part.anchor is not None:
            self._anchors[part.anchor] = _Anchored(node, self._nodes - part.nodes_before, part.height + 1)
        if self._stack:
            self._stack[-1].height = max(self._stack[-1].height, part.height + 1)
        self._put(node)

    def alias(self, name: str, line: int, column: int) -> None:
        """A reference to something anchored before; its parts count again, so that nothing can explode."""
        if any(part.anchor == name for part in self._stack):
            self.stop(line, column, f'the alias "*{shorten(name)}" stands inside what it names')
        anchored = self._anchors.get(name)
        if anchored is None:
            self.stop(line, column, f'the alias "*{shorten(name)}" names nothing written before it')
        self._count(anchored.nodes, line, column)
        if len(self._stack) + anchored.height > MAX_DEPTH:
            self.stop(line, column, f"nested deeper than {MAX_DEPTH} levels")
        if self._stack:
            self._stack[-1].height = max(self._stack[-1].height, anchored.height)
        self._put(anchored.node)

    def _count(self, nodes: int, line: int, column: int) -> None:
        self._nodes += nodes
        if self._nodes > MAX_NODES:
            self.stop(line, column, f"more than {MAX_NODES:,} values, with what the aliases repeat")

    def _put(self, node: Node) -> None:
        if not self._stack:
            self.root = node
            return
        part = self._stack[-1]
        if not part.is_map:
            part.items.append(node)
        elif part.key is None:
            self._put_key(part, node)
        else:
            if not part.skip_value:
                part.entries[part.key.text] = Entry(part.key, node)
            part.key = None

    def _put_key(self, part: _Open, node: Node) -> None:
        """Accept a key, or note why not and skip its value."""
        part.skip_value = True
        if not isinstance(node, Scalar):
            self.fault(node.line, node.column, "a list or map can't be a key; expected plain text")
            part.key = Scalar("", False, node.line, node.column)
            return
        part.key = node
        first = part.entries.get(node.text)
        if node.text == "<<" and not node.quoted:
            self.fault(node.line, node.column, 'merge keys ("<<") are not read; write the values out')
        elif first is not None:
            where = f"line {first.key.line}, column {first.key.column}"
            self.fault(
                node.line, node.column, f'the key "{shorten(node.text)}" stands twice; first at {where}'
            )
        else:
            part.skip_value = False


def shorten(text: str) -> str:
    """Text from the file, made safe to quote in a one-line message: at most 60 printable characters."""
    line = " ".join(text[:200].split())
    line = "".join(sign if sign.isprintable() else "?" for sign in line)
    return line if len(line) <= 60 else line[:59] + "…"
