"""Shaded pictures of solids: a depth buffer in plain array arithmetic, edges drawn in.

The picture's pixels are square; x runs right, y down; depth grows away from the viewer.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field, replace
from functools import cached_property
from typing import Any

import numpy as np
from numpy.typing import NDArray

from buildgen.packet.view import Direction
from buildgen.solid import Array

Ints = NDArray[np.int64]
ABOVE_LEFT = np.array([-0.35, 0.55, 0.76])
"""Where the light comes from, in the picture's right, up, towards the viewer."""
LEAST_FACING = 1e-4
"""Faces seen at a flatter angle (sine) are left to their neighbours."""
EDGE_SHADE, EDGE_PX = 0.08, 12.0
"""Steps of light and of depth that are drawn as an edge."""


def isometric(azimuth_deg: float = -125.0, height_deg: float = 32.0) -> Direction:
    """Seen from a side and from above: azimuth of the viewer about z, counted from x aft."""
    a, h = np.radians([azimuth_deg, height_deg])
    to_viewer = np.array([np.cos(a) * np.cos(h), np.sin(a) * np.cos(h), np.sin(h)])
    right = np.cross([0.0, 0.0, 1.0], to_viewer)
    right /= np.linalg.norm(right)
    up = np.cross(to_viewer, right)
    return Direction(tuple(right), tuple(up))


@dataclass(frozen=True, eq=False)
class Facing:
    """The faces of a mesh that are turned to the viewer, in the viewer's axes and mm.

    Attributes:
        corners: (m, 3, 3) face, corner, (right, up, towards the viewer).
        light: (m,) 0 to 1.
    """

    corners: Array
    light: Array

    @cached_property
    def bounds(self) -> tuple[Array, Array]:
        """Lowest and highest right, up, towards the viewer; empty: an inverted box."""
        flat = self.corners.reshape(-1, 3)
        if not len(flat):
            return np.full(3, np.inf), np.full(3, -np.inf)
        return flat.min(axis=0), flat.max(axis=0)


def facing(way: Direction, vertices: Array, faces: Ints, two_sided: bool = False) -> Facing:
    """Turn a mesh to the viewer; of closed ones the faces turned away are left out.

    Args:
        two_sided: an open skin, seen from both sides.
    """
    corners = (vertices @ way.rows.T)[faces]
    normal = np.cross(corners[:, 1] - corners[:, 0], corners[:, 2] - corners[:, 0])
    towards = np.abs(normal[:, 2]) if two_sided else normal[:, 2]
    kept = towards > LEAST_FACING * np.linalg.norm(normal, axis=1)
    corners, normal = corners[kept], normal[kept]
    unit = normal / np.linalg.norm(normal, axis=1)[:, None]
    unit = unit * np.where(unit[:, 2] < 0, -1, 1)[:, None]
    return Facing(corners, np.clip(0.45 + 0.55 * (unit @ ABOVE_LEFT), 0, 1))


@dataclass(eq=False)
class Scene:
    """What is in front at each pixel.

    Attributes:
        centre: what stands in the middle of the picture, in the viewer's axes.
        owner: number of the thing seen, -1 for none; `shade` 0 to 1 its light.
    """

    width: int
    height: int
    pixels_per_mm: float
    centre: Array
    depth: Array = field(init=False)
    owner: NDArray[np.int32] = field(init=False)
    shade: NDArray[np.float32] = field(init=False)

    def __post_init__(self) -> None:
        self.depth = np.full(self.width * self.height, np.inf)
        self.owner = np.full(self.width * self.height, -1, np.int32)
        self.shade = np.ones(self.width * self.height, np.float32)

    def holds(self, seen: Facing) -> bool:
        """Whether any of it may lie in the picture."""
        half = np.array([self.width, self.height]) / 2 / self.pixels_per_mm
        low, high = (b[:2] - self.centre[:2] for b in seen.bounds)
        return bool((high > -half).all() and (low < half).all())

    def add(self, things: Sequence[tuple[int, Facing]], nearer_mm: float = 0.0) -> None:
        """Draw things with their owners; `nearer_mm` draws them before what they touch."""
        things = [(owner, seen) for owner, seen in things if self.holds(seen)]
        if not things:
            return
        sizes = [len(seen.light) for _, seen in things]
        owners = np.repeat([owner for owner, _ in things], sizes)
        light = np.concatenate([seen.light for _, seen in things])
        corners = np.concatenate([seen.corners for _, seen in things]) - self.centre
        corners *= self.pixels_per_mm * np.array([1.0, -1.0, -1.0])
        corners += np.array([self.width / 2, self.height / 2, -nearer_mm * self.pixels_per_mm])
        face, index, depth = _filled(corners, self.width, self.height)
        before = self.depth[index]
        np.minimum.at(self.depth, index, depth)
        front = (depth <= self.depth[index]) & (depth < before)
        self.owner[index[front]] = owners[face[front]]
        self.shade[index[front]] = light[face[front]]

    def copy(self) -> Scene:
        """The same picture, to draw more into."""
        other = replace(self)
        other.depth, other.owner = self.depth.copy(), self.owner.copy()
        other.shade = self.shade.copy()
        return other

    def rows(self, values: NDArray[Any]) -> NDArray[Any]:
        """Values of all pixels as (height, width)."""
        return values.reshape(self.height, self.width)

    def edges(self) -> NDArray[np.bool_]:
        """(height, width) true where one thing or one face ends and another begins."""
        owner, shade = self.rows(self.owner), self.rows(self.shade)
        depth = self.rows(np.where(np.isinf(self.depth), 1e6, self.depth).astype(np.float32))
        found = np.zeros(owner.shape, bool)
        for here, next_ in _NEIGHBOURS:
            step = owner[here] != owner[next_]
            step |= np.abs(shade[here] - shade[next_]) > EDGE_SHADE
            step |= np.abs(depth[here] - depth[next_]) > EDGE_PX
            found[here] |= step
        return found

    def nearest(self) -> NDArray[np.int32]:
        """(height, width) owner of the nearest of each pixel, its right and its lower one.

        An edge belongs to the thing in front of it.
        """
        owner, depth = self.rows(self.owner).copy(), self.rows(self.depth).copy()
        for here, next_ in _NEIGHBOURS:
            closer = depth[next_] < depth[here]
            owner[here] = np.where(closer, owner[next_], owner[here])
            depth[here] = np.where(closer, depth[next_], depth[here])
        return owner


