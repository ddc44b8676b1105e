"""One formula of the sheet: parsed through a whitelist, then written out as code or as text.

- A formula is plain arithmetic over symbols: + - * / **, comparisons, `and or not`, `a if condition else b`,
  and calls of the functions in `FUNCTIONS`. Nothing else gets through: no attributes, subscripts, strings, lambdas.
- The same tree is written three ways: scalar code, column code, and the text a person reads.
  What is printed is therefore what ran.
"""

from __future__ import annotations

import ast
from collections.abc import Callable
from functools import lru_cache
from typing import NamedTuple

FUNCTIONS: dict[str, tuple[int, int]] = {
    # name: least and most number of arguments
    "min": (2, 9), "max": (2, 9), "abs": (1, 1), "sqrt": (1, 1), "log": (1, 1),
    "sin": (1, 1), "cos": (1, 1), "tan": (1, 1), "cot": (1, 1), "atan": (1, 1),
    "given": (1, 1), "first_given": (2, 12),
    "block_area": (3, 3), "block_moment": (4, 4), "block_depth": (4, 4), "bending_resistance": (8, 8),
}  # fmt: skip
"""The functions a formula may call. `given(x)` is true when x was stated; `first_given` takes the first that was."""

MAX_LENGTH = 600
MAX_NODES = 300
MAX_NUMBER = 1e12
MAX_POWER = 10

_OPERATORS: dict[type[ast.AST], str] = {
    ast.Add: "+", ast.Sub: "-", ast.Mult: "*", ast.Div: "/", ast.Pow: "**",
    ast.Lt: "<", ast.LtE: "<=", ast.Gt: ">", ast.GtE: ">=", ast.Eq: "==", ast.NotEq: "!=",
}  # fmt: skip


class ExpressionError(ValueError):
    """A formula that can't be read; `offset` counts characters from the start of its text."""

    def __init__(self, message: str, offset: int = 0) -> None:
        super().__init__(message)
        self.offset = offset


class Expression(NamedTuple):
    """A formula that passed the whitelist.

    Attributes:
        text: the formula as written in the sheet.
        names: the symbols it needs, in order of first use.
    """

    text: str
    names: tuple[str, ...]

    @property
    def tree(self) -> ast.expr:
        """Its syntax tree, made when first asked for."""
        return _tree(self.text)


@lru_cache(maxsize=4096)
def _tree(text: str) -> ast.expr:
    return ast.parse(text.strip(), mode="eval").body


def parse(text: str) -> Expression:
    """Read a formula.

    Raises:
        ExpressionError: anything outside the whitelist, or no arithmetic at all.
    """
    if len(text) > MAX_LENGTH:
        raise ExpressionError(f"formula of {len(text)} characters, {MAX_LENGTH} at most")
    try:
        tree = _tree(text)
    except (SyntaxError, ValueError, RecursionError, MemoryError) as error:
        offset = (getattr(error, "offset", None) or 1) - 1
        raise ExpressionError("not a formula: expected arithmetic over symbols", offset) from None
    names: dict[str, None] = {}
    for count, node in enumerate(ast.walk(tree), 1):
        if count > MAX_NODES:
            raise ExpressionError("formula too long; split it in two quantities")
        _check(node, names)
    called = {id(node.func) for node in ast.walk(tree) if isinstance(node, ast.Call)}
    ordered = sorted((n for n in ast.walk(tree) if isinstance(n, ast.Name)), key=lambda n: n.col_offset)
    for name in ordered:
        if name.id in FUNCTIONS and id(name) not in called:
            raise ExpressionError(f"{name.id} is a function, not a symbol", name.col_offset)
    used = dict.fromkeys(n.id for n in ordered if n.id in names)
    return Expression(text, tuple(used))


_PLAIN = (
    ast.BoolOp, ast.Compare, ast.IfExp, ast.BinOp, ast.UnaryOp, ast.And, ast.Or, ast.Not, ast.USub, ast.Load,
    *_OPERATORS,
)  # fmt: skip


def _check(node: ast.AST, names: dict[str, None]) -> None:
    """Refuse a node that isn't arithmetic; note the symbols on the way."""
    offset = getattr(node, "col_offset", 0)
    if isinstance(node, ast.Call):
        if not isinstance(node.func, ast.Name) or node.keywords:
            raise ExpressionError("only plain calls such as sqrt(x) are allowed", offset)
        limits = FUNCTIONS.get(node.func.id)
        if limits is None:
            raise ExpressionError(f"unknown function {node.func.id!r}; known: {', '.join(FUNCTIONS)}", offset)
        if not limits[0] <= len(node.args) <= limits[1]:
            raise ExpressionError(f"{node.func.id} takes {limits[0]} to {limits[1]} arguments", offset)
    elif isinstance(node, ast.Name):
        if node.id not in FUNCTIONS:
            names[node.id] = None
    elif isinstance(node, ast.Constant):
        if isinstance(node.value, bool) or not isinstance(node.value, int | float):
            raise ExpressionError(f"only numbers are allowed, not {node.value!r}", offset)
        if not node.value <= MAX_NUMBER:
            raise ExpressionError(f"numbers up to {MAX_NUMBER:g} only", offset)
    elif isinstance(node, ast.BinOp) and isinstance(node.op, ast.Pow):
        power = node.right.value if isinstance(node.right, ast.Constant) else 0
        if isinstance(power, int | float) and power > MAX_POWER:
            raise ExpressionError(f"powers up to {MAX_POWER} only", node.right.col_offset)
    elif isinstance(node, ast.Compare):
        if len(node.ops) != 1 or type(node.ops[0]) not in _OPERATORS:
            raise ExpressionError("one comparison at a time: a <= b", offset)
    elif not isinstance(node, _PLAIN):
        raise ExpressionError(f"{type(node).__name__} is not arithmetic", offset)


