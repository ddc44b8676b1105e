"""The declared-design file, format 1: the one description of its keys, units, limits and choices."""

from __future__ import annotations

from checker.declared.fields import Field, Form, Record
from checker.declared.symbols import DECLARABLE, LINK_AREAS, MEANINGS, STRUT_ANGLES

STANDARD = "EN 1992-1-1:2004"
ONLY_STANDARD = f"samestrut judges {STANDARD} only"
VERDICTS = ("adequate", "not adequate")
MAX_SIZE = 100_000.0  # mm; a section of 100 m is a slip of the keyboard


def _size(key: str, doc: str, least: float = 10, most: float = MAX_SIZE) -> Field:
    return Field(key, "number", doc, required=True, unit="mm", least=least, most=most)


_SHAPE = Field(
    "shape",
    "choice",
    "Shape of the cross-section.",
    required=True,
    choices=("rectangle", "box", "circle", "polygon"),
    refused=dict.fromkeys(
        ("tee", "ell"),
        "tee and ell sections are not read yet; give the outline as a polygon (points: [[x, y], ...])",
    ),
)
_B = _size("b", "Width.")
_H = _size("h", "Height.")

SHAPES: dict[str, Record] = {
    "rectangle": Record("rectangle", "A solid rectangle.", (_SHAPE, _B, _H)),
    "box": Record(
        "box",
        "A rectangle with one rectangular void.",
        (
            _SHAPE,
            _B,
            _H,
            Field("wall", "number", "Thickness of all four walls.", unit="mm", least=10, most=MAX_SIZE),
            Field("walls", "record", "Thickness of the walls, each on its own.", record="walls"),
        ),
        (Form(("wall",)), Form(("walls",))),
    ),
    "circle": Record("circle", "A solid circle.", (_SHAPE, _size("diameter", "Diameter."))),
    "polygon": Record(
        "polygon",
        "Any outline of straight edges that doesn't cross itself, without voids.",
        (
            _SHAPE,
            Field(
                "points",
                "points",
                "Corners in order, [x, y]; x to the right, y up.",
                required=True,
                unit="mm",
                least=3,
                most=200,
            ),
        ),
    ),
}
"""The record of each shape a section can have."""

_WALLS = Record(
    "walls",
    "Wall thicknesses of a box.",
    (
        _size("side", "Thickness of each side wall."),
        _size("top", "Thickness of the top wall."),
        _size("bottom", "Thickness of the bottom wall."),
    ),
)

_MATERIALS = Record(
    "materials",
    "Characteristic strengths; the partial factors where the designer states them.",
    (
        Field("f_ck", "number", "Concrete cylinder strength.", True, "MPa", least=5, most=200),
        Field("f_yk", "number", "Yield strength of the bars.", True, "MPa", least=100, most=2000),
        Field(
            "f_ywk",
            "number",
            "Yield strength of the links; f_yk if left out.",
            False,
            "MPa",
            least=100,
            most=2000,
        ),
        Field("gamma_C", "number", "Partial factor of concrete.", above=0, most=5),
        Field("gamma_S", "number", "Partial factor of steel.", above=0, most=5),
    ),
)

_LINKS = Record(
    "links",
    "One set of links.",
    (
        Field("mark", "text", "Mark on the drawing; L1, L2, ... if left out."),
        Field("links", "link callout", "Short form of diameter and spacing, such as H10-150."),
        Field("diameter", "number", "Diameter.", unit="mm", least=3, most=60),
        Field("spacing", "number", "Spacing along the member.", unit="mm", least=1, most=10_000),
        Field(
            "legs", "count", "Upright legs of one set across the section.", required=True, least=1, most=100
        ),
        Field(
            "place",
            "choice",
            "perimeter: the outer link that encloses the section (if left out); inner: within it.",
            choices=("perimeter", "inner"),
        ),
        Field(
            "ends",
            "choice",
            "How the ends are anchored.",
            choices=("hooks_135", "hooks_90", "lapped", "welded", "open"),
        ),
        Field("angle", "number", "Angle to the member axis; 90 if left out.", unit="deg", above=0, most=90),
        Field("lap", "number", "Length of the lap.", unit="mm", least=1, most=10_000),
        Field("tail", "number", "Straight length after a hook.", unit="mm", least=1, most=10_000),
    ),
    (Form(("links",)), Form(("diameter", "spacing"))),
)

