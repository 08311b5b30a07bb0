"""Servo bays: a plate between two ribs, and the servo lying on the hatch that closes it.

The servo lies on its side, its shaft along the span, screwed by its lugs to two posts on the
hatch; its arm reaches through the hatch in the plane of the horn.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from functools import cached_property
from itertools import product

import numpy as np
from shapely.geometry import Polygon, box

from buildgen.airframe.bays import Bay
from buildgen.airframe.blank import Blank, Cut, apply, solid_cut
from buildgen.airframe.members.control_hinges import in_frame
from buildgen.airframe.members.controls import mirrored_joint, other_side
from buildgen.airframe.members.spars import STEP
from buildgen.airframe.moving import ARM_MM, BELOW_MM, BORDER_MM, ControlPlace, control_places
from buildgen.airframe.shop import Shop
from buildgen.airframe.surface import WingShape
from buildgen.part import Bought, Joint, Part
from buildgen.problems import DesignError, Problem
from buildgen.shelf import ServoClass
from buildgen.solid import Array, Box, Circle, Placed, Pose, Prism, Rod, Shape, Union

SERVOS = "Wing: servos"
TAB_MM = 16.0
SWING_DEG = 50.0
"""Either way: what the arm of a common servo turns, and some more; common practice, no source."""
EDGE_MM = 6.0
"""Of the plate round its opening, along the chord: a small screw goes in."""
LUG_ROOM_MM = 1.5
POST_MM = 8.0
SEAT_MM = 0.3
"""The body lies this much off the hatch: tape, or a hair of play."""
ROD_MM = 1.5
BEND_MM = 8.0
"""Wire beyond either pin for its bend; common practice, no source."""
SCREWS = Bought(0.8, 0.2, None, "M2 x 8 wood screw", 4)
SKIN_MM = 0.5


@dataclass(frozen=True, eq=False)
class ServoBay:
    """The bay of one surface's servo, starboard; z = 0 of its deck is the hatch's outer face."""

    place: ControlPlace
    servo: ServoClass
    bay_mm: tuple[float, float]

    @property
    def n(self) -> int:
        return self.place.number

    @property
    def shop(self) -> Shop:
        return self.place.shop

    @cached_property
    def thick_mm(self) -> float:
        own = self.place.given.servo
        return self.shop.thickness(own.material, own.thickness_mm)

    @property
    def middle_mm(self) -> float:
        return sum(self.bay_mm) / 2

    @property
    def half_mm(self) -> float:
        return (self.bay_mm[1] - self.bay_mm[0]) / 2

    @property
    def opening(self) -> tuple[float, float, float, float]:
        """x0, y0, x1, y1 of the plate's opening, in the deck."""
        reach = self.servo.over_lugs_mm / 2 + LUG_ROOM_MM
        return -reach, -self.half_mm + BORDER_MM - 1, reach, self.half_mm - BORDER_MM + 1

    @property
    def length_mm(self) -> float:
        """Of plate and hatch along the chord."""
        return 2 * (self.opening[2] + EDGE_MM)

    @cached_property
    def deck(self) -> Pose:
        """x aft along the lower skin's chord, y outboard, z up."""
        panel, s = self.place.panel, self.middle_mm
        at = self.place.given.servo.at_chord * panel.chord(s)
        front, back = (
            panel.point(s, (at + sign * self.length_mm / 2) / panel.chord(s), "bottom")
            for sign in (-1, 1)
        )
        across = [panel.point(v, at / panel.chord(v), "bottom") for v in self.bay_mm]
        return Pose.at((front + back) / 2, back - front, across[1] - across[0])

    @property
    def shaft_mm(self) -> Array:
        """(3,) in the deck: where the output shaft meets the arm's middle."""
        x = -self.servo.length_mm / 2 + self.servo.shaft_offset_mm
        y = self.place.arm_s_mm - self.middle_mm
        return np.array([x, y, self.thick_mm + SEAT_MM + self.servo.width_mm / 2])

    @property
    def arm_mm(self) -> float:
        """Shaft to pin: the pin stands clear of the skin."""
        return float(self.shaft_mm[2]) + BELOW_MM

    @property
    def pin_mm(self) -> Array:
        """(3,) in the aircraft: the pin of the arm at rest."""
        return np.asarray(self.deck(self.shaft_mm - np.array([0.0, 0.0, self.arm_mm])))

    # ------------------------------------------------------------ shapes

    def body(self) -> Shape:
        """Case and lugs, in the deck."""
        v, bottom = self.servo, -self.half_mm + BORDER_MM
        z0, z1 = self.thick_mm + SEAT_MM, self.thick_mm + SEAT_MM + v.width_mm
        lug = bottom + v.below_lugs_mm
        return Union((
            Box((-v.length_mm / 2, bottom, z0), (v.length_mm / 2, bottom + v.height_mm, z1)),
            Box((-v.over_lugs_mm / 2, lug, z0),
                (v.over_lugs_mm / 2, lug + v.lug_thickness_mm, z1)),
        ))

    def swing(self) -> Shape:
        """The room of the arm, all that it sweeps, in the deck."""
        angles = np.radians(np.linspace(-SWING_DEG, SWING_DEG, 25))
        rim = (self.arm_mm + 2.0) * np.column_stack([np.sin(angles), -np.cos(angles)])
        hub = 3.0 * np.array([[-1.0, 0.5], [1.0, 0.5]])
        fan = Polygon(np.vstack([rim, hub[::-1]])).convex_hull
        pose = Pose.at(self.shaft_mm + np.array([0.0, ARM_MM / 2, 0.0]), (1, 0, 0), (0, 0, 1))
        return Placed(Prism(fan, ARM_MM), pose)

    def check_room(self) -> None:
        """The servo lies under the upper skin at all its corners."""
        panel, top = self.place.panel, self.thick_mm + SEAT_MM + self.servo.width_mm + SKIN_MM
        worst = np.inf
        reach = self.servo.over_lugs_mm / 2
        for s, x in product(self.bay_mm, (-reach, reach)):
            pose = panel.plane(s)
            corner = pose.local(self.deck((x, s - self.middle_mm, top)))[:2]
            cut = panel.outline(pose).intersection(
                box(corner[0] - 0.05, -500, corner[0] + 0.05, 500))
            worst = min(worst, (cut.bounds[3] if not cut.is_empty else -99.0) - corner[1])
        if worst < 0:
            own = self.place.given.servo
            raise DesignError(Problem(
                f"{self.place.key}.servo.kind",
                f"A {own.kind} servo is {self.servo.width_mm:g} mm wide and stands {-worst:.1f} mm"
                " out of the wing.",
                "Take a slimmer one, move it with at_chord towards the thickest point, or inboard.",
            ))


