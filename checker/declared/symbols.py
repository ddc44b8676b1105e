"""The symbols a designer may declare a value for, each with the unit it is shown and declared in."""

from __future__ import annotations

_BY_UNIT: dict[str, str] = {
    "MPa": "f_cd f_ctd f_yd f_ywd v_min",
    "mm": "d z t_ef u u_k s_l_max",
    "mm2": "A A_k A_s_bending A_sl_torsion A_s_shift A_s_tension",
    "mm2/mm": "A_sw_s_shear A_sw_s_torsion A_sw_s_total A_sw_s_provided",
    "deg": "theta theta_shear theta_torsion",
    "-": "cot_theta cot_theta_shear cot_theta_torsion nu nu_1 k rho_l rho_w rho_w_min crack_sum crush_sum",
    "kN": "V_Rd_c V_Rd_s V_Rd_max delta_F_td",
    "kNm": "T_Rd_c T_Rd_s T_Rd_max M_Rd",
}

DECLARABLE: dict[str, str] = {symbol: unit for unit, line in _BY_UNIT.items() for symbol in line.split()}
"""Each declarable symbol with its shown unit (`verdict` is not a number and stands apart)."""

LINK_AREAS = ("A_sw_s_shear", "A_sw_s_torsion", "A_sw_s_total", "A_sw_s_provided")
"""The symbols whose value may say whether it counts one leg or all legs."""

STRUT_ANGLES = ("theta", "theta_shear", "theta_torsion")
"""The strut angles; each may be declared as the angle or, with `cot_` before it, as its cotangent."""

MEANINGS: dict[str, str] = {
    "f_cd": "design compressive strength of concrete",
    "f_ctd": "design tensile strength of concrete",
    "f_yd": "design yield strength of the bars",
    "f_ywd": "design yield strength of the links",
    "v_min": "least shear resistance of the concrete as a stress",
    "d": "effective depth",
    "z": "lever arm of internal forces",
    "t_ef": "effective wall thickness",
    "u": "outer perimeter of the section",
    "u_k": "length of the centre-line of the effective wall",
    "s_l_max": "largest spacing of links allowed",
    "A": "area within the outer outline, voids included",
    "A_k": "area enclosed by the centre-line of the effective wall",
    "A_s_bending": "longitudinal steel needed for bending",
    "A_sl_torsion": "longitudinal steel needed for torsion",
    "A_s_shift": "longitudinal steel needed for the tension shear adds",
    "A_s_tension": "longitudinal steel needed on the tension side",
    "A_sw_s_shear": "link area per length needed for shear",
    "A_sw_s_torsion": "link area per length needed for torsion",
    "A_sw_s_total": "link area per length needed in all",
    "A_sw_s_provided": "link area per length provided",
    "theta": "strut angle to the member axis, shear and torsion",
    "theta_shear": "strut angle to the member axis, used for shear",
    "theta_torsion": "strut angle to the member axis, used for torsion",
    "cot_theta": "cotangent of the strut angle, shear and torsion",
    "cot_theta_shear": "cotangent of the strut angle used for shear",
    "cot_theta_torsion": "cotangent of the strut angle used for torsion",
    "nu": "strength reduction factor for concrete cracked in shear",
    "nu_1": "strength reduction factor of the struts",
    "k": "size factor of the shear resistance",
    "rho_l": "ratio of longitudinal tension steel",
    "rho_w": "ratio of links",
    "rho_w_min": "least ratio of links",
    "crack_sum": "T_Ed/T_Rd_c + V_Ed/V_Rd_c",
    "crush_sum": "T_Ed/T_Rd_max + V_Ed/V_Rd_max",
    "V_Rd_c": "shear resistance without links",
    "V_Rd_s": "shear resistance of the links",
    "V_Rd_max": "shear resistance of the struts",
    "delta_F_td": "additional tension from shear",
    "T_Rd_c": "torsional cracking moment",
    "T_Rd_s": "torsional resistance of the links",
    "T_Rd_max": "torsional resistance of the struts",
    "M_Rd": "bending resistance",
}
"""Each declarable symbol in words (as in EN 1992-1-1:2004, 1.6, 6.2 and 6.3)."""
