"""Sheets a laser operator trusts: every DXF of every shipped design."""

from __future__ import annotations

import io
from dataclasses import replace

import ezdxf
import numpy as np
import pytest
import shapely
from shapely.geometry import LineString, Polygon

from buildgen import Build
from buildgen.design.schema import Laser
from buildgen.sheets.drawing import CUT_INSIDE, CUT_OUTSIDE, MARK, SHEET
from buildgen.sheets.dxf import sheet_dxf
from buildgen.sheets.layout import Sheet, lay_out
from buildgen.sheets.letters import write
from buildgen.sheets.marks import strokes_of
from buildgen.sheets.svg import sheet_svg
from tests.conftest import shipped_kit

QUICK = Laser(effort="quick")


def laid(name: str) -> tuple[Build, tuple[Sheet, ...]]:
    kit = shipped_kit(name)
    assert kit.design is not None
    definition = kit.design.definition.model_copy(update={"laser": QUICK})
    return kit, lay_out(kit, definition, kit.design.shelf)


@pytest.fixture(scope="module", params=["marram", "samphire", "sedge"])
def cut(request: pytest.FixtureRequest) -> tuple[Build, tuple[Sheet, ...]]:
    return laid(request.param)


def read(sheet: Sheet, kit: Build, laser: Laser = QUICK):  # type: ignore[no-untyped-def]
    return ezdxf.read(io.StringIO(sheet_dxf(sheet, kit, laser)))


def rings(document, layer: str) -> list[Polygon]:  # type: ignore[no-untyped-def]
    found = []
    for entity in document.modelspace().query(f'*[layer=="{layer}"]'):
        if entity.dxftype() == "CIRCLE":
            x, y, _ = entity.dxf.center
            found.append(shapely.Point(x, y).buffer(entity.dxf.radius, 64))
        else:
            assert entity.closed
            found.append(Polygon([(x, y) for x, y, *_ in entity.get_points("xy")]))
    return found


def test_spacing_and_margin_are_kept(cut) -> None:  # type: ignore[no-untyped-def]
    _, sheets = cut
    for sheet in sheets:
        assert sheet.faults(QUICK.spacing_mm, QUICK.margin_mm) == []


def test_the_check_of_spacing_can_fail(cut) -> None:  # type: ignore[no-untyped-def]
    _, sheets = cut
    full = max(sheets, key=lambda s: len(s.parts))
    assert full.faults(60.0, QUICK.margin_mm)
    assert full.faults(QUICK.spacing_mm, 49.0)


def test_grain_is_kept_within_the_lean(cut) -> None:  # type: ignore[no-untyped-def]
    kit, sheets = cut
    for sheet in sheets:
        material = kit.design.shelf.material(sheet.material)
        for part, at in zip(sheet.parts, sheet.placements, strict=True):
            if part.form.grain_deg is None:
                continue
            off = (part.form.grain_deg + at.rotation_deg + 90) % 180 - 90
            assert abs(off) <= material.lean_deg + 1e-6


def test_audit_units_and_extents(cut) -> None:  # type: ignore[no-untyped-def]
    kit, sheets = cut
    for sheet in sheets:
        document = read(sheet, kit)
        assert not document.audit().errors
        assert document.header["$INSUNITS"] == 4
        assert tuple(document.header["$EXTMIN"])[:2] == (0, 0)
        assert document.header["$EXTMAX"][0] == pytest.approx(sheet.width_mm)


@pytest.mark.parametrize("version", ["R12", "R2000", "R2010"])
def test_every_version_holds_the_same_cuts(version: str) -> None:
    kit, sheets = laid("sedge")
    sheet = max(sheets, key=lambda s: len(s.parts))
    document = read(sheet, kit, Laser(effort="quick", dxf=version))  # type: ignore[arg-type]
    assert not document.audit().errors
    cuts = [e for e in document.modelspace() if e.dxf.layer in (CUT_INSIDE, CUT_OUTSIDE)]
    expected = sum(1 + len(c.inside) + len(c.circles) for c in sheet.paths)
    assert len(cuts) == expected


def test_contours_are_closed_simple_and_without_twins(cut) -> None:  # type: ignore[no-untyped-def]
    kit, sheets = cut
    for sheet in sheets:
        document = read(sheet, kit)
        found = [*rings(document, CUT_OUTSIDE), *rings(document, CUT_INSIDE)]
        for ring in found:
            assert ring.is_valid
            edges = np.linalg.norm(np.diff(np.asarray(ring.exterior.coords), axis=0), axis=1)
            assert edges.min() > 1e-3
        for ring, other in zip(found, found[1:], strict=False):
            assert not ring.exterior.equals(other.exterior)
        lines = [LineString(r.exterior.coords) for r in found]
        tree = shapely.STRtree(lines)
        a, b = tree.query(lines, predicate="intersects")
        assert np.array_equal(a, b), "two contours touch or overlap"


