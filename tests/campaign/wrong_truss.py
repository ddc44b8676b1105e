"""Wrong formulas for the truss, the sums, the chords and the details, as designers write them.

- One entry a slip: the quantities it replaces, each with the wrong formula on the values said so far.
- Written from the clauses and from common practice (no source); nothing is read from the tool's catalogue.
"""

from __future__ import annotations

from dataclasses import replace
from math import sqrt

from tests.campaign.worked import At, Wrong
from tests.campaign.wrong_tube import f_ctm
from tests.properties import chain

FLATTEST = 2.5


def links(
    *, cot: Wrong = lambda x: x.cot, arm: Wrong = lambda x: x.z, stress: Wrong = lambda x: x.f_ywd,
    legs: Wrong = lambda x: 1.0,
) -> dict[str, Wrong]:  # fmt: skip
    """Links for shear and their resistance with something in (6.8), (6.13) changed."""
    return {
        "A_sw_s_shear": lambda x: x.a.V / (legs(x) * arm(x) * stress(x) * x.lift(cot(x))),
        "V_Rd_s": lambda x: x.A_sw_s_provided * arm(x) * stress(x) * x.lift(cot(x)) / legs(x),
    }


def torsion(
    *, cot: Wrong = lambda x: x.cot, area: Wrong = lambda x: 2 * x.A_k, stress: Wrong = lambda x: x.f_ywd
) -> dict[str, Wrong]:
    """Links for torsion and their resistance with something in (6.27) changed."""
    return {
        "A_sw_s_torsion": lambda x: x.a.T / (area(x) * stress(x) * cot(x)),
        "T_Rd_s": lambda x: area(x) * leg(x) * stress(x) * cot(x),
    }


def leg(x: At) -> float:
    return x.A_sw_s_provided * x.m.leg / x.m.legs


def struts(x: At, *, arm: float = 0.0, nu: float = 0.0, stress: float = 0.0, cot: float = 0.0) -> float:
    """V_Rd_max by (6.9), (6.14) with something changed."""
    used = cot or x.cot
    return x.c.b_w * (arm or x.z) * (nu or x.nu_1) * (stress or x.f_cd) * (used + x.tilt) / (1 + used**2)


def tube(x: At, *, nu: float = 0.0, stress: float = 0.0, area: float = 0.0, cot: float = 0.0) -> float:
    """T_Rd_max by (6.30) with something changed."""
    used = cot or x.cot
    return 2 * (nu or x.nu) * (stress or x.f_cd) * (area or x.A_k) * x.t_ef * used / (1 + used**2)


def bars(x: At, *, length: float = 0.0, stress: float = 0.0, cot: float = 0.0) -> float:
    """A_sl_torsion by (6.28) with something changed."""
    return x.a.T * (length or x.u_k) * (cot or x.cot) / (2 * x.A_k * (stress or x.f_yd))


def ratios(x: At, what: str) -> tuple[float, float]:
    shear, twist = (x.V_Rd_c, x.T_Rd_c) if what == "crack" else (x.V_Rd_max, x.T_Rd_max)
    return x.a.T / twist, x.a.V / shear if shear else 0.0


def summed(what: str, join: str) -> dict[str, Wrong]:
    """A sum of ratios put together in a wrong way."""
    ways = {
        "squares": lambda t, v: t**2 + v**2,
        "root": lambda t, v: sqrt(t**2 + v**2),
        "shear": lambda t, v: v,
        "torsion": lambda t, v: t,
        "larger": max,
        "inverted": lambda t, v: 1 / (t + v),
        "difference": lambda t, v: abs(v - t),
    }
    return {f"{what}_sum": lambda x: ways[join](*ratios(x, what))}


def axial_left_out(x: At) -> float:
    """Bending steel for the moment alone, with that moment's own lever arm."""
    z_b, about = chain.bending(x.m, replace(x.a, N=0.0), x.d)
    return about / z_b / x.f_yd


def capacity_unfactored(x: At) -> float:
    return chain.moment_capacity(replace(x.m, f_yk=1.15 * x.m.f_yk), x.a.hogging, x.a.N)


