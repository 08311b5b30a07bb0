"""SVG: the same cuts as the DXF, in true millimetres."""

from __future__ import annotations

import math
import re
import xml.etree.ElementTree as ET

import numpy as np
import pytest
from shapely.geometry import Polygon

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


def arc_points(d: str) -> list[tuple[float, float]]:
    """A path of M, L and A sampled by the centre of each arc, from the SVG 2 notes on arcs."""
    points: list[tuple[float, float]] = []
    for kind, words in re.findall(r"([MLA])([^MLAZ]*)", d):
        v = [float(w) for w in words.split()]
        if kind != "A":
            points.append((v[0], v[1]))
            continue
        (x0, y0), (x1, y1), r = points[-1], (v[5], v[6]), v[0]
        chord = math.hypot(x1 - x0, y1 - y0)
        off = math.sqrt(max(r * r - chord * chord / 4, 0.0)) * (1 if v[3] == v[4] else -1)
        cx = (x0 + x1) / 2 + off * (y1 - y0) / chord
        cy = (y0 + y1) / 2 - off * (x1 - x0) / chord
        start, end = math.atan2(y0 - cy, x0 - cx), math.atan2(y1 - cy, x1 - cx)
        turn = (end - start) % (2 * math.pi) - (0 if v[4] else 2 * math.pi)
        steps = [start + turn * k / 40 for k in range(1, 41)]
        points += [(cx + r * math.cos(a), cy + r * math.sin(a)) for a in steps]
    return points


def test_arcs_enclose_what_the_lines_enclose() -> None:
    sheet = next(s for s in small_sheets() if s.material == "balsa")
    lines = sheet_svg(sheet, small_kit(), Laser())
    curved = sheet_svg(sheet, small_kit(), Laser(arc_mm=0.01))
    assert curved.count(" A") > 10
    for part in ("R1", "R2", "TE1"):
        found = [Polygon(arc_points(d)) for d in
                 re.findall(f'<path id="{part}" d="([^"]*)"', lines + curved)]
        assert len(found) == 2
        assert not re.search(r"[ML]([\d.]+ [\d.]+) L\1[ \"]", curved)
        assert found[0].symmetric_difference(found[1]).area < 0.02 * found[0].length, part
