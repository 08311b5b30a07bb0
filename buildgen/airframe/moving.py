"""Where the wing's moving surfaces lie: their hinge lines, ends, servos and horns in space.

What they are made of stands in `members/controls.py` and `members/servos.py`; ribs and edges
only ask here which ribs must stand at their ends and where the fixed trailing edge remains.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, replace
from functools import cached_property

from buildgen.airframe.hinge import HingeLine, Horn, horn_at
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
BEHIND_NOSE_MM = 12.0
"""For the horn's wood between the nose and the edge of a built-up surface."""
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
        return self.ends_mm[0] + 25.0

    @cached_property
    def horn(self) -> Horn | None:
        """Its horn, starboard; a torque rod needs none."""
        if self.given.drive == "torque-rod":
            return None
        along = (self.panel.plane(self.arm_s_mm).origin - self.line.start) @ self.panel.along
        s = float(along) / float(self.line.axis @ self.panel.along)
        up = self.given.horn_side == "up"
        deep = self.depth_mm(self.arm_s_mm)[0 if up else 1]
        radius = self.given.horn_mm or round(deep + HORN_MM, 1)
        n = self.number
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
        other = self.horn.mirrored(f"AP{n}L", self.horn.part[:-1] + "L", f"{self.given.name}, left",
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
    problems += _not_together(shop)
    for n, given in enumerate(shop.definition.wing.control, start=1):
        place = _place(shop, wing, n, given)
        problems += _faults(place, wing, found)
        found.append(place)
    if problems:
        raise DesignError(*problems)
    return tuple(found)


def _not_together(shop: Shop) -> Iterator[Problem]:
    """What no surface can hang behind as yet."""
    wing = shop.definition.wing
    if not wing.control:
        return
    if wing.trailing_edge.kind == "sheet":
        yield Problem("wing.trailing_edge.kind",
                      "A sheeted trailing edge does not stop at moving surfaces.",
                      'Take "stock" or "none" on a wing with wing.control.')
    if wing.sheeting is not None and wing.sheeting.capstrip_mm:
        yield Problem("wing.sheeting.capstrip_mm",
                      "Capstrips do not stop at moving surfaces.",
                      "Take 0 on a wing with wing.control.")


def _place(shop: Shop, wing: WingShape, number: int, given: Control) -> ControlPlace:
    panel, low = wing.at(given.from_mm)
    last = panel.index == len(wing.panels) - 1
    ribs = shop.definition.wing.ribs
    rib = shop.thickness(ribs.material, ribs.thickness_mm)
    tip = panel.length_mm - rib - given.end_gap_mm
    high = tip if given.to_mm is None else given.to_mm - panel.start_mm
    at_tip = last and high > tip - 3 * rib
    return ControlPlace(shop, number, given, panel, (low, tip if at_tip else high), at_tip)


def _faults(
    place: ControlPlace, wing: WingShape, others: list[ControlPlace]
) -> Iterator[Problem]:
    given, panel = place.given, place.panel
    ribs = place.shop.definition.wing.ribs
    end = place.shop.thickness(ribs.root_material or ribs.material,
                               ribs.root_thickness_mm or ribs.thickness_mm)
    margin = place.rib_mm + given.end_gap_mm + end + 2
    low, high = place.ends_mm
    ends = panel.start_mm + margin, panel.start_mm + panel.length_mm - margin
    where = f"The {given.name} from {panel.start_mm + low:.0f} to {panel.start_mm + high:.0f} mm"
    if low < margin or (high > panel.length_mm - margin and not place.at_tip):
        yield Problem(
            f"{place.key}.from_mm" if low < margin else f"{place.key}.to_mm",
            f"{where} reaches over the end of panel {panel.index + 1}.",
            f"In this panel it may lie between {ends[0]:.0f} and {ends[1]:.0f} mm; give each panel"
            " its own surface.",
        )
    for other in others:
        gap = 2 * place.rib_mm + 2
        if other.panel is panel and low < other.bay_mm[1] + gap and high > other.bay_mm[0] - gap:
            yield Problem(f"{place.key}.from_mm",
                          f"{where} runs into the {other.given.name} ({other.key}).",
                          f"Leave {gap + 2 * given.end_gap_mm:.0f} mm between them for two ribs.")
    if given.kind == "built-up":
        widths = [panel.chord(s) * (1 - place.fraction(s)) for s in place.ends_mm]
        least = given.nose_mm + given.edge_mm + BEHIND_NOSE_MM
        if min(widths) < least:
            yield Problem(
                f"{place.key}.chord",
                f"The {given.name} is {min(widths):.0f} mm wide at its narrow end: nose, horn and"
                f" edge need {least:.0f} mm.",
                'Make it wider, edge_mm or nose_mm less, or take kind = "strip".')
    if given.drive == "servo" and given.horn_side == "up":
        yield Problem(f"{place.key}.horn_side",
                      "The servo's arm comes out below the wing, the horn stands above it.",
                      'Take horn_side = "down", or drive = "none".')
    bay = place.servo_bay_mm
    if bay is not None and (bay[0] < low + 8 or bay[1] > high - 8):
        least, most = (panel.start_mm + low + 8 + (bay[1] - bay[0]) / 2,
                       panel.start_mm + high - 8 - (bay[1] - bay[0]) / 2)
        yield Problem(f"{place.key}.servo.at_mm",
                      f"The servo's bay does not lie ahead of the {given.name}.",
                      f"Place it between {least:.0f} and {most:.0f} mm.")


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
