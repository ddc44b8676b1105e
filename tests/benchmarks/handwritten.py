"""The yardstick for columns: the sheet's formulas for solid rectangles with upright links, by hand in numpy.

Written as an engineer with numpy would: whole columns, one line a formula, the same solver for bending resistance.
"""

from __future__ import annotations

from typing import Any

import numpy as np

from checker.geometry.bending import bending_resistance

Columns = dict[str, Any]


def recompute_by_hand(x: Columns) -> Columns:
    """All the quantities a designer may declare, and the strut window, for rows of solid rectangles."""
    with np.errstate(all="ignore"):
        values = _materials_and_section(x)
        _bending(x, values)
        _window(x, values)
        _shear_and_torsion(x, values)
    return values


def _materials_and_section(x: Columns) -> Columns:
    f_ck, b, h = x["f_ck"], x["b"], x["h"]
    gamma_C = np.where(np.isfinite(x["gamma_C_stated"]), x["gamma_C_stated"], 1.5)
    gamma_S = np.where(np.isfinite(x["gamma_S_stated"]), x["gamma_S_stated"], 1.15)
    f_cm = f_ck + 8
    f_ctm = np.where(f_ck <= 50, 0.3 * f_ck ** (2 / 3), 2.12 * np.log(1 + f_cm / 10))
    f_ctk = 0.7 * f_ctm
    E_cm = 22000 * (f_cm / 10) ** 0.3
    f_cd = f_ck / gamma_C
    f_ctd = f_ctk / gamma_C
    f_yd = x["f_yk"] / gamma_S
    f_ywd = np.where(x["link_stress_option"] > 0, 0.8 * x["f_ywk"], x["f_ywk"] / gamma_S)
    lambda_c = np.where(f_ck <= 50, 0.8, 0.8 - (f_ck - 50) / 400)
    eta_c = np.where(f_ck <= 50, 1.0, 1.0 - (f_ck - 50) / 200)
    eps_cu3 = np.where(f_ck <= 50, 0.0035, 0.0026 + 0.035 * ((90 - f_ck) / 100) ** 4)
    V, M = np.abs(x["V_Ed"]), np.abs(x["M_Ed"])
    T = np.where(x["torsion_counts"] > 0, np.abs(x["T_Ed"]), 0.0)
    hogging = np.where(x["M_Ed"] < 0, 1.0, 0.0)
    up = hogging > 0
    a_s = np.where(up, x["a_s_top"], x["a_s_bottom"])
    d_2 = np.where(up, x["a_s_bottom"], x["a_s_top"])
    A_s_t = np.where(up, x["A_s_top"], x["A_s_bottom"])
    b_w = np.where(up, x["b_w_hogging"], x["b_w_sagging"])
    b_t = np.where(up, x["b_t_hogging"], x["b_t_sagging"])
    d = h - a_s
    A, u = b * h, 2 * (b + h)
    t_ef = np.minimum(np.maximum(A / u, 2 * x["c_axis"]), x["t_wall"])
    A_k = (b - t_ef) * (h - t_ef)
    u_k = 2 * ((b - t_ef) + (h - t_ef))
    narrow = np.where(up, x["narrows_hogging"], x["narrows_sagging"])
    f_c = np.where(narrow > 0, 0.9, 1.0) * eta_c * f_cd
    names = "f_cd f_ctd f_yd f_ywd f_ctm E_cm lambda_c eps_cu3 V M T hogging a_s d_2 A_s_t b_w b_t d A u t_ef A_k u_k f_c"
    here = locals()
    return {name: here[name] for name in names.split()}


