"""The three-view: the kit's real solids from above, in front and from the left."""

from __future__ import annotations

from functools import partial

import numpy as np

from buildgen.checks.report import Balance
from buildgen.packet import words
from buildgen.packet.amounts import fixed, plain
from buildgen.packet.pen import (
    ACCENT,
    HAIR_PT,
    HEAVY_PT,
    INK,
    LINE_PT,
    SMALL_PT,
    SOFT,
    WHITE,
    Pen,
    Picture,
    Point,
    text_width_mm,
)
from buildgen.packet.view import FROM_ABOVE, FROM_FRONT, FROM_LEFT, View, eased, view_of
from buildgen.part import Bought, Cover, Kit

SCALES = (1, 2, 2.5, 3, 4, 5, 6, 7.5, 8, 10, 12, 14, 15, 16, 18, 20, 25, 30, 40, 50, 60, 80, 100)
BETWEEN_MM, LABEL_MM, DIM_MM, KEY_MM = 5.0, 5.0, 8.0, 4.0


def round_scale(room_mm: Point, size_mm: Point) -> float:
    """The largest plain scale (1 : n, gives n) at which the size fits the room."""
    for n in SCALES:
        if size_mm[0] / n <= room_mm[0] and size_mm[1] / n <= room_mm[1]:
            return n
    return float(np.ceil(max(size_mm[0] / room_mm[0], size_mm[1] / room_mm[1])))


def three_view(kit: Kit, balance: Balance, width_mm: float, height_mm: float) -> Picture:
    """A picture no larger than asked, at a plain scale."""
    views = [view_of(kit, way) for way in (FROM_ABOVE, FROM_FRONT, FROM_LEFT)]
    heights = [v.size_mm[1] for v in views]
    widest = max(v.size_mm[0] for v in views)
    taken = 3 * LABEL_MM + 2 * BETWEEN_MM + 2 * DIM_MM + KEY_MM
    n = round_scale((width_mm - 2 * DIM_MM - 6, height_mm - taken), (widest, sum(heights)))
    used = sum(heights) / n + taken
    return Picture(width_mm, used, partial(_paint, views, balance, n, width_mm, used))


def _paint(
    views: list[View], balance: Balance, n: float, width_mm: float, height_mm: float, pen: Pen
) -> None:
    titles = (words.FROM_ABOVE, words.FROM_FRONT, words.FROM_LEFT)
    top = height_mm
    for index, (view, title) in enumerate(zip(views, titles, strict=True)):
        pen.text((0, top - 3), title, SMALL_PT, ink=SOFT)
        top -= LABEL_MM
        low_x, _, high_x, high_y = view.bounds
        at = (width_mm / 2 - (low_x + high_x) / 2 / n, top - high_y / n)
        inner = pen.scaled(1 / n, at)
        (draw_through if index == 0 else draw_solid)(inner, view, n)
        _marks(inner, view, balance, n, side_on=index == 2)
        top -= view.size_mm[1] / n
        if index == 0:
            across(inner, view, n, fixed(view.size_mm[0], 0))
        if index != 1:
            upright(inner, view, n, fixed(view.size_mm[1], 0))
        if index == 2:
            across(inner, view, n, fixed(view.size_mm[0], 0))
        top -= BETWEEN_MM + (DIM_MM if index == 0 else 0)
    pen.text((width_mm, height_mm - 3), words.SCALE.format(scale=plain(n)), SMALL_PT, "right",
             ink=SOFT)
    _key(pen, width_mm)


def draw_through(pen: Pen, view: View, n: float) -> None:
    """The frame as if the covering were glass: every part thin, the whole heavier."""
    for part, shadow in view.shadows:
        if not isinstance(part.form, Cover):
            pen.shape(eased(shadow, 0.06 * n), HAIR_PT, SOFT)
    pen.shape(eased(view.outline, 0.03 * n), LINE_PT, INK)


