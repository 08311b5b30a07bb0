"""Can every part be put in, along its declared way, in the order of the build steps.

A part that enters others goes in along one straight way, seen from its place backwards: what it
sweeps on the way out must meet nothing that stands by then. What stands is what it enters, and
all that hangs on that by joints of earlier steps; the other half of a break is not there yet.
Round bars and sticks sweep the hull of both ends, plates their outline carried along: exact.
Anything else is looked at in steps.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass
from itertools import pairwise

import numpy as np
import shapely
from manifold3d import Manifold, OpType
from shapely.affinity import translate
from shapely.geometry import Polygon

from buildgen.airframe.blank import parts_of
from buildgen.checks.fit_space import CLASH_MM3, Clash, Solid, box_of, cropped, point, shared
from buildgen.part import Allowance, Cover, Joint, Kit, Plate, Printed, Stick
from buildgen.solid import (
    Array,
    Mirrored,
    Placed,
    Prism,
    Rod,
    Ruled,
    Shape,
    Union,
    mesh,
)

BEYOND_MM = 1.0
STEPS_MM = (0.5, 1.0, 2.0, 3.0, 4.0, 6.0, 8.0)
EVERY_MM = 4.0
"""Where a print or a bent sheet is looked at on its way: finer near its seat, then at every 4 mm,
less than any tongue is long."""
IN_PLANE = 1e-3
STRAIGHT = 1.05
"""A bar shaped to the section, a little hollow, still counts as the hull of its ends."""


@dataclass(frozen=True, slots=True)
class Way:
    """How a part goes in.

    Attributes:
        part: what is put in.
        into: what it enters.
        way: the declared direction.
        blocked_by: the worst of what stands in it, None where it is free.
    """

    part: str
    into: tuple[str, ...]
    way: tuple[float, float, float]
    blocked_by: Clash | None


def ways(kit: Kit, things: Mapping[str, Solid]) -> tuple[Way, ...]:
    """Every part with a declared way, in the order of the build."""
    order = {step: n for n, step in enumerate(kit.steps)}
    found = []
    for part, way, joints in _entries(kit, things):
        into = tuple(dict.fromkeys(j.outer for j in joints))
        standing = _standing(kit, part, into, order)
        others = [things[i] for i in standing if i in things]
        both = any("hole" in j.kind for j in joints)
        found.append(Way(part, into, way, _blocked(things[part], np.array(way), others, both)))
    return tuple(found)


def _entries(
    kit: Kit, things: Mapping[str, Solid]
) -> Iterator[tuple[str, tuple[float, float, float], list[Joint]]]:
    """Each part with each of its ways and the joints that share it."""
    groups: dict[tuple[str, tuple[float, ...]], list[Joint]] = {}
    for joint in kit.joints:
        if joint.way is not None and {joint.inner, joint.outer} <= things.keys():
            key = (joint.inner, tuple(round(v, 6) + 0.0 for v in _line(joint)))
            groups.setdefault(key, []).append(joint)
    for (part, _), joints in groups.items():
        assert joints[0].way is not None
        yield part, joints[0].way, joints


def _line(joint: Joint) -> tuple[float, ...]:
    """The way; for what passes a hole from either end the line of both."""
    way = joint.way or (0.0, 0.0, 0.0)
    turned = "hole" in joint.kind and way[1] < 0
    return tuple(-v for v in way) if turned else way


def _standing(
    kit: Kit, part: str, into: Sequence[str], order: Mapping[str, int]
) -> tuple[str, ...]:
    """Ids of what stands when a part goes in: what it enters, and what hangs on that by then."""
    now = order[kit.by_id[part].step]
    neighbours: dict[str, list[str]] = {}
    for j in kit.joints:
        if j.way is not None:
            neighbours.setdefault(j.inner, []).append(j.outer)
            neighbours.setdefault(j.outer, []).append(j.inner)
    found = dict.fromkeys(into)
    open_ends = list(into)
    while open_ends:
        for other in neighbours.get(open_ends.pop(), []):
            if other != part and other not in found and order[kit.by_id[other].step] < now:
                found[other] = None
                open_ends.append(other)
    return tuple(found)


def _blocked(thing: Solid, way: Array, others: Sequence[Solid], both: bool) -> Clash | None:
    """The worst in the way; what passes a hole may come from either end."""
    first = _worst(thing, -way, others)
    if first is None or not both:
        return first
    second = _worst(thing, way, others)
    return None if second is None else min((first, second), key=lambda c: c.volume_mm3)


def _worst(thing: Solid, out: Array, others: Sequence[Solid]) -> Clash | None:
    """What the part meets most of on its way out; None where it comes out free."""
    length = _length(thing, out, others)
    low, high = thing.box
    low, high = np.minimum(low, low + out * length), np.maximum(high, high + out * length)
    near = [(o.id, o.solid) for o in others
            if np.all(o.box[0] < high) and np.all(o.box[1] > low)]
    if not _in_one(thing, out):
        near = [(id, cropped(solid, low, high)) for id, solid in near]
    found: Clash | None = None
    for swept in _swept(thing, out, length):
        for id, solid in near:
            common = shared(swept, solid)
            volume = 0.0 if common.is_empty() else float(common.volume())
            if volume > max(CLASH_MM3, found.volume_mm3 if found else 0.0):
                low, high = box_of(common)
                found = Clash(thing.id, id, volume, point((low + high) / 2), point(high - low))
    return found


def _length(thing: Solid, out: Array, others: Sequence[Solid]) -> float:
    """How far the part has to go until it is past all of them."""
    last = max((float((o.vertices @ out).max()) for o in others), default=0.0)
    return max(last - float((thing.vertices @ out).min()), 0.0) + BEYOND_MM


def _swept(thing: Solid, out: Array, length: float) -> Iterator[Manifold]:
    """What the part covers on its way out, in one solid or in steps."""
    form = thing.part.form
    assert not isinstance(form, Allowance | Cover)
    if slices := _slices(form.shape):
        points = [thing.part.pose(s) for s in slices]
        yield Manifold.batch_boolean(
            [Manifold.hull_points(np.vstack([p, p + out * length])) for p in points], OpType.Add)
        return
    if isinstance(form, Stick | Printed) and _in_one(thing, out):
        for piece in _bars(form.shape):
            solid = mesh(Placed(piece, thing.part.pose))
            yield Manifold.batch_hull([solid, solid.translate(out * length)])
        return
    if isinstance(form, Plate) and _in_one(thing, out):
        by = (thing.part.pose.rotation.T @ out)[:2] * length
        shape = Prism(_carried(form.shape2d, by), form.thickness_mm)
        yield mesh(Placed(shape, thing.part.pose))
        return
    steps = [s for s in STEPS_MM if s < length]
    steps += list(np.arange(STEPS_MM[-1] + EVERY_MM, length, EVERY_MM))
    for step in steps:
        yield thing.solid.translate(out * step)


def _in_one(thing: Solid, out: Array) -> bool:
    """What it sweeps is known in one solid: bars, bent sheets, plates carried in their plane."""
    form = thing.part.form
    if isinstance(form, Allowance | Cover):
        return False
    if _slices(form.shape) or (isinstance(form, Stick) and _straight(form.shape)):
        return True
    if isinstance(form, Printed) and isinstance(form.shape, Rod):
        return True
    return thing.slab is not None and abs(float(thing.slab[0].rotation[:, 2] @ out)) < IN_PLANE


def _straight(shape: Shape) -> bool:
    """Each of its bars is the hull of its corners: not a strip bent over a rib."""
    for bar in _bars(shape):
        inner = bar
        while isinstance(inner, Placed | Mirrored):
            inner = inner.shape
        if isinstance(inner, Rod):
            continue
        solid = mesh(bar)
        if float(solid.hull().volume()) > STRAIGHT * float(solid.volume()):
            return False
    return True


def _slices(shape: Shape | None) -> list[Array]:
    """A sheet bent over a surface in flat slices, corners (8, 3) of each; none of other shapes."""
    match shape:
        case Placed():
            return [shape.pose(s) for s in _slices(shape.shape)]
        case Mirrored():
            flip = np.ones(3)
            flip[shape.axis] = -1
            return [s * flip for s in _slices(shape.shape)]
        case Ruled(first=(over, _, under, _)) if over.smooth and under.smooth:
            rows = [(over.points, under.points[::-1]),
                    (shape.last[0].points, shape.last[2].points[::-1])]
            return [np.vstack([side[k : k + 2] for pair in rows for side in pair])
                    for k in range(len(over.points) - 1)]
    return []


def _bars(shape: Shape) -> list[Shape]:
    """The straight bars of a stick: a bent one has one for each leg."""
    match shape:
        case Union():
            return [bar for s in shape.shapes for bar in _bars(s)]
        case Placed():
            return [Placed(bar, shape.pose) for bar in _bars(shape.shape)]
        case Mirrored():
            return [Mirrored(bar, shape.axis) for bar in _bars(shape.shape)]
    return [shape]


def _carried(outline: Polygon, by: Array) -> Polygon:
    """A flat outline with all that it covers while it is carried straight on."""
    ring = np.asarray(outline.exterior.coords)
    sides = [Polygon([a, b, b + by, a + by]) for a, b in pairwise(ring)]
    sides = [s if s.is_valid else s.buffer(0) for s in sides if s.area > 1e-9]
    body = Polygon(ring)
    whole = shapely.union_all([body, translate(body, *by), *sides])
    return max(parts_of(whole), key=lambda p: p.area)
