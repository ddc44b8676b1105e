"""What the reader hands on: the contract's example, its defaults, short forms, and what a case inherits."""

from __future__ import annotations

import math

import pytest

from checker.declared.build import load_text
from checker.declared.model import Design, Place
from tests.declared.base import BARS, BASE, LINK, SECTION, SIDE_BARS, changed

TRAPEZOID = "section: {shape: polygon, points: [[0, 700], [600, 700], [500, 0], [100, 0]]}"


def load(*changes: tuple[str, str]) -> Design:
    return load_text(changed(*changes), "a.yaml")


def test_the_whole_example() -> None:
    design = load()
    assert (design.file, design.member, design.standard) == ("a.yaml", "EB-07", "EN 1992-1-1:2004")
    assert (design.annex, design.torsion) == ("recommended", "equilibrium")
    assert design.submission == {"project": "Invented hall", "revision": "B"}
    assert design.section.shape == "rectangle"
    assert {key: size.value for key, size in design.section.sizes.items()} == {"b": 400, "h": 700}
    assert [
        n and n.value for n in (design.materials.f_ck, design.materials.f_yk, design.materials.gamma_C)
    ] == [30, 500, None]
    assert design.cover.value == 35
    assert design.aggregate is not None
    (link,) = design.links
    assert (link.mark, link.legs, link.where, link.ends, link.angle) == (
        "L1",
        2,
        "perimeter",
        "hooks_135",
        math.pi / 2,
    )
    assert (link.diameter.value, link.spacing.value, link.lap, link.tail) == (10, 150, None, None)
    assert [(bar.mark, bar.face, bar.count, bar.diameter.value, bar.layer) for bar in design.bars] == [
        ("B1", "bottom", 4, 25, 1),
        ("T1", "top", 3, 20, 1),
        ("S1", "left", 2, 12, 1),
        ("S2", "right", 2, 12, 1),
    ]
    (case,) = design.cases
    assert [n.value for n in (case.V_Ed, case.T_Ed, case.M_Ed, case.N_Ed)] == [310e3, 52e6, 240e6, 0]
    assert case.M_Ed_max is None
    assert case.verdict == ("adequate", Place(28, 16))
    assert case.declared["A_sw_s_torsion"].counts == "one leg"
    assert case.declared["A_sw_s_torsion"].place == Place(27, 31)
    assert case.declared["d"].place == Place(18, 15)
    assert case.declared["d"].number.half_step == pytest.approx(0.05)
    assert case.declared["theta"].number.value == math.radians(21.8)


def test_places_of_the_keys_and_records() -> None:
    design = load()
    assert design.places["section"] == Place(6, 1)
    assert design.places["cases"] == Place(19, 1)
    assert set(design.places) >= {"format", "member", "cover", "links", "bars", "materials"}
    assert design.section.place == Place(6, 10)
    assert [bar.place for bar in design.bars] == [Place(line, 5) for line in (14, 15, 16, 17)]
    assert design.cases[0].place == Place(20, 5)


def test_records_are_frozen() -> None:
    design = load()
    with pytest.raises(AttributeError):
        design.cover = design.cover  # type: ignore[misc]


def test_defaults() -> None:
    design = load(
        ("standard: EN 1992-1-1:2004\nannex: recommended\n", ""),
        ("torsion: equilibrium\n", ""),
        ("submission: {project: Invented hall, revision: B}\n", ""),
        (", f_ywk: 500", ""),
        ("aggregate: 20\n", ""),
        ("    N_Ed: 0\n", ""),
        ("mark: L1, ", ""),
        ("mark: B1, ", ""),
        (", place: perimeter, ends: hooks_135", ""),
    )
    assert (design.standard, design.annex, design.torsion) == (
        "EN 1992-1-1:2004",
        "recommended",
        "equilibrium",
    )
    assert design.submission == {}
    assert design.materials.f_ywk is design.materials.f_yk
    assert design.aggregate is None
    assert design.links[0].mark == "L1"
    assert (design.links[0].where, design.links[0].ends) == ("perimeter", None)
    assert design.bars[0].mark == "B1"
    assert (design.cases[0].N_Ed.value, design.cases[0].N_Ed.half_step) == (0, 0)


def test_marks_given_never_meet_a_written_one() -> None:
    design = load(("mark: B1, ", ""), ("mark: T1", "mark: B1"), ("mark: S1, ", ""))
    assert [bar.mark for bar in design.bars] == ["B2", "B1", "B3", "S2"]


def test_short_forms_say_the_same() -> None:
    long, short = (
        load(),
        load(("count: 4, diameter: 25", "bars: 4H25"), ("diameter: 10, spacing: 150", "links: H10-150")),
    )
    assert (short.bars[0].count, short.bars[0].diameter.value) == (4, 25)
    assert (short.bars[0].diameter.text, short.bars[0].diameter.unit, short.bars[0].diameter.step) == (
        "25",
        "mm",
        1,
    )
    assert short.links[0].spacing.value == long.links[0].spacing.value
    assert short.links[0].diameter.place == Place(12, 23)


