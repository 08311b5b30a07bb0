"""Full-size drawings to build on: tiled for an office printer, and one page each for a roll."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path
from typing import Any

import numpy as np
from shapely.affinity import translate
from shapely.geometry import MultiPolygon, Polygon, box

from buildgen.packet import words
from buildgen.packet.pen import PLAIN, use_letters
from buildgen.packet.view import Direction, eased, silhouette
from buildgen.part import Board, Formed, Kit, Part, Plate
from buildgen.sheets.paper import (
    CHECK_MM,
    FOOT_MM,
    MARGIN_MM,
    MM,
    Tile,
    check_bar,
    draw_path,
    join_marks,
    tiles,
    window,
)

PAPERS = {"A4": (297.0, 210.0), "A3": (420.0, 297.0), "letter": (279.4, 215.9)}
"""On their sides; ISO 216, ANSI Y14.1."""
CURVE_MM = 0.03
BESIDE_MM = 12.0
LETTER_MM = 2.6
INK, SOFT = 0.0, 0.55


@dataclass(frozen=True, eq=False)
class Plan:
    """One board as flat outlines in mm, its lower left corner at the origin."""

    name: str
    shapes: tuple[tuple[Part, MultiPolygon], ...]
    width_mm: float
    height_mm: float


def plans_of(kit: Kit) -> list[Plan]:
    """Every board with its parts' outlines, true to size."""
    return [plan for board in kit.boards if (plan := _plan(kit, board)) is not None]


def _plan(kit: Kit, board: Board) -> Plan | None:
    way = Direction(board.right, board.up)
    found = []
    for id in board.parts:
        shadow = eased(silhouette(kit.by_id[id], way), CURVE_MM)
        if board.span_mm is not None:
            low, high = board.span_mm
            cut = shadow.intersection(box(low - BESIDE_MM, -1e5, high + BESIDE_MM, 1e5))
            shadow = MultiPolygon([g for g in getattr(cut, "geoms", [cut])
                                   if isinstance(g, Polygon) and not g.is_empty])
        if not shadow.is_empty:
            found.append((kit.by_id[id], shadow))
    if not found:
        return None
    bounds = np.array([s.bounds for _, s in found])
    x0, y0 = bounds[:, :2].min(axis=0) - BESIDE_MM
    x1, y1 = bounds[:, 2:].max(axis=0) + BESIDE_MM
    moved = tuple((p, translate(s, -x0, -y0)) for p, s in found)
    return Plan(board.name, moved, float(x1 - x0), float(y1 - y0))


def write_plans(kit: Kit, paper: str, folder: Path) -> None:
    """``plans-<paper>.pdf`` in tiles and ``plans-roll.pdf``; equal kits give equal bytes."""
    from reportlab.pdfgen.canvas import Canvas

    plans = plans_of(kit)
    if not plans:
        return
    use_letters()
    size = PAPERS[paper]
    tiled = Canvas(str(folder / f"plans-{paper}.pdf"), pagesize=_points(size), invariant=1)
    tiled.setTitle(f"{kit.title.line}: {words.PLANS}")
    for plan in plans:
        for page in _pages(plan, size):
            _tile(tiled, plan, page, kit)
            tiled.showPage()
    tiled.save()
    roll = Canvas(str(folder / "plans-roll.pdf"), invariant=1)
    roll.setTitle(f"{kit.title.line}: {words.PLANS}")
    for plan in plans:
        wide = max(plan.width_mm, CHECK_MM + 120.0) + 2 * MARGIN_MM
        high = plan.height_mm + 2 * MARGIN_MM + FOOT_MM
        roll.setPageSize(_points((wide, high)))
        whole = Tile(1, 1, 0.0, 0.0, wide - 2 * MARGIN_MM, plan.height_mm)
        _tile(roll, plan, (whole, 1, 1), kit, joins=False)
        roll.showPage()
    roll.save()


def _points(size_mm: tuple[float, float]) -> tuple[float, float]:
    return size_mm[0] * MM, size_mm[1] * MM


