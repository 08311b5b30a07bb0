"""The printed mount of one motor on the wing's nose.

Two ribs of the bay carry tongues that reach forward through the nose into sockets of the mount; a
screw through each cheek locks them. The rear edge of the mount follows the wing's nose as it is at
that station, taper and twist included; its front plate stands square to the thrust line.

Everything is drawn in the bay's frame: origin at the leading edge of the motor's station, x aft,
y outboard along the panel, z along the panel's normal.
"""

from __future__ import annotations

import hashlib
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from shapely.affinity import translate
from shapely.geometry import Polygon, box

from buildgen.airframe.bays import Bay
from buildgen.airframe.blank import Cut
from buildgen.airframe.shop import Shop
from buildgen.airframe.surface import AFT
from buildgen.design.schema import Motor, Mount, Power
from buildgen.problems import DesignError, Problem
from buildgen.shelf import BoltPattern, clearance_hole_mm
from buildgen.solid import (
    Array,
    Box,
    Difference,
    Placed,
    Pose,
    Rod,
    Ruled,
    Run,
    Shape,
    Union,
    ring,
)

NOSE_PLAY_MM = 0.25
"""Between the saddle and the wing's nose: covering and glue."""
CORNER_STEPS = 10
TONGUE_MM = 16.0
"""Greatest height of a tongue."""


