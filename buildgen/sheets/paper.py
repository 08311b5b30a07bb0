"""Sheets at 1:1 on paper, for cutting by hand with a knife: tiled, with marks to join and check.

Outlines are nominal: a knife has no kerf.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import Any

import numpy as np

from buildgen.design.schema import Laser
from buildgen.part import Kit, Plate
from buildgen.sheets.contour import moved_points
from buildgen.sheets.drawing import Drawing, draw
from buildgen.sheets.sheet import Sheet

PAPER_MM = (297.0, 210.0)
"""A4 on its side, ISO 216."""
MARGIN_MM, OVERLAP_MM, FOOT_MM = 12.0, 10.0, 12.0
"""Printers keep 3 to 10 mm clear; common practice, no source."""
CHECK_MM = 100.0
MM = 72 / 25.4


@dataclass(frozen=True, slots=True)
class Tile:
    """The part of a sheet that one page shows, in the sheet's mm."""

    row: int
    column: int
    x_mm: float
    y_mm: float
    width_mm: float
    height_mm: float


def tiles(
    width_mm: float, height_mm: float, paper_mm: tuple[float, float] = PAPER_MM
) -> list[Tile]:
    """Pages that cover a drawing, each overlapping its neighbours, from the lower left."""
    wide = paper_mm[0] - 2 * MARGIN_MM
    high = paper_mm[1] - 2 * MARGIN_MM - FOOT_MM
    columns = max(1, math.ceil((width_mm - OVERLAP_MM) / (wide - OVERLAP_MM)))
    rows = max(1, math.ceil((height_mm - OVERLAP_MM) / (high - OVERLAP_MM)))
    return [
        Tile(r + 1, c + 1, c * (wide - OVERLAP_MM), r * (high - OVERLAP_MM), wide, high)
        for r in range(rows) for c in range(columns)
    ]


def write_paper(sheets: Sequence[Sheet], kit: Kit, laser: Laser, path: Path) -> None:
    """Every sheet with something on it as a PDF; the same sheets give the same bytes."""
    from reportlab.pdfgen.canvas import Canvas

    canvas = Canvas(str(path), pagesize=(PAPER_MM[0] * MM, PAPER_MM[1] * MM), invariant=1)
    canvas.setTitle(f"{kit.title.line}: sheets at 1:1")
    for sheet in sheets:
        drawing = draw(sheet, kit, laser)
        reach = max(s.bounds[2] for s in sheet.placed_shapes())
        for tile in tiles(min(sheet.width_mm, reach + 2 * laser.margin_mm), sheet.height_mm):
            _page(canvas, sheet, drawing, tile, kit)
    canvas.save()


def _page(canvas: Any, sheet: Sheet, drawing: Drawing, tile: Tile, kit: Kit) -> None:
    canvas.saveState()
    canvas.scale(MM, MM)
    canvas.translate(MARGIN_MM, MARGIN_MM + FOOT_MM)
    canvas.saveState()
    window(canvas, tile)
    _cuts(canvas, sheet)
    canvas.setLineWidth(0.1)
    canvas.setStrokeGray(0.45)
    draw_path(canvas, drawing.outline, True)
    for piece in drawing.pieces:
        for stroke in piece.strokes:
            draw_path(canvas, stroke, False)
    canvas.restoreState()
    join_marks(canvas, tile)
    canvas.restoreState()
    _foot(canvas, f"{kit.title.line}   {sheet.file}   {sheet.material} {sheet.thickness_mm:g} mm"
          f"   row {tile.row}, column {tile.column}")
    canvas.showPage()


def window(canvas: Any, tile: Tile) -> None:
    """What is drawn from here on is seen through the tile."""
    clip = canvas.beginPath()
    clip.rect(0, 0, tile.width_mm, tile.height_mm)
    canvas.clipPath(clip, stroke=0, fill=0)
    canvas.translate(-tile.x_mm, -tile.y_mm)


def _cuts(canvas: Any, sheet: Sheet) -> None:
    """Nominal outlines and true circles."""
    canvas.setLineWidth(0.15)
    canvas.setStrokeGray(0.0)
    for at, part in zip(sheet.placements, sheet.parts, strict=True):
        assert isinstance(part.form, Plate)
        outline = at.of(part.form.outline)
        for ring in (outline.exterior, *outline.interiors):
            draw_path(canvas, np.asarray(ring.coords)[:-1], True)
        for x, y, r in part.form.circles:
            middle = moved_points(np.array([[x, y]]), at.x_mm, at.y_mm, at.rotation_deg,
                                  at.flipped)[0]
            canvas.circle(float(middle[0]), float(middle[1]), r, stroke=1, fill=0)


def draw_path(canvas: Any, points: Any, close: bool) -> None:
    """A line through points [mm]."""
    path = canvas.beginPath()
    path.moveTo(float(points[0][0]), float(points[0][1]))
    for x, y in points[1:]:
        path.lineTo(float(x), float(y))
    if close:
        path.close()
    canvas.drawPath(path, stroke=1, fill=0)


def join_marks(canvas: Any, tile: Tile) -> None:
    """Crosses in the middle of the overlap: lay those of two pages on each other."""
    canvas.setLineWidth(0.1)
    canvas.setStrokeGray(0.3)
    half = OVERLAP_MM / 2
    for x in (half, tile.width_mm - half):
        for y in (half, tile.height_mm - half):
            canvas.line(x - 3, y, x + 3, y)
            canvas.line(x, y - 3, x, y + 3)
            canvas.circle(x, y, 1.5, stroke=1, fill=0)


def check_bar(canvas: Any) -> tuple[float, float]:
    """A line of 100 mm to hold a ruler against; its start in points."""
    x, y = MARGIN_MM * MM, MARGIN_MM * MM
    canvas.setLineWidth(0.4)
    canvas.line(x, y, x + CHECK_MM * MM, y)
    for k in range(11):
        canvas.line(x + k * 10 * MM, y, x + k * 10 * MM, y + (4 if k % 5 else 7))
    return x, y


def _foot(canvas: Any, words: str) -> None:
    """What the page shows, and a line to hold a ruler against."""
    canvas.saveState()
    x, y = check_bar(canvas)
    canvas.setFont("Helvetica", 8)
    canvas.drawString(x + (CHECK_MM + 4) * MM, y, "measures 100 mm when printed at 100 %")
    canvas.drawString(x, y + 4 * MM, words.encode("latin-1", "replace").decode("latin-1"))
    canvas.restoreState()
