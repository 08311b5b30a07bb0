"""Outlines as fields of signed distance, with points and inner circles to hold against them."""

from __future__ import annotations

import math
from collections.abc import Sequence
from typing import Any, NamedTuple

import numpy as np
import numpy.typing as npt
from shapely.geometry import MultiPolygon, Polygon

from buildgen.sheets.nest_jit import compiled
from buildgen.sheets.nest_raster import edges_of, rings_of

Floats = npt.NDArray[np.float64]
NODES = 40_000  # of one field at most,
ROOM_NODES = 160_000  # of the room of a sheet
STEP_MM = 0.5  # between nodes, unless that takes too many
REACH_MM = 3.0  # of a field beyond spacing
POINT_GAP_MM = 6.0  # between points along straight edges
SMOOTH_MM = 0.01  # outlines are thinned by this much where they serve as points,
ENDS_MM = 0.0008  # their outermost corners by less, for they decide about the margin
CIRCLES = 14


class Fields(NamedTuple):
    """Distances outside (above 0) and inside (below 0), one after another in one array.

    Rows of ``grid`` are first node, columns, rows (as whole numbers); rows of ``frame`` are
    x, y of the first node and the step, in mm. ``points`` holds x, y and radius; those of field k
    are rows ``first[k]`` to ``first[k + 1]``, circles first, ``circles[k]`` of them.
    """

    values: Any
    grid: Any
    frame: Any
    points: Any
    first: Any
    circles: Any


@compiled
def _distances(edges: Any, x0: float, y0: float, step: float, found: Any) -> None:
    """Signed distance to the nearest edge at each node, below 0 inside (even-odd rule)."""
    for i in range(found.shape[0]):
        for j in range(found.shape[1]):
            x, y = x0 + i * step, y0 + j * step
            near = 1e30
            inside = False
            for e in range(edges.shape[0]):
                ax, ay = edges[e, 0], edges[e, 1]
                dx, dy = edges[e, 2] - ax, edges[e, 3] - ay
                if (ay > y) != (edges[e, 3] > y) and x < ax + dx * (y - ay) / dy:
                    inside = not inside
                t = ((x - ax) * dx + (y - ay) * dy) / (dx * dx + dy * dy + 1e-30)
                t = min(1.0, max(0.0, t))
                px, py = x - ax - t * dx, y - ay - t * dy
                near = min(near, px * px + py * py)
            found[i, j] = -math.sqrt(near) if inside else math.sqrt(near)


def _points(polygon: Polygon, angles: Sequence[float]) -> Floats:
    """Corners of the outline and points along its straight edges, as (n, 3) with radius 0.

    Thinned, but with the outermost corners at each of the angles (radians) left in place.
    """
    rows: list[tuple[float, float]] = []
    for ring in rings_of(polygon.simplify(SMOOTH_MM)):
        for (x0, y0), (x1, y1) in zip(ring[:-1].tolist(), ring[1:].tolist(), strict=True):
            n = max(1, math.ceil(math.hypot(x1 - x0, y1 - y0) / POINT_GAP_MM))
            rows += [(x0 + (x1 - x0) * k / n, y0 + (y1 - y0) * k / n) for k in range(n)]
    hull = np.asarray(polygon.convex_hull.simplify(ENDS_MM).exterior.coords)[:, :2]
    for angle in angles:
        for quarter in range(4):
            way = angle + quarter * math.pi / 2.0
            x, y = hull[int(np.argmax(hull @ (math.cos(way), math.sin(way))))].tolist()
            rows.append((x, y))
    return np.array([(x, y, 0.0) for x, y in dict.fromkeys(rows)])


def _circles(values: Floats, x0: float, y0: float, step: float) -> Floats:
    """Circles within the outline, large first, that cover most of it, as (n, 3) x, y, radius."""
    depth = -np.asarray(values[::2, ::2], np.float64)
    xs = x0 + 2.0 * step * np.arange(depth.shape[0])[:, None]
    ys = y0 + 2.0 * step * np.arange(depth.shape[1])[None, :]
    least = max(0.3 * float(depth.max()), 0.5)
    rows: list[tuple[float, float, float]] = []
    while len(rows) < CIRCLES:
        i, j = np.unravel_index(int(np.argmax(depth)), depth.shape)
        radius = float(depth[i, j])
        if radius < least:
            break
        x, y = float(xs[i, 0]), float(ys[0, j])
        rows.append((x, y, radius))
        depth[np.hypot(xs - x, ys - y) < 1.2 * radius] = 0.0
    return np.array(rows).reshape(-1, 3)


def fields_of(
    shapes: Sequence[Polygon | MultiPolygon],
    angles: Sequence[Sequence[float]],
    spacing_mm: float,
) -> Fields:
    """Prepare outlines; several pieces (the room of a sheet) are taken together.

    Args:
        shapes: the outlines.
        angles: for each, directions (radians) in which its extent has to be exact.
        spacing_mm: gap between parts.
    """
    values, grid, frame, points, first, circles = [], [], [], [], [0], []
    start = 0
    pad = spacing_mm + REACH_MM
    for shape, ways in zip(shapes, angles, strict=True):
        pieces = list(shape.geoms) if isinstance(shape, MultiPolygon) else [shape]
        x0, y0, x1, y1 = shape.bounds
        width, height = x1 - x0 + 2 * pad, y1 - y0 + 2 * pad
        step = max(STEP_MM, math.sqrt(width * height / (NODES if ways else ROOM_NODES)))
        nx, ny = math.ceil(width / step) + 2, math.ceil(height / step) + 2
        edges = np.vstack([edges_of(p) for p in pieces])
        found = np.empty((nx, ny), np.float32)
        _distances(edges, x0 - pad, y0 - pad, step, found)
        values.append(found.ravel())
        grid.append((start, nx, ny))
        frame.append((x0 - pad, y0 - pad, step))
        start += found.size
        round_ones = _circles(found, x0 - pad, y0 - pad, step)
        here = np.vstack([round_ones, *(_points(p, ways) for p in pieces)])
        circles.append(len(round_ones))
        points.append(here)
        first.append(first[-1] + len(here))
    return Fields(
        np.concatenate(values),
        np.array(grid, np.int64),
        np.array(frame),
        np.vstack(points),
        np.array(first, np.int64),
        np.array(circles, np.int64),
    )