def eighth(x: At) -> float:
    return min(x.u / 8, x.m.shape.least_dimension) if x.a.T else 1e9


TRUSS: dict[str, dict[str, Wrong]] = {
    "tangent-for-cotangent-shear": links(cot=lambda x: 1 / x.cot),
    "shear-at-45": links(cot=lambda x: 1.0),
    "shear-at-flattest": links(cot=lambda x: FLATTEST),
    "shear-links-per-leg": links(legs=lambda x: x.n_legs),
    "depth-for-lever-arm-links": links(arm=lambda x: x.d),
    "option-stress-in-links": links(stress=lambda x: 0.8 * x.m.f_ywk),
    "characteristic-stress-in-links": links(stress=lambda x: x.m.f_ywk),
    "bar-strength-in-links": links(stress=lambda x: x.f_yd),
    "concrete-added-to-links": {
        "A_sw_s_shear": lambda x: max(0.0, x.a.V - x.V_Rd_c) / (x.z * x.f_ywd * x.lift(x.cot)),
        "V_Rd_s": lambda x: x.right + x.V_Rd_c,
    },
    "sine-cosine-doubled-shear": {"V_Rd_max": lambda x: 2 * x.right},
    "crushing-by-depth": {"V_Rd_max": lambda x: struts(x, arm=x.d)},
    "crushing-shear-at-45": {"V_Rd_max": lambda x: struts(x, cot=1.0)},
    "crushing-shear-at-flattest": {"V_Rd_max": lambda x: struts(x, cot=FLATTEST)},
    "nu-left-out-of-crushing-shear": {"V_Rd_max": lambda x: struts(x, nu=1.0)},
    "characteristic-strength-in-crushing-shear": {"V_Rd_max": lambda x: struts(x, stress=x.m.f_ck)},
    "tangent-left-out-of-crushing-shear": {"V_Rd_max": lambda x: x.right * (1 + x.cot**2) / x.cot**2},
    "compression-in-crushing-shear": {
        "V_Rd_max": lambda x: min(1.25, 1 + max(0.0, x.a.N) / (x.m.shape.A_c * x.f_cd)) * struts(x)
    },
    "height-in-crushing-shear": {"V_Rd_max": lambda x: struts(x, arm=x.m.shape.h)},
}

