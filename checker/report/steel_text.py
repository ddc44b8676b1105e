"""The steel as it was read, and what each part of it counts for, in the text report."""

from __future__ import annotations

from checker.geometry.counted import bars_counted, links_counted
from checker.review.findings import MemberResult
from checker.sheet.shown import number


def steel_text(member: MemberResult) -> str:
    """A table of bars and one of links: what each counts for (areas in mm2, links in mm2/mm)."""
    from tabulate import tabulate

    if member.design is None or member.measured is None:
        return ""
    bars = [
        [
            one.mark,
            f"{one.number} of {number(one.diameter)} mm",
            *(f"{number(a)} mm²" for a in one[3:6]),
            one.chord or "–",
        ]
        for one in bars_counted(member.design, member.measured)
    ]
    links = [
        [
            one.mark, f"{one.legs} legs of {number(one.diameter)} mm at {number(one.spacing)} mm",
            f"{number(one.shear)} mm²/mm", f"{number(one.torsion)} mm²/mm" if one.torsion else f"none: {one.why_not}",
        ]
        for one in links_counted(member.design)
    ]  # fmt: skip
    heads = ["bars", "", "area", "bottom half", "top half", "in d of"]
    tables = [str(tabulate(bars, heads, tablefmt="plain", disable_numparse=True))]
    heads = ["links", "", "shear, all legs", "torsion, one leg"]
    tables.append(str(tabulate(links, heads, tablefmt="plain", disable_numparse=True)))
    return "\n".join(("Steel as read, and what it counts for", *tables))
