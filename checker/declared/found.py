"""What the checks find: the faults of a file, and the sound values of a record with their places."""

from __future__ import annotations

from typing import Protocol, TypeVar

from checker.declared.model import Place
from checker.declared.tree import Mapping, Node
from checker.errors import Fault

_MAX_SUGGESTIONS = 50  # comparing words is slow; a file with more unknown keys than this is no typing mistake
_T = TypeVar("_T")


class Spot(Protocol):
    """Anything with a place in the file."""

    @property
    def line(self) -> int: ...
    @property
    def column(self) -> int: ...


class Faults:
    """Collects the faults of one file."""

    def __init__(self, file: str) -> None:
        self.found: list[Fault] = []
        self._file = file
        self._suggestions = 0

    def add(self, spot: Spot, message: str) -> None:
        """Note what is wrong at a place."""
        self.found.append(Fault(self._file, spot.line, spot.column, message))

    def nearest(self, word: str, known: tuple[str, ...]) -> str:
        """`; did you mean "spacing"?`, or the list of what is known where nothing comes near."""
        self._suggestions += 1
        if self._suggestions <= _MAX_SUGGESTIONS and len(word) <= 40:
            from difflib import get_close_matches  # only a faulty file pays for this import

            near = get_close_matches(word, known, 1, 0.6) or [
                key for key in known if key.lower() == word.lower()
            ]
            if near:
                return f'; did you mean "{near[0]}"?'
        return f"; known here: {', '.join(known)}" if len(known) <= 12 else ""


class Values:
    """The sound values of a record by key, each with its place; `sound` says that nothing in it is wrong."""

    def __init__(self, node: Mapping, key_places: dict[str, Place]) -> None:
        self.place = Place(node.line, node.column)
        self.key_places = key_places
        self.sound = True
        self._items: dict[str, object] = {}
        self._places: dict[str, Place] = {}

    def put(self, key: str, value: object, node: Node) -> None:
        """Keep a value that was found sound."""
        self._items[key] = value
        self._places[key] = Place(node.line, node.column)

    def get(self, key: str, kind: type[_T]) -> _T | None:
        """The value of a key, or None where it isn't written or isn't sound."""
        item = self._items.get(key)
        return item if isinstance(item, kind) else None

    def need(self, key: str, kind: type[_T]) -> _T:
        """The value of a key that a sound record always has."""
        item = self._items[key]
        if not isinstance(item, kind):
            raise TypeError(f"{key} is read as {type(item).__name__}, not as {kind.__name__}")
        return item

    def spot(self, *keys: str) -> Place:
        """The place of the first of these keys that is written, else of the record."""
        return next((self._places[key] for key in keys if key in self._places), self.place)
