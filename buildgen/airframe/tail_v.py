"""V-tail: two sheet halves with ruddervators in a grooved block on the fuselage."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np
from shapely.geometry import Polygon, box

from buildgen.aero.planform import area_mm2, mean_aerodynamic_chord
from buildgen.airframe.hinge import GAP_MM, HingeLine, Horn, horn_at
from buildgen.airframe.tail import HORN_RADIUS_MM, STEP, THROW_DEG, SheetTail
from buildgen.airframe.tail_outline import Outline, outline_of
from buildgen.design.schema import Surface
from buildgen.part import Joint, Part
from buildgen.problems import DesignError, Problem
from buildgen.solid import Placed, Pose, Prism

FLOOR_MM = 3.0
"""Of the block under its groove."""
BLOCK_MM = 14.0
"""Half the block's width, where the fuselage is that wide."""
LEAST_GLUE_MM = 4.0
KEY = "tail.tailplane"


@dataclass(frozen=True, eq=False)
class VTail(SheetTail):
    """Halves meet at their upper edges over the block; the wedge between them fills with glue."""

    area_basis = (", areas of the V-tail by the squares of cosine and sine of its dihedral (Purser"
                  " and Campbell, NACA Report 823)")

    @cached_property
    def lean(self) -> tuple[float, float]:
        """Cosine and sine of the dihedral."""
        angle = np.radians(self.given.dihedral_deg)
        return float(np.cos(angle)), float(np.sin(angle))

    @cached_property
    def tailplane(self) -> Outline:
        """One half in its own plane; a volume asked for is that of the level area."""
        mean, wanted, area = mean_aerodynamic_chord(self.wing.plan), self.given.tailplane, 0.0
        if wanted.volume is not None:
            level = wanted.volume * 2 * area_mm2(self.wing.plan) * mean.length_mm
            area = level / self.given.arm_mm / self.lean[0] ** 2
        return outline_of(wanted, area, halves=2, aspect=4.0)

    @property
    def level_area_mm2(self) -> float:
        """Both halves by the square of the cosine."""
        return 2 * self.tailplane.area_mm2 * self.lean[0] ** 2

    @property
    def upright_area_mm2(self) -> float:
        """Both halves by the square of the sine."""
        return 2 * self.tailplane.area_mm2 * self.lean[1] ** 2

    @property
    def height_mm(self) -> float:
        middle = mean_aerodynamic_chord((self.tailplane.panel,)).y_mm
        return self.level_mm + FLOOR_MM + (self.inset_mm + middle) * self.lean[1]

    @property
    def inset_mm(self) -> float:
        """Of the root edge from where the lower faces meet, so that the upper edges touch."""
        return self.thick_mm * self.lean[1] / self.lean[0]

    @cached_property
    def half(self) -> Pose:
        """Frame of the starboard half: x aft, y out along it from its root, lower face z = 0."""
        deck, (cos, sin) = self.flat, self.lean
        x, y, z = deck.rotation.T
        out = cos * y + sin * z
        return Pose.at(deck((0.0, 0.0, FLOOR_MM)) + self.inset_mm * out, x, out)

    @cached_property
    def block_mm(self) -> float:
        """Half the width of the block: no wider than the fuselage under it."""
        wide = BLOCK_MM
        if self.body is not None:
            ends = self.tailplane_le_mm, self.tailplane_le_mm + self.tailplane.hinge_mm
            wide = min(wide, *(self.body.width(x) / 2 for x in ends))
        least = self.thick_mm * self.lean[1] + LEAST_GLUE_MM
        if wide < least:
            raise DesignError(Problem(
                "tail.arrangement", f"The fuselage is {2 * wide:.0f} mm wide under the V-tail.",
                f"Its block needs {2 * least:.0f} mm: widen the fuselage there, or take thinner"
                " sheet or less dihedral."))
        return wide

    @property
    def clear_mm(self) -> float:
        """Of a ruddervator's root: at full throw up clear of the other, down of the fuselage."""
        cos, sin = self.lean
        chord = self.tailplane.root_mm * self.tailplane.control
        up, down = (chord * np.sin(np.radians(t)) for t in THROW_DEG)
        other = up * sin / cos + 1.0 / cos
        deck = (down * cos + 1.0 - FLOOR_MM) / sin - self.inset_mm
        return float(max(other, deck, 2.0))

    @cached_property
    def parts(self) -> tuple[Part, ...]:
        plane, gap = self.tailplane, GAP_MM / 2
        whole = plane.corners(plane.root_mm)
        fixed = whole.intersection(box(-4000, -1, plane.hinge_mm - gap, 4000))
        moving = whole.intersection(box(plane.hinge_mm + gap, self.clear_mm, 4000, 4000))
        right = (
            self._plate("T1R", "V-tail half, right", fixed, self.half, KEY,
                        self.given.tailplane.lightening),
            self._plate("T2R", "ruddervator, right", moving, self.half, KEY),
        )
        left = (right[0].mirrored("T1L", "V-tail half, left"),
                right[1].mirrored("T2L", "ruddervator, left"))
        return (self.block, *right, *left, *self._hardware(("HER", "HEL")))

    @cached_property
    def block(self) -> Part:
        """Flat below, grooved above; its section stands across the deck."""
        wide, tan = self.block_mm, self.lean[1] / self.lean[0]
        high = FLOOR_MM + wide * tan
        section = Polygon([(-wide, 0), (wide, 0), (wide, high), (0, FLOOR_MM), (-wide, high)])
        x, y, z = self.flat.rotation.T
        length = self.tailplane.hinge_mm - GAP_MM
        pose = Pose.at(self.flat((0.0, 0.0, 0.0)), y, z)
        turned = pose if pose.rotation[:, 2] @ x > 0 else Pose.at(pose.origin, -y, z)
        return self.shop.stick(
            "T0", "block under the V-tail", self.given.block_material,
            f"{2 * wide:.1f} x {high:.1f} grooved {self.given.dihedral_deg:g} deg",
            Placed(Prism(section, length), turned), length, STEP, "tail.dihedral_deg")

    @cached_property
    def lines(self) -> tuple[HingeLine, ...]:
        """Starboard, then port, each from the root out."""
        half, at = self.half, (self.tailplane.hinge_mm, self.thick_mm / 2)
        start, end = (half((at[0], y, at[1])) for y in (self.clear_mm, self.tailplane.span_mm))
        aft, up = half.rotation[:, 0], half.rotation[:, 2]
        flip = np.array([1.0, -1.0, 1.0])
        return (HingeLine(start, end, aft, up),
                HingeLine(start * flip, end * flip, aft * flip, up * flip))

    @property
    def hinged(self) -> tuple[tuple[HingeLine, Surface], ...]:
        return tuple((line, self.given.tailplane) for line in self.lines)

    @cached_property
    def horns(self) -> tuple[Horn, ...]:
        """Below, near the roots."""
        right = horn_at(self.lines[0], 10.0, HORN_RADIUS_MM, "down", THROW_DEG, "HEHR", "T2R",
                        "ruddervator, right", KEY)
        return right, right.mirrored("HEHL", "T2L", "ruddervator, left")

    @property
    def joints(self) -> tuple[Joint, ...]:
        """Halves in the groove, the block on the fuselage, ruddervators on their hinges."""
        hinge = (0.8 * GAP_MM, 1.2 * GAP_MM)
        down = -self.half.rotation[:, 2]
        found = []
        for side, sign in (("R", 1.0), ("L", -1.0)):
            x, y, z = (float(v) for v in down)
            found += [Joint("face to face", f"T1{side}", "T0", (0.0, 0.1), (x, sign * y, z)),
                      Joint("hinged", f"T2{side}", f"T1{side}", hinge)]
        x, y, z = (float(v) for v in -self.flat.rotation[:, 2])
        return (*found, *(Joint("face to face", "T0", deck, (0.0, 0.2), (x, y, z))
                          for deck in self._under()))
