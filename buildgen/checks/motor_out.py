"""One motor stopped: what the rudder must hold, and below which speed it cannot."""

from __future__ import annotations

from collections.abc import Iterator
from math import sqrt

from buildgen.aero import planform
from buildgen.aero.controls import flap_effectiveness
from buildgen.aero.lateral import (
    fin_yaw_slope_per_rad,
    minimum_control_speed_m_s,
    one_motor_out_yaw_n_mm,
)
from buildgen.aero.stability import lift_slope_per_rad
from buildgen.checks.desk import Check, Desk, verdict
from buildgen.checks.fly import CL_MAX, GRAVITY, RHO
from buildgen.checks.propel import drive_of
from buildgen.drive.propeller import NO_THRUST_FACTOR, pitch_speed_m_s

RUDDER_DEG = 25.0
"""Full rudder of a model; common practice, no source."""
HINGED = 0.7
"""A model's hinged surface against thin-airfoil theory, 0.6 to 0.8; common practice."""
DEAD = 0.1
"""Drag of a propeller that windmills over the thrust it gave; common practice, no source."""
ABOVE_STALL = 1.2


def motor_out(desk: Desk) -> Iterator[Check]:
    """Full power on all motors but the outermost of one side, rudder alone, wings level."""
    found, tail = drive_of(desk), desk.frame.tail
    if found is None or tail is None or tail.fin is None or found.power.motors < 2:
        return
    if tail.given.arm_mm < 0 or found.power.place != "wing":
        return
    b = desk.balance
    outermost = max(abs(float(t.disc[1])) for t in desk.frame.drive.thrusts)
    thrust = found.nominal.thrust_n
    fin = tail.fin
    aspect = planform.aspect_ratio((fin.panel,)) / 2
    slope = fin_yaw_slope_per_rad(desk.neutral.fin_volume, lift_slope_per_rad(aspect))
    rudder = slope * HINGED * flap_effectiveness(fin.control)
    pitch = found.power.propeller.pitch_mm
    speed = minimum_control_speed_m_s(
        one_motor_out_yaw_n_mm(thrust, DEAD * thrust, outermost), rudder, RUDDER_DEG,
        b.wing_area_mm2, b.span_mm, RHO,
        NO_THRUST_FACTOR * pitch_speed_m_s(found.nominal.rpm, pitch),
    )
    stall = sqrt(2 * b.mass_g * 1e-3 * GRAVITY / (RHO * b.wing_area_mm2 * 1e-6 * CL_MAX))
    limit = ABOVE_STALL * stall
    good = speed <= limit
    yield Check(
        "motor-out", "Least speed with one motor stopped, the others at full power",
        verdict(good, True), speed, limit, "m/s",
        f"q S b Cn = yawing moment, rudder alone at {RUDDER_DEG:g} degrees, thrust falling with"
        f" speed; Glauert's flap (R&M 1095) times {HINGED:g}; limit {ABOVE_STALL:g} of the stall",
        "" if good else "Below that speed throttle back: practise it high up, let the controllers"
        " cut the opposite motor, or enlarge fin and rudder.",
    )
