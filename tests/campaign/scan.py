"""The strut angle scanned by brute force: where links, struts and bars hold, and how far the actions could grow.

- Everything comes from the plain chain; an edge between two steps of the scan is closed in on by halving.
- Grown actions keep the lever arms of bending (first order); so does the choice to go without calculated links.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from functools import cached_property
from math import inf, pi, tan

from tests.properties import chain
from tests.properties.chain import Actions, Member, Values

LOW, HIGH = 1.0, 2.5
STEPS = 31


@dataclass(frozen=True)
class Truss:
    """One case: what is needed on any strut angle against what is provided (N, mm)."""

    m: Member
    a: Actions
    z: float | None = None

    @cached_property
    def right(self) -> Values:
        return chain.work(self.m, self.a, 1.5, self.z, lambda _, value: value)

    @cached_property
    def bent(self) -> tuple[float, float]:
        return chain.bending(self.m, self.a, self.right["d"])

    @cached_property
    def without_links(self) -> bool:
        """Only minimum links are needed (6.3.2(5), 6.2.1(3))."""
        return self.right["crack_sum"] <= 1 and (self._is_rectangle or not self.a.T)

    @property
    def _is_rectangle(self) -> bool:
        """A solid rectangle, also where it is given by its corners."""
        points = self.m.shape.points
        if self.m.shape.kind != "polygon":
            return self.m.shape.kind == "rectangle"
        return len({x for x, _ in points}) == len({y for _, y in points}) == 2

    @cached_property
    def tilt(self) -> float:
        return 1 / tan(self.m.alpha) if self.m.alpha < pi / 2 else 0.0

    @cached_property
    def chord(self) -> chain.Chord:
        return chain.chord_of(self.m, self.a.hogging)

    def links(self, cot: float, grown: float = 1.0) -> float:
        """Share left over in the links: negative where they fail."""
        if self.without_links:
            return inf
        v = self._at(cot)
        legs = v["A_sw_s_provided"] / (grown * v["A_sw_s_total"]) if v["A_sw_s_total"] else inf
        leg = v["A_sw_s_provided"] * self.m.leg / self.m.legs
        return min(legs, leg / (grown * v["A_sw_s_torsion"]) if self.a.T else inf) - 1

    def concrete(self, cot: float, grown: float = 1.0) -> float:
        tilt = 0.0 if self.a.T else self.tilt
        v, f = self.right, (1 + cot**2)
        shear = v["V_Rd_max"] * (1 + 1.5**2) / (1.5 + self.tilt) * (cot + tilt) / f
        twist = v["T_Rd_max"] * (1 + 1.5**2) / 1.5 * cot / f
        use = grown * (self.a.V / shear + self.a.T / twist)
        return 1 / use - 1 if use else inf

    def bars(self, cot: float, grown: float = 1.0) -> float:
        v, a, z_b = self.right, self.a, self.bent[0]
        twist = 0.0 if self.without_links else grown * a.T * v["u_k"] * cot / (4 * v["A_k"])
        about = self.bent[1] if grown == 1.0 else grown * a.M  # growth is asked for without axial force only
        pulled = max(0.0, about / z_b - a.N)
        shift = grown * 0.5 * a.V * (cot - self.tilt)
        if a.M_max is not None:
            most = max(0.0, (about + grown * (a.M_max - a.M)) / z_b - a.N)
            shift = min(shift, max(0.0, most - pulled))
        tension, push = pulled + shift + twist, twist - about / z_b
        c, f_yd = self.chord, v["f_yd"]
        return (
            min(
                c.A_tension * f_yd / tension if tension > 0 else inf,
                c.A_compression * f_yd / push if push > 0 else inf,
                v["M_Rd"] / (grown * a.M) if grown != 1.0 and a.M else inf,
            )
            - 1
        )

    def bends(self) -> bool:
        return self.right["M_Rd"] >= self.a.M * (1 - 1e-9)

    def _at(self, cot: float) -> dict[str, float]:
        """Link areas on an angle: links at right angles count by cot, the slope of theirs adds to it."""
        v = self.right
        m = self.m
        upright = (m.legs - 2 * m.leg * (1 - self._eta)) / m.legs
        lean = 1 / (1 + self.tilt**2) ** 0.5
        shear = self.a.V / (v["z"] * v["f_ywd"] * lean * (upright * cot + self.tilt))
        twist = self.a.T / (2 * v["A_k"] * v["f_ywd"] * cot)
        return {
            "A_sw_s_provided": v["A_sw_s_provided"], "A_sw_s_torsion": twist, "A_sw_s_total": shear + 2 * twist,
        }  # fmt: skip

    @cached_property
    def _eta(self) -> float:
        return chain.upright_share(self.m)


Left = Callable[[float], float]


def window(left: Left) -> tuple[float, float] | None:
    """From where to where a resistance holds, found step by step and then by halving."""
    cots = [LOW + (HIGH - LOW) * i / (STEPS - 1) for i in range(STEPS)]
    holds = [left(cot) >= -1e-9 for cot in cots]
    if not any(holds):
        peak = _peak(left, cots)
        if left(peak) < -1e-9:
            return None
        return _edge(left, peak, LOW), _edge(left, peak, HIGH)
    first, last = holds.index(True), STEPS - 1 - holds[::-1].index(True)
    assert all(holds[first : last + 1]), "links, struts and bars hold on one span of angles"
    low = LOW if first == 0 else _edge(left, cots[first], cots[first - 1])
    high = HIGH if last == STEPS - 1 else _edge(left, cots[last], cots[last + 1])
    return low, high


def _edge(left: Left, inside: float, outside: float) -> float:
    if left(outside) >= -1e-9:
        return outside
    for _ in range(60):
        middle = (inside + outside) / 2
        inside, outside = (middle, outside) if left(middle) >= -1e-9 else (inside, middle)
    return inside


def _peak(left: Left, cots: list[float]) -> float:
    """Where least is missing: between the neighbours of the best step, by thirds."""
    best = max(range(len(cots)), key=lambda i: left(cots[i]))
    low, high = cots[max(0, best - 1)], cots[min(len(cots) - 1, best + 1)]
    for _ in range(100):
        third = (high - low) / 3
        if left(low + third) < left(high - third):
            low += third
        else:
            high -= third
    return (low + high) / 2


def reserve(truss: Truss, cot: float | None) -> float:
    """How much V, T and M together could grow on an angle, or on the best one (None), by halving."""

    def holds(grown: float) -> bool:
        def left(c: float) -> float:
            return min(truss.links(c, grown), truss.concrete(c, grown), truss.bars(c, grown))

        return left(cot) >= 0 if cot is not None else window(left) is not None

    low, high = 0.0, 1.0
    while holds(high) and high < 1000:
        low, high = high, 2 * high
    for _ in range(50):
        middle = (low + high) / 2
        low, high = (middle, high) if holds(middle) else (low, middle)
    return low
