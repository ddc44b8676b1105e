"""The JSON Schema of a declared-design file, made from the description of the format that the checks use too.

- It says everything a schema can say; what needs the geometry, a conversion of units or another value is left
  to the reader, which is the judge.
"""

from __future__ import annotations

from typing import Any

from checker.declared.callouts import PATTERNS
from checker.declared.check_values import BAD_TEXT, MAX_COORDINATE, MAX_TEXT
from checker.declared.fields import Field, Record
from checker.declared.format import FORMAT, RECORDS, SHAPES
from checker.declared.numbers import LARGEST, LITERAL
from checker.declared.units import dimension, pattern_of

Schema = dict[str, Any]


def design_schema() -> Schema:
    """The schema (draft 2020-12) of format 1, as data ready for `json.dumps`."""
    return {
        "$schema": "https://json-schema.org/draft/2020-12/schema",
        "$id": "urn:samestrut:design:1",
        "title": "Samestrut declared design, format 1",
        **_record(FORMAT),
        "$defs": {
            "text": _text(),
            **{record.name: _record(record) for record in RECORDS.values()},
            **{record.name: _record(record) for record in SHAPES.values()},
            "section": _section(),
        },
    }


def _record(record: Record) -> Schema:
    required = [field.key for field in record.fields if field.required and not field.unless]
    schema: Schema = {
        "description": record.doc,
        "type": "object",
        "properties": {field.key: _field(field) for field in record.fields},
        "additionalProperties": {"$ref": "#/$defs/text"} if record.name == "submission" else False,
    }
    if record.name == "submission":
        schema["propertyNames"] = {"$ref": "#/$defs/text"}
    if required:
        schema["required"] = required
    rules = [_unless(field) for field in record.fields if field.unless]
    if record.forms:
        rules.append(_forms(record))
    if rules:
        schema["allOf"] = rules
    return schema


def _forms(record: Record) -> Schema:
    """Exactly one form: its own keys are needed, those of the others forbidden."""
    options = []
    for form in record.forms:
        others = [key for other in record.forms if other is not form for key in (*other.needs, *other.allows)]
        options.append({"required": list(form.needs), "properties": dict.fromkeys(others, False)})
    return {"oneOf": options}


def _unless(field: Field) -> Schema:
    options: list[Schema] = [{"required": [field.key]}]
    for reason in field.unless:
        key, _, value = reason.partition("=")
        option: Schema = {"required": [key]}
        if value:
            option["properties"] = {key: {"const": value}}
        options.append(option)
    return {"anyOf": options}


def _section() -> Schema:
    """The record the shape names; `if` and `then` keep an editor's messages to that one shape."""
    shape = SHAPES["rectangle"].by_key["shape"]
    return {
        "type": "object",
        "properties": {"shape": _field(shape)},
        "required": ["shape"],
        "allOf": [
            {
                "if": {"properties": {"shape": {"const": name}}, "required": ["shape"]},
                "then": {"$ref": f"#/$defs/{name}"},
            }
            for name in SHAPES
        ],
    }


def _field(field: Field) -> Schema:
    return {"description": _description(field), **_holds(field)}


def _holds(field: Field) -> Schema:
    """What the field's value must be."""
    match field.kind:
        case "number":
            return _number(field)
        case "area":
            return {"anyOf": [*_number(field)["anyOf"], {"$ref": f"#/$defs/{field.record}"}]}
        case "count":
            same = field.least == field.most
            return {"const": field.least} if same else {"type": "integer", **_limits(field)}
        case "text":
            return {"$ref": "#/$defs/text"}
        case "choice":
            return {"enum": list(field.choices)}
        case "record" | "texts":
            return {"$ref": f"#/$defs/{field.record}"}
        case "records":
            return {"type": "array", "items": {"$ref": f"#/$defs/{field.record}"}, "minItems": field.least}
        case "points":
            return _points(field)
        case "numbers":
            one = Field(field.key, "number", "", unit=field.unit, least=-MAX_COORDINATE, most=MAX_COORDINATE)
            return {"type": "array", "items": _number(one)}
        case "section":
            return {"$ref": "#/$defs/section"}
        case "bar callout" | "link callout":
            return {"type": "string", "pattern": rf"^\s*(?:{PATTERNS[field.kind]})\s*$"}


def _number(field: Field) -> Schema:
    """A plain number within the limits, or text with a unit (whose limits a schema can't convert)."""
    plain: Schema = {"type": "number", **_limits(field)}
    units = pattern_of(dimension(field.unit))
    return {"anyOf": [plain, {"type": "string", "pattern": rf"^\s*{LITERAL}\s*(?:{units})?\s*$"}]}


def _limits(field: Field) -> Schema:
    limits: Schema = {"minimum": field.least, "exclusiveMinimum": field.above}
    limits |= {"maximum": field.most, "exclusiveMaximum": field.below}
    if field.kind != "count":
        if field.least is None and field.above is None:
            limits["minimum"] = -LARGEST
        if field.most is None and field.below is None:
            limits["maximum"] = LARGEST
    return {key: _whole(limit) for key, limit in limits.items() if limit is not None}


def _points(field: Field) -> Schema:
    coordinate = Field(field.key, "number", "", unit=field.unit, least=-MAX_COORDINATE, most=MAX_COORDINATE)
    place = {"type": "array", "items": _number(coordinate), "minItems": 2, "maxItems": 2}
    return {"type": "array", "items": place, "minItems": field.least, "maxItems": field.most}


def _text() -> Schema:
    """One line of text; an editor takes unquoted digits or `yes` for other types, which is as good."""
    return {
        "type": ["string", "number", "boolean"],
        "pattern": r"\S",
        "maxLength": MAX_TEXT,
        "not": {"type": "string", "pattern": BAD_TEXT},
    }


def _description(field: Field) -> str:
    if field.kind in ("number", "area") and field.unit != "-":
        return f"{field.doc} In {field.unit}, or with a unit of its own written after it."
    return f"{field.doc} In {field.unit}." if field.kind == "points" else field.doc


def _whole(limit: float) -> float:
    return int(limit) if limit == int(limit) else limit
