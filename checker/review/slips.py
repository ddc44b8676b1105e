"""The catalogue of slips: classical wrong formulas, each a layer over the quantities it replaces.

Read from `rules/slips.yaml` (and an office's file with `slips:`) only when a declared number is wrong.
"""

from __future__ import annotations

from collections.abc import Mapping as MappingABC
from functools import lru_cache
from pathlib import Path
from typing import NamedTuple

from checker import shipped
from checker.declared.tree import Mapping, Scalar, Sequence
from checker.errors import Fault, RuleFaults
from checker.sheet.expression import Expression, ExpressionError, parse
from checker.sheet.rulefile import open_rules


class Slip(NamedTuple):
    """One slip.

    - `replaces`: the quantities it replaces, with the wrong formulas.
    - `weight`: how common it is, to order slips that fit equally well.
    - `says`: completes "… because" in a sentence a designer reads.
    """

    id: str
    replaces: MappingABC[str, Expression]
    weight: float
    says: str


class Factor(NamedTuple):
    """A plain factor, tried where no slip fits."""

    factor: float
    says: str


class Slips(NamedTuple):
    slips: tuple[Slip, ...]
    factors: tuple[Factor, ...]


@lru_cache(maxsize=4)
def load_slips(extra: Path | None = None) -> Slips:
    """The shipped slips, an office's own behind them (the same id replaces).

    Raises:
        RuleFaults: anything wrong in a file, all faults at once.
    """
    found: dict[str, Slip] = {}
    factors: list[Factor] = []
    faults: list[Fault] = []
    path = shipped.folder("rules") / "slips.yaml"
    _read(open_rules(path, shipped.shown(path)), shipped.shown(path), found, factors, faults)
    if extra is not None:
        _read(open_rules(extra, extra.name), extra.name, found, factors, faults)
    if faults:
        raise RuleFaults(faults)
    return Slips(tuple(found.values()), tuple(factors))


def _read(
    root: Mapping, file: str, found: dict[str, Slip], factors: list[Factor], faults: list[Fault]
) -> None:
    table = root.entries.get("slips")
    for id_, entry in table.node.entries.items() if table and isinstance(table.node, Mapping) else ():
        slip = _slip(id_, entry.node, file, faults) if isinstance(entry.node, Mapping) else None
        if slip is None:
            said = f"{id_}: expected replaces (symbol: formula), weight and says"
            faults.append(Fault(file, entry.key.line, entry.key.column, said))
        else:
            found[id_] = slip
    listed = root.entries.get("factors")
    for item in listed.node.items if listed and isinstance(listed.node, Sequence) else ():
        fields = {key: e.node for key, e in item.entries.items()} if isinstance(item, Mapping) else {}
        number, says = fields.get("factor"), fields.get("says")
        if isinstance(number, Scalar) and isinstance(says, Scalar):
            factors.append(Factor(float(number.text), says.text))
        else:
            faults.append(Fault(file, item.line, item.column, "a factor needs factor and says"))


def _slip(id_: str, node: Mapping, file: str, faults: list[Fault]) -> Slip | None:
    fields = {key: entry.node for key, entry in node.entries.items()}
    table, weight, says = fields.get("replaces"), fields.get("weight"), fields.get("says")
    if not (isinstance(table, Mapping) and isinstance(weight, Scalar) and isinstance(says, Scalar)):
        return None
    replaces: dict[str, Expression] = {}
    for symbol, entry in table.entries.items():
        formula = entry.node
        if not isinstance(formula, Scalar):
            return None
        try:
            replaces[symbol] = parse(formula.text)
        except ExpressionError as error:
            column = formula.column + formula.quoted + error.offset
            faults.append(Fault(file, formula.line, column, f"{id_}: {error}"))
    return Slip(id_, replaces, float(weight.text), says.text)
