"""The checks of what a single key holds: numbers, counts, text, choices, places and callouts.

- Each check returns the sound value, or None after noting what is wrong and what was expected.
"""

from __future__ import annotations

import re

from checker.declared.callouts import parse_bars, parse_links
from checker.declared.fields import Field
from checker.declared.format import ONLY_STANDARD, RECORDS
from checker.declared.found import Faults
from checker.declared.model import Number
from checker.declared.numbers import LiteralError, parse_count, parse_number
from checker.declared.tree import Mapping, Node, Scalar, Sequence, shorten
from checker.declared.units import factor

MAX_TEXT = 200
"""The longest free text, in characters."""

MAX_COORDINATE = 1e6
"""The largest coordinate of a place, in mm."""

BAD_TEXT = "[\\x00-\\x1f\\x7f-\\x9f\\u2028\\u2029\\u202a-\\u202e\\u2066-\\u2069]"
"""Characters that free text can't hold: control characters, and those that reorder what is shown."""

_BAD_TEXT = re.compile(BAD_TEXT)


def found(node: Node) -> str:
    """What stands here, in words, where something else was expected."""
    if isinstance(node, Scalar):
        return "empty value" if node.is_empty else f'"{shorten(node.text)}" stands here'
    return "a list stands here" if isinstance(node, Sequence) else "a map stands here"


def check_number(node: Node, field: Field, faults: Faults) -> Number | None:
    """A number within the field's limits, its unit of the field's dimension."""
    try:
        number = parse_number(node, field.unit)
    except LiteralError as error:
        faults.add(node, f"{field.key}: {error}")
        return None
    shown = float(number.text) if number.unit == field.unit else number.value / factor(field.unit)
    outside = _outside(shown, field)
    if outside:
        unit = "" if number.unit == "-" else f" {number.unit}"
        faults.add(node, f"{field.key} is {number.text}{unit}; expected {outside}")
        return None
    return number


def _outside(value: float, field: Field) -> str:
    """What was expected of a value outside the field's limits; empty for one within."""
    inside = (
        (field.least is None or value >= field.least)
        and (field.most is None or value <= field.most)
        and (field.above is None or value > field.above)
        and (field.below is None or value < field.below)
    )
    if inside:
        return ""
    unit = "" if field.unit == "-" or field.kind == "count" else f" {field.unit}"
    if field.least is not None and field.most is not None:
        return f"{field.least:g} to {field.most:.10g}{unit}"
    limits = (
        ("more than ", field.above),
        ("at least ", field.least),
        ("less than ", field.below),
        ("at most ", field.most),
    )
    return " and ".join(f"{word}{limit:g}" for word, limit in limits if limit is not None) + unit


def check_count(node: Node, field: Field, faults: Faults) -> int | None:
    """A whole number within the field's limits."""
    try:
        count = parse_count(node)
    except LiteralError as error:
        faults.add(node, f"{field.key}: {error}; expected {_range(field)}")
        return None
    outside = _outside(count, field)
    if outside:
        faults.add(node, f"{field.key} is {count}; expected {_range(field)}")
        return None
    return count


def _range(field: Field) -> str:
    if field.least == field.most:
        return f"{field.least:g}"
    return f"a whole number from {field.least:g} to {field.most:g}"


def check_text(node: Node, field: Field, faults: Faults) -> str | None:
    """One line of free text, not blank."""
    if not isinstance(node, Scalar) or node.is_empty:
        faults.add(node, f"{field.key}: {found(node)}; expected a line of text")
    elif not node.text.strip():
        faults.add(node, f"{field.key}: blank text; expected a line of text")
    elif len(node.text) > MAX_TEXT:
        faults.add(node, f"{field.key}: {len(node.text)} characters; expected at most {MAX_TEXT}")
    elif _BAD_TEXT.search(node.text):
        faults.add(node, f"{field.key}: a line break or control character; expected one line of text")
    else:
        return node.text.strip()
    return None