TORSION: dict[str, dict[str, Wrong]] = {
    "cracking-factor-two-left-out": {"T_Rd_c": lambda x: x.right / 2},
    "cracking-by-gross-area": {"T_Rd_c": lambda x: 2 * x.A * x.t_ef * x.f_ctd},
    "cracking-with-factored-mean-strength": {"T_Rd_c": lambda x: 2 * x.A_k * x.t_ef * f_ctm(x.m.f_ck) / 1.5},
    "cracking-with-mean-strength": {"T_Rd_c": lambda x: 2 * x.A_k * x.t_ef * f_ctm(x.m.f_ck)},
    "crushing-factor-two-left-out": {"T_Rd_max": lambda x: x.right / 2},
    "sine-cosine-doubled-torsion": {"T_Rd_max": lambda x: 2 * x.right},
    "nu-left-out-of-crushing-torsion": {"T_Rd_max": lambda x: tube(x, nu=1.0)},
    "nu-1-in-crushing-torsion": {"T_Rd_max": lambda x: tube(x, nu=x.nu_1)},
    "crushing-torsion-at-45": {"T_Rd_max": lambda x: tube(x, cot=1.0)},
    "crushing-torsion-at-flattest": {"T_Rd_max": lambda x: tube(x, cot=FLATTEST)},
    "characteristic-strength-in-crushing-torsion": {"T_Rd_max": lambda x: tube(x, stress=x.m.f_ck)},
    "crushing-torsion-by-gross-area": {"T_Rd_max": lambda x: tube(x, area=x.A)},
    "torsion-factor-two-left-out": torsion(area=lambda x: x.A_k),
    "torsion-links-halved": {"A_sw_s_torsion": lambda x: x.right / 2},
    "torsion-both-legs-counted": {"T_Rd_s": lambda x: 2 * x.right},
    "torsion-all-legs-counted": {"T_Rd_s": lambda x: 2 * x.A_k * x.A_sw_s_provided * x.f_ywd * x.cot},
    "tangent-for-cotangent-torsion": torsion(cot=lambda x: 1 / x.cot),
    "torsion-at-45": torsion(cot=lambda x: 1.0),
    "torsion-at-flattest": torsion(cot=lambda x: FLATTEST),
    "characteristic-stress-in-torsion-links": torsion(stress=lambda x: x.m.f_ywk),
    "torsion-links-by-gross-area": torsion(area=lambda x: 2 * x.A),
    "tangent-for-cotangent-bars": {"A_sl_torsion": lambda x: bars(x, cot=1 / x.cot)},
    "bars-at-45": {"A_sl_torsion": lambda x: bars(x, cot=1.0)},
    "bars-at-flattest": {"A_sl_torsion": lambda x: bars(x, cot=FLATTEST)},
    "bars-factor-two-left-out": {"A_sl_torsion": lambda x: 2 * x.right},
    "bars-halved": {"A_sl_torsion": lambda x: x.right / 2},
    "bars-with-one-cell-side": {"A_sl_torsion": lambda x: bars(x, length=x.m.shape.h - x.t_ef)},
    "bars-with-outer-perimeter": {"A_sl_torsion": lambda x: bars(x, length=x.u)},
    "characteristic-stress-in-torsion-bars": {"A_sl_torsion": lambda x: bars(x, stress=x.m.f_yk)},
    "bars-left-out": {"A_sl_torsion": lambda x: 0.0},
}

SUMS: dict[str, dict[str, Wrong]] = {
    "crushing-by-squares": summed("crush", "squares"),
    "crushing-by-root-of-squares": summed("crush", "root"),
    "crushing-shear-alone": summed("crush", "shear"),
    "crushing-torsion-alone": summed("crush", "torsion"),
    "crushing-larger-ratio": summed("crush", "larger"),
    "crushing-inverted": summed("crush", "inverted"),
    "crushing-difference": summed("crush", "difference"),
    "cracking-by-squares": summed("crack", "squares"),
    "cracking-by-root-of-squares": summed("crack", "root"),
    "cracking-shear-alone": summed("crack", "shear"),
    "cracking-torsion-alone": summed("crack", "torsion"),
    "cracking-larger-ratio": summed("crack", "larger"),
    "one-leg-added-to-both": {"A_sw_s_total": lambda x: x.A_sw_s_shear + x.A_sw_s_torsion},
    "links-larger-not-sum": {"A_sw_s_total": lambda x: max(x.A_sw_s_shear, 2 * x.A_sw_s_torsion)},
    "links-larger-leg-not-sum": {"A_sw_s_total": lambda x: max(x.A_sw_s_shear, x.A_sw_s_torsion)},
    "links-torsion-forgotten": {"A_sw_s_total": lambda x: x.A_sw_s_shear},
    "links-shear-forgotten": {"A_sw_s_total": lambda x: 2 * x.A_sw_s_torsion},
    "links-mean-of-both": {"A_sw_s_total": lambda x: x.right / 2},
    "links-outer-leg-for-all": {"A_sw_s_total": lambda x: x.A_sw_s_shear / x.n_legs + x.A_sw_s_torsion},
    "links-torsion-doubled-twice": {"A_sw_s_total": lambda x: x.A_sw_s_shear + 4 * x.A_sw_s_torsion},
    "links-torsion-half-leg": {"A_sw_s_total": lambda x: x.A_sw_s_shear + x.A_sw_s_torsion / 2},
    "links-torsion-subtracted": {"A_sw_s_total": lambda x: abs(x.A_sw_s_shear - 2 * x.A_sw_s_torsion)},
}

