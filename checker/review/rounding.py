"""How far a number is usually rounded when a designer writes it down on the way, without declaring it.

- Common practice, no source: half of the last place that is usually kept.
- A hidden number is carried on as it was written, so what follows may be off by its rounding, as by a declared one's.
"""

from __future__ import annotations

from collections.abc import Iterable

_BY_HALF_STEP: dict[float, str] = {
    0.05: "f_cd",
    0.005: "f_ctd v_min k A_sw_s_shear A_sw_s_torsion A_sw_s_provided crack_sum crush_sum",
    0.5: "f_yd f_ywd d z t_ef u u_k A_s_bending A_sl_torsion A_s_shift",
    0.0005: "nu nu_1",
    0.00005: "rho_l",
    500.0: "V_Rd_c V_Rd_s V_Rd_max delta_F_td",
    50_000.0: "T_Rd_c T_Rd_s T_Rd_max",
}

USUAL_HALF_STEP: dict[str, float] = {
    symbol: half for half, line in _BY_HALF_STEP.items() for symbol in line.split()
}
"""Symbol -> half of the last place usually written, in inside units."""


def hidden_steps(symbols: Iterable[str], declared: Iterable[str]) -> dict[str, float]:
    """The half steps of those symbols that a designer works with but has not declared."""
    known = set(declared)
    return {s: USUAL_HALF_STEP[s] for s in symbols if s in USUAL_HALF_STEP and s not in known}
