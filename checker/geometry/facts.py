"""Yes-or-no facts measured from a design that the rules of the `holds` kind ask for.

- `ok` is True, False, or None where the file leaves unsaid what would settle it.
- A fact that has nothing to be about (no hook, no corner) has `ok` None and `applies` False: it is never a
  pass.
- Torsion counts on perimeter links, and on those of flanges that share it, so only these are judged
  (EN 1992-1-1, 9.2.3(1), 8.5, 9.2.3(4)).
"""

from __future__ import annotations

from collections.abc import Callable, Iterable
from math import degrees, pi, radians
from typing import TYPE_CHECKING, NamedTuple

from checker.geometry.bars import Bar
from checker.geometry.outline import Outline
from checker.geometry.steel import corner_name

if TYPE_CHECKING:
    from checker.declared.model import Design, LinkSet, Place

CLOSED = ("hooks_135", "hooks_90", "lapped", "welded")
UPRIGHT_WITHIN = radians(0.5)
TAILS = {"hooks_90": (10, 70.0), "hooks_135": (5, 50.0)}
"""Least straight length after the bend: so many link diameters, and so many mm (8.5)."""


class Fact(NamedTuple):
    """One fact: whether it holds, what was found, and where in the file it stands."""

    ok: bool | None
    says: str
    place: Place | None
    applies: bool = True


def is_upright(links: LinkSet) -> bool:
    """Whether a link stands square to the member's axis, within half a degree."""
    return abs(links.angle - pi / 2) <= UPRIGHT_WITHIN


def link_facts(design: Design) -> dict[str, Fact]:
    """Return the facts `perimeter_link`, `links_closed`, `links_upright` and `hook_tails`."""
    perimeter = [links for links in design.links if links.where == "perimeter"]
    place = design.places.get("links")
    if not perimeter:
        none = "there is no perimeter link"
        facts = {name: Fact(None, none, place, applies=False) for name in _JUDGES}
        return {"perimeter_link": Fact(False, none, place), **facts}
    first = perimeter[0]
    if design.section.torsion_by == "parts":
        perimeter += [links for links in design.links if links.where == "flange"]
    found = Fact(True, f"{first.mark} is a perimeter link", first.place)
    return {
        "perimeter_link": found,
        **{name: _worst(map(judge, perimeter)) for name, judge in _JUDGES.items()},
    }


def corners_fact(in_corners: dict[int, list[Bar]], outline: Outline, place: Place | None) -> Fact:
    """Return the fact `corners_filled`: every link corner has a bar in it (9.2.3(4))."""
    if not in_corners:
        return Fact(None, "a circular link has no corners", place, applies=False)
    empty = [corner_name(outline, i) for i, bars in in_corners.items() if not bars]
    if not empty:
        return Fact(True, "every link corner has a bar in it", place)
    return Fact(False, f"no bar in the link corner{'s' * (len(empty) > 1)}: {', '.join(empty)}", place)


def _worst(facts: Iterable[Fact]) -> Fact:
    """Return the first that fails, else is unsaid, else holds, else doesn't apply."""

    def rank(fact: Fact) -> int:
        if not fact.applies:
            return 3
        return 0 if fact.ok is False else 1 if fact.ok is None else 2

    return min(facts, key=rank)


def _closed(links: LinkSet) -> Fact:
    if links.ends is None:
        return Fact(None, f"{links.mark} doesn't say how its ends are fixed", links.place)
    if links.ends in CLOSED:
        return Fact(True, f"{links.mark} is closed ({links.ends})", links.place)
    return Fact(False, f"{links.mark} is {links.ends}, not closed", links.place)


def _upright(links: LinkSet) -> Fact:
    says = f"{links.mark} stands at {degrees(links.angle):.4g} deg to the member's axis"
    return Fact(is_upright(links), says, links.place)


def _hook_tail(links: LinkSet) -> Fact:
    if links.ends is None:
        return Fact(None, f"{links.mark} doesn't say how its ends are fixed", links.place)
    if links.ends not in TAILS:
        return Fact(None, f"{links.mark} has no hooks ({links.ends})", links.place, applies=False)
    times, least = TAILS[links.ends]
    needed = max(times * links.diameter.value, least)
    if links.tail is None:
        return Fact(None, f"{links.mark} doesn't say the straight length after its hooks", links.place)
    says = f"{links.mark} has {links.tail.value:g} mm after its hooks, {needed:g} mm needed"
    return Fact(links.tail.value >= needed - 1e-9, says, links.tail.place)


_JUDGES: dict[str, Callable[[LinkSet], Fact]] = {
    "links_closed": _closed,
    "links_upright": _upright,
    "hook_tails": _hook_tail,
}
