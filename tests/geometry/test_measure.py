"""The whole measuring of a design: its keys, hand-worked numbers, and laws that hold for any size."""

from __future__ import annotations

import subprocess
import sys
from math import inf, nan, pi

import pytest
from hypothesis import given
from hypothesis import strategies as st

from checker.geometry.bars import cage_of
from checker.geometry.links import eta_leg
from checker.geometry.measure import measure
from checker.geometry.outline import circle

KEYS = """h b_least A u kappa A_c y_c t_wall thickness
reentrant_corners c_axis b_w_sagging b_w_hogging b_t_sagging b_t_hogging cover
a_s_bottom a_s_top A_s_bottom A_s_top A_half_bottom A_half_top A_s_all phi_link s_perimeter s_links
n_legs A_sw_s_all A_leg_s S_sin S_cos alpha eta_leg leg_gap gap_bars phi_long_max n_flanges torsion_parts
clear_least clear_by_size phi_clear phi_corner_least phi_bundle n_bundle phi_single_max phi_least_bottom
phi_least_top n_aslant_inner A_enclosing_s A_legs_s A_skin_sagging A_skin_hogging A_side_least mandrel_link
phi_mandrel_link mandrel_bar phi_mandrel_bar lap_link phi_lap_link lap_link_good"""
TEE = (
    (0.0, 0.0),
    (300.0, 0.0),
    (300.0, 400.0),
    (700.0, 400.0),
    (700.0, 600.0),
    (-400.0, 600.0),
    (-400.0, 400.0),
)
TEE = (*TEE, (0.0, 400.0))


def test_measured_beam_by_hand(sound_beam):
    measured = measure(sound_beam())
    area = {phi: pi * phi**2 / 4 for phi in (12, 20, 25)}
    expected = {
        "h": 700, "b_least": 400, "A": 280_000, "u": 2200, "kappa": 4, "A_c": 280_000, "y_c": 350,
        "t_wall": inf, "thickness": 400, "reentrant_corners": 0,
        "c_axis": 57.5, "b_w_sagging": 400, "b_w_hogging": 400, "b_t_sagging": 400, "b_t_hogging": 400,
        "cover": 35, "a_s_bottom": 57.5, "a_s_top": 55, "A_s_bottom": 4 * area[25], "A_s_top": 3 * area[20],
        # Side bars stand at thirds between the chords: 2 x (1/3 + 2/3) of them count to each.
        "A_half_bottom": 4 * area[25] + 2 * area[12], "A_half_top": 3 * area[20] + 2 * area[12],
        "A_s_all": 4 * area[25] + 3 * area[20] + 4 * area[12],
        "phi_link": 10, "s_perimeter": 150, "s_links": 150, "n_legs": 2, "A_sw_s_all": pi * 50 / 150,
        "A_leg_s": pi * 25 / 150, "S_sin": pi * 50 / 150, "S_cos": 0, "alpha": pi / 2, "eta_leg": 1,
        "leg_gap": 320, "gap_bars": (645 - 57.5) / 3, "phi_long_max": 25, "n_flanges": 0, "torsion_parts": 0,
        # Four bars of 25 in 400 - 2 x 57.5 mm; a side has its own bars, half a bottom and half a top corner bar.
        "clear_least": 70, "clear_by_size": 70, "phi_clear": 25, "phi_corner_least": 20, "phi_bundle": nan,
        "n_bundle": nan, "phi_single_max": 25, "phi_least_bottom": 25, "phi_least_top": 20,
        "n_aslant_inner": 0, "A_enclosing_s": pi * 50 / 150, "A_legs_s": pi * 50 / 150,
        "A_skin_sagging": 2 * area[12], "A_skin_hogging": 2 * area[12],
        "A_side_least": 2 * area[12] + area[25] / 2 + area[20] / 2,
        "mandrel_link": nan, "phi_mandrel_link": nan, "mandrel_bar": nan, "phi_mandrel_bar": nan,
        "lap_link": nan, "phi_lap_link": nan, "lap_link_good": nan,
    }  # fmt: skip
    assert set(measured.inputs) == set(KEYS.split())
    assert dict(measured.inputs) == pytest.approx(expected, nan_ok=True)
    assert measured.solid_rectangle
    assert measured.facts["corners_filled"].ok is True
    assert measured.section.bars == tuple((bar.y, bar.area) for bar in measured.bars)


def test_box_has_its_walls_for_a_web_and_its_thinnest_for_a_limit(build):
    walls = {"wall_side": 250, "wall_top": 180, "wall_bottom": 200}
    beam = build.design(
        build.section("box", b=1200, h=1000, **walls), build.group("bottom", 8, 25), build.group("top", 8, 20)
    )
    measured = measure(beam)
    assert measured.inputs["b_w_sagging"] == measured.inputs["b_w_hogging"] == 500
    assert measured.inputs["t_wall"] == 180
    assert measured.inputs["A"] - measured.inputs["A_c"] == 700 * 620
    assert measured.inputs["b_t_sagging"] == pytest.approx((200 * 1200 + 300 * 500) / 500)
    assert not measured.solid_rectangle


