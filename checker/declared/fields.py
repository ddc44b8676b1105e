"""What the description of the format is made of: fields, forms and records.

- The checks on the tree and the JSON Schema are both made from these, so they can't drift apart.
- Limits are in the unit the field is shown in.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Literal, NamedTuple

Kind = Literal[
    "number",  # a number, its unit optional
    "count",  # a whole number
    "text",  # one line of free text
    "choice",  # one of a few words
    "texts",  # a map of free text
    "record",  # a map described by a record
    "records",  # a list of such maps
    "points",  # a list of [x, y]
    "numbers",  # a list of numbers
    "area",  # a link area: a number, or a map with value and counts
    "section",  # a map described by the record its shape names
    "bar callout",
    "link callout",
]


class Field(NamedTuple):
    """One key: what it holds, in which unit, within which limits.

    - `least`, `most` (inclusive) and `above`, `below` (exclusive) bound a number, or the length of a list.
    - `refused` maps a choice that people do write to the reason why it isn't read.
    - `unless` lists what makes a required key unnecessary: the presence of another key, or `key=value`.
    """

    key: str
    kind: Kind
    doc: str
    required: bool = False
    unit: str = "-"
    least: float | None = None
    most: float | None = None
    above: float | None = None
    below: float | None = None
    choices: tuple[str, ...] = ()
    refused: Mapping[str, str] = {}
    record: str = ""
    unless: tuple[str, ...] = ()


class Form(NamedTuple):
    """One of several ways to say the same thing: the keys it needs, and others that only go with it."""

    needs: tuple[str, ...]
    allows: tuple[str, ...] = ()


@dataclass(frozen=True)
class Record:
    """A map of the file: its fields, and the forms of which one must be used (none: no such choice)."""

    name: str
    doc: str
    fields: tuple[Field, ...]
    forms: tuple[Form, ...] = ()
    by_key: Mapping[str, Field] = field(init=False, repr=False)

    def __post_init__(self) -> None:
        object.__setattr__(self, "by_key", {item.key: item for item in self.fields})