def _bending(x: Columns, v: Columns) -> None:
    h, b, d, f_c, lambda_c = x["h"], x["b"], v["d"], v["f_c"], v["lambda_c"]
    v["z_s1"] = np.where(v["hogging"] > 0, h - x["y_c"] - v["a_s"], x["y_c"] - v["a_s"])
    v["M_Eds"] = v["M"] + x["N_Ed"] * v["z_s1"]
    x_lim = v["eps_cu3"] * d / (v["eps_cu3"] + v["f_yd"] / 200000)
    v["M_lim"] = f_c * b * lambda_c * x_lim * (d - lambda_c * x_lim / 2)
    v["a_b"] = d * (1 - np.sqrt(1 - 2 * np.minimum(v["M_Eds"], v["M_lim"]) / (b * d**2 * f_c)))
    F_b = f_c * b * v["a_b"] + np.maximum(0, v["M_Eds"] - v["M_lim"]) / (d - v["d_2"])
    v["z_b"] = np.where(v["M_Eds"] < 0, d - v["d_2"], np.where(F_b <= 0, d, v["M_Eds"] / F_b))
    v["F_M"] = np.maximum(0, v["M_Eds"] / v["z_b"] - x["N_Ed"])
    v["C_M"] = v["M_Eds"] / v["z_b"]
    axial = x["N_Ed"] != 0
    limit = np.where(axial, v["z_b"], np.maximum(0.9 * d, v["z_b"]))
    usual = np.where(axial, v["z_b"], 0.9 * d)
    v["z"] = np.where(np.isfinite(x["z_declared"]), np.minimum(x["z_declared"], limit), usual)
    v["A_s_bending"] = v["F_M"] / v["f_yd"]
    v["A_s_bending_z"] = np.maximum(0, v["M_Eds"] / v["z"] - x["N_Ed"]) / v["f_yd"]
    v["A_s_compression"] = np.maximum(0, v["M_Eds"] - v["M_lim"]) / ((d - v["d_2"]) * v["f_yd"])
    v["M_Rd"] = bending_resistance(
        x["section"], v["hogging"], x["N_Ed"], f_c, lambda_c, v["eps_cu3"], v["f_yd"], 200000.0
    )
    face = v["A_s_t"] * v["f_yd"] * (d - v["A_s_t"] * v["f_yd"] / (2 * b * f_c))
    v["M_Rd_face"] = np.where(axial, v["M_Rd"], face)
    F_max = np.maximum(0, (np.abs(x["M_Ed_max"]) + x["N_Ed"] * v["z_s1"]) / v["z_b"] - x["N_Ed"])
    v["spare"] = np.maximum(0, F_max - v["F_M"])
    v["A_s_min"] = np.maximum(0.26 * v["f_ctm"] / x["f_yk"], 0.0013) * v["b_t"] * d
    v["A_s_max"] = 0.04 * x["A_c"]


def _window(x: Columns, v: Columns) -> None:
    f_ck, d, b_w, z = x["f_ck"], v["d"], v["b_w"], v["z"]
    v["k"] = np.minimum(1 + np.sqrt(200 / d), 2)
    v["rho_l"] = np.minimum(v["A_s_t"] / (b_w * d), 0.02)
    sigma = np.minimum(x["N_Ed"] / x["A_c"], 0.2 * v["f_cd"])
    v["v_min"] = 0.035 * v["k"] ** 1.5 * f_ck**0.5
    C_Rd_c = 0.18 * v["f_cd"] / f_ck
    v_c = C_Rd_c * v["k"] * (100 * v["rho_l"] * f_ck) ** (1 / 3)
    v["V_Rd_c"] = np.maximum(0, np.maximum(v_c, v["v_min"]) + 0.15 * sigma) * b_w * d
    v["nu"] = 0.6 * (1 - f_ck / 250)
    option = np.where(f_ck <= 60, 0.6, np.maximum(0.9 - f_ck / 200, 0.5))
    v["nu_1"] = np.where(x["link_stress_option"] > 0, option, v["nu"])
    share = x["N_Ed"] / x["A_c"]
    v["alpha_cw"] = np.where(share <= 0.6 * v["f_cd"], 1.0, np.maximum(0, 2.5 * (1 - share / v["f_cd"])))
    v["T_Rd_c"] = 2 * v["A_k"] * v["t_ef"] * v["f_ctd"]
    v["crack_sum"] = v["T"] / v["T_Rd_c"] + v["V"] / v["V_Rd_c"]
    v["free"] = (v["crack_sum"] <= 1) & ((x["solid_rectangle"] > 0) | (v["T"] <= 0))
    v["V_0"] = v["alpha_cw"] * b_w * z * v["nu_1"] * v["f_cd"]
    v["T_0"] = 2 * v["nu"] * v["alpha_cw"] * v["f_cd"] * v["A_k"] * v["t_ef"]
    r = v["V"] / v["V_0"] + v["T"] / v["T_0"]
    root = np.sqrt(1 - 4 * r**2)
    concrete_from = np.where(r <= 0, 0, (1 - root) / (2 * r))
    concrete_to = np.where(r <= 0, 1000, (1 + root) / (2 * r))
    all_legs = (v["V"] / z + v["T"] / v["A_k"]) / (v["f_ywd"] * x["A_sw_s_all"])
    one_leg = np.where(v["T"] <= 0, 0, v["T"] / (2 * v["A_k"] * v["f_ywd"] * x["A_leg_s"]))
    links_from = np.where(v["free"], 0, np.maximum(all_legs, one_leg))
    up = v["hogging"] > 0
    tension = np.where(up, x["A_half_top"], x["A_half_bottom"])
    pressed = np.where(up, x["A_half_bottom"], x["A_half_top"])
    F_T = np.where(v["free"], 0, v["T"] * v["u_k"] / (4 * v["A_k"]))
    R_t, R_c = tension * v["f_yd"] - v["F_M"], pressed * v["f_yd"] + v["C_M"]
    pull = 0.5 * v["V"] + F_T
    open_to = np.where(pull <= 0, np.where(R_t >= 0, 1000, -1), R_t / pull)
    limited = np.where(F_T <= 0, np.where(R_t >= v["spare"], 1000, -1), (R_t - v["spare"]) / F_T)
    limited = np.where(np.isfinite(v["spare"]), limited, -1)
    press_to = np.where(F_T <= 0, np.where(R_c >= 0, 1000, -1), R_c / F_T)
    bars_to = np.minimum(np.maximum(open_to, limited), press_to)
    least = np.maximum(np.maximum(1, links_from), np.where(np.isfinite(concrete_from), concrete_from, 1001))
    most = np.minimum(np.minimum(2.5, bars_to), np.where(np.isfinite(concrete_to), concrete_to, -1))
    v["cot_from"], v["cot_to"] = least, most
    window = least <= most * 1.000001
    v["cot_best"] = np.where(window, np.maximum(most, 1), np.minimum(np.maximum(1, links_from), 2.5))


