"""What a part looks like from one side: its silhouette, as flat polygons.

Views are given by two rows: where the picture's right and up lie in the aircraft.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import lru_cache

import numpy as np
import shapely
from manifold3d import CrossSection, FillRule
from shapely.geometry import MultiPolygon, Polygon

from buildgen.part import Cover, Kit, Part
from buildgen.solid import Array, Placed, Surface, mesh, polygons


@dataclass(frozen=True)
class Direction:
    """A way to look: the picture's right and up, as axes of the aircraft."""

    right: tuple[float, float, float]
    up: tuple[float, float, float]

    @property
    def rows(self) -> Array:
        """(3, 3): right, up, and towards the viewer."""
        return np.array([self.right, self.up, np.cross(self.right, self.up)])

    def flat(self, points: Array | tuple[float, float, float]) -> Array:
        """Points (n, 3) or (3,) to the picture's (n, 2) or (2,)."""
        return np.asarray(np.asarray(points, float) @ self.rows[:2].T)


FROM_ABOVE = Direction((0, 1, 0), (-1, 0, 0))
FROM_FRONT = Direction((0, -1, 0), (0, 0, 1))
FROM_LEFT = Direction((1, 0, 0), (0, 0, 1))


@lru_cache(maxsize=8192)
def silhouette(part: Part, way: Direction) -> MultiPolygon:
    """The part's shadow in the picture's mm; empty for what has no shape."""
    if part.shape is None:
        return MultiPolygon()
    if isinstance(part.form, Cover):
        return _skin_shadow(part, way)
    turned = mesh(part.shape).transform(np.column_stack([way.rows, np.zeros(3)]))
    return MultiPolygon(polygons(turned.project()))


def _skin_shadow(part: Part, way: Direction) -> MultiPolygon:
    """An open skin's triangles, all turned to face the viewer and joined."""
    shape = part.shape
    assert isinstance(shape, Placed) and isinstance(shape.shape, Surface)
    corners = way.flat(shape.pose(shape.shape.vertices))[shape.shape.faces]
    first, second = corners[:, 1] - corners[:, 0], corners[:, 2] - corners[:, 0]
    area = first[:, 0] * second[:, 1] - first[:, 1] * second[:, 0]
    corners[area < 0] = corners[area < 0][:, ::-1]
    kept = [np.ascontiguousarray(c) for c in corners[np.abs(area) > 1e-9]]
    return MultiPolygon(polygons(CrossSection(kept, FillRule.NonZero)))


def eased(shadow: MultiPolygon, tolerance_mm: float) -> MultiPolygon:
    """The same with fewer points, for drawing small."""
    simple = shapely.simplify(shadow, tolerance_mm)
    pieces = simple.geoms if isinstance(simple, MultiPolygon) else [simple]
    return MultiPolygon([p for p in pieces if isinstance(p, Polygon) and not p.is_empty])


@dataclass(frozen=True, eq=False)
class View:
    """All parts of a kit from one side.

    Attributes:
        shadows: (part, silhouette) of every part with a shape.
        outline: of all together.
    """

    way: Direction
    shadows: tuple[tuple[Part, MultiPolygon], ...]
    outline: MultiPolygon

    @property
    def bounds(self) -> tuple[float, float, float, float]:
        boxes = np.array([shadow.bounds for _, shadow in self.shadows])
        low_x, low_y = boxes[:, :2].min(axis=0)
        high_x, high_y = boxes[:, 2:].max(axis=0)
        return float(low_x), float(low_y), float(high_x), float(high_y)

    @property
    def size_mm(self) -> tuple[float, float]:
        low_x, low_y, high_x, high_y = self.bounds
        return high_x - low_x, high_y - low_y

    @property
    def from_behind(self) -> list[tuple[Part, MultiPolygon]]:
        """The farthest first: drawn in this order each part hides what lies behind it."""
        return sorted(self.shadows, key=lambda s: nearness_mm(s[0], self.way))


def nearness_mm(part: Part, way: Direction) -> float:
    """How far the part's nearest point lies towards the viewer."""
    assert part.shape is not None
    if isinstance(part.form, Cover):
        assert isinstance(part.shape, Placed) and isinstance(part.shape.shape, Surface)
        return float((part.shape.pose(part.shape.shape.vertices) @ way.rows[2]).max())
    low, high = np.array(mesh(part.shape).bounding_box()).reshape(2, 3)
    return float(np.maximum(low * way.rows[2], high * way.rows[2]).sum())


def view_of(kit: Kit, way: Direction, tolerance_mm: float = 0.3) -> View:
    """Every part's silhouette and the outline of the whole."""
    shadows = [(p, eased(silhouette(p, way), tolerance_mm)) for p in kit.flying]
    shadows = [(p, s) for p, s in shadows if not s.is_empty]
    whole = shapely.union_all([shapely.buffer(s, 0.05) for _, s in shadows])
    pieces = whole.geoms if isinstance(whole, MultiPolygon) else [whole]
    return View(way, tuple(shadows), MultiPolygon([p for p in pieces if not p.is_empty]))
