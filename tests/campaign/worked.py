"""A designer's sheet of numbers for one case: right, or with values replaced at their place, and printed."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass, field, replace
from functools import cached_property
from math import pi, radians, sin, tan
from random import Random

from tests.properties import chain
from tests.properties.chain import Actions, Chord, Member, Values
from tests.properties.members import SHAPES
from tests.properties.shapes import Shape
from tests.properties.sound import DECIMALS, UNIT, Sound, SoundCase, sound_design

TOLERANCE = {
    "f_ctd": 0.03, "T_Rd_c": 0.03, "crack_sum": 0.03, "A_s_bending": 0.02, "A_s_tension": 0.02, "M_Rd": 0.02,
    "d": 0.005, "z": 0.005, "A": 0.005, "u": 0.005,
}  # fmt: skip
"""Relative tolerance of the values that have another one than a hundredth (common practice, no source)."""


@dataclass(frozen=True)
class At:
    """Where a designer stands: the member, the actions, what has been said so far and the right next value."""

    m: Member
    a: Actions
    cot: float
    said: Values
    right: float

    @cached_property
    def c(self) -> Chord:
        return chain.chord_of(self.m, self.a.hogging)

    @property
    def n_legs(self) -> float:
        return 2.0 + self.m.inner

    @cached_property
    def kappa(self) -> float:
        """By how much the outline gets shorter for each mm that it is moved inwards, over two."""
        return (self.m.shape.u - self.m.shape.inside(1.0)[1]) / 2

    @property
    def tilt(self) -> float:
        return 1 / tan(self.m.alpha) if self.m.alpha < pi / 2 else 0.0

    def lift(self, cot: float) -> float:
        """What a unit of link area lifts on a strut angle (6.13), the upright part of sloping legs counted."""
        m = self.m
        upright = (m.legs - 2 * m.leg * (1 - chain.upright_share(m))) / m.legs
        return sin(m.alpha) * (upright * cot + self.tilt)

    @cached_property
    def bent(self) -> tuple[float, float]:
        return chain.bending(self.m, self.a, self.said["d"])

    def __getattr__(self, name: str) -> float:
        """A value said so far."""
        try:
            return self.said[name]
        except KeyError:
            raise AttributeError(name) from None


Wrong = Callable[[At], float]


class Softened(Shape):
    """A section whose compression block is counted with a share of its area: for a wrong strength of the concrete."""

    share = 1.0

    def block(self, a: float, hogging: bool) -> tuple[float, float]:
        area, depth = super().block(a, hogging)
        return area * self.share, depth


def bent_with(m: Member, a: Actions, said: Values, symbol: str) -> float:
    """Bending by the strengths said so far; the chain works it with the right ones."""
    shape = Softened(m.shape.kind, m.shape.points, m.shape.diameter, m.shape.void)
    shape.__dict__ |= {"share": said["f_cd"] / (m.f_ck / 1.5), "y_c": m.shape.y_c}
    bent = replace(m, shape=shape, f_yk=1.15 * said["f_yd"])
    if symbol == "M_Rd":
        return chain.moment_capacity(bent, a.hogging, a.N)
    z_b, about = chain.bending(bent, a, said["d"])
    return max(0.0, about / z_b - a.N) / said["f_yd"]


@dataclass
class Sheet:
    """One designer's numbers: what was printed, and what was carried on (inside units)."""

    printed: dict[str, str] = field(default_factory=dict)
    carried: Values = field(default_factory=dict)


