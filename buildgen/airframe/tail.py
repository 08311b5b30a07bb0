"""Sheet tail: tailplane with elevator on the fuselage, fin with rudder on the tailplane."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np
from shapely.geometry import Polygon, box

from buildgen.aero.planform import Panel as PlanPanel
from buildgen.aero.planform import area_mm2, mean_aerodynamic_chord
from buildgen.airframe.blank import Blank, apply, lightening, solid_cut
from buildgen.airframe.fuselage import Body
from buildgen.airframe.hinge import GAP_MM as HINGE_GAP_MM
from buildgen.airframe.hinge import LEAF_G, HingeLine, Horn, bought_horn, horn_at
from buildgen.airframe.seat import Seat
from buildgen.airframe.shop import Shop
from buildgen.airframe.surface import WingShape
from buildgen.design.schema import Surface, Tail
from buildgen.part import Bought, Joint, Part
from buildgen.solid import Array, Circle, Placed, Pose, Prism

STEP = "Tail"
HORN_RADIUS_MM = 14.0
THROW_DEG = (25.0, 25.0)
"""Either way; common practice, no source."""


@dataclass(frozen=True, eq=False)
class Outline:
    """Planform of one tail surface: half span (or height), chords, sweep of its leading edge."""

    span_mm: float
    root_mm: float
    tip_mm: float
    sweep_mm: float
    control: float

    @property
    def panel(self) -> PlanPanel:
        return PlanPanel(self.span_mm, self.root_mm, self.tip_mm, self.sweep_mm, 0.0)

    @property
    def area_mm2(self) -> float:
        return self.span_mm * (self.root_mm + self.tip_mm) / 2

    @property
    def hinge_mm(self) -> float:
        """x of the hinge line: straight across the span, at the control's share of the root."""
        return self.root_mm * (1 - self.control)

    def corners(self, tail_x: float) -> Polygon:
        """Half outline in x (aft), y (out)."""
        return Polygon([(0, 0), (tail_x, 0), (self.sweep_mm + self.tip_mm, self.span_mm),
                        (self.sweep_mm, self.span_mm)])


