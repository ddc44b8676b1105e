"""Running a compiled sheet over many rows: numpy columns, in blocks that stay in the cache.

- A row is a member-case. A column is an array of all rows, or one plain number for what is common to them.
- Only the quantities asked for are kept, so memory follows what is wanted and not how many formulas there are.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from typing import TYPE_CHECKING, Any

from checker.sheet.program import SECTION, Program

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

BLOCK = 8192
"""Rows a block: with about a hundred live columns of 64 kB the temporaries stay in the second-level cache."""


def stack(rows: Sequence[Mapping[str, Any]]) -> dict[str, Any]:
    """Rows of plain numbers as columns; what is the same in all rows stays one number.

    The sections become a table of the distinct ones with an index.
    """
    import numpy as np

    from checker.geometry.profile import ProfileColumns

    columns: dict[str, Any] = {}
    for name in rows[0]:
        values = [row[name] for row in rows]
        if name == SECTION:
            distinct = {id(value): value for value in values}
            position = {key: index for index, key in enumerate(distinct)}
            columns[name] = ProfileColumns.stack(list(distinct.values()), [position[id(v)] for v in values])
            continue
        columns[name] = np.array(values, dtype=np.float64)
    return columns


def run_columns(
    program: Program, columns: Mapping[str, Any], keep: Iterable[str], rows: int, block: int = BLOCK
) -> dict[str, NDArray[np.float64]]:
    """Run a column program over all rows, block by block.

    Args:
        program: built with `columns=True`.
        columns: inputs: arrays of `rows` values, plain numbers, or `ProfileColumns`.
        keep: the outputs to return.
        rows: how many rows there are.
        block: rows worked on at a time; the results don't depend on it.
    """
    import numpy as np

    kept = tuple(keep)
    results = {name: np.empty(rows) for name in kept}
    inputs = {name: columns[name] for name in program.inputs}
    with np.errstate(all="ignore"):
        for start in range(0, rows, block):
            end = min(start + block, rows)
            found = program.run({name: _part(value, start, end) for name, value in inputs.items()})
            for name in kept:
                results[name][start:end] = found[name]
    return results


def _part(column: Any, start: int, end: int) -> Any:
    if hasattr(column, "block"):
        return column.block(start, end)
    return column[start:end] if hasattr(column, "shape") and column.shape else column
