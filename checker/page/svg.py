"""Pieces of SVG as text: shapes with presentation attributes only, so that any renderer shows them alike.

- Colours are the page's own names (`var(--…)`) with a fallback, so that the same drawing works in dark and in light.
- Everything a person wrote goes through `text`, which escapes it.
"""

from __future__ import annotations

from collections.abc import Iterable
from html import escape
from typing import NamedTuple

Point = tuple[float, float]

INK, QUIET, PAPER = "var(--ink,#1d2530)", "var(--quiet,#6a7483)", "var(--sheet,#fff)"
CONCRETE, STEEL, WALL = "var(--concrete,#e4e1d8)", "var(--steel,#1f4e79)", "var(--wall,#8a5a00)"
ALARM, GOOD = "var(--alarm,#a3232f)", "var(--good,#2f6f4f)"


class Frame(NamedTuple):
    """From mm on the section to units of the drawing: scale, and where the section's lower left corner comes to lie."""

    scale: float
    left: float
    base: float

    def at(self, point: Point) -> Point:
        return self.left + point[0] * self.scale, self.base - point[1] * self.scale


def n(value: float) -> str:
    """A coordinate with as few digits as can be seen."""
    return f"{value:.1f}".rstrip("0").rstrip(".") or "0"


def path(points: Iterable[Point], *, closed: bool = True, fill: str = "none", stroke: str = INK, width: float = 1,
         dash: str = "", extra: str = "") -> str:  # fmt: skip
    steps = "L".join(f"{n(x)} {n(y)}" for x, y in points)
    dashed = f' stroke-dasharray="{dash}"' if dash else ""
    end = "Z" if closed else ""
    return (
        f'<path d="M{steps}{end}" fill="{fill}" stroke="{stroke}" stroke-width="{n(width)}"{dashed}{extra}/>'
    )


def circle(centre: Point, radius: float, *, fill: str = "none", stroke: str = INK, width: float = 1, dash: str = "",
           extra: str = "") -> str:  # fmt: skip
    dashed = f' stroke-dasharray="{dash}"' if dash else ""
    x, y = centre
    return (
        f'<circle cx="{n(x)}" cy="{n(y)}" r="{n(radius)}" fill="{fill}" stroke="{stroke}" '
        f'stroke-width="{n(width)}"{dashed}{extra}/>'
    )


def line(a: Point, b: Point, *, stroke: str = INK, width: float = 1, dash: str = "") -> str:
    dashed = f' stroke-dasharray="{dash}"' if dash else ""
    return (
        f'<line x1="{n(a[0])}" y1="{n(a[1])}" x2="{n(b[0])}" y2="{n(b[1])}" stroke="{stroke}" '
        f'stroke-width="{n(width)}"{dashed}/>'
    )


def text(
    at: Point, words: str, *, size: float = 11, anchor: str = "start", fill: str = INK, turn: bool = False
) -> str:
    turned = f' transform="rotate(-90 {n(at[0])} {n(at[1])})"' if turn else ""
    return (
        f'<text x="{n(at[0])}" y="{n(at[1])}" font-size="{n(size)}" text-anchor="{anchor}" fill="{fill}"{turned}>'
        f"{escape(words)}</text>"
    )


def rect(corner: Point, width: float, height: float, *, fill: str, stroke: str = INK, extra: str = "") -> str:
    return (
        f'<rect x="{n(corner[0])}" y="{n(corner[1])}" width="{n(max(width, 0))}" height="{n(height)}" fill="{fill}" '
        f'stroke="{stroke}"{extra}/>'
    )


def dimension(a: Point, b: Point, words: str) -> str:
    """A dimension line between two points on one upright or level line, with short strokes at its ends."""
    level = abs(a[1] - b[1]) < 0.01
    dx, dy = (0.0, 4.0) if level else (4.0, 0.0)
    ends = "".join(line((x - dx, y - dy), (x + dx, y + dy), stroke=QUIET) for x, y in (a, b))
    middle = ((a[0] + b[0]) / 2, (a[1] + b[1]) / 2)
    where = (middle[0], middle[1] - 4) if level else (middle[0] - 4, middle[1])
    return line(a, b, stroke=QUIET) + ends + text(where, words, anchor="middle", fill=QUIET, turn=not level)


def picture(
    name: str,
    width: float,
    height: float,
    title: str,
    description: str,
    body: Iterable[str],
    role: str = "img",
) -> str:
    """A whole drawing with its text alternative; `name` must be unique on the page, `role` group where it has links."""
    return (
        f'<svg class="drawing" role="{role}" aria-labelledby="{name}-t {name}-d" viewBox="0 0 {n(width)} {n(height)}" '
        f'width="{n(width)}" height="{n(height)}" font-family="inherit">'
        f'<title id="{name}-t">{escape(title)}</title><desc id="{name}-d">{escape(description)}</desc>'
        f"{''.join(body)}</svg>"
    )
