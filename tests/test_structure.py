"""The shape of the code: imports run one way, heavy things are not imported at the top, modules stay small."""

from __future__ import annotations

import ast
from pathlib import Path

import pytest

ROOT = Path(__file__).parents[1]
ORDER = [
    "errors",
    "shipped",
    "declared",
    "geometry",
    "sheet",
    "review",
    "saved",
    "trail",
    "report",
    "page",
    "outputs",
    "progress",
    "pipeline",
    "log",
    "cli_log",
    "cli",
    "__main__",
]
HEAVY = {"numpy", "pandas", "pydantic", "jsonschema", "tabulate"}
MODULES = sorted((ROOT / "checker").rglob("*.py"))


def _room(path: Path) -> str:
    return path.relative_to(ROOT / "checker").parts[0].removesuffix(".py")


def _top_level(tree: ast.Module) -> list[ast.stmt]:
    """Statements that run when the module is imported (not those for type checkers)."""
    found: list[ast.stmt] = []
    for statement in tree.body:
        guarded = isinstance(statement, ast.If) and "TYPE_CHECKING" in ast.unparse(statement.test)
        found += [] if guarded else [statement]
    return found


def _imports(statements: list[ast.stmt]) -> list[str]:
    names: list[str] = []
    for statement in statements:
        if isinstance(statement, ast.Import):
            names += [alias.name for alias in statement.names]
        elif isinstance(statement, ast.ImportFrom) and statement.module == "checker":
            names += [f"checker.{alias.name}" for alias in statement.names]
        elif isinstance(statement, ast.ImportFrom):
            names.append(statement.module or "")
    return names


@pytest.mark.parametrize("path", MODULES, ids=lambda p: p.relative_to(ROOT).as_posix())
def test_module(path):
    tree = ast.parse(path.read_text(encoding="utf-8"))
    assert ast.get_docstring(tree), "every module opens with a sentence"
    assert len(path.read_text(encoding="utf-8").splitlines()) <= 300
    if _room(path) == "__init__":
        return
    everywhere = _imports([node for node in ast.walk(tree) if isinstance(node, ast.stmt)])
    here = ORDER.index(_room(path))
    for name in everywhere:
        parts = name.split(".")
        if parts[0] == "checker" and len(parts) > 1 and parts[1] != "__version__":
            assert ORDER.index(parts[1]) <= here, f"{name} stands to the right of {_room(path)}"
    if path.name not in ("schema.py", "bending_columns.py"):  # themselves imported only where they are needed
        assert not HEAVY & {name.split(".")[0] for name in _imports(_top_level(tree))}


def test_top_level_is_the_agreed_one():
    """Nothing but what the design lists, and what git and pip need."""
    import subprocess

    listed = subprocess.run(["git", "ls-files"], cwd=ROOT, capture_output=True, text=True, check=False).stdout
    if not listed:
        pytest.skip("not a git checkout")
    top = {line.split("/")[0] for line in listed.splitlines()}
    agreed = {"README.md", "DEVELOPERS.md", "LICENSE", "pyproject.toml", ".gitignore", ".ci"}
    assert top <= agreed | {"checker", "rules", "schemas", "examples", "tests"}
