"""Plate blanks and what passes through them.

A blank is a rib or former before anything is cut from it. Every member that passes is asked for
its cut: derived from the member's real solid through the plate's whole thickness, plus the fit.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass, field

import numpy as np
import shapely
from shapely.affinity import translate
from shapely.geometry import Point, Polygon, box

from buildgen.part import Bend, Mark
from buildgen.solid import Array, Circle, Pose, Shape, crossing, mesh

TRUE_CIRCLE_MM = 0.03
"""An ellipse this close to a circle is cut as the circle round it."""
ARC = 48
FAR_MM = 500.0


@dataclass(frozen=True, eq=False)
class Blank:
    """A plate still whole: `outline` in the x, y of `pose`, z from 0 to the thickness."""

    id: str
    pose: Pose
    thickness_mm: float
    outline: Polygon
    side: str = "right"
    bend: Bend | None = None


@dataclass(frozen=True, eq=False)
class Cut:
    """What a member takes from a blank, adds to it, and writes on it."""

    holes: tuple[Polygon, ...] = ()
    circles: tuple[Circle, ...] = ()
    tabs: tuple[Polygon, ...] = ()
    marks: tuple[Mark, ...] = ()


@dataclass(frozen=True, eq=False)
class Bar:
    """A straight member as the cut needs it: axis from start to end, convex section (n, 2).

    The section's x and y lie along `x` and `y`; `radius_mm` above 0 makes it round.
    """

    start: Array
    end: Array
    x: Array
    y: Array
    section: Array = field(default_factory=lambda: np.zeros((0, 2)))
    radius_mm: float = 0.0

    @property
    def axis(self) -> Array:
        return np.asarray((self.end - self.start) / np.linalg.norm(self.end - self.start))


def bar_cut(bar: Bar, blank: Blank, play_mm: float) -> Cut:
    """The opening that a bar needs in a flat blank, with `play_mm` on each side."""
    near, far = _meets(bar, blank, 0.0), _meets(bar, blank, blank.thickness_mm)
    if near is None or far is None:
        return Cut()
    if bar.radius_mm > 0:
        return _round_cut(bar, blank, near, far, play_mm)
    corners = [_project(bar, blank, z) for z in (0.0, blank.thickness_mm)]
    hull = shapely.MultiPoint(np.vstack(corners)).convex_hull
    return Cut(holes=(_grown(hull, play_mm),))


def _grown(shape: Polygon, by: float) -> Polygon:
    return shape if by == 0 else shape.buffer(by, join_style="mitre")


def _meets(bar: Bar, blank: Blank, z: float) -> Array | None:
    """Where the axis meets the plane z of the blank; None beyond the bar's ends."""
    a, b = blank.pose.local(bar.start), blank.pose.local(bar.end)
    run = b[2] - a[2]
    if abs(run) < 1e-9:
        return None
    share = (z - a[2]) / run
    beyond = _corner_mm(bar, blank)
    slack = (1.001 * blank.thickness_mm + beyond) / abs(run)
    if share < -slack or share > 1 + slack:
        return None
    low, high = sorted((a[2], b[2]))
    if high + beyond <= 1e-6 or low - beyond >= blank.thickness_mm - 1e-6:
        return None
    return np.asarray((a + share * (b - a))[:2])


def _corner_mm(bar: Bar, blank: Blank) -> float:
    """How far the corners of its square ends reach past the axis, across the blank's plane."""
    normal = blank.pose.rotation[:, 2]
    if bar.radius_mm > 0:
        return bar.radius_mm * float(np.sqrt(max(0.0, 1 - float(bar.axis @ normal) ** 2)))
    wide = float(np.abs(bar.section[:, 0]).max()) * abs(float(bar.x @ normal))
    # A notch's section is drawn out through the surface; the bar has its lesser height.
    tall = min(-float(bar.section[:, 1].min()), float(bar.section[:, 1].max()))
    return wide + max(tall, 0.0) * abs(float(bar.y @ normal))


def _project(bar: Bar, blank: Blank, z: float) -> Array:
    """The section's corners carried along the axis into the plane z of the blank."""
    corners = bar.start + np.outer(bar.section[:, 0], bar.x) + np.outer(bar.section[:, 1], bar.y)
    local = blank.pose.local(corners)
    way = blank.pose.local(bar.start + bar.axis) - blank.pose.local(bar.start)
    share = (z - local[:, 2]) / way[2]
    return np.asarray(local[:, :2] + np.outer(share, way[:2]))


def _round_cut(bar: Bar, blank: Blank, near: Array, far: Array, play_mm: float) -> Cut:
    way = blank.pose.rotation.T @ bar.axis
    stretch = 1 / abs(way[2])
    radius = bar.radius_mm + play_mm
    excess = radius * (stretch - 1) + float(np.linalg.norm(far - near)) / 2
    middle = (near + far) / 2
    if excess <= TRUE_CIRCLE_MM:
        return Cut(circles=((float(middle[0]), float(middle[1]), radius + excess),))
    flat = way[:2] / np.linalg.norm(way[:2])
    angles = np.linspace(0, 2 * np.pi, 4 * ARC, endpoint=False)
    long = bar.radius_mm * stretch * np.cos(angles)[:, None] * flat
    short = bar.radius_mm * np.sin(angles)[:, None] * np.array([-flat[1], flat[0]])
    points = np.vstack([near + long + short, far + long + short])
    return Cut(holes=(shapely.MultiPoint(points).convex_hull.buffer(play_mm, quad_segs=ARC),))


