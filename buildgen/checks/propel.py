"""Do the motors lift it, does the current fit, and how long does the battery last?"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np

from buildgen.aero.atmosphere import Air, air
from buildgen.aero.drag import Wetted, polar, section_form, zero_lift_drag
from buildgen.aero.performance import Craft, climb_rate_m_s, drag_n
from buildgen.checks.desk import Check, Desk, verdict
from buildgen.checks.fly import CL_MAX
from buildgen.design.schema import Power
from buildgen.drive.motor import FULL_V, NOMINAL_V, Motor, Pack, Point, static_point
from buildgen.drive.propeller import Static, static_estimate, thrust_in_flight_n
from buildgen.part import Cover, Part

THRUST_TO_WEIGHT = 0.5
"""Trainers: 0.5 to 0.8; hobby rule of thumb, from memory."""
CRUISE = 1.4
"""Cruise over stall speed; common practice, no source."""
CLIMB_M_S = 1.5
OVERALL = 0.45
"""Battery to thrust power in cruise, 0.35 to 0.6; common practice, from memory."""
AVIONICS_W = 4.0
"""Servos, receiver, flight controller; common practice, no source."""
LEAST_MIN = 6.0
"""A flight shorter than this leaves little for a second landing try; common practice."""
SPAN_EFFICIENCY = 0.75
LAMINAR = 0.2
JOINS = 1.1
BODY_FORM = 1.25
"""Of a box body: between a smooth one of this fineness and its corners; common practice."""
WIRE_M = 0.6
"""Lead of one motor, both ways, where its length is not known; common practice."""
GRAVITY = 9.80665


@dataclass(frozen=True, eq=False)
class Thrusting:
    """The drive at rest, fresh battery and nominal."""

    power: Power
    propeller: Static
    full: Point
    nominal: Point
    pack: Pack


def drive_of(desk: Desk) -> Thrusting | None:
    """The operating points; None where the motor's constants or the battery are not given."""
    power = desk.definition.power
    packs = [e for e in desk.definition.equipment
             if e.kind == "battery" and e.cells and e.capacity_mah]
    if power is None or not packs:
        return None
    given = power.motor
    if given.kv_rpm_v is None or given.resistance_ohm is None or given.no_load_a is None:
        return None
    battery = packs[0]
    assert battery.cells is not None
    assert battery.capacity_mah is not None
    count = sum(2 if e.mirrored else 1 for e in packs)
    pack = Pack(battery.cells, battery.capacity_mah * count)
    motor = Motor(given.kv_rpm_v, given.resistance_ohm, given.no_load_a)
    propeller = static_estimate(power.propeller.diameter_mm, power.propeller.pitch_mm,
                                power.propeller.blades)
    wire = desk.frame.shop.shelf.wire(power.wire, "power.wire")
    ohm = wire.resistance_mohm_m * 1e-3 * WIRE_M
    rho = _air(desk).density_kg_m3
    full, nominal = (
        static_point(motor, pack, propeller, power.propeller.diameter_mm, power.motors, ohm, v, rho)
        for v in (FULL_V, NOMINAL_V)
    )
    return Thrusting(power, propeller, full, nominal, pack)


def thrust(desk: Desk) -> Iterator[Check]:
    """Static thrust over weight, and the motor's current at full throttle."""
    found = drive_of(desk)
    if found is None:
        if desk.definition.power is not None:
            yield Check("thrust", "Thrust, current and flight time", "warn", None, None, "", "",
                        "Not computed: give power.motor its kv_rpm_v, resistance_ohm and no_load_a,"
                        " and a battery its cells and capacity_mah.")
        return
    weight = desk.balance.mass_g * 1e-3 * GRAVITY
    ratio = found.power.motors * found.nominal.thrust_n / weight
    good = ratio >= THRUST_TO_WEIGHT
    yield Check(
        "thrust-weight", "Static thrust over weight", verdict(good, ratio >= 0.3), ratio,
        THRUST_TO_WEIGHT, "", f"{found.propeller.basis}; motor by its constants, 3.7 V a cell;"
        " limit: rule of thumb for trainers",
        "" if good else "Take a larger propeller, a higher kv_rpm_v or another cell.",
    )
    most = found.power.motor.max_current_a
    if most is not None:
        fits = found.full.amperes <= most
        yield Check(
            "motor-current", "Current of a motor at full throttle, fresh battery",
            verdict(fits, found.full.amperes <= 1.1 * most), found.full.amperes, most, "A",
            f"motor by its constants against {found.propeller.basis}, 4.2 V a cell",
            "" if fits else "Take a smaller propeller or pitch, or a lower kv_rpm_v.",
        )


