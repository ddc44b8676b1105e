"""The catalogue of rules: one entry a rule, read from `rules/checks/` and from an office's own file.

- A rule holds no arithmetic: it names quantities of the sheet, a kind of comparison, a clause and sentences.
- An office's file adds rules or overrides fields of known ones, by id.
"""

from __future__ import annotations

from collections.abc import Mapping as MappingABC
from functools import lru_cache
from pathlib import Path
from typing import NamedTuple

from checker import shipped
from checker.declared.tree import Entry, Mapping, Node, Scalar, Sequence
from checker.errors import Fault, RuleFaults
from checker.sheet import store
from checker.sheet.quantities import Sheet
from checker.sheet.rulefile import open_rules, rules_digest

KINDS = (
    "agrees",
    "traced",
    "same",
    "implied",
    "at_most",
    "at_least",
    "holds",
    "basis",
    "basis-unsaid",
    "verdict",
)
GRAVITIES = ("unsafe", "breach", "mismatch", "remark")
BY_WINDOW = "by-window"
DEFAULT_TOLERANCE = 0.01


class Rule(NamedTuple):
    """One rule.

    Attributes:
        id: lasting words, never used again for another rule.
        kind: one of `KINDS`.
        gravity: one of `GRAVITIES`, or "by-window": unsafe where no common strut angle is left, else a breach.
        says, todo: sentences with `{placeholders}`.
        quantity, or_: for `agrees` the symbol, and readings that are right as well; for a limit on a choice the choice,
            so that a value beyond it is traced and named like any other.
        scale: for `agrees`, a quantity whose size the tolerance is a share of where it is larger than the value itself:
            the terms of a small difference.
        quantities: for `same`, `implied`, `basis`.
        provided, limit: for `at_most` and `at_least`.
        fact, flag: for `holds`: a fact measured from the geometry, or a flag of the sheet.
        declared: the rule runs only where one of these symbols is declared.
        needs: inputs that must be stated, else the rule is not checked.
        applies: a flag of the sheet that must hold.
        scope: "member" for what doesn't depend on the case, else "case".
    """

    id: str
    kind: str
    title: str = ""
    clause: str = ""
    gravity: str = "mismatch"
    says: str = ""
    todo: str = ""
    why: str = ""
    tolerance: float = 0.0
    quantity: str = ""
    or_: tuple[str, ...] = ()
    scale: str = ""
    quantities: tuple[str, ...] = ()
    provided: tuple[str, ...] = ()
    limit: str = ""
    fact: str = ""
    flag: str = ""
    declared: tuple[str, ...] = ()
    needs: tuple[str, ...] = ()
    applies: str = ""
    scope: str = "case"

    @property
    def symbols(self) -> tuple[str, ...]:
        """Every symbol of the sheet the rule speaks of, `X_declared` included."""
        single = (self.quantity, self.scale, self.limit, self.flag, self.applies)
        return tuple(s for s in (*single, *self.or_, *self.quantities, *self.provided, *self.needs) if s)


class Catalogue(NamedTuple):
    """All rules in order; `office` is the file an office laid over them, which may hold slips as well."""

    rules: MappingABC[str, Rule]
    office: Path | None = None

    def by_quantity(self, symbol: str) -> Rule | None:
        """The rule that holds a declared value against the recomputed one."""
        for rule in self.rules.values():
            if rule.kind == "agrees" and rule.quantity == symbol:
                return rule
        return None


_KEYS = {name.rstrip("_") for name in Rule._fields} - {"id"}
_LISTS = ("or", "quantities", "provided", "declared", "needs")


