"""How fast, how long, how steep, how far: the usual sums of level flight, climb and the field."""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike

from buildgen.aero.balance import GRAVITY_M_S2
from buildgen.aero.bounds import Floats, above_zero, not_negative, row, within
from buildgen.aero.drag import Polar
from buildgen.problems import DesignError, Problem

OZ_FT3_KG_M3 = 1.001154
"""One ounce per cubic foot in kg/m3 (28.349523 g, 304.8 mm)."""


@dataclass(frozen=True, slots=True)
class Craft:
    """What level flight needs to know.

    Attributes:
        mass_g: ready to fly.
        area_mm2: whole wing.
        polar: drag over lift.
        density_kg_m3: of the air.
    """

    mass_g: float
    area_mm2: float
    polar: Polar
    density_kg_m3: float = 1.225

    def __post_init__(self) -> None:
        above_zero(
            mass_g=self.mass_g, area_mm2=self.area_mm2, density_kg_m3=self.density_kg_m3
        )

    @property
    def weight_n(self) -> float:
        """Under standard gravity."""
        return self.mass_g * 1e-3 * GRAVITY_M_S2

    def pressure_n(self, speed_m_s: float) -> float:
        """Dynamic pressure times wing area."""
        return 0.5 * self.density_kg_m3 * speed_m_s**2 * self.area_mm2 * 1e-6


@dataclass(frozen=True, slots=True)
class StallOnset:
    """Where and when a wing begins to stall.

    Attributes:
        c_lift: of the whole wing when the first strip has had enough.
        strip: number of that strip.
        spare: (n,), section lift that every strip has left then.
    """

    c_lift: float
    strip: int
    spare: Floats


def wing_loading_g_dm2(mass_g: float, area_mm2: float) -> float:
    """Mass over wing area, in the builders' unit. Source: definition."""
    above_zero(mass_g=mass_g, area_mm2=area_mm2)
    return mass_g / (area_mm2 * 1e-4)


def wing_loading_pa(mass_g: float, area_mm2: float) -> float:
    """Weight over wing area. Source: definition, standard gravity."""
    above_zero(mass_g=mass_g, area_mm2=area_mm2)
    return mass_g * 1e-3 * GRAVITY_M_S2 / (area_mm2 * 1e-6)


def wing_cube_loading_kg_m3(mass_g: float, area_mm2: float) -> float:
    """Mass over wing area to the power of 1.5: like models of any size have it alike.

    Source: F. Reynolds, Model Builder, September 1989: WCL = W/S^1.5; 1 oz/ft3 is 1.001 kg/m3.
    """
    above_zero(mass_g=mass_g, area_mm2=area_mm2)
    return mass_g * 1e-3 / math.pow(area_mm2 * 1e-6, 1.5)


def reynolds(speed_m_s: float, chord_mm: float, kinematic_m2_s: float = 1.4607e-5) -> float:
    """Reynolds number by a chord. Source: definition; viscosity of ISO 2533 at sea level."""
    above_zero(chord_mm=chord_mm, kinematic_m2_s=kinematic_m2_s)
    not_negative(speed_m_s=speed_m_s)
    return speed_m_s * chord_mm * 1e-3 / kinematic_m2_s


def level_speed_m_s(craft: Craft, c_lift: float, load_factor: float = 1.0) -> float:
    """Speed at which a lift coefficient carries the aircraft; with its greatest, the stall speed.

    Source: V = sqrt(2 n W/(rho S CL)), lift equation.
    """
    above_zero(c_lift=c_lift, load_factor=load_factor)
    return math.sqrt(load_factor * craft.weight_n / (craft.pressure_n(1.0) * c_lift))


def level_c_lift(craft: Craft, speed_m_s: float, load_factor: float = 1.0) -> float:
    """Lift coefficient that carries the aircraft at a speed. Source: lift equation."""
    above_zero(speed_m_s=speed_m_s)
    return load_factor * craft.weight_n / craft.pressure_n(speed_m_s)


