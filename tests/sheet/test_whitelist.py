"""Hostile and careless formulas are refused, with the place where they stand; what passes runs nothing but arithmetic."""

from __future__ import annotations

from pathlib import Path

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from checker.errors import RuleFaults
from checker.sheet.expression import FUNCTIONS, ExpressionError, column_code, parse, scalar_code
from checker.sheet.load import load_layers
from checker.sheet.program import column_namespace, scalar_namespace

HOSTILE = {
    # formula: where it is refused, counted from its start, and a word of what is said
    "a.b": (0, "Attribute"),
    "d + a.__class__": (4, "Attribute"),
    "a[0]": (0, "Subscript"),
    "(lambda: a)()": (0, "plain calls"),
    "lambda: a": (0, "Lambda"),
    "[b for b in a]": (0, "ListComp"),
    "{b for b in a}": (0, "SetComp"),
    "{b: b for b in a}": (0, "DictComp"),
    "max(b for b in a)": (0, "arguments"),
    "f'{a}'": (0, "JoinedStr"),
    "'text'": (0, "only numbers"),
    "a ** 'text'": (5, "only numbers"),
    "b'text'": (0, "only numbers"),
    "(a := 1)": (1, "NamedExpr"),
    "a if (b := 1) else c": (6, "NamedExpr"),
    "[a, b]": (0, "List"),
    "(a, b)": (0, "Tuple"),
    "{a}": (0, "Set"),
    "{a: b}": (0, "Dict"),
    "await a": (0, "Await"),
    "yield a": (0, "not a formula"),
    "*a": (0, "not a formula"),
    "min(*a)": (0, "arguments"),
    "min(*a, *b)": (4, "Starred"),
    "min(a, b, key=c)": (0, "plain calls"),
    "min(a, **b)": (0, "plain calls"),
    "__import__('os')": (0, "unknown function"),
    "eval(a)": (0, "unknown function"),
    "open(a)": (0, "unknown function"),
    "a.sqrt(b)": (0, "plain calls"),
    "sqrt(a)(b)": (0, "plain calls"),
    "sqrt": (0, "is a function"),
    "1 + min": (4, "is a function"),
    "min(a, sqrt)": (7, "is a function"),
    "sqrt()": (0, "arguments"),
    "sqrt(a, b)": (0, "arguments"),
    "min(a)": (0, "arguments"),
    "1j": (0, "only numbers"),
    "True": (0, "only numbers"),
    "None": (0, "only numbers"),
    "...": (0, "only numbers"),
    "1e999": (0, "numbers up to"),
    "9" * 400: (0, "numbers up to"),
    "a ** 99999999": (5, "powers up to"),
    "9 ** 9999999": (5, "powers up to"),
    "a // b": (0, "FloorDiv"),
    "a % b": (0, "Mod"),
    "a @ b": (0, "MatMult"),
    "a & b": (0, "BitAnd"),
    "a << b": (0, "LShift"),
    "~a": (0, "Invert"),
    "+a": (0, "UAdd"),
    "a is b": (0, "one comparison"),
    "a in b": (0, "one comparison"),
    "a < b < c": (0, "one comparison"),
    "a; b": (1, "not a formula"),
    "a = b": (0, "not a formula"),
    "import os": (0, "not a formula"),
    "a b": (0, "not a formula"),
    "a +": (3, "not a formula"),
    "": (0, "not a formula"),
    "-" * 299 + "a": (0, "too long"),
    "(" * 250 + "a" + ")" * 250: (0, "not a formula"),
    "a + " * 149 + "a": (0, "too long"),
    "a + " * 200 + "a": (0, "characters"),
}


@pytest.mark.parametrize("formula", HOSTILE, ids=lambda text: text[:24] or "empty")
def test_refused(formula: str) -> None:
    offset, said = HOSTILE[formula]
    with pytest.raises(ExpressionError, match=said) as caught:
        parse(formula)
    if said not in ("not a formula", "FloorDiv", "Mod", "MatMult", "BitAnd", "LShift", "Invert", "UAdd"):
        assert caught.value.offset == offset


@pytest.mark.parametrize(
    "formula", [f for f in HOSTILE if "\n" not in f], ids=lambda text: text[:24] or "empty"
)
def test_refused_in_a_layer_with_its_place(formula: str, tmp_path: Path) -> None:
    head = "      z: {formula: "
    line = head + '"' + formula.replace('"', '\\"') + '"}'
    (tmp_path / "office.yaml").write_text(
        f"format: 1\nlayers:\n  o:\n    quantities:\n{line}\n", encoding="utf-8"
    )
    with pytest.raises(RuleFaults) as caught:
        load_layers(tmp_path / "office.yaml", shown_as="office.yaml")
    (fault,) = caught.value.faults
    assert (fault.file, fault.line) == ("office.yaml", 5)
    assert len(head) + 1 <= fault.column <= len(line)
    assert fault.message.startswith("z: ")


SOUND = ("a + b * c", "(a - b) / c", "a ** 2 if a > b else -b", "min(a, b, 3)",
         "a if a <= 1 and (b > 0 or not c > 0) else 0", "first_given(a, b, c)", "a ** (1 / 3)", "a ** b ** c")  # fmt: skip


@given(st.text(alphabet="abc()+-*/<>=.,[]{}:'\"\\ \n0129_ifelsorandtm@&|^~%!", max_size=40))
@settings(max_examples=1500, deadline=None)
def test_whatever_passes_is_arithmetic(text: str) -> None:
    """Any text is either refused, or becomes code in which every name is a symbol or one of our functions."""
    try:
        expression = parse(text)
    except ExpressionError:
        return
    for write, namespace in ((scalar_code, scalar_namespace()), (column_code, column_namespace())):
        code = compile(write(expression.tree), "<formula>", "eval")
        assert set(code.co_names) <= {*expression.names, *namespace}
        assert code.co_consts is None or not any(hasattr(const, "co_code") for const in code.co_consts)
        assert set(expression.names).isdisjoint(FUNCTIONS)


@pytest.mark.parametrize("formula", SOUND)
@given(st.lists(st.floats(allow_nan=True, allow_infinity=True), min_size=3, max_size=3))
@settings(max_examples=60, deadline=None)
def test_scalar_code_never_raises(formula: str, numbers: list[float]) -> None:
    """Division by zero, roots of negatives, overflow: nan or inf, never an error."""
    symbols = dict(zip("abc", numbers, strict=True))
    if "** 2" in formula and abs(symbols["a"]) > 1e150:
        symbols["a"] = 1e150  # declared numbers are held within real sizes by the reader
    result = eval(scalar_code(parse(formula).tree), {**scalar_namespace(), **symbols})
    assert isinstance(result, float | bool)
