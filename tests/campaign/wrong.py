"""All wrong formulas by slip id, and the quantities a slip is about."""

from __future__ import annotations

from tests.campaign.worked import Wrong
from tests.campaign.wrong_truss import CHORDS, DETAILS, SUMS, TORSION, TRUSS
from tests.campaign.wrong_tube import DEPTHS, STRENGTHS, TUBE, WITHOUT_LINKS

WRONG: dict[str, dict[str, Wrong]] = {
    **DEPTHS, **STRENGTHS, **WITHOUT_LINKS, **TUBE, **TRUSS, **TORSION, **SUMS, **CHORDS, **DETAILS,
}  # fmt: skip

STRESS_AND_NU = ("link-stress-08-with-nu", "link-stress-full-with-option")
"""The link stress and ν_1 go together (6.2.3(3)): which of the two is wrong is a matter of choice."""


def own(slip: str) -> set[str]:
    """The quantities on which a finding about a slip may stand."""
    return {"f_ywd", "nu_1"} if slip in STRESS_AND_NU else set(WRONG[slip])
