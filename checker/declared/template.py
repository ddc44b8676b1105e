"""The commented file that `samestrut new` prints, for a designer to fill in."""

from __future__ import annotations

from importlib.resources import files


def template() -> str:
    """The text of a complete, valid declared-design file that explains each of its keys."""
    return files("checker.declared").joinpath("template.yaml").read_text(encoding="utf-8")
