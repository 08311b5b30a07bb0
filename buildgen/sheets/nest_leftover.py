"""The largest whole rectangle that is left of a sheet."""

from __future__ import annotations

import math
from collections.abc import Sequence

import numpy as np
from shapely import affinity
from shapely.geometry import Polygon

from buildgen.sheets.nest_raster import Cells, grown, touched, wholly_inside

CELLS = 40_000


def largest_leftover(
    stock: Polygon, parts: Sequence[Polygon], spacing_mm: float
) -> tuple[float, float, float, float]:
    """Largest rectangle along the sides of the sheet that keeps the spacing to every part.

    Found on a grid of about 40 000 cells that only ever rounds it down.

    Returns:
        x, y of its lower left corner, width and height in mm; all 0 if nothing is left.
    """
    x0, y0, x1, y1 = stock.bounds
    side = math.sqrt((x1 - x0) * (y1 - y0) / CELLS)
    nx, ny = math.ceil((x1 - x0) / side), math.ceil((y1 - y0) / side)
    hx, hy = (x1 - x0) / nx, (y1 - y0) / ny
    free = wholly_inside(affinity.translate(stock.buffer(1e-6), -x0, -y0), nx, ny, hx, hy)
    for part in parts:
        free &= ~touched(affinity.translate(grown(part, spacing_mm), -x0, -y0), nx, ny, hx, hy)
    i, j, n, m = _largest_free(free, hx, hy)
    return x0 + i * hx, y0 + j * hy, n * hx, m * hy


def _largest_free(free: Cells, hx: float, hy: float) -> tuple[int, int, int, int]:
    """First column, first row, columns and rows of the largest rectangle of free cells."""
    best, found = 0.0, (0, 0, 0, 0)
    run = np.zeros(free.shape[1], np.int64)
    for i in range(free.shape[0]):
        run = np.where(free[i], run + 1, 0)
        stack: list[tuple[int, int]] = []  # (first row, run) with runs rising
        for j, height in enumerate([*run.tolist(), 0]):
            first = j
            while stack and stack[-1][1] >= height:
                first, length = stack.pop()
                area = length * hx * (j - first) * hy
                if area > best * (1.0 + 1e-9):
                    best, found = area, (i - length + 1, first, length, j - first)
            stack.append((first, height))
    return found
