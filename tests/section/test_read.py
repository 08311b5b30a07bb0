"""Coordinate files as they are met in the wild."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path

import numpy as np
import pytest

from buildgen.problems import DesignError
from buildgen.section import find, naca, read_file, write

POINTS = naca("2412").contour(31)
UPPER, LOWER = POINTS[30::-1], POINTS[30:]


def rows(points: np.ndarray, form: str = " {:.6f} {:.6f}") -> str:  # type: ignore[type-arg]
    return "\n".join(form.format(x, y) for x, y in points)


def two_blocks(gap: str = "\n") -> str:
    return f"NACA 2412\n 31. 31.\n{gap}{rows(UPPER)}\n{gap}{rows(LOWER)}\n"


FORMS: dict[str, Callable[[], bytes]] = {
    "one block": lambda: f"NACA 2412\n{rows(POINTS)}\n".encode(),
    "no title": lambda: rows(POINTS).encode(),
    "two title lines": lambda: f"NACA 2412\n   X    Y\n{rows(POINTS)}\n".encode(),
    "remarks": lambda: f"# name: NACA 2412\n# source\n{rows(POINTS)}\n".encode(),
    "title with numbers": lambda: f"20-32C  (12.0%) | AIRFOIL\n{rows(POINTS)}\n".encode(),
    "latin-1 title": lambda: f"G\u00f6ttingen\n{rows(POINTS)}\n".encode("latin-1"),
    "counts and blocks": lambda: two_blocks().encode(),
    "counts, no blank lines": lambda: two_blocks("").encode(),
    "counts, blank lines with a blank": lambda: two_blocks(" \n").encode(),
    "unequal counts": lambda: (
        f"NACA\n 31. 30.\n\n{rows(UPPER)}\n\n{rows(LOWER[1:])}\n").encode(),
    "lower surface first": lambda: f"NACA\n{rows(POINTS[::-1])}\n".encode(),
    "from the nose round": lambda: f"NACA\n{rows(np.vstack([UPPER, LOWER[::-1]]))}\n".encode(),
    "percent chord": lambda: f"NACA\n{rows(POINTS * 100)}\n".encode(),
    "millimetres": lambda: f"NACA\n{rows(POINTS * 250)}\n".encode(),
    "crlf": lambda: f"NACA\n{rows(POINTS)}\n".replace("\n", "\r\n").encode(),
    "cr cr lf": lambda: f"NACA\n{rows(POINTS)}\n".replace("\n", "\r\r\n").encode(),
    "no newline at the end": lambda: f"NACA\n{rows(POINTS)}".encode(),
    "tabs": lambda: f"NACA\n{rows(POINTS, '~{:.6f}~{:.6f}~')}".replace("~", chr(9)).encode(),
    "commas": lambda: f"NACA\n{rows(POINTS, '{:.6f},{:.6f}')}".encode(),
    "semicolons": lambda: f"NACA\n{rows(POINTS, '{:.6f}; {:.6f}')}".encode(),
    "brackets": lambda: f"NACA\n{rows(POINTS, '{:.6f} ({:.6f})')}".encode(),
    "third column": lambda: f"NACA\n{rows(POINTS, '{:.6f} {:.6f} 0.0')}".encode(),
    "exponents": lambda: f"NACA\n{rows(POINTS, '{:.12e} {:.12e}')}".encode(),
    "no leading zero": lambda: f"NACA\n{rows(POINTS).replace('0.', '.')}".encode(),
    "nose twice": lambda: f"NACA\n{rows(np.insert(POINTS, 30, POINTS[30], axis=0))}".encode(),
}


@pytest.mark.parametrize("form", FORMS)
def test_every_form_is_the_same_section(form: str, tmp_path: Path) -> None:
    path = tmp_path / "s.dat"
    path.write_bytes(FORMS[form]())
    section = read_file(path)
    expected = naca("2412").contour(61)
    assert np.abs(section.contour(61) - expected).max() < 6e-4
    if form in ("percent chord", "millimetres"):
        assert "unit chord" in section.notes[0]


def test_a_lost_last_point_is_closed_and_said(tmp_path: Path) -> None:
    points = naca("2412", closed=True).contour(31)
    points[[0, -1]] = (1.0, 0.0)
    path = tmp_path / "s.dat"
    path.write_text(f"closed\n{rows(points[:-1])}\n")
    section = read_file(path)
    assert section.trailing_edge_gap < 1e-6
    assert "repeated last point" in section.notes[0]


@pytest.mark.parametrize(
    ("text", "line", "words"),
    [
        (f"NACA\n{rows(POINTS[:20])}\n0.2 oops\n{rows(POINTS[20:])}", 22, "two numbers"),
        (f"NACA\n 31. 40.\n\n{rows(UPPER)}\n\n{rows(LOWER)}\n", 2, "counts announce"),
        (f"NACA\n{rows(POINTS)}\n999.0 999.0\n{rows(POINTS)}", 63, "several elements"),
        ("NACA\n0 0\n1 0\n", 0, "points were found"),
        ("", 0, "points were found"),
        (f"NACA\n{rows(UPPER)}\n", 0, "surface"),
        ("1\nNACA 2412\n31 31\n" + " ".join(f"{x:.4f} {y:.4f}" for x, y in POINTS[:8]), 0, ""),
    ],
)
def test_what_is_no_section_is_refused_with_its_line(
    text: str, line: int, words: str, tmp_path: Path
) -> None:
    path = tmp_path / "s.dat"
    path.write_text(text)
    with pytest.raises(DesignError) as error:
        read_file(path)
    problem = error.value.problems[0]
    assert problem.file == "s.dat"
    assert problem.line == line
    assert words in problem.says


def test_a_crossed_outline_is_refused(tmp_path: Path) -> None:
    points = POINTS.copy()
    points[[10, 20]] = points[[20, 10]]
    path = tmp_path / "s.dat"
    path.write_text(f"NACA\n{rows(points)}\n")
    with pytest.raises(DesignError, match="crosses itself"):
        read_file(path)


def test_a_digit_out_of_place_is_said(tmp_path: Path) -> None:
    points = POINTS.copy()
    points[8, 1] += 0.004
    path = tmp_path / "s.dat"
    path.write_text(f"NACA\n{rows(points)}\n")
    assert any("rough" in note for note in read_file(path).notes)


def test_missing_files_and_folders(tmp_path: Path) -> None:
    for path in (tmp_path / "none.dat", tmp_path):
        with pytest.raises(DesignError):
            read_file(path)


def test_a_folder_of_ones_own_stands_beside_the_shipped(tmp_path: Path) -> None:
    (tmp_path / "mine.dat").write_text(f"Mine\n{rows(POINTS)}\n")
    assert find("mine", (tmp_path,)).name == "Mine"
    assert find("clarky", (tmp_path,)).name == "Clark Y"
    with pytest.raises(DesignError, match='Did you mean "mine"'):
        find("mind", (tmp_path,))


@pytest.mark.parametrize("ending", [".dat", ".csv"])
def test_written_files_are_read_back(ending: str, tmp_path: Path) -> None:
    section = find("sd7037")
    write(section, tmp_path / f"s{ending}")
    assert np.abs(read_file(tmp_path / f"s{ending}").contour(41) - section.contour(41)).max() < 3e-5


def test_drawings(tmp_path: Path) -> None:
    from xml.etree import ElementTree

    import ezdxf
    from PIL import Image

    section = find("clarky")
    for ending in (".svg", ".png", ".dxf"):
        write(section, tmp_path / f"s{ending}", 250)
    width = ElementTree.parse(tmp_path / "s.svg").getroot().get("width")
    assert float(width.removesuffix("mm")) == pytest.approx(260, abs=0.5)  # type: ignore[union-attr]
    document = ezdxf.readfile(tmp_path / "s.dxf")
    assert document.header["$INSUNITS"] == 4
    assert not document.audit().errors
    assert np.asarray(Image.open(tmp_path / "s.png").convert("L")).min() < 40
    with pytest.raises(DesignError, match=r"\.dat"):
        write(section, tmp_path / "s.gif")
