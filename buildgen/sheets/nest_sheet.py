"""Sheets as the packer sees them: long side along x, with the usable cells of a grid."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass, field

import numpy as np
from shapely import affinity
from shapely.geometry import Polygon, box

from buildgen.sheets.nest_raster import Words, grown, packed, put, touched, wholly_inside
from buildgen.sheets.nest_types import NestFixed, NestPlacement, NestStock

Key = tuple[int, bool, float]  # shape, flipped, angle in degrees in the frame of the sheet
HAIR = 1e-6  # takes outlines off the grid lines they were meant to end on


@dataclass(frozen=True)
class Spot:
    """Where a copy lies in the frame of a sheet, which has its long side along x."""

    x_mm: float
    y_mm: float
    angle_deg: float
    flipped: bool


@dataclass(frozen=True)
class Mask:
    """A shape at one turn on one grid; ``at`` is where its own (0, 0) lies from the first cell."""

    words: Words
    at: tuple[float, float]
    ny: int


@dataclass
class Kind:
    """A stock, turned so that its long side lies along x, and its grid.

    Attributes:
        stock: what was asked for.
        turn_deg: 90 if the sheet is taller than wide: the frame is turned back by that much.
        shift: added to turned-back coordinates so that the frame starts at (0, 0).
        outline: the sheet in its frame.
        room: (x0, y0, x1, y1) of the usable part, margins off, in the frame.
        plain: whether the usable part is the whole of that rectangle.
        cell: sides of a cell; the grid starts at ``corner`` and ends at the far corner of the room
            (grown by half the spacing).
    """

    stock: NestStock
    turn_deg: float
    shift: tuple[float, float]
    outline: Polygon
    inside: Polygon
    room: tuple[float, float, float, float]
    plain: bool
    half: float
    corner: tuple[float, float]
    cell: tuple[float, float]
    counts: tuple[int, int]
    empty: Words = field(repr=False)

    def to_frame(self, polygon: Polygon) -> Polygon:
        """From sheet coordinates to the frame."""
        turned = affinity.rotate(polygon, -self.turn_deg, origin=(0.0, 0.0))
        return affinity.translate(turned, *self.shift)

    def to_sheet(self, spot: Spot, part_id: str, copy: int) -> NestPlacement:
        """From the frame to sheet coordinates."""
        x, y = spot.x_mm - self.shift[0], spot.y_mm - self.shift[1]
        if self.turn_deg:
            x, y = -y, x
        angle = (spot.angle_deg + self.turn_deg) % 360.0
        return NestPlacement(part_id, copy, x, y, angle, spot.flipped)


@dataclass
class Sheet:
    """One sheet while it is being filled."""

    kind: Kind
    number: int
    fixed: tuple[NestFixed, ...]
    taken: Words
    items: list[int] = field(default_factory=list)
    spots: list[Spot] = field(default_factory=list)
    hints: dict[Key, int] = field(default_factory=dict)
    end_mm: float = -math.inf

    @property
    def share(self) -> float:
        """How much of the usable length is taken up by new parts."""
        x0, _, x1, _ = self.kind.room
        return max(0.0, self.end_mm - x0) / (x1 - x0)

    def again(self) -> Sheet:
        """A fresh copy with nothing new on it."""
        return Sheet(self.kind, self.number, self.fixed, self.taken.copy())


def kind_of(stock: NestStock, spacing_mm: float, margin_mm: float, cells: int) -> Kind | None:
    """Prepare a stock; None if the margins leave nothing of it.

    Args:
        stock: a checked stock.
        spacing_mm: gap between parts.
        margin_mm: gap to the edge.
        cells: about how many cells the grid may have.
    """
    x0, y0, x1, y1 = stock.outline.bounds
    turn = 90.0 if y1 - y0 > (x1 - x0) * (1.0 + 1e-9) else 0.0
    turned = affinity.rotate(stock.outline, -turn, origin=(0.0, 0.0))
    shift = (-turned.bounds[0], -turned.bounds[1])
    outline = affinity.translate(turned, *shift)
    plain = stock.polygon is None or outline.equals(box(*outline.bounds))
    half = spacing_mm / 2.0
    inside = _inset(outline, margin_mm, plain)
    if inside.is_empty or inside.area <= 0.0:
        return None
    near = outline if plain else _inset(outline, max(margin_mm - half, 0.0), False)
    bounds = near.bounds
    room = inside.bounds
    if plain:
        bounds = (room[0] - half, room[1] - half, room[2] + half, room[3] + half)
    width, height = bounds[2] - bounds[0], bounds[3] - bounds[1]
    side = math.sqrt(width * height / cells)
    nx, ny = math.ceil(width / side), math.ceil(height / side)
    cell = (width / nx, height / ny)
    empty = _empty(near, plain, bounds, (nx, ny), cell)
    return Kind(
        stock, turn, shift, outline, inside, room, plain, half, bounds[:2], cell, (nx, ny), empty
    )


def _inset(outline: Polygon, by_mm: float, plain: bool) -> Polygon:
    """The outline less a margin."""
    if plain:
        x0, y0, x1, y1 = outline.bounds
        if min(x1 - x0, y1 - y0) <= 2.0 * by_mm:
            return Polygon()
        return box(x0 + by_mm, y0 + by_mm, x1 - by_mm, y1 - by_mm)
    return outline.buffer(-by_mm, quad_segs=64)  # several pieces are as good as one here


def _empty(
    near: Polygon,
    plain: bool,
    bounds: tuple[float, ...],
    counts: tuple[int, int],
    cell: tuple[float, float],
) -> Words:
    """Words of an empty sheet: taken where no part may reach, with a spare word a column."""
    nx, ny = counts
    free = np.ones((nx, ny), np.bool_)
    if not plain:
        free = np.zeros((nx, ny), np.bool_)
        pieces = [near] if isinstance(near, Polygon) else list(near.geoms)
        for piece in pieces:
            here = affinity.translate(piece.buffer(HAIR), -bounds[0], -bounds[1])
            free |= wholly_inside(here, nx, ny, *cell)
    words = packed(~free)
    return np.ascontiguousarray(np.hstack([words, np.zeros((nx, 1), np.uint64)]))


def new_sheet(kind: Kind, number: int, fixed: Sequence[NestFixed]) -> Sheet:
    """A sheet of a kind with its fixed parts taken out of the free cells."""
    taken = kind.empty.copy()
    for part in fixed:
        here = affinity.translate(
            grown(kind.to_frame(part.polygon), kind.half), -kind.corner[0], -kind.corner[1]
        )
        cells = touched(here, *kind.counts, *kind.cell)
        put(taken, packed(cells), 0, 0)
    return Sheet(kind, number, tuple(fixed), taken)


def posed(polygon: Polygon, flipped: bool, angle_deg: float) -> Polygon:
    """The outline mirrored if flipped, then turned about its own (0, 0)."""
    if flipped:
        polygon = affinity.scale(polygon, -1.0, 1.0, origin=(0.0, 0.0))
    return affinity.rotate(polygon, angle_deg, origin=(0.0, 0.0))


def mask_of(kind: Kind, fat: Polygon, flipped: bool, angle_deg: float) -> Mask:
    """The cells of a shape (already grown by half the spacing) at one turn."""
    here = posed(fat, flipped, angle_deg)
    x0, y0, x1, y1 = here.bounds
    hx, hy = kind.cell
    nx = max(1, math.ceil((x1 - x0) / hx - HAIR))
    ny = max(1, math.ceil((y1 - y0) / hy - HAIR))
    shape = affinity.translate(here, -x0, -y0)
    # a hair smaller, so that an outline ending on a grid line does not take the next cell
    trim = affinity.scale(shape, 1.0 - HAIR, 1.0 - HAIR, origin=((x1 - x0) / 2, (y1 - y0) / 2))
    return Mask(packed(touched(trim, nx, ny, hx, hy)), (-x0, -y0), ny)
