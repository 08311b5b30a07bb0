"""Cut sheets: recorded, read again, held against a changed design, leftovers used."""

from __future__ import annotations

import tomllib
from dataclasses import replace
from pathlib import Path

import pytest
from shapely.affinity import scale
from shapely.geometry import Polygon, box

from buildgen.cli import run
from buildgen.design.load import SHIPPED
from buildgen.design.schema import Laser, Offcut, Stock
from buildgen.part import Kit, Part, Plate
from buildgen.problems import DesignError
from buildgen.sheets.frozen import kept_text, reconciled
from buildgen.sheets.layout import Sheet, lay_out
from buildgen.sheets.leftovers import leftovers, leftovers_text
from buildgen.sheets.record import frozen_text, read_frozen
from buildgen.shelf import load_shelf
from tests.sheets.conftest import plate, small_definition, small_kit, small_sheets


def record(tmp_path: Path, sheets: tuple[Sheet, ...]) -> tuple[Sheet, ...]:
    path = tmp_path / "small.cut.toml"
    path.write_text(frozen_text(sheets, "small rev A (01234567)"), "utf-8")
    return read_frozen(path)


def changed(kit: Kit, **shapes: Polygon) -> Kit:
    def new(part: Part) -> Part:
        if part.id not in shapes:
            return part
        assert isinstance(part.form, Plate)
        return replace(part, form=replace(part.form, outline=shapes[part.id]))

    return replace(kit, parts=tuple(new(p) for p in kit.parts))


def test_a_record_keeps_places_and_shapes(tmp_path: Path) -> None:
    read = record(tmp_path, small_sheets())
    assert [s.file for s in read] == [s.file for s in small_sheets()]
    for old, new in zip(small_sheets(), read, strict=True):
        assert [(p.part, p.x_mm, p.y_mm, p.rotation_deg) for p in old.placements] == [
            (p.part, p.x_mm, p.y_mm, p.rotation_deg) for p in new.placements]
        for one, two in zip(old.placed_shapes(), new.placed_shapes(), strict=True):
            assert one.symmetric_difference(two).area < 0.006 * one.length
    again = frozen_text(read, "another")
    assert again == frozen_text(small_sheets(), "small rev A (01234567)"), "stable when rewritten"


def test_an_unchanged_design_cuts_nothing_again(tmp_path: Path) -> None:
    kit = small_kit()
    sheets, kept = reconciled(record(tmp_path, small_sheets()), kit.by_id)
    assert {k.state for k in kept} == {"still good"}
    laid = lay_out(kit, small_definition(), load_shelf(), cut=sheets)
    assert all(s.cut_from for s in laid)
    assert sorted(p.part for s in laid for p in s.placements) == sorted(kit.by_id)


def test_changes_are_told_part_by_part_and_only_these_are_cut(tmp_path: Path) -> None:
    kit = small_kit()
    ellipse = kit.by_id["R1"].form.outline  # type: ignore[union-attr]
    new = changed(kit, R1=scale(ellipse, 1.01, 1.0), F2=box(0, 0, 30, 30).difference(
        box(2, 2, 6, 6)), F3=box(0, 0, 24.01, 50))
    parts = tuple(p for p in new.parts if p.id != "TE1")
    new = replace(new, parts=(*parts, plate("N1", box(0, 0, 40, 20))))
    sheets, kept = reconciled(record(tmp_path, small_sheets()), new.by_id)
    states = {k.part: k.state for k in kept}
    assert states == {
        "R1": "must be re-cut", "F2": "must be re-cut", "TE1": "no longer in the design",
        "R2": "still good", "S-long-1": "still good", "F1": "still good", "F3": "still good",
    }
    why = {k.part: k.why for k in kept}
    assert why["R1"] == "its outline differs by 0.70 mm"  # one hundredth of 70 mm
    assert why["F2"] == "other openings"
    told = kept_text(kept)
    assert "4 of 7 parts are still good" in told
    assert "TE1 on balsa-3-01: no longer in the design" in told
    laid = lay_out(new, small_definition(), load_shelf(), cut=sheets)
    fresh = [s for s in laid if not s.cut_from]
    assert sorted(p.part for s in fresh for p in s.placements) == ["F2", "N1", "R1"]
    assert len({s.file for s in laid}) == len(laid), "names are not used twice"
    assert all(s.faults(1.5, 5.0) == [] for s in laid)


