"""The declared-design file, format 1: the one description of its keys, units, limits and choices."""

from __future__ import annotations

from checker.declared.details_format import DETAIL_RECORDS, OF_CASE, OF_MEMBER
from checker.declared.fields import Field, Form, Record
from checker.declared.shapes_format import MAX_SIZE, SHAPES, SPANS, WALLS
from checker.declared.symbols import DECLARABLE, LINK_AREAS, MEANINGS, STRUT_ANGLES

__all__ = ["FORMAT", "MAX_SIZE", "ONLY_STANDARD", "RECORDS", "SHAPES", "STANDARD", "VERDICTS"]

STANDARD = "EN 1992-1-1:2004"
ONLY_STANDARD = f"samestrut judges {STANDARD} only"
VERDICTS = ("adequate", "not adequate")

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

_MANDREL = Field(
    "mandrel",
    "number",
    "Diameter of the mandrel the bends are made on.",
    unit="mm",
    least=1,
    most=2000,
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
            "perimeter: the outer link that encloses the section, of a tee, ell or i the web (if left out); "
            "inner: within it; flange: in each flange outstand, for the flange's own torsion.",
            choices=("perimeter", "inner", "flange"),
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
        Field(
            "f_ywk",
            "number",
            "Yield strength of this set, where it is another.",
            unit="MPa",
            least=100,
            most=2000,
        ),
        _MANDREL,
        Field("lap_on", "choice", "Which leg the lap lies on.", choices=("side", "top", "bottom")),
        Field(
            "at", "numbers", "Places of an inner set's legs across the web, from its left side.", unit="mm"
        ),
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
        Field(
            "bundle",
            "count",
            "Bars in each bundle; 1 if left out. count then counts the bundles.",
            least=1,
            most=4,
        ),
        _MANDREL,
        Field("anchored", "choice", "Anchored beyond the section.", choices=("fully", "not")),
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

_WEB_FLANGE = Record(
    "web_flange",
    "Shear between web and flange: how the force in one outstand changes along the member.",
    (
        Field("dF", "number", "Change of the force in one outstand.", True, "kN", least=0),
        Field("dx", "number", "Length over which it changes.", True, "mm", least=1, most=1_000_000),
        Field("A_sf_s", "number", "Bars across the junction over their spacing.", False, "mm2/mm", least=0),
        Field("flange", "choice", "Which flange of an i; top if left out.", choices=("top", "bottom")),
        Field(
            "cot_theta_f",
            "number",
            "Cotangent of the strut angle in the flange the designer chose.",
            least=1,
            most=2,
        ),
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
        Field("web_flange", "record", _WEB_FLANGE.doc, record="web_flange"),
        *(Field(name, "record", DETAIL_RECORDS[name].doc, record=name) for name in OF_CASE),
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
        Field("spans", "record", SPANS.doc, record="spans"),
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
        *(Field(name, "record", DETAIL_RECORDS[name].doc, record=name) for name in OF_MEMBER),
        Field("aggregate", "number", "Largest size of the aggregate.", False, "mm", least=1, most=200),
        Field("links", "records", "The sets of links.", required=True, least=0, record="links"),
        Field("bars", "records", "The longitudinal bars.", required=True, least=1, record="bars"),
        Field("declared", "record", _DECLARED.doc, record="declared"),
        Field("cases", "records", "The load cases.", required=True, least=1, record="case"),
    ),
)

RECORDS: dict[str, Record] = {
    record.name: record
    for record in (
        WALLS,
        SPANS,
        _MATERIALS,
        _LINKS,
        _BARS,
        _DECLARED,
        _LINK_AREA,
        _WEB_FLANGE,
        _CASE,
        _SUBMISSION,
        *DETAIL_RECORDS.values(),
    )
}
"""Every record a field can name."""
