"""The node tree held against the format: every fault at its place, and the values that are sound.

- A record is walked whole even when part of it is wrong, so that all faults come at once.
- The values handed on are typed but not yet related to each other; `build` does that.
"""

from __future__ import annotations

from collections.abc import Callable

from checker.declared.check_values import (
    check_bar_callout,
    check_choice,
    check_count,
    check_link_callout,
    check_number,
    check_numbers,
    check_points,
    check_text,
    check_texts,
    found,
    hint,
)
from checker.declared.fields import Field, Record
from checker.declared.format import RECORDS, SHAPES
from checker.declared.found import Faults, Values
from checker.declared.model import Number, Place
from checker.declared.tree import Entry, Mapping, Node, Scalar, Sequence, shorten


def check_record(node: Node, record: Record, what: str, faults: Faults) -> Values | None:
    """Walk a map by its record; None if it is no map at all."""
    if not isinstance(node, Mapping):
        faults.add(node, f"{found(node)}; expected {what} as keys and values")
        return None
    values = Values(node, {key: Place(*entry.key[2:]) for key, entry in node.entries.items()})
    before = len(faults.found)
    for key, entry in node.entries.items():
        field = record.by_key.get(key)
        if field is None:
            faults.add(entry.key, _unknown(entry, record, what, faults))
            continue
        value = _CHECKS[field.kind](entry.node, field, faults)
        if value is not None:
            values.put(key, value, entry.node)
    _check_forms(node, record, what, faults)
    for field in record.fields:
        if field.required and field.key not in node.entries and not _excused(field, values):
            faults.add(node, f'missing "{field.key}" in {what}{hint(field)}')
    values.sound = len(faults.found) == before
    return values


def _unknown(entry: Entry, record: Record, what: str, faults: Faults) -> str:
    key = entry.key.text
    empty = isinstance(entry.node, Scalar) and entry.node.is_empty
    if key.isdigit() and empty:
        return f'"{shorten(key)}" stands alone after a comma; write decimals with a point'
    return f'unknown key "{shorten(key)}" in {what}{faults.nearest(key, tuple(record.by_key))}'


def _excused(field: Field, values: Values) -> bool:
    for reason in field.unless:
        key, _, value = reason.partition("=")
        if key in values.key_places and (not value or values.get(key, str) == value):
            return True
    return False


def _check_forms(node: Mapping, record: Record, what: str, faults: Faults) -> None:
    """Exactly one of the record's forms must be used, and used whole."""
    if not record.forms:
        return
    used = [form for form in record.forms if any(key in node.entries for key in (*form.needs, *form.allows))]
    if not used:
        ways = " or ".join(" with ".join(f'"{key}"' for key in form.needs) for form in record.forms)
        faults.add(node, f"missing {ways} in {what}")
    elif len(used) > 1:
        written = [key for form in used for key in (*form.needs, *form.allows) if key in node.entries]
        spot = max((node.entries[key].key for key in written), key=lambda key: (key.line, key.column))
        named = " and ".join(f'"{key}"' for key in written)
        faults.add(spot, f"{named} say the same thing twice in {what}; leave one out")
    else:
        for key in used[0].needs:
            if key not in node.entries:
                faults.add(node, f'missing "{key}" in {what}{hint(record.by_key[key])}')


def _record(node: Node, field: Field, faults: Faults) -> Values | None:
    return check_record(node, RECORDS[field.record], field.key, faults)


def _records(node: Node, field: Field, faults: Faults) -> list[Values] | None:
    if not isinstance(node, Sequence):
        faults.add(node, f"{field.key}: {found(node)}; expected a list")
        return None
    if len(node.items) < (field.least or 0):
        faults.add(node, f"{field.key} is empty; expected at least {field.least:g}")
        return None
    record = RECORDS[field.record]
    what = {"links": "this set of links", "bars": "this group of bars"}.get(
        record.name, f"this {record.name}"
    )
    items = [check_record(item, record, what, faults) for item in node.items]
    return [values for values in items if values is not None]


def _area(node: Node, field: Field, faults: Faults) -> Number | Values | None:
    if isinstance(node, Mapping):
        return _record(node, field, faults)
    return check_number(node, field, faults)


def _section(node: Node, field: Field, faults: Faults) -> Values | None:
    """The section by the record its shape names; without a known shape only the shape is at fault."""
    shape = SHAPES["rectangle"].by_key["shape"]
    if not isinstance(node, Mapping):
        faults.add(node, f"section: {found(node)}; expected a shape with its sizes")
        return None
    entry = node.entries.get("shape")
    if entry is None:
        faults.add(node, f'missing "shape" in section{hint(shape)}')
        return None
    name = check_choice(entry.node, shape, faults)
    return None if name is None else check_record(node, SHAPES[name], f"section ({name})", faults)


_CHECKS: dict[str, Callable[[Node, Field, Faults], object]] = {
    "number": check_number,
    "count": check_count,
    "text": check_text,
    "choice": check_choice,
    "texts": check_texts,
    "record": _record,
    "records": _records,
    "points": check_points,
    "numbers": check_numbers,
    "area": _area,
    "section": _section,
    "bar callout": check_bar_callout,
    "link callout": check_link_callout,
}