def cruise(desk: Desk) -> Iterator[Check]:
    """Climb and flight time at cruise, from a drag build-up of the true parts."""
    found = drive_of(desk)
    if found is None or desk.balance.wing_area_mm2 <= 0:
        return
    craft = craft_of(desk)
    speed = CRUISE * float(np.sqrt(2 * craft.weight_n / (
        craft.density_kg_m3 * craft.area_mm2 * 1e-6 * CL_MAX)))
    drag = drag_n(craft, speed)
    push = found.power.motors * thrust_in_flight_n(
        found.propeller, found.power.propeller.diameter_mm, found.power.propeller.pitch_mm,
        found.nominal.rpm, speed, craft.density_kg_m3)
    rate = climb_rate_m_s(push, drag, craft.weight_n, speed) if push > drag else 0.0
    good = rate >= CLIMB_M_S
    yield Check(
        "climb", f"Climb at {speed:.1f} m/s", verdict(good, rate > 0.5), rate, CLIMB_M_S, "m/s",
        "excess thrust; thrust falls in a line to its zero, drag built up from skin friction"
        " (Raymer, chapter 12)",
        "" if good else "More thrust at speed (pitch), or less weight and drag.",
    )
    watts = drag * speed / OVERALL + AVIONICS_W
    minutes = found.pack.energy_wh() / watts * 60
    yield Check(
        "flight-time", f"Flight time at {speed:.1f} m/s, 80 % of the battery",
        verdict(minutes >= LEAST_MIN, True), minutes, LEAST_MIN, "min",
        f"level flight in calm air at {watts:.0f} W from the battery, {OVERALL:g} of it thrust"
        f" power (0.35 to 0.6: common practice), {AVIONICS_W:g} W for servos and receiver",
        "" if minutes >= LEAST_MIN else "Take a larger battery, or less weight and drag.",
    )


def craft_of(desk: Desk) -> Craft:
    """The aircraft as level flight knows it: drag from the skins in the kit."""
    b = desk.balance
    now = _air(desk)
    skins = [p for p in desk.kit.parts if isinstance(p.form, Cover)]
    wing = desk.frame.wing
    thick = max(float(np.ptp(p.root.contour[:, 1])) for p in wing.panels)
    items = [
        Wetted(p.name, p.skin_area_mm2, *_flow(p, b.mac_mm, thick), LAMINAR, JOINS)
        for p in skins
    ]
    if not items:
        items = [Wetted("wing", 2.05 * b.wing_area_mm2, b.mac_mm, section_form(thick), LAMINAR,
                        JOINS)]
    speed = 1.3 * float(np.sqrt(2 * b.mass_g * 1e-3 * GRAVITY / (
        now.density_kg_m3 * b.wing_area_mm2 * 1e-6 * CL_MAX)))
    zero = zero_lift_drag(items, speed, now.kinematic_m2_s, b.wing_area_mm2,
                          leaks=0.2)
    aspect = b.span_mm**2 / b.wing_area_mm2
    return Craft(b.mass_g, b.wing_area_mm2, polar(zero, aspect, SPAN_EFFICIENCY),
                 now.density_kg_m3)


def _flow(part: Part, mac_mm: float, thick: float) -> tuple[float, float]:
    """Length along the flow [mm] and form factor of a skin."""
    if part.from_key.startswith("wing"):
        return mac_mm, section_form(thick)
    assert isinstance(part.form, Cover)
    along = float(np.ptp(part.pose(part.form.skin.vertices)[:, 0]))
    return along, BODY_FORM if part.from_key.startswith("fuselage") else 1.1


def _air(desk: Desk) -> Air:
    return air(desk.definition.site.elevation_m, desk.definition.site.warmer_k)
