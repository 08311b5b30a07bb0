"""The horn of a moving surface: a ply plate in a slot, and the wood in which it stands."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np
from shapely.geometry import box

from buildgen.airframe.hinge import TAB_MM, bevel_mm, horn_outline, ply_horn
from buildgen.airframe.members.control_hinges import MOVING, Hinged, in_frame
from buildgen.airframe.members.false_spar import FAR, SLOT_PLAY_MM
from buildgen.part import Part, Plate
from buildgen.solid import Box, Common, Difference, Placed, Pose, Prism, Shape

HORN_BLOCK_MM = 14.0
"""Along the span, the wood in which a horn stands."""


@dataclass(frozen=True, eq=False)
class Horned(Hinged):
    """A moving surface with its horn."""

    def _horn_tab(self) -> tuple[float, float]:
        """x of the horn's tab from the hinge line, and how deep it reaches below the skin."""
        given = self.place.given
        above, below = self.place.depth_mm(self.place.arm_s_mm)
        back = max(bevel_mm(above, below, self.place.throw_deg))
        near = back + 2.0 if self.solid else given.nose_mm + 1.0
        return given.gap_mm / 2 + near, 0.7 * (above + below)

    @cached_property
    def horn(self) -> Part | None:
        horn, given = self.place.horn, self.place.given
        if horn is None or given.drive == "torque-rod":
            return None
        near, deep = self._horn_tab()
        skin = self._skin_mm(near)
        deep = min(deep, 0.75 * (skin + self._skin_mm(near + TAB_MM, other=True)))
        outline, circles = horn_outline(horn.radius_mm, near, skin, deep)
        return ply_horn(self.shop, horn, outline, circles, f"horn of the {given.name}, right",
                        given.horn_material, given.horn_thickness_mm, MOVING)

    def _skin_mm(self, x_mm: float, other: bool = False) -> float:
        """From the hinge line to the skin on the horn's side (or the other) at x behind it."""
        assert self.place.horn is not None
        horn = self.place.horn
        pose = self.place.panel.plane(self.place.arm_s_mm)
        outline = self.place.panel.outline(pose)
        aft = np.cross(horn.axis, horn.side)
        at = pose.local(horn.hinge_mm + x_mm * aft)[:2]
        slice_ = outline.intersection(box(at[0] - 0.05, -9 * FAR, at[0] + 0.05, 9 * FAR))
        low, high = slice_.bounds[1] - at[1], slice_.bounds[3] - at[1]
        up = (self.place.given.horn_side == "up") != other
        return float(high if up else -low)

    def _horn_room(self) -> tuple[Shape, ...]:
        """The slot of the horn's tab in a solid surface."""
        return (self._horn_slot(),) if self.solid and self.horn is not None else ()

    def _horn_slot(self) -> Shape:
        assert self.horn is not None and isinstance(self.horn.form, Plate)
        play = self.shop.press_mm + SLOT_PLAY_MM
        grown = self.horn.form.outline.buffer(play, join_style="mitre")
        lift = Pose(origin=np.array([0.0, 0.0, -play]))
        return Placed(Prism(grown, self.horn.form.thickness_mm + 2 * play),
                      lift.then(self.horn.pose))

    @cached_property
    def horn_block(self) -> Part | None:
        """Solid wood between the skins behind the nose, for the horn to stand in."""
        if self.solid or self.horn is None or self.place.horn is None:
            return None
        given = self.place.given
        front = given.nose_mm + given.gap_mm / 2
        wide = HORN_BLOCK_MM / 2
        back = self._horn_tab()[0] + TAB_MM + 1.5
        frame = self.place.horn
        aft = np.cross(frame.axis, frame.side)
        pose = Pose.at(frame.hinge_mm, aft, frame.side)
        room = Placed(Box((front, -FAR, -wide), (back, FAR, wide)), pose)
        body = Difference(Common((self.place.panel.envelope(*self.ends), room)),
                          (self._horn_slot(),))
        part = self.shop.stick(f"AQ{self.n}R", f"horn block of the {given.name}, right",
                               given.material, f"{back - front:g} x {2 * wide:g} block", body,
                               2 * wide, MOVING, self.place.key)
        return in_frame(part, pose)