@dataclass(frozen=True, eq=False)
class ServoPlate:
    """The plate between the two ribs, with a tab through each."""

    bay: ServoBay

    @cached_property
    def pose(self) -> Pose:
        lift = Pose(origin=np.array([0.0, 0.0, self.bay.thick_mm]))
        return lift.then(self.bay.deck)

    @cached_property
    def outline(self) -> Polygon:
        bay, own = self.bay, self.bay.place.given.servo
        half = bay.half_mm - 0.05
        rib = bay.shop.thickness(own.rib_material, own.rib_thickness_mm)
        plate = box(-bay.length_mm / 2, -half, bay.length_mm / 2, half)
        tab = box(-TAB_MM / 2, -half - rib, TAB_MM / 2, half + rib)
        return plate.union(tab).difference(box(*bay.opening))

    @property
    def screws(self) -> tuple[Circle, ...]:
        x, y = self.bay.opening[2] + EDGE_MM / 2, self.bay.half_mm - 5.0
        return tuple((sx * x, sy * y, 0.8) for sx, sy in product((-1, 1), (-1, 1)))

    @cached_property
    def parts(self) -> tuple[Part, ...]:
        place, own = self.bay.place, self.bay.place.given.servo
        part = self.bay.shop.plate(
            f"AM{self.bay.n}R", f"servo plate of the {place.given.name}, right", own.material,
            own.thickness_mm, self.outline, self.pose, STEP, f"{place.key}.servo",
            circles=self.screws)
        return part, part.mirrored(f"AM{self.bay.n}L",
                                   f"servo plate of the {place.given.name}, left")

    def _beside(self, blank: Blank) -> bool:
        """Is it one of the two ribs?"""
        panel = self.bay.place.panel
        off = blank.pose.origin - panel.root.nose
        s = float(off @ panel.along) - blank.thickness_mm / 2
        low, high = self.bay.bay_mm
        return low - 6 < s < low or high < s < high + 6

    def cut(self, blank: Blank) -> Cut:
        if not self._beside(blank):
            return Cut()
        solid = Placed(Prism(self.outline, self.bay.thick_mm), self.pose)
        return solid_cut(solid, blank, self.bay.shop.press_mm)

    def joint(self, blank: Blank) -> Joint | None:
        if not self.cut(blank).holes:
            return None
        way = self.bay.deck.rotation[:, 1]
        out = blank.pose.origin - self.bay.deck.origin
        x, y, z = (float(v) for v in way * np.sign(out @ way))
        lean = abs(float(self.bay.deck.rotation[:, 2] @ blank.pose.rotation[:, 2]))
        lean += abs(float(self.bay.deck.rotation[:, 0] @ blank.pose.rotation[:, 2]))
        slack = self.bay.shop.press_mm + blank.thickness_mm * lean + 0.1
        return Joint("tab in slot", self.parts[0].id, blank.id, (0.0, slack), (x, y, z))

    @property
    def joints(self) -> tuple[Joint, ...]:
        return ()


