"""Reading sheets and layers from YAML: every fault with its file, line and column, all at once.

- `load_sheet` reads every part of a standard's folder into one sheet.
- `load_layers` reads a file of layers (shapes, annexes, slips, an office's own).
- A symbol that ends in `_declared` is an input made on the spot: the value a designer states for that symbol.
"""

from __future__ import annotations

from keyword import iskeyword
from pathlib import Path

from checker import shipped
from checker.declared.tree import Mapping, Node, Scalar
from checker.errors import Fault, RuleFaults
from checker.sheet.dimension import UNIT_DIMENSIONS
from checker.sheet.expression import FUNCTIONS, Expression, ExpressionError, parse
from checker.sheet.quantities import Layer, Quantity, Sheet, Source
from checker.sheet.rulefile import open_rules

SHEET_FOLDER = {"EN 1992-1-1:2004": "en1992-1-1-2004"}
PARTS = (
    "materials", "section", "shear", "torsion", "longitudinal", "strut", "reserve", "details", "anchorage",
    "supports",
)  # fmt: skip
LAYERS_FILE = "shapes.yaml"
DECLARED = "_declared"

_FIELDS = {"name", "unit", "clause", "formula", "input", "basis", "empirical", "larger", "kind", "note"}
_CHOICES = {
    "larger": ("unsafe", "safe", "mixed"),
    "kind": ("fact", "choice"),
    "input": ("design", "geometry", "case", "claim"),
    "empirical": ("true", "false"),
    "unit": tuple(UNIT_DIMENSIONS),
}


def load_sheet(standard: str = "EN 1992-1-1:2004") -> Sheet:
    """The base sheet of a standard, checked to be whole.

    Raises:
        RuleFaults: anything wrong in one of its files.
    """
    folder = shipped.folder("rules") / SHEET_FOLDER[standard]
    quantities: dict[str, Quantity] = {}
    faults: list[Fault] = []
    for part in PARTS:
        path = folder / f"{part}.yaml"
        root = open_rules(path, shipped.shown(path))
        for symbol, (place, fields) in _entries(root, path, faults).items():
            if symbol in quantities:
                faults.append(
                    Fault(place.file, place.line, place.column, f"{symbol} stands twice in the sheet")
                )
                continue
            quantities[symbol] = Quantity(symbol, **fields, part=part, source=place)  # type: ignore[arg-type]
    if faults:
        raise RuleFaults(faults)
    return complete(Sheet(standard, quantities))


def complete(sheet: Sheet) -> Sheet:
    """The sheet with an input for every `X_declared` its formulas speak of.

    Raises:
        RuleFaults: unknown symbols and cycles.
    """
    known = dict(sheet.quantities)
    for quantity in sheet.quantities.values():
        for name in quantity.formula.names if quantity.formula is not None else ():
            base = known.get(name.removesuffix(DECLARED))
            if name.endswith(DECLARED) and name not in known and base is not None:
                known[name] = Quantity(name, f"declared: {base.name}", base.unit, source=base.source)
    result = Sheet(sheet.id, known, sheet.layers)
    result.check()
    return result


def lay(sheet: Sheet, layer: Layer) -> Sheet:
    """The sheet under a layer, complete again."""
    merged = Sheet(sheet.id, {**sheet.quantities}, sheet.layers)
    for symbol, fields in layer.entries.items():
        if symbol not in merged.quantities and not {"name", "unit"} <= set(fields):
            source = fields.get("source", layer.source)
            assert isinstance(source, Source)
            said = f"{symbol}: unknown symbol; a new quantity needs a name and a unit"
            raise RuleFaults([Fault(source.file, source.line, source.column, said)])
    for fields in layer.entries.values():
        formula = fields.get("formula")
        if isinstance(formula, Expression):
            merged = _with_declared(merged, formula)
    return complete(merged.under(layer)) if layer.entries else sheet


def _with_declared(sheet: Sheet, formula: Expression) -> Sheet:
    known = dict(sheet.quantities)
    for name in formula.names:
        base = known.get(name.removesuffix(DECLARED))
        if name.endswith(DECLARED) and name not in known and base is not None:
            known[name] = Quantity(name, f"declared: {base.name}", base.unit, source=base.source)
    return Sheet(sheet.id, known, sheet.layers)


