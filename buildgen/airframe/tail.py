"""Sheet tail: tailplane with elevator on the fuselage, fin with rudder on the tailplane."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np
from shapely.geometry import LineString, Polygon, box

from buildgen.aero.planform import area_mm2, mean_aerodynamic_chord
from buildgen.airframe.blank import Blank, apply, lightening, solid_cut
from buildgen.airframe.fuselage import Body
from buildgen.airframe.hinge import GAP_MM as HINGE_GAP_MM
from buildgen.airframe.hinge import LEAF_G, HingeLine, Horn, bought_horn, horn_at, slit_marks
from buildgen.airframe.seat import Seat
from buildgen.airframe.shop import Shop
from buildgen.airframe.surface import WingShape
from buildgen.airframe.tail_outline import Outline, both_halves, centre_line, outline_of
from buildgen.design.schema import Surface, Tail
from buildgen.part import Bought, Joint, Mark, Part
from buildgen.solid import Circle, Placed, Pose, Prism

STEP = "Tail"
HORN_RADIUS_MM = 14.0
THROW_DEG = (25.0, 25.0)
"""Either way; common practice, no source."""


@dataclass(frozen=True, eq=False)
class SheetTail:
    """The tail in space and its parts."""

    shop: Shop
    wing: WingShape
    body: Body | None
    given: Tail

    area_basis = ""
    """How the areas were found, where that is not plain."""

    @cached_property
    def thick_mm(self) -> float:
        return self.shop.thickness(self.given.material, self.given.thickness_mm)

    @cached_property
    def tailplane(self) -> Outline:
        mean = mean_aerodynamic_chord(self.wing.plan)
        wanted = self.given.tailplane
        area = 0.0
        if wanted.volume is not None:
            area = wanted.volume * 2 * area_mm2(self.wing.plan) * mean.length_mm / abs(
                self.given.arm_mm)
        return outline_of(wanted, area, halves=2, aspect=4.0)

    @cached_property
    def fin(self) -> Outline | None:
        wanted = self.given.fin
        if wanted is None:
            return None
        area = 0.0
        if wanted.volume is not None:
            span = 2 * sum(p.rise_mm[0] for p in self.wing.plan)
            area = wanted.volume * 2 * area_mm2(self.wing.plan) * span / self.given.arm_mm
        return outline_of(wanted, area, halves=1, aspect=1.6)

    @property
    def clear_mm(self) -> float:
        """Where hinge lines of one half begin, outside their root."""
        return 0.0

    @property
    def level_area_mm2(self) -> float:
        """Area that works as a tailplane."""
        return 2 * self.tailplane.area_mm2

    @property
    def upright_area_mm2(self) -> float:
        """Area that works as a fin."""
        return self.fin.area_mm2 if self.fin else 0.0

    @property
    def height_mm(self) -> float:
        """z of the tailplane's mean chord, as the wing's wash sees it."""
        return self.level_mm

    @cached_property
    def tailplane_le_mm(self) -> float:
        """x of the tailplane's root leading edge, from the arm between the quarter chords."""
        wing = mean_aerodynamic_chord(self.wing.plan)
        tail = mean_aerodynamic_chord((self.tailplane.panel,))
        return wing.quarter_x_mm + self.given.arm_mm - tail.quarter_x_mm

    @cached_property
    def level_mm(self) -> float:
        """z of the tailplane's lower face: on top of the fuselage."""
        if self.body is None:
            return 0.0
        return self.body.top(self.tailplane_le_mm)

    @property
    def seat(self) -> Seat:
        """What the top of the fuselage follows under the fixed tailplane and the elevator."""
        slope = -float(np.tan(np.radians(self.given.tailplane.incidence_deg)))
        start = self.tailplane_le_mm
        return Seat(start, start + self.tailplane.root_mm, slope)

    @cached_property
    def flat(self) -> Pose:
        """Frame of the tailplane: x aft, y starboard, lower face z = 0."""
        angle = np.radians(self.given.tailplane.incidence_deg)
        return Pose.at((self.tailplane_le_mm, 0, self.level_mm),
                       (np.cos(angle), 0, -np.sin(angle)), (0, 1, 0))

    @cached_property
    def upright(self) -> Pose:
        """Frame of the fin: x aft, y up square to the tailplane, centred on the middle."""
        assert self.fin is not None
        ahead = self.tailplane.root_mm - self.fin.root_mm
        x, _, z = self.flat.rotation.T
        return Pose.at(self.flat((ahead, self.thick_mm / 2, self.thick_mm)), x, z)

    # ------------------------------------------------------------ parts

    @cached_property
    def _fin_outline(self) -> Polygon:
        """Fixed fin with its tab through the tailplane."""
        assert self.fin is not None
        fixed = self.fin.hinge_mm
        whole = self.fin.corners(self.fin.root_mm)
        fin = whole.intersection(box(-500, 0, fixed - HINGE_GAP_MM / 2, 2000))
        ahead, chord = self.fin.root_mm - self.tailplane.root_mm, self.tailplane.hinge_mm
        low, high = max(0.25 * fixed, ahead + 0.15 * chord), min(0.75 * fixed, ahead + 0.85 * chord)
        tab = box(low, -self.thick_mm, high, 1.0)
        return fin.union(tab)

    @cached_property
    def _rudder_outline(self) -> Polygon:
        fin = self.fin
        assert fin is not None
        return fin.corners(fin.root_mm).intersection(
            box(fin.hinge_mm + HINGE_GAP_MM / 2, 3.0, 4000, 4000))

    def _plate(self, id: str, name: str, outline: Polygon, pose: Pose, key: str,
               web: bool = False) -> Part:
        """A sheet surface; where its edge is slit for hinges is engraved."""
        given = self.given
        circles: tuple[Circle, ...] = ()
        if web:
            line = centre_line(outline)
            least = max(8.0, self.shop.web_mm(given.material, self.thick_mm, "tail.material"))
            circles = lightening(outline, (), line, least, 12.0, most=12)
        return self.shop.plate(id, name, given.material, given.thickness_mm, outline, pose, STEP,
                               key, circles=circles, grain_deg=90.0,
                               marks=self._slits(outline, pose))

    def _slits(self, outline: Polygon, pose: Pose) -> tuple[Mark, ...]:
        """Marks across every hinge line that ends on this plate's edge and lies in its plane."""
        found: list[Mark] = []
        for line, surface in self.hinged:
            middle = pose.local((line.start + line.end) / 2)
            if abs(middle[2] - self.thick_mm / 2) > 0.1:
                continue
            marks = slit_marks(line, stations(line, surface, self.clear_mm), pose, self.thick_mm)
            found += [m for m in marks if outline.contains(LineString(m.line))]
        return tuple(found)

    @cached_property
    def parts(self) -> tuple[Part, ...]:
        plane, fin = self.tailplane, self.fin
        whole = both_halves(plane)
        hinge, gap = plane.hinge_mm, HINGE_GAP_MM / 2
        far = 4000.0
        blank = Blank("T1", self.flat, self.thick_mm,
                      whole.intersection(box(-far, -far, hinge - gap, far)))
        fixed = blank.outline
        if fin is not None:
            tab = Placed(Prism(self._fin_outline, self.thick_mm), self.upright)
            fixed, _, _ = apply(fixed, [solid_cut(tab, blank, self.shop.press_mm)])
        moving = whole.intersection(box(hinge + gap, -far, far, far))
        tail, given = "tail.tailplane", self.given
        parts = [
            self._plate("T1", "tailplane", fixed, self.flat, tail, given.tailplane.lightening),
            self._plate("T2", "elevator", moving, self.flat, tail),
        ]
        if fin is not None and given.fin is not None:
            parts += [
                self._plate("V1", "fin", self._fin_outline, self.upright, "tail.fin",
                            given.fin.lightening),
                self._plate("V2", "rudder", self._rudder_outline, self.upright, "tail.fin"),
            ]
        return (*parts, *self._more(), *self._hardware())

    def _more(self) -> list[Part]:
        """What else the arrangement needs."""
        return []

    @cached_property
    def lines(self) -> tuple[HingeLine, ...]:
        """Hinge lines of the elevator, port to starboard, and of the rudder, from the top down."""
        half = self.thick_mm / 2
        plane, fin, x, y, z = self.tailplane, self.fin, *np.eye(3)
        level = self.flat
        elevator = HingeLine(level((plane.hinge_mm, -plane.span_mm, half)),
                             level((plane.hinge_mm, plane.span_mm, half)), x, z)
        if fin is None:
            return (elevator,)
        upright = self.upright
        return (
            elevator,
            HingeLine(upright((fin.hinge_mm, fin.span_mm, half)),
                      upright((fin.hinge_mm, 0.0, half)), x, y),
        )

    @property
    def hinged(self) -> tuple[tuple[HingeLine, Surface], ...]:
        """Every hinge line with the table that says where its hinges are."""
        surfaces = (self.given.tailplane, self.given.fin)
        return tuple((line, s) for line, s in zip(self.lines, surfaces, strict=False) if s)

    @cached_property
    def horns(self) -> tuple[Horn, ...]:
        """Below the elevator beside the fuselage, and low on the rudder's starboard side."""
        elevator, *more = self.lines
        wide = self.body.width(float(elevator.start[0])) / 2 if self.body else 0.0
        return (
            horn_at(elevator, self.tailplane.span_mm + wide + 8.0, HORN_RADIUS_MM, "down",
                    THROW_DEG, "HEH", "T2", "elevator", "tail.tailplane"),
            *(horn_at(rudder, rudder.length_mm - 15.0, HORN_RADIUS_MM, "up",
                      THROW_DEG, "HRH", "V2", "rudder", "tail.fin") for rudder in more),
        )

    def _hardware(self, ids: tuple[str, ...] = ("HE", "HR")) -> list[Part]:
        parts = []
        for id, (line, surface), horn in zip(ids, self.hinged, self.horns, strict=False):
            name = horn.surface
            at = Pose(origin=(line.start + line.end) / 2)
            count = len(stations(line, surface, self.clear_mm))
            mass = count * LEAF_G
            parts += [
                Part(id, f"hinges of the {name}", "hinges",
                     Bought(mass, 0.2 * mass, None, "fibre hinge, 18 x 12 mm", count),
                     at, STEP, f"{horn.key}.hinges"),
                bought_horn(horn, f"horn of the {name}", STEP),
            ]
        return parts

    @property
    def joints(self) -> tuple[Joint, ...]:
        """Fin in the tailplane, tailplane on the fuselage, controls along their hinge lines."""
        x, y, z = (float(v) for v in -self.flat.rotation[:, 2])
        down = (x, y, z)
        hinge = (0.8 * HINGE_GAP_MM, 1.2 * HINGE_GAP_MM)
        fin = (Joint("tab in slot", "V1", "T1", (0.0, self.shop.press_mm + 0.1), down),
               Joint("hinged", "V2", "V1", hinge)) if self.fin else ()
        return (
            Joint("hinged", "T2", "T1", hinge),
            *fin,
            *(Joint("face to face", "T1", deck, (0.0, 0.2), down) for deck in self._under()),
        )

    @property
    def _stand_mm(self) -> float:
        """x of the middle of what stands on the fuselage."""
        return self.tailplane_le_mm + self.tailplane.hinge_mm / 2

    def _under(self) -> tuple[str, ...]:
        """Ids of the fuselage top that carries the tailplane."""
        if self.body is None:
            return ()
        middle = self._stand_mm
        return tuple(
            p.id for p in self.body.parts
            if p.id.startswith("FT") and p.solid is not None
            and p.solid.bounding_box()[0] < middle < p.solid.bounding_box()[3]
        )


def stations(line: HingeLine, surface: Surface, from_root_mm: float = 0.0) -> tuple[float, ...]:
    """Where the hinges sit, from the line's start: as given from the root out, or spread evenly.

    The line of a tailplane in one piece runs from tip to tip, that of a fin from the top down.
    The line of one half begins `from_root_mm` outside the root.
    """
    length = line.length_mm
    if not surface.hinge_at_mm:
        return line.stations(float("inf"), surface.hinges)
    at = sorted(surface.hinge_at_mm)
    if abs(line.start[1] + line.end[1]) < 1e-6 and abs(line.start[1]) > 1e-6:
        both = {length / 2 + sign * a for a in at for sign in (-1, 1)}
        return tuple(sorted(both))
    from_start = abs(line.start[1]) > 1e-6
    if from_start:
        return tuple(a - from_root_mm for a in at)
    return tuple(length - a for a in reversed(at))
