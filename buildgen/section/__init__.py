"""Airfoil sections: by equation, shipped, or from a file of one's own."""

from __future__ import annotations

from collections.abc import Sequence
from pathlib import Path
from typing import Any

from buildgen.problems import DesignError, Problem, nearest
from buildgen.section.curve import Section, blend
from buildgen.section.figures import Figures, figures
from buildgen.section.naca import is_naca, naca
from buildgen.section.read import read_file
from buildgen.section.spline import from_points
from buildgen.section.write import WRITERS, write

ENDINGS = (".csv", ".dat", ".txt")


def shipped_folder() -> Path:
    """The data folder: inside an installed package, beside it in a checkout."""
    package = Path(__file__).resolve().parent.parent
    inside = package / "airfoils"
    return inside if inside.is_dir() else package.parent / "airfoils"


def shipped() -> tuple[str, ...]:
    """Names of the shipped sections."""
    return tuple(sorted(p.stem for p in shipped_folder().glob("*.csv")))


def find(name: str, folders: Sequence[Path] = ()) -> Section:
    """A section by name or path.

    Args:
        name: a NACA designation, a shipped name, a name in one of the folders, or a path (from
            one of the folders, or from here). Capitals do not matter, nor does the ending.
        folders: the user's own folders of coordinate files; they win over the shipped ones.

    Raises:
        DesignError: there is no such section, with the nearest name; or its file holds none.
    """
    wanted = name.strip()
    for folder in (*folders, shipped_folder()):
        held = _held(folder, wanted)
        if held is not None:
            return read_file(held)
    if is_naca(wanted):
        return naca(wanted)
    path = Path(wanted)
    if path.suffix.lower() in ENDINGS or _is_file(path):
        return read_file(path)
    own = [p.stem for folder in folders for p in _files(folder)]
    hint = nearest(wanted, [*shipped(), *own])
    raise DesignError(
        Problem("", f'There is no section "{name}".',
                f"{hint} NACA designations and files (.dat, .csv) are known too.".lstrip())
    )


def _held(folder: Path, wanted: str) -> Path | None:
    """The file of that name in a folder; the right capitals first, then .csv before the rest."""
    if not wanted:
        return None
    target = folder / wanted
    goal = target.name.casefold()
    fit = [p for p in _files(target.parent) if goal in (p.stem.casefold(), p.name.casefold())]
    return min(fit, default=None, key=lambda p: (
        target.name not in (p.stem, p.name), ENDINGS.index(p.suffix.lower()), p.name))


def _files(folder: Path) -> list[Path]:
    """Coordinate files in a folder; none where it cannot be read."""
    try:
        return [p for p in folder.iterdir() if p.suffix.lower() in ENDINGS and p.is_file()]
    except (OSError, ValueError):
        return []


def _is_file(path: Path) -> bool:
    try:
        return path.is_file()
    except (OSError, ValueError):
        return False


def describe(section: Section) -> dict[str, Any]:
    """Figures for machines: keys that end in _percent in percent of the chord, area in chord^2."""
    f = figures(section)
    return {
        "name": section.name,
        "thickness_percent": round(100 * f.thickness, 3),
        "thickness_at_percent": round(100 * f.thickness_at, 1),
        "camber_percent": round(100 * f.camber, 3),
        "camber_at_percent": round(100 * f.camber_at, 1),
        "nose_radius_percent": round(100 * f.nose_radius, 3),
        "trailing_edge_percent": round(100 * f.trailing_edge_gap, 3),
        "area": round(f.area, 5),
        "source": section.source,
        "notes": list(section.notes),
    }


def table(section: Section) -> str:
    """The same for people, one figure a line."""
    d = describe(section)
    rows = [
        ("thickness", f"{d['thickness_percent']:.2f} % at {d['thickness_at_percent']:.1f} %"),
        ("camber", f"{d['camber_percent']:.2f} % at {d['camber_at_percent']:.1f} %"),
        ("nose radius", f"{d['nose_radius_percent']:.2f} %"),
        ("trailing edge", f"{d['trailing_edge_percent']:.2f} %"),
        ("area", f"{d['area']:.4f} of chord squared"),
        ("source", d["source"]),
        *(("note", note) for note in d["notes"]),
    ]
    return "\n".join([section.name, *(f"  {k:<14} {v}" for k, v in rows)])


__all__ = [
    "Figures", "Section", "WRITERS", "blend", "describe", "figures", "find", "from_points", "naca",
    "read_file", "shipped", "shipped_folder", "table", "write",
]
