"""Shear webs between the ribs, on the faces of a capped spar; on both faces they make a box."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from functools import cached_property
from itertools import pairwise

import numpy as np
from shapely.geometry import Polygon

from buildgen.airframe.bays import Bay
from buildgen.airframe.blank import Blank, Cut
from buildgen.airframe.members.spars import GLUE_GAP_MM, STEP, SparRun, pieces, vector
from buildgen.airframe.shop import Shop
from buildgen.airframe.stations import HALF, Place, inner_face, outer_face, places
from buildgen.airframe.surface import WingShape
from buildgen.part import Joint, Part
from buildgen.solid import Array, Pose

END_GAP_MM = 0.15
"""Between a web's end and the rib: it drops in, glue fills it; common practice, no source."""
WARP_MM = 0.35
"""What washout may turn the two caps' faces against each other over a bay, filled with glue."""
SHY_SHARE, SHY_MM = 0.25, 0.1
"""A web stays below the caps' outer faces: there the skin curves down beside them."""
LEAST_MM = 6.0
"""A bay narrower than this gets no web."""


@dataclass(frozen=True, eq=False)
class Web:
    """One web in one bay, on one face of the caps, starboard and port."""

    shop: Shop
    top: SparRun
    bottom: SparRun
    near: Pose
    far: Pose
    fore: bool
    id: str
    nominal_mm: float

    @cached_property
    def frame(self) -> Pose:
        """Local x along the spar, y up, lower face towards the caps."""
        (a, b), (c, d) = self._line(self.top), self._line(self.bottom)
        foot = (c + d) / 2
        x, y = (b - a) + (d - c), (a + b) / 2 - foot
        pose = Pose.at(foot, x, y)
        if not self.fore:
            return pose
        lift = Pose(origin=np.array([0.0, 0.0, -self.thick_mm]))
        return lift.then(pose)

    @property
    def thick_mm(self) -> float:
        """As measured."""
        return self.shop.thickness(self.top.spar.web_material, self.nominal_mm)

    def _line(self, run: SparRun) -> tuple[Array, Array]:
        """Where the outer edge of a cap's glued face meets the planes of both ribs."""
        bar, spar = run.bar, run.spar
        half = (spar.width_mm or 0.0) / 2
        up = (spar.height_mm or 0.0) / 2 - SHY_SHARE * self.thick_mm - SHY_MM
        # A frame's z points aft where x runs outboard and y up.
        aft = np.cross(bar.axis, run.run[0].up)
        aft = aft if aft[0] > 0 else -aft
        side = -aft if self.fore else aft
        start = bar.start + side * half + run.run[0].up * (up if run is self.top else -up)
        return _on(start, bar.axis, self.near), _on(start, bar.axis, self.far)

    @cached_property
    def outline(self) -> Polygon:
        """What stands clear of both ribs through the web's whole thickness."""
        shapes = []
        for z in (0.0, self.thick_mm):
            corners = []
            for run in (self.bottom, self.top):
                for plane, gap in ((self.near, END_GAP_MM), (self.far, -END_GAP_MM)):
                    line = self._line(run)
                    way = (line[1] - line[0]) / np.linalg.norm(line[1] - line[0])
                    lifted = line[0] + self.frame.rotation[:, 2] * (
                        z - float(self.frame.local(line[0])[2]))
                    corners.append(self.frame.local(_on(lifted, way, plane) + gap * way)[:2])
            shapes.append(Polygon([corners[0], corners[1], corners[3], corners[2]]))
        merged = shapes[0].intersection(shapes[1])
        assert isinstance(merged, Polygon)
        return merged

    @cached_property
    def parts(self) -> tuple[Part, ...]:
        face = "fore" if self.fore else "aft"
        spar = self.top.spar
        right = self.shop.plate(
            f"{self.id}R", f"shear web, {face} face of spar {self.top.number}, right",
            spar.web_material, self.nominal_mm, self.outline, self.frame, STEP, self.top.key,
            grain_deg=90.0,
        )
        return right, right.mirrored(f"{self.id}L", right.name.replace("right", "left"))

    def cut(self, blank: Blank) -> Cut:
        return Cut()

    def joint(self, blank: Blank) -> Joint | None:
        return None

    @property
    def joints(self) -> tuple[Joint, ...]:
        """Glued to both caps."""
        aft = self.frame.rotation[:, 2] * (1 if self.fore else -1)
        found = []
        for run in (self.top, self.bottom):
            for side, k in (("R", 0), ("L", -1)):
                x, y, z = vector(aft)
                found.append(Joint("web on cap", f"{self.id}{side}", run.parts[k].id,
                                   (0.0, WARP_MM + GLUE_GAP_MM),
                                   facing=(x, y * (1 if side == "R" else -1), z)))
        return tuple(found)


def _on(point: Array, way: Array, plane: Pose) -> Array:
    """The point slid along a line into a plane."""
    normal = plane.rotation[:, 2]
    return np.asarray(point + way * float((plane.origin - point) @ normal) / float(way @ normal))


def make(shop: Shop, wing: WingShape, bays: tuple[Bay, ...]) -> Iterable[Web]:
    """A web in each bay between two ribs that both caps of a spar pass."""
    caps = [runs for spar, runs in pieces(shop, wing) for _ in (spar,)
            if runs and runs[0].cap]
    ribs = places(shop, wing, bays)
    for tops, bottoms in zip(caps[::2], caps[1::2], strict=True):
        for top, bottom in zip(tops, bottoms, strict=True):
            yield from _webs(shop, wing, top, bottom, ribs)


def _webs(
    shop: Shop, wing: WingShape, top: SparRun, bottom: SparRun, ribs: list[Place]
) -> Iterable[Web]:
    spar = top.spar
    first = spar.from_mm
    last = spar.to_mm or wing.half_span_mm
    steps = spar.web_mm
    own = [r for r in ribs if r.panel in top.run and r.why != HALF]
    for number, (near, far) in enumerate(pairwise(own), start=1):
        a, b = outer_face(near), inner_face(far)
        middle = (near.panel.start_mm + near.face_mm + far.panel.start_mm + far.face_mm) / 2
        inside = first <= near.panel.start_mm + near.face_mm and (
            far.panel.start_mm + far.face_mm <= last + 1e-6)
        if near.panel is not far.panel and near.face_mm < near.panel.length_mm - 1e-6:
            continue
        if not inside or float((b.origin - a.origin) @ near.panel.along) < LEAST_MM:
            continue
        share = (middle - first) / (last - first)
        thick = steps[min(int(share * len(steps)), len(steps) - 1)]
        for fore in {"aft": (False,), "fore": (True,), "both": (True, False)}[spar.web]:
            letter = "f" if fore else "a"
            yield Web(shop, top, bottom, a, b, fore,
                      f"W{top.number}{'abcdefgh'[top.piece]}{number}{letter}", thick)