def stall_onset(at_zero: ArrayLike, per_lift: ArrayLike, section_max: ArrayLike) -> StallOnset:
    """When the first strip reaches its section's greatest lift.

    Args:
        at_zero: (n,), section lift of the strips when the wing as a whole does not lift (twist).
        per_lift: (n,), further section lift for each unit of the wing's lift coefficient.
        section_max: (n,) or one number, greatest section lift there.

    Raises:
        DesignError: the rows are unlike, or no strip ever gets there.

    Source: critical-section method; I. H. Abbott and A. E. von Doenhoff, Theory of Wing Sections,
        section 1.4 (basic and additional lift).
    """
    basic = row(at_zero, "at_zero")
    further = row(per_lift, "per_lift", basic.size)
    most = np.broadcast_to(np.asarray(section_max, dtype=np.float64), basic.shape)
    working = further > 1e-9
    if not working.any():
        raise DesignError(Problem("per_lift", "has no strip that lifts more as the wing does."))
    reached = np.where(working, (most - basic) / np.where(working, further, 1.0), np.inf)
    first = int(np.argmin(reached))
    c_lift = float(reached[first])
    return StallOnset(c_lift, first, most - basic - c_lift * further)


def drag_n(craft: Craft, speed_m_s: float, load_factor: float = 1.0) -> float:
    """Drag in level flight or in a turn of a load factor. Source: drag equation."""
    c_lift = level_c_lift(craft, speed_m_s, load_factor)
    return craft.pressure_n(speed_m_s) * craft.polar.drag(c_lift)


def power_required_w(craft: Craft, speed_m_s: float, load_factor: float = 1.0) -> float:
    """Power that the drag eats: thrust times speed, no propeller loss. Source: P = D V."""
    return drag_n(craft, speed_m_s, load_factor) * speed_m_s


def best_glide_c_lift(drag: Polar) -> float:
    """Lift coefficient of the least drag: electric aircraft fly furthest there.

    Source: sqrt(CD0/k); J. D. Anderson, Introduction to Flight, chapter 6.
    """
    return math.sqrt(drag.zero / drag.by_square)


def least_power_c_lift(drag: Polar) -> float:
    """Lift coefficient of the least power: electric aircraft stay up longest there.

    It may lie beyond the stall; then the longest flight is the slowest safe one.

    Source: sqrt(3 CD0/k); J. D. Anderson, Introduction to Flight, chapter 6.
    """
    return math.sqrt(3.0 * drag.zero / drag.by_square)


def endurance_s(craft: Craft, speed_m_s: float, energy_wh: float, efficiency: float) -> float:
    """Time in level flight on a battery.

    Args:
        craft: its mass does not change.
        speed_m_s: of flight.
        energy_wh: usable (about 80 % of what the label says).
        efficiency: propeller, motor and controller together, above 0 to 1.

    Source: energy over power.
    """
    not_negative(energy_wh=energy_wh)
    above_zero(efficiency=efficiency)
    within(0.0, 1.0, efficiency=efficiency)
    return 3600.0 * energy_wh * efficiency / power_required_w(craft, speed_m_s)


def range_m(craft: Craft, speed_m_s: float, energy_wh: float, efficiency: float) -> float:
    """Way through still air on a battery. Source: speed times endurance."""
    return speed_m_s * endurance_s(craft, speed_m_s, energy_wh, efficiency)


def climb_angle_deg(thrust_n: float, drag_at_speed_n: float, weight_n: float) -> float:
    """Angle of a steady climb (of a glide when negative); drag as in level flight.

    Raises:
        DesignError: it would hang on its propeller.

    Source: sin(gamma) = (T - D)/W, any text on performance.
    """
    above_zero(weight_n=weight_n)
    sine = (thrust_n - drag_at_speed_n) / weight_n
    within(-1.0, 1.0, climb_sine=sine)
    return math.degrees(math.asin(sine))