@lru_cache(maxsize=8)
def load_catalogue(extra: Path | None = None, shown_as: str = "") -> Catalogue:
    """The shipped rules, with an office's file over them.

    Raises:
        RuleFaults: anything wrong in a rule file, all faults at once.
    """
    rules: dict[str, Rule] = {}
    faults: list[Fault] = []
    key = store.key_of(rules_digest(), "catalogue", *Rule._fields)
    kept = store.recall(key)
    if kept is not None:
        rules = {fields[0]: Rule(*fields) for fields in kept}
    else:
        for path in sorted((shipped.folder("rules") / "checks").glob("*.yaml")):
            _read_rules(path, shipped.shown(path), rules, faults)
        if not faults:
            store.keep(key, [tuple(rule) for rule in rules.values()])
    if extra is not None:
        _read_rules(extra, shown_as or extra.name, rules, faults)
    if faults:
        raise RuleFaults(faults)
    return Catalogue(rules, extra)


def check_against(catalogue: Catalogue, sheet: Sheet, file: str) -> None:
    """Every symbol a rule names is in the sheet.

    Raises:
        RuleFaults: names the rules that speak of something unknown.
    """
    known = set(sheet.quantities)
    faults = [
        Fault(file, 1, 1, f"{rule.id}: unknown symbol {symbol!r}")
        for rule in catalogue.rules.values()
        for symbol in rule.symbols
        if symbol not in known and symbol.removesuffix("_declared") not in known
    ]
    if faults:
        raise RuleFaults(faults)


def _read_rules(path: Path, file: str, rules: dict[str, Rule], faults: list[Fault]) -> None:
    root = open_rules(path, file)
    table = root.entries.get("rules")
    if table is None or not isinstance(table.node, Mapping):
        if "layers" in root.entries or "slips" in root.entries:
            return
        faults.append(Fault(file, 1, 1, "expected 'rules:' with a table of rules"))
        return
    defaults: dict[str, object] = {}
    entry = root.entries.get("defaults")
    if entry is not None and isinstance(entry.node, Mapping):
        defaults = _rule_fields("defaults", entry.node, file, faults)
    for id_, entry in table.node.entries.items():
        if not isinstance(entry.node, Mapping):
            faults.append(Fault(file, entry.key.line, entry.key.column, f"{id_}: expected a table"))
            continue
        found = _rule_fields(id_, entry.node, file, faults)
        if id_ in rules:
            rules[id_] = rules[id_]._replace(**found)  # type: ignore[arg-type]
            continue
        merged = {**defaults, **found}
        if "kind" not in merged:
            faults.append(
                Fault(file, entry.key.line, entry.key.column, f"{id_}: needs a kind ({', '.join(KINDS)})")
            )
            continue
        rules[id_] = Rule(id_, **merged)  # type: ignore[arg-type]


def _rule_fields(id_: str, node: Mapping, file: str, faults: list[Fault]) -> dict[str, object]:
    found: dict[str, object] = {}
    for key, entry in node.entries.items():
        if key not in _KEYS:
            said = f"{id_}: unknown key {key!r}, expected one of {', '.join(sorted(_KEYS))}"
            faults.append(Fault(file, entry.key.line, entry.key.column, said))
            continue
        name = "or_" if key == "or" else key
        try:
            found[name] = _value(key, entry)
        except ValueError as error:
            faults.append(Fault(file, entry.node.line, entry.node.column, f"{id_}: {error}"))
    return found


def _value(key: str, entry: Entry) -> object:
    node = entry.node
    if key in _LISTS:
        if not isinstance(node, Sequence):
            raise ValueError(f"{key} must be a list: [a, b]")
        return tuple(_plain(item) for item in node.items)
    text = _plain(node)
    if key == "tolerance":
        value = float(text)
        if not 0 <= value < 1:
            raise ValueError("tolerance is a share between 0 and 1")
        return value
    choices = {"kind": KINDS, "gravity": (*GRAVITIES, BY_WINDOW), "scope": ("member", "case")}.get(key)
    if choices is not None and text not in choices:
        raise ValueError(f"{key} is one of {', '.join(choices)}, not {text!r}")
    return text


def _plain(node: Node) -> str:
    if not isinstance(node, Scalar):
        raise ValueError("expected plain text")
    return node.text
