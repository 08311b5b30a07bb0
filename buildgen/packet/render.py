"""Shaded pictures of solids: a depth buffer in plain array arithmetic, edges drawn in.

The picture's pixels are square; x runs right, y down; depth grows away from the viewer.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field, replace
from typing import Any

import numpy as np
from numpy.typing import NDArray

from buildgen.packet.view import Direction
from buildgen.solid import Array

Ints = NDArray[np.int64]
ABOVE_LEFT = np.array([-0.35, 0.55, 0.76])
"""Where the light comes from, in the picture's right, up, towards the viewer."""
SKIN_NEARER_PX = 2.0
"""Skins are drawn a little nearer than the frame that they touch."""
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
class Batch:
    """Meshes drawn together: each face has its owner and is two-sided, as skins are, or not."""

    vertices: Array
    faces: Ints
    owner: Ints
    two_sided: NDArray[np.bool_]

    @classmethod
    def of(cls, meshes: Sequence[tuple[int, Array, Ints, bool]]) -> Batch:
        """From (owner, vertices, faces, two-sided) of each mesh; at least one."""
        counts = [len(vertices) for _, vertices, _, _ in meshes]
        shifts = np.cumsum([0, *counts[:-1]])
        sizes = [len(faces) for _, _, faces, _ in meshes]
        return cls(
            np.vstack([v for _, v, _, _ in meshes]),
            np.vstack([f + shift for (_, _, f, _), shift in zip(meshes, shifts, strict=True)]),
            np.repeat([owner for owner, _, _, _ in meshes], sizes),
            np.repeat([two for _, _, _, two in meshes], sizes),
        )


@dataclass(eq=False)
class Scene:
    """What is in front at each pixel.

    Attributes:
        owner: number of the thing seen, -1 for none; `shade` 0 to 1 its light.
    """

    way: Direction
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

    def project(self, points: Array) -> Array:
        """Points (n, 3) of the aircraft to (n, 3): pixel x, pixel y, depth in pixels."""
        seen = (np.atleast_2d(points) - self.centre) @ self.way.rows.T * self.pixels_per_mm
        return np.column_stack(
            [seen[:, 0] + self.width / 2, self.height / 2 - seen[:, 1], -seen[:, 2]]
        )

    def add(self, batch: Batch) -> None:
        """Draw a batch of meshes; of closed ones only the faces turned to the viewer."""
        corners = self.project(batch.vertices)[batch.faces]
        a, b, c = corners[:, 0], corners[:, 1], corners[:, 2]
        # In pixels y runs down and depth runs away, so that the handedness is kept.
        facing = (c[:, 0] - a[:, 0]) * (b[:, 1] - a[:, 1])
        facing -= (b[:, 0] - a[:, 0]) * (c[:, 1] - a[:, 1])
        seen = np.where(batch.two_sided, np.abs(facing), facing) > 1e-7
        across, down = corners[:, :, 0], corners[:, :, 1]
        seen &= (across.max(axis=1) > 0) & (across.min(axis=1) < self.width)
        seen &= (down.max(axis=1) > 0) & (down.min(axis=1) < self.height)
        if not seen.any():
            return
        corners, two_sided = corners[seen], batch.two_sided[seen]
        normal = np.cross(corners[:, 1] - corners[:, 0], corners[:, 2] - corners[:, 0])
        unit = normal / np.linalg.norm(normal, axis=1)[:, None]
        unit = unit * np.where(unit[:, 2] > 0, -1, 1)[:, None]
        light = np.clip(0.45 + 0.55 * (unit * (1, -1, -1) @ ABOVE_LEFT), 0, 1)
        face, index, depth = _filled(corners, normal, self.width, self.height)
        depth = depth - np.where(two_sided, SKIN_NEARER_PX, 0.0)[face]
        before = self.depth[index]
        np.minimum.at(self.depth, index, depth)
        front = (depth <= self.depth[index]) & (depth < before)
        self.owner[index[front]] = batch.owner[seen][face[front]]
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


def _filled(
    corners: Array, normal: Array, width: int, height: int
) -> tuple[Ints, Ints, Array]:
    """Every pixel centre inside each triangle: (triangle, pixel index, depth), row by row."""
    y = corners[:, :, 1]
    first = np.clip(np.ceil(y.min(axis=1) - 0.5), 0, height).astype(np.int64)
    last = np.clip(np.floor(y.max(axis=1) - 0.5), -1, height - 1).astype(np.int64)
    tri, row = _runs(first, last)
    left, right = _row_ends(corners[tri], np.asarray(row + 0.5, np.float64))
    start = np.clip(np.ceil(left - 0.5), 0, width).astype(np.int64)
    end = np.clip(np.floor(right - 0.5), -1, width - 1).astype(np.int64)
    line, column = _runs(start, end)
    tri, row = tri[line], row[line]
    # Depth on the triangle's plane: at the first corner, and its fall to the right and down.
    fall = -normal[:, :2] / normal[:, 2:]
    level = corners[:, 0, 2] - (fall * corners[:, 0, :2]).sum(axis=1)
    depth = level[tri] + fall[tri, 0] * (column + 0.5) + fall[tri, 1] * (row + 0.5)
    return tri, row * width + column, np.asarray(depth, np.float64)


def _runs(first: Ints, last: Ints) -> tuple[Ints, Ints]:
    """Whole numbers first..last of each row of input: (which, number)."""
    counts = np.maximum(last - first + 1, 0)
    which = np.repeat(np.arange(len(first)), counts)
    offset = np.arange(len(which)) - np.repeat(np.cumsum(counts) - counts, counts)
    return which, first[which] + offset


def _row_ends(corners: Array, y: Array) -> tuple[Array, Array]:
    """Where a row's middle line enters and leaves each triangle."""
    left, right = np.full(len(y), np.inf), np.full(len(y), -np.inf)
    for i, j in ((0, 1), (1, 2), (2, 0)):
        a, b = corners[:, i], corners[:, j]
        rise = b[:, 1] - a[:, 1]
        flat = np.abs(rise) < 1e-12
        t = (y - a[:, 1]) / np.where(flat, 1.0, rise)
        inside = ~flat & (t >= 0) & (t <= 1)
        x = a[:, 0] + t * (b[:, 0] - a[:, 0])
        left = np.where(inside, np.minimum(left, x), left)
        right = np.where(inside, np.maximum(right, x), right)
    return np.where(np.isinf(left), 0, left), np.where(np.isinf(right), -1, right)