def test_a_part_cut_again_is_no_longer_told(tmp_path: Path) -> None:
    kit = changed(small_kit(), F3=box(0, 0, 26, 50))
    sheets, _ = reconciled(record(tmp_path, small_sheets()), kit.by_id)
    fresh = [s for s in lay_out(kit, small_definition(), load_shelf(), cut=sheets)
             if not s.cut_from]
    assert [p.part for s in fresh for p in s.placements] == ["F3"]
    again, kept = reconciled(record(tmp_path, (*small_sheets(), *fresh)), kit.by_id)
    assert [k.state for k in kept if k.part == "F3"] == ["cut again since", "still good"]
    assert "7 of 7 parts are still good" in kept_text(kept)
    assert all(s.cut_from for s in lay_out(kit, small_definition(), load_shelf(), cut=again))


def test_another_material_or_thickness_must_be_cut_again(tmp_path: Path) -> None:
    kit = small_kit()
    thicker = replace(kit, parts=tuple(
        replace(p, form=replace(p.form, thickness_mm=2.5)) for p in kit.parts))  # type: ignore[arg-type]
    _, kept = reconciled(record(tmp_path, small_sheets()), thicker.by_id)
    assert {k.state for k in kept} == {"must be re-cut"}
    assert {k.why for k in kept} == {"now balsa 2.5 mm", "now birch-ply 2.5 mm"}


def test_leftovers_are_clear_of_the_parts_and_come_back_as_stock(tmp_path: Path) -> None:
    for sheet in small_sheets():
        pieces = leftovers(sheet, 1.5)
        assert pieces
        for piece in pieces:
            assert piece.is_valid
            assert not piece.interiors
            assert min(piece.distance(s) for s in sheet.placed_shapes()) > 1.5 - 1e-6
    tables = tomllib.loads(leftovers_text(small_sheets(), 1.5))["stock"]["offcut"]
    offcuts = tuple(Offcut.model_validate(t) for t in tables)
    definition = small_definition().model_copy(
        update={"stock": Stock(offcut=offcuts), "laser": Laser()})
    kit = replace(small_kit(), parts=(plate("N1", box(0, 0, 40, 20)),))
    (again,) = lay_out(kit, definition, load_shelf())
    assert again.offcut is not None
    assert again.faults(1.5, 5.0) == []


def test_a_part_in_the_middle_is_no_hole_in_a_leftover() -> None:
    ply = small_sheets()[1]
    at = replace(ply.placements[0], x_mm=280.0, y_mm=150.0, rotation_deg=0.0)
    alone = replace(ply, placements=(at,), parts=(ply.parts[0],))
    pieces = leftovers(alone, 1.5)
    assert len(pieces) >= 2
    assert all(not p.interiors for p in pieces)
    assert sum(p.area for p in pieces) > 0.9 * (600 * 300 - 90 * 80)


def test_a_record_that_cannot_be_read_says_so(tmp_path: Path) -> None:
    path = tmp_path / "x.cut.toml"
    path.write_text('[[sheet]]\nfile = "a"\n')
    with pytest.raises(DesignError, match="cannot be read"):
        read_frozen(path)
    assert read_frozen(tmp_path / "none.cut.toml") == ()


def test_freeze_by_command(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    mine = tmp_path / "sedge.toml"
    text = (SHIPPED / "sedge.toml").read_text("utf-8")
    mine.write_text(text, "utf-8")
    out = str(tmp_path / "out")
    assert run(["cut", str(mine), "--freeze", "lite-ply-3-01", "-o", out]) == 0
    assert "are still good" in capsys.readouterr().out
    folder = tmp_path / "out" / "sedge-cut"
    written = {p.name for p in (folder / "sheets").iterdir()}
    assert "lite-ply-3-01.dxf" not in written
    assert "balsa-2-01.dxf" in written
    assert "[[stock.offcut]]" in (folder / "leftovers.toml").read_text("utf-8")
    before = (tmp_path / "sedge.cut.toml").read_text("utf-8")
    assert run(["cut", str(mine), "--freeze", "lite-ply-3-01", "-o", out]) == 2
    assert "recorded as cut already" in capsys.readouterr().err
    assert run(["cut", str(mine), "--freeze", "lite-ply-3-09", "-o", out]) == 2
    assert 'no sheet "lite-ply-3-09"' in capsys.readouterr().err
    assert (tmp_path / "sedge.cut.toml").read_text("utf-8") == before


def test_a_shipped_design_keeps_no_record(capsys: pytest.CaptureFixture[str]) -> None:
    assert run(["cut", "sedge", "--freeze", "balsa-2-01"]) == 2
    assert "keeps no record" in capsys.readouterr().err
