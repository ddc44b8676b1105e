"""Every kind of fault: told at its exact place, alone, in words that say what was expected."""

from __future__ import annotations

import pytest

from checker.declared.build import load_text
from tests.declared.base import BARS, BASE, LINK, SECTION, SIDE_BARS, changed, places, refused

BOX = "section: {shape: box, b: 400, h: 700, wall: 120}"
CIRCLE = "section: {shape: circle, diameter: 600}"
ROUND = "  - {mark: R, face: round, count: 8, diameter: 25}\n"

FAULTS = {
    "unknown key": (
        ("aggregate: 20", "«agregate: 20"),
        'unknown key "agregate" in the file; did you mean "aggregate"?',
    ),
    "unknown key in links": (("spacing: 150", "spacing: 150, «tial: 90"), 'did you mean "tail"?'),
    "unknown key in a case": (
        ("N_Ed: 0", "«N_ED: 0"),
        'unknown key "N_ED" in this case; did you mean "N_Ed"?',
    ),
    "unknown symbol": (("u_k: 1691", "«uk: 1691"), 'unknown key "uk" in declared; did you mean "u_k"?'),
    "nothing near": (("cover: 35", "cover: 35\n«qqqq: 1"), 'unknown key "qqqq" in the file'),
    "format 2": (("format: 1", "format: «2"), "format is 2; expected 1"),
    "missing part": (("format: 1", "«format: 1"), ("cover: 35\n", ""), 'missing "cover" in the file'),
    "missing size": ((SECTION, "section: «{shape: rectangle, b: 400}"), 'missing "h" in section (rectangle)'),
    "missing legs": (
        (", legs: 2", ""),
        ("- {mark: L1", "- «{mark: L1"),
        'missing "legs" in this set of links',
    ),
    "missing count": ((" count: 4,", ""), ("- {mark: B1", "- «{mark: B1"), 'missing "count"'),
    "missing action": (("    V_Ed: 310\n", ""), ("- name", "- «name"), 'missing "V_Ed" in this case'),
    "missing shape": (
        (SECTION, "section: «{b: 400, h: 700}"),
        'missing "shape" in section; expected one of: rect',
    ),
    "empty value": (("cover: 35", "cover:«"), "cover: empty value; expected a length in mm"),
    "null": (("cover: 35", "cover: «~"), "cover: empty value; expected a length in mm"),
    "text for number": (("cover: 35", "cover: «thin"), '"thin" is not a number; expected a length in mm'),
    "list for number": (("cover: 35", "cover: «[35]"), "a list stands here; expected a length in mm"),
    "map for number": (("cover: 35", "cover: «{a: 35}"), "a map stands here; expected a length in mm"),
    "decimal comma": (
        ("cover: 35", "cover: «1,50"),
        '"1,50" has a comma; write decimals with a point (1.50)',
    ),
    "comma in a map": (
        ("b: 400", "b: 400,«50"),
        '"50" stands alone after a comma; write decimals with a point',
    ),
    "yes": (("cover: 35", "cover: «yes"), '"yes" is a yes or no; expected a length in mm'),
    "infinite": (("cover: 35", "cover: «.inf"), '".inf" is not finite'),
    "not a number": (("cover: 35", "cover: «.NaN"), '".NaN" is not finite'),
    "overflow": (("V_Ed: 310", "V_Ed: «1e400"), "beyond any real size"),
    "underflow": (("V_Ed: 310", "V_Ed: «1e-400"), "too small to be meant"),
    "base 60": (("cover: 35", "cover: «12:30"), '"12:30" is not a plain number'),
    "underscore": (("V_Ed: 310", "V_Ed: «1_000"), '"1_000" has an underscore'),
    "hexadecimal": (("cover: 35", "cover: «0x23"), "unknown unit"),
    "very long": (("cover: 35", "cover: «" + "3" * 80), "too long for a number"),
    "dimension": (("cover: 35", "cover: «310 kN"), '"310 kN" is a force; expected a length in mm'),
    "unknown unit": (("cover: 35", "cover: «35 inch"), 'unknown unit "inch"; expected a length in mm, cm, m'),
    "wrong case of a unit": (
        ("V_Ed: 310", "V_Ed: «310 KN"),
        'unknown unit "KN"; expected a force in N, kN, MN',
    ),
    "zero size": (("b: 400", "b: «0"), "b is 0 mm; expected 10 to 100000 mm"),
    "negative size": (("b: 400", "b: «-400"), "b is -400 mm; expected 10 to 100000 mm"),
    "absurd size": (("h: 700", "h: «101 m"), "h is 101 m; expected 10 to 100000 mm"),
    "zero cover": (("cover: 35", "cover: «0"), "cover is 0 mm"),
    "angle of a strut": (
        ("theta: 21.8}", "theta: «90}"),
        "theta is 90 deg; expected more than 0 and less than 90 deg",
    ),
    "cotangent": (("theta: 21.8}", "cot_theta: «0}"), "cot_theta is 0; expected more than 0"),
    "contradiction": (("theta: 21.8}", "theta: 21.8, cot_theta: «2.0}"), "contradict each other"),
    "negative value": (("d: 642.5", "d: «-642.5"), "d is -642.5 mm; expected at least 0 mm"),
    "count with decimals": (
        ("count: 4", "count: «4.0"),
        '"4.0" is not a whole number; expected a whole number from 1',
    ),
    "count of none": (("count: 4", "count: «0"), "count is 0; expected a whole number from 1 to 1000"),
    "count in quotes": (("count: 4", 'count: «"4"'), "is not a whole number"),
    "unknown choice": (
        ("hooks_135", "«hook"),
        'ends: "hook" is not known; expected one of: hooks_135, hooks_90',
    ),
    "unknown verdict": (("verdict: adequate", "verdict: «fine"), "expected one of: adequate, not adequate"),
    "empty choice": (("torsion: equilibrium", "torsion: «~"), "torsion: empty value; expected one of"),
    "other standard": (("EN 1992-1-1:2004", "«EN 1993-1-1:2005"), "samestrut judges EN 1992-1-1:2004 only"),
    "later standard": (
        ("EN 1992-1-1:2004", "«EN 1992-1-1:2023"),
        "recognised but not judged; samestrut judges",
    ),
    "tee without flange": (
        (SECTION, "section: «{shape: tee, b_w: 300, h: 700, b_f: 900}"),
        'missing "h_f" in section (tee) (Thickness of the flange, in mm)',
    ),
    "flange within the web": (
        (SECTION, "section: {shape: ell, b_w: 400, h: 700, b_f: «400, h_f: 200}"),
        "b_f counts the web in; expected more than b_w",
    ),
    "flanges without web": (
        (
            SECTION,
            "section: {shape: i, b_w: 400, h: 700, b_f: 900, h_f: «400, b_f_bottom: 900, h_f_bottom: 300}",
        ),
        "the flange leaves no web",
    ),
    "side of a tee": (
        (SECTION, "section: {shape: tee, b_w: 400, h: 700, b_f: 900, h_f: 200, «side: left}"),
        'unknown key "side" in section (tee)',
    ),
    "flange link in a rectangle": (
        ("{mark: L1", "«{mark: L1"),
        ("place: perimeter", "place: flange"),
        "is for sections with flanges",
    ),
    "flange link with one leg": (
        ("legs: 2, place: perimeter", "legs: «1, place: flange"),
        "a flange link encloses the flange with 2 legs or more, not 1",
    ),
    "web-flange shear of a rectangle": (
        ("    N_Ed: 0\n", "    N_Ed: 0\n    web_flange: «{dF: 200, dx: 900}\n"),
        "web_flange is for sections with flanges",
    ),
    "no such flange": (
        (SECTION, "section: {shape: tee, b_w: 400, h: 700, b_f: 900, h_f: 200}"),
        ("    N_Ed: 0\n", "    N_Ed: 0\n    web_flange: {dF: 200, dx: 900, flange: «bottom}\n"),
        "this section has no bottom flange",
    ),
    "no length of web-flange shear": (
        ("    N_Ed: 0\n", "    N_Ed: 0\n    web_flange: «{dF: 200}\n"),
        'missing "dx" in web_flange',
    ),
    "counts elsewhere": (("d: 642.5", "d: «{value: 642.5, counts: one leg}"), "a map stands here"),
    "counts what": (("counts: one leg", "counts: «legs"), "expected one of: one leg, all legs"),
    "blank text": (("member: EB-07", 'member: «" "'), "member: blank text"),
    "control character": (
        ("member: EB-07", 'member: «"a\\u202eb"'),
        "member: a line break or control character",
    ),
    "long text": (("member: EB-07", "member: «" + "m" * 201), "member: 201 characters; expected at most 200"),
    "list for text": (("member: EB-07", "member: «[a]"), "member: a list stands here"),
    "list in free text": (
        ("revision: B", "revision: «[B]"),
        "revision: a list stands here; expected a line of text",
    ),
    "text for a map": (("{project: Invented hall, revision: B}", "«B"), "submission: "),
    "text for materials": (
        ("{f_ck: 30, f_yk: 500, f_ywk: 500}", "«C30"),
        "expected materials as keys and values",
    ),
    "text for a list": (
        (f"links:\n  - {LINK}\n", "links: «none\n"),
        'links: "none" stands here; expected a list',
    ),
    "duplicate link mark": (
        (f"  - {LINK}\n", f"  - {LINK}\n  - {LINK.replace('L1', '«L1')}\n"),
        'mark "L1" stands twice',
    ),
    "duplicate bar mark": (("mark: T1", "mark: «B1"), 'mark "B1" stands twice; first at line 14'),
    "duplicate case": (
        ("cases:\n", "cases:\n  - {name: ULS-1, V_Ed: 1, T_Ed: 1, M_Ed: 1}\n"),
        ("- name: U", "- name: «U"),
        'case "ULS-1" stands twice; first at line 20',
    ),
    "duplicate key": (
        ("aggregate: 20", "«cover: 20"),
        'the key "cover" stands twice; first at line 9, column 1',
    ),
    "callout and keys": (
        ("count: 4, diameter: 25", "bars: 4H25, count: 4, «diameter: 25"),
        "say the same thing twice",
    ),
    "bad bar callout": (("count: 4, diameter: 25", "bars: «H25"), "expected count and diameter such as 4H25"),
    "callout beyond limits": (
        ("count: 4, diameter: 25", "bars: «4H250"),
        "diameter is 250 mm; expected 3 to 100 mm",
    ),
    "bad link callout": (
        ("diameter: 10, spacing: 150", "links: «H10"),
        "expected diameter and spacing such as H10-150",
    ),
    "no links at all": (
        ("diameter: 10, spacing: 150, ", ""),
        ("- {mark: L1", "- «{mark: L1"),
        'missing "links" or',
    ),
    "one leg round": (
        ("legs: 2", "legs: «1"),
        "a perimeter link encloses the section with 2 legs or more, not 1",
    ),
    "one cell twice": (
        (SECTION, BOX.replace("wall: 120", "wall: 120, «walls: {side: 90, top: 90, bottom: 90}")),
        "twice",
    ),
    "no void": ((SECTION, BOX.replace("120", "«200")), "the walls leave no void"),
    "wall too thin for steel": (
        (SECTION, BOX.replace("120", "66")),
        ("count: 4", "count: «4"),
        "B1: the bars reach 70 mm in, through a wall of 66 mm into the void",
    ),
    "wall too thin for links": (
        (SECTION, BOX.replace("120", "40")),
        ("- {mark: L1", "- «{mark: L1"),
        "reach through a wall of 40 mm",
    ),
    "cover too big": (
        ("cover: 35", "cover: 195"),
        ("- {mark: L1", "- «{mark: L1"),
        "leave nothing of a section of 400 x",
    ),
    "legs too many": (
        ("legs: 2", "legs: 34"),
        ("- {mark: L1", "- «{mark: L1"),
        "34 legs don't fit side by side",
    ),
    "bars too many": (("count: 4", "count: «13"), "325 mm of bars side by side in 310 mm between the links"),
    "layer on nothing": (
        ("count: 4, diameter: 25", "count: «4, diameter: 25, layer: 2"),
        "layer 2 needs a layer 1 on the same face (bottom)",
    ),
    "sloping side": (
        (SECTION, "section: {shape: polygon, points: [[100, 0], [500, 0], [600, 700], [0, 700]]}"),
        (SIDE_BARS, "  - {mark: S1, face: left, count: «2, diameter: 12}\n"),
        "this outline has no flat left side",
    ),
    "polygon bars too many": (
        (SECTION, "section: {shape: polygon, points: [[0, 0], [400, 0], [400, 700], [0, 700]]}"),
        ("count: 4", "count: «13"),
        "325 mm of bars side by side in 310 mm between the links",
    ),
    "tag on a map": (("{f_ck: 30", "«!!map {f_ck: 30"), 'tags are not read: leave out "!!map"'),
    "place as text": (("count: 4, diameter: 25", "diameter: 25, at: «here"), "expected a list of [x, y]"),
    "number for a section": ((SECTION, "section: «400"), "expected a shape with its sizes"),
    "side bars too many": (("left, count: 2", "left, count: «48"), "576 mm of bars side by side in 565 mm"),
    "layer too deep": (
        ("h: 700", "h: 500"),
        ("count: 4, diameter: 25", "count: «4, diameter: 25, layer: 10"),
        "layer 10 would stand",
    ),
    "bar beyond the middle": (
        (SECTION, "section: {shape: rectangle, b: 400, h: 110}"),
        (BARS, "  - {mark: B1, face: bottom, count: «4, diameter: 25}\n"),
        "more than half the section's 110 mm",
    ),
    "outside": (
        ("count: 4, diameter: 25", "diameter: 25, at: [[60, 60], [395, 60]]"),
        ("- {mark: B1", "- «{mark: B1"),
        "B1: the bar at [395, 60] isn't wholly inside the outline",
    ),
    "overlap": (
        ("count: 4, diameter: 25", "diameter: 25, at: [[60, 60], [80, 60]]"),
        ("- {mark: B1", "- «{mark: B1"),
        "B1: the bar at [80, 60] stands in another bar",
    ),
    "in the void": (
        (SECTION, BOX),
        ("count: 4, diameter: 25", "diameter: 25, at: [[200, 110]]"),
        ("- {mark: B1", "- «{mark: B1"),
        "B1: the bar at [200, 110] reaches into the void",
    ),
    "count against places": (
        ("count: 4, diameter: 25", "count: «4, diameter: 25, at: [[60, 60]]"),
        "4 bars, but 1 places",
    ),
    "count against corners": (
        (BARS, "  - {face: corners, count: «3, diameter: 25}\n"),
        "the outline has 4 corners",
    ),
    "one coordinate": (
        ("count: 4, diameter: 25", "diameter: 25, at: [«[60]]"),
        "expected a place as two numbers [x, y]",
    ),
    "no places": (
        ("count: 4, diameter: 25", "diameter: 25, at: «[]"),
        "at has 0 places [x, y]; expected 1 to 200",
    ),
    "flat face of a circle": (
        (SECTION, CIRCLE),
        (BARS, BARS.splitlines()[0].replace("4", "«4") + "\n"),
        "a circle has no flat bottom; use face: round",
    ),
    "corner of a circle": (
        (SECTION, CIRCLE),
        (BARS, "  - {face: «corners, diameter: 25}\n"),
        "a circle has no corners",
    ),
    "crowded circle": (
        (SECTION, CIRCLE),
        (BARS, ROUND.replace("8", "«62")),
        "62 bars of 25 mm don't fit side by side",
    ),
    "crowded link": (
        (BARS, ROUND.replace("8", "«72")),
        "72 bars of 25 mm don't fit side by side along the link",
    ),
    "no bars": ((BARS, ""), ("bars:\n", "bars: «[]\n"), "bars is empty; expected at least 1"),
    "two points": ((SECTION, "section: {shape: polygon, points: «[[0, 0], [1, 1]]}"), "points has 2 places"),
    "repeated point": (
        (SECTION, "section: {shape: polygon, points: [[0, 0], [400, 0], [400, 700], [«0, 0]]}"),
        "point 4 repeats point 1; the outline closes by itself",
    ),
    "crossing": (
        (
            SECTION,
            "section: {shape: polygon, points: [[0, 0], [400, 700], [400, 0], «[0, 600]]}".replace(
                "«[0", "[0"
            ).replace("[400, 0]", "[«400, 0]"),
        ),
        "the polygon crosses itself: edge 3-4 meets edge 1-2",
    ),
    "no area": (
        (SECTION, "section: {shape: polygon, points: «[[0, 0], [100, 100], [400, 400]]}"),
        "encloses no area",
    ),
    "small polygon": (
        (SECTION, "section: {shape: polygon, points: «[[0, 0], [1, 0], [1, 1]]}"),
        "expected 10 to 100000 mm",
    ),
    "no flat bottom": (
        (SECTION, "section: {shape: polygon, points: [[0, 300], [300, 0], [600, 300], [300, 600]]}"),
        (BARS, BARS.splitlines()[0].replace("4", "«4") + "\n"),
        "this outline has no flat bottom",
    ),
    "tag": (("cover: 35", "cover: «!!str 35"), 'tags are not read: leave out "!!str"'),
    "merge key": (("cover: 35", "cover: 35\n«<<: {annex: uk}"), 'merge keys ("<<") are not read'),
    "list as key": (("cover: 35", "cover: 35\n? «[a, b]\n: 1"), "a list or map can't be a key"),
    "unknown alias": (("cover: 35", "cover: «*c"), 'the alias "*c" names nothing written before it'),
    "second document": (("cases:", "«---\ncases:"), "a second document starts here"),
    "syntax": (
        ("aggregate: 20", "aggregate: 20«: 30"),
        "not readable as YAML: mapping values are not allowed",
    ),
}