def scalar_code(tree: ast.expr) -> str:
    """The formula as Python over floats; `/`, `**` and roots go through functions that never raise."""
    return _write(tree, _SCALAR)


def column_code(tree: ast.expr) -> str:
    """The formula as Python over numpy arrays; conditions become `where`."""
    return _write(tree, _COLUMN)


class _Dialect(NamedTuple):
    condition: str
    conjunction: dict[type[ast.AST], str]
    negation: str
    prefix: str
    guarded: bool


_SCALAR = _Dialect("({1} if {0} else {2})", {ast.And: " and ", ast.Or: " or "}, "(not {0})", "_", True)
_COLUMN = _Dialect("_where({0}, {1}, {2})", {ast.And: " & ", ast.Or: " | "}, "(~{0})", "_", False)


def _write(node: ast.expr, dialect: _Dialect) -> str:
    def sub(child: ast.expr) -> str:
        return _write(child, dialect)

    if isinstance(node, ast.Constant):
        return repr(float(node.value))  # type: ignore[arg-type]
    if isinstance(node, ast.Name):
        return node.id
    if isinstance(node, ast.IfExp):
        return dialect.condition.format(sub(node.test), sub(node.body), sub(node.orelse))
    if isinstance(node, ast.BoolOp):
        return "(" + dialect.conjunction[type(node.op)].join(sub(value) for value in node.values) + ")"
    if isinstance(node, ast.UnaryOp):
        pattern = dialect.negation if isinstance(node.op, ast.Not) else "(-{0})"
        return pattern.format(sub(node.operand))
    if isinstance(node, ast.Compare):
        return f"({sub(node.left)} {_OPERATORS[type(node.ops[0])]} {sub(node.comparators[0])})"
    if isinstance(node, ast.Call):
        assert isinstance(node.func, ast.Name)
        return f"{dialect.prefix}{node.func.id}({', '.join(sub(argument) for argument in node.args)})"
    assert isinstance(node, ast.BinOp)
    return _binary(node, sub, dialect)


def _binary(node: ast.BinOp, sub: Callable[[ast.expr], str], dialect: _Dialect) -> str:
    """Arithmetic of two; division by a written number and whole powers need no guard."""
    left, right = sub(node.left), sub(node.right)
    plain_right = isinstance(node.right, ast.Constant) and bool(node.right.value)
    whole_power = plain_right and isinstance(node.right.value, int)  # type: ignore[attr-defined]
    if dialect.guarded and isinstance(node.op, ast.Div) and not plain_right:
        return f"_div({left}, {right})"
    if isinstance(node.op, ast.Pow):
        return f"{left}**{node.right.value}" if whole_power else f"_pow({left}, {right})"  # type: ignore[attr-defined]
    return f"({left} {_OPERATORS[type(node.op)]} {right})"


_RANK = {ast.Add: 1, ast.Sub: 1, ast.Mult: 2, ast.Div: 2, ast.Pow: 4}
_SIGNS = {"*": " · ", "/": " / ", "+": " + ", "-": " − ", "**": "^", "<=": " ≤ ", ">=": " ≥ ", "!=": " ≠ "}


def printed(
    node: ast.expr, leaf: Callable[[str], str], choose: Callable[[ast.expr], bool] | None = None
) -> str:
    """The formula as a person writes it.

    Args:
        node: tree of an `Expression`.
        leaf: how a symbol is shown (its name, or its number).
        choose: decides a condition; where it is given only the branch that ran is shown.
    """

    def show(child: ast.expr, rank: int) -> str:
        text, own = write(child)
        return f"({text})" if own < rank else text

    def write(child: ast.expr) -> tuple[str, int]:
        if isinstance(child, ast.Constant):
            return f"{child.value:g}" if isinstance(child.value, float) else str(child.value), 9
        if isinstance(child, ast.Name):
            text = leaf(child.id)
            return text, (1 if text.startswith("−") else 9)
        if isinstance(child, ast.BinOp):
            own = _RANK[type(child.op)]
            sign = _SIGNS[_OPERATORS[type(child.op)]]
            tight = isinstance(child.op, ast.Sub | ast.Div | ast.Mult)
            left = show(child.left, own + (1 if isinstance(child.op, ast.Pow) else 0))
            return left + sign + show(
                child.right, own + (1 if tight or isinstance(child.op, ast.Pow) else 0)
            ), own
        if isinstance(child, ast.UnaryOp):
            return ("not " if isinstance(child.op, ast.Not) else "−") + show(child.operand, 3), 1
        if isinstance(child, ast.Compare):
            sign = _OPERATORS[type(child.ops[0])]
            return show(child.left, 1) + _SIGNS.get(sign, f" {sign} ") + show(child.comparators[0], 1), 0
        if isinstance(child, ast.BoolOp):
            word, own = (" and ", -1) if isinstance(child.op, ast.And) else (" or ", -2)
            return word.join(show(value, own) for value in child.values), own
        if isinstance(child, ast.IfExp):
            if choose is not None:
                return write(child.body if choose(child.test) else child.orelse)
            return f"{show(child.body, 0)} if {show(child.test, -2)}, else {show(child.orelse, 0)}", -3
        assert isinstance(child, ast.Call)
        assert isinstance(child.func, ast.Name)
        return f"{child.func.id}({', '.join(show(argument, 0) for argument in child.args)})", 9

    return write(node)[0]
