"""The shapes a section can have, as the declared-design file describes them: keys, units, limits and choices."""

from __future__ import annotations

from checker.declared.fields import Field, Form, Record

MAX_SIZE = 100_000.0  # mm; a section of 100 m is a slip of the keyboard


def _size(key: str, doc: str, least: float = 10, most: float = MAX_SIZE) -> Field:
    return Field(key, "number", doc, required=True, unit="mm", least=least, most=most)


_SHAPE = Field(
    "shape",
    "choice",
    "Shape of the cross-section.",
    required=True,
    choices=("rectangle", "box", "circle", "polygon", "tee", "ell", "i"),
)
_B = _size("b", "Width.")
_H = _size("h", "Height.")
_B_W = _size("b_w", "Width of the web.")
_B_F = _size("b_f", "Width of the flange, the web's included.")
_H_F = _size("h_f", "Thickness of the flange.")
_FLANGE = Field("flange", "choice", "Where the flange lies; top if left out.", choices=("top", "bottom"))
_TORSION_BY = Field(
    "torsion_by",
    "choice",
    "web: the web alone takes the torsion (if left out); parts: web and flanges by their stiffness.",
    choices=("web", "parts"),
)

SHAPES: dict[str, Record] = {
    "rectangle": Record("rectangle", "A solid rectangle.", (_SHAPE, _B, _H)),
    "box": Record(
        "box",
        "A rectangle with one rectangular void.",
        (
            _SHAPE,
            _B,
            _H,
            Field("wall", "number", "Thickness of all four walls.", unit="mm", least=10, most=MAX_SIZE),
            Field("walls", "record", "Thickness of the walls, each on its own.", record="walls"),
        ),
        (Form(("wall",)), Form(("walls",))),
    ),
    "tee": Record(
        "tee",
        "A web with a flange that stands out equally on both sides.",
        (_SHAPE, _B_W, _H, _B_F, _H_F, _FLANGE, _TORSION_BY),
    ),
    "ell": Record(
        "ell",
        "A web with a flange that stands out on one side.",
        (
            _SHAPE,
            _B_W,
            _H,
            _B_F,
            _H_F,
            _FLANGE,
            Field(
                "side",
                "choice",
                "Side on which the flange stands out; right if left out.",
                choices=("left", "right"),
            ),
            _TORSION_BY,
        ),
    ),
    "i": Record(
        "i",
        "A web with a flange at the top and one at the bottom.",
        (
            _SHAPE,
            _B_W,
            _H,
            _B_F._replace(doc="Width of the top flange, the web's included."),
            _H_F._replace(doc="Thickness of the top flange."),
            _size("b_f_bottom", "Width of the bottom flange, the web's included."),
            _size("h_f_bottom", "Thickness of the bottom flange."),
            _TORSION_BY,
        ),
    ),
    "circle": Record("circle", "A solid circle.", (_SHAPE, _size("diameter", "Diameter."))),
    "polygon": Record(
        "polygon",
        "Any outline of straight edges that doesn't cross itself, without voids.",
        (
            _SHAPE,
            Field(
                "points",
                "points",
                "Corners in order, [x, y]; x to the right, y up.",
                required=True,
                unit="mm",
                least=3,
                most=200,
            ),
        ),
    ),
}
"""The record of each shape a section can have."""

WALLS = Record(
    "walls",
    "Wall thicknesses of a box.",
    (
        _size("side", "Thickness of each side wall."),
        _size("top", "Thickness of the top wall."),
        _size("bottom", "Thickness of the bottom wall."),
    ),
)

SPANS = Record(
    "spans",
    "What the effective width of flanges follows from.",
    (
        Field("l_0", "number", "Distance between zero moments.", True, "mm", least=1, most=1_000_000),
        Field("b_1", "number", "Clear half-distance to the next web.", True, "mm", least=0, most=1_000_000),
        Field(
            "b_2",
            "number",
            "The same on the other side; b_1 if left out. An ell has one side.",
            unit="mm",
            least=0,
            most=1_000_000,
        ),
    ),
)
