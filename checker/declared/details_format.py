"""Optional parts of the file that only detailing rules ask for: cover, anchorage, laps, supports, loads near them.

- Every key becomes one input of the sheet (`SYMBOLS`); a choice becomes its place among its choices, counted from 0.
- What a file leaves out is unsaid, and the rules that need it are "not checked".
"""

from __future__ import annotations

from checker.declared.fields import Field, Record

EXPOSURES = ("X0", "XC1", "XC2", "XC3", "XC4", "XD1", "XS1", "XD2", "XS2", "XD3", "XS3")
"""Exposure classes in the order of Table 4.4N; each but X0, XC1 and XC4 shares its column with the next."""


def _mm(key: str, doc: str, most: float = 100_000) -> Field:
    return Field(key, "number", doc, unit="mm", least=0, most=most)


COVER_DETAILS = Record(
    "cover_details",
    "What the cover has to be judged by.",
    (
        Field("exposure", "choice", "Exposure class, the worst where there are several.", choices=EXPOSURES),
        Field(
            "structural_class",
            "choice",
            "Structural class; S4 if left out, two classes more for a working life of 100 years.",
            choices=("S1", "S2", "S3", "S4", "S5", "S6"),
        ),
        Field("working_life", "number", "Design working life in years; 50 if left out.", least=1, most=1000),
        _mm("deviation", "Allowance for deviation of the cover; the recommended one if left out.", 100),
        Field(
            "cast_on",
            "choice",
            "What the concrete is cast against; formwork if left out.",
            choices=("formwork", "prepared ground", "soil"),
        ),
    ),
)

_BAR_END = (
    Field("length", "number", "Length provided.", True, "mm", least=0, most=100_000),
    Field("diameter", "number", "Diameter of the bars.", True, "mm", least=3, most=100),
    Field(
        "shape",
        "choice",
        "How the bars end; straight if left out.",
        choices=("straight", "bend", "hook", "loop"),
    ),
    Field("bond", "choice", "Bond conditions; the worse if left out.", choices=("other", "good")),
    _mm("c_d", "Least of cover, side cover and half the clear distance (8.4.4).", 1000),
    Field(
        "stress",
        "number",
        "Stress in the bar where it begins; f_yd if left out.",
        unit="MPa",
        least=0,
        most=2000,
    ),
    Field("pressure", "number", "Pressure across the bar.", unit="MPa", least=0, most=100),
)
"""What an anchorage and a lap have in common."""

ANCHORAGE = Record(
    "anchorage",
    "The anchorage of longitudinal bars to be checked, the shortest one.",
    (
        *_BAR_END,
        Field(
            "in", "choice", "What the bars carry; tension if left out.", choices=("tension", "compression")
        ),
    ),
)

LAP = Record(
    "lap",
    "The lap of longitudinal bars to be checked, the shortest one.",
    (
        *_BAR_END,
        Field(
            "share", "number", "Share lapped within 0.65 l_0, such as 50 %; all if left out.", least=0, most=1
        ),
        _mm("gap", "Clear distance between the two bars of a lap; touching if left out.", 1000),
        Field("transverse", "number", "Area of all bars across the lap.", unit="mm2", least=0, most=1e6),
    ),
)

SUPPORT = Record(
    "support",
    "The support where the case stands, for bars that have to reach it.",
    (
        Field(
            "kind", "choice", "End, inner or indirect support.", True, choices=("end", "inner", "indirect")
        ),
        Field("span_bars", "number", "Area of the bottom bars in the span.", unit="mm2", least=0, most=1e6),
        Field(
            "bottom_bars", "number", "Area of those that reach the support.", unit="mm2", least=0, most=1e6
        ),
        Field("top_bars", "number", "Area of the top bars over it.", unit="mm2", least=0, most=1e6),
        Field("diameter", "number", "Diameter of the bottom bars.", unit="mm", least=3, most=100),
        _mm("length", "How far they go on behind its face."),
        Field("reaction", "number", "Force that a carried beam hangs into this one.", unit="kN", least=0),
        Field("hanger_links", "number", "Area of the hanger links for it.", unit="mm2", least=0, most=1e6),
    ),
)

NEAR_SUPPORT = Record(
    "near_support",
    "Where the case's shear is taken, and what was done to it near the support.",
    (
        Field("V_face", "number", "Shear force at the face of the support.", unit="kN", least=0),
        Field("at", "choice", "Where V_Ed is taken.", choices=("face", "d from the face", "span")),
        Field("loading", "choice", "What loads the beam there.", choices=("point loads", "mainly uniform")),
        _mm("a_v", "Distance from the face of the support to a load that was reduced (6.2.3(8))."),
        Field("V_whole", "number", "Shear force with no load reduced.", unit="kN", least=0),
        Field("load_on", "choice", "Face that the reduced load acts on.", choices=("bottom", "top")),
        Field(
            "bars_anchored", "choice", "Tension bars fully anchored at the support.", choices=("not", "fully")
        ),
        Field(
            "hung", "number", "Load hung from the bottom, N for each mm of length (kN/m).", least=0, most=1e5
        ),
        Field("hanger_links", "number", "Links kept for it.", unit="mm2/mm", least=0, most=1e3),
    ),
)

DETAIL_RECORDS: dict[str, Record] = {
    record.name: record for record in (COVER_DETAILS, ANCHORAGE, LAP, SUPPORT, NEAR_SUPPORT)
}

SYMBOLS: dict[str, dict[str, str]] = {
    "cover_details": {
        "exposure": "exposure", "structural_class": "structural_class_stated", "working_life": "working_life",
        "deviation": "delta_c_dev_stated", "cast_on": "cast_on",
    },
    "anchorage": {
        "length": "l_anchored", "diameter": "phi_anchored", "shape": "anchor_bent", "bond": "anchor_bond",
        "c_d": "c_d_anchor", "stress": "sigma_anchor", "pressure": "p_anchor", "in": "anchor_pressed",
    },
    "lap": {
        "length": "l_lapped", "diameter": "phi_lapped", "shape": "lap_bent", "bond": "lap_bond", "c_d": "c_d_lap",
        "stress": "sigma_lap", "pressure": "p_lap", "share": "lap_share", "gap": "lap_gap",
        "transverse": "A_st_lap",
    },
    "support": {
        "kind": "support_kind", "span_bars": "A_s_span", "bottom_bars": "A_s_support", "top_bars": "A_s_support_top",
        "diameter": "phi_support", "length": "l_support", "reaction": "R_hung", "hanger_links": "A_s_hanger",
    },
    "near_support": {
        "V_face": "V_face", "at": "V_taken_at", "loading": "uniform_load", "a_v": "a_v", "V_whole": "V_whole",
        "load_on": "load_on_top", "bars_anchored": "support_anchored", "hung": "q_hung",
        "hanger_links": "A_hung_s",
    },
}  # fmt: skip
"""Record -> key -> input of the sheet."""

OF_MEMBER = ("cover_details", "anchorage", "lap", "support")
OF_CASE = ("anchorage", "lap", "support", "near_support")
UNSAID: dict[str, float] = {
    symbol: float("nan") for symbols in SYMBOLS.values() for symbol in symbols.values()
}
"""Every such input as it stands where nothing is said."""
