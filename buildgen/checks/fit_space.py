"""Two parts in one space: what the pairs of a kit's solids share.

Bounding boxes first, then boxes in the frames of flat plates, then the triangulated solids, the
simpler of the two cut down to the common box.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from manifold3d import Manifold

from buildgen.part import Kit, Part, Plate
from buildgen.solid import Array, Pose, triangles

CLASH_MM3 = 0.5
"""Shared space that counts as a clash.

Both solids of a pair stand within their chord error of the true shape, 0.01 mm each: a face of
25 mm2 (a rib against a stick) may so seem to share 0.5 mm3. Holes are circumscribed and rods
inscribed, so true fits share nothing at all. One stroke of the sanding block takes more.
"""
PLAIN_FACES = 100
"""A solid of fewer triangles is not worth cutting down first."""
EDGE_MM = 0.01
"""Room left round a common box, so that no face is cut in its own plane."""
MOVING = ("propeller",)
"""Bought things whose shape is the room they sweep, not the thing."""


@dataclass(frozen=True, eq=False)
class Solid:
    """A part's closed solid in its place."""

    part: Part
    solid: Manifold

    @property
    def id(self) -> str:
        return self.part.id

    @cached_property
    def box(self) -> tuple[Array, Array]:
        """Least and greatest x, y, z."""
        return box_of(self.solid)

    @cached_property
    def vertices(self) -> Array:
        """(n, 3) in the aircraft."""
        return triangles(self.solid)[0]

    @cached_property
    def slab(self) -> tuple[Pose, float] | None:
        """Frame and thickness of a flat plate; None for anything else."""
        form = self.part.form
        if isinstance(form, Plate) and form.bend is None:
            return self.part.pose, form.thickness_mm
        return None


def solids(kit: Kit) -> tuple[Solid, ...]:
    """Everything solid that stands still, in the order of the build."""
    return tuple(
        Solid(part, solid) for part in kit.flying
        if part.material not in MOVING and (solid := part.solid) is not None
    )


def box_of(solid: Manifold) -> tuple[Array, Array]:
    bounds = np.array(solid.bounding_box())
    return bounds[:3], bounds[3:]


def cropped(solid: Manifold, low: Array, high: Array) -> Manifold:
    """What of a solid lies in a box, with a little round it."""
    least, most = box_of(solid)
    if np.all(least >= low - EDGE_MM) and np.all(most <= high + EDGE_MM):
        return solid
    low = np.maximum(low - EDGE_MM, least - 1.0)
    high = np.minimum(high + EDGE_MM, most + 1.0)
    if np.any(low >= high):
        return Manifold()
    kept = solid ^ Manifold.cube(high - low).translate(low)
    kept.num_tri()  # worked out now: left open, it would be taken together with what follows
    return kept


def shared(a: Manifold, b: Manifold) -> Manifold:
    """The space that two solids share; empty where their boxes share none."""
    (low_a, high_a), (low_b, high_b) = box_of(a), box_of(b)
    low, high = np.maximum(low_a, low_b), np.minimum(high_a, high_b)
    if np.any(high <= low):
        return Manifold()
    small, large = sorted((a, b), key=lambda s: s.num_tri())
    if small.num_tri() > PLAIN_FACES:
        small = cropped(small, low, high)
    return small ^ large


@dataclass(frozen=True, slots=True)
class Clash:
    """Two parts in one space: how much and about where."""

    first: str
    second: str
    volume_mm3: float
    at_mm: tuple[float, float, float]
    size_mm: tuple[float, float, float]


def clashes(
    near: Iterable[tuple[Solid, Solid]], limit_mm3: float = CLASH_MM3
) -> tuple[Clash, ...]:
    """Every pair that shares more than the limit, the worst first."""
    found = [c for a, b in near if (c := _clash(a, b, limit_mm3)) is not None]
    return tuple(sorted(found, key=lambda c: (-c.volume_mm3, c.first, c.second)))


def _clash(a: Solid, b: Solid, limit_mm3: float) -> Clash | None:
    common = shared(a.solid, b.solid)
    volume = float(common.volume())
    if volume <= limit_mm3:
        return None
    low, high = box_of(common)
    return Clash(a.id, b.id, volume, point((low + high) / 2), point(high - low))


def point(at: Array) -> tuple[float, float, float]:
    x, y, z = (float(v) for v in at)
    return x, y, z


def pairs(things: Sequence[Solid], limit_mm3: float = 0.0) -> Iterator[tuple[Solid, Solid]]:
    """Pairs whose boxes share more than the limit, in any frame that is looked at."""
    low = np.array([t.box[0] for t in things])
    high = np.array([t.box[1] for t in things])
    for i in range(len(things) - 1):
        room = np.minimum(high[i], high[i + 1 :]) - np.maximum(low[i], low[i + 1 :])
        near = np.all(room > 0, axis=1) & (np.prod(room, axis=1) > limit_mm3)
        for k in np.nonzero(near)[0]:
            a, b = things[i], things[i + 1 + int(k)]
            if not (_apart(a, b, limit_mm3) or _apart(b, a, limit_mm3)):
                yield a, b


def _apart(plate: Solid, other: Solid, limit_mm3: float) -> bool:
    """In the plate's own frame the two boxes share no more than the limit."""
    if plate.slab is None:
        return False
    pose, _ = plate.slab
    one, two = pose.local(plate.vertices), pose.local(other.vertices)
    room = np.minimum(one.max(axis=0), two.max(axis=0)) - np.maximum(
        one.min(axis=0), two.min(axis=0))
    return bool(np.any(room <= 0) or np.prod(room) <= limit_mm3)
