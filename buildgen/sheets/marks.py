"""Where a part's id is engraved: inside it, clear of every cut, as large as fits."""

from __future__ import annotations

from functools import lru_cache

import numpy as np
from shapely.geometry import Polygon

from buildgen.part import Mark, Part, Plate
from buildgen.sheets.contour import widest_spot
from buildgen.sheets.letters import Stroke, width_mm, write

LEAST_MM = 2.0
CLEAR_MM = 0.8
"""Between lettering and a cut: scorched edges swallow less; common practice, no source."""


def strokes_of(part: Part, height_mm: float) -> tuple[list[Stroke], bool]:
    """Lettering and lines of a part in its own coordinates; False where its id does not fit."""
    assert isinstance(part.form, Plate)
    strokes: list[Stroke] = []
    for mark in part.form.marks:
        strokes += _strokes(mark)
    if any(m.text == part.id for m in part.form.marks):
        return strokes, True
    found = id_mark(part, height_mm)
    if found is None:
        return strokes, False
    return strokes + _strokes(found), True


def _strokes(mark: Mark) -> list[Stroke]:
    strokes = [mark.line] if mark.line else []
    if mark.text:
        a = np.radians(mark.angle_deg)
        turn = np.array([[np.cos(a), np.sin(a)], [-np.sin(a), np.cos(a)]])
        for line in write(mark.text, mark.height_mm):
            points = np.array(line) @ turn + mark.at
            strokes.append(tuple((float(x), float(y)) for x, y in points))
    return strokes


@lru_cache(maxsize=2048)
def id_mark(part: Part, height_mm: float) -> Mark | None:
    """The part's id at the largest height that fits inside; None below the least readable."""
    assert isinstance(part.form, Plate)
    free = part.form.shape2d.buffer(-CLEAR_MM)
    height = height_mm
    while height >= LEAST_MM - 1e-9:
        for angle in (0.0, 90.0):
            spot = _spot(free, width_mm(part.id, height), height, angle)
            if spot is not None:
                return Mark(part.id, spot, height, angle)
        height -= 0.5
    return None


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
    xs = np.linspace(x0 + wide / 2, x1 - wide / 2, max(3, int((x1 - x0) / 2.5)))
    ys = np.linspace(y0 + high / 2, y1 - high / 2, max(3, int((y1 - y0) / 1.5)))
    middle = ((x0 + x1) / 2, (y0 + y1) / 2)
    grid = [(float(x), float(y)) for x in xs for y in ys]
    grid.sort(key=lambda p: (abs(p[0] - middle[0]) + 2 * abs(p[1] - middle[1]), p))
    import shapely

    shapely.prepare(free)
    boxes = shapely.box(*(np.array([*spots, *grid]).T[[0, 1, 0, 1]]
                          + np.array([[-wide], [-high], [wide], [high]]) / 2))
    inside = shapely.contains(free, boxes)
    if not inside.any():
        return None
    return [*spots, *grid][int(np.argmax(inside))]


