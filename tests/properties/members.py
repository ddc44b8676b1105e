"""Random members of every shape: outline, cover, bars and links that can be built, with the YAML that says so."""

from __future__ import annotations

from dataclasses import dataclass
from math import atan2, ceil, cos, hypot, pi, radians, sin
from random import Random

from tests.properties.chain import Bar, Member
from tests.properties.shapes import Shape, inset, ring

SHAPES = ("rectangle", "box", "circle", "polygon")
LARGEST_GAP = 330.0


@dataclass(frozen=True)
class Drawn:
    """A member without its link spacing, and the lines of its section and bars."""

    member: Member
    section: list[str]
    bars: list[str]
    aggregate: int


def draw_member(rng: Random, kind: str) -> Drawn:
    f_ck = rng.choice((20, 25, 28, 30, 32, 35, 40, 45, 50, 55, 60, 70, 80, 90))
    f_yk = rng.choice((420, 460, 500, 500, 500, 550, 600))
    f_ywk = rng.choice((f_yk, f_yk, 500))
    cover, phi_w = rng.choice((25, 30, 35, 40, 45, 50)), rng.choice((8, 10, 12, 14, 16))
    aggregate = rng.choice((16, 20, 32))
    edge = cover + phi_w
    if kind in ("rectangle", "box"):
        shape, section = _upright(rng, kind, edge)
        bars, lines = _rows(rng, shape, edge, aggregate)
    elif kind == "circle":
        shape = Shape("circle", diameter=rng.randrange(350, 1201, 25))
        section = [f"  shape: circle", f"  diameter: {shape.diameter:g}"]  # noqa: F541
        bars, lines = _ring(rng, shape, edge)
    else:
        shape = Shape("polygon", rng.choice(POLYGONS)(rng))
        shift = rng.choice(((0, 0), (0, 0), (-150, 40)))
        points = [(x + shift[0], y + shift[1]) for x, y in shape.points]
        start = rng.randrange(len(points))
        turned = points[start:] + points[:start]
        if rng.random() < 0.3:
            turned.reverse()
        places = ", ".join(f"[{x:g}, {y:g}]" for x, y in turned)
        section = ["  shape: polygon", f"  points: [{places}]"]
        bars, lines = _along(rng, shape, edge, shift)
    axis = (
        max(edge + bar.diameter / 2 for bar in bars) if kind == "circle" else _corner_axis(shape, bars, edge)
    )
    inner = _inner_legs(shape, bars, cover, phi_w)
    inner += 2 * rng.choice((0, 0, 0, 1)) if kind in ("rectangle", "circle") else 0
    member = Member(
        shape, f_ck, f_yk, f_ywk, cover, phi_w, tuple(bars), axis, inner=inner,
        phi_inner=rng.choice((phi_w, 8, 10)) if inner else 0.0, low_stress=rng.random() < 0.1,
    )  # fmt: skip
    return Drawn(member, section, lines, aggregate)


def can_be_built(m: Member, aggregate: int) -> bool:
    """Bars in their cover and apart from each other, and an equivalent wall that is a tube.

    Cover by 4.4.1.2(3) after a deviation of 10 mm, clear distances by 8.2(2), skin bars by their plain presence.
    """
    left = m.cover - 10
    if left < m.phi_w or left + m.phi_w < max(bar.diameter for bar in m.bars):
        return False
    for i, one in enumerate(m.bars):
        for other in m.bars[:i]:
            clear = hypot(one.x - other.x, one.y - other.y) - (one.diameter + other.diameter) / 2
            if clear < max(one.diameter, other.diameter, aggregate + 5, 20) + 0.01:
                return False
    if m.shape.kind != "polygon":
        return True
    t = max(m.shape.A / m.shape.u, 2 * m.corner_axis)
    line, moved = ring(m.shape.points), ring(inset(m.shape.points, t / 2))
    return all(
        (x1 - x0) * (u1 - u0) + (y1 - y0) * (v1 - v0) > 0
        for ((x0, y0), (x1, y1)), ((u0, v0), (u1, v1)) in zip(line, moved, strict=True)
    )


def _inner_legs(shape: Shape, bars: list[Bar], cover: float, phi_w: float) -> int:
    """Legs that 9.2.2(8) asks for between the outer ones."""
    if shape.void is not None:
        return 0
    left, right = shape.reach(shape.h / 2 + 1e-6)
    depth = min(_depths(shape, bars))
    limit = min(0.75 * depth, 600) * 0.99
    return max(0, ceil((right - left - 2 * cover - phi_w) / limit) - 1)


