"""Cut sheets read by an independent program: GDAL's DXF driver, through pyogrio."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest
import shapely
from pyogrio import set_gdal_config_options
from pyogrio.raw import read as gdal_read
from shapely.geometry import Polygon

from buildgen.design import shipped_designs
from buildgen.design.schema import Laser
from buildgen.sheets.dxf import sheet_dxf
from tests.sheets.conftest import small_kit, small_sheets
from tests.sheets.test_sheets import QUICK, laid


def gdal_lines(path: Path) -> list[tuple[str, shapely.Geometry]]:
    """(layer, geometry) of every entity as GDAL sees it."""
    meta, _, geometry, fields = gdal_read(path, encoding="utf-8")
    layers = fields[list(meta["fields"]).index("Layer")]
    return list(zip(layers, shapely.from_wkb(geometry), strict=True))


@pytest.mark.parametrize("name", shipped_designs())
def test_gdal_sees_the_same_closed_areas_in_the_same_places(name: str, tmp_path: Path) -> None:
    kit, sheets = laid(name)
    for sheet in sheets:
        path = tmp_path / f"{sheet.file}.dxf"
        path.write_text(sheet_dxf(sheet, kit, QUICK))
        found = gdal_lines(path)
        outside = [Polygon(g.coords) for layer, g in found if layer == "CUT_OUTSIDE"]
        assert len(outside) == len(sheet.parts)
        nominal = sheet.placed_shapes()
        for cut, part, shape in zip(outside, sheet.parts, nominal, strict=True):
            whole = Polygon(shape.exterior)
            left = cut.buffer(-sheet.kerf_mm / 2, join_style="mitre")
            assert left.area == pytest.approx(whole.area, rel=1e-4), part.id
            assert np.asarray(left.centroid.coords[0]) == pytest.approx(
                np.asarray(whole.centroid.coords[0]), abs=0.01), part.id
            assert left.bounds == pytest.approx(whole.bounds, abs=0.01), part.id
        inside = [g for layer, g in found if layer == "CUT_INSIDE"]
        assert len(inside) == sum(len(c.inside) + len(c.circles) for c in sheet.paths)
        assert all(g.is_ring for g in inside)


@pytest.mark.parametrize("version", ["R12", "R2000"])
@pytest.mark.parametrize("arc_mm", [0.0, 0.01])
def test_gdal_reads_older_versions_and_arcs_alike(
    version: str, arc_mm: float, tmp_path: Path
) -> None:
    laser = Laser(dxf=version, arc_mm=arc_mm)  # type: ignore[arg-type]
    set_gdal_config_options({"OGR_ARC_STEPSIZE": 0.2})  # degrees; by default chords of 4
    for sheet in small_sheets():
        path = tmp_path / f"{sheet.file}.dxf"
        path.write_text(sheet_dxf(sheet, small_kit(), laser))
        found = gdal_lines(path)
        outside = [Polygon(g.coords) for layer, g in found if layer == "CUT_OUTSIDE"]
        assert len(outside) == len(sheet.parts)
        for cut, shape in zip(outside, sheet.placed_shapes(), strict=True):
            left = cut.buffer(-sheet.kerf_mm / 2, join_style="mitre")
            assert left.area == pytest.approx(Polygon(shape.exterior).area,
                                              rel=1e-4 if arc_mm == 0 else 2e-4)
            assert left.bounds == pytest.approx(shape.bounds, abs=0.01 if arc_mm == 0 else 0.02)
