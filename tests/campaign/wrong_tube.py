"""Wrong formulas for depths, strengths, the resistance without links and the tube, as designers write them.

- One entry a slip: the quantities it replaces, each with the wrong formula on the values said so far.
- Written from the clauses and from common practice (no source); nothing is read from the tool's catalogue.
"""

from __future__ import annotations

from math import log, sqrt

from tests.campaign.worked import At, Wrong

CUBE = {
    16: 20,
    20: 25,
    25: 30,
    28: 35,
    30: 37,
    32: 40,
    35: 45,
    40: 50,
    45: 55,
    50: 60,
    55: 67,
    60: 75,
    70: 85,
}
CUBE |= {80: 95, 90: 105, 12: 15}
"""Cube strengths of the classes (Table 3.1; 28 and 32 by the trade's C28/35 and C32/40)."""


def f_ctm(f_ck: float) -> float:
    return 0.3 * f_ck ** (2 / 3) if f_ck <= 50 else 2.12 * log(1 + (f_ck + 8) / 10)


def a_s(x: At) -> float:
    """Distance of the tension bars' centroid from their face."""
    return x.m.shape.h - x.c.d


def outermost(x: At) -> float:
    h = x.m.shape.h
    return min((h - bar.y) if x.a.hogging else bar.y for bar in x.m.bars)


def in_both(formula: Wrong) -> dict[str, Wrong]:
    return {"nu": formula, "nu_1": formula}


def low_factor(x: At) -> float:
    return 0.6 if x.m.f_ck <= 60 else max(0.5, 0.9 - x.m.f_ck / 200)


def without_links(
    x: At, *, k: float = 0.0, rho: float = 100.0, root: float = 1 / 3, gamma: float = 1.0, depth: float = 0.0,
    part: str = "both", axial: float = 1.0,
) -> float:  # fmt: skip
    """V_Rd_c by (6.2a) and (6.2b) with something in it changed."""
    sigma = min(x.a.N / x.m.shape.A_c, 0.2 * x.f_cd)
    by_bars = 0.12 * gamma * (k or x.k) * (rho * x.rho_l * x.m.f_ck) ** root
    stress = {"both": max(by_bars, x.v_min), "bars": by_bars, "floor": x.v_min}[part]
    return max(0.0, stress + axial * 0.15 * sigma) * x.c.b_w * (depth or x.d)


def moved_in(by: Wrong) -> dict[str, Wrong]:
    """Area and length of a line that runs a distance inside the outer boundary."""

    def area(x: At) -> float:
        t = by(x)
        return x.A - x.u * t + x.kappa * t**2

    return {"A_k": area, "u_k": lambda x: x.u - 2 * x.kappa * by(x)}


DEPTHS: dict[str, dict[str, Wrong]] = {
    "depth-less-cover-only": {"d": lambda x: x.m.shape.h - x.m.cover},
    "depth-link-left-out": {"d": lambda x: x.right + x.m.phi_w},
    "depth-half-bar-left-out": {"d": lambda x: x.m.shape.h - x.m.cover - x.m.phi_w},
    "depth-link-twice": {"d": lambda x: x.right - x.m.phi_w},
    "depth-whole-bar": {
        "d": lambda x: x.m.shape.h - x.m.cover - x.m.phi_w - 2 * (a_s(x) - x.m.cover - x.m.phi_w)
    },
    "depth-outer-layer": {"d": lambda x: x.m.shape.h - outermost(x)},
    "depth-of-other-face": {"d": lambda x: x.m.shape.h - x.c.d_2},
    "depth-whole-height": {"d": lambda x: x.m.shape.h},
    "depth-nine-tenths": {"d": lambda x: 0.9 * x.m.shape.h},
    "lever-arm-equals-depth": {"z": lambda x: x.d},
    "lever-arm-of-height": {"z": lambda x: 0.9 * x.m.shape.h},
    "lever-arm-reduced-twice": {"z": lambda x: 0.81 * x.d},
    "lever-arm-kept-with-axial-force": {"z": lambda x: 0.9 * x.d},
}

STRENGTHS: dict[str, dict[str, Wrong]] = {
    "gamma-c-left-out": {"f_cd": lambda x: x.m.f_ck, "f_ctd": lambda x: 0.7 * f_ctm(x.m.f_ck)},
    "alpha-cc-085": {"f_cd": lambda x: 0.85 * x.m.f_ck / 1.5},
    "cube-strength": {"f_cd": lambda x: CUBE[int(x.m.f_ck)] / 1.5},
    "gamma-s-for-concrete": {"f_cd": lambda x: x.m.f_ck / 1.15},
    "gamma-s-left-out": {"f_yd": lambda x: x.m.f_yk, "f_ywd": lambda x: x.m.f_ywk},
    "gamma-c-for-steel": {"f_yd": lambda x: x.m.f_yk / 1.5, "f_ywd": lambda x: x.m.f_ywk / 1.5},
    "link-stress-08-with-nu": {"f_ywd": lambda x: 0.8 * x.m.f_ywk},
    "link-stress-full-with-option": {"nu_1": low_factor},
    "mean-tensile-strength": {"f_ctd": lambda x: f_ctm(x.m.f_ck) / 1.5},
    "mean-tensile-strength-unfactored": {"f_ctd": lambda x: f_ctm(x.m.f_ck)},
    "alpha-ct-085": {"f_ctd": lambda x: 0.85 * x.right},
    "tensile-by-root": {"f_ctd": lambda x: 0.7 * 0.3 * sqrt(x.m.f_ck) / 1.5},
    "nu-left-out": in_both(lambda x: 1.0),
    "nu-over-200": in_both(lambda x: 0.6 * (1 - x.m.f_ck / 200)),
    "nu-of-07": in_both(lambda x: 0.7 * (1 - x.m.f_ck / 250)),
    "nu-without-06": in_both(lambda x: 1 - x.m.f_ck / 250),
    "nu-of-older-code": in_both(lambda x: max(0.7 - x.m.f_ck / 200, 0.5)),
    "nu-by-design-strength": in_both(lambda x: 0.6 * (1 - x.f_cd / 250)),
    "nu-1-of-06": in_both(lambda x: 0.6),
}

