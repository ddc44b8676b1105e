"""Sheets under their layers, compiled: what turns one row of inputs into recomputed values, twice.

- *scratch*: from the geometry, the materials, the steel and the actions, with the designer's admissible choices.
- *follow*: the designer's own declared values carried on wherever there is one.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Mapping
from functools import lru_cache
from pathlib import Path
from typing import Any, NamedTuple

from checker import shipped
from checker.declared.flanges import FLANGED
from checker.declared.symbols import DECLARABLE
from checker.errors import UsageError
from checker.sheet import store
from checker.sheet.load import DECLARED, LAYERS_FILE, SHEET_FOLDER, lay, load_layers, load_sheet
from checker.sheet.program import Program, Values, assemble, build
from checker.sheet.quantities import Layer, Sheet, packed, unpacked
from checker.sheet.rulefile import rules_digest

ASLANT = "links-aslant"
ANGLES = ("cot_theta_shear", "cot_theta_torsion")
OPTIONAL = ("gamma_C_stated", "gamma_S_stated", "M_Ed_max", "unsaid")
"""Inputs that a design may leave unsaid (nan)."""

FOLLOWED = tuple(dict.fromkeys([*(s for s in DECLARABLE if "theta" not in s), *ANGLES]))
"""The symbols whose declared value is carried on in the second recomputation."""


class Engine(NamedTuple):
    """A sheet under its layers with its two programs.

    Attributes:
        sheet: for names, units, clauses and workings.
        scratch: all quantities of the sheet.
        follow: the same, the designer's own numbers carried on.
    """

    sheet: Sheet
    scratch: Program
    follow: Program


def shape_layers(shape: str, *, aslant: bool, parts: bool = False) -> tuple[str, ...]:
    """The layers a section's shape, the sharing of torsion by its parts and its links call for."""
    plain = {"rectangle": ("rectangle",), "box": ("box",), **dict.fromkeys(FLANGED, ("flanged",))}
    share = ("flanges-share",) if parts else ()
    return (*plain.get(shape, ()), *share, *((ASLANT,) if aslant else ()))


@lru_cache(maxsize=64)
def engine(
    standard: str, annex: str, layers: tuple[str, ...], office: Path | None = None, *, columns: bool = False
) -> Engine:
    """The compiled sheet for a standard, an annex (a name or a path), shape layers and an office's layer file.

    Raises:
        RuleFaults: an unknown annex, or a layer file that can't be used.
    """
    outside = tuple(path for path in (annex_path(annex), office) if path is not None)
    key = store.key_of(rules_digest(outside), standard, annex, *layers, str(columns))
    kept = store.recall(key)
    if kept is not None:
        sheet_data, *programs = kept
        scratch, follow = (assemble(*program, columns=columns) for program in programs)
        return Engine(unpacked(sheet_data), scratch, follow)
    sheet = sheet_under(standard, annex, layers, office)
    wanted = [s for s, q in sheet.quantities.items() if not q.is_input]
    scratch = build(sheet, wanted, columns=columns)
    follow = build(sheet, wanted, columns=columns, follow=FOLLOWED)
    store.keep(key, (packed(sheet), *((p.inputs, p.source, p.code) for p in (scratch, follow))))
    return Engine(sheet, scratch, follow)


def recompute(
    wanted: Iterable[str],
    given: Mapping[str, Any],
    *,
    standard: str = "EN 1992-1-1:2004",
    annex: str = "recommended",
    layers: tuple[str, ...] = ("rectangle",),
    office: Path | None = None,
) -> Values:
    """Single quantities from whatever is known, e.g. `recompute(["V_Rd_max"], {"b_w": 400, "z": 578, ...})`.

    Args:
        wanted: symbols of the sheet.
        given: inside values (N, mm, MPa, rad) that stand in for inputs or formulas: plain floats, or numpy arrays.
        office: a layer file to lay over the annex and the shape, as for `engine`.

    Raises:
        UsageError: an input that the wanted quantities rest on is missing.
    """
    sheet = sheet_under(standard, annex, layers, office)
    columns = any(hasattr(value, "shape") for value in given.values())
    program = build(sheet, wanted, columns=columns, given=given)
    unsaid = {name: math.nan for name in program.inputs if name.endswith(DECLARED) or name in OPTIONAL}
    row = {**unsaid, "link_stress_option": 0.0, "torsion_counts": 1.0, "N_Ed": 0.0, **given}
    missing = [name for name in program.inputs if name not in row]
    if missing:
        raise UsageError(f"{', '.join(wanted)} can't be recomputed without {', '.join(missing)}")
    return program.run(row)


@lru_cache(maxsize=64)
def sheet_under(standard: str, annex: str, layers: tuple[str, ...], office: Path | None = None) -> Sheet:
    """The base sheet with the shape's layers, the annex and the office's layers over it, in this order.

    The annex lies over the shape, so that what it says of a quantity holds for every section.
    """
    sheet = load_sheet(standard)
    known = load_layers(shipped.folder("rules") / SHEET_FOLDER[standard] / LAYERS_FILE)
    for layer in (known[name] for name in layers):
        sheet = lay(sheet, layer)
    for layer in _outside_layers(annex):
        sheet = lay(sheet, layer)
        sheet.check_units(layer.entries)
    if office is not None:
        for layer in load_layers(office, shown_as=office.name).values():
            sheet = lay(sheet, layer)
            sheet.check_units(layer.entries)
    return sheet


def _outside_layers(annex: str) -> list[Layer]:
    """The annex by name, or from a file."""
    path = annex_path(annex)
    layers = list(load_layers(path, shown_as=shipped.shown(path)).values())
    return [layer for layer in layers if layer.entries]


def annex_path(annex: str) -> Path:
    """Where an annex's layers stand.

    Raises:
        UsageError: no annex of that name ships and no file of that name exists.
    """
    folder = shipped.folder("rules") / "annexes"
    if (folder / f"{annex}.yaml").is_file():
        return folder / f"{annex}.yaml"
    path = Path(annex)
    if path.suffix in (".yaml", ".yml") and path.is_file():
        return path
    names = ", ".join(sorted(p.stem for p in folder.glob("*.yaml")))
    raise UsageError(f"{annex}: no such annex; known are {names}, or the path of a layer file")
