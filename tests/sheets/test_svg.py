"""SVG: the same cuts as the DXF, in true millimetres."""

from __future__ import annotations

import xml.etree.ElementTree as ET

import numpy as np
import pytest

from buildgen.design.schema import Laser
from buildgen.sheets.drawing import draw
from buildgen.sheets.svg import TITLE_ROOM_MM, sheet_svg
from tests.sheets.conftest import small_kit, small_sheets

SVG = "{http://www.w3.org/2000/svg}"


def points(d: str, height: float) -> np.ndarray:
    """Points of a path of straight lines, y up again."""
    numbers = [step.split() for step in d.replace("Z", "").strip("M ").split(" L")]
    return np.array([(float(x), height - float(y)) for x, y in numbers])


def test_size_groups_and_paths_are_those_of_the_drawing() -> None:
    kit, laser = small_kit(), Laser()
    for sheet in small_sheets():
        root = ET.fromstring(sheet_svg(sheet, kit, laser))
        high = sheet.height_mm + TITLE_ROOM_MM
        assert root.get("width") == f"{sheet.width_mm:g}mm"
        assert root.get("viewBox") == f"0 0 {sheet.width_mm:g} {high:g}"
        groups = {g.get("id"): g for g in root.findall(f"{SVG}g")}
        assert list(groups) == ["SHEET", "MARK", "CUT_INSIDE", "CUT_OUTSIDE"]
        drawn = draw(sheet, kit, laser).pieces
        outside = groups["CUT_OUTSIDE"].findall(f"{SVG}path")
        assert [p.get("id") for p in outside] == [p.part for p in drawn]
        for element, piece in zip(outside, drawn, strict=True):
            assert points(element.get("d") or "", high) == pytest.approx(
                piece.path.outside, abs=1e-4)
        circles = groups["CUT_INSIDE"].findall(f"{SVG}circle")
        radii = sorted(float(c.get("r") or 0) for c in circles)
        wanted = sorted(r for p in drawn for *_, r in p.path.circles)
        assert radii == pytest.approx(wanted, abs=1e-4)


def test_bridges_open_the_outside() -> None:
    sheet = small_sheets()[0]
    text = sheet_svg(sheet, small_kit(), Laser(bridges=2))
    outside = ET.fromstring(text).findall(f"{SVG}g")[3].findall(f"{SVG}path")
    assert len(outside) == 2 * len(sheet.parts)
    assert not any("Z" in (p.get("d") or "") for p in outside)