def load_layers(path: Path, *, shown_as: str | None = None) -> dict[str, Layer]:
    """All layers of a file, by id.

    Raises:
        RuleFaults: anything wrong in the file.
    """
    file = shown_as or shipped.shown(path)
    root = open_rules(path, file)
    faults: list[Fault] = []
    layers: dict[str, Layer] = {}
    table = root.entries.get("layers")
    if table is None and ("rules" in root.entries or "slips" in root.entries):
        return {}  # an office's file may hold rules or slips alone
    if table is None or not isinstance(table.node, Mapping):
        raise RuleFaults([Fault(file, root.line, root.column, "expected 'layers:' with a table of layers")])
    for name, entry in table.node.entries.items():
        node = entry.node
        if not isinstance(node, Mapping):
            faults.append(Fault(file, node.line, node.column, f"layer {name}: expected a table"))
            continue
        entries = {
            symbol: {**fields, "source": place}
            for symbol, (place, fields) in _entries(node, path, faults, shown_as, partial=True).items()
        }
        source = Source(file, entry.key.line, entry.key.column)
        layers[name] = Layer(name, _text(node, "name"), entries, source)
    if faults:
        raise RuleFaults(faults)
    return layers


def _text(node: Mapping, key: str) -> str:
    entry = node.entries.get(key)
    return entry.node.text if entry is not None and isinstance(entry.node, Scalar) else ""


def _entries(
    node: Mapping, path: Path, faults: list[Fault], shown_as: str | None = None, *, partial: bool = False
) -> dict[str, tuple[Source, dict[str, object]]]:
    """The `quantities` of a table: symbol -> where it stands, and its fields checked and parsed."""
    file = shown_as or shipped.shown(path)
    table = node.entries.get("quantities")
    if table is None or not isinstance(table.node, Mapping):
        faults.append(Fault(file, node.line, node.column, "expected 'quantities:' with a table of symbols"))
        return {}
    result: dict[str, tuple[Source, dict[str, object]]] = {}
    for symbol, entry in table.node.entries.items():
        place = Source(file, entry.key.line, entry.key.column)
        if not symbol.isidentifier() or symbol.startswith("_") or iskeyword(symbol) or symbol in FUNCTIONS:
            faults.append(
                Fault(file, place.line, place.column, f"{symbol!r} is not a symbol: letters, digits and _")
            )
            continue
        if not isinstance(entry.node, Mapping):
            faults.append(Fault(file, place.line, place.column, f"{symbol}: expected a table"))
            continue
        fields = _fields(symbol, entry.node, file, faults)
        formula = fields.get("formula")
        if isinstance(formula, Formula):
            place = Source(file, formula.node.line, formula.node.column + formula.node.quoted)
            fields["formula"] = formula.expression
        if not partial and not {"name", "unit"} <= set(fields):
            faults.append(Fault(file, place.line, place.column, f"{symbol}: needs a name and a unit"))
            continue
        result[symbol] = (place, fields)
    return result


class Formula:
    """A parsed formula with the scalar it stood in."""

    def __init__(self, expression: Expression, node: Scalar) -> None:
        self.expression = expression
        self.node = node


def _fields(symbol: str, node: Mapping, file: str, faults: list[Fault]) -> dict[str, object]:
    fields: dict[str, object] = {}
    for key, entry in node.entries.items():
        value: Node = entry.node
        if key not in _FIELDS:
            said = f"{symbol}: unknown key {key!r}, expected one of {', '.join(sorted(_FIELDS))}"
            faults.append(Fault(file, entry.key.line, entry.key.column, said))
            continue
        if not isinstance(value, Scalar):
            faults.append(Fault(file, value.line, value.column, f"{symbol}: {key} must be plain text"))
            continue
        if key in _CHOICES and value.text not in _CHOICES[key]:
            said = f"{symbol}: {key} is one of {', '.join(_CHOICES[key])}, not {value.text!r}"
            faults.append(Fault(file, value.line, value.column, said))
            continue
        if key == "formula":
            try:
                fields[key] = Formula(parse(value.text), value)
            except ExpressionError as error:
                column = value.column + value.quoted + error.offset
                faults.append(Fault(file, value.line, column, f"{symbol}: {error}"))
        elif key == "empirical":
            fields[key] = value.text == "true"
        elif key != "input":
            fields[key] = value.text
    return fields
