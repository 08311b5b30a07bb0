"""Skins over the wing: a region of one surface, its sheet as it lies there and flat on the bench.

The solid is what lies between the wing's own surface and the same surface moved inwards by the
sheet; ribs are cut by all that lies outside that inner surface. The flat outline is the middle of
the sheet unrolled between straight rulings, so that its area is that of the sheet in place.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from itertools import pairwise

import numpy as np
from shapely.geometry import Polygon

from buildgen.airframe.surface import AFT, Panel
from buildgen.solid import Array, Common, Difference, Pose, Ruled, Shape, ring

FAR_MM = 200.0
ROWS = 48
"""Rulings from the fore to the aft edge: 0.01 mm of a nose skin's arc, measured."""
BESIDE_MM = 4.0


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
        """The sheet as it lies on the wing."""
        return Difference(Common((self._half, self._between)), (self._below,))

    @cached_property
    def cutter(self) -> Shape:
        """All that the sheet takes from a rib: from its inner surface outwards."""
        return Difference(self._between, (self._below,))

    @cached_property
    def flat(self) -> Polygon:
        """The sheet unrolled: x along the span, y from its fore edge aft."""
        rows = [self._row(pose) for pose in (self.inner, self.outer)]
        near, far = unrolled(*rows)
        return Polygon(np.vstack([near, far[::-1]]))

    # ------------------------------------------------------------ the solid

    def _curve(self, pose: Pose) -> Array:
        """(n, 3) this surface in a plane across the span, nose to tail."""
        points = self.panel.ring(pose)
        middle = (len(points) - 1) // 2
        return points[middle::-1] if self.upper else points[middle:]

    @property
    def _half(self) -> Ruled:
        """The upper or lower half of the wing: from the mean line to the surface."""
        rings = []
        for pose in (self.inner, self.outer):
            points = self.panel.ring(pose)
            middle = (len(points) - 1) // 2
            mean = (points[middle::-1] + points[middle:]) / 2
            own = self._curve(pose)
            rings.append(ring((own[::-1], True), (mean, True),
                              (np.vstack([mean[-1:], own[-1:]]), False)))
        return Ruled(*rings)

    @property
    def _between(self) -> Ruled:
        """Everything between the two lines, from the mean line far out; past both end planes."""
        rings = []
        for share in self._shares:
            nose = self.panel.nose(share * self.panel.length_mm)
            low, high = (-FAR_MM, FAR_MM)
            corners = [(self.fore.at(share), low), (self.aft.at(share), low),
                       (self.aft.at(share), high), (self.fore.at(share), high)]
            points = np.array([nose + x * AFT + y * self.panel.up for x, y in corners])
            rings.append(points)
        closed = [ring((np.vstack([p, p[:1]]), False)) for p in rings]
        return Ruled(*closed)

    @property
    def _shares(self) -> tuple[float, float]:
        """Shares of the panel's length just outside both end planes."""
        along = [(self._curve(pose) - self.panel.root.nose) @ self.panel.along
                 for pose in (self.inner, self.outer)]
        low, high = float(along[0].min()), float(along[1].max())
        return (low - BESIDE_MM) / self.panel.length_mm, (high + BESIDE_MM) / self.panel.length_mm

    @property
    def _below(self) -> Ruled:
        """Everything inside the sheet's inner surface, beyond all edges."""
        curves = [self._inset(pose, self.thick_mm) for pose in (self.inner, self.outer)]
        share = 2 * BESIDE_MM / max(1.0, float(np.linalg.norm(curves[1] - curves[0], axis=1).min()))
        run = curves[1] - curves[0]
        curves = [curves[0] - share * run, curves[1] + share * run]
        down = self.panel.up * (-3 * FAR_MM if self.upper else 3 * FAR_MM)
        rings = []
        for points in curves:
            fore, aft = points[0] - FAR_MM * AFT, points[-1] + FAR_MM * AFT
            box = np.vstack([points[-1:], aft, aft + down, fore + down, fore, points[:1]])
            rings.append(ring((points, True), (box, False)))
        return Ruled(*rings)

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

    def _row(self, pose: Pose) -> Array:
        """(ROWS, 3) the middle of the sheet in an end plane, fore to aft edge."""
        outer = self._curve(pose)[self._first:]
        middle = self._inset(pose, self.thick_mm / 2)
        ends = []
        for line in (self.fore, self.aft):
            behind = self._ahead(outer, line)
            k = int(np.clip(np.argmax(behind > 0), 1, len(behind) - 1)) if (
                behind[-1] > 0) else len(behind) - 1
            ends.append(k - 1 + float(np.clip(-behind[k - 1] / (behind[k] - behind[k - 1]), 0, 1)))
        places = np.interp(np.linspace(0, 1, ROWS), (0, 1), ends)
        index = np.arange(len(middle))
        return np.column_stack([np.interp(places, index, middle[:, c]) for c in range(3)])


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
