"""What a designer claims in one case, and the row of inputs the sheet runs on.

- Link areas are brought to the basis of their formula: all legs for shear, total and provided; one leg for torsion.
- A claimed strut angle becomes its cotangent; `theta` alone claims both angles.
"""

from __future__ import annotations

import math
from collections.abc import Mapping
from typing import Any, NamedTuple

from checker.declared.details_format import UNSAID
from checker.declared.model import Case, DeclaredValue, Design
from checker.geometry.measure import Measured

NAN = math.nan
LEG_BASIS = {
    "A_sw_s_shear": "all legs",
    "A_sw_s_torsion": "one leg",
    "A_sw_s_total": "all legs",
    "A_sw_s_provided": "all legs",
}
"""What each link area counts in its formula."""


_NO_WEB_FLANGE = dict.fromkeys(
    ("delta_F_d", "delta_x", "A_sf_s", "cot_theta_f_stated", "web_flange_top"), NAN
)


class Claim(NamedTuple):
    """One declared number, ready to be compared.

    Attributes:
        symbol: the sheet's symbol it is compared with.
        value, half_step: inside units, on the formula's leg basis.
        source: as it was written.
        other: its value if it counted the other basis (link areas only; nan otherwise).
        swapped: the number fits the other basis, and is carried on with it.
    """

    symbol: str
    value: float
    half_step: float
    source: DeclaredValue
    other: float = NAN
    swapped: bool = False


def legs_factor(symbol: str, counts: str | None, n_legs: float) -> float:
    """What a declared link area is multiplied with to stand on its formula's basis."""
    basis = LEG_BASIS[symbol]
    if counts is None or counts == basis:
        return 1.0
    legs = 2.0 if symbol == "A_sw_s_torsion" else n_legs
    return 1.0 / legs if basis == "one leg" else legs


def claims_of(case: Case, measured: Measured) -> dict[str, Claim]:
    """The claims of a case by the sheet's symbol."""
    claims: dict[str, Claim] = {}
    legs = measured.inputs["n_legs"]
    for symbol, declared in case.declared.items():
        value, half = declared.number.value, declared.number.half_step
        if "theta" in symbol:
            for name, claim in _angle_claims(symbol, value, half, declared):
                general = symbol in ("theta", "cot_theta")
                if not (general and name in claims):
                    claims[name] = claim
            continue
        if symbol in LEG_BASIS:
            factor = legs_factor(symbol, declared.counts, legs)
            swapped = "one leg" if (declared.counts or LEG_BASIS[symbol]) == "all legs" else "all legs"
            other = value * legs_factor(symbol, swapped, legs)
            claims[symbol] = Claim(symbol, value * factor, half * factor, declared, other)
            continue
        claims[symbol] = Claim(symbol, value, half, declared)
    return claims


def _angle_claims(symbol: str, value: float, half: float, source: DeclaredValue) -> list[tuple[str, Claim]]:
    cot, step = value, half
    if not symbol.startswith("cot_"):
        cot, step = 1 / math.tan(value), half / math.sin(value) ** 2
    sides = [side for side in ("shear", "torsion") if symbol.endswith(side)] or ["shear", "torsion"]
    return [(f"cot_theta_{side}", Claim(f"cot_theta_{side}", cot, step, source)) for side in sides]


def member_row(design: Design, measured: Measured) -> dict[str, Any]:
    """The inputs of a row that don't depend on the case."""
    row: dict[str, Any] = dict(measured.inputs)
    materials = design.materials
    total = row["A_sw_s_all"]
    row |= {
        "f_ck": materials.f_ck.value,
        "f_yk": materials.f_yk.value,
        "f_ywk": materials.f_ywk.value,
        "gamma_C_stated": materials.gamma_C.value if materials.gamma_C else NAN,
        "gamma_S_stated": materials.gamma_S.value if materials.gamma_S else NAN,
        "torsion_counts": 0.0 if design.torsion == "compatibility" else 1.0,
        "A_outline": row["A"],
        "u_outline": row["u"],
        "share_sin": row["S_sin"] / total if total > 0 else 1.0,
        "share_cos": row["S_cos"] / total if total > 0 else 0.0,
        "solid_rectangle": 1.0 if measured.solid_rectangle else 0.0,
        "section": measured.section,
        "unsaid": NAN,
        "d_g": design.aggregate.value if design.aggregate else NAN,
        **UNSAID,
        **design.details,
    }
    heights = [bar.y for bar in measured.bars]
    row["a_s_outer_bottom"] = min(heights)
    row["a_s_outer_top"] = measured.section.h - max(heights)
    row |= {name: number.value for name, number in design.section.sizes.items()}
    for sense, strips in (
        ("sagging", measured.section.strips_sagging),
        ("hogging", measured.section.strips_hogging),
    ):
        first = strips[0]
        row[f"narrows_{sense}"] = 1.0 if first[2] < first[3] * (1 - 1e-9) else 0.0
    return row


def case_row(
    member: Mapping[str, Any], case: Case, claims: Mapping[str, Claim], inputs: frozenset[str]
) -> dict[str, Any]:
    """One row of inputs: the member's, the case's actions, and every claim as `X_declared` (nan where unsaid)."""
    row = dict.fromkeys((name for name in inputs if name.endswith("_declared")), NAN)
    row.update(member)
    row |= {
        "V_Ed": case.V_Ed.value,
        "T_Ed": case.T_Ed.value,
        "M_Ed": case.M_Ed.value,
        "N_Ed": case.N_Ed.value,
        "M_Ed_max": case.M_Ed_max.value if case.M_Ed_max else NAN,
        "link_stress_option": 1.0 if link_stress_option(member, claims) else 0.0,
    }
    row |= _web_flange_row(case)
    row |= case.details
    for symbol, claim in claims.items():
        row[f"{symbol}_declared"] = claim.value
    return row


def _web_flange_row(case: Case) -> dict[str, float]:
    """The inputs of the shear between web and flange (nan where unsaid)."""
    stated = case.web_flange
    if stated is None:
        return dict(_NO_WEB_FLANGE)
    return {
        "delta_F_d": stated.dF.value,
        "delta_x": stated.dx.value,
        "A_sf_s": stated.A_sf_s.value if stated.A_sf_s else NAN,
        "cot_theta_f_stated": stated.cot_theta_f.value if stated.cot_theta_f else NAN,
        "web_flange_top": 1.0 if stated.at_top else 0.0,
    }


def link_stress_option(member: Mapping[str, Any], claims: Mapping[str, Claim]) -> bool:
    """Whether the designer works with links stressed to 0.8 f_ywk (6.2.3(3)): by f_ywd where it fits, else by nu_1."""
    f_ywd = claims.get("f_ywd")
    if f_ywd is not None:
        full = float(member["f_ywk"]) / (
            1.15 if math.isnan(member["gamma_S_stated"]) else member["gamma_S_stated"]
        )
        for stress, claimed in ((0.8 * float(member["f_ywk"]), True), (full, False)):
            if abs(f_ywd.value - stress) <= f_ywd.half_step + 0.005 * f_ywd.value:
                return claimed
    nu_1 = claims.get("nu_1")
    if nu_1 is None:
        return False
    f_ck = float(member["f_ck"])
    option = 0.6 if f_ck <= 60 else max(0.9 - f_ck / 200, 0.5)
    usual = 0.6 * (1 - f_ck / 250)
    return abs(nu_1.value - option) <= 0.005 * option < abs(nu_1.value - usual)
