"""The outline of a section made of an upright web and flanges: tee, ell and I.

- x runs to the right and y upwards from the lower left corner of the bounding box; mm throughout.
- A tee's and an I's web stands in the middle of its flanges; an ell's flange stands out on one side only.
"""

from __future__ import annotations

from math import inf
from typing import NamedTuple

from checker.declared.fit import Point, without_straight_points
from checker.declared.model import Section

FLANGED = ("tee", "ell", "i")
"""The shapes made of a web and flanges."""


class FlangedSizes(NamedTuple):
    """Web b_w x h, and the flanges: width 0 where there is none; `side` is where an ell's flange stands out."""

    b_w: float
    h: float
    b_top: float = 0.0
    h_top: float = 0.0
    b_bottom: float = 0.0
    h_bottom: float = 0.0
    side: str = "both"

    @property
    def width(self) -> float:
        """Width of the bounding box in mm."""
        return max(self.b_w, self.b_top, self.b_bottom)

    @property
    def web_left(self) -> float:
        """Distance in mm from the left of the bounding box to the web's left edge."""
        spare = self.width - self.b_w
        return {"both": spare / 2, "right": 0.0, "left": spare}[self.side]

    def span_of(self, width: float) -> tuple[float, float]:
        """Left and right edge in mm of a flange of this width."""
        out = width - self.b_w
        left = self.web_left - {"both": out / 2, "right": 0.0, "left": out}[self.side]
        return left, left + width


def outline_points(sizes: FlangedSizes) -> tuple[Point, ...]:
    """The corners in mm, anticlockwise, without points at which the outline doesn't turn."""
    left, right = sizes.web_left, sizes.web_left + sizes.b_w
    h, low, high = sizes.h, sizes.h_bottom, sizes.h - sizes.h_top
    right_side: list[Point] = [(right, 0.0), (right, h)]
    left_side: list[Point] = [(left, h), (left, 0.0)]
    if sizes.b_bottom:
        start, end = sizes.span_of(sizes.b_bottom)
        right_side[:1] = [(end, 0.0), (end, low), (right, low)]
        left_side[-1:] = [(left, low), (start, low), (start, 0.0)]
    if sizes.b_top:
        start, end = sizes.span_of(sizes.b_top)
        right_side[-1:] = [(right, high), (end, high), (end, h)]
        left_side[:1] = [(start, h), (start, high), (left, high)]
    corners = tuple(dict.fromkeys((left_side[-1], *right_side, *left_side[:-1])))
    return without_straight_points(corners)


def flanged_sizes(section: Section, b_most: float = inf) -> FlangedSizes:
    """The sizes of a tee, ell or i in mm, its flanges no wider than `b_most`."""
    size = {name: number.value for name, number in section.sizes.items()}
    flange = min(size["b_f"], b_most), size["h_f"]
    none = (0.0, 0.0)
    if section.shape == "i":
        top, bottom = flange, (min(size["b_f_bottom"], b_most), size["h_f_bottom"])
    else:
        top, bottom = (flange, none) if section.flange == "top" else (none, flange)
    return FlangedSizes(size["b_web"], size["h"], *top, *bottom, section.side)
