"""The drive as parts: mounts, motors, propellers, screws, controllers, supply wires."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass, replace
from functools import cached_property

from buildgen.airframe.bays import Bay, make_bays
from buildgen.airframe.blank import Cut
from buildgen.airframe.mount import MountShape, bolt_points, thrust_axis
from buildgen.airframe.pusher import PusherShape
from buildgen.airframe.shop import Shop
from buildgen.airframe.surface import WingShape
from buildgen.design.schema import Power
from buildgen.part import Bought, Joint, Part, Printed
from buildgen.shelf import BoltPattern, clearance_hole_mm, nut_mass_g, screw_length_mm, screw_mass_g
from buildgen.solid import Array, Box, Difference, Placed, Pose, Rod, Shape

STEP = "Motors and mounts"
WIRES = "Electrics"
ENGAGEMENT = 1.25
"""Thread engaged in the motor, in screw diameters: 1 to 1.5, common practice, no source."""
SLACK = 1.15
"""Harness length over the straight way; common practice, no source."""
CATALOGUE_SIGMA = 0.03
"""Spread of a catalogue mass; common practice, no source."""


@dataclass(frozen=True, eq=False)
class Thrust:
    """One motor's thrust line: seat on the mount, disc centre, unit pull, and the way from the
    seat to the disc: against the pull where the motor pushes."""

    motor: int
    side: str
    seat: Array
    disc: Array
    pull: Array
    out: Array
    turns: str


@dataclass(frozen=True, eq=False)
class Drive:
    """The whole drive; without a power table it has no parts."""

    shop: Shop
    wing: WingShape
    nose_seat: Pose | None = None

    @property
    def power(self) -> Power | None:
        return self.shop.definition.power

    @cached_property
    def bays(self) -> tuple[Bay, ...]:
        power = self.power
        if power is None:
            return ()
        thick = self.shop.thickness(power.mount.rib_material, power.mount.rib_thickness_mm)
        return make_bays(power, self.wing, thick)

    @cached_property
    def mounts(self) -> tuple[MountShape, ...]:
        return tuple((PusherShape if b.rear else MountShape)(self.shop, self.power, b)
                     for b in self.bays if self.power)

    @property
    def rib_cuts(self) -> dict[int, Callable[[Pose], Cut]]:
        """Tongues for the ribs of each bay, asked with the rib's frame."""
        return {m.bay.index: m.rib_cut for m in self.mounts}

    # ------------------------------------------------------------ thrust lines

    @cached_property
    def thrusts(self) -> tuple[Thrust, ...]:
        """Every motor's thrust line, starboard ones first from the root out."""
        if self.power is None:
            return ()
        if self.power.place == "nose":
            return (self._nose_thrust(),) if self.nose_seat else ()
        found: list[Thrust] = []
        for m in self.mounts:
            right = self._thrust(m)
            left = replace(
                right, side="left", seat=right.seat * (1, -1, 1), disc=right.disc * (1, -1, 1),
                pull=right.pull * (1, -1, 1), out=right.out * (1, -1, 1),
                turns=self._turns("left"),
            )
            found += [right, left]
        return tuple(found)

    def _turns(self, side: str) -> str:
        """Seen from behind; outboard blades going down on both sides unless alike."""
        assert self.power is not None
        if self.power.rotation == "alike":
            return "clockwise"
        return "clockwise" if side == "right" else "anticlockwise"

    def _thrust(self, m: MountShape) -> Thrust:
        pull = thrust_axis(m.power)
        ahead = m.motor.length_mm + 6.0
        seat = m.face.origin
        out = -pull if m.bay.rear else pull
        return Thrust(m.bay.index, "right", seat, seat + ahead * out, pull, out,
                      self._turns("right"))

    def _nose_thrust(self) -> Thrust:
        assert self.power is not None and self.nose_seat is not None
        pull = thrust_axis(self.power)
        seat = self.nose_seat.origin
        ahead = self.power.mount.plate_mm + self.power.motor.length_mm + 6.0
        return Thrust(1, "centre", seat, seat + ahead * pull, pull, pull, "clockwise")

    # ------------------------------------------------------------ parts

    @cached_property
    def parts(self) -> tuple[Part, ...]:
        if self.power is None:
            return ()
        mounts = self._wing_mounts() if self.power.place == "wing" else self._nose_mount()
        motors = [p for i, t in enumerate(self.thrusts, 1) for p in self._motor(i, t)]
        return (*mounts, *motors)

    def _wing_mounts(self) -> list[Part]:
        parts: list[Part] = []
        first: dict[str, str] = {}
        for m in self.mounts:
            id_right = f"M{m.bay.index}R"
            twin = first.setdefault(m.twin, id_right)
            form = Printed(m.shape, self.shop.print_settings, (1.0, 0.0, 0.0), twin)
            right = self.shop.part(
                id_right, f"mount of motor {m.bay.index}, right", m.mount.material, form, m.frame,
                STEP, "power.mount",
            )
            left = right.mirrored(f"M{m.bay.index}L", f"mount of motor {m.bay.index}, left")
            assert isinstance(left.form, Printed)
            shared = twin if m.symmetric else f"{twin[:-1]}L"
            left = replace(left, form=replace(left.form, twin=shared))
            if m.symmetric:
                left = replace(left, form=replace(form, twin=shared))
            parts += [right, left]
        return parts

    def _nose_mount(self) -> list[Part]:
        """A printed wedge between firewall and motor that sets down- and side-thrust."""
        if self.nose_seat is None or self.power is None:
            return []
        form = Printed(
            nose_wedge(self.shop, self.power, self.nose_seat), self.shop.print_settings,
            (1.0, 0.0, 0.0),
        )
        return [
            self.shop.part("M1", "motor mount on the firewall", self.power.mount.material, form,
                           self.nose_seat, STEP, "power.mount")
        ]

    def _motor(self, number: int, line: Thrust) -> list[Part]:
        power = self.power
        assert power is not None
        motor, prop = power.motor, power.propeller
        tag = f"{line.motor}{'' if line.side == 'centre' else line.side[0].upper()}"
        back = line.seat + (power.mount.plate_mm * line.pull if power.place == "nose" else 0.0)
        pose = Pose.at(back, line.out, (0, 0, 1))
        can = Rod(motor.diameter_mm / 2, motor.length_mm)
        hub = Pose.at(line.disc, line.pull, (0, 0, 1))
        blade = Box((-2.0, -prop.diameter_mm / 2, -6.0), (2.0, prop.diameter_mm / 2, 6.0))
        half = prop.diameter_mm / 2
        parts = [
            self._bought(f"MOT{tag}", f"motor {tag}", motor.name, motor.mass_g, can, pose,
                         "power.motor", f"{motor.name}, {motor.pattern or 'own pattern'}"),
            self._bought(f"PROP{tag}", f"propeller {tag}, {line.turns} from behind", "propeller",
                         prop.mass_g, blade, hub, "power.propeller",
                         f"propeller {2 * half:g} x {prop.pitch_mm:g} mm"
                         f" ({2 * half / 25.4:.1f} x {prop.pitch_mm / 25.4:.1f} in),"
                         f" {line.turns}"),
        ]
        parts += self._screws(tag, line)
        if power.controller_mass_g and power.place == "wing":
            parts.append(self._controller(tag, line))
            parts.append(self._wire(tag, line))
        return parts

    def _bought(
        self, id: str, name: str, what: str, mass_g: float, shape: Shape | None, pose: Pose,
        key: str, order: str, quantity: int = 1, step: str = STEP, sigma: float = CATALOGUE_SIGMA,
    ) -> Part:
        form = Bought(mass_g, mass_g * sigma, shape, order, quantity)
        return Part(id, name, what, form, pose, step, key, basis="catalogue")

    def _screws(self, tag: str, line: Thrust) -> list[Part]:
        """Motor screws, and on the wing the lock screws of the tongues with their nuts."""
        power, shelf = self.power, self.shop.shelf
        assert power is not None
        size = power.motor.screw
        diameter = shelf.screw(size, "power.motor.screw").diameter_mm
        count = len(bolt_points(power.motor, self._pattern))
        clamped = power.mount.plate_mm
        if power.place == "nose" and self.shop.definition.fuselage:
            clamped += self.shop.definition.fuselage.firewall_thickness_mm
        length = screw_length_mm(clamped + ENGAGEMENT * diameter, size,
                                 "power.motor.screw", shelf)
        mass = count * screw_mass_g(size, length, shelf=shelf)
        at = Pose(origin=line.seat)
        parts = [self._bought(f"SCR{tag}", f"screws of motor {tag}", "screws", mass, None, at,
                              "power.motor.screw", f"{size} x {length:g} ISO 4762", count,
                              sigma=0.15)]
        if power.place == "wing":
            mount = self.mounts[line.motor - 1]
            lock = power.mount.lock_screw
            cheek = 2 * (mount.wall + mount.slip) + mount.bay.rib_mm
            nut = shelf.screw(lock, "power.mount.lock_screw").nut_mm[1]
            reach = screw_length_mm(cheek + nut + 1.0, lock, "power.mount.lock_screw", shelf)
            mass = 2 * (screw_mass_g(lock, reach, shelf=shelf) + nut_mass_g(lock, shelf=shelf))
            parts.append(self._bought(f"LOCK{tag}", f"lock screws of mount {tag}", "screws", mass,
                                      None, at, "power.mount.lock_screw",
                                      f"{lock} x {reach:g} ISO 4762 with nut ISO 4032", 2,
                                      sigma=0.15))
        return parts

    @cached_property
    def _pattern(self) -> BoltPattern | None:
        assert self.power is not None
        name = self.power.motor.pattern
        return None if name is None else self.shop.shelf.bolts(name, "power.motor.pattern")

    def _controller(self, tag: str, line: Thrust) -> Part:
        """In the wing, behind its motor."""
        power = self.power
        assert power is not None
        length, width, height = power.controller_size_mm
        box = Box((-length / 2, -width / 2, -height / 2), (length / 2, width / 2, height / 2))
        bay = self.bays[line.motor - 1]
        at = bay.panel.point(bay.s_mm, 0.47) * (1, -1 if line.side == "left" else 1, 1)
        return self._bought(f"ESC{tag}", f"controller of motor {tag}", "controller",
                            power.controller_mass_g, box, Pose(origin=at),
                            "power.controller_mass_g", "speed controller, brushless", step=WIRES)

    def _wire(self, tag: str, line: Thrust) -> Part:
        """Supply from the middle of the wing to the controller: plus and minus."""
        power = self.power
        assert power is not None
        wire = self.shop.shelf.wire(power.wire, "power.wire")
        bay = self.bays[line.motor - 1]
        run = bay.span_mm * SLACK + 60.0
        mass = 2 * run / 1000 * wire.mass_g_m
        side = -1 if line.side == "left" else 1
        middle = bay.panel.point(bay.s_mm, 0.3) * (1, 0.5 * side, 0.5)
        return self._bought(f"W{tag}", f"supply wire to motor {tag}, plus and minus", "wire", mass,
                            None, Pose(origin=middle), "power.wire",
                            f"{power.wire.upper()} silicone wire, 2 x {run / 1000:.2f} m",
                            step=WIRES, sigma=0.10)

    def joints(self, ribs_of_bay: Mapping[int, tuple[str, ...]]) -> tuple[Joint, ...]:
        """Mounts on the tongues of their ribs, and motors on their mounts.

        Args:
            ribs_of_bay: ids of the starboard ribs of each bay.
        """
        found = [self._seated(t) for t in self.thrusts]
        band = (0.0, 2 * self.shop.print_settings.slip_mm)
        for m in self.mounts:
            on = (-1.0 if m.bay.rear else 1.0, 0.0, 0.0)
            for rib in ribs_of_bay[m.bay.index]:
                found += [Joint("mount on tongue", f"M{m.bay.index}{side}", f"{rib[:-1]}{side}",
                                band, on) for side in "RL"]
        return tuple(found)

    def _seated(self, line: Thrust) -> Joint:
        """A motor's back on its mount, pushed on against the way to its disc."""
        tag = f"{line.motor}{'' if line.side == 'centre' else line.side[0].upper()}"
        x, y, z = (float(-v) for v in line.out)
        return Joint("face to face", f"MOT{tag}", f"M{tag}", (0.0, 0.05), (x, y, z))


