"""Hinges of moving surfaces: where leaves go between the ribs, and what room they need."""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import cached_property
from itertools import pairwise

import numpy as np

from buildgen.airframe.hinge import LEAF_MM, leaves
from buildgen.airframe.members.false_spar import SLOT_PLAY_MM, STEP, FalseSpar
from buildgen.airframe.moving import ControlPlace
from buildgen.airframe.shop import Shop
from buildgen.part import Part, Stick
from buildgen.solid import Box, Difference, Placed, Pose, Rod, Shape

MOVING = "Wing: control surfaces"
LETTERS = "abcdefghijklmnopqrstuvwxyz"
BLOCK_MM = (6.5, 16.0, 8.0)
"""Behind the false spar at each leaf: along the chord, along the span, high."""


def in_frame(part: Part, pose: Pose) -> Part:
    """A stick whose recipe stands in the aircraft, told in a frame of its own."""
    assert isinstance(part.form, Stick)
    shape = Placed(part.form.shape, pose.inverse)
    return replace(part, form=replace(part.form, shape=shape), pose=pose)


@dataclass(frozen=True, eq=False)
class Hinged:
    """A moving surface as its hinges see it: where they lie and what room they need."""

    place: ControlPlace
    marks: tuple[float, ...]
    """Middles of the wing's ribs from the whole one inboard to that outboard, along the panel."""

    @property
    def shop(self) -> Shop:
        return self.place.shop

    @property
    def n(self) -> int:
        return self.place.number

    @cached_property
    def frame(self) -> Pose:
        """On the hinge line at its inner end: x aft, y up."""
        return self.place.line.frame(0.0)

    @cached_property
    def spar(self) -> FalseSpar:
        rooms = (p.shape for p in self.leaves if p.shape is not None)
        return FalseSpar(self.place, (*rooms, *self._torque_room(through=True)))

    @cached_property
    def bay_middles(self) -> list[float]:
        """Along the hinge line: middles of the bays between ribs, but that of the horn."""
        line, panel = self.place.line, self.place.panel
        scale = 1 / float(line.axis @ panel.along)
        found = []
        for a, b in pairwise(self.marks):
            middle = (a + b) / 2
            horn = self.place.horn is not None and a < self.place.arm_s_mm < b
            if b - a > BLOCK_MM[1] + 6 and not horn:
                found.append((middle - self.place.ends_mm[0]) * scale)
        return found

    @cached_property
    def leaf_stations(self) -> tuple[float, ...]:
        """Each in the middle of a bay, nearest to where an even pitch wants it."""
        if self.place.given.hinges == "tape":
            return ()
        free = list(self.bay_middles)
        found = []
        for wanted in self.place.line.stations(self.place.given.pitch_mm):
            if free:
                best = min(free, key=lambda s: abs(s - wanted))
                free.remove(best)
                found.append(best)
        return tuple(sorted(found))

    @cached_property
    def leaves(self) -> list[Part]:
        name = f"hinge of the {self.place.given.name}, right"
        return leaves(self.place.line, self.leaf_stations, f"AH{self.n}R", name, MOVING,
                      self.place.key, self.lift_mm)

    @property
    def lift_mm(self) -> float:
        """Leaves lie in the wood, however high the hinge line is: just under a skin."""
        return {"centre": 0.0, "top": -1.5, "bottom": 1.5}[self.place.given.hinge]

    def _slots(self) -> tuple[Shape, ...]:
        """Room for the leaves in the wood."""
        c, a, t = (v / 2 + SLOT_PLAY_MM for v in LEAF_MM)
        room = Box((-c, -t, -a), (c, t, a))
        return tuple(Placed(room, p.pose) for p in self.leaves)

    def _torque_room(self, through: bool = False) -> tuple[Shape, ...]:
        """Groove and hole for a torque rod's end; `through` for the notch in the false spar."""
        if self.place.given.drive != "torque-rod":
            return ()
        bend, end = self.place.torque_leg
        r = self.place.given.rod_mm / 2 + SLOT_PLAY_MM
        start = self.place.line.start - 6.0 * self.place.line.axis
        reach = float(np.linalg.norm(bend - start)) + r
        frame = Pose.at(start, self.place.line.axis, self.frame.rotation[:, 1])
        if through:
            deep = self.place.given.gap_mm / 2 + self.spar_mm + 1.0
            return (Placed(Box((0.0, -r, -deep), (reach, r, 1.0)), frame),)
        leg = Placed(Rod(r, float(np.linalg.norm(end - bend)) + 0.2),
                     Pose.at(bend, end - bend, self.frame.rotation[:, 1]))
        return Placed(Rod(r, reach), frame), leg

    @property
    def spar_mm(self) -> float:
        """Thickness of the false spar."""
        given = self.place.given
        return self.shop.thickness(given.spar_material, given.spar_thickness_mm)

    @cached_property
    def ends(self) -> tuple[Pose, Pose]:
        panel = self.place.panel
        a, b = (panel.plane(s) for s in self.place.ends_mm)
        return a, b

    @property
    def solid(self) -> bool:
        return self.place.given.kind != "built-up"

    @cached_property
    def blocks(self) -> list[Part]:
        """Behind the false spar, where a leaf wants more than a sheet's thickness to hold it."""
        deep, wide, high = BLOCK_MM
        given = self.place.given
        room = self._slots()
        found = []
        front = -given.gap_mm / 2 - self.spar.thick_mm
        for k, (leaf, hole) in enumerate(zip(self.leaves, room, strict=True), start=1):
            s = self.leaf_stations[k - 1]
            above, below = self._room_at(s)
            top, low = min(high / 2, above - 1.0), min(high / 2, below - 0.5)
            block = Placed(Box((front - deep, -low, -wide / 2), (front, top, wide / 2)), leaf.pose)
            part = self.shop.stick(
                f"AB{self.n}{LETTERS[k - 1]}R", f"hinge block of the {given.name}, right",
                given.material, f"{deep:g} x {top + low:.1f}", Difference(block, (hole,)), wide,
                STEP, self.place.key)
            found.append(in_frame(part, leaf.pose))
        return found

    def _room_at(self, s_line: float) -> tuple[float, float]:
        """Wood above and below the leaf at a station of the hinge line."""
        s = self.place.ends_mm[0] + s_line * float(
            self.place.line.axis @ self.place.panel.along)
        above, below = self.place.depth_mm(s)
        return above - self.lift_mm, below + self.lift_mm
