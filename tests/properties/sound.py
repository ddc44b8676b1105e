"""Random *sound* designs: whole declared files whose every number is right and whose every rule holds.

- Actions are chosen from what the steel and the struts can take; the link spacing then from the actions.
- The declared values come from `chain`, printed with the decimals designers use. A designer either keeps all
  digits while working, or goes on with what was printed.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, field, replace
from math import atan, degrees, floor, inf, pi, radians, sqrt, tan
from random import Random

from tests.properties import chain
from tests.properties.chain import Actions, Chord, Member
from tests.properties.members import INCLINED, Drawn, can_be_built, draw_member

UNIT = {
    "d": 1.0, "z": 1.0, "V_Rd_c": 1e3, "V_Rd_s": 1e3, "V_Rd_max": 1e3, "delta_F_td": 1e3,
    "T_Rd_c": 1e6, "T_Rd_s": 1e6, "T_Rd_max": 1e6, "M_Rd": 1e6,
}  # fmt: skip
"""Inside size of the unit a symbol is printed in, 1 where it is the same."""

DECIMALS = {
    "f_cd": (1, 2), "f_ctd": (2,), "f_yd": (0, 1), "f_ywd": (0, 1), "v_min": (2, 3), "d": (0, 1), "z": (0, 1),
    "t_ef": (0, 1), "u": (0,), "u_k": (0,), "s_l_max": (0,), "A": (0,), "A_k": (0,), "A_s_bending": (0,),
    "A_sl_torsion": (0,), "A_s_shift": (0,), "A_s_tension": (0,), "A_sw_s_shear": (2, 3), "A_sw_s_torsion": (2, 3),
    "A_sw_s_total": (2, 3), "A_sw_s_provided": (2, 3), "nu": (3,), "nu_1": (3,), "k": (2, 3), "rho_l": (4, 5),
    "rho_w": (4, 5), "rho_w_min": (5,), "crack_sum": (2, 3), "crush_sum": (2, 3), "V_Rd_c": (0, 1), "V_Rd_s": (0, 1),
    "V_Rd_max": (0, 1), "delta_F_td": (0, 1), "T_Rd_c": (1,), "T_Rd_s": (1,), "T_Rd_max": (1,), "M_Rd": (0, 1),
}  # fmt: skip
ANGLE_DECIMALS = {"theta": 1, "cot_theta": 2}


@dataclass
class SoundCase:
    actions: Actions
    declared: dict[str, str]
    """Symbol -> printed value."""
    verdict: str = "adequate"


@dataclass
class Sound:
    """A sound design, ready to be written, changed or cut down."""

    drawn: Drawn
    member: Member
    header: list[str]
    links: list[str]
    cases: list[SoundCase]
    fixed: set[str] = field(default_factory=set)
    """Declared choices that the other values can't do without."""

    def text(self, name: str = "M-1") -> str:
        lines = ["format: 1", f"member: {name}", *self.header, "section:", *self.drawn.section]
        m = self.member
        lines += ["materials:", f"  f_ck: {m.f_ck:g}", f"  f_yk: {m.f_yk:g}", f"  f_ywk: {m.f_ywk:g}"]
        lines += [f"cover: {m.cover:g}", f"aggregate: {self.drawn.aggregate}", "links:", *self.links]
        lines += ["bars:", *self.drawn.bars, "cases:"]
        for number, case in enumerate(self.cases, 1):
            lines += _case_lines(f"C{number}", case)
        return "\n".join(lines) + "\n"


def _case_lines(name: str, case: SoundCase) -> Iterator[str]:
    a = case.actions
    sign = -1 if a.hogging else 1
    yield from (f"  - name: {name}", f"    V_Ed: {a.V / 1e3:g}", f"    T_Ed: {a.T / 1e6:g}")
    yield f"    M_Ed: {sign * a.M / 1e6:g}"
    if a.N:
        yield f"    N_Ed: {a.N / 1e3:g}"
    if a.M_max is not None:
        yield f"    M_Ed_max: {sign * a.M_max / 1e6:g}"
    if case.declared or case.verdict:
        yield "    declared:"
        yield from (f"      {symbol}: {text}" for symbol, text in case.declared.items())
        if case.verdict:
            yield f"      verdict: {case.verdict}"


def sound_design(rng: Random, kind: str, exact: bool, finer: int = 0) -> Sound:
    """One sound design; `exact` keeps all digits while working, else the designer goes on with printed numbers.

    `finer` adds decimals to what is printed.
    """
    while True:
        drawn = draw_member(rng, kind)
        found = _attempt(rng, drawn, exact, finer)
        if found is not None:
            return found


