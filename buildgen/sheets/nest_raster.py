"""Shapes as bit masks on a grid, and the leftmost free place for a mask.

A mask holds every cell that the shape touches, so two shapes without a common cell do not meet.
A column of cells is a row of 64-bit words, lowest cell in the lowest bit.
"""

from __future__ import annotations

import math
from typing import Any

import numpy as np
import numpy.typing as npt
from shapely.geometry import Polygon

from buildgen.sheets.nest_jit import compiled

Words = npt.NDArray[np.uint64]
Cells = npt.NDArray[np.bool_]
Floats = npt.NDArray[np.float64]


def rings_of(polygon: Polygon) -> list[Floats]:
    """Closed rings of a polygon, the exterior first, as (n, 2) arrays in mm."""
    return [np.asarray(r.coords)[:, :2] for r in (polygon.exterior, *polygon.interiors)]


def edges_of(polygon: Polygon) -> Floats:
    """All edges of a polygon as (n, 4) rows x0, y0, x1, y1 in mm."""
    return np.vstack([np.hstack([r[:-1], r[1:]]) for r in rings_of(polygon)])


def grown(polygon: Polygon, by_mm: float) -> Polygon:
    """The polygon grown all round by round arcs that miss the true arc by at most 0.0003 mm."""
    if by_mm <= 0.0:
        return polygon
    quarter = max(4, math.ceil(math.pi / 4.0 / math.acos(1.0 - min(0.5, 0.0003 / by_mm))))
    result = polygon.buffer(by_mm, quad_segs=quarter)
    assert isinstance(result, Polygon)
    return result


@compiled
def _fill(edges: Any, cells: Any, hx: float, hy: float) -> None:
    """Set the cells whose centre is inside, by the even-odd rule."""
    nx, ny = cells.shape
    for e in range(edges.shape[0]):
        x0, y0, x1, y1 = edges[e, 0], edges[e, 1], edges[e, 2], edges[e, 3]
        if x0 > x1:
            x0, y0, x1, y1 = x1, y1, x0, y0
        for i in range(max(0, int(x0 / hx - 0.5)), min(nx, int(x1 / hx) + 1)):
            xc = (i + 0.5) * hx
            if x0 <= xc < x1:
                y = y0 + (y1 - y0) * (xc - x0) / (x1 - x0)
                top = min(ny, max(0, int(math.ceil(y / hy - 0.5))))
                for j in range(top):
                    cells[i, j] = not cells[i, j]


@compiled
def _touch(edges: Any, cells: Any, hx: float, hy: float, value: bool) -> None:
    """Set every cell that an edge runs through."""
    nx, ny = cells.shape
    for e in range(edges.shape[0]):
        x0, y0, x1, y1 = edges[e, 0], edges[e, 1], edges[e, 2], edges[e, 3]
        if x0 > x1:
            x0, y0, x1, y1 = x1, y1, x0, y0
        for i in range(max(0, int(math.floor(x0 / hx))), min(nx - 1, int(math.floor(x1 / hx))) + 1):
            ya, yb = y0, y1
            if x1 > x0:
                slope = (y1 - y0) / (x1 - x0)
                ya = y0 + slope * (max(x0, i * hx) - x0)
                yb = y0 + slope * (min(x1, (i + 1) * hx) - x0)
            low, high = min(ya, yb), max(ya, yb)
            for j in range(
                max(0, int(math.floor(low / hy))), min(ny - 1, int(math.floor(high / hy))) + 1
            ):
                cells[i, j] = value


def touched(polygon: Polygon, nx: int, ny: int, hx: float, hy: float) -> Cells:
    """The (nx, ny) cells that the polygon touches; its corner (0, 0) is that of the grid."""
    edges = edges_of(polygon)
    cells = np.zeros((nx, ny), np.bool_)
    _fill(edges, cells, hx, hy)
    _touch(edges, cells, hx, hy, True)
    return cells


def wholly_inside(polygon: Polygon, nx: int, ny: int, hx: float, hy: float) -> Cells:
    """The (nx, ny) cells that lie inside the polygon with no edge through them."""
    edges = edges_of(polygon)
    cells = np.zeros((nx, ny), np.bool_)
    _fill(edges, cells, hx, hy)
    _touch(edges, cells, hx, hy, False)
    return cells


def packed(cells: Cells) -> Words:
    """Columns of cells as words: (nx, ny) to (nx, ceil(ny / 64))."""
    nx, ny = cells.shape
    wide = np.zeros((nx, -(-ny // 64) * 64), np.bool_)
    wide[:, :ny] = cells
    return np.packbits(wide, axis=1, bitorder="little").view("<u8").astype(np.uint64)


@compiled
def first_place(taken: Any, mask: Any, x_from: int, x_to: int, y_to: int) -> tuple[int, int]:
    """Leftmost, then lowest cell at which the mask meets no taken cell.

    Args:
        taken: (nx, words + 1) of the sheet; the last word of each column is spare.
        mask: (n, words) of the part.
        x_from: first column to try.
        x_to: last column to try.
        y_to: last row to try.

    Returns:
        Column and row, or (-1, -1).
    """
    n, words = mask.shape
    last = 0
    for ix in range(x_from, x_to + 1):
        for iy in range(y_to + 1):
            low = np.uint64(iy & 63)
            high = np.uint64(64 - (iy & 63))
            first = iy >> 6
            free = True
            for step in range(n):
                j = last + step
                if j >= n:
                    j -= n
                for k in range(words):
                    m = mask[j, k]
                    if taken[ix + j, first + k] & (m << low):
                        free = False
                        break
                    if low and taken[ix + j, first + k + 1] & (m >> high):
                        free = False
                        break
                if not free:
                    last = j
                    break
            if free:
                return ix, iy
    return -1, -1


@compiled
def put(taken: Any, mask: Any, ix: int, iy: int) -> None:
    """Take the cells of the mask at column ix, row iy."""
    n, words = mask.shape
    low = np.uint64(iy & 63)
    high = np.uint64(64 - (iy & 63))
    first = iy >> 6
    for j in range(n):
        for k in range(words):
            taken[ix + j, first + k] |= mask[j, k] << low
            if low:
                taken[ix + j, first + k + 1] |= mask[j, k] >> high