_BARS = Record(
    "bars",
    "Bars of one size on one face.",
    (
        Field("mark", "text", "Mark on the drawing; B1, B2, ... if left out."),
        Field(
            "face",
            "choice",
            "bottom and top count the two corner bars; left and right stand between the corner bars; "
            "corners: one in each corner; round: evenly along the link all round.",
            required=True,
            choices=("bottom", "top", "left", "right", "corners", "round"),
        ),
        Field("bars", "bar callout", "Short form of count and diameter, such as 4H25."),
        Field(
            "count",
            "count",
            "Number of bars.",
            required=True,
            least=1,
            most=1000,
            unless=("bars", "at", "face=corners"),
        ),
        Field("diameter", "number", "Diameter.", unit="mm", least=3, most=100),
        Field("layer", "count", "Layer, counted from the outside; 1 if left out.", least=1, most=10),
        Field(
            "at",
            "points",
            "Exact places [x, y] from the lower left corner (a polygon: in its own coordinates).",
            unit="mm",
            least=1,
            most=200,
        ),
    ),
    (Form(("bars",)), Form(("diameter",), ("count",))),
)


def _declared_field(symbol: str, unit: str) -> Field:
    doc = MEANINGS[symbol][0].upper() + MEANINGS[symbol][1:] + "."
    if symbol in LINK_AREAS:
        return Field(symbol, "area", doc, unit=unit, least=0, record="link_area")
    if symbol in STRUT_ANGLES:
        return Field(symbol, "number", doc, unit=unit, above=0, below=90)
    if symbol.startswith("cot_"):
        return Field(symbol, "number", doc, unit=unit, above=0)
    return Field(symbol, "number", doc, unit=unit, least=0)


_DECLARED = Record(
    "declared",
    "The designer's own numbers; each is optional, and its written decimals say how far it was rounded.",
    (
        *(_declared_field(symbol, unit) for symbol, unit in DECLARABLE.items()),
        Field("verdict", "choice", "What the designer concludes.", choices=VERDICTS),
    ),
)

_LINK_AREA = Record(
    "link_area",
    "A link area that says which legs it counts.",
    (
        Field("value", "number", "The area per length.", required=True, unit="mm2/mm", least=0),
        Field("counts", "choice", "Which legs the area counts.", choices=("one leg", "all legs")),
    ),
)

_CASE = Record(
    "case",
    "One load case.",
    (
        Field("name", "text", "Name of the case.", required=True),
        Field("V_Ed", "number", "Design shear force.", True, "kN"),
        Field("T_Ed", "number", "Design torsional moment.", True, "kNm"),
        Field("M_Ed", "number", "Design bending moment, sagging positive.", True, "kNm"),
        Field("N_Ed", "number", "Design axial force, compression positive; 0 if left out.", False, "kN"),
        Field(
            "M_Ed_max",
            "number",
            "Largest moment along the member in the same sagging or hogging zone, for the limit of 6.2.3(7).",
            False,
            "kNm",
        ),
        Field("declared", "record", "Numbers for this case; they win over the member's.", record="declared"),
    ),
)

_SUBMISSION = Record(
    "submission",
    "Who submits what; free text, other keys are allowed.",
    tuple(Field(key, "text", f"The {key}.") for key in ("project", "document", "revision", "designer")),
)

FORMAT = Record(
    "the file",
    "A declared concrete member under shear and torsion, samestrut format 1.",
    (
        Field("format", "count", "Version of this file format.", required=True, least=1, most=1),
        Field("member", "text", "Mark of the member.", required=True),
        Field("submission", "texts", _SUBMISSION.doc, record="submission"),
        Field(
            "standard",
            "choice",
            f"The standard the member was designed to; {STANDARD} if left out.",
            choices=(STANDARD,),
            refused={"EN 1992-1-1:2023": f"EN 1992-1-1:2023 is recognised but not judged; {ONLY_STANDARD}"},
        ),
        Field(
            "annex", "text", "Name of a national annex, or the path of a layer file; recommended if left out."
        ),
        Field(
            "torsion",
            "choice",
            "Whether equilibrium needs the torsion (if left out), or only compatibility.",
            choices=("equilibrium", "compatibility"),
        ),
        Field("section", "section", "The cross-section.", required=True),
        Field("materials", "record", _MATERIALS.doc, required=True, record="materials"),
        Field(
            "cover",
            "number",
            "Nominal cover to the outermost steel (the links).",
            True,
            "mm",
            least=1,
            most=1000,
        ),
        Field("aggregate", "number", "Largest size of the aggregate.", False, "mm", least=1, most=200),
        Field("links", "records", "The sets of links.", required=True, least=0, record="links"),
        Field("bars", "records", "The longitudinal bars.", required=True, least=1, record="bars"),
        Field("declared", "record", _DECLARED.doc, record="declared"),
        Field("cases", "records", "The load cases.", required=True, least=1, record="case"),
    ),
)

RECORDS: dict[str, Record] = {
    record.name: record
    for record in (_WALLS, _MATERIALS, _LINKS, _BARS, _DECLARED, _LINK_AREA, _CASE, _SUBMISSION)
}
"""Every record a field can name."""