def _attempt(rng: Random, drawn: Drawn, exact: bool, finer: int) -> Sound | None:
    m = drawn.member
    if sum(bar.area for bar in m.bars) > 0.039 * m.shape.A_c or not can_be_built(m, drawn.aggregate):
        return None
    pure = rng.choice(("", "", "", "", "", "", "", "shear", "torsion"))
    m = replace(m, alpha=rng.choice(INCLINED) if pure == "shear" and rng.random() < 0.5 else pi / 2)
    m = replace(m, spacing=inf)
    planned = []
    form = rng.choice(("theta", "cot_theta"))
    for _ in range(rng.choice((1, 1, 2))):
        plan = _plan(rng, m, pure, form)
        if plan is None:
            return None
        planned.append(plan)
    spacing = _spacing(rng, m, planned)
    if spacing is None:
        return None
    m = replace(m, spacing=spacing)
    cases, fixed = [], {"f_ywd", "nu_1"} if m.low_stress else set()
    places = {symbol: rng.choice(options) + finer for symbol, options in DECIMALS.items()}
    for plan in planned:
        case, sticky = _case(rng, m, plan, places, form, exact)
        cases.append(case)
        fixed |= sticky
    header = rng.choice(([], ["submission:", "  project: invented", "  revision: A"]))
    return Sound(drawn, m, header, _link_lines(m, rng), cases, fixed)


@dataclass(frozen=True)
class Plan:
    """What one case is designed for."""

    actions: Actions
    cot: float
    z: float | None


def _plan(rng: Random, m: Member, pure: str, form: str) -> Plan | None:
    """Actions of one case from what bars and struts can take, with a little to spare."""
    hogging = rng.random() < 0.3
    c = chain.chord_of(m, hogging)
    f_yd = m.f_yk / 1.15
    if c.A_face < 1.01 * max(0.26 * chain.f_ctm(m.f_ck) / m.f_yk, 0.0013) * c.b_t * c.d:
        return None
    N = _axial(rng, m)
    resists = chain.moment_capacity(m, hogging, N)
    share = rng.choice((0.0, rng.uniform(0.05, 0.9)))
    for _ in range(6):
        M, force = _moment(m, hogging, c, N, share * c.A_tension * f_yd)
        if 0.985 * resists >= M:
            break
        share *= 0.8
    if M < 0 or 0.985 * resists < M or (M == 0 and (N or hogging)):
        return None
    M = floor(M / 1e6) * 1e6
    if M == 0 and (N or hogging):
        return None
    actions = Actions(0.0, 0.0, M, N, hogging)
    z_b, _ = chain.bending(m, actions, c.d)
    angle = rng.choice((21.8, 45.0, 26.6, 30.0, 33.7, round(rng.uniform(21.8, 45.0), 1)))
    cot = min(1 / tan(radians(angle)), 2.5)
    if form == "cot_theta":
        cot = round(cot, 2)
    z = None if N or rng.random() < 0.8 else float(floor(rng.choice((0.85 * c.d, max(0.9 * c.d, z_b)))))
    scaled = _scaled(rng, m, c, actions, force, cot, z or (z_b if N else 0.9 * c.d), pure)
    return None if scaled is None else Plan(scaled, cot, z)


def _axial(rng: Random, m: Member) -> float:
    if rng.random() < 0.75:
        return 0.0
    return round(rng.choice((rng.uniform(0.02, 0.15), -0.02)) * m.f_ck / 1.5 * m.shape.A_c / 1e3) * 1e3


def _moment(m: Member, hogging: bool, c: Chord, N: float, tension: float) -> tuple[float, float]:
    """The moment that pulls the tension chord with a given force, and that force."""
    block = tension + N
    if block <= 0:
        return 0.0, 0.0
    block = min(block, 0.98 * chain.largest_block_force(m, hogging, c.d))
    arm = chain.lever_arm(m, hogging, c.d, block)
    return block * arm - N * chain.arm_to_centroid(m, hogging, c.d), max(0.0, block - N)


