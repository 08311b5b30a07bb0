"""Shaded pictures of solids: a depth buffer in plain array arithmetic, edges drawn in.

The picture's pixels are square; x runs right, y down; depth grows away from the viewer.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field

import numpy as np
from numpy.typing import NDArray

from buildgen.packet.view import Direction
from buildgen.solid import Array

Ints = NDArray[np.int64]
ABOVE_LEFT = np.array([-0.35, 0.55, 0.76])
"""Where the light comes from, in the picture's right, up, towards the viewer."""


def isometric(azimuth_deg: float = -125.0, height_deg: float = 32.0) -> Direction:
    """Seen from a side and from above: azimuth of the viewer about z, counted from x aft."""
    a, h = np.radians([azimuth_deg, height_deg])
    to_viewer = np.array([np.cos(a) * np.cos(h), np.sin(a) * np.cos(h), np.sin(h)])
    right = np.cross([0.0, 0.0, 1.0], to_viewer)
    right /= np.linalg.norm(right)
    up = np.cross(to_viewer, right)
    return Direction(tuple(right), tuple(up))


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
    owner: Ints = field(init=False)
    shade: Array = field(init=False)

    def __post_init__(self) -> None:
        self.depth = np.full(self.width * self.height, np.inf)
        self.owner = np.full(self.width * self.height, -1, np.int64)
        self.shade = np.ones(self.width * self.height)

    def project(self, points: Array) -> Array:
        """Points (n, 3) of the aircraft to (n, 3): pixel x, pixel y, depth in pixels."""
        seen = (np.atleast_2d(points) - self.centre) @ self.way.rows.T * self.pixels_per_mm
        return np.column_stack(
            [seen[:, 0] + self.width / 2, self.height / 2 - seen[:, 1], -seen[:, 2]]
        )

    def add(self, vertices: Array, faces: Ints, owner: int, two_sided: bool = False) -> None:
        """Draw a mesh; of closed ones only the faces turned to the viewer."""
        corners = self.project(vertices)[faces]
        normal = np.cross(corners[:, 1] - corners[:, 0], corners[:, 2] - corners[:, 0])
        long = np.linalg.norm(normal, axis=1)
        # In pixels y runs down and depth runs away, so that the handedness is kept.
        facing = -normal[:, 2]
        kept = (np.abs(facing) if two_sided else facing) > 1e-6 * np.maximum(long, 1e-9)
        kept &= (corners[:, :, 0].max(axis=1) > 0) & (corners[:, :, 0].min(axis=1) < self.width)
        kept &= (corners[:, :, 1].max(axis=1) > 0) & (corners[:, :, 1].min(axis=1) < self.height)
        if not kept.any():
            return
        corners = corners[kept]
        unit = normal[kept] / long[kept][:, None] * np.where(facing[kept] < 0, -1, 1)[:, None]
        light = unit * (1, -1, -1) @ ABOVE_LEFT
        face, index, depth = _filled(corners, self.width, self.height)
        before = self.depth[index]
        np.minimum.at(self.depth, index, depth)
        front = (depth <= self.depth[index]) & (depth < before)
        self.owner[index[front]] = owner
        self.shade[index[front]] = np.clip(0.35 + 0.65 * light, 0, 1)[face[front]]

    def image_rows(self, values: Array) -> Array:
        return values.reshape(self.height, self.width)

    def edges(self) -> NDArray[np.bool_]:
        """(height, width) true where one thing or one face ends and another begins."""
        owner, shade = self.image_rows(self.owner.astype(float)), self.image_rows(self.shade)
        depth = self.image_rows(np.where(np.isinf(self.depth), 1e6, self.depth))
        found = np.zeros(owner.shape, bool)
        for axis in (0, 1):
            step = (np.diff(owner, axis=axis) != 0) | (np.abs(np.diff(shade, axis=axis)) > 0.10)
            step |= np.abs(np.diff(depth, n=1, axis=axis)) > 12
            where = [slice(None), slice(None)]
            where[axis] = slice(0, -1)
            found[tuple(where)] |= step
        return found


def _filled(corners: Array, width: int, height: int) -> tuple[Ints, Ints, Array]:
    """Every pixel centre inside each triangle: (triangle, pixel index, depth), row by row."""
    y = corners[:, :, 1]
    first = np.clip(np.ceil(y.min(axis=1) - 0.5), 0, height).astype(np.int64)
    last = np.clip(np.floor(y.max(axis=1) - 0.5), -1, height - 1).astype(np.int64)
    tri, row = _runs(first, last)
    left, right = _row_ends(corners[tri], row + 0.5)
    start = np.clip(np.ceil(left - 0.5), 0, width).astype(np.int64)
    end = np.clip(np.floor(right - 0.5), -1, width - 1).astype(np.int64)
    line, column = _runs(start, end)
    tri, row = tri[line], row[line]
    a, b, c = (corners[:, k] for k in range(3))
    cross = np.cross(b - a, c - a)
    down = a[tri]
    slope = cross[tri]
    depth = down[:, 2] - (
        slope[:, 0] * (column + 0.5 - down[:, 0]) + slope[:, 1] * (row + 0.5 - down[:, 1])
    ) / slope[:, 2]
    return tri, row * width + column, depth


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


Tone = tuple[float, float, float]


def picture(
    scene: Scene, fill: Sequence[Tone], edge: Sequence[Tone], over: int = 2
) -> NDArray[np.uint8]:
    """(height / over, width / over, 3) bytes: each owner in its tone, edges in theirs.

    Args:
        fill, edge: tone of each owner, 0 to 1 for red, green, blue.
        over: the scene's pixels on one side of a pixel of the picture.
    """
    owner = scene.image_rows(scene.owner)
    fills = np.vstack([np.asarray(fill, float).reshape(-1, 3), np.ones(3)])
    lines = np.vstack([np.asarray(edge, float).reshape(-1, 3), np.ones(3)])
    colour = fills[owner]
    light = scene.image_rows(scene.shade)[:, :, None]
    colour = np.where(owner[:, :, None] >= 0, colour * (0.55 + 0.45 * light), 1.0)
    found = scene.edges()
    # An edge belongs to the thing in front of it, the one with the smaller depth.
    colour[found] = lines[_nearer(scene)[found]]
    small = colour.reshape(scene.height // over, over, scene.width // over, over, 3)
    return np.asarray(np.round(small.mean(axis=(1, 3)) * 255), np.uint8)


def _nearer(scene: Scene) -> Ints:
    """Owner of the nearest of each pixel and its right and lower neighbours."""
    owner, depth = scene.image_rows(scene.owner).copy(), scene.image_rows(scene.depth).copy()
    for axis in (0, 1):
        other_owner, other_depth = np.roll(owner, -1, axis), np.roll(depth, -1, axis)
        closer = other_depth < depth
        owner = np.where(closer, other_owner, owner)
        depth = np.where(closer, other_depth, depth)
    return np.asarray(owner, np.int64)
