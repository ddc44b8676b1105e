"""How numbers and symbols are shown to a person: one place for units, digits and paper symbols."""

from __future__ import annotations

import math

SHOWN_FACTOR: dict[str, float] = {
    "-": 1.0, "flag": 1.0, "mm": 1.0, "mm2": 1.0, "mm3": 1.0, "mm4": 1.0, "mm2/mm": 1.0,
    "MPa": 1.0, "kN": 1e-3, "kN/m": 1.0, "kNm": 1e-6, "deg": 180.0 / math.pi, "section": 1.0,
}  # fmt: skip
"""Inside value times this is the value in the shown unit (inside: N, mm, N*mm, MPa, rad)."""

UNIT_TEXT: dict[str, str] = {
    "-": "",
    "flag": "",
    "deg": "°",
    "mm2": " mm²",
    "mm3": " mm³",
    "mm4": " mm⁴",
    "mm2/mm": " mm²/mm",
}

_GREEK = {
    "alpha": "α", "gamma": "γ", "delta": "Δ", "eta": "η", "theta": "θ", "kappa": "κ", "lambda": "λ", "nu": "ν",
    "rho": "ρ", "sigma": "σ", "phi": "φ", "eps": "ε",
}  # fmt: skip
_SPECIAL = {
    "crack_sum": "cracking sum",
    "crush_sum": "crushing sum",
    "A_sw_s_all": "A_sw/s,all legs",
    "A_leg_s": "A_sw/s,leg",
    "one": "1",
}


def to_shown(value: float, unit: str) -> float:
    """An inside value in its shown unit."""
    return value * SHOWN_FACTOR[unit]


def number(value: float, digits: int = 4) -> str:
    """A number with `digits` significant digits, never in powers of ten for everyday sizes."""
    if math.isnan(value):
        return "not defined"
    if math.isinf(value):
        return "without limit" if value > 0 else "−without limit"
    if value == 0:
        return "0"
    size = math.floor(math.log10(abs(value)))
    if not -5 <= size <= 9:
        return f"{value:.{digits - 1}e}".replace("-", "−")
    decimals = max(0, digits - 1 - size)
    text = f"{value:.{decimals}f}"
    if decimals:
        text = text.rstrip("0").rstrip(".")
    return text.replace("-", "−")


def with_unit(value: float, unit: str, digits: int = 4) -> str:
    """An inside value as a person reads it: `310 kN`, `21.8°`, `0.42 mm²/mm`."""
    return number(to_shown(value, unit), digits) + UNIT_TEXT.get(unit, f" {unit}")


def paper(symbol: str) -> str:
    """A symbol as it stands on paper: `T_Rd_max` is T_Rd,max, `theta_shear` is θ_shear."""
    if symbol in _SPECIAL:
        return _SPECIAL[symbol]
    if symbol.startswith("A_sw_s_"):
        return "A_sw/s," + symbol.removeprefix("A_sw_s_").replace("_", ",")
    if symbol.startswith("cot_"):
        return "cot " + paper(symbol.removeprefix("cot_"))
    head, _, rest = symbol.partition("_")
    head = _GREEK.get(head, head)
    if head == "Δ":
        return "Δ" + paper(rest)
    return f"{head}_{rest.replace('_', ',')}" if rest else head