def test_the_base_is_sound() -> None:
    assert load_text(BASE, "a.yaml").member == "EB-07"


@pytest.mark.parametrize("name", FAULTS)
def test_fault(name: str) -> None:
    *changes, says = FAULTS[name]
    text, where = places(changed(*changes))
    faults = refused(text)
    assert [(line, column) for line, column, _ in faults] == where, faults
    assert says in faults[0][2]


def test_all_faults_come_at_once_in_the_order_of_the_file() -> None:
    marked = changed(
        ("member: EB-07", "«membr: EB-07"),
        ("format: 1", "«format: 1"),
        ("b: 400", "b: «310 kN"),
        ("spacing: 150", "spacing: «fine"),
        ("mark: T1", "mark: «B1"),
        ("count: 3", "count: «x"),
        ("T_Ed: 52", "T_Ed: «1,50"),
        ("counts: one leg", "counts: «x"),
    )
    text, where = places(marked)
    assert [fault[:2] for fault in refused(text)] == where


def test_steel_is_still_measured_when_something_else_is_wrong() -> None:
    text, where = places(changed(("member: EB-07", "member: «~"), ("count: 4", "count: «13")))
    assert [fault[:2] for fault in refused(text)] == where


def test_what_comes_together_on_a_face_counts_together() -> None:
    text, where = places(
        changed(("count: 3, diameter: 20}", "count: 8, diameter: 20}\n  - {face: top, bars: «8H20}"))
    )
    assert [fault[:2] for fault in refused(text)] == where


def test_a_file_that_is_no_map() -> None:
    assert refused("just text") == [(1, 1, '"just text" stands here; expected the file as keys and values')]
    assert refused("- 1") == [(1, 1, "a list stands here; expected the file as keys and values")]
