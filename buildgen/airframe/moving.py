"""Where the wing's moving surfaces lie: their hinge lines, ends, servos and horns in space.

What they are made of stands in `members/controls.py` and `members/servos.py`; ribs and edges
only ask here which ribs must stand at their ends and where the fixed trailing edge remains.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, replace
from functools import cached_property

import numpy as np

from buildgen.airframe.hinge import HingeLine, Horn, horn_at
from buildgen.airframe.moving_faults import TORQUE_ARM_MM, not_together, place_faults
from buildgen.airframe.shop import Shop
from buildgen.airframe.surface import AFT, Panel, WingShape
from buildgen.design.schema import Control
from buildgen.problems import DesignError, Problem
from buildgen.shelf import ServoClass
from buildgen.solid import Array

ARM_MM = 3.0
"""Thickness of a servo's arm with its screw head; common practice, no source."""
BORDER_MM = 8.0
"""Of the plate round a servo's opening, along the span."""
BELOW_MM = 5.0
"""How far a servo's arm reaches out of the skin at rest."""
LEG_AT_MM = 10.0
"""Outboard of the surface's inner end, where a torque rod bends into it."""
SHORT_MM = 10.0
"""A shorter piece of trailing edge is left to the rib itself."""
HORN_MM = 10.0
"""How far a horn's pin stands off the skin."""


@dataclass(frozen=True, eq=False)
class Station:
    """A rib that something asks for: its outer face along its panel."""

    face_mm: float
    material: str
    nominal_mm: float
    why: str
    key: str


@dataclass(frozen=True, eq=False)
class ControlPlace:
    """One moving surface of the starboard wing, in space."""

    shop: Shop
    number: int
    given: Control
    panel: Panel
    ends_mm: tuple[float, float]
    """Of the surface, along its panel."""
    at_tip: bool
    """It ends at the tip rib; else a rib of its own stands beyond its outer end."""

    @property
    def key(self) -> str:
        return f"wing.control[{self.number}]"

    @property
    def throw_deg(self) -> tuple[float, float]:
        return self.given.up_deg, self.given.down_deg

    @property
    def rib_mm(self) -> float:
        """Thickness of the plain ribs at its ends."""
        ribs = self.shop.definition.wing.ribs
        return self.shop.thickness(ribs.material, ribs.thickness_mm)

    @property
    def bay_mm(self) -> tuple[float, float]:
        """Between the faces of the two whole ribs at its ends, along the panel."""
        gap = self.given.end_gap_mm
        return self.ends_mm[0] - gap, self.ends_mm[1] + gap

    def fraction(self, s_mm: float) -> float:
        """Of the chord at which the hinge line lies."""
        if self.given.width_mm is None:
            return 1 - self.given.chord
        return 1 - self.given.width_mm / self.panel.chord(s_mm)

    def hinge_point(self, s_mm: float) -> Array:
        place = {"centre": "middle"}.get(self.given.hinge, self.given.hinge)
        return self.panel.point(s_mm, self.fraction(s_mm), place)

    @cached_property
    def line(self) -> HingeLine:
        """The hinge line, straight from end to end of the surface."""
        a, b = (self.hinge_point(s) for s in self.ends_mm)
        return HingeLine(a, b, AFT, self.panel.up)

    def depth_mm(self, s_mm: float) -> tuple[float, float]:
        """Wood above and below the hinge line."""
        f = self.fraction(s_mm)
        share = s_mm / self.panel.length_mm
        low, high = (
            a * (1 - share) + b * share for a, b in
            zip(self.panel.root.height(f), self.panel.tip.height(f), strict=True)
        )
        whole = high - low
        return {"centre": (whole / 2, whole / 2), "top": (0.0, whole), "bottom": (whole, 0.0)}[
            self.given.hinge]

    # ------------------------------------------------------------ its servo and horn

    @cached_property
    def servo(self) -> ServoClass | None:
        """The class of its own servo; None where it is driven from elsewhere."""
        if self.given.drive != "servo":
            return None
        return self.shop.shelf.servo(self.given.servo.kind, f"{self.key}.servo.kind")

    @cached_property
    def servo_bay_mm(self) -> tuple[float, float] | None:
        """Between the faces of the two ribs beside its servo, along the panel."""
        if self.servo is None:
            return None
        middle = sum(self.ends_mm) / 2
        if self.given.servo.at_mm is not None:
            middle = self.given.servo.at_mm - self.panel.start_mm
        half = (self.servo.height_mm + ARM_MM) / 2 + BORDER_MM
        return middle - half, middle + half

    @property
    def arm_s_mm(self) -> float:
        """Along the panel: the plane in which servo arm, pushrod and horn lie."""
        if self.servo_bay_mm is not None and self.servo is not None:
            return self.servo_bay_mm[0] + BORDER_MM + self.servo.height_mm + ARM_MM / 2
        if self.given.drive == "torque-rod":
            return TORQUE_ARM_MM[0]
        return self.ends_mm[0] + 25.0

    def axis_point(self, s_mm: float) -> Array:
        """On the hinge line, extended, at a distance along the panel."""
        line = self.line
        along = (self.panel.root.nose + s_mm * self.panel.along - line.start) @ self.panel.along
        return np.asarray(
            line.start + line.axis * float(along) / float(line.axis @ self.panel.along))

    def front_mm(self, s_mm: float) -> float:
        """x of the false spar's front face behind the untwisted leading edge."""
        given, frame = self.given, self.line.frame(0.0)
        thick = self.shop.thickness(given.spar_material, given.spar_thickness_mm)
        back = (given.gap_mm / 2 + thick) / float(frame.rotation[0, 0])
        return float(self.axis_point(s_mm)[0] - self.panel.nose(s_mm)[0]) - back

    @property
    def torque_leg(self) -> tuple[Array, Array]:
        """Where a torque rod bends aft into the surface, and where it ends in it."""
        bend = self.axis_point(self.ends_mm[0] + LEG_AT_MM)
        deep = self.given.nose_mm - 1.0 if self.given.kind == "built-up" else 18.0
        return bend, bend + deep * self.line.frame(0.0).rotation[:, 0]

    @cached_property
    def horn(self) -> Horn | None:
        """Its horn, starboard; that of a torque rod is its arm at the root."""
        along = (self.panel.plane(self.arm_s_mm).origin - self.line.start) @ self.panel.along
        s = float(along) / float(self.line.axis @ self.panel.along)
        up = self.given.horn_side == "up"
        deep = self.depth_mm(self.arm_s_mm)[0 if up else 1]
        radius = self.given.horn_mm or round(deep + HORN_MM, 1)
        n = self.number
        if self.given.drive == "torque-rod":
            return horn_at(self.line, s, self.given.horn_mm or TORQUE_ARM_MM[1],
                           "up" if up else "down", self.throw_deg, f"AY{n}R", f"AY{n}R",
                           f"{self.given.name}, right", self.key)
        part = f"AN{n}R" if self.given.kind == "built-up" else f"AS{n}R"
        horn = horn_at(self.line, s, radius, "up" if up else "down", self.throw_deg, f"AP{n}R",
                       part, f"{self.given.name}, right", self.key)
        return replace(horn, driven_by=f"AV{n}R") if self.servo else horn

    @property
    def horns(self) -> tuple[Horn, ...]:
        """Both sides."""
        if self.horn is None:
            return ()
        n = self.number
        id, part = (f"{name[:-1]}L" for name in (self.horn.id, self.horn.part))
        other = self.horn.mirrored(id, part, f"{self.given.name}, left",
                                   f"AV{n}L" if self.servo else "")
        return self.horn, other

    # ------------------------------------------------------------ ribs

    def stations(self) -> Iterator[Station]:
        """Ribs that must stand: whole ones at its ends, two beside its servo."""
        ribs = self.shop.definition.wing.ribs
        low, high = self.bay_mm
        yield Station(low, ribs.material, ribs.thickness_mm,
                      f"rib inboard of the {self.given.name}", self.key)
        if not self.at_tip:
            yield Station(high + self.rib_mm, ribs.material, ribs.thickness_mm,
                          f"rib outboard of the {self.given.name}", self.key)
        if self.servo_bay_mm is not None:
            own = self.given.servo
            thick = self.shop.thickness(own.rib_material, own.rib_thickness_mm)
            for face in (self.servo_bay_mm[0], self.servo_bay_mm[1] + thick):
                yield Station(face, own.rib_material, own.rib_thickness_mm,
                              f"rib beside the servo of the {self.given.name}", f"{self.key}.servo")