def draw_solid(pen: Pen, view: View, n: float) -> None:
    """Each part hides what lies behind it; hidden things on board are dashed."""
    for _, shadow in view.from_behind:
        pen.shape(eased(shadow, 0.05 * n), HAIR_PT, SOFT, WHITE)
    for part, shadow in view.shadows:
        if isinstance(part.form, Bought):
            pen.shape(eased(shadow, 0.05 * n), HAIR_PT, SOFT, dash=(2, 1.2))
    pen.shape(eased(view.outline, 0.03 * n), LINE_PT, INK)


def across(pen: Pen, view: View, n: float, label: str) -> None:
    """A dimension below a view."""
    low_x, low_y, high_x, _ = view.bounds
    y = low_y - 5 * n
    for x in (low_x, high_x):
        pen.line([(x, low_y - n), (x, y - n)], HAIR_PT, SOFT)
    pen.arrow((low_x, y), (high_x, y), HAIR_PT, INK, both=True)
    pen.text(((low_x + high_x) / 2, y - 0.8 * n), label, SMALL_PT, "middle", halo=True)


def upright(pen: Pen, view: View, n: float, label: str) -> None:
    """A dimension to the right of a view."""
    _, low_y, high_x, high_y = view.bounds
    x = high_x + 5 * n
    for y in (low_y, high_y):
        pen.line([(high_x + n, y), (x + n, y)], HAIR_PT, SOFT)
    pen.arrow((x, low_y), (x, high_y), HAIR_PT, INK, both=True)
    pen.text((x + 0.8 * n, (low_y + high_y) / 2), label, SMALL_PT, "middle", halo=True,
             turn_deg=90)


def _marks(pen: Pen, view: View, balance: Balance, n: float, side_on: bool) -> None:
    """Centre of gravity in every view; range and neutral point where x can be seen."""
    if side_on:
        fore, aft = (view.way.flat((x, 0, balance.cg_mm[2])) for x in balance.target_cg_x_mm)
        for end in (fore, aft):
            pen.line(np.array([end - (0, 4 * n), end + (0, 4 * n)]), HEAVY_PT, ACCENT)
        if balance.neutral_point_x_mm is not None:
            diamond(pen, view.way.flat((balance.neutral_point_x_mm, 0, balance.cg_mm[2])), n)
    cg_mark(pen, view.way.flat(balance.cg_mm), 1.7)


def cg_mark(pen: Pen, at: np.ndarray | Point, radius_mm: float) -> None:
    """The quartered disc."""
    x, y = float(at[0]), float(at[1])
    pen.disc((x, y), radius_mm, 0, fill=WHITE)
    canvas = pen.canvas
    cx, cy = (v * 72 / 25.4 for v in pen.place((x, y)))
    r = radius_mm * 72 / 25.4
    canvas.setFillColor(INK)
    for start in (0, 180):
        canvas.wedge(cx - r, cy - r, cx + r, cy + r, start, 90, stroke=0, fill=1)
    pen.disc((x, y), radius_mm, LINE_PT)


def diamond(pen: Pen, at: np.ndarray | Point, n: float, half_mm: float = 1.4) -> None:
    """The neutral point; `n` is the scale, 1 : n."""
    x, y = float(at[0]), float(at[1])
    d = half_mm * n
    pen.line([(x - d, y), (x, y + d), (x + d, y), (x, y - d)], LINE_PT, INK, closed=True)


def _key(pen: Pen, right_mm: float) -> None:
    """What the marks mean, in a row at the foot."""
    x = right_mm
    for label, kind in ((words.NEUTRAL_KEY, "np"), (words.RANGE_KEY, "range"),
                        (words.CG_KEY, "cg")):
        pen.text((x, 0.6), label, SMALL_PT - 0.5, "right", ink=SOFT)
        x -= text_width_mm(label, SMALL_PT - 0.5) + 3.0
        at = (x, 1.5)
        if kind == "cg":
            cg_mark(pen, at, 1.3)
        elif kind == "np":
            diamond(pen, at, 1, 1.2)
        else:
            for edge in (x - 1.2, x + 1.2):
                pen.line([(edge, 0.2), (edge, 2.8)], HEAVY_PT, ACCENT)
        x -= 6.0
