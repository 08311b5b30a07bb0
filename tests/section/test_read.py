"""Coordinate files as they are met in the wild: one small file each, in data/."""

from __future__ import annotations

import os
from pathlib import Path

import numpy as np
import pytest

from buildgen.problems import DesignError
from buildgen.section import find, naca, read_file

DATA = Path(__file__).parent / "data"
# What a file says beside being the section; every other file that is read says nothing.
SAID = {
    "percent.dat": ("divided by 100 to unit chord",),
    "percent_counts.dat": ("divided by 100 to unit chord",),
    "millimetres.dat": ("divided by 250.021 to unit chord",),
    "inches.dat": ("divided by 0.400034 to unit chord",),
    "dots.dat": ("line 2 has no ordinate, left out", "line 54 has no ordinate, left out"),
    "counts_dots.dat": ("line 30 has no ordinate, left out",),
    "title_of_two_numbers.dat": ("line 1 was taken for a title",),
}
CHANGED = {
    "rough.dat": "rough: line 10, x = 0.601, lies 0.0040 chord off its neighbours",
    "flat_bottom.dat": "foremost point at (0.0000, 0.0285)",
    "tail_low.dat": "trailing edge at y = -0.0260",
    "zigzag.csv": "zigzag: from line 20 on, 25 points in a row lie on alternate sides",
    "last_point_lost.dat": "closed: the repeated last point was missing",
    "last_point_lost_under.dat": "closed: the repeated last point was missing",
    "first_point_lost.dat": "closed: the repeated last point was missing",
}
REFUSED = {
    "bad_row.dat": (22, '"0.197135 oops" holds no two numbers'),
    "bad_first_row.dat": (3, '"0.95" holds no two numbers'),
    "bad_one_number.dat": (32, '"0.2500" holds no two numbers'),
    "bad_not_finite.dat": (32, '"0.2500 nan" holds no two numbers'),
    "bad_huge.dat": (32, "out of all bounds"),
    "bad_counts.dat": (2, "counts announce 26 and 40 points, 52 follow"),
    "bad_third_column.dat": (3, "third column varies"),
    "bad_stray_percent.dat": (53, "x = 100 stands among rows in unit chord"),
    "bad_elements.dat": (53, "several elements"),
    "bad_elements_with_box.dat": (54, "several elements"),
    "bad_crossed.dat": (42, "crosses itself near x = 0.499"),
    "bad_crossed_edge.dat": (2, "crosses itself near x = 1.000"),
    "bad_swapped_rows.dat": (21, "x turns back"),
    "bad_same_line.dat": (0, "both surfaces are the same line"),
    "bad_one_surface.dat": (0, "one of the two surfaces is missing"),
    "bad_few.dat": (0, "only 3 points were found"),
    "bad_empty.dat": (0, "only 0 points were found"),
    "bad_only_title.dat": (0, "only 0 points were found"),
    "bad_row_blocks.dat": (4, "8 numbers stand in one row"),
    "bad_export.csv": (56, '"Camber line," holds no two numbers'),
}
TITLES = {
    "no_title.dat": "no_title",
    "commas.csv": "commas",
    "two_titles.dat": "NACA 2412",
    "three_titles.dat": "NACA 2412",
    "remarks.dat": "NACA 2412",
    "commas_and_blanks.csv": "NACA 2412",
    "title_with_numbers.dat": "20-32C (12.0%) | AIRFOIL RG 15 8.9%",
    "title_of_two_numbers.dat": "00 12",
    "title_latin1.dat": "G\u00f6ttingen",
    "title_utf8_mark.dat": "G\u00f6ttingen",
}
FILES = sorted(p.name for p in DATA.iterdir() if p.suffix in (".dat", ".csv"))
READ = [name for name in FILES if name not in REFUSED and name not in CHANGED]


def test_every_file_is_expected_somewhere() -> None:
    assert set(REFUSED) == {name for name in FILES if name.startswith("bad_")}
    assert {*SAID, *CHANGED, *TITLES} <= set(FILES)
    assert len(READ) > 30


@pytest.mark.parametrize("name", READ)
def test_every_form_is_the_same_section(name: str) -> None:
    """The files hold ordinates of a program; the equations are held against what is read: within
    0.01 % of the chord, of which 0.0083 % is that millimetres take the chord for the unit."""
    section = read_file(DATA / name)
    assert np.abs(section.contour(61) - naca("2412").contour(61)).max() < 1e-4
    assert section.notes == SAID.get(name, ())