def control_places(shop: Shop, wing: WingShape) -> tuple[ControlPlace, ...]:
    """Every moving surface of the starboard wing.

    Raises:
        DesignError: one reaches over the end of its panel, into another, or its servo has no room.
    """
    found: list[ControlPlace] = []
    problems: list[Problem] = []
    problems += not_together(shop)
    for n, given in enumerate(shop.definition.wing.control, start=1):
        place = _place(shop, wing, n, given)
        problems += place_faults(place, found)
        found.append(place)
    if problems:
        raise DesignError(*problems)
    return tuple(found)


def _place(shop: Shop, wing: WingShape, number: int, given: Control) -> ControlPlace:
    panel, low = wing.at(given.from_mm)
    last = panel.index == len(wing.panels) - 1
    ribs = shop.definition.wing.ribs
    rib = shop.thickness(ribs.material, ribs.thickness_mm)
    tip = panel.length_mm - rib - given.end_gap_mm
    high = tip if given.to_mm is None else given.to_mm - panel.start_mm
    at_tip = last and high > tip - 3 * rib
    return ControlPlace(shop, number, given, panel, (low, tip if at_tip else high), at_tip)


def lead_reach_mm(shop: Shop, wing: WingShape) -> float:
    """How far out along the span a servo's lead must come; 0 without servos in the wing."""
    bays = ((p, p.servo_bay_mm) for p in control_places(shop, wing))
    return max((p.panel.start_mm + bay[0] + 1 for p, bay in bays if bay), default=0.0)


def wanted_ribs(shop: Shop, wing: WingShape, panel: Panel) -> Iterator[Station]:
    """Ribs of a panel that its moving surfaces ask for."""
    for place in control_places(shop, wing):
        if place.panel is panel:
            yield from place.stations()


def fixed_edge(
    shop: Shop, wing: WingShape, panel: Panel
) -> list[tuple[float, float]]:
    """Lengths of a panel where the trailing edge does not move, along it."""
    found = []
    start = 0.0
    for place in sorted(control_places(shop, wing), key=lambda p: p.ends_mm[0]):
        if place.panel is panel:
            low, high = place.bay_mm
            found.append((start, low))
            start = high
    found.append((start, panel.length_mm))
    return [(low, high) for low, high in found if high - low > SHORT_MM]
