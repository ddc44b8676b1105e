"""Where the files that ship with the package are: `rules/` and `schemas/`, in a wheel and in a checkout alike."""

from __future__ import annotations

from pathlib import Path

_PACKAGE = Path(__file__).resolve().parent


def folder(name: str) -> Path:
    """The folder `rules` or `schemas`: inside the installed package, else beside it in a checkout."""
    inside = _PACKAGE / "_shipped" / name
    return inside if inside.is_dir() else _PACKAGE.parent / name


def shown(path: Path) -> str:
    """A shipped file's name for messages: from `rules/` on, never a path of the machine."""
    for name in ("rules", "schemas"):
        base = folder(name)
        if path.is_relative_to(base):
            return f"{name}/{path.relative_to(base).as_posix()}"
    return path.name
