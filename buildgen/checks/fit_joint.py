"""Declared joints as they are: play all round what goes in, contact where glue must hold.

Play is measured on sections: of the inner part's outline, at both faces and the middle of a flat
plate, else at three places square to the way in. Contact is measured by pushing the inner part
on: the shared volume grows by the area whose gap has been closed.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from itertools import pairwise

import numpy as np
import shapely
from manifold3d import Manifold
from shapely.affinity import translate
from shapely.geometry import MultiPolygon, Polygon, box

from buildgen.airframe.blank import parts_of
from buildgen.checks.fit_space import Solid, box_of, cropped, point, shared
from buildgen.part import Bend, Formed, Joint, Plate
from buildgen.solid import Array, Pose, polygons

ON_EDGE = ("stick in notch", "sheet on rib")
LAID = ("face to face", "edge to edge", "edge to face", "web on cap", *ON_EDGE)
"""Kinds that glue holds face to face, and kinds that are measured all round: the share of the
inner part's outline that must lie within the band (a notch holds the floor and most of both
sides, a hinge line one edge)."""
AROUND = {"spar in hole": 1.0, "joiner in tube": 1.0, "sleeve in tube": 1.0,
          "joiner in sleeve": 1.0, "dowel in hole": 1.0, "brace in slot": 0.9, "tab in slot": 0.9,
          "mount on tongue": 0.9, "strip in notch": 0.5, "hinged": 0.2}
DEPTHS = {"dowel in hole": (0.4, 0.5, 0.6), "mount on tongue": (0.1, 0.2, 0.3),
          "tab in slot": (0.4, 0.5, 0.6)}
"""Where sections are taken, as shares of the depth in which both parts reach: in the middle of a
side that stands oblique, ahead of the nose on a tongue, away from a skin that slopes."""
SAMPLE_MM = 0.5
REACH_MM = 3.0
"""How far round the inner part the outer one is looked at; a gap beyond it is no joint."""
WHOLE = {"spar in hole": 0.9995}
WHOLE_ELSE = 0.985
"""A section with less area than this of the largest runs out through the part's end; a bar's
section is the same all along it."""
DEEP_MM = 0.01
STEP_MM = 0.05
FACING_MM = 1.0
"""What lies this much beyond the band still faces, though glue does not hold it."""
PARALLEL = 1e-9
LEAST_CONTACT = 0.5
"""Share of the facing area that must lie within the band for glue to hold."""
LEAST_MM2 = 2.0
"""A stick of 3 mm on half the edge of a 2 mm centre rib, with some of it sanded off."""


@dataclass(frozen=True, slots=True)
class Measured:
    """A joint as found.

    Attributes:
        gap_mm: least and greatest play over the share of the outline that must be held; below
            zero where one part stands in the other. None for parts laid on each other.
        contact_mm2: area within the band, None where it is not asked for.
        facing_mm2: area within the band and FACING_MM more.
        at_mm: where the greatest play, or the joint's middle, is.
    """

    joint: Joint
    gap_mm: tuple[float, float] | None
    contact_mm2: float | None
    facing_mm2: float | None
    at_mm: tuple[float, float, float]

    @property
    def tight(self) -> bool:
        """Less play than the band asks for."""
        return self.gap_mm is not None and self.gap_mm[0] < self.joint.gap_mm[0] - DEEP_MM

    @property
    def loose(self) -> bool:
        """More play than glue or fit allow."""
        return self.gap_mm is not None and self.gap_mm[1] > self.joint.gap_mm[1] + DEEP_MM

    @property
    def bare(self) -> bool:
        """Too little contact."""
        if self.contact_mm2 is None or self.facing_mm2 is None:
            return False
        return self.contact_mm2 < self.wanted_mm2

    @property
    def wanted_mm2(self) -> float:
        """Least area in contact."""
        return max(LEAST_MM2, LEAST_CONTACT * (self.facing_mm2 or 0.0))


def measure(joint: Joint, inner: Solid, outer: Solid) -> Measured:
    """One joint between two solids."""
    if joint.kind in LAID:
        return _contact(joint, inner, outer)
    return _play(joint, inner, outer)


# ---------------------------------------------------------------- play


def _play(joint: Joint, inner: Solid, outer: Solid) -> Measured:
    share = AROUND[joint.kind]
    if joint.kind == "mount on tongue":
        inner, outer = outer, inner
    least, greatest, where = np.inf, -np.inf, _middle(inner.solid, outer.solid)
    cuts = [(pose, depth, _section(inner.solid, pose, depth))
            for pose, depth in _sections(joint, inner, outer)]
    whole = max((mine.area for _, _, mine in cuts), default=0.0)
    for pose, depth, mine in cuts:
        if mine.area < WHOLE.get(joint.kind, WHOLE_ELSE) * whole or mine.is_empty:
            continue
        theirs = _outer_section(outer, pose, depth, mine)
        gaps, points = _gaps(mine, theirs)
        held = np.sort(gaps)[: max(1, int(np.ceil(share * len(gaps))))]
        least = min(least, float(held[0]))
        if held[-1] > greatest:
            greatest = float(held[-1])
            spot = points[int(np.argsort(gaps)[len(held) - 1])]
            where = pose((float(spot[0]), float(spot[1]), depth))
    if not np.isfinite(least):
        least, greatest = REACH_MM, REACH_MM
    return Measured(joint, (least, greatest), None, None, point(where))


def _middle(a: Manifold, b: Manifold) -> Array:
    (low_a, high_a), (low_b, high_b) = box_of(a), box_of(b)
    return (np.maximum(low_a, low_b) + np.minimum(high_a, high_b)) / 2


def _sections(joint: Joint, inner: Solid, outer: Solid) -> Iterator[tuple[Pose, float]]:
    """Planes to look at: through a plate's thickness, else square to the way."""
    if outer.slab is not None and joint.kind != "hinged":
        pose, thick = outer.slab
        for share in (0.02, 0.5, 0.98):
            yield pose, share * thick
        return
    way = np.array(joint.way if joint.way is not None else (0.0, 0.0, 1.0))
    if joint.kind == "hinged":
        way = inner.part.pose.rotation[:, 2]
    middle = _middle(inner.solid, outer.solid)
    side = np.eye(3)[int(np.argmin(np.abs(way)))]
    pose = Pose.at(middle, np.cross(way, side), np.cross(way, np.cross(way, side)))
    low, high = _common_depths(inner, outer, pose)
    for share in DEPTHS.get(joint.kind, (0.1, 0.5, 0.9)):
        yield pose, low + share * (high - low)


