"""What the reports on two published examples say of them: the cause that their own numbers bear out, and nothing else.

- Wide T-beam (www.eurocode.us, concrete-structures-eurocode-3, page "design-for-beam-shear"): the printed V_Rd,max
  is what comes out without the 0.9.
- Cantilever of Prof. R. Baumgart (Hochschule Darmstadt, DIN 1045-1): cot θ 1.2 for shear
  and 1.0 for torsion, and a squared sum.
"""

from __future__ import annotations

from pathlib import Path

from checker import audit

FILES = Path(__file__).parent / "files"


def test_the_missing_nine_tenths_is_named() -> None:
    report = audit(FILES / "r3.yaml")
    crushing, spacing = report.findings
    assert crushing.draft.slip == "crushing-by-depth"
    assert "the 0.9 is missing" in report.text()
    assert (crushing.draft.quantity, spacing.draft.quantity) == ("V_Rd_max", "s_l_max")


def test_two_angles_and_the_squared_sum_and_nothing_else() -> None:
    angles, squares = audit(FILES / "r5.yaml").findings
    assert angles.draft.rule == "strut.same-angle"
    assert squares.draft.slip == "crushing-by-squares"
