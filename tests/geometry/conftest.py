"""Builders of declared designs for the tests of measuring: plain values in, model records out."""

from __future__ import annotations

from collections.abc import Callable
from math import pi
from typing import Any

import pytest

from checker.declared.model import BarGroup, Design, LinkSet, Materials, Number, Place, Section

NOWHERE = Place(1, 1)


def number(value: float, place: Place = NOWHERE) -> Number:
    return Number(value=value, text=f"{value:g}", unit="mm", step=1.0, place=place)


def link(
    mark: str = "L1",
    diameter: float = 10,
    spacing: float = 150,
    legs: int = 2,
    where: str = "perimeter",
    ends: str | None = "hooks_135",
    angle: float = pi / 2,
    tail: float | None = None,
    line: int = 10,
) -> LinkSet:
    return LinkSet(
        mark=mark,
        diameter=number(diameter),
        spacing=number(spacing),
        legs=legs,
        where=where,
        ends=ends,
        angle=angle,
        lap=None,
        tail=None if tail is None else number(tail, Place(line, 40)),
        place=Place(line, 5),
    )


def group(
    face: str,
    count: int,
    diameter: float,
    layer: int = 1,
    at: tuple[tuple[float, float], ...] = (),
    line: int = 20,
) -> BarGroup:
    return BarGroup(
        mark=face,
        face=face,
        count=count,
        diameter=number(diameter),
        layer=layer,
        at=at,
        place=Place(line, 5),
    )


def section(shape: str, points: tuple[tuple[float, float], ...] = (), **sizes: float) -> Section:
    named = {name: number(value) for name, value in sizes.items()}
    return Section(shape=shape, sizes=named, points=points, place=Place(3, 1))


def design(outline: Section, *bars: BarGroup, **changed: Any) -> Design:
    values: dict[str, Any] = {
        "links": (link(),),
        "cover": number(35),
        "aggregate": number(20),
        **changed,
    }
    return Design(
        file="beam.yaml",
        sha256="",
        member="B1",
        submission={},
        standard="EN 1992-1-1:2004",
        annex="recommended",
        torsion="equilibrium",
        section=outline,
        materials=Materials(number(30), number(500), number(500), None, None, Place(5, 1)),
        bars=bars,
        cases=(),
        places={"links": Place(9, 1), "bars": Place(19, 1), "section": Place(3, 1)},
        **values,
    )


class Builders:
    """What the tests build designs from."""

    number = staticmethod(number)
    link = staticmethod(link)
    group = staticmethod(group)
    section = staticmethod(section)
    design = staticmethod(design)


@pytest.fixture(scope="session")
def build() -> type[Builders]:
    return Builders


@pytest.fixture(scope="session")
def sound_beam() -> Callable[..., Design]:
    """A rectangle 400 x 700 in one cage: 4H25 below, 3H20 above, 2H12 on each side, H10 links."""

    def make(**changed: Any) -> Design:
        bars = (
            group("bottom", 4, 25),
            group("top", 3, 20),
            group("left", 2, 12),
            group("right", 2, 12),
        )
        return design(section("rectangle", b=400, h=700), *changed.pop("bars", bars), **changed)

    return make
