"""Sheets a laser operator trusts: every DXF of every shipped design."""

from __future__ import annotations

import io
from collections.abc import Iterable
from dataclasses import replace
from functools import cache

import ezdxf
import numpy as np
import pytest
import shapely
from shapely.geometry import LineString, Point, Polygon

from buildgen import Build
from buildgen.design import shipped_designs
from buildgen.design.schema import Laser
from buildgen.sheets.drawing import CUT_INSIDE, CUT_OUTSIDE, MARK, SHEET
from buildgen.sheets.dxf import sheet_dxf
from buildgen.sheets.layout import Sheet, lay_out
from buildgen.sheets.marks import CLEAR_MM
from buildgen.sheets.svg import sheet_svg
from tests.conftest import shipped_kit

QUICK = Laser(effort="quick")


@cache
def laid(name: str) -> tuple[Build, tuple[Sheet, ...]]:
    kit = shipped_kit(name)
    assert kit.design is not None
    definition = kit.design.definition.model_copy(update={"laser": QUICK})
    return kit, lay_out(kit, definition, kit.design.shelf)


@pytest.fixture(scope="module", params=shipped_designs())
def cut(request: pytest.FixtureRequest) -> tuple[Build, tuple[Sheet, ...]]:
    return laid(request.param)


def read(sheet: Sheet, kit: Build, laser: Laser = QUICK):  # type: ignore[no-untyped-def]
    return ezdxf.read(io.StringIO(sheet_dxf(sheet, kit, laser)))


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


CLEAR = CLEAR_MM - 0.1  # lettering; lines of neighbours end at a cut's clearance as well


@pytest.fixture(scope="module")
def drawn(cut) -> list[tuple[Sheet, object]]:  # type: ignore[no-untyped-def]
    """Each sheet of a design with its DXF as a reader sees it."""
    kit, sheets = cut
    return [(s, read(s, kit)) for s in sheets]


def line_of(entity) -> LineString:  # type: ignore[no-untyped-def]
    if entity.dxftype() == "CIRCLE":
        x, y, _ = entity.dxf.center
        return LineString(Point(x, y).buffer(entity.dxf.radius, 64).exterior.coords)
    points = [(x, y) for x, y, *_ in entity.get_points("xy")]
    return LineString([*points, points[0]] if entity.closed else points)


def lines_on(document, layers: Iterable[str]) -> list[LineString]:  # type: ignore[no-untyped-def]
    return [line_of(e) for e in document.modelspace() if e.dxf.layer in layers]


def twice(lines: list[LineString]) -> float:
    """Length that is drawn more than once, partial overlaps counted, mm."""
    legs = [LineString(line.coords[i : i + 2]) for line in lines
            for i in range(len(line.coords) - 1)]
    a, b = shapely.STRtree(legs).query(legs, predicate="intersects")
    pairs = [(i, j) for i, j in zip(a.tolist(), b.tolist(), strict=True) if i < j]
    return sum(float(legs[i].intersection(legs[j]).length) for i, j in pairs)


def test_twice_sees_a_partial_overlap() -> None:
    assert twice([LineString([(0, 0), (9, 0)]), LineString([(12, 0), (6, 0)])]) == 3.0


def test_audit_is_clean_and_every_contour_is_closed_and_simple(drawn) -> None:  # type: ignore[no-untyped-def]
    for sheet, document in drawn:
        audit = document.audit()
        assert not audit.errors
        assert not audit.fixes
        cuts = lines_on(document, (CUT_INSIDE, CUT_OUTSIDE))
        assert len(cuts) == sum(1 + len(c.inside) + len(c.circles) for c in sheet.paths)
        assert all(c.is_ring and Polygon(c).is_valid for c in cuts), sheet.file


def test_nothing_is_cut_or_engraved_twice(drawn) -> None:  # type: ignore[no-untyped-def]
    for sheet, document in drawn:
        cuts = lines_on(document, (CUT_INSIDE, CUT_OUTSIDE))
        a, b = shapely.STRtree(cuts).query(cuts, predicate="intersects")
        assert np.array_equal(a, b), f"{sheet.file}: two contours touch"
        assert twice(lines_on(document, (MARK,))) < 0.2, sheet.file


def test_marks_keep_clear_of_every_cut(drawn) -> None:  # type: ignore[no-untyped-def]
    """Inside the parts or, for parts too slim, on the bare sheet: never over an edge."""
    for sheet, document in drawn:
        cuts = shapely.union_all(lines_on(document, (CUT_INSIDE, CUT_OUTSIDE)))
        for mark in lines_on(document, (MARK,)):
            assert mark.distance(cuts) > CLEAR - sheet.kerf_mm, sheet.file
            assert sheet.outline.contains(mark), sheet.file


def test_inside_comes_before_outside(drawn) -> None:  # type: ignore[no-untyped-def]
    for sheet, document in drawn:
        gone: list[Polygon] = []
        for entity in document.modelspace():
            if entity.dxf.layer not in (CUT_INSIDE, CUT_OUTSIDE):
                continue
            ring = Polygon(line_of(entity))
            assert not any(g.contains(ring) for g in gone), sheet.file
            if entity.dxf.layer == CUT_OUTSIDE:
                gone.append(ring)


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
