"""Skins over the wing: a region of one surface, its sheet as it lies there and flat on the bench.

The solid is ruled between its sections in both end planes, and ribs are cut by that same solid:
between them it may differ from the wing's surface, whose own rulings follow the chord, by some
hundredths of a millimetre. The flat outline is the middle of
the sheet unrolled between straight rulings, so that its area is that of the sheet in place.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import cached_property
from itertools import pairwise

import numpy as np
from shapely.geometry import Polygon

from buildgen.airframe.surface import AFT, Panel
from buildgen.solid import Array, Pose, Ruled, Shape, ring

FAR_MM = 200.0
ROWS = 48
"""Rulings from the fore to the aft edge: 0.01 mm of a nose skin's arc, measured."""
BESIDE_MM = 4.0
MOST_STRIPS = 12
SEAM_MM = 0.04
"""Between a sheet and the mean line, for the glue that joins it to the other one."""


@dataclass(frozen=True, eq=False)
class Line:
    """A straight line across a panel, seen from above: x behind the untwisted leading edge [mm]
    at the panel's inner and its outer end."""

    inner_mm: float
    outer_mm: float

    def at(self, share: float) -> float:
        """x at a share of the panel's length."""
        return self.inner_mm * (1 - share) + self.outer_mm * share


@dataclass(frozen=True, eq=False)
class Skin:
    """Sheet over the upper or lower surface of a panel, between two lines and two planes."""

    panel: Panel
    upper: bool
    thick_mm: float
    fore: Line
    aft: Line
    inner: Pose
    outer: Pose

    @cached_property
    def shape(self) -> Shape:
        """The sheet as it lies on the wing, down to the mean line where it is thinner there."""
        rings = []
        for pose in (self.inner, self.outer):
            over, under = self._row(pose, 0.0), self._row(pose, self.thick_mm, True)[::-1]
            rings.append(ring((over, True), (np.vstack([over[-1:], under[:1]]), False),
                              (under, True), (np.vstack([under[-1:], over[:1]]), False)))
        return Ruled(*rings)

    @cached_property
    def cutter(self) -> Shape:
        """All that the sheet takes from a rib: from its own inner surface outwards, and past
        both end planes."""
        deep = self.thick_mm + self._warp_mm
        rows = [self._row(pose, deep, True) for pose in (self.inner, self.outer)]
        run = rows[1] - rows[0]
        share = BESIDE_MM / float(np.linalg.norm(run, axis=1).min())
        out = self.panel.up * (FAR_MM if self.upper else -FAR_MM)
        rings = []
        # Aft to fore as in the sheet itself: a twisted face is then halved along one diagonal.
        for row in (rows[0] - share * run, rows[1] + share * run):
            lid = np.vstack([row[:1], row[:1] + out, row[-1:] + out, row[-1:]])
            rings.append(ring((row[::-1], True), (lid, False)))
        return Ruled(*rings)

    @cached_property
    def _warp_mm(self) -> float:
        """How far the two diagonals of a twisted face pass each other at most; 0 untwisted.

        The sheet is put in as the hull of its faces, so that a rib stays clear of both.
        """
        a, b = (self._row(pose, self.thick_mm, True) for pose in (self.inner, self.outer))
        return float(np.abs((a[:-1] + b[1:] - a[1:] - b[:-1]) @ self.panel.up).max()) / 2

    @cached_property
    def flat(self) -> Polygon:
        """The sheet unrolled: x along the span, y from its fore edge aft."""
        rows = [self._row(pose, self.thick_mm / 2) for pose in (self.inner, self.outer)]
        near, far = unrolled(*rows)
        return Polygon(np.vstack([near, far[::-1]]))

    @property
    def across_mm(self) -> float:
        """Least width of a strip of stock that it can be cut from."""
        box = self.flat.minimum_rotated_rectangle
        assert isinstance(box, Polygon)
        ring = np.asarray(box.exterior.coords)
        return float(np.linalg.norm(np.diff(ring[:3], axis=0), axis=1).min())

    def strips(self, widest_mm: float) -> tuple[Skin, ...]:
        """Itself, or as many strips along the span as stock of this width asks, fore to aft."""
        for count in range(1, MOST_STRIPS + 1):
            lines = [_between(self.fore, self.aft, k / count) for k in range(count + 1)]
            found = tuple(replace(self, fore=a, aft=b) for a, b in pairwise(lines))
            if max(strip.across_mm for strip in found) <= widest_mm:
                return found
        return found

    # ------------------------------------------------------------ the solid

    def _curve(self, pose: Pose) -> Array:
        """(n, 3) this surface in a plane across the span, nose to tail."""
        points = self.panel.ring(pose)
        middle = (len(points) - 1) // 2
        return points[middle::-1] if self.upper else points[middle:]

    def _inset(self, pose: Pose, depth_mm: float) -> Array:
        """(m, 3) this surface moved inwards, from ahead of the fore line to the tail."""
        flat = pose.local(self._curve(pose))[:, :2]
        way = np.gradient(flat, axis=0)
        way /= np.linalg.norm(way, axis=1)[:, None]
        inwards = np.column_stack([way[:, 1], -way[:, 0]]) * (1 if self.upper else -1)
        moved = flat + depth_mm * inwards
        keep = self._first
        return pose(np.column_stack([moved, np.zeros(len(moved))]))[keep:]

    @cached_property
    def _first(self) -> int:
        """Index of the first point of the curve that the sheet's inner surface needs."""
        found = []
        for pose in (self.inner, self.outer):
            ahead = self._ahead(self._curve(pose), self.fore)
            found.append(int(np.argmax(ahead > -BESIDE_MM)))
        return max(0, min(found) - 1)

    def _ahead(self, points: Array, line: Line) -> Array:
        """How far points (n, 3) lie behind a line [mm, along x]."""
        share = (points - self.panel.root.nose) @ self.panel.along / self.panel.length_mm
        nose = (1 - share)[:, None] * self.panel.root.nose + share[:, None] * self.panel.tip.nose
        wanted = line.inner_mm * (1 - share) + line.outer_mm * share
        return np.asarray((points - nose) @ AFT - wanted)

    # ------------------------------------------------------------ on the bench

    def _row(self, pose: Pose, depth_mm: float, to_mean: bool = False) -> Array:
        """(ROWS, 3) so deep under the surface in an end plane, from the fore to the aft line."""
        points = self._inset(pose, depth_mm)
        if to_mean:
            points = self._above_mean(pose, points)
        ends = []
        for line in (self.fore, self.aft):
            behind = self._ahead(points, line)
            k = int(np.clip(np.argmax(behind > 0), 1, len(behind) - 1)) if (
                behind[-1] > 0) else len(behind) - 1
            ends.append(k - 1 + float(np.clip(-behind[k - 1] / (behind[k] - behind[k - 1]), 0, 1)))
        places = np.linspace(ends[0], ends[1], ROWS)
        index = np.arange(len(points))
        return np.column_stack([np.interp(places, index, points[:, c]) for c in range(3)])

    def _above_mean(self, pose: Pose, points: Array) -> Array:
        """Points (n, 3) no further in than the mean line: there the other sheet begins."""
        whole = pose.local(self.panel.ring(pose))[:, :2]
        middle = (len(whole) - 1) // 2
        mean = (whole[middle::-1] + whole[middle:]) / 2
        flat = pose.local(points)
        level = np.interp(flat[:, 0], mean[:, 0], mean[:, 1])
        level += SEAM_MM if self.upper else -SEAM_MM
        limit = np.maximum if self.upper else np.minimum
        return pose(np.column_stack([flat[:, 0], limit(flat[:, 1], level), flat[:, 2]]))