CHORDS: dict[str, dict[str, Wrong]] = {
    "shift-force-full": {"delta_F_td": lambda x: 2 * x.right},
    "shift-at-45": {"delta_F_td": lambda x: 0.5 * x.a.V * (1 - x.tilt)},
    "shift-at-flattest": {"delta_F_td": lambda x: 0.5 * x.a.V * (FLATTEST - x.tilt)},
    "tangent-for-cotangent-shift": {"delta_F_td": lambda x: 0.5 * x.a.V * (1 / x.cot - x.tilt)},
    "shift-force-left-out": {"A_s_shift": lambda x: 0.0},
    "characteristic-stress-in-shift": {"A_s_shift": lambda x: x.right * x.f_yd / x.m.f_yk},
    "tension-torsion-left-out": {"A_s_tension": lambda x: x.A_s_bending + x.A_s_shift},
    "tension-whole-torsion": {"A_s_tension": lambda x: x.A_s_bending + x.A_s_shift + x.A_sl_torsion},
    "tension-quarter-torsion": {"A_s_tension": lambda x: x.A_s_bending + x.A_s_shift + x.A_sl_torsion / 4},
    "tension-bending-alone": {"A_s_tension": lambda x: x.A_s_bending},
    "bending-by-depth": {"A_s_bending": lambda x: max(0.0, x.bent[1] / x.d - x.a.N) / x.f_yd},
    "bending-characteristic-stress": {"A_s_bending": lambda x: x.right * x.f_yd / x.m.f_yk},
    "bending-axial-left-out": {"A_s_bending": axial_left_out},
    "bending-by-height": {
        "A_s_bending": lambda x: max(0.0, x.bent[1] / (0.9 * x.m.shape.h) - x.a.N) / x.f_yd
    },
    "resistance-by-depth": {"M_Rd": lambda x: x.c.A_face * x.f_yd * x.d},
    "resistance-by-nine-tenths": {"M_Rd": lambda x: x.c.A_face * x.f_yd * 0.9 * x.d},
    "resistance-characteristic-stress": {"M_Rd": capacity_unfactored},
    "resistance-by-height": {"M_Rd": lambda x: x.c.A_face * x.f_yd * 0.9 * x.m.shape.h},
}

DETAILS: dict[str, dict[str, Wrong]] = {
    "spacing-full-depth": {"s_l_max": lambda x: min(x.d * (1 + x.tilt), eighth(x))},
    "spacing-by-height": {"s_l_max": lambda x: min(0.75 * x.m.shape.h * (1 + x.tilt), eighth(x))},
    "spacing-08-depth": {"s_l_max": lambda x: min(0.8 * x.d * (1 + x.tilt), eighth(x))},
    "spacing-torsion-forgotten": {"s_l_max": lambda x: 0.75 * x.d * (1 + x.tilt)},
    "spacing-eighth-forgotten": {
        "s_l_max": lambda x: min(0.75 * x.d * (1 + x.tilt), x.m.shape.least_dimension)
    },
    "spacing-eighth-alone": {"s_l_max": lambda x: x.u / 8},
    "spacing-fixed-300": {"s_l_max": lambda x: 300.0},
    "spacing-by-fourth": {
        "s_l_max": lambda x: min(0.75 * x.d * (1 + x.tilt), x.u / 4, x.m.shape.least_dimension)
    },
    "link-ratio-one-leg": {"rho_w": lambda x: x.right / x.n_legs},
    "link-ratio-by-height": {"rho_w_min": lambda x: 0.08 * x.m.f_ck / x.m.f_ywk},
    "least-ratio-design-strength": {"rho_w_min": lambda x: 0.08 * sqrt(x.m.f_ck) / x.f_ywd},
    "least-ratio-by-tension": {"rho_w_min": lambda x: 0.16 * f_ctm(x.m.f_ck) / x.m.f_ywk},
    "links-one-leg-provided": {"A_sw_s_provided": lambda x: x.right / x.n_legs},
    "links-twice-provided": {"A_sw_s_provided": lambda x: 2 * x.right},
    "links-leg-too-many": {"A_sw_s_provided": lambda x: x.right * (x.n_legs + 2) / x.n_legs},
}
