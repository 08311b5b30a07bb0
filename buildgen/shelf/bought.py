"""Bought things: screws, inserts, motor hole patterns, servos, wheels, connectors, wires."""

from __future__ import annotations

import math
from dataclasses import dataclass, field

from buildgen.shelf.material import SEEN, Size


@dataclass(frozen=True, slots=True, kw_only=True)
class Screw:
    """A metric screw size with the holes it needs, its heads, its nut and its washer.

    Attributes:
        name: ``M3``.
        clearance_mm: through holes, (fine, medium, coarse) of ISO 273.
        tap_drill_mm: hole for a cut thread.
        form_hole_mm: hole in a print for a screw that forms its own thread.
        cap_head_mm: (largest diameter, largest height) of the head, ISO 4762.
        pan_head_mm: the same, ISO 7045.
        countersunk_head_mm: the same, ISO 7046, 90 degrees.
        nut_mm: (width across flats, largest height), ISO 4032.
        washer_mm: (outside diameter, thickness), ISO 7089.
        lengths_mm: standard lengths under the head (over all for countersunk heads).
    """

    name: str
    diameter_mm: float = 0.0
    pitch_mm: float = 0.0
    clearance_mm: tuple[float, ...] = ()
    tap_drill_mm: float = 0.0
    form_hole_mm: float = 0.0
    cap_head_mm: Size = (0.0, 0.0)
    hex_key_mm: float = 0.0
    pan_head_mm: Size = (0.0, 0.0)
    countersunk_head_mm: Size = (0.0, 0.0)
    nut_mm: Size = (0.0, 0.0)
    washer_mm: Size = (0.0, 0.0)
    lengths_mm: tuple[float, ...] = ()
    note: str = ""
    source: str = ""
    seen: str = field(default="measured", metadata={"one_of": SEEN})

    @property
    def nut_corners_mm(self) -> float:
        """Width of the nut across its sharp corners: what a pocket must let through."""
        return self.nut_mm[0] * 2.0 / math.sqrt(3.0)


@dataclass(frozen=True, slots=True, kw_only=True)
class Insert:
    """A brass insert pressed hot into a print.

    Attributes:
        hole_mm: hole to aim for in the finished print (prints come out smaller than drawn).
        depth_mm: least depth of that hole.
        boss_mm: least outside diameter of the print around it.
    """

    name: str
    hole_mm: float = 0.0
    length_mm: float = 0.0
    depth_mm: float = 0.0
    boss_mm: float = 0.0
    mass_g: float = 0.0
    note: str = ""
    source: str = ""
    seen: str = field(default="measured", metadata={"one_of": SEEN})


@dataclass(frozen=True, slots=True, kw_only=True)
class BoltPattern:
    """Screw holes in the back of a motor.

    Attributes:
        name: hole circles as builders write them: ``16x19``.
        circles_mm: diameter of each hole circle; opposite holes are that far apart.
        holes: number of holes on each circle.
        angles_deg: where each circle's first hole stands, from y (starboard) towards z (up).
        screw: usual screw size; some motors of the class take another.
        centre_hole_mm: room for the shaft's end and its clip behind the motor.
        motors: the motors that have it, by stator size.
    """

    name: str
    title: str = ""
    circles_mm: tuple[float, ...] = ()
    holes: tuple[float, ...] = ()
    angles_deg: tuple[float, ...] = ()
    screw: str = "M3"
    centre_hole_mm: float = 0.0
    motors: str = ""
    note: str = ""
    source: str = ""
    seen: str = field(default="measured", metadata={"one_of": SEEN})

    def points_mm(self, turn_deg: float = 0.0) -> tuple[Size, ...]:
        """Hole centres (y, z) around the shaft, the whole pattern turned by ``turn_deg``."""
        points: list[Size] = []
        for circle, count, first in zip(
            self.circles_mm, self.holes, self.angles_deg, strict=True
        ):
            for n in range(round(count)):
                angle = math.radians(first + turn_deg + 360.0 * n / count)
                points.append((circle / 2 * math.cos(angle), circle / 2 * math.sin(angle)))
        return tuple(points)


@dataclass(frozen=True, slots=True, kw_only=True)
class ServoClass:
    """A size of servo; a typical one of its class, to be replaced by the servo in hand.

    Attributes:
        length_mm: body, along the lugs.
        width_mm: body, across.
        height_mm: over all, output shaft included.
        below_lugs_mm: from the bottom of the body to the underside of the lugs.
        over_lugs_mm: length over both lugs.
        lug_spacing_mm: between the lug holes, along the body.
        lug_across_mm: between the two lug holes of one side; 0 with one hole a side.
        lug_hole_mm: hole in the lug.
        screw_hole_mm: pilot hole for its screw in wood or a print.
        shaft_offset_mm: output shaft from the nearer end of the body.
        torque_n_mm: stall torque at ``volts``.
        lead_awg: usual gauge of its lead.
    """

    name: str
    title: str = ""
    length_mm: float = 0.0
    width_mm: float = 0.0
    height_mm: float = 0.0
    below_lugs_mm: float = 0.0
    over_lugs_mm: float = 0.0
    lug_spacing_mm: float = 0.0
    lug_across_mm: float = 0.0
    lug_hole_mm: float = 0.0
    lug_thickness_mm: float = 0.0
    screw_hole_mm: float = 0.0
    shaft_offset_mm: float = 0.0
    mass_g: float = 0.0
    mass_sigma_g: float = 0.0
    torque_n_mm: float = 0.0
    stall_current_a: float = 0.0
    volts: float = 4.8
    lead_awg: float = 0.0
    note: str = ""
    source: str = ""
    seen: str = field(default="measured", metadata={"one_of": SEEN})


@dataclass(frozen=True, slots=True, kw_only=True)
class Wheel:
    """A wheel; diameter and width over the tyre, bore for the axle."""

    name: str
    title: str = ""
    diameter_mm: float = 0.0
    width_mm: float = 0.0
    bore_mm: float = 0.0
    mass_g: float = 0.0
    mass_sigma_g: float = 0.0
    note: str = ""
    source: str = ""
    seen: str = field(default="measured", metadata={"one_of": SEEN})


@dataclass(frozen=True, slots=True, kw_only=True)
class Connector:
    """A mated pair of connectors: plug and socket.

    Attributes:
        current_a: what it carries for minutes.
        mass_g: of the pair.
        size_mm: (width, height) of the larger half, for the hole it must pass.
    """

    name: str
    title: str = ""
    current_a: float = 0.0
    mass_g: float = 0.0
    mass_sigma_g: float = 0.0
    size_mm: Size = (0.0, 0.0)
    note: str = ""
    source: str = ""
    seen: str = field(default="measured", metadata={"one_of": SEEN})


@dataclass(frozen=True, slots=True, kw_only=True)
class Wire:
    """One lead of stranded copper in soft insulation.

    Attributes:
        name: ``awg-14``.
        conductor_mm: diameter of the solid conductor of that gauge.
        area_mm2: of the copper.
        resistance_mohm_m: of one lead at 20 degrees Celsius, solid; strands add 1 to 5 %.
        outside_mm: over the insulation.
        mass_g_m: with insulation.
        current_a: what a short lead in free air carries for minutes, the careful end.
    """

    name: str
    awg: float = 0.0
    conductor_mm: float = 0.0
    area_mm2: float = 0.0
    resistance_mohm_m: float = 0.0
    outside_mm: float = 0.0
    mass_g_m: float = 0.0
    current_a: float = 0.0
    note: str = ""
    source: str = ""
    seen: str = field(default="measured", metadata={"one_of": SEEN})
