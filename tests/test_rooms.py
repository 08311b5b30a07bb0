"""Rooms import only from rooms before them."""

from __future__ import annotations

import ast
from pathlib import Path

import pytest

import buildgen

PACKAGE = Path(buildgen.__file__).parent
ROOMS = (
    "problems", "shelf", "section", "aero", "drive", "strength", "solid", "form", "part",
    "design", "airframe", "sheets", "prints", "checks", "packet", "pack", "build", "terminal",
    "cli", "__init__", "__main__",
)
# pack is imported by build when something is written: build.py shows the whole job.
FILES = sorted(PACKAGE.rglob("*.py"))


def room_of(path: Path) -> str:
    first = path.relative_to(PACKAGE).parts[0]
    return first.removesuffix(".py")


def imported(path: Path, source: str) -> set[str]:
    """Rooms of this package that a file imports, those for type checking aside."""
    found = set()
    tree = ast.parse(source)
    skipped = {
        id(inner)
        for node in ast.walk(tree)
        if isinstance(node, ast.If) and "TYPE_CHECKING" in ast.dump(node.test)
        for inner in ast.walk(node)
    }
    for node in ast.walk(tree):
        if id(node) in skipped:
            continue
        names = []
        if isinstance(node, ast.ImportFrom) and node.module and node.level == 0:
            names = [node.module]
        elif isinstance(node, ast.Import):
            names = [alias.name for alias in node.names]
        found |= {n.split(".")[1] for n in names if n.startswith("buildgen.") and n.count(".") >= 1}
    return found


def steps_ahead(path: Path, source: str) -> list[str]:
    here = ROOMS.index(room_of(path))
    return sorted(r for r in imported(path, source) if ROOMS.index(r) > here)


@pytest.mark.parametrize("path", FILES, ids=lambda p: str(p.relative_to(PACKAGE)))
def test_no_room_reaches_ahead(path: Path) -> None:
    assert steps_ahead(path, path.read_text()) == []


def test_a_step_ahead_is_seen() -> None:
    path = PACKAGE / "part.py"
    assert steps_ahead(path, "from buildgen.sheets.layout import Sheet") == ["sheets"]


@pytest.mark.parametrize("path", FILES, ids=lambda p: str(p.relative_to(PACKAGE)))
def test_the_cad_kernel_is_imported_nowhere_at_start(path: Path) -> None:
    tree = ast.parse(path.read_text())
    top = [n for n in tree.body if isinstance(n, ast.Import | ast.ImportFrom)]
    names = [a.name for n in top if isinstance(n, ast.Import) for a in n.names]
    names += [n.module or "" for n in top if isinstance(n, ast.ImportFrom)]
    assert not [n for n in names if n.split(".")[0] in ("cadquery", "OCP")]
