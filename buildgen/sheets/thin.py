"""Fewer points along a curve without losing area: chords are laid through the curve, not inside it.

A chord between two points of a convex curve lies inside it and loses area all along. Here each
chord is moved out by its mean distance from the curve, so that it crosses the curve twice: the
area stays, and the largest distance falls to two thirds of the height on an even curve (the mean
height of a parabola), to somewhat more where low and high chords meet.
"""

from __future__ import annotations

import numpy as np
from shapely.geometry import Polygon

from buildgen.solid import Array

SHARP = 0.2
"""Sine of the angle between two chords from which their corner is where the moved chords meet."""


def thinned(ring: Array, sagitta_mm: float) -> Array:
    """A closed ring with as few points as its chords' heights allow, of the same area.

    Args:
        ring: (n, 2) without the repeated point.
        sagitta_mm: largest height of the curve over a chord; the result stays within it.

    Returns:
        (m, 2), m at most n, in the same sense of rotation.
    """
    kept = _kept(ring, sagitta_mm)
    if len(kept) < 3 or len(kept) == len(ring):
        return ring
    corners = ring[kept]
    chords = np.roll(corners, -1, axis=0) - corners
    lengths = np.hypot(chords[:, 0], chords[:, 1])
    normals = np.column_stack([chords[:, 1], -chords[:, 0]]) / lengths[:, None]
    heights = _segment_areas(ring, kept) / lengths
    return corners + _shifts(normals, heights)


def _kept(ring: Array, sagitta_mm: float) -> list[int]:
    """Indices of the points that the simplified ring keeps, in order."""
    thin = np.asarray(Polygon(ring).simplify(sagitta_mm, preserve_topology=True).exterior.coords)
    where = {(float(x), float(y)): i for i, (x, y) in enumerate(ring)}
    return sorted(where[float(x), float(y)] for x, y in thin[:-1])


def _segment_areas(ring: Array, kept: list[int]) -> Array:
    """Area between the ring and each chord; above 0 where the ring lies to the chord's right."""
    n = len(ring)
    found = []
    for a, b in zip(kept, [*kept[1:], kept[0] + n], strict=True):
        points = ring[np.arange(a, b + 1) % n] - ring[a]
        x, y = points[:, 0], points[:, 1]
        found.append(float(np.dot(x[:-1], y[1:]) - np.dot(x[1:], y[:-1])) / 2)
    return np.array(found)


def _shifts(normals: Array, heights: Array) -> Array:
    """How far each corner moves when its chords move out by their heights."""
    before, height_before = np.roll(normals, 1, axis=0), np.roll(heights, 1)
    sine = before[:, 0] * normals[:, 1] - before[:, 1] * normals[:, 0]
    mean = (before + normals) / 2
    even = mean * ((height_before + heights) / 2 / (mean * mean).sum(axis=1).clip(0.1))[:, None]
    sharp = np.abs(sine) > SHARP
    safe = np.where(sharp, sine, 1.0)
    met = np.column_stack([
        height_before * normals[:, 1] - heights * before[:, 1],
        heights * before[:, 0] - height_before * normals[:, 0],
    ]) / safe[:, None]
    return np.asarray(np.where(sharp[:, None], met, even))