@dataclass(frozen=True, eq=False)
class SheetTail:
    """The tail in space and its parts."""

    shop: Shop
    wing: WingShape
    body: Body | None
    given: Tail

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
        return _outline(wanted, area, halves=2, aspect=4.0)

    @cached_property
    def fin(self) -> Outline | None:
        wanted = self.given.fin
        if wanted is None:
            return None
        area = 0.0
        if wanted.volume is not None:
            span = 2 * sum(p.rise_mm[0] for p in self.wing.plan)
            area = wanted.volume * 2 * area_mm2(self.wing.plan) * span / self.given.arm_mm
        return _outline(wanted, area, halves=1, aspect=1.6)

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
        """Frame of the fin: x aft, y up, centred on the plane of symmetry."""
        assert self.fin is not None
        x = self.tailplane_le_mm + self.tailplane.root_mm - self.fin.root_mm
        at = (x, self.thick_mm / 2, self.level_mm + self.thick_mm)
        return Pose.at(at, (1, 0, 0), (0, 0, 1))

    # ------------------------------------------------------------ parts

    @cached_property
    def _fin_outline(self) -> Polygon:
        """Fixed fin with its tab through the tailplane."""
        assert self.fin is not None
        fixed = self.fin.hinge_mm
        whole = self.fin.corners(self.fin.root_mm)
        fin = whole.intersection(box(-500, 0, fixed - HINGE_GAP_MM / 2, 2000))
        tab = box(0.25 * fixed, -self.thick_mm, 0.75 * fixed, 1.0)
        return fin.union(tab)

    def _plate(self, id: str, name: str, outline: Polygon, pose: Pose, key: str,
               web: bool = False) -> Part:
        given = self.given
        circles: tuple[Circle, ...] = ()
        if web:
            line = _centre_line(outline)
            least = max(8.0, self.shop.web_mm(given.material, self.thick_mm, "tail.material"))
            circles = lightening(outline, (), line, least, 12.0, most=12)
        return self.shop.plate(id, name, given.material, given.thickness_mm, outline, pose, STEP,
                               key, circles=circles, grain_deg=90.0)

    @cached_property
    def parts(self) -> tuple[Part, ...]:
        plane, fin = self.tailplane, self.fin
        whole = _both_halves(plane)
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
            rudder_at = fin.hinge_mm + gap
            rudder = fin.corners(fin.root_mm).intersection(box(rudder_at, 3.0, far, far))
            parts += [
                self._plate("V1", "fin", self._fin_outline, self.upright, "tail.fin",
                            given.fin.lightening),
                self._plate("V2", "rudder", rudder, self.upright, "tail.fin"),
            ]
        return (*parts, *self._hardware())

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

    def _hardware(self) -> list[Part]:
        parts = []
        for id, surface, line, horn in zip(
            ("HE", "HR"), (self.given.tailplane, self.given.fin), self.lines, self.horns,
            strict=False,
        ):
            assert surface is not None
            name = horn.surface
            at = Pose(origin=(line.start + line.end) / 2)
            mass = surface.hinges * LEAF_G
            parts += [
                Part(id, f"hinges of the {name}", "hinges",
                     Bought(mass, 0.2 * mass, None, "fibre hinge, 18 x 12 mm", surface.hinges),
                     at, STEP, f"{horn.key}.hinges"),
                bought_horn(horn, f"horn of the {name}", STEP),
            ]
        return parts

    @property
    def joints(self) -> tuple[Joint, ...]:
        """Fin in the tailplane, tailplane on the fuselage, controls along their hinge lines."""
        down = (0.0, 0.0, -1.0)
        hinge = (0.8 * HINGE_GAP_MM, 1.2 * HINGE_GAP_MM)
        fin = (Joint("tab in slot", "V1", "T1", (0.0, self.shop.press_mm + 0.1), down),
               Joint("hinged", "V2", "V1", hinge)) if self.fin else ()
        return (
            Joint("hinged", "T2", "T1", hinge),
            *fin,
            *(Joint("face to face", "T1", deck, (0.0, 0.2), down) for deck in self._under()),
        )

    def _under(self) -> tuple[str, ...]:
        """Ids of the fuselage top that carries the tailplane."""
        if self.body is None:
            return ()
        middle = self.tailplane_le_mm + self.tailplane.hinge_mm / 2
        return tuple(
            p.id for p in self.body.parts
            if p.id.startswith("FT") and p.solid is not None
            and p.solid.bounding_box()[0] < middle < p.solid.bounding_box()[3]
        )


def _outline(given: Surface, area: float, halves: int, aspect: float) -> Outline:
    """From measures, or from an area with the aspect ratio and taper wanted."""
    if given.volume is None:
        assert given.span_mm is not None and given.root_chord_mm is not None
        tip = given.tip_chord_mm or given.root_chord_mm
        return Outline(given.span_mm / halves, given.root_chord_mm, tip, given.sweep_mm,
                       given.control)
    span = float(np.sqrt(area * (given.aspect or aspect)))
    mean = area / span
    root = 2 * mean / (1 + given.taper)
    return Outline(span / halves, root, root * given.taper, given.sweep_mm, given.control)


def _both_halves(outline: Outline) -> Polygon:
    half = np.asarray(outline.corners(outline.root_mm).exterior.coords)[:-1]
    return Polygon([*half[[0, 3, 2, 1]], *(half[[2, 3]] * (1, -1))])


def _centre_line(outline: Polygon) -> Array:
    """Points half way along the chord, from one tip to the other."""
    x0, y0, x1, y1 = outline.bounds
    ys = np.linspace(y0 + 2, y1 - 2, 120)
    xs = []
    for y in ys:
        cut = outline.intersection(box(x0 - 1, y - 0.05, x1 + 1, y + 0.05))
        xs.append((cut.bounds[0] + cut.bounds[2]) / 2)
    return np.column_stack([xs, ys])
