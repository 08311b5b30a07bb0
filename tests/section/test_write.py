"""Sections on disk, each ending read back."""

from __future__ import annotations

from dataclasses import replace
from pathlib import Path
from xml.etree import ElementTree

import ezdxf
import numpy as np
import pytest
from PIL import Image
from shapely import distance, points
from shapely.geometry import LineString, Polygon

from buildgen.problems import DesignError
from buildgen.section import WRITERS, describe, find, naca, read_file, shipped, table, write

NAMES = [*shipped(), "naca2412", "naca23112", "0012-64", "2412-closed"]


@pytest.mark.parametrize("ending", [".dat", ".csv"])
@pytest.mark.parametrize("name", NAMES)
def test_coordinates_are_read_back(name: str, ending: str, tmp_path: Path) -> None:
    section = find(name)
    path = tmp_path / f"s{ending}"
    write(section, path)
    back = read_file(path)
    written = section.contour(101)
    curve = LineString(np.vstack([back.upper[::-1], back.lower[1:]]))
    assert distance(curve, points(written)).max() < 2e-6
    assert back.name == section.name
    assert back.trailing_edge_gap == pytest.approx(section.trailing_edge_gap, abs=2e-6)
    assert back.notes == ()
    if ending == ".csv":
        assert back.source == section.source


@pytest.mark.parametrize("name", ["12 24", "# odd", "7"])
def test_a_name_that_is_no_title(name: str, tmp_path: Path) -> None:
    write(replace(find("e193"), name=name), tmp_path / "s.dat")
    back = read_file(tmp_path / "s.dat")
    assert back.name == f"section {name}"
    assert back.notes == ()


def test_svg_is_true_size_and_closed(tmp_path: Path) -> None:
    section = replace(find("clarky"), name="Clark <Y> & Co")
    write(section, tmp_path / "s.svg", 250)
    root = ElementTree.parse(tmp_path / "s.svg").getroot()
    space = "{http://www.w3.org/2000/svg}"
    title, path = root.find(f"{space}title"), root.find(f"{space}path")
    assert title is not None and title.text == "Clark <Y> & Co, chord 250 mm"
    assert path is not None
    text = path.get("d", "")
    assert text.startswith("M ") and text.endswith(" Z") and text.count("M") == 1
    drawn = np.array([[float(v) for v in p.split()] for p in text[2:-2].split(" L ")])
    box = [float(v) for v in root.get("viewBox", "").split()]
    assert np.all(drawn.min(axis=0) > box[:2])
    assert np.all(drawn.max(axis=0) < np.add(box[:2], box[2:]))
    assert (root.get("width"), root.get("height")) == (f"{box[2]:.3f}mm", f"{box[3]:.3f}mm")
    assert np.ptp(drawn[:, 0]) == pytest.approx(250, abs=0.01)
    area = describe(section)["area"] * 250**2
    assert Polygon(drawn).area == pytest.approx(area, rel=2e-4)


@pytest.mark.parametrize("name", ["clarky", "2412-closed", "e193", "goe417a"])
def test_dxf_is_one_closed_line(name: str, tmp_path: Path) -> None:
    section = find(name)
    write(section, tmp_path / "s.dxf", 300)
    document = ezdxf.readfile(tmp_path / "s.dxf")
    audit = document.audit()
    assert not audit.errors and not audit.fixes
    assert document.header["$INSUNITS"] == 4
    (line,) = document.modelspace()
    assert line.dxftype() == "LWPOLYLINE" and line.closed
    assert line.dxf.layer == "CUT_OUTSIDE"
    found = np.array(line.get_points("xy"))
    ring = Polygon(found)
    assert ring.is_valid
    assert np.hypot(*(found - np.roll(found, 1, axis=0)).T).min() > 1e-3
    side = np.vstack([section.upper[::-1], section.lower[1:]]) * 300
    assert distance(LineString(np.vstack([found, found[:1]])), points(side)).max() < 0.01


def test_png_opens(tmp_path: Path) -> None:
    write(find("clarky"), tmp_path / "s.png")
    image = Image.open(tmp_path / "s.png")
    assert image.size == (1400, 560)
    grey = np.asarray(image.convert("L"))
    assert grey.min() < 40 and np.median(grey) == 255
    ink = np.nonzero((grey < 100).any(axis=0))[0]
    assert ink[0] == pytest.approx(70, abs=2) and ink[-1] == pytest.approx(1330, abs=2)


@pytest.mark.parametrize("ending", WRITERS)
def test_the_same_section_is_the_same_file(ending: str, tmp_path: Path) -> None:
    for name in ("a", "b"):
        write(naca("2412"), tmp_path / f"{name}{ending}", 180)
    assert (tmp_path / f"a{ending}").read_bytes() == (tmp_path / f"b{ending}").read_bytes()


def test_capitals_in_an_ending(tmp_path: Path) -> None:
    write(naca("2412"), tmp_path / "S.DAT")
    assert read_file(tmp_path / "S.DAT").name == "NACA 2412"


@pytest.mark.parametrize(
    ("file", "words"),
    [("s.gif", "is no ending for a section"), ("s", "is no ending for a section"),
     ("none/s.dat", "cannot be written"), ("folder.dat", "cannot be written")],
)
def test_what_cannot_be_written(file: str, words: str, tmp_path: Path) -> None:
    (tmp_path / "folder.dat").mkdir()
    with pytest.raises(DesignError, match=words) as error:
        write(naca("2412"), tmp_path / file)
    assert error.value.problems[0].file
    assert sorted(p.name for p in tmp_path.iterdir()) == ["folder.dat"]


@pytest.mark.parametrize("chord", [0.0, -5.0, float("nan"), float("inf")])
def test_a_chord_above_nothing(chord: float, tmp_path: Path) -> None:
    with pytest.raises(DesignError, match="is no chord"):
        write(naca("2412"), tmp_path / "s.svg", chord)
    assert not list(tmp_path.iterdir())


def test_figures_for_machines_and_for_people() -> None:
    """11.71 % at 0.282 and 3.43 % at 0.420: head of the shipped file."""
    section = find("clarky")
    found = describe(section)
    assert found["thickness_percent"] == pytest.approx(11.71, abs=0.006)
    assert found["camber_percent"] == pytest.approx(3.43, abs=0.006)
    text = table(section)
    assert text.splitlines()[0] == "Clark Y"
    assert "11.71 % at 28." in text and "3.43 % at 42.0 %" in text
    assert "rough: line 39" in table(find("goe417a"))