def _scaled(
    rng: Random, m: Member, c: Chord, a: Actions, tension: float, cot: float, z: float, pure: str
) -> Actions | None:
    """V and T in a drawn proportion, as large as struts, both chords and the densest links let them be."""
    part = {"shear": 1.0, "torsion": 0.0}.get(pure, rng.uniform(0.15, 0.85))
    f_cd, f_yd = m.f_ck / 1.5, m.f_yk / 1.15
    f_ywd = 0.8 * m.f_ywk if m.low_stress else m.f_ywk / 1.15
    t, A_k, u_k = chain.wall(m, lambda _, value: value)
    tilt = 1 / tan(m.alpha) if m.alpha < pi / 2 else 0.0
    nu = 0.6 * (1 - m.f_ck / 250)
    nu_1 = (0.6 if m.f_ck <= 60 else max(0.5, 0.9 - m.f_ck / 200)) if m.low_stress else nu
    V = part * c.b_w * z * nu_1 * f_cd * (cot + tilt) / (1 + cot**2)
    T = (1 - part) * 2 * nu * f_cd * A_k * t * cot / (1 + cot**2)
    pull = 0.5 * V * (cot - tilt) + T * u_k * cot / (4 * A_k)
    push = T * u_k * cot / (4 * A_k)
    block = a.M / z if not a.N else tension + a.N
    links = V / (z * f_ywd * cot) + T / (A_k * f_ywd * cot)
    scale = min(
        rng.uniform(0.3, 0.97),
        0.985 * (c.A_tension * f_yd - tension) / pull if pull > 0 else inf,
        (0.985 * c.A_compression * f_yd + 0.85 * block) / push if push > 0 else inf,
        (m.legs / 75) / links,
        (m.leg / 75) / (T / (2 * A_k * f_ywd * cot)) if T else inf,
    )
    V, T = floor(V * scale / 1e3) * 1e3, floor(T * scale / 1e5) * 1e5
    if (pure != "torsion" and V < 5e3) or (pure != "shear" and T < 1e6):
        return None
    M_max = None if rng.random() < 0.9 or not a.M else floor(a.M / 1e6 * rng.uniform(1.0, 1.2)) * 1e6
    return replace(a, V=V, T=T, M_max=M_max)


def _spacing(rng: Random, m: Member, plans: list[Plan]) -> float | None:
    """The widest spacing in steps of 5 mm that all cases allow; None where it would be too close to build."""
    limit = inf
    for plan in plans:
        a, c = plan.actions, chain.chord_of(m, plan.actions.hogging)
        v = chain.work(replace(m, spacing=100.0), a, plan.cot, plan.z, lambda _, value: value)
        limit = min(
            limit,
            m.legs / v["A_sw_s_total"] * 0.998,
            m.leg / v["A_sw_s_torsion"] * 0.998 if a.T else inf,
            v["s_l_max"],
            m.legs
            / (c.b_w * max(v["rho_w_min"], 1e-9))
            * (sqrt(1 + 1 / tan(m.alpha) ** 2) if m.alpha < 1.57 else 1),
        )
    spacing = floor(limit / 5) * 5
    return None if spacing < 50 else float(min(spacing, rng.choice((300, 400))))


def _case(
    rng: Random, m: Member, plan: Plan, places: dict[str, int], form: str, exact: bool
) -> tuple[SoundCase, set[str]]:
    printed: dict[str, str] = {}

    def say(symbol: str, value: float) -> float:
        unit = UNIT.get(symbol, 1.0)
        printed[symbol] = f"{value / unit:.{places[symbol]}f}"
        return value if exact else float(printed[symbol]) * unit

    a = plan.actions
    chain.work(m, a, plan.cot, plan.z, say)
    if m.alpha < pi / 2:
        del printed["T_Rd_s"]  # links aslant don't count in torsion (9.2.3(1))
    if a.T and m.shape.kind != "rectangle":
        del printed["crack_sum"]
    decimals = ANGLE_DECIMALS[form]
    value = f"{degrees(atan(1 / plan.cot)) if form == 'theta' else plan.cot:.{decimals}f}"
    for side in rng.choice(([""], ["_shear", "_torsion"] if a.V and a.T else [""])):
        printed[form + side] = value
    return SoundCase(a, printed), {"z"} if plan.z is not None else set()


def _link_lines(m: Member, rng: Random) -> list[str]:
    ends = rng.choice(("hooks_135", "hooks_90", "lapped", "welded"))
    one_set = m.inner and m.phi_inner == m.phi_w and rng.random() < 0.5
    lines = [
        "  - mark: L1", f"    diameter: {m.phi_w:g}", f"    spacing: {m.spacing:g}",
        f"    legs: {2 + m.inner if one_set else 2}", "    place: perimeter", f"    ends: {ends}",
    ]  # fmt: skip
    if ends.startswith("hooks"):
        lines.append(f"    tail: {max(10 * m.phi_w, 70):g}")
    sets = [lines]
    if m.inner and not one_set:
        sets.append(
            ["  - mark: L2", f"    diameter: {m.phi_inner:g}", f"    spacing: {m.spacing:g}",
             f"    legs: {m.inner}", "    place: inner"]
        )  # fmt: skip
    if m.alpha < pi / 2:
        for part in sets:
            part.append(f"    angle: {degrees(m.alpha):g}")
    return [line for part in sets for line in part]