def solid_cut(shape: Shape, blank: Blank, play_mm: float) -> Cut:
    """The opening that any solid needs in a blank, flat or bent."""
    solid = mesh(shape)
    found: list[Polygon] = []
    for pose, shift, window in _legs(blank):
        for piece in crossing(solid, pose, blank.thickness_mm):
            moved = translate(piece, shift, 0)
            kept = moved if window is None else moved.intersection(window)
            found += [g for g in parts_of(kept) if g.area > 1e-6]
    merged = shapely.union_all(found) if found else Polygon()
    return Cut(holes=tuple(_grown(p, play_mm) for p in parts_of(merged)))


def _legs(blank: Blank) -> list[tuple[Pose, float, Polygon | None]]:
    """Frames of a blank's flat legs, how far to shift their x, and their window in flat x."""
    if blank.bend is None:
        return [(blank.pose, 0.0, None)]
    legs = []
    flat, path = blank.bend.flat_mm, blank.bend.path_mm
    for i in range(len(flat) - 1):
        way = path[i + 1] - path[i]
        local = Pose.at((path[i][0], 0, path[i][1]), (way[0], 0, way[1]), (0, 1, 0))
        window = box(flat[i], -FAR_MM * 4, flat[i + 1], FAR_MM * 4)
        legs.append((local.then(blank.pose), float(flat[i]), window))
    return legs


def parts_of(shape: object) -> list[Polygon]:
    """The polygons of a shapely result, whatever it is."""
    if isinstance(shape, Polygon):
        return [] if shape.is_empty else [shape]
    pieces = getattr(shape, "geoms", ())
    return [p for g in pieces for p in parts_of(g)]


def apply(outline: Polygon, cuts: Iterable[Cut], least_mm2: float = 1.0) -> tuple[
    Polygon, tuple[Circle, ...], tuple[Mark, ...]
]:
    """Cut a blank: tabs on, openings out; a circle that meets another opening joins it.

    Returns the largest remaining piece, its true circles, and the marks.
    """
    cuts = tuple(cuts)
    tabs = [t for c in cuts for t in c.tabs]
    holes = [h for c in cuts for h in c.holes]
    body = shapely.union_all([outline, *tabs]) if tabs else outline
    if holes:
        body = body.difference(shapely.union_all(holes))
    true: list[Circle] = []
    for x, y, r in _distinct(c for cut in cuts for c in cut.circles):
        disc = Point(x, y).buffer(r, quad_segs=ARC)
        edge = body.boundary.distance(Point(x, y)) if not body.is_empty else 0.0
        if body.contains(disc) and edge > r + 1e-6:
            true.append((x, y, r))
        elif body.intersects(disc):
            body = body.difference(disc)
    pieces = [p for p in parts_of(body) if p.area > least_mm2]
    if not pieces:
        return Polygon(), (), ()
    largest = max(pieces, key=lambda p: p.area)
    kept = tuple(c for c in true if largest.contains(Point(c[0], c[1])))
    return cleaned(largest), kept, tuple(m for c in cuts for m in c.marks)


def _distinct(circles: Iterable[Circle]) -> list[Circle]:
    """Circles asked for twice count once; of two about one centre the larger."""
    found: list[Circle] = []
    for x, y, r in circles:
        same = [c for c in found if np.hypot(x - c[0], y - c[1]) < 0.05]
        if same and same[0][2] >= r:
            continue
        found = [c for c in found if c not in same] + [(x, y, r)]
    return found


def cleaned(shape: Polygon) -> Polygon:
    """Without slivers of a hundredth of a millimetre that boolean cuts leave."""
    opened = shape.buffer(-0.005, join_style="mitre").buffer(0.005, join_style="mitre")
    pieces = parts_of(opened.intersection(shape) if not opened.is_empty else shape)
    largest = max(pieces, key=lambda p: p.area)
    holes = [r for r in largest.interiors if Polygon(r).area > 0.05]
    return Polygon(largest.exterior, holes)


def lightening(
    outline: Polygon,
    circles: tuple[Circle, ...],
    line: Array,
    least_web_mm: float,
    least_diameter_mm: float,
    most: int = 7,
) -> tuple[Circle, ...]:
    """Round holes along a line, largest first, at least the web away from every edge.

    Args:
        line: (n, 2) points to try as centres, along the mean line.
    """
    free = outline
    for x, y, r in circles:
        free = free.difference(Point(x, y).buffer(r))
    found: list[Circle] = []
    points = shapely.points(line)
    for _ in range(most):
        inside = shapely.contains(free, points)
        gap = np.where(inside, shapely.distance(free.boundary, points), 0.0) - least_web_mm
        best = int(np.argmax(gap))
        radius = float(gap[best])
        if 2 * radius < least_diameter_mm:
            break
        radius = np.floor(radius * 4) / 4
        x, y = (float(v) for v in line[best])
        found.append((x, y, radius))
        free = free.difference(Point(x, y).buffer(radius))
    return tuple(sorted(found))