def test_inside_comes_before_outside_of_the_same_part(cut) -> None:  # type: ignore[no-untyped-def]
    kit, sheets = cut
    for sheet in sheets:
        waiting: list[Polygon] = []
        for entity in read(sheet, kit).modelspace():
            if entity.dxf.layer == CUT_INSIDE:
                waiting.append(_inner_point(entity))
            elif entity.dxf.layer == CUT_OUTSIDE:
                outside = Polygon([(x, y) for x, y, *_ in entity.get_points("xy")])
                assert all(outside.contains(p) for p in waiting)
                waiting = []
        assert waiting == []


def _inner_point(entity):  # type: ignore[no-untyped-def]
    if entity.dxftype() == "CIRCLE":
        return shapely.Point(entity.dxf.center[0], entity.dxf.center[1])
    return Polygon([(x, y) for x, y, *_ in entity.get_points("xy")]).representative_point()


SMALL_MM2 = 120.0
"""Rib tails of ailerons: too slim for their ids, which stand beside them on the sheet."""


def test_marks_lie_inside_their_parts_and_clear_of_cuts(cut) -> None:  # type: ignore[no-untyped-def]
    kit, sheets = cut
    for sheet in sheets:
        shapes = shapely.union_all([s.buffer(-0.4) for s in sheet.placed_shapes()])
        beside = 0
        for entity in read(sheet, kit).modelspace().query(f'*[layer=="{MARK}"]'):
            stroke = LineString([(x, y) for x, y, *_ in entity.get_points("xy")])
            beside += not shapes.contains(stroke)
        small = [p.label for p in sheet.placements
                 if not strokes_of(kit.by_id[p.part], 5.0, p.label)[1]]
        assert all(kit.by_id[p.part].form.area_mm2 < SMALL_MM2 for p in sheet.placements
                   if p.label in small)
        assert beside <= sum(len(write(label, 2.0)) for label in small), sheet.file


def test_name_revision_and_hash_stand_on_every_sheet(cut) -> None:  # type: ignore[no-untyped-def]
    kit, sheets = cut
    for sheet in sheets:
        strokes = [e for e in read(sheet, kit).modelspace() if e.dxf.layer == SHEET]
        assert len(strokes) > 40  # outline and the title's strokes
        svg = sheet_svg(sheet, kit, QUICK)
        assert kit.title.line in svg
        assert kit.title.short_hash in svg


def test_the_beam_leaves_the_nominal_part(cut) -> None:  # type: ignore[no-untyped-def]
    """A beam of the kerf's width along each path leaves the part, but for inner corners."""
    _, sheets = cut
    for sheet in sheets:
        for part, path in list(zip(sheet.parts, sheet.paths, strict=True))[:6]:
            left = Polygon(path.outside, path.inside)
            for x, y, r in path.circles:
                left = left.difference(shapely.Point(x, y).buffer(r, 128))
            left = left.buffer(-sheet.kerf_mm / 2, join_style="mitre")
            nominal = part.form.outline
            for x, y, r in part.form.circles:
                nominal = nominal.difference(shapely.Point(x, y).buffer(r, 128))
            missing = nominal.difference(left.buffer(0.012))
            excess = left.difference(nominal.buffer(0.012))
            assert missing.area < 0.02, part.id
            assert excess.area < 0.1, part.id


def test_equal_sheets_give_equal_bytes() -> None:
    kit, sheets = laid("sedge")
    assert sheet_dxf(sheets[0], kit, QUICK) == sheet_dxf(sheets[0], kit, QUICK)
    again = lay_out(kit, kit.design.definition.model_copy(  # type: ignore[union-attr]
        update={"laser": QUICK}), kit.design.shelf)  # type: ignore[union-attr]
    assert [s.placements for s in again] == [s.placements for s in sheets]


def test_a_part_larger_than_its_stock_is_named() -> None:
    from buildgen.problems import DesignError

    kit = shipped_kit("samphire")
    assert kit.design is not None
    small = kit.design.definition.model_copy(update={"stock": type(kit.design.definition.stock)()})
    with pytest.raises(DesignError, match="FSR") as error:
        lay_out(kit, small, kit.design.shelf)
    assert error.value.problems[0].path == "fuselage"


def test_what_must_not_be_lasered_is_refused() -> None:
    from buildgen.problems import DesignError

    kit = shipped_kit("sedge")
    assert kit.design is not None
    rib = replace(kit.by_id["R3R"], material="foam-sheet")
    with pytest.raises(DesignError, match="must not go under a laser"):
        lay_out(replace(kit, parts=(rib,)), kit.design.definition, kit.design.shelf)