_ALL, _FIRST, _LAST = slice(None), slice(0, -1), slice(1, None)
_NEIGHBOURS = (((_ALL, _FIRST), (_ALL, _LAST)), ((_FIRST, _ALL), (_LAST, _ALL)))


def _filled(corners: Array, width: int, height: int) -> tuple[Ints, Ints, Array]:
    """Every pixel centre inside each triangle: (triangle, pixel index, depth), row by row."""
    y = corners[:, :, 1]
    first, last = _between(y.min(axis=1), y.max(axis=1), height)
    some = np.nonzero(last >= first)[0]
    which, row = _runs(first[some], last[some])
    tri = some[which]
    start, end = _between(*_row_ends(corners, tri, np.asarray(row + 0.5, float)), width)
    line, column = _runs(start, end)
    # Depth on the triangle's plane: at the first corner, and its fall to the right and down.
    a, ab, ac = corners[some, 0], *(corners[some, k] - corners[some, 0] for k in (1, 2))
    normal = np.cross(ab, ac)
    fall = -normal[:, :2] / normal[:, 2:]
    level = a[:, 2] - (fall * a[:, :2]).sum(axis=1)
    which, row = which[line], row[line]
    depth = level[which] + fall[which, 0] * (column + 0.5) + fall[which, 1] * (row + 0.5)
    return some[which], row * width + column, depth


def _between(low: Array, high: Array, most: int) -> tuple[Ints, Ints]:
    """First and last whole number whose middle lies between low and high, within the picture."""
    return (
        np.clip(np.ceil(low - 0.5), 0, most).astype(np.int64),
        np.clip(np.floor(high - 0.5), -1, most - 1).astype(np.int64),
    )


def _runs(first: Ints, last: Ints) -> tuple[Ints, Ints]:
    """Whole numbers first..last of each row of input: (which, number)."""
    counts = np.maximum(last - first + 1, 0)
    which = np.repeat(np.arange(len(first)), counts)
    offset = np.arange(len(which)) - np.repeat(np.cumsum(counts) - counts, counts)
    return which, first[which] + offset


def _row_ends(corners: Array, tri: Ints, y: Array) -> tuple[Array, Array]:
    """Where a row's middle line enters and leaves its triangle: the corners sorted downwards.

    The long edge runs from the top corner to the bottom one, the other side over the middle one.
    """
    order = np.argsort(corners[:, :, 1], axis=1, kind="stable")
    top, middle, bottom = (
        np.take_along_axis(corners, order[:, k, None, None], axis=1)[:, 0, :2] for k in range(3)
    )
    long, upper, lower = _lean(top, bottom), _lean(top, middle), _lean(middle, bottom)
    one = top[tri, 0] + long[tri] * (y - top[tri, 1])
    below = y > middle[tri, 1]
    start = np.where(below, middle[tri, 1], top[tri, 1])
    other = np.where(below, middle[tri, 0], top[tri, 0])
    other = other + np.where(below, lower[tri], upper[tri]) * (y - start)
    return np.minimum(one, other), np.maximum(one, other)


def _lean(above: Array, below: Array) -> Array:
    """Run of an edge for each pixel down; 0 for a level one, which no row's middle crosses."""
    rise = below[:, 1] - above[:, 1]
    level = rise < 1e-12
    run = np.where(level, 0.0, below[:, 0] - above[:, 0])
    return np.asarray(run / np.where(level, 1.0, rise), np.float64)
