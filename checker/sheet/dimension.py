"""Dimensions of formulas: force and length exponents, carried through the syntax tree.

Used on rule files that come from outside (an annex, an office's layer) so that a unit clash is a fault with
a place. Our own sheet is proved a second time, in the tests, with a units library.
"""

from __future__ import annotations

import ast

from checker.sheet.expression import Expression, ExpressionError

Dimension = tuple[float, float]  # exponents of force and of length
PURE: Dimension = (0.0, 0.0)
OPAQUE: Dimension = (99.0, 99.0)  # a section handed to a solved function; fits nowhere else

UNIT_DIMENSIONS: dict[str, Dimension] = {
    "-": PURE, "deg": PURE, "flag": PURE, "section": OPAQUE,
    "mm": (0.0, 1.0), "mm2": (0.0, 2.0), "mm3": (0.0, 3.0), "mm4": (0.0, 4.0), "mm2/mm": (0.0, 1.0),
    "kN": (1.0, 0.0), "kN/m": (1.0, -1.0), "kNm": (1.0, 1.0), "MPa": (1.0, -2.0),
}  # fmt: skip
"""What each unit of the sheet measures. Note that mm2/mm and mm can't be told apart by dimension alone."""

_SOLVED: dict[str, tuple[tuple[Dimension, ...], Dimension]] = {
    "block_area": ((OPAQUE, PURE, (0, 1)), (0, 2)),
    "block_moment": ((OPAQUE, PURE, (0, 1), (0, 1)), (0, 3)),
    "block_depth": ((OPAQUE, PURE, (0, 3), (0, 1)), (0, 1)),
    "bending_resistance": ((OPAQUE, PURE, (1, 0), (1, -2), PURE, PURE, (1, -2), (1, -2)), (1, 1)),
}


def dimension_of(expression: Expression, symbols: dict[str, Dimension]) -> Dimension | None:
    """The dimension of a formula; None for a bare number, which fits any unit (0, 1.5 …).

    Raises:
        ExpressionError: two parts that don't go together, e.g. a length added to a force.
    """
    return _walk(expression.tree, symbols)


def _walk(node: ast.expr, symbols: dict[str, Dimension]) -> Dimension | None:
    if isinstance(node, ast.Constant):
        return None if node.value == 0 else PURE
    if isinstance(node, ast.Name):
        return symbols[node.id]
    if isinstance(node, ast.UnaryOp):
        return _walk(node.operand, symbols)
    if isinstance(node, ast.IfExp):
        _walk(node.test, symbols)
        return _same(node, [node.body, node.orelse], symbols)
    if isinstance(node, ast.Compare):
        _same(node, [node.left, *node.comparators], symbols)
        return PURE
    if isinstance(node, ast.BoolOp):
        for value in node.values:
            _walk(value, symbols)
        return PURE
    if isinstance(node, ast.Call):
        return _call(node, symbols)
    assert isinstance(node, ast.BinOp)
    return _binary(node, symbols)


def _same(node: ast.expr, parts: list[ast.expr], symbols: dict[str, Dimension]) -> Dimension | None:
    found: Dimension | None = None
    for part in parts:
        dimension = _walk(part, symbols)
        if dimension is None:
            continue
        if found is not None and dimension != found:
            raise ExpressionError(
                f"units don't go together: {describe(found)} with {describe(dimension)}", part.col_offset
            )
        found = dimension
    return found


def _call(node: ast.Call, symbols: dict[str, Dimension]) -> Dimension | None:
    name = node.func.id  # type: ignore[attr-defined]
    if name in ("min", "max", "first_given", "abs"):
        return _same(node, node.args, symbols)
    if name in _SOLVED:
        wanted, result = _SOLVED[name]
        for argument, want in zip(node.args, wanted, strict=True):
            dimension = _walk(argument, symbols)
            if dimension is not None and dimension != want:
                raise ExpressionError(f"{name} expects {describe(want)} here", argument.col_offset)
        return result
    dimension = _walk(node.args[0], symbols)
    if name == "sqrt":
        return None if dimension is None else (dimension[0] / 2, dimension[1] / 2)
    if name == "given":
        return PURE
    if dimension not in (None, PURE):
        raise ExpressionError(f"{name} takes a pure number or an angle", node.args[0].col_offset)
    return PURE


def _binary(node: ast.BinOp, symbols: dict[str, Dimension]) -> Dimension | None:
    if isinstance(node.op, ast.Add | ast.Sub):
        return _same(node, [node.left, node.right], symbols)
    left = _walk(node.left, symbols) or PURE
    right = _walk(node.right, symbols) or PURE
    if isinstance(node.op, ast.Pow):
        if left == PURE:
            return PURE
        exponent = _constant(node.right)
        return (left[0] * exponent, left[1] * exponent)
    sign = 1 if isinstance(node.op, ast.Mult) else -1
    return (left[0] + sign * right[0], left[1] + sign * right[1])


def _constant(node: ast.expr) -> float:
    """A power of something with a unit must be a written number, such as 2 or 1 / 3."""
    if isinstance(node, ast.Constant):
        return float(node.value)  # type: ignore[arg-type]
    if isinstance(node, ast.BinOp) and isinstance(node.op, ast.Div):
        return _constant(node.left) / _constant(node.right)
    raise ExpressionError("the power of something with a unit must be a written number", node.col_offset)


def describe(dimension: Dimension) -> str:
    """A dimension in words a person knows."""
    for unit, known in UNIT_DIMENSIONS.items():
        if known == dimension:
            return {"-": "a pure number", "section": "the section"}.get(unit, unit)
    return f"N^{dimension[0]:g}·mm^{dimension[1]:g}"
