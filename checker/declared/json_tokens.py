"""JSON text to the same building steps as YAML, with places.

- The `json` module judges the syntax and gives the place of an error; the text is then cut into tokens.
- Numbers keep their literal text; strings are decoded by `json`.
"""

from __future__ import annotations

import json
import re
from collections.abc import Iterator

from checker.declared.tree import Token
from checker.errors import Fault, InputFaults

_TOKEN = re.compile(r'"(?:[^"\\]|\\.)*"|[{}\[\]]|[-+.\w]+|\n|\r\n?')
_UNPAIRED = re.compile("[\ud800-\udfff]")


def tokens(text: str, file: str) -> Iterator[Token]:
    """The building steps of a JSON text; raises InputFaults on an error of syntax, before the first step."""
    _check_syntax(text, file)
    line, line_start = 1, 0
    for match in _TOKEN.finditer(text):
        part = match.group()
        if part[0] in "\r\n":
            line, line_start = line + 1, match.end()
            continue
        column = match.start() - line_start + 1
        if part in "{[":
            yield Token("map" if part == "{" else "list", "", False, line, column)
        elif part in "}]":
            yield Token("close", "", False, line, column)
        elif part[0] == '"':
            value = str(json.loads(part))
            if _UNPAIRED.search(value):
                raise InputFaults([Fault(file, line, column, "half of a surrogate pair can't stand alone")])
            yield Token("scalar", value, True, line, column)
        else:
            yield Token("scalar", part, False, line, column)


def _check_syntax(text: str, file: str) -> None:
    try:
        json.loads(text, parse_int=str, parse_float=str)
    except json.JSONDecodeError as error:
        message = f"not readable as JSON: {error.msg}"
        raise InputFaults([Fault(file, error.lineno, error.colno, message)]) from None
    except RecursionError:
        raise InputFaults([Fault(file, 1, 1, "not readable as JSON: nested far too deep")]) from None