def test_units_are_converted() -> None:
    design = load(
        ("V_Ed: 310", "V_Ed: 0.31 MN"), ("value: 0.15", 'value: "150 mm2/m"'), ("h: 700", "h: 70 cm")
    )
    assert design.cases[0].V_Ed.value == 310e3
    assert (design.cases[0].V_Ed.text, design.cases[0].V_Ed.unit, design.cases[0].V_Ed.step) == (
        "0.31",
        "MN",
        1e4,
    )
    assert design.cases[0].declared["A_sw_s_torsion"].number.value == pytest.approx(0.15)
    assert design.section.sizes["h"].value == 700


def test_box_walls() -> None:
    one = load((SECTION, "section: {shape: box, b: 800, h: 900, wall: 150}"))
    each = load((SECTION, "section: {shape: box, b: 800, h: 900, walls: {side: 120, top: 150, bottom: 180}}"))
    assert {k: n.value for k, n in one.section.sizes.items() if "wall" in k} == dict.fromkeys(
        ("wall_side", "wall_top", "wall_bottom"), 150
    )
    assert {k: n.value for k, n in each.section.sizes.items() if "wall" in k} == {
        "wall_side": 120,
        "wall_top": 150,
        "wall_bottom": 180,
    }


def test_polygon_is_turned_anticlockwise() -> None:
    design = load((SECTION, TRAPEZOID), (SIDE_BARS, ""))
    assert set(design.section.points) == {(0, 700), (600, 700), (500, 0), (100, 0)}
    points = design.section.points
    assert (
        sum(x0 * y1 - x1 * y0 for (x0, y0), (x1, y1) in zip(points, (*points[1:], points[0]), strict=True))
        > 0
    )


def test_corners_count_those_that_turn_outward() -> None:
    ell = (
        "section: {shape: polygon, points: [[0, 0], [900, 0], [900, 400], [400, 400], [400, 900], [0, 900]]}"
    )
    bars = "  - {face: corners, diameter: 25}\n"
    assert load((SECTION, ell), (BARS, bars)).bars[0].count == 5
    assert load((BARS, bars)).bars[0].count == 4


def test_exact_places_give_the_count() -> None:
    bar = load(("count: 4, diameter: 25", "diameter: 25, at: [[60, 60], [34 cm, 60]]")).bars[0]
    assert (bar.count, bar.at) == (2, ((60.0, 60.0), (340.0, 60.0)))


def test_circle() -> None:
    design = load(
        (SECTION, "section: {shape: circle, diameter: 600}"), (BARS, "  - {face: round, bars: 8H25}\n")
    )
    assert design.section.sizes["diameter"].value == 600
    assert design.bars[0].count == 8


@pytest.mark.parametrize("count", [12, 13])
def test_bars_side_by_side_fit_to_the_last_millimetre(count: int) -> None:
    """400 - 2 (35 + 10) = 310 mm takes 12 bars of 25 mm (300) and not 13 (325): counted by hand."""
    text = changed(("count: 4", f"count: {count}"))
    if count == 12:
        assert load_text(text, "a.yaml").bars[0].count == 12
    else:
        with pytest.raises(Exception, match="325 mm of bars side by side in 310 mm"):
            load_text(text, "a.yaml")


def test_no_links_is_a_design_to_be_judged() -> None:
    assert load((f"links:\n  - {LINK}\n", "links: []\n")).links == ()


def test_no_links_where_a_link_is_unsound_is_not_taken_for_none() -> None:
    with pytest.raises(Exception, match="hooks_135") as caught:
        load(("hooks_135", "x"), ("count: 4", "count: 13"))
    assert "side by side" not in str(caught.value)


def test_a_case_wins_over_the_member() -> None:
    design = load(
        ("      theta_shear: 21.8\n", "      d: 640\n      cot_theta: 1.5\n"),
        ("verdict: adequate", "z: 580"),
        ("f_cd: 20.0,", "f_cd: 20.0, verdict: not adequate,"),
    )
    declared = design.cases[0].declared
    assert declared["d"].number.text == "640"
    assert declared["f_cd"].number.text == "20.0"
    assert "theta" not in declared
    assert declared["cot_theta"].number.value == 1.5
    line = "declared: {d: 642.5, t_ef: 127.3, A_k: 156200, u_k: 1691, f_cd: 20.0, verdict: not adequate"
    assert design.cases[0].verdict == ("not adequate", Place(18, line.index("not adequate") + 1))


@pytest.mark.parametrize(
    ("theta", "cot", "sound"),
    [
        ("21.8", "2.5", True),
        ("22", "2.5", True),
        ("21.8", "2.50", True),
        ("45", "1", True),
        ("45.0", "1.05", False),
        ("26.6", "2.50", False),
    ],
)
def test_angle_and_cotangent_agree_within_their_decimals(theta: str, cot: str, sound: bool) -> None:
    """By hand: cot 21.8 deg = 2.500, cot 21.5 to 22.5 deg = 2.54 to 2.41, cot 26.6 deg = 1.997."""
    text = changed(("theta: 21.8}", f"theta: {theta}, cot_theta: {cot}}}"))
    if sound:
        assert load_text(text, "a.yaml").cases[0].declared["cot_theta"].number.text == cot
    else:
        with pytest.raises(Exception, match="contradict each other"):
            load_text(text, "a.yaml")


def test_reading_is_repeatable() -> None:
    assert load_text(BASE, "a.yaml") == load_text(BASE.encode(), "a.yaml")
