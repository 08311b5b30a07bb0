"""Full-size plans: true to size on paper, with everything that is pinned on them."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pypdfium2
import pytest

from buildgen import Build
from buildgen.packet.plans import PAPERS, plans_of, write_plans
from buildgen.part import Plate

DPI = 300


@pytest.fixture(scope="module")
def folder(sedge: Build, tmp_path_factory: pytest.TempPathFactory) -> Path:
    room = tmp_path_factory.mktemp("plans")
    write_plans(sedge, "A4", room)
    return room


def page(path: Path, number: int) -> np.ndarray:
    """A page as rendered, rows from the top, 0 for black."""
    document = pypdfium2.PdfDocument(str(path))
    return np.asarray(document[number].render(scale=DPI / 72).to_pil().convert("L"))


def test_the_bar_measures_100_mm(folder: Path) -> None:
    dark = page(folder / "plans-A4.pdf", 0) < 128
    # Across the long ticks, which stand at 0, 50 and 100 mm, 12 mm above the paper's edge.
    row = dark[-round(14.1 / 25.4 * DPI)]
    edges = np.flatnonzero(np.diff(np.r_[0, row.astype(np.int8), 0]))
    ticks = (edges[::2] + edges[1::2] - 1) / 2 / DPI * 25.4
    assert ticks[0] == pytest.approx(12.0, abs=0.2)
    assert ticks[1] - ticks[0] == pytest.approx(50.0, abs=0.1)
    assert ticks[2] - ticks[0] == pytest.approx(100.0, abs=0.1)


def test_every_wing_board_shows_its_ribs_and_spars(sedge: Build) -> None:
    plans = {p.name: {part.id for part, _ in p.shapes} for p in plans_of(sedge)}
    right = plans["wing, panel 1 right"]
    ribs = {p.id for p in sedge.parts if p.id.startswith("R") and p.id.endswith("R")}
    assert len(ribs) > 10
    assert ribs <= right
    assert {"SR1at", "SR1ab", "TE1R"} <= right
    assert {i.replace("R", "L") for i in ("TE1R", "SR1at")} & plans["wing, panel 1 left"]
    assert {"T1", "T2"} <= plans["tail, from above"]


def test_both_sides_of_every_panel_are_drawn(marram: Build) -> None:
    names = [p.name for p in plans_of(marram)]
    assert [n for n in names if n.startswith("wing")] == [
        "wing, panel 1 right", "wing, panel 1 left", "wing, panel 2 right", "wing, panel 2 left"]


def test_a_panel_s_length_is_true_in_spite_of_dihedral(sedge: Build) -> None:
    plan = next(p for p in plans_of(sedge) if p.name == "wing, panel 1 right")
    edge = next(s for p, s in plan.shapes if p.id == "TE1R")
    assert sedge.design is not None
    panel = sedge.design.definition.wing.panel[0]
    assert panel.dihedral_deg == 5
    # From above it would be 1.7 mm shorter; its root is mitred to the other half.
    assert edge.bounds[2] - edge.bounds[0] == pytest.approx(panel.span_mm, abs=0.6)


def test_a_plate_on_the_plan_has_its_cut_outline(sedge: Build) -> None:
    plan = next(p for p in plans_of(sedge) if p.name == "tail, from above")
    shape = next(s for p, s in plan.shapes if p.id == "T2")
    form = sedge.by_id["T2"].form
    assert isinstance(form, Plate)
    drawn, cut = sorted(np.ptp(np.array(shape.bounds).reshape(2, 2), axis=0)), sorted(
        np.ptp(np.array(form.outline.bounds).reshape(2, 2), axis=0))
    assert drawn == pytest.approx(cut, abs=0.2)
    assert shape.area == pytest.approx(form.area_mm2, rel=0.01)


def test_each_board_fits_one_page_of_the_roll(sedge: Build, folder: Path) -> None:
    document = pypdfium2.PdfDocument(str(folder / "plans-roll.pdf"))
    plans = plans_of(sedge)
    assert len(document) == len(plans)
    for number, plan in enumerate(plans):
        wide, high = document[number].get_size()
        assert wide / 72 * 25.4 >= plan.width_mm
        assert high / 72 * 25.4 >= plan.height_mm


def test_names_and_words_can_be_selected(sedge: Build, folder: Path) -> None:
    text = pypdfium2.PdfDocument(str(folder / "plans-roll.pdf"))[0].get_textpage().get_text_range()
    assert sedge.title.line in text
    assert "100 mm" in text


@pytest.mark.parametrize("paper", PAPERS)
def test_the_same_kit_gives_the_same_bytes(sedge: Build, paper: str, tmp_path: Path) -> None:
    for name in ("a", "b"):
        (tmp_path / name).mkdir()
        write_plans(sedge, paper, tmp_path / name)
    one, two = ((tmp_path / n / f"plans-{paper}.pdf").read_bytes() for n in "ab")
    assert one == two
