"""The catalogue of rules and the sheet of formulas as a person reads them."""

from __future__ import annotations

import re
import textwrap
from collections.abc import Iterable

from checker import shipped
from checker.review.catalogue import BY_WINDOW, Catalogue, Rule
from checker.review.slips import Slip
from checker.sheet.quantities import Quantity, Sheet
from checker.sheet.shown import paper
from checker.sheet.workings import in_symbols

WIDTH = 100


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
        lines.append(f"    {formula_text(quantity)}")
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
        ("formula", formula_text(quantity) or "an input: measured, stated in the file, or declared"),
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
    return table_text(rows)


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
    return table_text(rows)


def basis_text(basis: str) -> str:
    """Where an entry comes from, its sources named: `read S3` becomes the text of `rules/sources.yaml`."""
    import yaml

    text = (shipped.folder("rules") / "sources.yaml").read_text(encoding="utf-8")
    sources = yaml.safe_load(text)["sources"]
    named = [f"{key}: {sources[key]}" for key in re.findall(r"S\d+", basis) if key in sources]
    words = {"memory": "recalled, not read: have the text of the standard beside you"}.get(basis, basis)
    return "; ".join([words, *named])


def formula_text(quantity: Quantity) -> str:
    return "" if quantity.formula is None else f"{quantity.symbol} = {quantity.formula.text}"


def table_text(rows: list[tuple[str, str]]) -> str:
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
