"""Where a part's id is engraved: inside it, clear of every cut, as large as fits."""

from __future__ import annotations

from dataclasses import replace
from functools import lru_cache

import numpy as np
import shapely
from shapely import Geometry
from shapely.affinity import rotate
from shapely.geometry import LineString, Polygon

from buildgen.part import Mark, Part, Plate
from buildgen.sheets.contour import widest_spot
from buildgen.sheets.letters import Stroke, width_mm, write

LEAST_MM = 2.0
MOST_TRIES = 600
"""Places tried on a large part before the fine grid is: most have room somewhere near."""
ARROW_MM = (20.0, 14.0, 9.0)
TWICE_MM = 0.05
"""Lines this near to each other are one."""
CLEAR_MM = 0.8
"""Between lettering and a cut: scorched edges swallow less; common practice, no source."""


def strokes_of(
    part: Part, height_mm: float, label: str = "", arrow: bool = False, flipped: bool = False
) -> tuple[list[Stroke], bool]:
    """Lettering and lines of a part in its own coordinates; False where its id does not fit.

    Args:
        height_mm: of a capital, where there is room.
        label: what stands for the id, "R3R/2" for the second of several kits; "" for the id.
        arrow: also an arrow along the grain, where there is room beside the lettering.
        flipped: the part lies upside down: its lettering is mirrored here, to read right there.
    """
    assert isinstance(part.form, Plate)
    label = label or part.id
    marks = [replace(m, text=label) if m.text == part.id else m for m in part.form.marks]
    found = next((m for m in marks if m.text == label), None)
    if found is None:
        found = id_mark(part, height_mm, label)
        marks += [found] if found else []
    strokes = [s for m in marks if m.text for s in _strokes(m, flipped)]
    strokes += once([s for m in marks if not m.text for s in _strokes(m)])
    if arrow and part.form.grain_deg is not None:
        strokes += grain_arrow(part.form, strokes)
    return strokes, found is not None


def once(lines: list[Stroke]) -> list[Stroke]:
    """Lines less what of them an earlier line covers: nothing is engraved twice."""
    found: list[Stroke] = []
    burnt: Geometry = LineString()
    for line in lines:
        rest: Geometry = LineString(line)
        if not burnt.is_empty:
            rest = rest.difference(burnt.buffer(TWICE_MM, cap_style="flat"))
        kept = [g for g in shapely.get_parts(rest) if g.length > 4 * TWICE_MM]
        whole = len(kept) == 1 and abs(kept[0].length - LineString(line).length) < TWICE_MM
        found += [line] if whole else [tuple(g.coords) for g in kept]
        burnt = burnt.union(LineString(line))
    return found


def grain_arrow(plate: Plate, strokes: list[Stroke]) -> list[Stroke]:
    """An arrow with a head at each end along the grain, clear of cuts and of other strokes."""
    free = plate.shape2d.buffer(-CLEAR_MM)
    for stroke in strokes:
        free = free.difference(LineString(stroke).buffer(CLEAR_MM))
    grain = plate.grain_deg or 0.0
    along = rotate(free, -grain, origin=(0.0, 0.0))
    for long in ARROW_MM:
        spot = _spot(along, long, 2.0, 0.0)
        if spot is not None:
            return [_turned(line, grain) for line in _arrow(spot, long / 2)]
    return []


def _arrow(spot: tuple[float, float], half: float) -> list[Stroke]:
    x, y = spot
    heads = [((x + s * (half - 1.6), y + 0.8), (x + s * half, y), (x + s * (half - 1.6), y - 0.8))
             for s in (-1, 1)]
    return [((x - half, y), (x + half, y)), *heads]


def _turned(line: Stroke, angle_deg: float) -> Stroke:
    a = np.radians(angle_deg)
    turn = np.array([[np.cos(a), np.sin(a)], [-np.sin(a), np.cos(a)]])
    return tuple((float(x), float(y)) for x, y in np.array(line) @ turn)


def _strokes(mark: Mark, flipped: bool = False) -> list[Stroke]:
    strokes = [mark.line] if mark.line else []
    if mark.text:
        a = np.radians(mark.angle_deg)
        turn = np.array([[np.cos(a), np.sin(a)], [-np.sin(a), np.cos(a)]])
        for line in write(mark.text, mark.height_mm):
            points = np.array(line) * (-1 if flipped else 1, 1) @ turn + mark.at
            strokes.append(tuple((float(x), float(y)) for x, y in points))
    return strokes


@lru_cache(maxsize=2048)
def id_mark(part: Part, height_mm: float, label: str = "") -> Mark | None:
    """The part's id at the largest height that fits inside; None below the least readable."""
    assert isinstance(part.form, Plate)
    label = label or part.id
    free = clear_room(part.form)
    height = height_mm
    while height >= LEAST_MM - 1e-9:
        for angle in (0.0, 90.0):
            spot = _spot(free, width_mm(label, height), height, angle)
            if spot is not None:
                return Mark(label, spot, height, angle)
        height -= 0.5
    return None


def clear_room(plate: Plate) -> Polygon:
    """Where there is neither a cut nor a mark."""
    free = plate.shape2d.buffer(-CLEAR_MM)
    lines = [LineString(s).buffer(CLEAR_MM) for m in plate.marks for s in _strokes(m)]
    return free.difference(shapely.union_all(lines)) if lines else free


def _spot(
    free: Polygon, wide: float, high: float, angle: float
) -> tuple[float, float] | None:
    """Middle of a free upright rectangle, searched on a grid from the middle outwards."""
    if free.is_empty:
        return None
    if angle:
        wide, high = high, wide
    x0, y0, x1, y1 = free.bounds
    if wide > x1 - x0 or high > y1 - y0:
        return None
    first, radius = widest_spot(max(getattr(free, "geoms", [free]), key=lambda g: g.area))
    spots = [(first.x, first.y)] if radius > min(wide, high) / 2 else []
    shapely.prepare(free)
    middle = np.array([(x0 + x1) / 2, (y0 + y1) / 2])
    for most in (MOST_TRIES, None):
        nx, ny = max(3, int((x1 - x0) / 2.5)), max(3, int((y1 - y0) / 1.5))
        if most and nx * ny <= most:
            continue
        if most:
            nx, ny = min(nx, most // 12), min(ny, 12)
        grid = np.stack(np.meshgrid(np.linspace(x0 + wide / 2, x1 - wide / 2, nx),
                                    np.linspace(y0 + high / 2, y1 - high / 2, ny),
                                    indexing="ij"), axis=-1).reshape(-1, 2)
        away = np.abs(grid - middle) @ (1.0, 2.0)
        tried = np.vstack([np.array(spots).reshape(-1, 2), grid[np.lexsort((*grid.T, away))]])
        low, top = tried - (wide / 2, high / 2), tried + (wide / 2, high / 2)
        inside = shapely.contains(free, shapely.box(*low.T, *top.T))
        if inside.any():
            x, y = tried[int(np.argmax(inside))]
            return float(x), float(y)
    return None