def test_forms_that_lose_no_digit_are_read_alike() -> None:
    one = read_file(DATA / "one_block.dat").contour(61)
    for name in READ:
        if name not in ("millimetres.dat", "inches.dat"):
            assert np.abs(read_file(DATA / name).contour(61) - one).max() < 1e-9, name


@pytest.mark.parametrize("name", CHANGED)
def test_what_is_unusual_is_said(name: str) -> None:
    assert CHANGED[name] in read_file(DATA / name).notes


def test_nothing_is_moved_or_turned() -> None:
    """The datum is reported and kept."""
    flat, low = read_file(DATA / "flat_bottom.dat"), read_file(DATA / "tail_low.dat")
    plain = read_file(DATA / "one_block.dat")
    assert np.abs(flat.contour(41) - plain.contour(41) - [0.0, 0.0285]).max() < 1e-9
    assert low.upper[-1, 1] == pytest.approx(plain.upper[-1, 1] - 0.026, abs=1e-5)


@pytest.mark.parametrize("name", ["last_point_lost.dat", "last_point_lost_under.dat"])
def test_a_lost_last_point_is_closed(name: str) -> None:
    section = read_file(DATA / name)
    assert section.trailing_edge_gap < 1e-9
    assert section.upper[-1] == pytest.approx([1.0, 0.0], abs=1e-9)


def test_an_open_edge_is_kept() -> None:
    """The files end at (100.0084, 0.1257) and (99.9916, -0.1257) percent."""
    gap = np.hypot(0.2514, 0.0168) / 100
    assert read_file(DATA / "one_block.dat").trailing_edge_gap == pytest.approx(gap, abs=2e-6)


@pytest.mark.parametrize("name", TITLES)
def test_titles(name: str) -> None:
    section = read_file(DATA / name)
    assert section.name == TITLES[name]
    assert section.source == ("recomputation" if name == "commas_and_blanks.csv" else name)


@pytest.mark.parametrize("name", REFUSED)
def test_what_is_no_section_is_refused_with_its_line(name: str) -> None:
    line, words = REFUSED[name]
    with pytest.raises(DesignError) as error:
        read_file(DATA / name)
    (problem,) = error.value.problems
    assert (problem.file, problem.line) == (name, line)
    assert words[1:] in problem.says
    assert problem.hint


def test_missing_files_and_folders(tmp_path: Path) -> None:
    for path, words in ((tmp_path / "none.dat", "cannot be read"), (tmp_path, "is a folder"),
                        (tmp_path / ("n" * 300 + ".dat"), "cannot be read"),
                        (Path("a\0b.dat"), "cannot be read")):
        with pytest.raises(DesignError, match=words) as error:
            read_file(path)
        assert error.value.problems[0].file == str(path)


def test_bytes_that_are_no_text(tmp_path: Path) -> None:
    path = tmp_path / "s.dat"
    path.write_bytes(bytes(range(256)) * 40)
    with pytest.raises(DesignError):
        read_file(path)


def test_a_folder_of_ones_own_stands_beside_the_shipped(tmp_path: Path) -> None:
    data = (DATA / "one_block.dat").read_bytes()
    (tmp_path / "Mine.DAT").write_bytes(data)
    (tmp_path / "deeper").mkdir()
    (tmp_path / "deeper" / "e193.dat").write_bytes(data)
    for name in ("Mine", "mine", "MINE.dat", "deeper/e193", "deeper/e193.dat", " mine "):
        assert find(name, (tmp_path,)).name == "NACA 2412", name
    assert find("clarky", (tmp_path,)).name == "Clark Y"
    assert find("ClarkY", (tmp_path / "not there", tmp_path)).name == "Clark Y"
    with pytest.raises(DesignError, match='Did you mean "Mine"'):
        find("mind", (tmp_path,))


def test_ones_own_folder_wins(tmp_path: Path) -> None:
    (tmp_path / "clarky.txt").write_bytes((DATA / "one_block.dat").read_bytes())
    assert find("clarky", (tmp_path,)).name == "NACA 2412"
    (tmp_path / "CLARKY.csv").write_bytes((DATA / "title_latin1.dat").read_bytes())
    assert find("clarky", (tmp_path,)).name == "NACA 2412"
    assert find("CLARKY", (tmp_path,)).name == "G\u00f6ttingen"


def test_a_path_from_here(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.chdir(tmp_path)
    Path("no_ending").write_bytes((DATA / "one_block.dat").read_bytes())
    assert find("no_ending").name == "NACA 2412"
    with pytest.raises(DesignError, match="not_there.dat: The file cannot be read"):
        find("not_there.dat")
    for name in ("", "n" * 300, f"a{os.sep}b", "a\0b"):
        with pytest.raises(DesignError, match="There is no section"):
            find(name)
