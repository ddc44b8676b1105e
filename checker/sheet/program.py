"""A sheet compiled into one straight-line function, for plain numbers or for numpy columns.

- Only the quantities asked for, and what they rest on, are computed, in dependency order.
- A *followed* program takes a declared value over wherever there is one (`X_declared` is given): the second of the
  two recomputations.
- Scalar arithmetic never raises: a division by zero or the root of a negative number gives inf or nan, as in columns.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable, Mapping
from types import CodeType
from typing import Any, NamedTuple

from checker.sheet.expression import column_code, scalar_code
from checker.sheet.quantities import Sheet

Values = dict[str, Any]
"""Symbol -> float, or -> array of one row a member-case."""

SECTION = "section"
"""The one opaque input: the section's profile, handed to the solved functions."""


class Program(NamedTuple):
    """A compiled sheet.

    Attributes:
        inputs: the symbols `run` must be given.
        source: the generated Python, for those who want to read it.
        code: the same, compiled.
        run: inputs -> outputs.
    """

    inputs: tuple[str, ...]
    source: str
    code: CodeType
    run: Callable[[Mapping[str, Any]], Values]


def build(
    sheet: Sheet,
    wanted: Iterable[str],
    *,
    columns: bool = False,
    follow: Iterable[str] = (),
    given: Iterable[str] = (),
) -> Program:
    """Compile the quantities asked for.

    Args:
        sheet: with all its layers on.
        wanted: symbols to return.
        columns: numpy code instead of scalar code.
        follow: symbols whose declared value (input `X_declared`) is carried on where given.
        given: symbols taken from the inputs instead of their formula.
    """
    wanted = tuple(dict.fromkeys(wanted))
    followed = set(follow)
    cut = frozenset(given)
    needed = sheet.needed(wanted, cut)
    inputs = [s for s in needed if sheet.quantities[s].is_input or s in cut]
    declared = [f"{s}_declared" for s in needed if s in followed and s not in inputs]
    inputs += [name for name in declared if name not in inputs]
    write = column_code if columns else scalar_code
    lines = [f"    {symbol} = _x[{symbol!r}]" for symbol in inputs]
    for symbol in needed:
        formula = sheet.quantities[symbol].formula
        if formula is None or symbol in cut:
            continue
        if symbol not in followed:
            lines.append(f"    {symbol} = {write(formula.tree)}")
            continue
        lines.append(f"    {symbol} = _first_given({symbol}_declared, {write(formula.tree)})")
    returned = ", ".join(f"{name!r}: {name}" for name in wanted)
    source = "def run(_x):\n" + "\n".join(lines) + "\n    return {" + returned + "}\n"
    code = compile(source, f"<sheet {sheet.id}>", "exec", optimize=2)
    return assemble(tuple(inputs), source, code, columns=columns)


def assemble(inputs: tuple[str, ...], source: str, code: CodeType, *, columns: bool) -> Program:
    """A program from its compiled code."""
    namespace = dict(column_namespace() if columns else scalar_namespace())
    exec(code, namespace)
    return Program(inputs, source, code, namespace["run"])


def scalar_namespace() -> dict[str, Any]:
    """The functions scalar code may call."""
    from checker.geometry import bending

    return {
        "__builtins__": {}, "_div": _div, "_pow": _pow, "_min": _least, "_max": _greatest, "_abs": abs,
        "_sqrt": _root, "_log": _log, "_sin": math.sin, "_cos": math.cos, "_tan": math.tan, "_cot": _cot,
        "_atan": math.atan, "_given": math.isfinite, "_first_given": _first_given,
        "_block_area": bending.block_area, "_block_moment": bending.block_moment,
        "_block_depth": bending.block_depth, "_bending_resistance": bending.bending_resistance,
    }  # fmt: skip


def column_namespace() -> dict[str, Any]:
    """The same functions over numpy arrays."""
    import numpy as np

    from checker.geometry import bending

    def least(*values: Any) -> Any:
        result = values[0]
        for value in values[1:]:
            result = np.minimum(result, value)
        return result

    def greatest(*values: Any) -> Any:
        result = values[0]
        for value in values[1:]:
            result = np.maximum(result, value)
        return result

    def first_given(*values: Any) -> Any:
        result = values[-1]
        for value in values[-2::-1]:
            result = np.where(np.isfinite(value), value, result)
        return result

    return {
        "__builtins__": {}, "_where": np.where, "_pow": np.power, "_min": least, "_max": greatest,
        "_abs": np.abs, "_sqrt": np.sqrt, "_log": np.log, "_sin": np.sin, "_cos": np.cos, "_tan": np.tan,
        "_cot": lambda angle: 1.0 / np.tan(angle), "_atan": np.arctan, "_given": np.isfinite,
        "_first_given": first_given, "_block_area": bending.block_area, "_block_moment": bending.block_moment,
        "_block_depth": bending.block_depth, "_bending_resistance": bending.bending_resistance,
    }  # fmt: skip


def _div(a: float, b: float) -> float:
    if b:
        return a / b
    return (
        math.nan
        if a == 0 or math.isnan(a) or math.isnan(b)
        else math.copysign(math.inf, a) * math.copysign(1.0, b)
    )


def _pow(a: float, b: float) -> float:
    try:
        return float(math.pow(a, b))
    except ValueError:
        return math.inf if a == 0 else math.nan
    except OverflowError:
        return math.inf


def _root(a: float) -> float:
    return math.sqrt(a) if a >= 0 else math.nan


def _log(a: float) -> float:
    return math.log(a) if a > 0 else (-math.inf if a == 0 else math.nan)


def _cot(angle: float) -> float:
    return _div(1.0, math.tan(angle))


def _least(*values: float) -> float:
    return math.nan if any(map(math.isnan, values)) else min(values)


def _greatest(*values: float) -> float:
    return math.nan if any(map(math.isnan, values)) else max(values)


def _first_given(*values: float) -> float:
    for value in values[:-1]:
        if math.isfinite(value):
            return value
    return values[-1]
