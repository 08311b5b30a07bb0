"""Curves as few arcs: a ring of points becomes a polyline with bulges."""

from __future__ import annotations

from typing import TypeAlias

import numpy as np

from buildgen.solid import Array

Bulges: TypeAlias = list[tuple[float, float, float]]
"""Vertices (x, y, bulge): the tangent of a quarter of the angle of the arc that follows."""

CORNER_DEG = 20.0
FLAT = 1e-4


def with_arcs(ring: Array, error_mm: float) -> Bulges:
    """A closed ring as lines and arcs that pass within `error_mm` of its points.

    Args:
        ring: (n, 2) without the repeated point.
        error_mm: allowed between the points, the middles of the edges, and the arcs.

    Returns:
        A closed polyline's vertices; a bulge of 0 is a straight line, above 0 turns left.
    """
    corners = _corners(ring)
    ring = np.roll(ring, -int(corners[0]) if len(corners) else 0, axis=0)
    closed = np.vstack([ring, ring[:1]])
    stops = [*(int(c) for c in _corners(ring) if c > 0), len(ring)]
    found: Bulges = []
    start = 0
    for stop in stops:
        while start < stop:
            end, bulge = _longest(closed, start, stop, error_mm)
            found.append((float(closed[start][0]), float(closed[start][1]), bulge))
            start = end
    return found


def _corners(ring: Array) -> Array:
    """Vertices at which the ring turns sharply."""
    back, on = ring - np.roll(ring, 1, axis=0), np.roll(ring, -1, axis=0) - ring
    turn = np.arctan2(back[:, 0] * on[:, 1] - back[:, 1] * on[:, 0], (back * on).sum(axis=1))
    return np.asarray(np.nonzero(np.abs(np.degrees(turn)) > CORNER_DEG)[0])


def _longest(points: Array, start: int, stop: int, error: float) -> tuple[int, float]:
    """The furthest vertex that one line or arc reaches, and its bulge: doubling, then halving."""
    good, bulge, step = start + 1, 0.0, 1
    while good < stop and step:
        end = min(good + step, stop)
        tried = _fitted(points[start : end + 1], error)
        if tried is None:
            step //= 2
            continue
        good, bulge = end, tried
        step *= 2
    return good, bulge


def _fitted(points: Array, error: float) -> float | None:
    """Bulge of the arc from the first to the last point; None where it misses the others."""
    a, b = points[0], points[-1]
    chord = b - a
    length = float(np.hypot(*chord))
    if length < 1e-9:
        return None
    along, left = chord / length, np.array([-chord[1], chord[0]]) / length
    inner = np.vstack([points[1:-1], (points[:-1] + points[1:]) / 2])
    flat = np.column_stack([(inner - a) @ along, (inner - a) @ left])
    if np.any(flat[:, 0] < -error) or np.any(flat[:, 0] > length + error):
        return None  # more than half a circle is drawn as two arcs
    sagitta = float(flat[np.argmin(np.abs(flat[: len(points) - 2, 0] - length / 2)), 1])
    bulge = -2 * sagitta / length
    if abs(bulge) < FLAT:
        return 0.0 if np.abs(flat[:, 1]).max() <= error else None
    radius = (length / 2) ** 2 / (2 * sagitta) + sagitta / 2
    off = np.hypot(flat[:, 0] - length / 2, flat[:, 1] - (sagitta - radius)) - abs(radius)
    return bulge if np.abs(off).max() <= error else None