def _common_depths(inner: Solid, outer: Solid, pose: Pose) -> tuple[float, float]:
    """z of `pose` from which to which both parts reach, near where their boxes meet."""
    ranges = []
    low = np.maximum(inner.box[0], outer.box[0]) - REACH_MM
    high = np.minimum(inner.box[1], outer.box[1]) + REACH_MM
    for thing in (inner, outer):
        near = cropped(thing.solid, low, high)
        moved = _in_frame(near, pose) if not near.is_empty() else near
        bounds = moved.bounding_box()
        ranges.append((bounds[2], bounds[5]))
    (a, b), (c, d) = ranges
    return max(a, c), min(b, d)


def _in_frame(solid: Manifold, pose: Pose) -> Manifold:
    inverse = pose.inverse
    return solid.transform(np.column_stack([inverse.rotation, inverse.origin]))


def _section(solid: Manifold, pose: Pose, depth: float) -> Polygon | MultiPolygon:
    """A solid cut by a plane, in the plane's x, y."""
    return shapely.union_all(polygons(_in_frame(solid, pose).slice(depth)))


def _outer_section(
    outer: Solid, pose: Pose, depth: float, mine: Polygon | MultiPolygon
) -> Polygon | MultiPolygon:
    """The outer part round the inner one."""
    form = outer.part.form
    flat = outer.slab is not None and outer.slab[0] is pose and isinstance(form, Plate)
    whole = form.shape2d if flat and isinstance(form, Plate) else _section(
        outer.solid, pose, depth)
    x0, y0, x1, y1 = mine.bounds
    near = box(x0 - REACH_MM, y0 - REACH_MM, x1 + REACH_MM, y1 + REACH_MM)
    return MultiPolygon(parts_of(whole.intersection(near)))


def _gaps(
    mine: Polygon | MultiPolygon, theirs: Polygon | MultiPolygon
) -> tuple[Array, Array]:
    """Play at points round the inner outline, REACH_MM at most; below zero inside the outer."""
    edges = [ring for p in parts_of(mine) for ring in (p.exterior,)]
    spots = np.vstack([np.asarray(shapely.segmentize(e, SAMPLE_MM).coords)[:-1] for e in edges])
    if theirs.is_empty:
        return np.full(len(spots), REACH_MM), spots
    points = shapely.points(spots)
    gaps = np.minimum(shapely.distance(theirs, points), REACH_MM)
    inside = gaps <= 0
    if inside.any():
        gaps[inside] = -shapely.distance(theirs.boundary, points[inside])
    return gaps, spots


# ---------------------------------------------------------------- contact