def check_choice(node: Node, field: Field, faults: Faults) -> str | None:
    """One of the field's words."""
    text = node.text if isinstance(node, Scalar) and not node.is_empty else None
    if text in field.choices:
        return text
    if text is not None and text in field.refused:
        faults.add(node, field.refused[text])
    elif field.key == "standard" and text is not None:
        faults.add(node, f'"{shorten(text)}" is not known; {ONLY_STANDARD}')
    else:
        said = found(node) if text is None else f'"{shorten(text)}" is not known'
        faults.add(node, f"{field.key}: {said}; expected one of: {', '.join(field.choices)}")
    return None


def hint(field: Field) -> str:
    """What a missing key would have held."""
    if field.choices:
        return f"; expected one of: {', '.join(field.choices)}"
    unit = "" if field.unit == "-" else f", in {field.unit}"
    return f" ({field.doc.rstrip('.')}{unit})"


def check_texts(node: Node, field: Field, faults: Faults) -> dict[str, str] | None:
    """A map of free text."""
    if not isinstance(node, Mapping):
        faults.add(node, f"{field.key}: {found(node)}; expected keys with text")
        return None
    texts: dict[str, str] = {}
    for key, entry in node.entries.items():
        if check_text(entry.key, Field(f"a key of {field.key}", "text", ""), faults) is None:
            continue
        text = check_text(entry.node, Field(key if key.isprintable() else shorten(key), "text", ""), faults)
        if text is not None:
            texts[key] = text
    return texts


def check_points(node: Node, field: Field, faults: Faults) -> list[tuple[Number, Number]] | None:
    """A list of places [x, y]."""
    if not isinstance(node, Sequence):
        faults.add(node, f"{field.key}: {found(node)}; expected a list of [x, y]")
        return None
    if _outside(len(node.items), field):
        expected = f"{field.least:g} to {field.most:g}"
        faults.add(node, f"{field.key} has {len(node.items)} places [x, y]; expected {expected}")
        return None
    before = len(faults.found)
    coordinate = Field(field.key, "number", "", unit=field.unit, least=-MAX_COORDINATE, most=MAX_COORDINATE)
    points = []
    for item in node.items:
        if not isinstance(item, Sequence) or len(item.items) != 2:
            faults.add(item, f"{field.key}: expected a place as two numbers [x, y]")
            continue
        x, y = (check_number(part, coordinate, faults) for part in item.items)
        if x is not None and y is not None:
            points.append((x, y))
    return points if len(faults.found) == before else None


def check_numbers(node: Node, field: Field, faults: Faults) -> list[Number] | None:
    """A list of numbers, such as places across the web."""
    if not isinstance(node, Sequence):
        faults.add(node, f"{field.key}: {found(node)}; expected a list of numbers")
        return None
    before = len(faults.found)
    one = Field(field.key, "number", "", unit=field.unit, least=-MAX_COORDINATE, most=MAX_COORDINATE)
    numbers = [number for item in node.items if (number := check_number(item, one, faults)) is not None]
    return numbers if len(faults.found) == before else None


def check_bar_callout(node: Node, field: Field, faults: Faults) -> tuple[int, Number] | None:
    """Count and diameter from a short form such as 4H25."""
    callout = parse_bars(node.text.strip()) if isinstance(node, Scalar) else None
    if callout is None:
        faults.add(node, f"bars: {found(node)}; expected count and diameter such as 4H25")
        return None
    record = RECORDS["bars"].by_key
    number = check_number(_part(node, callout.diameter), record["diameter"], faults)
    count = check_count(_part(node, str(callout.number)), record["count"], faults)
    return None if number is None or count is None else (count, number)


def check_link_callout(node: Node, field: Field, faults: Faults) -> tuple[Number, Number] | None:
    """Diameter and spacing from a short form such as H10-150."""
    callout = parse_links(node.text.strip()) if isinstance(node, Scalar) else None
    if callout is None:
        faults.add(node, f"links: {found(node)}; expected diameter and spacing such as H10-150")
        return None
    record = RECORDS["links"].by_key
    diameter = check_number(_part(node, callout.diameter), record["diameter"], faults)
    spacing = check_number(_part(node, callout.spacing), record["spacing"], faults)
    return None if diameter is None or spacing is None else (diameter, spacing)


def _part(node: Node, text: str) -> Scalar:
    return Scalar(text, False, node.line, node.column)