def _depths(shape: Shape, bars: list[Bar]) -> tuple[float, float]:
    low = [bar for bar in bars if bar.chord == "bottom"]
    high = [bar for bar in bars if bar.chord == "top"]
    y_low = sum(bar.area * bar.y for bar in low) / sum(bar.area for bar in low)
    y_high = sum(bar.area * bar.y for bar in high) / sum(bar.area for bar in high)
    return shape.h - y_low, y_high


def _corner_axis(shape: Shape, bars: list[Bar], edge: float) -> float:
    """Deepest bar in a corner: every generator here puts one touching both legs of each outward corner."""
    found = []
    for i, (x, y) in enumerate(shape.points):
        xa, ya = shape.points[i - 1]
        xb, yb = shape.points[(i + 1) % len(shape.points)]
        if (x - xa) * (yb - y) - (y - ya) * (xb - x) <= 0:
            continue
        nearest = min(bars, key=lambda bar: hypot(bar.x - x, bar.y - y))
        found.append(edge + nearest.diameter / 2)
    return max(found)


def _upright(rng: Random, kind: str, edge: float) -> tuple[Shape, list[str]]:
    if kind == "rectangle":
        b, h = rng.randrange(250, 901, 25), rng.randrange(300, 1501, 25)
        points = ((0.0, 0.0), (float(b), 0.0), (float(b), float(h)), (0.0, float(h)))
        return Shape("rectangle", points), ["  shape: rectangle", f"  b: {b}", f"  h: {h}"]
    b, h = rng.randrange(700, 2001, 50), rng.randrange(700, 2001, 50)
    points = ((0.0, 0.0), (float(b), 0.0), (float(b), float(h)), (0.0, float(h)))
    side, top, bottom = (rng.randrange(140, 301, 10) for _ in range(3))
    if rng.random() < 0.5:
        top = bottom = side
        wall = ["  wall: " + str(side)]
    else:
        wall = ["  walls:", f"    side: {side}", f"    top: {top}", f"    bottom: {bottom}"]
    shape = Shape("box", points, void=(side, bottom, b - side, h - top))
    return shape, ["  shape: box", f"  b: {b}", f"  h: {h}", *wall]


