"""Solids as recipes: a geometry is derived once and read by every kernel that needs it.

A recipe is a small tree of frozen nodes. This module turns one into a triangle mesh with
manifold3d (fast: weights, cut-outs, dry fit, 3D model); ``prints.brep`` turns the same tree into
a boundary representation with CadQuery (STEP). Lengths in mm.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Sequence
from dataclasses import dataclass, field
from functools import cached_property
from typing import Any, TypeAlias

import numpy as np
import shapely
from manifold3d import CrossSection, FillRule, Manifold, Mesh64, triangulate
from numpy.typing import NDArray
from shapely.geometry import MultiPolygon, Polygon
from shapely.geometry.polygon import orient

Array: TypeAlias = NDArray[np.float64]
Vector: TypeAlias = tuple[float, float, float]
Direction: TypeAlias = Sequence[float] | NDArray[np.float64]
Circle: TypeAlias = tuple[float, float, float]
"""x_mm, y_mm, radius_mm"""

CHORD_ERROR_MM = 0.01
ROUND_SIDES = 96


# ---------------------------------------------------------------- placing


@dataclass(frozen=True, eq=False)
class Pose:
    """A right-handed frame in the aircraft: ``world = rotation @ local + origin``."""

    rotation: Array = field(default_factory=lambda: np.eye(3))
    origin: Array = field(default_factory=lambda: np.zeros(3))

    @classmethod
    def at(cls, origin: Direction, x: Direction, y: Direction) -> Pose:
        """Frame with its x axis along `x` and its y axis in the half plane of `y`."""
        ex = np.asarray(x, float) / np.linalg.norm(x)
        ez = np.cross(ex, np.asarray(y, float))
        ez /= np.linalg.norm(ez)
        return cls(np.column_stack([ex, np.cross(ez, ex), ez]), np.asarray(origin, float))

    def __call__(self, points: Array | Sequence[float]) -> Array:
        """Local points (n, 3) or (3,) to the aircraft."""
        return np.asarray(points, float) @ self.rotation.T + self.origin

    def local(self, points: Array | Sequence[float]) -> Array:
        """Aircraft points (n, 3) or (3,) to this frame."""
        return (np.asarray(points, float) - self.origin) @ self.rotation

    def then(self, outer: Pose) -> Pose:
        """This frame, standing in `outer`."""
        return Pose(outer.rotation @ self.rotation, outer(self.origin))

    @property
    def inverse(self) -> Pose:
        return Pose(self.rotation.T, -self.rotation.T @ self.origin)

    def mirrored(self, keep: int) -> Pose:
        """The frame on the other side of the aircraft (y -> -y), local axis `keep` reversed."""
        world = np.diag([1.0, -1.0, 1.0])
        local = np.eye(3)
        local[keep, keep] = -1.0
        return Pose(world @ self.rotation @ local, world @ self.origin)


HERE = Pose()


# ---------------------------------------------------------------- recipes


@dataclass(frozen=True, eq=False)
class Prism:
    """A flat outline with its holes and true circles, from z = 0 to z = height."""

    outline: Polygon
    height_mm: float
    circles: tuple[Circle, ...] = ()


@dataclass(frozen=True, eq=False)
class Rod:
    """A round bar or tube along +x, from x = 0."""

    radius_mm: float
    length_mm: float
    bore_radius_mm: float = 0.0


@dataclass(frozen=True, eq=False)
class Run:
    """A piece of a ring: (k, 3) points; `smooth` where they lie on a curve."""

    points: Array
    smooth: bool = False


@dataclass(frozen=True, eq=False)
class Ruled:
    """Straight generators between two planar rings with equal runs, point to point."""

    first: tuple[Run, ...]
    last: tuple[Run, ...]


@dataclass(frozen=True, eq=False)
class Box:
    """A block from `low` to `high`."""

    low: Vector
    high: Vector


@dataclass(frozen=True, eq=False)
class Surface:
    """A triangulated solid or skin as it stands: imported, bent, or a covering."""

    vertices: Array
    faces: NDArray[np.int64]


@dataclass(frozen=True, eq=False)
class Placed:
    """A recipe in a frame of its parent."""

    shape: Shape
    pose: Pose


@dataclass(frozen=True, eq=False)
class Mirrored:
    """A recipe reflected in its own local axis (0, 1 or 2)."""

    shape: Shape
    axis: int


@dataclass(frozen=True, eq=False)
class Union:
    """All of these."""

    shapes: tuple[Shape, ...]


@dataclass(frozen=True, eq=False)
class Difference:
    """The first without the others."""

    body: Shape
    tools: tuple[Shape, ...]


@dataclass(frozen=True, eq=False)
class Common:
    """What all of these share."""

    shapes: tuple[Shape, ...]


Shape: TypeAlias = (
    Prism | Rod | Ruled | Box | Surface | Placed | Mirrored | Union | Difference | Common
)


def ring(*runs: tuple[Array, bool]) -> tuple[Run, ...]:
    """A ring from (points, smooth) pairs; consecutive runs share their end point."""
    return tuple(Run(np.asarray(points, float), smooth) for points, smooth in runs)


def ring_points(runs: Iterable[Run]) -> Array:
    """The ring as (n, 3) points without repeats, open."""
    return np.vstack([run.points[:-1] for run in runs])


def prism_between(outline: Array, start: Array, end: Array, up: Direction) -> Ruled:
    """A straight bar of (n, 2) section, x of the section along start->end x up; square ends."""
    axis = (end - start) / np.linalg.norm(end - start)
    side = np.cross(axis, np.asarray(up, float))
    side /= np.linalg.norm(side)
    top = np.cross(side, axis)
    flat = np.vstack([outline, outline[:1]])
    offset = flat[:, :1] * side + flat[:, 1:] * top
    return Ruled(ring((start + offset, False)), ring((end + offset, False)))


# ---------------------------------------------------------------- meshes


def circle_points(radius: float, sides: int, outside: bool = False) -> Array:
    """(sides, 2) points of a circle; circumscribed when `outside`, so that a rod passes."""
    grow = 1 / math.cos(math.pi / sides) if outside else 1.0
    angles = np.arange(sides) * (2 * math.pi / sides)
    return radius * grow * np.column_stack([np.cos(angles), np.sin(angles)])


def round_sides(radius: float, chord_error: float = CHORD_ERROR_MM) -> int:
    """Sides for a circle within the chord error, a multiple of 8, 24 at least."""
    ratio = min(0.5, chord_error / max(radius, 1e-6))
    sides = math.pi / math.acos(1 - ratio)
    return max(24, 8 * math.ceil(sides / 8))


def with_circles(outline: Polygon, circles: Iterable[Circle]) -> Polygon:
    """The outline with its true circles cut as circumscribed polygons."""
    holes = [
        Polygon(circle_points(r, round_sides(r), outside=True) + (x, y)) for x, y, r in circles
    ]
    if not holes:
        return outline
    cut = outline.difference(shapely.union_all(holes))
    return cut if isinstance(cut, Polygon) else max(cut.geoms, key=lambda g: g.area)


def contours(outline: Polygon | MultiPolygon) -> list[Array]:
    """Rings of a polygon as (n, 2) arrays, outside counter-clockwise, holes clockwise."""
    rings: list[Array] = []
    for piece in outline.geoms if isinstance(outline, MultiPolygon) else [outline]:
        turned = orient(piece)
        rings += [np.asarray(r.coords)[:-1] for r in (turned.exterior, *turned.interiors)]
    return rings


def polygons(section: CrossSection) -> list[Polygon]:
    """A manifold cross-section as shapely polygons."""
    rings = [Polygon(r) for r in section.to_polygons() if len(r) > 2]
    merged = Polygon()
    for piece in sorted(rings, key=lambda p: -p.area):
        merged = merged.symmetric_difference(piece)
    if isinstance(merged, Polygon):
        return [] if merged.is_empty else [merged]
    return [g for g in merged.geoms if isinstance(g, Polygon)]


_meshes: dict[int, tuple[Shape, Manifold]] = {}


def mesh(shape: Shape) -> Manifold:
    """The recipe as a closed triangle mesh; built once for each recipe.

    Raises:
        ValueError: the recipe gives no closed solid (a fault of the program, not of the user).
    """
    key = id(shape)
    if key not in _meshes:
        made = _build(shape)
        if made.is_empty() and not isinstance(shape, Common | Difference | Surface):
            raise ValueError(f"{type(shape).__name__} gives no solid: {made.status()}")
        _meshes[key] = (shape, made)
    return _meshes[key][1]


def _build(shape: Shape) -> Manifold:  # noqa: C901 - one case for each recipe node
    match shape:
        case Prism():
            flat = CrossSection(
                contours(with_circles(shape.outline, shape.circles)), FillRule.Positive
            )
            return Manifold.extrude(flat, shape.height_mm)
        case Rod():
            return _rod(shape)
        case Ruled():
            return _ruled(ring_points(shape.first), ring_points(shape.last))
        case Box():
            size = np.subtract(shape.high, shape.low)
            return Manifold.cube(size).translate(shape.low)
        case Surface():
            return _from_triangles(shape.vertices, shape.faces)
        case Placed():
            matrix = np.column_stack([shape.pose.rotation, shape.pose.origin])
            return mesh(shape.shape).transform(matrix)
        case Mirrored():
            normal = [0.0, 0.0, 0.0]
            normal[shape.axis] = 1.0
            return mesh(shape.shape).mirror(normal)
        case Union():
            return _fold([mesh(s) for s in shape.shapes], "Add")
        case Difference():
            return _fold([mesh(shape.body), *(mesh(s) for s in shape.tools)], "Subtract")
        case Common():
            return _fold([mesh(s) for s in shape.shapes], "Intersect")


def _fold(solids: list[Manifold], operation: str) -> Manifold:
    from manifold3d import OpType

    return Manifold.batch_boolean(solids, getattr(OpType, operation))


def _rod(shape: Rod) -> Manifold:
    flat = CrossSection([circle_points(shape.radius_mm, ROUND_SIDES)], FillRule.Positive)
    if shape.bore_radius_mm > 0:
        flat -= CrossSection(
            [circle_points(shape.bore_radius_mm, ROUND_SIDES, outside=True)], FillRule.Positive
        )
    along_x = np.array([[0.0, 0, 1, 0], [1.0, 0, 0, 0], [0, 1.0, 0, 0]])
    return Manifold.extrude(flat, shape.length_mm).transform(along_x)


def _ruled(first: Array, last: Array) -> Manifold:
    """Side quads as two triangles each, ends filled flat."""
    if len(first) != len(last):
        raise ValueError(f"rings of {len(first)} and {len(last)} points cannot be ruled")
    n = len(first)
    i = np.arange(n)
    j = (i + 1) % n
    sides = np.vstack([np.column_stack([i, j, j + n]), np.column_stack([i, j + n, i + n])])
    cap = _cap(first)
    faces = np.vstack([cap[:, ::-1], sides, cap + n])
    vertices = np.vstack([first, last])
    solid = _from_triangles(vertices, faces)
    return solid if solid.volume() > 0 else _from_triangles(vertices, faces[:, ::-1])


def _cap(points: Array) -> NDArray[np.int64]:
    """Triangles of a planar ring, wound as the ring is."""
    centre = points.mean(axis=0)
    _, _, axes = np.linalg.svd(points - centre, full_matrices=False)
    flat = (points - centre) @ axes[:2].T
    x, y = flat.T
    area = float(np.dot(x, np.roll(y, -1)) - np.dot(np.roll(x, -1), y))
    if area < 0:
        flat = flat * (1, -1)
    return np.asarray(triangulate([np.ascontiguousarray(flat)], 1e-9), np.int64)


def _from_triangles(vertices: Array, faces: NDArray[np.int64]) -> Manifold:
    data = Mesh64(
        vert_properties=np.ascontiguousarray(vertices, np.float64),
        tri_verts=np.ascontiguousarray(faces, np.uint64),
    )
    data.merge()
    return Manifold(data)


def triangles(solid: Manifold) -> tuple[Array, NDArray[np.int64]]:
    """Vertices (n, 3) in mm and faces (m, 3) of a mesh."""
    data = solid.to_mesh64()
    return (
        np.asarray(data.vert_properties, float)[:, :3],
        np.asarray(data.tri_verts, np.int64),
    )


# ---------------------------------------------------------------- figures


@dataclass(frozen=True, eq=False)
class Figures:
    """Volume [mm3], centroid [mm] (3,), second moments about the centroid [mm5] (3, 3)."""

    volume_mm3: float
    centroid_mm: Array
    inertia_mm5: Array

    @cached_property
    def radius2(self) -> Array:
        """Inertia tensor of unit mass about the centroid [mm2]."""
        trace = np.trace(self.inertia_mm5)
        if self.volume_mm3 <= 0:
            return np.zeros((3, 3))
        return np.asarray((trace * np.eye(3) - self.inertia_mm5) / self.volume_mm3)


def solid_figures(vertices: Array, faces: NDArray[np.int64]) -> Figures:
    """Exact figures of a closed mesh by signed tetrahedra.

    Source: divergence theorem on tetrahedra with one corner at the origin (textbook).
    """
    shift = vertices.mean(axis=0)
    a, b, c = (vertices[faces[:, k]] - shift for k in range(3))
    six = np.einsum("ij,ij->i", a, np.cross(b, c))
    volume = six.sum() / 6
    if abs(volume) < 1e-12:
        return Figures(0.0, shift, np.zeros((3, 3)))
    total = a + b + c
    centroid = (six[:, None] * total).sum(axis=0) / (24 * volume)
    second = np.einsum("i,ij,ik->jk", six, total, total)
    for p in (a, b, c):
        second += np.einsum("i,ij,ik->jk", six, p, p)
    second = second / 120 - volume * np.outer(centroid, centroid)
    return Figures(float(volume), centroid + shift, second)


def skin_figures(vertices: Array, faces: NDArray[np.int64]) -> tuple[float, Array, Array]:
    """Area [mm2], centroid (3,) and unit-mass inertia (3, 3) [mm2] of an open skin."""
    a, b, c = (vertices[faces[:, k]] for k in range(3))
    areas = np.linalg.norm(np.cross(b - a, c - a), axis=1) / 2
    total = float(areas.sum())
    centroid = (areas[:, None] * (a + b + c)).sum(axis=0) / (3 * total)
    second = np.zeros((3, 3))
    for p in ((a + b) / 2, (b + c) / 2, (c + a) / 2):
        second += np.einsum("i,ij,ik->jk", areas / 3, p - centroid, p - centroid)
    second /= total
    return total, centroid, np.trace(second) * np.eye(3) - second


def crossing(solid: Manifold, pose: Pose, thickness_mm: float) -> list[Polygon]:
    """What a solid covers of a plate: its silhouette through the whole thickness.

    Args:
        solid: in the aircraft's frame.
        pose: the plate's frame; the plate lies from z = 0 to z = thickness.

    Returns:
        Polygons in the plate's x, y.
    """
    inverse: Any = pose.inverse
    moved = solid.transform(np.column_stack([inverse.rotation, inverse.origin]))
    slab = moved.trim_by_plane([0, 0, 1], 0.0).trim_by_plane([0, 0, -1], -thickness_mm)
    return [] if slab.is_empty() else polygons(slab.project())
