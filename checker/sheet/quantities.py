"""The sheet: every quantity with its symbol, unit, clause and formula, and the layers laid over it.

- A `Quantity` without a formula is an input: it comes from the geometry, the materials, the case or a claim.
- A layer replaces or adds quantities. A national annex, a section shape, an office's limits and a slip are all
  layers; there is no other way to change a formula.
- Sheets are immutable; `Sheet.under(layer)` gives a new one.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from functools import cached_property
from typing import Any, NamedTuple

from checker.errors import Fault, RuleFaults
from checker.sheet.dimension import UNIT_DIMENSIONS, describe, dimension_of
from checker.sheet.expression import Expression, ExpressionError


class Source(NamedTuple):
    """Where an entry stands, for messages."""

    file: str
    line: int
    column: int


class Quantity(NamedTuple):
    """One line of the sheet.

    Attributes:
        symbol: the field's symbol in ASCII, e.g. `V_Rd_max`.
        name: what it is, in words.
        unit: the unit it is declared and shown in.
        clause: where the standard gives it; empty for what is measured.
        formula: its expression; None for an input.
        basis: whether the entry was read in a source or comes from memory.
        empirical: its numbers carry hidden units (MPa and mm), so dimensions can't be proved.
        larger: which way a larger declared value errs: unsafe, safe or mixed.
        kind: "fact", or "choice" where the standard leaves it to the designer.
        part: the file of the sheet it stands in.
    """

    symbol: str
    name: str
    unit: str
    clause: str = ""
    formula: Expression | None = None
    basis: str = ""
    empirical: bool = False
    larger: str = "mixed"
    kind: str = "fact"
    part: str = ""
    note: str = ""
    source: Source = Source("", 0, 0)

    @property
    def is_input(self) -> bool:
        return self.formula is None


class Layer(NamedTuple):
    """Quantities that replace or extend those of a sheet.

    Attributes:
        entries: symbol -> the fields that change (for a new symbol: all of them).
    """

    id: str
    name: str
    entries: Mapping[str, Mapping[str, object]]
    source: Source = Source("", 0, 0)


@dataclass(frozen=True)
class Sheet:
    """A set of quantities, checked to be complete and free of cycles."""

    id: str
    quantities: Mapping[str, Quantity]
    layers: tuple[str, ...] = ()

    def under(self, layer: Layer) -> Sheet:
        """This sheet with a layer over it.

        Raises:
            RuleFaults: the layer names a symbol that isn't known, or closes a cycle.
        """
        merged = dict(self.quantities)
        for symbol, fields in layer.entries.items():
            known = merged.get(symbol)
            merged[symbol] = (
                known._replace(**fields)  # type: ignore[arg-type]
                if known is not None
                else Quantity(symbol, **fields)  # type: ignore[arg-type]
            )
        sheet = Sheet(self.id, merged, (*self.layers, layer.id))
        sheet.check()
        return sheet

    def check(self) -> None:
        """Every symbol known, no cycles; all faults at once."""
        faults = [
            _fault(quantity, f"{quantity.symbol}: unknown symbol {name!r} in its formula")
            for quantity in self.quantities.values()
            if quantity.formula is not None
            for name in quantity.formula.names
            if name not in self.quantities
        ]
        if faults:
            raise RuleFaults(faults)
        assert self.order

    def check_units(self, symbols: Iterable[str] | None = None) -> None:
        """Every formula gives the unit its quantity is shown in (empirical ones excepted).

        Raises:
            RuleFaults: with all clashes, each at its formula.
        """
        dimensions = {s: UNIT_DIMENSIONS[q.unit] for s, q in self.quantities.items()}
        faults = []
        for symbol in self.quantities if symbols is None else symbols:
            quantity = self.quantities[symbol]
            if quantity.formula is None or quantity.empirical:
                continue
            try:
                found = dimension_of(quantity.formula, dimensions)
            except ExpressionError as error:
                faults.append(_fault(quantity, f"{symbol}: {error}", error.offset))
                continue
            if found is not None and found != dimensions[symbol]:
                said = f"{symbol} is in {quantity.unit}, its formula gives {describe(found)}"
                faults.append(_fault(quantity, said))
        if faults:
            raise RuleFaults(faults)

    @cached_property
    def order(self) -> tuple[str, ...]:
        """All symbols, each after those its formula needs.

        Raises:
            RuleFaults: a cycle, named from end to end.
        """
        done: dict[str, None] = {}
        trail: dict[str, None] = {}

        def visit(symbol: str) -> None:
            if symbol in done:
                return
            if symbol in trail:
                loop = [*list(trail)[list(trail).index(symbol) :], symbol]
                raise RuleFaults([_fault(self.quantities[symbol], "a cycle: " + " -> ".join(loop))])
            trail[symbol] = None
            formula = self.quantities[symbol].formula
            for name in formula.names if formula is not None else ():
                visit(name)
            del trail[symbol]
            done[symbol] = None

        for symbol in self.quantities:
            visit(symbol)
        return tuple(done)

    def needed(self, wanted: Iterable[str], given: frozenset[str] = frozenset()) -> tuple[str, ...]:
        """The wanted symbols and all they rest on, in order; what is given rests on nothing."""
        reach: set[str] = set()
        stack = list(wanted)
        while stack:
            symbol = stack.pop()
            if symbol in reach:
                continue
            reach.add(symbol)
            formula = self.quantities[symbol].formula
            stack.extend(formula.names if formula is not None and symbol not in given else ())
        return tuple(symbol for symbol in self.order if symbol in reach)


def packed(sheet: Sheet) -> tuple[object, ...]:
    """A sheet as plain data, to be kept between runs."""
    rows = [
        (q.symbol, q.name, q.unit, q.clause, q.formula and (q.formula.text, q.formula.names), q.basis, q.empirical,
         q.larger, q.kind, q.part, q.note, (q.source.file, q.source.line, q.source.column))
        for q in sheet.quantities.values()
    ]  # fmt: skip
    return sheet.id, tuple(rows), sheet.layers, sheet.order


def unpacked(data: tuple[Any, ...]) -> Sheet:
    """The sheet that `packed` made."""
    id_, rows, layers, order = data
    quantities = {
        row[0]: Quantity(*row[:4], row[4] and Expression(*row[4]), *row[5:11], Source(*row[11]))  # type: ignore[call-arg]
        for row in rows
    }
    sheet = Sheet(id_, quantities, layers)
    sheet.__dict__["order"] = order  # what the cached property would work out again
    return sheet


def _fault(quantity: Quantity, message: str, offset: int = 0) -> Fault:
    source = quantity.source
    return Fault(source.file, source.line, source.column + offset, message)
