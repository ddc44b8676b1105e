"""The published formulas of EN 1992-1-1 as one plain chain of numbers, as a designer would work through them.

- N, mm, MPa throughout; nothing of the product is used. Clauses stand beside the lines.
- `say` is what the designer does with a number before going on: keep it, or go on with what was printed.
- Conventions that a clause leaves open are those of the design notes: torsion halves at mid-depth, bars shared to
  the chords by the lever rule, the upright part of sloping legs.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from math import log, pi, sqrt, tan

from tests.properties.shapes import Shape

E_S = 200_000.0
Say = Callable[[str, float], float]
Values = dict[str, float]


@dataclass(frozen=True)
class Bar:
    x: float
    y: float
    diameter: float
    chord: str
    """bottom, top, or "" for a bar that belongs to neither face."""

    @property
    def area(self) -> float:
        return pi * self.diameter**2 / 4


@dataclass(frozen=True)
class Member:
    """What is provided: outline, strengths, bars and links (`inner` legs besides the two of the perimeter)."""

    shape: Shape
    f_ck: float
    f_yk: float
    f_ywk: float
    cover: float
    phi_w: float
    bars: tuple[Bar, ...]
    corner_axis: float
    spacing: float = 0.0
    inner: int = 0
    phi_inner: float = 0.0
    alpha: float = pi / 2
    low_stress: bool = False
    """Links counted with 0.8 f_ywk (6.2.3(3))."""

    @property
    def leg(self) -> float:
        return pi * self.phi_w**2 / 4

    @property
    def legs(self) -> float:
        """Area of all legs of one set."""
        return 2 * self.leg + self.inner * pi * self.phi_inner**2 / 4


@dataclass(frozen=True)
class Actions:
    V: float
    T: float
    M: float
    N: float = 0.0
    hogging: bool = False
    M_max: float | None = None


@dataclass(frozen=True)
class Chord:
    """One sense of bending: depths and areas of the tension side."""

    d: float
    d_2: float
    A_face: float
    A_tension: float
    A_compression: float
    b_w: float
    b_t: float


def chord_of(m: Member, hogging: bool) -> Chord:
    h = m.shape.h
    levels, areas = {}, {}
    for name in ("bottom", "top"):
        own = [bar for bar in m.bars if bar.chord == name]
        areas[name] = sum(bar.area for bar in own)
        levels[name] = sum(bar.area * bar.y for bar in own) / areas[name]
    low, high = levels["bottom"], levels["top"]
    half = sum(bar.area * min(1.0, max(0.0, (high - bar.y) / (high - low))) for bar in m.bars)
    rest = sum(bar.area for bar in m.bars) - half
    if hogging:
        d = high
        b_w, b_t = m.shape.narrowest(high - 0.9 * d, high), m.shape.mean_width(h / 2, h)
        return Chord(d, low, areas["top"], rest, half, b_w, b_t)
    d = h - low
    b_w, b_t = m.shape.narrowest(low, low + 0.9 * d), m.shape.mean_width(0, h / 2)
    return Chord(d, h - high, areas["bottom"], half, rest, b_w, b_t)


def upright_share(m: Member) -> float:
    """Vertical part of an outer leg; the smaller of both senses of bending."""
    down, up = chord_of(m, False), chord_of(m, True)
    inwards, h = m.cover + m.phi_w / 2, m.shape.h
    return min(
        m.shape.upright_share(inwards, h - down.d, h - down.d + 0.9 * down.d),
        m.shape.upright_share(inwards, 0.1 * up.d, up.d),
    )


def f_ctm(f_ck: float) -> float:
    """Table 3.1."""
    return 0.3 * f_ck ** (2 / 3) if f_ck <= 50 else 2.12 * log(1 + (f_ck + 8) / 10)


def block_stress(m: Member, hogging: bool) -> tuple[float, float, float]:
    """Stress, depth over x and ultimate strain of the rectangular block (3.1.7(3), Table 3.1)."""
    over = max(0.0, m.f_ck - 50)
    stress = (1 - over / 200) * m.f_ck / 1.5 * (0.9 if m.shape.narrows(hogging) else 1.0)
    strain = 0.0035 if m.f_ck <= 50 else 0.0026 + 0.035 * ((90 - m.f_ck) / 100) ** 4
    return stress, 0.8 - over / 400, strain


def bisect(rises: Callable[[float], float], low: float, high: float) -> float:
    for _ in range(60):
        middle = (low + high) / 2
        low, high = (low, middle) if rises(middle) > 0 else (middle, high)
    return (low + high) / 2


def lever_arm(m: Member, hogging: bool, d: float, force: float) -> float:
    """Distance of the compression block of a given force from the tension bars (6.1, 3.1.7(3))."""
    stress, _, _ = block_stress(m, hogging)
    a = bisect(lambda a: stress * m.shape.block(a, hogging)[0] - force, 0.0, m.shape.h)
    return d - m.shape.block(a, hogging)[1] if force > 0 else d


def moment_capacity(m: Member, hogging: bool, N: float) -> float:
    """Bending resistance with all bars at their strain (6.1), about the concrete's centroid."""
    stress, ratio, strain = block_stress(m, hogging)
    h, f_yd = m.shape.h, m.f_yk / 1.15
    centre = m.shape.y_c if hogging else h - m.shape.y_c
    bars = [(bar.y if hogging else h - bar.y, bar.area) for bar in m.bars]

    def steel(x: float, depth: float) -> float:
        return max(-f_yd, min(f_yd, E_S * strain * (1 - depth / x)))

    def excess(x: float) -> float:
        force = stress * m.shape.block(min(ratio * x, h), hogging)[0]
        return force + sum(area * steel(x, depth) for depth, area in bars) - N

    x = bisect(excess, 1e-3, 4 * h)
    area, depth = m.shape.block(min(ratio * x, h), hogging)
    return stress * area * (centre - depth) + sum(A * steel(x, y) * (centre - y) for y, A in bars)