@dataclass(frozen=True, eq=False)
class ServoOnHatch:
    """Hatch, posts, servo, arm and pushrod, both sides."""

    bay: ServoBay
    plate: ServoPlate

    @cached_property
    def hatch(self) -> Part:
        bay, place, own = self.bay, self.bay.place, self.bay.place.given.servo
        half = bay.half_mm - 0.4
        whole = box(-bay.length_mm / 2, -half, bay.length_mm / 2, half)
        blank = Blank(f"AD{bay.n}R", bay.deck, bay.thick_mm, whole)
        slot = solid_cut(Placed(bay.swing(), bay.deck), blank, 0.5)
        outline, _, _ = apply(whole, [slot])
        screws = tuple((x, y, 1.1) for x, y, _ in self.plate.screws)
        return bay.shop.plate(
            blank.id, f"servo hatch of the {place.given.name}, right", own.material,
            own.thickness_mm, outline, bay.deck, SERVOS, f"{place.key}.servo", circles=screws)

    def _post(self, letter: str, sign: int) -> Part:
        bay, v = self.bay, self.bay.servo
        inner, outer = v.length_mm / 2 + 0.2, v.over_lugs_mm / 2 + 1.0
        x0, x1 = sorted((sign * inner, sign * outer))
        y1 = -bay.half_mm + BORDER_MM + v.below_lugs_mm
        z0 = bay.thick_mm
        shape = Placed(Box((x0, y1 - POST_MM, z0), (x1, y1, z0 + SEAT_MM + v.width_mm)), bay.deck)
        part = bay.shop.stick(
            f"AO{bay.n}{letter}R", f"servo post of the {bay.place.given.name}, right", "spruce",
            f"{POST_MM:g} x {outer - inner:.1f}", shape, SEAT_MM + v.width_mm, SERVOS,
            f"{bay.place.key}.servo")
        return in_frame(part, bay.deck)

    def _bought(self) -> Iterable[Part]:
        bay, v, name = self.bay, self.bay.servo, self.bay.place.given.name
        key = f"{bay.place.key}.servo"
        yield Part(f"AV{bay.n}R", f"servo of the {name}, right", "servo",
                   Bought(v.mass_g, v.mass_sigma_g, bay.body(), v.title), bay.deck, SERVOS, key,
                   basis="catalogue")
        yield Part(f"AK{bay.n}R", f"servo arm of the {name}, {bay.arm_mm:.0f} mm, right",
                   "servo arm", Bought(0.0, 0.0, bay.swing(), "comes with the servo"), bay.deck,
                   SERVOS, key)
        yield Part(f"AX{bay.n}R", f"screws of the servo hatch of the {name}, right", "screws",
                   SCREWS, bay.deck, SERVOS, key)

    @cached_property
    def rod(self) -> Part | None:
        """The pushrod, a wire with a bend at either end, beside arm and horn."""
        bay, horn = self.bay, self.bay.place.horn
        if horn is None:
            return None
        out = bay.place.panel.along
        half = bay.place.given.horn_thickness_mm / 2
        a = bay.pin_mm + (ARM_MM / 2 + ROD_MM / 2 + 0.2) * out
        b = horn.pivot_mm + (half + ROD_MM / 2 + 0.4) * out
        length = float(np.linalg.norm(b - a))
        shape = Placed(Rod(ROD_MM / 2, length), Pose.at(a, b - a, (0, 0, 1)))
        return bay.shop.stick(
            f"AW{bay.n}R", f"pushrod of the {bay.place.given.name}, {length:.1f} mm between its"
            " pins, right", "music-wire", f"{ROD_MM:g} rod", shape, length + 2 * BEND_MM, SERVOS,
            f"{bay.place.key}.servo", ((BEND_MM, 90.0), (BEND_MM + length, 90.0)))

    @cached_property
    def right(self) -> list[Part]:
        posts = [self._post("a", -1), self._post("b", 1)]
        rod = [self.rod] if self.rod else []
        return [self.hatch, *posts, *self._bought(), *rod]

    @cached_property
    def parts(self) -> tuple[Part, ...]:
        pairs = ((p, p.mirrored(other_side(p.id), p.name.replace("right", "left")))
                 for p in self.right)
        return tuple(p for pair in pairs for p in pair)

    def cut(self, blank: Blank) -> Cut:
        return Cut()

    def joint(self, blank: Blank) -> Joint | None:
        return None

    @property
    def joints(self) -> tuple[Joint, ...]:
        n = self.bay.n
        x, y, z = (float(v) for v in self.bay.deck.rotation[:, 2])
        found = [
            Joint("face to face", f"AD{n}R", f"AM{n}R", (0.0, 0.1), (x, y, z)),
            *(Joint("face to face", f"AO{n}{k}R", f"AD{n}R", (0.0, 0.1)) for k in "ab"),
        ]
        return tuple(j for joint in found for j in (joint, mirrored_joint(joint)))


def make(
    shop: Shop, wing: WingShape, bays: tuple[Bay, ...]
) -> Iterable[ServoPlate | ServoOnHatch]:
    """The bay of every surface that has its own servo."""
    for place in control_places(shop, wing):
        if place.servo is None or place.servo_bay_mm is None:
            continue
        bay = ServoBay(place, place.servo, place.servo_bay_mm)
        bay.check_room()
        plate = ServoPlate(bay)
        yield plate
        yield ServoOnHatch(bay, plate)