@dataclass(frozen=True, eq=False)
class MountShape:
    """The geometry of one starboard mount, shared by its recipe and by the ribs' tongues."""

    shop: Shop
    power: Power
    bay: Bay

    @property
    def mount(self) -> Mount:
        return self.power.mount

    @property
    def motor(self) -> Motor:
        return self.power.motor

    @cached_property
    def frame(self) -> Pose:
        """The bay's frame in the aircraft."""
        return Pose.at(self.bay.panel.nose(self.bay.s_mm), AFT, self.bay.panel.along)

    @cached_property
    def wall(self) -> float:
        """Wall thickness: the definition's, or what the printer lays down in four lines."""
        least = self.shop.print_settings.wall_mm
        given = self.mount.wall_mm
        if given is not None and given < least - 1e-9:
            raise DesignError(
                Problem("power.mount.wall_mm", f"{given:g} mm is thinner than the printer's least"
                        f" wall of {least:g} mm (line width times perimeters).",
                        f"Give at least {least:g}, or print fewer perimeters.")
            )
        return given if given is not None else max(1.8, least)

    @cached_property
    def nose_mm(self) -> tuple[float, float, float]:
        """(z of the nose's middle, its lowest and highest z) where the saddle ends."""
        inner, outer = (self._ring(y) for y in (-self._half_width, self._half_width))
        heights = []
        for points in (inner, outer):
            ahead = points[points[:, 0] <= self.mount.wrap_mm + 0.5]
            heights.append((ahead[:, 2].min(), ahead[:, 2].max()))
        low, high = min(h[0] for h in heights), max(h[1] for h in heights)
        return (low + high) / 2, low, high

    @cached_property
    def _half_width(self) -> float:
        return self.bay.half_mm + self.bay.rib_mm + self.slip + self.wall

    @property
    def slip(self) -> float:
        return self.shop.print_settings.slip_mm

    def _ring(self, y: float) -> Array:
        """The wing's nose at a span offset y in the bay's frame, (n, 3)."""
        pose = self.bay.panel.plane(self.bay.s_mm + y)
        return self.frame.local(self.bay.panel.ring(pose))

    # ------------------------------------------------------------ tongues

    @cached_property
    def tongue(self) -> tuple[float, float, float, float]:
        """x from, x to, z from, z to of both tongues in the bay's frame."""
        middle, low, high = self.nose_mm
        height = min(TONGUE_MM, high - low - 2.0)
        return (-self.mount.tongue_mm, self.mount.wrap_mm,
                middle - height / 2, middle + height / 2)

    @property
    def lock_x_mm(self) -> float:
        """Where the lock screw crosses a tongue."""
        return -self.mount.tongue_mm / 2

    @cached_property
    def lock_hole_mm(self) -> float:
        return clearance_hole_mm(self.mount.lock_screw, "medium", "power.mount.lock_screw",
                                 self.shop.shelf)

    def rib_cut(self, rib: Pose) -> Cut:
        """What a rib of the bay gets: its tongue and the hole of the lock screw.

        Ribs stand square to the panel, so their x, y are x and z of the bay's frame, shifted by
        what the leading edge sweeps between the rib and the motor.
        """
        dx, dy, _ = (float(v) for v in rib.local(self.frame.origin))
        x0, x1, z0, z1 = self.tongue
        middle = (z0 + z1) / 2
        corner = 2.0
        outline = Polygon(
            [(x0 + corner, z0), (x1, z0), (x1, z1), (x0 + corner, z1),
             (x0, z1 - corner), (x0, z0 + corner)]
        )
        nose = Polygon(self._ring(0.0)[:, [0, 2]]).buffer(0.5)
        grown = outline.intersection(nose.union(box(x0 - 1, z0 - 1, 4.0, z1 + 1)))
        tab = max(getattr(grown, "geoms", [grown]), key=lambda g: g.area)
        hole = (self.lock_x_mm + dx, middle + dy, self.lock_hole_mm / 2)
        return Cut(circles=(hole,), tabs=(translate(tab, dx, dy),))

    # ------------------------------------------------------------ thrust line

    @cached_property
    def face(self) -> Pose:
        """Frame of the motor's seat in the aircraft: x aft along the thrust line."""
        thrust = thrust_axis(self.power)
        middle, _, _ = self.nose_mm
        seat = self.frame((-self.mount.ahead_mm, 0.0, middle))
        return Pose.at(seat, -thrust, np.cross((0.0, 0.0, 1.0), -thrust))

    @cached_property
    def _seat(self) -> Pose:
        """The same in the bay's frame."""
        return self.face.then(self.frame.inverse)

    # ------------------------------------------------------------ solid

    @cached_property
    def shape(self) -> Shape:
        """The mount in the bay's frame."""
        return Difference(Union(self._bodies()), self._tools())

    def _bodies(self) -> tuple[Shape, ...]:
        front, neck, rear = self._rings(0.0)
        return Ruled(front, neck), Ruled(neck, rear)

    def _rings(self, inside: float) -> tuple[tuple[Run, ...], tuple[Run, ...], tuple[Run, ...]]:
        """Outside (inside=0) or cavity rings at the seat, the neck and the rear."""
        middle, low, high = self.nose_mm
        seat = self.motor.diameter_mm / 2 + 1.0 - inside
        plate = self.mount.plate_mm if inside else 0.0
        wide, tall = self._half_width + self.wall, (high - low) / 2 + self.wall + 0.5
        if inside:
            wide, tall = self.bay.half_mm - self.wall, tall - inside
        front = self._seat(_rounded(plate, seat if not inside else min(seat, wide), seat,
                                    0.45 * seat))
        neck_x = -self.mount.tongue_mm - self.slip - (0.0 if inside else self.wall)
        neck = _rounded(neck_x, wide, tall, 3.0 if not inside else 2.0) + (0, 0, middle)
        rear_x = self.mount.wrap_mm + (1.0 if inside else 0.0)
        rear = _rounded(rear_x, wide, tall, 3.0 if not inside else 2.0) + (0, 0, middle)
        return tuple(_runs(points) for points in (front, neck, rear))  # type: ignore[return-value]

    def _tools(self) -> tuple[Shape, ...]:
        front, neck, rear = self._rings(self.wall)
        cavity = (Ruled(front, neck), Ruled(neck, rear))
        return (*cavity, self._nose_tool(), *self._sockets(), *self._seat_holes(), *self._locks())

    def _nose_tool(self) -> Ruled:
        """The wing's nose with play, between two planes beyond the mount's sides."""
        reach = self._half_width + self.wall + 1.0
        rings = []
        for y in (-reach, reach):
            points = self._ring(y)
            middle = (len(points) - 1) // 2
            keep = points[:, 0] <= self.mount.wrap_mm + 12.0
            first, last = int(np.argmax(keep)), len(keep) - 1 - int(np.argmax(keep[::-1]))
            span = max(middle - first, last - middle)
            rings.append((points, middle, span))
        # The longest of all: on a swept wing the nose lies further ahead on one side, and a
        # shorter pocket would close behind it and not slide on.
        span = min(max(r[2] for r in rings), *(m for _, m, _ in rings))
        made = []
        for points, middle, _ in rings:
            part = _grown(points[middle - span : middle + span + 1], NOSE_PLAY_MM)
            made.append(ring((part[: span + 1], True), (part[span:], True),
                             (np.vstack([part[-1:], part[:1]]), False)))
        return Ruled(made[0], made[1])

    def _sockets(self) -> list[Shape]:
        """Slots for the two tongues, open to the rear."""
        x0, _, z0, z1 = self.tongue
        inner = self.bay.half_mm - self.slip
        outer = self.bay.half_mm + self.bay.rib_mm + self.slip
        z0, z1, x0 = z0 - self.slip, z1 + self.slip, x0 - self.slip
        x1 = self.mount.wrap_mm + 5.0
        shapes: list[Shape] = []
        for a, b in ((inner, outer), (-outer, -inner)):
            shapes.append(Box((x0, a, z0), (x1, b, z1)))
        return shapes

    def _seat_holes(self) -> list[Shape]:
        """Motor screws, shaft relief and cooling ways along the thrust line."""
        deep = self.mount.plate_mm + 2.0
        grow = self.shop.print_settings.hole_oversize_mm
        circles = [(0.0, 0.0, self.shaft_mm / 2 + grow / 2)]
        screw = clearance_hole_mm(self.screw, "medium", "power.motor.screw", self.shop.shelf)
        circles += [(y, z, (screw + grow) / 2) for y, z in self.points]
        circles += self._cooling(screw)
        rods: list[Shape] = []
        for y, z, r in circles:
            pose = Pose(self._seat.rotation, self._seat((-1.0, y, z)))
            rods.append(Placed(Rod(r, deep, 0.0), pose))
        return rods

    def _cooling(self, screw_mm: float) -> list[tuple[float, float, float]]:
        """Round ways between the screws: air in, supply wires out."""
        seat = self.motor.diameter_mm / 2
        ways = []
        for k in range(4):
            angle = np.radians(45 + 90 * k)
            radius = min(3.0, (seat - self.shaft_mm / 2) / 2 - 1.5)
            at = (self.shaft_mm / 2 + seat) / 2
            y, z = at * np.cos(angle), at * np.sin(angle)
            gap = min(float(np.hypot(y - a, z - b)) for a, b in self.points) - screw_mm / 2
            radius = min(radius, gap - self.wall / 2)
            if radius >= 1.0:
                ways.append((float(y), float(z), float(radius)))
        return ways

    def _locks(self) -> list[Shape]:
        """A screw across each cheek and its tongue, into the cavity."""
        _, _, z0, z1 = self.tongue
        grow = self.shop.print_settings.hole_oversize_mm
        start = -self._half_width - 5.0
        pose = Pose.at((self.lock_x_mm, start, (z0 + z1) / 2), (0, 1, 0), (0, 0, 1))
        return [Placed(Rod((self.lock_hole_mm + grow) / 2, -2 * start), pose)]

    # ------------------------------------------------------------ what goes with it

    @cached_property
    def pattern(self) -> BoltPattern | None:
        name = self.motor.pattern
        return None if name is None else self.shop.shelf.bolts(name, "power.motor.pattern")

    @cached_property
    def points(self) -> tuple[tuple[float, float], ...]:
        return bolt_points(self.motor, self.pattern)

    @property
    def screw(self) -> str:
        return self.motor.screw

    @property
    def shaft_mm(self) -> float:
        found = self.pattern.centre_hole_mm if self.pattern else 0.0
        return max(self.motor.shaft_clearance_mm, found)

    @cached_property
    def twin(self) -> str:
        """Equal for mounts that are equal solids: the rings decide."""
        tool = self._nose_tool()
        numbers = [self._seat.origin, self._seat.rotation.ravel()]
        numbers += [r.points.ravel() for r in (*tool.first, *tool.last)]
        rounded = np.round(np.concatenate(numbers), 2) + 0.0
        return hashlib.sha256(rounded.tobytes()).hexdigest()[:8]

    @cached_property
    def symmetric(self) -> bool:
        """Left and right are the same solid: no taper, twist or side-thrust in the bay."""
        tool = self._nose_tool()
        same = all(
            np.allclose(a.points[:, [0, 2]], b.points[:, [0, 2]], atol=5e-3)
            for a, b in zip(tool.first, tool.last, strict=True)
        )
        straight = abs(float(self._seat.rotation[1, 0])) < 1e-6
        return same and straight