def nose_wedge(shop: Shop, power: Power, seat: Pose) -> Shape:
    """A disc between firewall and motor: back on the firewall, front square to the thrust line.

    Frame of `seat`: origin on the firewall's front, x forward, z up.
    """
    motor, plate = power.motor, power.mount.plate_mm
    radius = motor.diameter_mm / 2 + 2.0
    grow = shop.print_settings.hole_oversize_mm
    pull = seat.rotation.T @ thrust_axis(power)
    pattern = None if motor.pattern is None else shop.shelf.bolts(
        motor.pattern, "power.motor.pattern")
    points = bolt_points(motor, pattern)
    centre = max(motor.shaft_clearance_mm, pattern.centre_hole_mm if pattern else 0.0)
    front = Pose.at(plate * pull, pull, (0, 0, 1))
    beyond = Placed(Box((0.0, -2 * radius, -2 * radius), (40.0, 2 * radius, 2 * radius)), front)
    hole = clearance_hole_mm(motor.screw, "medium", "power.motor.screw", shop.shelf)
    back = Pose.at(-20.0 * pull, pull, (0, 0, 1))
    rods: list[Shape] = [Placed(Rod((centre + grow) / 2, 60.0), back)]
    for y, z in points:
        pose = Pose(back.rotation, back((0.0, y, z)))
        rods.append(Placed(Rod((hole + grow) / 2, 60.0), pose))
    body = Rod(radius, 2.5 * plate)
    return Difference(body, (beyond, *rods))


def firewall_circles(shop: Shop, power: Power) -> tuple[tuple[float, float, float], ...]:
    """Holes of the motor's true pattern in the firewall: (y, z, radius) round the thrust line."""
    motor = power.motor
    pattern = None if motor.pattern is None else shop.shelf.bolts(
        motor.pattern, "power.motor.pattern")
    hole = clearance_hole_mm(motor.screw, "medium", "power.motor.screw", shop.shelf)
    centre = max(motor.shaft_clearance_mm, pattern.centre_hole_mm if pattern else 0.0)
    return ((0.0, 0.0, centre / 2), *((y, z, hole / 2) for y, z in bolt_points(motor, pattern)))

