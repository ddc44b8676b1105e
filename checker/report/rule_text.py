"""One rule as a person reads it: clause, what it compares and by which formulas, why, and its pair of examples."""

from __future__ import annotations

from pathlib import Path

from checker import shipped
from checker.report.catalogue_text import formula_text, table_text, title_of
from checker.review.catalogue import BY_WINDOW, Rule
from checker.review.drafts import symbol_text
from checker.review.engine import sheet_under
from checker.sheet.quantities import Quantity

SHAPES: tuple[tuple[str, ...], ...] = (("rectangle",), ("box",), ("flanged",), ("flanged", "flanges-share"))
"""Layers under which the quantities of a rule are looked for, the plainest first."""

KIND_WORDS = {
    "agrees": "the declared value against the recomputed one",
    "traced": "declared values that come out as if the section had another size",
    "same": "two declared values are equal",
    "implied": "the strut angle solved back from declared values against the one claimed",
    "at_most": "what is provided is at most the limit",
    "at_least": "what is provided is at least the limit",
    "holds": "a yes or no measured from the declared section, links and bars",
    "basis": "what a declared link area says it counts against what the number is",
    "basis-unsaid": "a declared link area that doesn't say what it counts",
    "verdict": "the declared verdict against everything else that was found",
}
GRAVITY_WORDS = {
    "unsafe": "unsafe: the member as provided does not hold, or a detail that equilibrium rests on is missing",
    "breach": "breach: a rule of the standard is broken",
    "mismatch": "mismatch: a declared number is wrong",
    "remark": "remark: worth saying, needs no answer",
    BY_WINDOW: "unsafe where no admissible strut angle is left on which the member holds, else a breach",
}


def rule_text(rule: Rule) -> str:
    """One rule explained: clause, what it compares, its formulas, tolerance, gravity, why it matters, its examples."""
    compared = {
        "agrees": [rule.quantity, *rule.or_],
        "at_most": [*rule.provided, rule.limit],
        "at_least": [*rule.provided, rule.limit],
    }.get(rule.kind, [*rule.quantities, rule.fact or rule.flag])
    rows = [
        ("rule", rule.id),
        ("what it looks at", title_of(rule)),
        ("clause", rule.clause or "that of the quantity; see samestrut sheet " + rule.quantity),
        ("compares", f"{KIND_WORDS[rule.kind]}: {', '.join(name for name in compared if name)}"),
        *_formulas(rule, compared),
        ("tolerance", tolerance_text(rule)),
        ("gravity", GRAVITY_WORDS[rule.gravity]),
        ("applies", _applies(rule)),
        ("needs", _needs(rule)),
        ("why it matters", rule.why),
        ("says", rule.says),
        ("to do", rule.todo),
        *_examples(rule),
    ]
    return table_text(rows)


def tolerance_text(rule: Rule) -> str:
    if rule.kind == "agrees":
        of = f" (of {symbol_text(rule.scale)} where that is larger)" if rule.scale else ""
        return f"its own rounding, the rounding it inherits, and {rule.tolerance * 100:g} %{of}"
    if rule.tolerance:
        return f"{rule.tolerance * 100:g} % and the rounding of what is declared"
    return "none"


def _quantity(symbol: str) -> Quantity | None:
    """A quantity under the first shape that has it."""
    for layers in SHAPES:
        found = sheet_under("EN 1992-1-1:2004", "recommended", layers).quantities.get(
            symbol.removesuffix("_declared")
        )
        if found is not None:
            return found
    return None


def _formulas(rule: Rule, compared: list[str]) -> list[tuple[str, str]]:
    """A line a quantity compared: its formula, or what it is."""
    lines = []
    for symbol in dict.fromkeys(name for name in compared if name and name != rule.fact):
        quantity = _quantity(symbol)
        if quantity is None:
            continue
        if symbol.endswith("_declared"):
            lines.append(f"{symbol_text(quantity.symbol)}: as it is declared")
            continue
        told = formula_text(quantity) or f"{symbol_text(symbol)}: {quantity.name}, measured or stated"
        lines.append(told + (f" [{quantity.clause}]" if quantity.clause else ""))
    return [("formula" if index == 0 else "", line) for index, line in enumerate(lines)]


def _applies(rule: Rule) -> str:
    if not rule.applies:
        return "always"
    quantity = _quantity(rule.applies)
    return f"where {quantity.name if quantity else rule.applies}"


def _needs(rule: Rule) -> str:
    """What a file must hold for the rule to run."""
    needs = [f"one of these declared: {', '.join(rule.declared)}"] if rule.declared else []
    for name in rule.needs:
        quantity = _quantity(name)
        needs.append(f"the key {quantity.note}" if quantity and quantity.note else name)
    return "; ".join(needs) or "nothing more"


def _examples(rule: Rule) -> list[tuple[str, str]]:
    """The file that passes and the one that fails, with the comment that says what differs, in a checkout."""
    folder = shipped.folder("rules").parent / "tests" / "corpus" / rule.id
    found = []
    for name in ("pass", "fail"):
        place, path = f"tests/corpus/{rule.id}/{name}.yaml", Path(folder) / f"{name}.yaml"
        if path.is_file():
            with open(path, encoding="utf-8") as stream:
                place += ": " + stream.readline().lstrip("# ").strip()
        found.append(("examples" if name == "pass" else "", place))
    return found