def thrust_axis(power: Power) -> Array:
    """Unit vector of the pull of a starboard motor: forward, down and out to the right."""
    down, side = np.radians(power.down_deg), np.radians(power.side_deg)
    return np.array([-np.cos(down) * np.cos(side), np.sin(side) * np.cos(down), -np.sin(down)])


def bolt_points(motor: Motor, pattern: BoltPattern | None) -> tuple[tuple[float, float], ...]:
    """Screw holes (y, z) around the shaft."""
    if pattern is not None:
        return pattern.points_mm()
    if motor.pattern_mm is None:
        raise DesignError(
            Problem("power.motor.pattern", "is missing.",
                    'Name the bolt pattern, e.g. "16x19", or give pattern_mm = [16, 19].')
        )
    points = []
    for k in range(motor.screws):
        circle = motor.pattern_mm[k % 2] / 2
        angle = 2 * np.pi * k / motor.screws
        points.append((float(circle * np.cos(angle)), float(circle * np.sin(angle))))
    return tuple(points)


def _rounded(x: float, half_y: float, half_z: float, radius: float) -> Array:
    """(4 * CORNER_STEPS + 4, 3) points of a rounded rectangle in the plane x."""
    radius = min(radius, 0.9 * half_y, 0.9 * half_z)
    corners = []
    for k in range(4):
        angles = np.linspace(k * np.pi / 2, (k + 1) * np.pi / 2, CORNER_STEPS + 1)
        sy, sz = ((1, 1), (-1, 1), (-1, -1), (1, -1))[k]
        corners.append(
            np.column_stack(
                [np.full(CORNER_STEPS + 1, x),
                 sy * (half_y - radius) + radius * np.cos(angles),
                 sz * (half_z - radius) + radius * np.sin(angles)]
            )
        )
    return np.vstack(corners)


def _runs(points: Array) -> tuple[Run, ...]:
    """Four corner curves and the four straights between them."""
    step = CORNER_STEPS + 1
    runs = []
    for k in range(4):
        corner = points[k * step : (k + 1) * step]
        after = points[((k + 1) * step) % len(points)]
        runs += [(corner, True), (np.vstack([corner[-1], after]), False)]
    return ring(*runs)


def _grown(points: Array, by: float) -> Array:
    """An open curve in the x, z plane moved outwards by `by`, point by point."""
    flat = points[:, [0, 2]]
    way = np.gradient(flat, axis=0)
    normal = np.column_stack([way[:, 1], -way[:, 0]])
    normal /= np.linalg.norm(normal, axis=1)[:, None]
    centre = flat.mean(axis=0)
    if np.einsum("ij,ij->i", normal, flat - centre).mean() < 0:
        normal = -normal
    moved = points.copy()
    moved[:, [0, 2]] += by * normal
    return moved