@dataclass(frozen=True)
class Job:
    """One case of a sound design, with the decimals that its designer prints."""

    design: Sound
    case: SoundCase
    cot: float
    z: float | None
    exact: bool

    @property
    def m(self) -> Member:
        return self.design.member

    def decimals(self, symbol: str) -> int:
        return len(self.case.declared[symbol].partition(".")[2])

    def half_step(self, symbol: str) -> float:
        return 0.5 * 10.0 ** -self.decimals(symbol) * UNIT.get(symbol, 1.0)

    def work(
        self, wrong: Mapping[str, Wrong] | None = None, nudged: Mapping[str, float] | None = None
    ) -> Sheet:
        """Work the case; `wrong` replaces values at their place, `nudged` adds to them."""
        sheet = Sheet()

        def say(symbol: str, value: float) -> float:
            formula = (wrong or {}).get(symbol)
            if symbol in ("M_Rd", "A_s_bending") and wrong:
                value = bent_with(self.m, self.case.actions, sheet.carried, symbol)
            if formula is not None:
                value = formula(At(self.m, self.case.actions, self.cot, sheet.carried, value))
            value += (nudged or {}).get(symbol, 0.0)
            if symbol in self.case.declared:
                unit = UNIT.get(symbol, 1.0)
                text = f"{value / unit:.{self.decimals(symbol)}f}"
                sheet.printed[symbol] = text
                value = value if self.exact else float(text) * unit
            sheet.carried[symbol] = value
            return value

        chain.work(self.m, self.case.actions, self.cot, self.z, say)
        return sheet

    @cached_property
    def right(self) -> Values:
        return replace(self, exact=True).work().carried

    def text(self, declared: Mapping[str, str], verdict: str = "") -> str:
        """The file with these values declared, and the angle as the designer claims it."""
        angle = {s: text for s, text in self.case.declared.items() if "theta" in s}
        case = SoundCase(self.case.actions, {**declared, **angle}, verdict)
        return replace(self.design, cases=[case]).text()

    @cached_property
    def readings(self) -> dict[str, tuple[float, ...]]:
        """Other values that are right as well (design notes, section 3)."""
        return _readings(self, self.right)

    @cached_property
    def most_z(self) -> float:
        """Largest lever arm that may be used (6.2.3(1); with axial force that of the bending analysis)."""
        z_b = At(self.m, self.case.actions, self.cot, self.right, 0.0).bent[0]
        return z_b if self.case.actions.N else max(0.9 * self.right["d"], z_b)

    def scale(self, symbol: str) -> float:
        """The steel for the moment alone, of which that with axial force may be a small difference (mm2)."""
        if symbol not in ("A_s_bending", "A_s_tension"):
            return 0.0
        z_b, about = At(self.m, self.case.actions, self.cot, self.right, 0.0).bent
        return about / (z_b * self.right["f_yd"])

    def held_to(self, sheet: Sheet, declared: set[str]) -> Job:
        """The same job with the lever arm that is declared, where it may be used: it is the designer's choice."""
        if "z" not in declared or self.moved(sheet, "z"):
            return self
        return replace(self, z=float(sheet.printed["z"]))

    def moved(self, sheet: Sheet, symbol: str) -> bool:
        """Whether a printed value is beyond rounding and tolerance of every right reading (before inheritance)."""
        value = float(sheet.printed[symbol]) * UNIT.get(symbol, 1.0)
        share, scale = TOLERANCE.get(symbol, 0.01), self.scale(symbol)
        if symbol == "z":  # a choice: only above its limit is it wrong
            return value > self.most_z * (1 + share) + self.half_step("z")
        return all(
            abs(value - right) > self.half_step(symbol) + share * max(abs(right), scale) + 1e-9 * abs(right)
            for right in (self.right[symbol], *self.readings.get(symbol, ()))
        )

    def inherited(self, symbol: str, wrong: Mapping[str, Wrong], declared: set[str]) -> float:
        """How far rounding on the way can move a value, to first order, by working the case again.

        What is declared was rounded as it is printed, what isn't by the fewest decimals that designers use.
        """
        ideal = replace(self, exact=True)
        base = ideal.work(wrong).carried[symbol]
        total = 0.0
        for name in set(self.case.declared) - {symbol}:
            if "theta" in name:
                continue
            half = self.half_step(name)
            if name not in declared:
                half = 0.5 * 10.0 ** -DECIMALS[name][0] * UNIT.get(name, 1.0)
            moved = ideal.work(wrong, {name: half}).carried[symbol]
            total += abs(moved - base)
        return total + self._of_angle(symbol, wrong, base)

    def _of_angle(self, symbol: str, wrong: Mapping[str, Wrong], base: float) -> float:
        name, text = next((s, t) for s, t in self.case.declared.items() if "theta" in s)
        half = 0.5 * 10.0 ** -len(text.partition(".")[2])
        step = half if name.startswith("cot_") else radians(half) * (1 + self.cot**2)
        other = replace(self, exact=True, cot=self.cot + step)
        return abs(other.work(wrong).carried[symbol] - base)

    def surely_moved(self, symbol: str, sheet: Sheet, wrong: Mapping[str, Wrong], declared: set[str]) -> bool:
        """Whether a value is moved beyond what it inherits as well.

        A value that follows from its rounded neighbours may part from the right one by their rounding twice over.
        """
        value = float(sheet.printed[symbol]) * UNIT.get(symbol, 1.0)
        share, scale = TOLERANCE.get(symbol, 0.01), self.scale(symbol)
        rounding = max(self.inherited(symbol, {}, declared), self.inherited(symbol, wrong, declared))
        slack = self.half_step(symbol) + 2 * rounding
        if symbol == "z":
            return value > self.most_z * (1 + share) + slack
        return all(
            abs(value - right) > 1.001 * (slack + share * max(abs(right), scale))
            for right in (self.right[symbol], *self.readings.get(symbol, ()))
        )


def _readings(job: Job, v: Values) -> dict[str, tuple[float, ...]]:
    m, a = job.m, job.case.actions
    at = At(m, a, job.cot, v, 0.0)
    _, about = at.bent
    by_z = max(0.0, about / v["z"] - a.N) / v["f_yd"]
    shift = v["delta_F_td"] / v["f_yd"]
    half = v["A_sl_torsion"] / 2
    bending, shifts = (v["A_s_bending"], by_z), (v["A_s_shift"], shift)
    found = {
        "A_s_bending": (by_z,),
        "A_s_shift": (shift,),
        "A_s_tension": tuple(b + s + half for b in bending for s in shifts),
        "f_cd": (m.f_ck / 1.5,),
    }
    if m.shape.kind == "rectangle" and not a.N:
        force = at.c.A_face * v["f_yd"]
        width = max(x for x, _ in m.shape.points)
        stress = chain.block_stress(m, a.hogging)[0]
        found["M_Rd"] = (force * (v["d"] - force / (2 * width * stress)),)
    if a.T:
        reach = 0.75 * v["d"] * (1 + at.tilt)
        found["s_l_max"] = (min(reach, v["u_k"] / 8, m.shape.least_dimension),)
    if v["crack_sum"] <= 1 and (m.shape.kind == "rectangle" or not a.T):
        found |= dict.fromkeys(("A_sw_s_shear", "A_sw_s_torsion", "A_sw_s_total", "A_sl_torsion"), (0.0,))
        found["A_s_tension"] += tuple(b + s for b in bending for s in shifts)
    return found


def draw_job(rng: Random, kind: str = "") -> Job:
    """One case of a random sound design."""
    exact = rng.random() < 0.5
    design = sound_design(rng, kind or rng.choice(SHAPES), exact=exact)
    case = rng.choice(design.cases)
    name, text = next((s, t) for s, t in case.declared.items() if "theta" in s)
    cot = float(text) if name.startswith("cot_") else min(1 / tan(radians(float(text))), 2.5)
    z = None
    if "z" in design.fixed:
        z = float(case.declared["z"])
    return Job(design, case, cot, z, exact)