def climb_rate_m_s(
    thrust_n: float, drag_at_speed_n: float, weight_n: float, speed_m_s: float
) -> float:
    """Rate of a steady climb. Source: excess power over weight, any text on performance."""
    above_zero(weight_n=weight_n)
    return speed_m_s * (thrust_n - drag_at_speed_n) / weight_n


def ground_roll_m(
    craft: Craft, speed_m_s: float, thrust_n: float, friction: float = 0.0,
    c_lift: float = 0.0, c_drag: float = 0.0,
) -> float:
    """Way on the ground from standstill to a speed.

    Args:
        craft: mass, area, air.
        speed_m_s: at lift-off, commonly 1.2 of the stall speed.
        thrust_n: mean over the roll (that at 0.7 of the speed).
        friction: of the wheels: 0.02 to 0.05 hard ground, 0.08 to 0.15 grass (from memory).
        c_lift: while rolling.
        c_drag: while rolling.

    Raises:
        DesignError: it never gets that fast.

    Source: s = int m V dV/(T - D - mu (W - L)), closed form for a constant thrust; without the last
        three m V^2/(2 T), J. D. Anderson, Introduction to Flight, section on take-off.
    """
    not_negative(speed_m_s=speed_m_s, friction=friction)
    pull = thrust_n - friction * craft.weight_n
    held = craft.pressure_n(1.0) * (c_drag - friction * c_lift)
    above_zero(pull_at_start_n=pull, pull_at_lift_off_n=pull - held * speed_m_s**2)
    return _roll_m(craft.mass_g * 1e-3, pull, -held, speed_m_s)


def landing_roll_m(
    craft: Craft, speed_m_s: float, friction: float, c_lift: float = 0.0, c_drag: float = 0.0
) -> float:
    """Way on the ground from touch-down to standstill, motor off.

    Args:
        craft: mass, area, air.
        speed_m_s: at touch-down.
        friction: of the wheels, or of a belly on grass (about 0.3 to 0.5, from memory), above 0.
        c_lift: while rolling; small when the tail is down.
        c_drag: while rolling.

    Source: as ``ground_roll_m``, with the forces that brake.
    """
    not_negative(speed_m_s=speed_m_s)
    above_zero(friction=friction)
    brake = friction * craft.weight_n
    helped = craft.pressure_n(1.0) * (c_drag - friction * c_lift)
    above_zero(brake_at_touch_down_n=brake + helped * speed_m_s**2)
    return _roll_m(craft.mass_g * 1e-3, brake, helped, speed_m_s)


def _roll_m(mass_kg: float, force_n: float, by_square: float, speed_m_s: float) -> float:
    """Way between 0 and a speed under a force F + B V^2."""
    ratio = by_square * speed_m_s**2 / force_n
    if abs(ratio) < 1e-9:
        return mass_kg * speed_m_s**2 / (2.0 * force_n)
    return mass_kg / (2.0 * by_square) * math.log1p(ratio)


def turn_load_factor(bank_deg: float) -> float:
    """Load factor of a level turn. Source: 1/cos(bank), any text on performance."""
    within(-89.9, 89.9, bank_deg=bank_deg)
    return 1.0 / math.cos(math.radians(bank_deg))


def turn_radius_m(speed_m_s: float, bank_deg: float) -> float:
    """Radius of a level turn. Source: V^2/(g tan(bank)), any text on performance."""
    above_zero(bank_deg=bank_deg)
    within(0.0, 89.9, bank_deg=bank_deg)
    return speed_m_s**2 / (GRAVITY_M_S2 * math.tan(math.radians(bank_deg)))


def pull_up_load_factor(speed_m_s: float, stall_speed_m_s: float) -> float:
    """Greatest load factor that the wing can be made to give at a speed.

    Source: n = (V/V_s)^2, the manoeuvring diagram's curve; 14 CFR 23.335 (former).
    """
    above_zero(stall_speed_m_s=stall_speed_m_s)
    not_negative(speed_m_s=speed_m_s)
    return (speed_m_s / stall_speed_m_s) ** 2
