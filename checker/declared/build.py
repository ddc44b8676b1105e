"""A declared file to a `Design`: the whole way from bytes, with every fault of the file at once."""

from __future__ import annotations

import os
from collections.abc import Mapping

from checker.declared.build_section import build_materials, build_section
from checker.declared.build_steel import build_bars, build_cases, build_links
from checker.declared.check import check_record
from checker.declared.details import details_of
from checker.declared.details_format import OF_MEMBER
from checker.declared.format import FORMAT, STANDARD
from checker.declared.found import Faults, Values
from checker.declared.model import BarGroup, Case, Design, LinkSet, Materials, Number, Place, Section
from checker.declared.reading import MAX_BYTES, read, read_tree
from checker.declared.steel_fit import bar_faults, corners_of, link_faults
from checker.errors import Fault, InputFaults


def load_file(path: str | os.PathLike[str], shown_as: str | None = None) -> Design:
    """Read a declared design from a file; raises InputFaults, also for a file that can't be read.

    `shown_as` is how the file is named in faults and reports (the path as given, if left out).
    """
    file = os.fspath(path) if shown_as is None else shown_as
    try:
        with open(path, "rb") as stream:
            data = stream.read(MAX_BYTES + 1)
    except OSError as error:
        raise InputFaults([Fault(file, 1, 1, f"the file can't be read: {error.strerror or error}")]) from None
    return load_text(data, file)


def load_text(text: str | bytes, file: str) -> Design:
    """Read a declared design from the contents of a file named `file`; raises InputFaults with every fault.

    A name ending in `.json` is read as JSON, anything else as YAML.
    """
    source = read(text, file)
    root, form_faults = read_tree(source.text, file)
    faults = Faults(file)
    faults.found.extend(form_faults)
    values = None if root is None else check_record(root, FORMAT, "the file", faults)
    design = None if values is None else _design(values, file, source.sha256, faults)
    if design is None or faults.found:
        raise InputFaults(faults.found)
    return design


def _design(values: Values, file: str, sha256: str, faults: Faults) -> Design | None:
    """The design, or None after noting what doesn't hold together; parts that are sound are still checked."""
    section = build_section(values.get("section", Values), values.get("spans", Values), faults)
    materials = build_materials(values.get("materials", Values))
    sets: list[Values] = values.get("links", list) or []
    groups: list[Values] = values.get("bars", list) or []
    cases: list[Values] = values.get("cases", list) or []
    links = build_links(sets, faults)
    bars = build_bars(groups, None if section is None else corners_of(section), faults)
    built_cases = build_cases(cases, values.get("declared", Values), section, faults)
    cover = values.get("cover", Number)
    if (
        section is not None
        and cover is not None
        and len(links) == len(sets)
        and values.get("links", list) is not None
    ):
        _check_fit(values, section, cover, links, bars, faults)
    if section is None or materials is None or faults.found:
        return None
    return _assemble(
        values, file, sha256, section, materials, links, [group for group, _ in bars], built_cases
    )


def _check_fit(
    values: Values,
    section: Section,
    cover: Number,
    links: list[LinkSet],
    bars: list[tuple[BarGroup, Place]],
    faults: Faults,
) -> None:
    before = len(faults.found)
    for place, message in link_faults(section, cover, links):
        faults.add(place, message)
    if (
        len(faults.found) == before
    ):  # without room for the links, what is said of the bars would only repeat it
        for place, message in bar_faults(section, cover, values.get("aggregate", Number), links, bars):
            faults.add(place, message)


def _assemble(
    values: Values,
    file: str,
    sha256: str,
    section: Section,
    materials: Materials,
    links: list[LinkSet],
    bars: list[BarGroup],
    cases: list[Case],
) -> Design:
    submission: Mapping[str, str] = values.get("submission", dict) or {}
    return Design(
        file=file,
        sha256=sha256,
        member=values.need("member", str),
        submission=submission,
        standard=values.get("standard", str) or STANDARD,
        annex=values.get("annex", str) or "recommended",
        torsion=values.get("torsion", str) or "equilibrium",
        section=section,
        materials=materials,
        cover=values.need("cover", Number),
        aggregate=values.get("aggregate", Number),
        links=tuple(links),
        bars=tuple(bars),
        cases=tuple(cases),
        places=values.key_places,
        details=details_of(values, OF_MEMBER),
    )