def _shear_and_torsion(x: Columns, v: Columns) -> None:
    claim_V, claim_T = x["cot_theta_shear_declared"], x["cot_theta_torsion_declared"]
    best = v["cot_best"]
    for_shear = np.where(np.isfinite(claim_V), claim_V, np.where(np.isfinite(claim_T), claim_T, best))
    for_torsion = np.where(np.isfinite(claim_T), claim_T, np.where(np.isfinite(claim_V), claim_V, best))
    c_V = np.minimum(np.maximum(for_shear, 1), 2.5)
    c_T = np.minimum(np.maximum(for_torsion, 1), 2.5)
    theta_V, theta_T = np.arctan(1 / c_V), np.arctan(1 / c_T)
    z, f_ywd, A_k = v["z"], v["f_ywd"], v["A_k"]
    v["A_sw_s_shear"] = v["V"] / (z * f_ywd * c_V)
    v["V_Rd_s"] = x["A_sw_s_all"] * z * f_ywd * c_V
    v["V_Rd_max"] = (
        v["alpha_cw"] * v["b_w"] * z * v["nu_1"] * v["f_cd"] / (1 / np.tan(theta_V) + np.tan(theta_V))
    )
    v["A_sw_s_cap"] = 0.5 * v["alpha_cw"] * v["nu_1"] * v["f_cd"] * v["b_w"] / f_ywd
    v["rho_w"] = x["A_sw_s_all"] / (v["b_w"] * np.sin(x["alpha"]))
    v["rho_w_min"] = 0.08 * x["f_ck"] ** 0.5 / x["f_ywk"]
    by_shear = 0.75 * v["d"] * (1 + 1 / np.tan(x["alpha"]))
    twisted = v["T"] > 0
    v["s_l_max"] = np.where(twisted, np.minimum(np.minimum(by_shear, v["u"] / 8), x["b_least"]), by_shear)
    v["s_l_max_strict"] = np.where(
        twisted, np.minimum(np.minimum(by_shear, v["u_k"] / 8), x["b_least"]), by_shear
    )
    v["s_t_max"] = np.minimum(0.75 * v["d"], 600)
    v["T_Rd_max"] = (
        2 * v["nu"] * v["alpha_cw"] * v["f_cd"] * A_k * v["t_ef"] * np.sin(theta_T) * np.cos(theta_T)
    )
    v["A_sw_s_torsion"] = v["T"] / (2 * A_k * f_ywd * c_T)
    v["T_Rd_s"] = 2 * A_k * x["A_leg_s"] * f_ywd * c_T
    v["A_sw_s_total"] = v["A_sw_s_shear"] + 2 * v["A_sw_s_torsion"]
    v["A_sw_s_outer"] = v["A_sw_s_shear"] / x["n_legs"] + v["A_sw_s_torsion"]
    v["crush_sum"] = v["T"] / v["T_Rd_max"] + v["V"] / v["V_Rd_max"]
    v["delta_F_td"] = 0.5 * v["V"] * c_V
    shift = np.where(np.isfinite(v["spare"]), np.minimum(v["delta_F_td"], v["spare"]), v["delta_F_td"])
    v["A_s_shift"] = shift / v["f_yd"]
    v["A_sl_torsion"] = v["T"] * v["u_k"] * c_T / (2 * A_k * v["f_yd"])
    needed = np.where(v["free"], 0, v["A_sl_torsion"])
    v["A_s_tension"] = v["A_s_bending"] + v["A_s_shift"] + v["A_sl_torsion"] / 2
    v["A_s_tension_z"] = v["A_s_bending_z"] + v["A_s_shift"] + v["A_sl_torsion"] / 2
    v["A_s_tension_needed"] = v["A_s_bending"] + v["A_s_shift"] + needed / 2
    v["A_s_compression_needed"] = np.maximum(0, needed / 2 - v["C_M"] / v["f_yd"])
    v["A_sw_s_needed"] = np.where(v["free"], 0, v["A_sw_s_total"])
    v["cot_theta_shear"], v["cot_theta_torsion"] = c_V, c_T
