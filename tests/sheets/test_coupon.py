"""The fit coupon, held against a simulated beam."""

from __future__ import annotations

from pathlib import Path

import ezdxf
import pytest
import shapely
from shapely.geometry import LineString, Point, Polygon

from buildgen.cli import run
from buildgen.design.schema import Laser
from buildgen.part import Plate
from buildgen.problems import DesignError
from buildgen.sheets.coupon import HOLE_GRADES, PEG_GRADES, SLOT_GRADES, coupon, grade_label
from buildgen.sheets.drawing import draw
from buildgen.shelf import load_shelf

PLY = load_shelf().material("birch-ply")


@pytest.mark.parametrize("thickness", [1.0, 3.0, 6.0, 10.0])
def test_it_fits_a_balsa_sheet_and_nothing_touches(thickness: float) -> None:
    made = coupon(PLY, thickness)
    assert made.sheet.height_mm <= 100.0
    assert made.sheet.faults(1.4, 3.9) == []
    pieces = draw(made.sheet, made.kit, Laser()).pieces
    whole = shapely.union_all(made.sheet.placed_shapes())
    clear = whole.boundary.buffer(0.3)
    for piece in pieces:
        assert piece.id_inside
        for stroke in piece.strokes:
            line = LineString(stroke)
            assert whole.contains(line), piece.part
            assert not line.intersects(clear), piece.part


@pytest.mark.parametrize("kerf", [0.1, 0.2, 0.3])
def test_what_is_read_off_is_what_the_beam_took(kerf: float) -> None:
    made = coupon(PLY, 3.0)
    plate = next(p for p in made.sheet.parts if p.id == "COUPON")
    assert isinstance(plate.form, Plate)
    left = plate.form.outline.buffer(-kerf / 2, join_style="mitre")  # no kerf in the path
    slots = sorted((Polygon(r) for r in left.interiors), key=lambda p: p.bounds[0])
    for slot, grade in zip(slots, SLOT_GRADES, strict=True):
        x0, _, x1, _ = slot.bounds
        play = (x1 - x0 - 3.0) / 2
        assert play == pytest.approx((grade + kerf) / 2, abs=1e-6)
    bars = [p for p in made.sheet.parts if p.id[1:].isdigit()]
    row = sum(10.0 - kerf for _ in bars)
    assert (100 - row) / 10 == pytest.approx(kerf)
    # the largest peg that enters the socket: 8 + g - kerf <= 8 + kerf
    enters = max(g for g in PEG_GRADES if 8 + g - kerf <= 8 + kerf + 1e-9)
    assert enters / 2 == pytest.approx(kerf, abs=0.05)


def test_every_grade_is_there_and_told_in_the_table() -> None:
    made = coupon(PLY, 3.0)
    plate = next(p for p in made.sheet.parts if p.id == "COUPON")
    assert isinstance(plate.form, Plate)
    texts = [m.text for m in plate.form.marks]
    for grade in SLOT_GRADES:
        assert grade_label(grade) in texts
    assert len(plate.form.circles) == 4 * len(HOLE_GRADES)
    for x, y, r in plate.form.circles:
        assert plate.form.outline.contains(Point(x, y).buffer(r + 1.0))
    for words in ("kerf_mm = (100 - L) / 10", "press_mm", "slip_mm", "[[stock.sheet]]"):
        assert words in made.text


def test_a_banned_material_gets_no_coupon() -> None:
    with pytest.raises(DesignError, match="must not go under a laser"):
        coupon(load_shelf().material("foam-sheet"), 3.0)
    with pytest.raises(DesignError, match="up to 10 mm"):
        coupon(PLY, 12.0)


def test_by_command(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    assert run(["cut", "--coupon", "balsa", "--thickness", "2.1", "-o", str(tmp_path)]) == 0
    assert "kerf_mm = (100 - L) / 10" in capsys.readouterr().out
    folder = tmp_path / "coupon-balsa-2.1"
    assert {p.name for p in folder.iterdir()} == {"coupon.dxf", "coupon.svg", "coupon.txt"}
    assert not ezdxf.readfile(folder / "coupon.dxf").audit().errors
    assert run(["cut"]) == 2
    assert run(["cut", "--coupon", "foam-sheet", "-o", str(tmp_path)]) == 2
