"""The catalogue of rules and the sheet of formulas as a person reads them."""

from __future__ import annotations

import re
import textwrap
from collections.abc import Iterable

from checker import shipped
from checker.review.catalogue import BY_WINDOW, Catalogue, Rule
from checker.review.drafts import symbol_text
from checker.review.slips import Slip
from checker.sheet.quantities import Quantity, Sheet
from checker.sheet.shown import paper
from checker.sheet.workings import in_symbols

WIDTH = 100

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


def rule_list(catalogue: Catalogue) -> str:
    """Every rule: id, gravity, clause, title."""
    from tabulate import tabulate

    rows = [
        [
            rule.id,
            "by window" if rule.gravity == BY_WINDOW else rule.gravity,
            rule.clause or "of the quantity",
            title_of(rule),
        ]
        for rule in catalogue.rules.values()
    ]
    return str(tabulate(rows, ["rule", "gravity", "clause", "what it looks at"], tablefmt="plain")) + "\n"


def title_of(rule: Rule) -> str:
    return rule.title or f"declared {paper(rule.quantity)} against the recomputed one"


def rule_text(rule: Rule) -> str:
    """One rule explained: clause, what it compares, tolerance, gravity, why it matters."""
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
        ("tolerance", tolerance_text(rule)),
        ("gravity", GRAVITY_WORDS[rule.gravity]),
        ("applies", f"where {rule.applies}" if rule.applies else "always"),
        ("needs", f"one of these declared: {', '.join(rule.declared)}" if rule.declared else "nothing more"),
        ("why it matters", rule.why),
        ("says", rule.says),
        ("to do", rule.todo),
    ]
    return _table(rows)


def tolerance_text(rule: Rule) -> str:
    if rule.kind == "agrees":
        of = f" (of {symbol_text(rule.scale)} where that is larger)" if rule.scale else ""
        return f"its own rounding, the rounding it inherits, and {rule.tolerance * 100:g} %{of}"
    if rule.tolerance:
        return f"{rule.tolerance * 100:g} % and the rounding of what is declared"
    return "none"


def quantity_list(sheet: Sheet) -> str:
    """Every quantity with a formula, in parts."""
    lines: list[str] = []
    part = ""
    for quantity in sheet.quantities.values():
        if quantity.is_input or quantity.symbol.startswith("cot_of_"):
            continue
        if quantity.part != part:
            part = quantity.part
            lines += ["", part, ""]
        unit = f" [{quantity.unit}]" if quantity.unit not in ("-", "flag") else ""
        lines.append(
            f"{quantity.symbol}{unit}: {quantity.name}" + (f" — {quantity.clause}" if quantity.clause else "")
        )
        lines.append(f"    {_formula(quantity)}")
    return "\n".join(lines).lstrip("\n") + "\n"


def quantity_text(sheet: Sheet, symbol: str) -> str:
    """One quantity: name, unit, clause, formula, what it needs and what needs it, where the entry comes from."""
    quantity = sheet.quantities[symbol]
    needs = quantity.formula.names if quantity.formula is not None else ()
    needed_by = [
        q.symbol for q in sheet.quantities.values() if q.formula is not None and symbol in q.formula.names
    ]
    rows = [
        ("symbol", f"{symbol} ({paper(symbol)} on paper)"),
        ("what it is", quantity.name),
        ("unit", quantity.unit),
        ("clause", quantity.clause or "–"),
        ("formula", _formula(quantity) or "an input: measured, stated in the file, or declared"),
        ("reads", in_symbols(quantity)),
        ("choice", "left to the designer by the standard" if quantity.kind == "choice" else ""),
        (
            "a larger value",
            {"unsafe": "errs on the unsafe side", "safe": "errs on the safe side"}.get(quantity.larger, ""),
        ),
        ("numbers", "carry hidden units (MPa, mm): an empirical formula" if quantity.empirical else ""),
        ("basis", basis_text(quantity.basis)),
        ("note", quantity.note),
        ("needs", ", ".join(needs)),
        ("needed by", ", ".join(needed_by)),
        ("stands in", f"{quantity.source.file}:{quantity.source.line}"),
        ("layers on", ", ".join(sheet.layers)),
    ]
    return _table(rows)


def slip_list(slips: Iterable[Slip]) -> str:
    """Every slip: id, the quantities it replaces, what it says."""
    from tabulate import tabulate

    rows = [[slip.id, ", ".join(slip.replaces), slip.says] for slip in slips]
    return str(tabulate(rows, ["slip", "in", "a number is wrong because"], tablefmt="plain")) + "\n"


def slip_text(slip: Slip) -> str:
    """One slip: what it says, the wrong formula of each quantity it replaces, how common it is taken to be."""
    rows = [
        ("slip", slip.id),
        ("what happened", slip.says),
        ("weight", f"{slip.weight:g} (orders slips that fit equally)"),
    ]
    rows += [("wrong formula", f"{symbol} = {formula.text}") for symbol, formula in slip.replaces.items()]
    return _table(rows)


def basis_text(basis: str) -> str:
    """Where an entry comes from, its sources named: `read S3` becomes the text of `rules/sources.yaml`."""
    import yaml

    text = (shipped.folder("rules") / "sources.yaml").read_text(encoding="utf-8")
    sources = yaml.safe_load(text)["sources"]
    named = [f"{key}: {sources[key]}" for key in re.findall(r"S\d+", basis) if key in sources]
    words = {"memory": "recalled, not read: have the text of the standard beside you"}.get(basis, basis)
    return "; ".join([words, *named])


def _formula(quantity: Quantity) -> str:
    return "" if quantity.formula is None else f"{quantity.symbol} = {quantity.formula.text}"


def _table(rows: list[tuple[str, str]]) -> str:
    width = max(len(name) for name, text in rows if text) + 2
    lines = [
        textwrap.fill(
            text,
            WIDTH,
            initial_indent=name.ljust(width),
            subsequent_indent=" " * width,
            break_long_words=False,
            break_on_hyphens=False,
        )
        for name, text in rows
        if text
    ]
    return "\n".join(lines) + "\n"
