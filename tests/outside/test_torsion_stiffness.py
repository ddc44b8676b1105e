"""Uncracked torsional stiffness against finite elements: a general library (scikit-fem) solves Saint-Venant's problem.

- The stress function solves -div grad phi = 2 inside, phi = 0 on the boundary; J is twice the volume under it
  (Saint-Venant, Prandtl; any textbook of elasticity).
- Rectangles: the sheet's formula lies within 2 %; measured within 0.5 % from square to 1 : 20.
- Tees, ells and I sections as web and outstands: the parts add up to less than the whole, because what crosses the
  junction is left out. Measured on the sections below: the sum of the parts is 0.94 of J by finite elements for a thin
  flange and 0.64 for one half as thick as the web is deep; the web's share differs from its share of the volume under
  the stress function (which is not quite the moment it carries) by -0.045 to +0.052. So the sharing is a convention
  of the standard, good to about a twentieth of T; it holds only where each part is reinforced for its own share.
"""

from __future__ import annotations

from functools import lru_cache
from itertools import pairwise

import numpy as np
import pytest
from skfem import Basis, ElementQuad2, MeshQuad, condense, solve
from skfem.models.poisson import laplace, unit_load

from checker.geometry.measure import measure
from checker.review.claims import member_row
from checker.review.engine import recompute
from tests.sheet.designs import design

RECTANGLES = [(300, 300), (300, 400), (300, 600), (200, 1000), (100, 2000), (1000, 250)]
FLANGED = {
    # section, band of (sum of the parts / J), band of (web's share - share of the volume), both measured
    "tee": ("shape: tee, b_w: 400, h: 800, b_f: 1400, h_f: 220", (0.86, 0.88), (0.015, 0.030)),
    "thin tee": ("shape: tee, b_w: 300, h: 900, b_f: 1500, h_f: 150", (0.93, 0.95), (0.005, 0.020)),
    "thick tee": ("shape: tee, b_w: 400, h: 800, b_f: 1600, h_f: 400", (0.63, 0.65), (-0.050, -0.040)),
    "ell": ("shape: ell, b_w: 350, h: 900, b_f: 1000, h_f: 200", (0.93, 0.95), (0.005, 0.020)),
    "i": (
        "shape: i, b_w: 300, h: 1000, b_f: 900, h_f: 220, b_f_bottom: 700, h_f_bottom: 240",
        (0.70, 0.72),
        (0.045, 0.060),
    ),
}
BARS = "[{face: bottom, bars: 2H25}, {face: top, bars: 2H20}]"


def by_elements(parts: list[tuple[float, float, float, float]], size: float) -> tuple[float, float]:
    """J in mm4 of a union of rectangles (x0, y0, x1, y1), and the volume share of the first of them."""
    lines = [
        np.unique(np.concatenate([_steps(a, b, size) for a, b in pairwise(edges)]))
        for edges in (sorted({v for part in parts for v in part[axis::2]}) for axis in (0, 1))
    ]
    mesh = MeshQuad.init_tensor(*lines)
    x, y = mesh.p[:, mesh.t].mean(axis=1)
    inside = [(x0 < x) & (x < x1) & (y0 < y) & (y < y1) for x0, y0, x1, y1 in parts]
    mesh = mesh.restrict(np.flatnonzero(np.any(inside, axis=0)))
    basis = Basis(mesh, ElementQuad2())
    phi = solve(*condense(laplace.assemble(basis), 2 * unit_load.assemble(basis), D=basis.get_dofs()))
    x, y = mesh.p[:, mesh.t].mean(axis=1)
    x0, y0, x1, y1 = parts[0]
    web = Basis(mesh, ElementQuad2(), elements=np.flatnonzero((x0 < x) & (x < x1) & (y0 < y) & (y < y1)))
    whole = float(unit_load.assemble(basis) @ phi)
    return 2 * whole, float(unit_load.assemble(web) @ phi) / whole


def _steps(a: float, b: float, size: float) -> np.ndarray:
    return np.linspace(a, b, max(round((b - a) / size), 4) + 1)


def stiffness(b: float, h: float) -> float:
    """The sheet's J of a rectangle."""
    return float(recompute(["J_web"], {"b_web": b, "h": h}, layers=("flanges-share",))["J_web"])


@pytest.mark.parametrize("b", [200.0, 700.0])
def test_the_elements_give_the_exact_square(b: float) -> None:
    """J = 0.140577 b^4 of a square, the sum of Saint-Venant's series (from memory)."""
    assert by_elements([(0, 0, b, b)], b / 24)[0] == pytest.approx(0.140577 * b**4, rel=1e-4)


@pytest.mark.parametrize(("b", "h"), RECTANGLES)
def test_rectangles(b: float, h: float) -> None:
    exact = by_elements([(0, 0, b, h)], min(b, h) / 16)[0]
    assert stiffness(b, h) == pytest.approx(exact, rel=0.02)
    assert stiffness(b, h) == pytest.approx(exact, rel=0.005)


@lru_cache
def compared(name: str) -> tuple[float, float]:
    """Sum of the parts over J by elements, and the web's share less its share of the volume."""
    made = design(section=f"{{{FLANGED[name][0]}, torsion_by: parts}}", bars=BARS)
    row = member_row(made, measure(made))
    values = recompute(["J_all", "share_web"], row, layers=("flanged", "flanges-share"))
    size = {key: number.value for key, number in made.section.sizes.items()}
    b_w, h, right = size["b_web"], size["h"], made.section.side == "right"
    parts = [(0.0, 0.0, b_w, h)]
    for width, low, high in (
        (size["b_f"], h - size["h_f"], h),
        (size.get("b_f_bottom", b_w), 0.0, size.get("h_f_bottom", h)),
    ):
        out = width - b_w
        if out > 0:
            parts.append((0.0 if right else -out / 2, low, b_w + (out if right else out / 2), high))
    exact, share = by_elements(parts, 25)
    return float(values["J_all"]) / exact, float(values["share_web"]) - share


@pytest.mark.parametrize("name", FLANGED)
def test_flanged_sections_differ_by_what_is_stated(name: str) -> None:
    ratio, gap = compared(name)
    _, ratios, gaps = FLANGED[name]
    assert ratios[0] < ratio < ratios[1]
    assert gaps[0] < gap < gaps[1]
