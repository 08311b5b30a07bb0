"""The upright sheet at which a wing's ribs stop, ahead of a moving surface."""

from __future__ import annotations

from collections.abc import Callable, Iterable
from dataclasses import dataclass
from functools import cached_property

import numpy as np
import shapely
from shapely.geometry import Polygon, box

from buildgen.airframe.blank import Bar, Blank, Cut, apply, bar_cut, parts_of, solid_cut
from buildgen.airframe.moving import ControlPlace
from buildgen.part import Joint, Part
from buildgen.solid import Placed, Pose, Shape, mesh, polygons

STEP = "Wing: edges"
FAR = 60.0
GLUE_MM = 0.3
"""What glue may fill between a false spar and a rib cut square to its sheet."""
SLOT_PLAY_MM = 0.05
"""Round a leaf hinge, on each side: pressed in with a drop of glue; common practice, no source."""


@dataclass(frozen=True, eq=False)
class FalseSpar:
    """The upright sheet at which the ribs stop, between the two whole ribs."""

    place: ControlPlace
    leaf_shapes: tuple[Shape, ...]

    @cached_property
    def thick_mm(self) -> float:
        given = self.place.given
        return self.place.shop.thickness(given.spar_material, given.spar_thickness_mm)

    @cached_property
    def pose(self) -> Pose:
        """Its front face: x along the hinge line, y up, z aft."""
        frame = self.place.line.frame(0.0)
        aft, up = frame.rotation[:, 0], frame.rotation[:, 1]
        back = self.place.given.gap_mm / 2 + self.thick_mm
        return Pose.at(frame.origin - back * aft, self.place.line.axis, up)

    @cached_property
    def outline(self) -> Polygon:
        """The smaller of the wing's sections at both faces, from rib to rib."""
        solid = mesh(Placed(self.place.panel.whole, self.pose.inverse))
        faces = [shapely.union_all(polygons(solid.slice(z)))
                 for z in (0.01, self.thick_mm - 0.01)]
        low, high = (self._ends(s, end) for s, end in zip(self.place.bay_mm, (max, min),
                                                          strict=True))
        merged = faces[0].intersection(faces[1]).intersection(box(low, -FAR, high, FAR))
        return max(parts_of(merged), key=lambda p: p.area)

    def _ends(self, s_mm: float, pick: Callable[[Iterable[float]], float]) -> float:
        """x at which a plane across the panel cuts it square: the shorter of its corners."""
        plane = self.place.panel.plane(s_mm)
        normal = plane.rotation[:, 2]
        slope = float(self.pose.rotation[:, 0] @ normal)
        found = []
        for y in (-10.0, 10.0):
            for z in (0.0, self.thick_mm):
                here = self.pose((0.0, y, z))
                found.append(float((plane.origin - here) @ normal) / slope)
        return pick(found)

    @cached_property
    def parts(self) -> tuple[Part, ...]:
        given, n = self.place.given, self.place.number
        blank = Blank(f"AF{n}R", self.pose, self.thick_mm, self.outline)
        cuts = [solid_cut(s, blank, SLOT_PLAY_MM) for s in self.leaf_shapes]
        outline, circles, _ = apply(self.outline, cuts)
        part = self.place.shop.plate(
            blank.id, f"false spar of the {given.name}, right", given.spar_material,
            given.spar_thickness_mm, outline, self.pose, STEP, self.place.key, circles=circles,
        )
        return part, part.mirrored(f"AF{n}L", f"false spar of the {given.name}, left")

    def _s(self, blank: Blank) -> float:
        """Middle of a rib along the panel; outside of it for another panel's rib."""
        panel = self.place.panel
        middle = blank.pose.origin + blank.pose.rotation[:, 2] * blank.thickness_mm / 2
        s = float((middle - panel.root.nose) @ panel.along)
        away = float(abs((middle - panel.root.nose - s * panel.along) @ panel.up))
        return s if away < 0.5 * panel.length_mm else -FAR

    def cut(self, blank: Blank) -> Cut:
        """Everything of an inner rib behind the front face."""
        low, high = self.place.bay_mm
        if not low < self._s(blank) < high:
            return Cut()
        region = np.array([[0, -FAR], [9 * FAR, -FAR], [9 * FAR, FAR], [0, FAR]])
        x, y = self.pose.rotation[:, 2], self.pose.rotation[:, 1]
        reach = 2 * FAR * self.pose.rotation[:, 0]
        bar = Bar(self.pose.origin - reach, self.pose.origin + reach
                  + self.place.line.length_mm * self.pose.rotation[:, 0], x, y, region)
        return bar_cut(bar, blank, self.place.shop.press_mm)

    def joint(self, blank: Blank) -> Joint | None:
        """The ribs' ends on its front face, its own ends on the whole ribs' faces."""
        (low, high), rib = self.place.bay_mm, self.place.rib_mm
        s = self._s(blank)
        lean = abs(float(self.pose.rotation[:, 0] @ blank.pose.rotation[:, 0]))
        if low < s < high:
            slack = self.place.shop.press_mm + blank.thickness_mm * lean + GLUE_MM
            return Joint("stick in notch", self.parts[0].id, blank.id, (0.0, slack),
                         (-1.0, 0.0, 0.0))
        if low - 1.5 * rib < s < low or high < s < high + 1.5 * rib:
            return Joint("face to face", self.parts[0].id, blank.id,
                         (0.0, self.thick_mm * lean + 2 * GLUE_MM))
        return None

    @property
    def joints(self) -> tuple[Joint, ...]:
        return ()