def largest_block_force(m: Member, hogging: bool, d: float) -> float:
    """Compression of the block where the tension bars just yield."""
    stress, ratio, strain = block_stress(m, hogging)
    x = strain * d / (strain + m.f_yk / 1.15 / E_S)
    return stress * m.shape.block(ratio * x, hogging)[0]


def arm_to_centroid(m: Member, hogging: bool, d: float) -> float:
    return d - (m.shape.y_c if hogging else m.shape.h - m.shape.y_c)


def bending(m: Member, a: Actions, d: float) -> tuple[float, float]:
    """Lever arm of the bending analysis, and the moment about the tension bars.

    With both faces in tension the lever arm is the distance of the bars of both faces.
    """
    about = a.M + a.N * arm_to_centroid(m, a.hogging, d)
    stress, _, _ = block_stress(m, a.hogging)

    def excess(depth: float) -> float:
        area, centre = m.shape.block(depth, a.hogging)
        return stress * area * (d - centre) - about

    if about <= 0:
        return d - chord_of(m, a.hogging).d_2 * (about < 0), about
    depth = bisect(excess, 0.0, d)
    return d - m.shape.block(depth, a.hogging)[1], about


def wall(m: Member, say: Say) -> tuple[float, float, float]:
    """Equivalent wall, enclosed area and length of its centre-line (6.3.2(1)); walls of a box each by itself."""
    shape = m.shape
    A, u = say("A", shape.A), say("u", shape.u)
    t = say("t_ef", min(max(A / u, 2 * m.corner_axis), shape.wall))
    if shape.void is not None:
        x0, y0, _, y1 = shape.void
        wanted, width = max(A / u, 2 * m.corner_axis), max(x for x, _ in shape.points)
        side, bottom, top = (min(wanted, real) for real in (x0, y0, shape.h - y1))
        b_k, h_k = width - side, shape.h - (top + bottom) / 2
        return t, say("A_k", b_k * h_k), say("u_k", 2 * (b_k + h_k))
    area, length = shape.inside(t / 2)
    return t, say("A_k", area), say("u_k", length)


