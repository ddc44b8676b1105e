"""The section and materials of a file: values that are sound one by one become records."""

from __future__ import annotations

from checker.declared.fit import Point, crossing, extents, signed_area
from checker.declared.flanges import FLANGED, flanged_sizes, outline_points
from checker.declared.format import MAX_SIZE
from checker.declared.found import Faults, Values
from checker.declared.model import Materials, Number, Place, Section

_MIN_SIZE = 10.0  # mm, as for the sizes of the other shapes


def build_section(values: Values | None, spans: Values | None, faults: Faults) -> Section | None:
    """The section with the spans its flanges act over, or None after noting why it is none."""
    if values is None or not values.sound:
        return None
    shape = values.need("shape", str)
    if shape == "polygon":
        points = _polygon(values.need("points", list), values.spot("points"), faults)
        return None if points is None else Section(shape, {}, points, values.place)
    if shape == "circle":
        return Section(shape, {"diameter": values.need("diameter", Number)}, (), values.place)
    if shape in FLANGED:
        return _flanged(shape, values, spans, faults)
    sizes = {key: values.need(key, Number) for key in ("b", "h")}
    if shape == "box":
        sizes |= _walls(values)
        if not _leaves_void(sizes, values, faults):
            return None
    return Section(shape, sizes, (), values.place)


def _flanged(shape: str, values: Values, spans: Values | None, faults: Faults) -> Section | None:
    """A tee, ell or i whose flanges stand out from the web and leave some of it between them."""
    keys = ("b_f", "h_f", *(("b_f_bottom", "h_f_bottom") if shape == "i" else ()))
    sizes = {"b_web": values.need("b_w", Number), "h": values.need("h", Number)}
    sizes |= {key: values.need(key, Number) for key in keys}
    section = Section(
        shape,
        sizes,
        (),
        values.place,
        flange=values.get("flange", str) or "top",
        side=(values.get("side", str) or "right") if shape == "ell" else "both",
        torsion_by=values.get("torsion_by", str) or "web",
        spans=_spans(spans),
    )
    before = len(faults.found)
    for key in keys[::2]:
        if sizes[key].value <= sizes["b_web"].value:
            faults.add(values.spot(key), f"{key} counts the web in; expected more than b_w")
    if sum(sizes[key].value for key in keys[1::2]) >= sizes["h"].value:
        faults.add(values.spot(keys[1]), "the flange leaves no web; expected a thickness below the height h")
    if len(faults.found) > before:
        return None
    return section._replace(points=outline_points(flanged_sizes(section)))


def _spans(spans: Values | None) -> dict[str, Number]:
    if spans is None or not spans.sound:
        return {}
    found = {key: spans.get(key, Number) for key in ("l_0", "b_1", "b_2")}
    return {key: number for key, number in found.items() if number is not None}


def build_materials(values: Values | None) -> Materials | None:
    """The materials, f_ywk taken as f_yk where it isn't written; None where something is wrong with them."""
    if values is None or not values.sound:
        return None
    f_yk = values.need("f_yk", Number)
    return Materials(
        f_ck=values.need("f_ck", Number),
        f_yk=f_yk,
        f_ywk=values.get("f_ywk", Number) or f_yk,
        gamma_C=values.get("gamma_C", Number),
        gamma_S=values.get("gamma_S", Number),
        place=values.place,
    )


def _walls(values: Values) -> dict[str, Number]:
    wall = values.get("wall", Number)
    if wall is not None:
        return dict.fromkeys(("wall_side", "wall_top", "wall_bottom"), wall)
    walls = values.need("walls", Values)
    return {f"wall_{key}": walls.need(key, Number) for key in ("side", "top", "bottom")}


def _leaves_void(sizes: dict[str, Number], values: Values, faults: Faults) -> bool:
    across = sizes["b"].value - 2 * sizes["wall_side"].value
    up = sizes["h"].value - sizes["wall_top"].value - sizes["wall_bottom"].value
    if across > 0 and up > 0:
        return True
    spot = values.spot("wall", "walls")
    faults.add(
        spot, "the walls leave no void; expected thinner walls, or shape: rectangle for a solid section"
    )
    return False


def _polygon(points: list[tuple[Number, Number]], spot: Place, faults: Faults) -> tuple[Point, ...] | None:
    """The corners anticlockwise, or None after noting why they bound no area."""
    first: dict[Point, int] = {}
    repeated = False
    for number, (x, y) in enumerate(points, 1):
        point = (x.value, y.value)
        if point in first:
            repeated = True
            closing = number == len(points) and first[point] == 1
            hint = "; the outline closes by itself" if closing else ""
            faults.add(x.place, f"point {number} repeats point {first[point]}{hint}")
        first.setdefault(point, number)
    if repeated:
        return None
    corners = tuple(first)
    width, height = extents(corners)
    area = signed_area(corners)
    crossed = crossing(corners) if area else None
    if abs(area) <= 1e-9 * max(width, height) ** 2:
        faults.add(spot, "the polygon encloses no area")
    elif crossed is not None:
        i, j = (f"{k + 1}-{(k + 1) % len(corners) + 1}" for k in crossed)
        faults.add(points[crossed[1]][0].place, f"the polygon crosses itself: edge {j} meets edge {i}")
    elif min(width, height) < _MIN_SIZE or max(width, height) > MAX_SIZE:
        faults.add(
            spot, f"the polygon is {width:g} mm by {height:g} mm; expected {_MIN_SIZE:g} to {MAX_SIZE:g} mm"
        )
    else:
        return corners if area > 0 else tuple(reversed(corners))
    return None