def _pages(plan: Plan, size: tuple[float, float]) -> Iterator[tuple[Tile, int, int]]:
    """Tiles with something on them, and how many rows and columns there are."""
    found = tiles(plan.width_mm, plan.height_mm, size)
    rows, columns = max(t.row for t in found), max(t.column for t in found)
    for tile in found:
        room = box(tile.x_mm, tile.y_mm, tile.x_mm + tile.width_mm, tile.y_mm + tile.height_mm)
        if any(shape.intersects(room) for _, shape in plan.shapes):
            yield tile, rows, columns


def _tile(
    canvas: Any, plan: Plan, page: tuple[Tile, int, int], kit: Kit, joins: bool = True
) -> None:
    tile, rows, columns = page
    canvas.saveState()
    canvas.scale(MM, MM)
    canvas.translate(MARGIN_MM, MARGIN_MM + FOOT_MM)
    canvas.saveState()
    window(canvas, tile)
    for part, shape in plan.shapes:
        _outline(canvas, part, shape)
    for part, shape in plan.shapes:
        _id(canvas, part, shape)
    canvas.restoreState()
    if joins:
        join_marks(canvas, tile)
    canvas.restoreState()
    where = words.PLAN_TILE.format(row=tile.row, rows=rows, column=tile.column, columns=columns)
    _foot(canvas, f"{kit.title.line} · {plan.name}" + (f" · {where}" if joins else ""))
    if joins and rows * columns > 1:
        _map(canvas, tile, rows, columns)


def _outline(canvas: Any, part: Part, shape: MultiPolygon) -> None:
    """Sheet that closes over the rest is drawn dashed and soft."""
    over = isinstance(part.form, Plate) and isinstance(part.form.bend, Formed)
    canvas.setLineWidth(0.13)
    canvas.setStrokeGray(SOFT if over else INK)
    canvas.setDash([2.0, 1.2] if over else [])
    for polygon in shape.geoms:
        for line in (polygon.exterior, *polygon.interiors):
            draw_path(canvas, np.asarray(line.coords)[:-1], True)
    canvas.setDash([])


def _id(canvas: Any, part: Part, shape: MultiPolygon) -> None:
    """Inside the part, along its longer way; white behind, so that lines do not cross it."""
    largest = max(shape.geoms, key=lambda g: g.area)
    x0, y0, x1, y1 = largest.bounds
    spot = largest.representative_point()
    upright = y1 - y0 > x1 - x0
    canvas.saveState()
    canvas.translate(spot.x, spot.y)
    if upright:
        canvas.rotate(90)
    wide = canvas.stringWidth(part.id, PLAIN, LETTER_MM)
    canvas.setFillGray(1.0)
    canvas.rect(-wide / 2 - 0.3, -LETTER_MM * 0.45, wide + 0.6, LETTER_MM * 0.95, stroke=0, fill=1)
    canvas.setFillGray(INK)
    canvas.setFont(PLAIN, LETTER_MM)
    canvas.drawString(-wide / 2, -LETTER_MM * 0.36, part.id)
    canvas.restoreState()


def _foot(canvas: Any, text: str) -> None:
    """What the page shows, and the bar to hold a ruler against."""
    canvas.saveState()
    x, y = check_bar(canvas)
    canvas.setFont(PLAIN, 7.5)
    canvas.drawString(x + (CHECK_MM + 4) * MM, y, words.PLAN_BAR)
    canvas.drawString(x, y + 4 * MM, text)
    canvas.restoreState()


def _map(canvas: Any, tile: Tile, rows: int, columns: int) -> None:
    """Which of the board's pages this one is, as a small grid at the foot."""
    canvas.saveState()
    canvas.scale(MM, MM)
    cell = 3.0
    right = float(canvas._pagesize[0]) / MM - MARGIN_MM
    canvas.setLineWidth(0.1)
    for row in range(rows):
        for column in range(columns):
            mine = (row + 1, column + 1) == (tile.row, tile.column)
            canvas.setFillGray(0.3 if mine else 1.0)
            canvas.rect(right - (columns - column) * cell, MARGIN_MM - 6 + row * cell, cell, cell,
                        stroke=1, fill=1)
    canvas.restoreState()
