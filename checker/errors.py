"""The one small family of errors: what is wrong with an input, and where it stands.

- A `Fault` is one line for a person: `file:line:column: what is wrong, what was expected`.
- `InputFaults` carries every fault of a file at once, in the order of the file.
- `RuleFaults` is the same for a rule file (a sheet, an annex, a list of checks).
- A wrong use of the command line is `UsageError`.
"""

from __future__ import annotations

from collections.abc import Iterable
from typing import NamedTuple


class Fault(NamedTuple):
    """One thing that is wrong, at a place (line and column count from 1)."""

    file: str
    line: int
    column: int
    message: str

    def __str__(self) -> str:
        return f"{self.file}:{self.line}:{self.column}: {self.message}"


class SamestrutError(Exception):
    """Anything this package raises on purpose."""


class UsageError(SamestrutError):
    """The command or function was called with something it can't work on."""


class InputFaults(SamestrutError):
    """A file that isn't a valid declared design; `faults` has every reason, in the order of the file."""

    def __init__(self, faults: Iterable[Fault]) -> None:
        self.faults: tuple[Fault, ...] = tuple(sorted(set(faults)))
        super().__init__("\n".join(str(fault) for fault in self.faults))


class RuleFaults(InputFaults):
    """A rule file (sheet, layer, checks) that can't be used."""