def test_tee_has_its_web_below_and_its_web_above(build):
    beam = build.design(
        build.section("polygon", points=TEE), build.group("bottom", 2, 25), build.group("top", 6, 16)
    )
    measured = measure(beam)
    assert measured.inputs["b_w_sagging"] == measured.inputs["b_w_hogging"] == 300
    assert measured.inputs["b_t_sagging"] == 300
    assert measured.inputs["b_t_hogging"] == pytest.approx((100 * 300 + 200 * 1100) / 300)
    assert measured.inputs["b_least"] == 600
    assert not measured.solid_rectangle


def test_circle_has_the_shorter_chord_for_a_web(build):
    measured = measure(build.design(build.section("circle", diameter=600), build.group("round", 8, 20)))
    inputs = measured.inputs
    tension, lever = inputs["a_s_bottom"], inputs["a_s_bottom"] + 0.9 * (600 - inputs["a_s_bottom"])
    chords = [2 * (y * (600 - y)) ** 0.5 for y in (tension, lever)]
    assert inputs["b_w_sagging"] == pytest.approx(min(chords))
    assert inputs["b_t_sagging"] == pytest.approx(
        (pi * 600**2 / 8) / 300
    )  # half the area over half the height
    assert pi / 4 < inputs["eta_leg"] < 1
    assert (measured.facts["corners_filled"].ok, measured.facts["corners_filled"].applies) == (None, False)


def test_each_sense_has_its_web_between_its_own_chords(build):
    # A trapezoid, 300 wide at the bottom and 1000 at the top: width 300 + 700 y/1000.
    points = ((0.0, 0.0), (300.0, 0.0), (650.0, 1000.0), (-350.0, 1000.0))
    beam = build.design(
        build.section("polygon", points=points), build.group("bottom", 2, 30), build.group("top", 5, 10)
    )
    inputs = measure(beam).inputs
    assert inputs["b_w_sagging"] == pytest.approx(300 + 0.7 * 60)
    # Hogging: bars at 50 from the top, d = 950, the other chord 0.9 d below them at 95.
    assert inputs["b_w_hogging"] == pytest.approx(300 + 0.7 * (950 - 0.9 * 950))


def test_round_legs_count_by_the_smaller_share_of_the_two_senses(build):
    # The steel of the two faces stands at 100 and 50: the smaller share of the two senses is the one kept.
    at = {"bottom": ((250.0, 100.0), (350.0, 100.0)), "top": ((280.0, 550.0), (320.0, 550.0))}
    groups = [build.group(face, 2, 20, at=places) for face, places in at.items()]
    beam = build.design(build.section("circle", diameter=600), *groups)
    cage = cage_of(beam)
    shares = [eta_leg(circle(600.0), cage, *chords) for chords in ((100, 550), (55, 550))]
    assert shares[0] > shares[1]
    assert measure(beam).inputs["eta_leg"] == pytest.approx(shares[1])


def test_a_rectangle_written_as_a_polygon_measures_the_same(build, sound_beam):
    points = ((10.0, 20.0), (410.0, 20.0), (410.0, 720.0), (10.0, 720.0))
    groups = [
        build.group(*row) for row in (("bottom", 4, 25), ("top", 3, 20), ("left", 2, 12), ("right", 2, 12))
    ]
    polygon = measure(build.design(build.section("polygon", points=points), *groups))
    assert dict(polygon.inputs) == pytest.approx(dict(measure(sound_beam()).inputs), nan_ok=True)
    assert polygon.solid_rectangle


def test_empty_corners_are_named_in_the_fact(build):
    fact = measure(build.design(build.section("rectangle", b=400, h=700), build.group("bottom", 3, 20))).facts
    assert fact["corners_filled"].ok is False
    assert fact["corners_filled"].says == "no bar in the link corners: top right, top left"
    assert fact["corners_filled"].place.line == 19


@given(st.sampled_from([0.5, 2.0, 4.0]), st.integers(2, 6), st.integers(2, 6), st.integers(0, 3))
def test_lengths_scale_and_areas_scale_by_the_square(build, factor, low, high, side):
    def inputs(f):
        groups = [build.group("bottom", low, 25 * f), build.group("top", high, 20 * f)]
        if side:
            groups += [build.group("left", side, 12 * f), build.group("right", side, 12 * f)]
        return measure(
            build.design(
                build.section("rectangle", b=500 * f, h=800 * f),
                *groups,
                links=(build.link(diameter=10 * f, spacing=150 * f, legs=4),),
                cover=build.number(35 * f),
                aggregate=build.number(20 * f),
            )
        ).inputs

    one, other = inputs(1.0), inputs(factor)
    power = dict.fromkeys(KEYS.split(), 1) | dict.fromkeys(
        (
            "kappa",
            "reentrant_corners",
            "n_legs",
            "alpha",
            "eta_leg",
            "S_cos",
            "n_flanges",
            "torsion_parts",
            "n_aslant_inner",
            "n_bundle",
        ),
        0,
    )
    power |= {
        key: 2 for key in power if key == "A" or key.startswith(("A_c", "A_s_", "A_half", "A_skin", "A_side"))
    }
    assert dict(other) == pytest.approx(
        {key: one[key] * factor ** power[key] for key in one}, rel=1e-9, nan_ok=True
    )


def test_measuring_loads_no_array_library():
    code = "import sys, checker.geometry.measure, checker.geometry.bending; print('numpy' in sys.modules)"
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True)
    assert done.stdout.strip() == "False"