WITHOUT_LINKS: dict[str, dict[str, Wrong]] = {
    "size-factor-uncapped": {"k": lambda x: 1 + sqrt(200 / x.d)},
    "size-factor-at-cap": {"k": lambda x: min(2.0, 1 + sqrt(200 / (x.d / 1000)))},
    "size-factor-by-height": {"k": lambda x: min(2.0, 1 + sqrt(200 / x.m.shape.h))},
    "size-factor-left-out": {"V_Rd_c": lambda x: without_links(x, k=1.0)},
    "size-factor-root-left-out": {"k": lambda x: min(2.0, 1 + 200 / x.d)},
    "steel-ratio-by-height": {"rho_l": lambda x: min(0.02, x.c.A_face / (x.c.b_w * x.m.shape.h))},
    "steel-ratio-uncapped": {"rho_l": lambda x: x.c.A_face / (x.c.b_w * x.d)},
    "steel-ratio-all-bars": {
        "rho_l": lambda x: min(0.02, sum(bar.area for bar in x.m.bars) / (x.c.b_w * x.d))
    },
    "steel-ratio-cap-at-02": {"rho_l": lambda x: min(0.2, x.c.A_face / (x.c.b_w * x.d))},
    "hundred-left-out": {"V_Rd_c": lambda x: without_links(x, rho=1.0)},
    "percent-in-hundred": {"V_Rd_c": lambda x: without_links(x, rho=1e4)},
    "floor-shear-ignored": {"V_Rd_c": lambda x: without_links(x, part="bars")},
    "floor-shear-alone": {"V_Rd_c": lambda x: without_links(x, part="floor")},
    "square-for-cube-root": {"V_Rd_c": lambda x: without_links(x, root=0.5)},
    "gamma-c-left-out-of-shear": {"V_Rd_c": lambda x: without_links(x, gamma=1.5)},
    "lever-arm-in-v-rd-c": {"V_Rd_c": lambda x: without_links(x, depth=x.z)},
    "height-in-v-rd-c": {"V_Rd_c": lambda x: without_links(x, depth=x.m.shape.h)},
    "axial-stress-sign": {"V_Rd_c": lambda x: without_links(x, axial=-1.0)},
    "axial-stress-left-out": {"V_Rd_c": lambda x: without_links(x, axial=0.0)},
    "floor-powers-swapped": {"v_min": lambda x: 0.035 * sqrt(x.k) * x.m.f_ck**1.5},
    "floor-without-size-factor": {"v_min": lambda x: 0.035 * sqrt(x.m.f_ck)},
    "floor-size-factor-unpowered": {"v_min": lambda x: 0.035 * x.k * sqrt(x.m.f_ck)},
}

TUBE: dict[str, dict[str, Wrong]] = {
    "wall-not-raised-to-twice-axis": {"t_ef": lambda x: min(x.A / x.u, x.m.shape.wall)},
    "wall-twice-cover": {"t_ef": lambda x: 2 * x.m.cover},
    "wall-twice-axis": {"t_ef": lambda x: 2 * x.m.corner_axis},
    "wall-thicker-than-real": {"t_ef": lambda x: max(x.A / x.u, 2 * x.m.corner_axis)},
    "wall-of-axis": {"t_ef": lambda x: x.m.corner_axis},
    "wall-of-half": {"t_ef": lambda x: x.A / x.u / 2},
    "wall-of-concrete-area": {"t_ef": lambda x: x.m.shape.A_c / x.u},
    "gross-area-for-enclosed": {"A_k": lambda x: x.A},
    "enclosed-by-link-centreline": moved_in(lambda x: x.m.cover + x.m.phi_w / 2),
    "enclosed-by-bar-axes": moved_in(lambda x: x.m.corner_axis),
    "enclosed-inside-the-wall": moved_in(lambda x: x.t_ef),
    "enclosed-inside-the-cover": moved_in(lambda x: x.m.cover),
    "concrete-area-for-enclosed": {"A_k": lambda x: x.m.shape.A_c},
    "outer-perimeter-for-centreline": {"u_k": lambda x: x.u},
    "perimeter-half-reduced": {"u_k": lambda x: x.u - x.kappa * x.t_ef / 2},
}