def work(m: Member, a: Actions, cot: float, z_used: float | None, say: Say) -> Values:
    """Every declarable value of one case."""
    v: Values = {}
    said = lambda symbol, value: v.setdefault(symbol, say(symbol, value))  # noqa: E731
    c, shape = chord_of(m, a.hogging), m.shape
    f_cd = said("f_cd", m.f_ck / 1.5)  # 3.1.6
    f_ctd = said("f_ctd", 0.7 * f_ctm(m.f_ck) / 1.5)
    f_yd = said("f_yd", m.f_yk / 1.15)
    f_ywd = said("f_ywd", 0.8 * m.f_ywk if m.low_stress else m.f_ywk / 1.15)  # 6.2.3(3)
    d = said("d", c.d)
    z_b, about = bending(m, a, d)
    z = said("z", z_used or (z_b if a.N else 0.9 * d))  # 6.2.3(1)
    t, A_k, u_k = wall(m, said)

    k = said("k", min(2.0, 1 + sqrt(200 / d)))  # 6.2.2(1)
    rho_l = said("rho_l", min(0.02, c.A_face / (c.b_w * d)))
    v_min = said("v_min", 0.035 * k**1.5 * sqrt(m.f_ck))  # (6.3N)
    sigma = min(a.N / shape.A_c, 0.2 * f_cd)
    V_Rd_c = said(
        "V_Rd_c",
        max(0.0, max(0.12 * k * (100 * rho_l * m.f_ck) ** (1 / 3), v_min) + 0.15 * sigma) * c.b_w * d,
    )
    nu = said("nu", 0.6 * (1 - m.f_ck / 250))  # (6.6N)
    low = 0.6 if m.f_ck <= 60 else max(0.5, 0.9 - m.f_ck / 200)  # (6.10N)
    nu_1 = said("nu_1", low if m.low_stress else nu)
    tilt = 1 / tan(m.alpha) if m.alpha < pi / 2 else 0.0
    sin_alpha = 1 / sqrt(1 + tilt**2)
    V_Rd_max = said("V_Rd_max", c.b_w * z * nu_1 * f_cd * (cot + tilt) / (1 + cot**2))  # (6.9), (6.14)
    T_Rd_max = said("T_Rd_max", 2 * nu * f_cd * A_k * t * cot / (1 + cot**2))  # (6.30)
    T_Rd_c = said("T_Rd_c", 2 * A_k * t * f_ctd)  # 6.3.2(5)

    provided = said("A_sw_s_provided", m.legs / m.spacing)
    eta = upright_share(m)
    upright = (m.legs - 2 * m.leg * (1 - eta)) / m.legs
    lift = sin_alpha * upright * cot + tilt * sin_alpha
    shear = said("A_sw_s_shear", a.V / (z * f_ywd * lift))  # (6.8), (6.13)
    torsion = said("A_sw_s_torsion", a.T / (2 * A_k * f_ywd * cot))  # (6.27)
    said("A_sw_s_total", shear + 2 * torsion)
    said("V_Rd_s", provided * z * f_ywd * lift)
    said("T_Rd_s", 2 * A_k * provided * m.leg / m.legs * f_ywd * cot)
    said("rho_w", provided / (c.b_w * sin_alpha))  # (9.4)
    said("rho_w_min", 0.08 * sqrt(m.f_ck) / m.f_ywk)  # (9.5N)
    reach = 0.75 * d * (1 + tilt)  # (9.6N)
    said("s_l_max", min(reach, v["u"] / 8, shape.least_dimension) if a.T else reach)  # 9.2.3(3)
    said("crack_sum", a.T / T_Rd_c + (a.V / V_Rd_c if V_Rd_c else 0.0))  # (6.31)
    said("crush_sum", a.T / T_Rd_max + a.V / V_Rd_max)  # (6.29)

    force = max(0.0, about / z_b - a.N)
    A_s = said("A_s_bending", force / f_yd)
    delta = said("delta_F_td", 0.5 * a.V * (cot - tilt))  # (6.18)
    shift = delta
    if a.M_max is not None:
        most = max(0.0, (a.M_max + about - a.M) / z_b - a.N)
        shift = min(delta, max(0.0, most - force))  # 6.2.3(7)
    A_shift = said("A_s_shift", shift / f_yd)
    A_sl = said("A_sl_torsion", a.T * u_k * cot / (2 * A_k * f_yd))  # (6.28)
    said("A_s_tension", A_s + A_shift + A_sl / 2)
    said("M_Rd", moment_capacity(m, a.hogging, a.N))
    return v
