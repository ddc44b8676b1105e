"""The declared design as the reader hands it on: frozen records in inside units, with their places.

- Inside units are N, mm, N*mm, MPa and rad; every record is immutable and compares by value.
- Every number keeps its literal text, because the decimals written are evidence of the rounding.
- `None` means that the file left it unsaid; nothing here is recomputed, only the format's defaults are set.
"""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import dataclass
from typing import NamedTuple


class Place(NamedTuple):
    """Where something stands in the file; line and column from 1 (the file's name is on the `Design`)."""

    line: int
    column: int


NOWHERE = Place(1, 1)  # the place of what the file doesn't spell out, such as a default


class Number(NamedTuple):
    """A number as written and as understood.

    - `value` is in inside units, `text` is as written without its unit ("0.42 mm2/mm" gives "0.42").
    - `unit` is the unit it was written in, or the shown unit of its symbol when none was written.
    - `step` is one unit in the last written place, in inside units: 0.42 gives 0.01, 310 gives 1 and
      1.5e3 gives 100, each times the factor of the unit.
    """

    value: float
    text: str
    unit: str
    step: float
    place: Place = NOWHERE

    @property
    def half_step(self) -> float:
        """The most that rounding to the written decimals can have moved the value, in inside units."""
        return self.step / 2


class Section(NamedTuple):
    """The outline of the cross-section.

    - `shape` is "rectangle", "box", "circle", "polygon", "tee", "ell" or "i".
    - `sizes` has b and h (rectangle, box; a box also wall_side, wall_top, wall_bottom) or diameter (circle);
      a tee, ell or i has b_web, h, b_f and h_f, an i also b_f_bottom and h_f_bottom.
    - `points` are the polygon's corners in mm, anticlockwise, in its own coordinates; a tee's, ell's or i's
      from the lower left of its bounding box; empty otherwise.
    - `flange` (top or bottom), `side` (both, left or right) and `torsion_by` (web or parts) are for tee, ell and i;
      so are `spans`: l_0, b_1, b_2 where the file gives them.
    """

    shape: str
    sizes: Mapping[str, Number]
    points: tuple[tuple[float, float], ...] = ()
    place: Place = NOWHERE
    flange: str = "top"
    side: str = "both"
    torsion_by: str = "web"
    spans: Mapping[str, Number] = {}


class Materials(NamedTuple):
    """Characteristic strengths in MPa and, where the file states them, the partial factors."""

    f_ck: Number
    f_yk: Number
    f_ywk: Number
    gamma_C: Number | None = None
    gamma_S: Number | None = None
    place: Place = NOWHERE


class LinkSet(NamedTuple):
    """One set of links: `where` is "perimeter", "inner" or "flange"; `angle` to the member axis in rad.

    - `ends` is hooks_135, hooks_90, lapped, welded or open; None where it is unsaid.
    - `lap` is the lap length, `tail` the straight length after a hook, `mandrel` the diameter it is bent on, in mm.
    - `f_ywk` in MPa where the set is of another grade; `lap_on` is side, top or bottom.
    - `at` has the places of an inner set's legs across the web in mm from its left side.
    """

    mark: str
    diameter: Number
    spacing: Number
    legs: int
    where: str
    ends: str | None = None
    angle: float = math.pi / 2
    lap: Number | None = None
    tail: Number | None = None
    place: Place = NOWHERE
    f_ywk: Number | None = None
    mandrel: Number | None = None
    lap_on: str | None = None
    at: tuple[float, ...] = ()


@dataclass(frozen=True, slots=True)
class BarGroup:
    """Bars of one size on one face: bottom, top, left, right, corners or round.

    - `layer` counts from 1 at the outside.
    - `at` has exact places in mm from the lower left corner of the bounding box; for a polygon, in its own
      coordinates.
    - `bundle` bars at each place; `count` counts the places. `anchored` says whether they go on beyond the section.
    """

    mark: str
    face: str
    count: int
    diameter: Number
    layer: int = 1
    at: tuple[tuple[float, float], ...] = ()
    place: Place = NOWHERE
    bundle: int = 1
    mandrel: Number | None = None
    anchored: bool | None = None

    @property
    def size(self) -> float:
        """Diameter of the bar, or of the one bar a bundle counts as, mm (8.9.1(2))."""
        return self.diameter.value * math.sqrt(self.bundle)


class DeclaredValue(NamedTuple):
    """One of the designer's own numbers; `counts` is "one leg", "all legs" or None, for link areas only.

    `member_wide` when it stands under the member's `declared`, not under a case's.
    """

    symbol: str
    number: Number
    counts: str | None = None
    place: Place = NOWHERE
    member_wide: bool = False


class WebFlange(NamedTuple):
    """Shear between web and flange: change of force in N over a length in mm, bars across in mm2/mm.

    `at_top` tells which flange; `cot_theta_f` is the designer's strut angle in it.
    """

    dF: Number
    dx: Number
    A_sf_s: Number | None
    cot_theta_f: Number | None
    at_top: bool


class Case(NamedTuple):
    """One load case with the numbers declared for it.

    - V_Ed and N_Ed in N (compression positive), T_Ed, M_Ed and M_Ed_max in N*mm (sagging positive).
    - `declared` has the member-wide values too; the case's own win.
    - `verdict` is "adequate" or "not adequate" with its place, or None.
    """

    name: str
    V_Ed: Number
    T_Ed: Number
    M_Ed: Number
    N_Ed: Number
    M_Ed_max: Number | None = None
    declared: Mapping[str, DeclaredValue] = {}
    verdict: tuple[str, Place] | None = None
    place: Place = NOWHERE
    web_flange: WebFlange | None = None
    details: Mapping[str, float] = {}


class Design(NamedTuple):
    """A whole declared file; `places` has the place of each top-level key that stands in it.

    `details` (also of a case) are inputs of the sheet that only detailing rules ask for.
    """

    file: str
    sha256: str
    member: str
    submission: Mapping[str, str]
    standard: str
    annex: str
    torsion: str
    section: Section
    materials: Materials
    cover: Number
    aggregate: Number | None
    links: tuple[LinkSet, ...]
    bars: tuple[BarGroup, ...]
    cases: tuple[Case, ...]
    places: Mapping[str, Place] = {}
    details: Mapping[str, float] = {}
