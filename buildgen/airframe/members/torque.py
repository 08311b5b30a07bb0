"""Torque rods: a wire along the hinge line turns a surface from a servo in the fuselage.

The wire runs in a tube through the ribs inboard of the surface. Its outer end bends aft into the
surface's nose, its inner end into the arm that a pushrod takes hold of.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from functools import cached_property

import numpy as np

from buildgen.airframe.bays import Bay
from buildgen.airframe.blank import Bar, Blank, Cut, bar_cut
from buildgen.airframe.members.control_hinges import MOVING
from buildgen.airframe.members.controls import mirrored_joint
from buildgen.airframe.members.false_spar import GLUE_MM
from buildgen.airframe.members.spars import STEP, vector
from buildgen.airframe.moving import ControlPlace, control_places
from buildgen.airframe.moving_faults import TORQUE_WALL_MM
from buildgen.airframe.shop import Shop
from buildgen.airframe.surface import AFT, WingShape
from buildgen.part import Joint, Part
from buildgen.solid import Array, Placed, Pose, Rod, Shape, Union

BORE_PLAY_MM = 0.05
TUBE_SHORT_MM = 5.0
"""The tube ends this far from the arm: room for the bend."""


@dataclass(frozen=True, eq=False)
class TorqueTube:
    """The bearing in the ribs inboard of the surface."""

    place: ControlPlace

    @property
    def radius_mm(self) -> float:
        return self.place.given.rod_mm / 2 + BORE_PLAY_MM + TORQUE_WALL_MM

    @cached_property
    def bar(self) -> Bar:
        place = self.place
        a = place.axis_point(place.arm_s_mm + TUBE_SHORT_MM)
        b = place.axis_point(place.bay_mm[0])
        return Bar(a, b, AFT, place.panel.up, radius_mm=self.radius_mm)

    @cached_property
    def parts(self) -> tuple[Part, ...]:
        place, n = self.place, self.place.number
        bore = place.given.rod_mm / 2 + BORE_PLAY_MM
        length = float(np.linalg.norm(self.bar.end - self.bar.start))
        shape = Placed(Rod(self.radius_mm, length, bore),
                       Pose.at(self.bar.start, self.bar.axis, AFT))
        right = place.shop.stick(
            f"AU{n}R", f"torque tube of the {place.given.name}, right", "brass-tube",
            f"{2 * self.radius_mm:g} x {2 * bore:g} tube", shape, length, STEP, place.key)
        return right, right.mirrored(f"AU{n}L", f"torque tube of the {place.given.name}, left")

    def cut(self, blank: Blank) -> Cut:
        panel = self.place.panel
        s = float((blank.pose.origin - panel.root.nose) @ panel.along)
        if not 0 < s < self.place.bay_mm[0] + 1:
            return Cut()
        return bar_cut(self.bar, blank, self.place.shop.slip_mm)

    def joint(self, blank: Blank) -> Joint | None:
        cut = self.cut(blank)
        if not (cut.holes or cut.circles):
            return None
        way = blank.pose.rotation.T @ self.bar.axis
        wander = blank.thickness_mm * float(np.hypot(way[0], way[1])) / abs(float(way[2]))
        return Joint("spar in hole", self.parts[0].id, blank.id,
                     (0.0, self.place.shop.slip_mm + wander + 0.1), vector(self.bar.axis))

    @property
    def joints(self) -> tuple[Joint, ...]:
        return ()


@dataclass(frozen=True, eq=False)
class TorqueRod:
    """The wire itself: arm, run along the hinge line, leg in the surface."""

    place: ControlPlace

    @cached_property
    def corners(self) -> tuple[Array, Array, Array, Array]:
        """End of the arm, its bend, the bend of the leg, end of the leg."""
        place = self.place
        horn = place.horn
        assert horn is not None
        leg = place.torque_leg
        return horn.pivot_mm, horn.hinge_mm, leg[0], leg[1]

    @cached_property
    def parts(self) -> tuple[Part, ...]:
        place, n, r = self.place, self.place.number, self.place.given.rod_mm / 2
        points = self.corners
        bars: list[Shape] = []
        lengths = []
        for a, b in zip(points, points[1:], strict=False):
            length = float(np.linalg.norm(b - a))
            lengths.append(length)
            bars.append(Placed(Rod(r, length), Pose.at(a, b - a, (0.3, 0.2, 1.0))))
        bends = ((lengths[0], 90.0), (lengths[0] + lengths[1], 90.0))
        right = place.shop.stick(
            f"AY{n}R", f"torque rod of the {place.given.name}, right", "music-wire",
            f"{place.given.rod_mm:g} rod", Union(tuple(bars)), sum(lengths), MOVING, place.key,
            bends)
        return right, right.mirrored(f"AY{n}L", f"torque rod of the {place.given.name}, left")

    def cut(self, blank: Blank) -> Cut:
        return Cut()

    def joint(self, blank: Blank) -> Joint | None:
        return None

    @property
    def joints(self) -> tuple[Joint, ...]:
        """The leg in the nose, on which the surface is slid."""
        n, way = self.place.number, self.place.line.frame(0.0).rotation[:, 0]
        solid = self.place.given.kind != "built-up"
        joint = Joint("dowel in hole", f"AY{n}R", f"A{'S' if solid else 'N'}{n}R",
                      (0.0, GLUE_MM), vector(way))
        return joint, mirrored_joint(joint)


def make(
    shop: Shop, wing: WingShape, bays: tuple[Bay, ...]
) -> Iterable[TorqueTube | TorqueRod]:
    """Tube and wire of every surface that is driven so."""
    for place in control_places(shop, wing):
        if place.given.drive == "torque-rod":
            yield TorqueTube(place)
            yield TorqueRod(place)
