"""The optional detailing parts of a file as inputs of the sheet (inside units); a case's own part wins."""

from __future__ import annotations

from collections.abc import Iterable

from checker.declared.details_format import DETAIL_RECORDS, SYMBOLS
from checker.declared.found import Values
from checker.declared.model import Number


def details_of(values: Values | None, names: Iterable[str]) -> dict[str, float]:
    """Input -> value of the records that are written; the keys a written record leaves out stay unsaid."""
    found: dict[str, float] = {}
    if values is None:
        return found
    for name in names:
        record = values.get(name, Values)
        if record is None or not record.sound:
            continue
        for field in DETAIL_RECORDS[name].fields:
            symbol = SYMBOLS[name][field.key]
            number, word = record.get(field.key, Number), record.get(field.key, str)
            if number is not None:
                found[symbol] = number.value
            else:
                found[symbol] = float(field.choices.index(word)) if word is not None else float("nan")
    return found