def _between(fore: Line, aft: Line, share: float) -> Line:
    return Line(fore.inner_mm * (1 - share) + aft.inner_mm * share,
                fore.outer_mm * (1 - share) + aft.outer_mm * share)


def unrolled(near: Array, far: Array) -> tuple[Array, Array]:
    """Two rows of points (n, 3) joined by straight rulings, laid flat: (n, 2) each.

    Triangle by triangle, so that every ruling and every diagonal keeps its length. The first
    ruling lies along x; the rows run to positive y.
    """
    a = np.zeros((len(near), 2))
    b = np.zeros((len(near), 2))
    b[0] = float(np.linalg.norm(far[0] - near[0])), 0.0
    for i, j in pairwise(range(len(near))):
        a[j] = _apex(a[i], b[i], _apart(near[j], near[i]), _apart(near[j], far[i]))
        b[j] = _apex(a[j], b[i], _apart(far[j], near[j]), _apart(far[j], far[i]))
    return a, b


def _apart(p: Array, q: Array) -> float:
    return float(np.linalg.norm(q - p))


def _apex(p: Array, q: Array, from_p: float, from_q: float) -> Array:
    """The point at these distances from p and q, on the left of p to q."""
    base = _apart(p, q)
    x = (from_p**2 - from_q**2 + base**2) / (2 * base)
    y = float(np.sqrt(max(from_p**2 - x**2, 0.0)))
    along = (q - p) / base
    return np.asarray(p + x * along + y * np.array([-along[1], along[0]]))