def _contact(joint: Joint, inner: Solid, outer: Solid) -> Measured:
    """Area that faces within the band, over the direction in which most does."""
    reach = joint.gap_mm[1] + DEEP_MM
    parallel = _parallel(inner, outer, reach) if joint.way is None else None
    if parallel is not None:
        return Measured(joint, None, *parallel, point(_middle(inner.solid, outer.solid)))
    if joint.kind in ON_EDGE and outer.slab is not None:
        return _on_edge(joint, inner, outer, reach)
    best, facing = 0.0, 0.0
    low = np.maximum(inner.box[0], outer.box[0]) - reach - FACING_MM
    high = np.minimum(inner.box[1], outer.box[1]) + reach + FACING_MM
    one, two = cropped(inner.solid, low, high), cropped(outer.solid, low, high)
    for way in _normals(joint, inner, outer):
        area = _closed(one, two, way * reach, way)
        if area > best:
            best = area
            facing = _closed(one, two, way * (reach + FACING_MM), way)
            if best >= max(LEAST_MM2, LEAST_CONTACT * facing):
                break
    return Measured(joint, None, best, max(best, facing),
                    point(_middle(inner.solid, outer.solid)))


def _on_edge(joint: Joint, inner: Solid, outer: Solid, reach: float) -> Measured:
    """A stick pushed on the edge of a flat plate: the same on sections through the plate."""
    assert outer.slab is not None and joint.way is not None
    pose, thick = outer.slab
    way = (pose.rotation.T @ np.array(joint.way))[:2]
    areas = np.zeros(2)
    for depth in (0.02 * thick, 0.5 * thick, 0.98 * thick):
        mine = _section(inner.solid, pose, depth)
        if mine.is_empty:
            continue
        theirs = _outer_section(outer, pose, depth, mine)
        for n, push in enumerate((reach, reach + FACING_MM)):
            one, two = (translate(mine, *(way * p)).intersection(theirs).area
                        for p in (push, push + STEP_MM))
            areas[n] += (two - one) / STEP_MM * thick / 3
    return Measured(joint, None, float(areas[0]), float(areas.max()),
                    point(_middle(inner.solid, outer.solid)))


def _parallel(inner: Solid, outer: Solid, reach: float) -> tuple[float, float] | None:
    """Two flat plates face to face: area in contact and area facing; None if they are not."""
    if inner.slab is None or outer.slab is None:
        return None
    (mine, thick), (theirs, depth) = inner.slab, outer.slab
    lean = float(mine.rotation[:, 2] @ theirs.rotation[:, 2])
    if abs(lean) < 1 - PARALLEL:
        return None
    levels = sorted(float(theirs.local(mine((0.0, 0.0, z)))[2]) for z in (0.0, thick))
    gap = max(levels[0] - depth, -levels[1])
    area = _section(inner.solid, theirs, sum(levels) / 2).intersection(
        _section(outer.solid, theirs, depth / 2)).area
    return (area if gap <= reach else 0.0), area


def _closed(inner: Manifold, outer: Manifold, shift: Array, way: Array) -> float:
    """How much more is shared for each mm that the inner part is pushed on [mm2]."""
    one = float(shared(inner.translate(shift), outer).volume())
    two = float(shared(inner.translate(shift + STEP_MM * way), outer).volume())
    return (two - one) / STEP_MM


def _normals(joint: Joint, inner: Solid, outer: Solid) -> list[Array]:
    """Ways in which one may lie on the other: the way in, the facing, or the plate's faces."""
    pushed = joint.way if joint.way is not None else joint.facing
    found = [] if pushed is None else [np.array(pushed)]
    form = outer.part.form
    if not isinstance(form, Plate) or (found and form.bend is None):
        return found
    normals = [np.array([0.0, 0.0, 1.0])]
    if isinstance(form.bend, Formed):
        return found
    if form.bend is not None:
        normals = _leg_normals(form.bend, *_range_x(inner, outer))
    return found + [sign * (outer.part.pose.rotation @ n) for n in normals for sign in (-1, 1)]


def _range_x(inner: Solid, outer: Solid) -> tuple[float, float]:
    """Local x of a bent plate from which to which the other part stands."""
    x = outer.part.pose.local(inner.vertices)[:, 0]
    return float(x.min()), float(x.max())


def _leg_normals(bend: Bend, low: float, high: float) -> list[Array]:
    found = []
    for start, end in pairwise(bend.path_mm):
        if start[0] < high and end[0] > low:
            x, z = (end - start) / np.linalg.norm(end - start)
            found.append(np.array([-z, 0.0, x]))
    return found