def _rows(rng: Random, shape: Shape, edge: float, aggregate: int) -> tuple[list[Bar], list[str]]:
    """Bottom and top rows of one or two sizes, perhaps a second layer at the bottom, and side bars."""
    b = max(x for x, _ in shape.points)
    bars: list[Bar] = []
    lines: list[str] = []
    corner = {}
    least = 1 + ceil((b - 2 * edge - 32) / LARGEST_GAP)
    for face in ("bottom", "top"):
        phi = rng.choice((16, 20, 25, 28, 32))
        fits = int((b - 2 * edge) // (2.2 * phi))
        count = min(max(least, rng.randrange(2, 9), 2), max(fits, least, 2))
        y = edge + phi / 2
        corner[face] = y if face == "bottom" else shape.h - y
        second = rng.choice((0, 0, 12, 16, 20)) if count > 2 and phi >= 20 else 0
        rows = [(2, phi), (count - 2, second)] if second else [(count, phi)]
        for number, (many, size) in enumerate(rows):
            level = edge + size / 2 if face == "bottom" else shape.h - edge - size / 2
            xs = _row_places(b, edge, phi, count, number, bool(second))
            bars += [Bar(x, level, size, face) for x in xs]
            mark = face[0].upper() + str(number + 1)
            lines += _group(mark, face, many, size)
        if face == "bottom" and shape.void is None and shape.h > 500 and rng.random() < 0.15:
            clear = max(phi, aggregate + 5, 20)
            level = edge + phi + clear + phi / 2
            bars += [Bar(x, level, phi, face) for x in _row_places(b, edge, phi, 2, 0, False)]
            lines += [*_group("B9", face, 2, phi), "    layer: 2"]
    span = corner["top"] - corner["bottom"]
    many, phi = ceil(span / LARGEST_GAP) - 1 + rng.choice((0, 0, 1, 2)), rng.choice((12, 16, 20))
    for face, x in (("left", edge + phi / 2), ("right", b - edge - phi / 2)):
        if many:
            levels = [corner["bottom"] + span * (j + 1) / (many + 1) for j in range(many)]
            bars += [Bar(x, y, phi, "") for y in levels]
            lines += _group("S" + face[0].upper(), face, many, phi)
    return bars, lines


def _row_places(b: float, edge: float, phi: float, count: int, number: int, mixed: bool) -> list[float]:
    """Even places between the corners; of a mixed row the two corner bars, or all the others."""
    low, high = edge + phi / 2, b - edge - phi / 2
    xs = [low + (high - low) * j / (count - 1) for j in range(count)]
    if not mixed:
        return xs
    return [xs[0], xs[-1]] if number == 0 else xs[1:-1]


def _group(mark: str, face: str, count: int, phi: float) -> list[str]:
    return [f"  - mark: {mark}", f"    face: {face}", f"    count: {count}", f"    diameter: {phi:g}"]


def _ring(rng: Random, shape: Shape, edge: float) -> tuple[list[Bar], list[str]]:
    phi = rng.choice((16, 20, 25, 28, 32))
    r = shape.diameter / 2
    R = r - edge - phi / 2
    least, most = max(6, ceil(2 * pi * (R + phi) / LARGEST_GAP)), int(2 * pi * R // (2.5 * phi))
    count = rng.randrange(least, max(least + 1, min(most, 25)))
    bars = []
    for j in range(count):
        angle = 2 * pi * j / count - pi / 2
        y = r + R * sin(angle)
        chord = "" if abs(y - r) < 1e-6 else "bottom" if y < r else "top"
        bars.append(Bar(r + R * cos(angle), y, phi, chord))
    return bars, _group("R1", "round", count, phi)


def _along(rng: Random, shape: Shape, edge: float, shift: tuple[int, int]) -> tuple[list[Bar], list[str]]:
    """One bar in each corner of the link and more between, at exact places; flat rows count to their face."""
    phi = rng.choice((16, 20, 25))
    line = inset(shape.points, edge + phi / 2)
    places: dict[str, list[tuple[float, float]]] = {"bottom": [], "top": [], "left": [], "right": []}
    low, high = min(y for _, y in line), max(y for _, y in line)
    middle = (min(x for x, _ in line) + max(x for x, _ in line)) / 2
    for (x0, y0), (x1, y1) in ring(line):
        length = hypot(x1 - x0, y1 - y0)
        extra = (
            rng.choice((0, 1, 2)) if abs(atan2(y1 - y0, x1 - x0) % pi) < 1e-9 and length > 4 * phi * 3 else 0
        )
        steps = max(1, ceil(length / (LARGEST_GAP - 30))) + extra
        for j in range(steps):
            x, y = round(x0 + (x1 - x0) * j / steps, 3), round(y0 + (y1 - y0) * j / steps, 3)
            side = "left" if x < middle else "right"
            face = "bottom" if y < low + 1e-2 else "top" if y > high - 1e-2 else side
            places[face].append((x, y))
    bars, lines = [], []
    for face, spots in places.items():
        if spots:
            chord = face if face in ("bottom", "top") else ""
            bars += [Bar(x, y, phi, chord) for x, y in spots]
            listed = ", ".join(f"[{x + shift[0]:.7g}, {y + shift[1]:.7g}]" for x, y in spots)
            lines += [
                f"  - mark: P{face[0].upper()}",
                f"    face: {face}",
                f"    diameter: {phi}",
                f"    at: [{listed}]",
            ]
    return bars, lines


def _trapezoid(rng: Random) -> tuple[tuple[float, float], ...]:
    bottom, top, h = (
        float(rng.randrange(low, high, 25)) for low, high in ((300, 700), (300, 700), (400, 1000))
    )
    width = max(bottom, top)
    return (
        ((width - bottom) / 2, 0.0), ((width + bottom) / 2, 0.0), ((width + top) / 2, h), ((width - top) / 2, h),
    )  # fmt: skip


def _chamfered(rng: Random) -> tuple[tuple[float, float], ...]:
    b, h = float(rng.randrange(400, 900, 25)), float(rng.randrange(500, 1200, 25))
    c = float(rng.randrange(100, 151, 10))
    return ((c, 0), (b - c, 0), (b, c), (b, h - c), (b - c, h), (c, h), (0, h - c), (0, c))


def _hexagon(rng: Random) -> tuple[tuple[float, float], ...]:
    b, h, flat = (float(rng.randrange(low, high, 50)) for low, high in ((600, 1000), (500, 900), (250, 450)))
    return (
        ((b - flat) / 2, 0),
        ((b + flat) / 2, 0),
        (b, h / 2),
        ((b + flat) / 2, h),
        ((b - flat) / 2, h),
        (0, h / 2),
    )


def _flanged(rng: Random) -> tuple[tuple[float, float], ...]:
    """A web with a flange at the top, to both sides or to one."""
    b_w, h = float(rng.randrange(300, 601, 25)), float(rng.randrange(600, 1301, 50))
    h_f, out = float(rng.randrange(180, 301, 20)), float(rng.randrange(200, 401, 50))
    left = rng.choice((out, 0.0))
    right = left + b_w
    start = [(left, 0.0), (right, 0.0), (right, h - h_f), (right + out, h - h_f), (right + out, h)]
    end = [(0.0, h), (0.0, h - h_f), (left, h - h_f)] if left else [(0.0, h)]
    return tuple(start + end)


POLYGONS = (_trapezoid, _chamfered, _hexagon, _flanged)
INCLINED = (radians(60), radians(75), radians(45))
