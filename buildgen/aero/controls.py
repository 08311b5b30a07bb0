"""Control surfaces: throws, linkages, hinge moments, servo torque, what a deflection does."""

from __future__ import annotations

import math

from buildgen.aero.bounds import above_zero, not_negative, within
from buildgen.problems import DesignError, Problem

OZ_IN_N_MM = 7.0615518
"""One ounce-force inch in N mm (28.349523 g x 9.80665 m/s2 x 25.4 mm)."""
MPH_M_S = 0.44704
"""One mile an hour in m/s, by definition."""


def throw_mm(chord_mm: float, deflection_deg: float) -> float:
    """Movement of the trailing edge square to the surface at rest, as a ruler reads it.

    Args:
        chord_mm: from hinge line to trailing edge.
        deflection_deg: -90 to 90.

    Source: c sin(d), geometry.
    """
    above_zero(chord_mm=chord_mm)
    within(-90.0, 90.0, deflection_deg=deflection_deg)
    return chord_mm * math.sin(math.radians(deflection_deg))


def straight_throw_mm(chord_mm: float, deflection_deg: float) -> float:
    """Straight distance between the two places of the trailing edge.

    Source: 2 c sin(d/2), the chord of the arc.
    """
    above_zero(chord_mm=chord_mm)
    within(-180.0, 180.0, deflection_deg=deflection_deg)
    return 2.0 * chord_mm * math.sin(math.radians(0.5 * deflection_deg))


def throw_deg(chord_mm: float, moved_mm: float) -> float:
    """Deflection from the movement of the trailing edge square to the surface at rest.

    Raises:
        DesignError: it moved by more than the chord.

    Source: asin(m/c), geometry.
    """
    above_zero(chord_mm=chord_mm)
    within(-chord_mm, chord_mm, moved_mm=moved_mm)
    return math.degrees(math.asin(moved_mm / chord_mm))


def surface_travel_deg(servo_arm_mm: float, horn_mm: float, servo_deg: float) -> float:
    """Deflection of the surface for a turn of the servo, both arms square to a long rod at rest.

    Args:
        servo_arm_mm: from the servo's axis to the rod.
        horn_mm: from the hinge line to the rod.
        servo_deg: -90 to 90.

    Raises:
        DesignError: the arm pulls the horn beyond a right angle.

    Source: r_s sin(a) = r_h sin(d), geometry.
    """
    above_zero(servo_arm_mm=servo_arm_mm, horn_mm=horn_mm)
    within(-90.0, 90.0, servo_deg=servo_deg)
    sine = servo_arm_mm / horn_mm * math.sin(math.radians(servo_deg))
    if abs(sine) > 1.0:
        raise DesignError(
            Problem("horn_mm", f"{horn_mm:g} is too short for a servo arm of {servo_arm_mm:g}.",
                    "Take a longer horn, a shorter arm or less travel.")
        )
    return math.degrees(math.asin(sine))


def servo_turn_deg(servo_arm_mm: float, horn_mm: float, surface_deg: float) -> float:
    """Turn of the servo that a deflection asks for.

    Raises:
        DesignError: the horn is so long that no turn of the arm gives it.

    Source: r_s sin(a) = r_h sin(d), geometry; reverse of ``surface_travel_deg``.
    """
    above_zero(servo_arm_mm=servo_arm_mm, horn_mm=horn_mm)
    within(-90.0, 90.0, surface_deg=surface_deg)
    sine = horn_mm / servo_arm_mm * math.sin(math.radians(surface_deg))
    if abs(sine) > 1.0:
        raise DesignError(
            Problem("servo_arm_mm", f"{servo_arm_mm:g} is too short for {surface_deg:g} degrees.",
                    "Take a longer arm or a shorter horn.")
        )
    return math.degrees(math.asin(sine))


def linkage_ratio(servo_arm_mm: float, horn_mm: float, servo_deg: float = 0.0) -> float:
    """Degrees of surface for one degree more of servo, at a turn of the servo.

    A hinge moment times this ratio is the torque at the servo (virtual work, no friction).

    Raises:
        DesignError: as ``surface_travel_deg``, and at the dead point itself.

    Source: derivative of r_s sin(a) = r_h sin(d).
    """
    surface = surface_travel_deg(servo_arm_mm, horn_mm, servo_deg)
    across = math.cos(math.radians(surface))
    above_zero(surface_lever=across - 1e-9)
    return servo_arm_mm * math.cos(math.radians(servo_deg)) / (horn_mm * across)


def dynamic_pressure_pa(speed_m_s: float, density_kg_m3: float = 1.225) -> float:
    """Half the density times speed squared. Source: definition."""
    not_negative(speed_m_s=speed_m_s)
    above_zero(density_kg_m3=density_kg_m3)
    return 0.5 * density_kg_m3 * speed_m_s**2


def hinge_coefficient(
    alpha_deg: float, deflection_deg: float, b1_per_deg: float = -0.003,
    b2_per_deg: float = -0.0085,
) -> float:
    """Hinge moment coefficient, closing moments negative.

    Args:
        alpha_deg: of the surface that carries the flap.
        deflection_deg: trailing edge down positive.
        b1_per_deg: by angle of attack (from memory, plain flap).
        b2_per_deg: by deflection; -0.005 to -0.012 for a plain flap, gap sealed (from memory).

    Source: C_h = b1 alpha + b2 delta, any text on stability and control.
    """
    return b1_per_deg * alpha_deg + b2_per_deg * deflection_deg


def hinge_moment_n_mm(
    coefficient: float, pressure_pa: float, area_mm2: float, chord_mm: float
) -> float:
    """Moment about the hinge line.

    Args:
        coefficient: as ``hinge_coefficient`` gives it.
        pressure_pa: dynamic.
        area_mm2: of the surface behind the hinge.
        chord_mm: mean chord behind the hinge.

    Source: H = C_h q S_f c_f, any text on stability and control.
    """
    not_negative(pressure_pa=pressure_pa)
    above_zero(area_mm2=area_mm2, chord_mm=chord_mm)
    return coefficient * pressure_pa * area_mm2 * 1e-6 * chord_mm


def plate_hinge_moment_n_mm(
    pressure_pa: float, chord_mm: float, span_mm: float, deflection_deg: float
) -> float:
    """Moment about the hinge of a flat plate pressed at half its chord: the careless upper guess.

    Source: 0.5 q C^2 L sin(d); what the hobby's servo formula comes to. A measurement quoted from
        NACA Report 278 is 1.4 times as much at 20 degrees, so keep a margin of 2.
    """
    not_negative(pressure_pa=pressure_pa)
    above_zero(chord_mm=chord_mm, span_mm=span_mm)
    sine = math.sin(math.radians(deflection_deg))
    return 0.5 * pressure_pa * 1e-6 * chord_mm**2 * span_mm * sine


def servo_torque_n_mm(hinge_n_mm: float, ratio: float, margin: float = 2.0) -> float:
    """Torque that the servo must have.

    Args:
        hinge_n_mm: moment about the hinge line.
        ratio: from ``linkage_ratio``, at full throw.
        margin: 2 or more (common practice, no source).

    Source: virtual work, torque times turn equals moment times deflection.
    """
    above_zero(ratio=ratio, margin=margin)
    return abs(hinge_n_mm) * ratio * margin


def hobby_servo_torque_n_mm(
    chord_mm: float, span_mm: float, speed_m_s: float, surface_deg: float, servo_deg: float
) -> float:
    """Servo torque by the formula that hobby calculators use, sea level, no margin.

    Args:
        chord_mm: of the surface behind the hinge.
        span_mm: of the surface.
        speed_m_s: greatest.
        surface_deg: deflection, above 0 and below 90.
        servo_deg: turn of the servo that gives it, above 0 and below 90.

    Source: C. Tenney, T[oz in] = 8.5e-6 C_cm^2 V_mph^2 L_cm sin(S1) tan(S1)/tan(S2).
    """
    above_zero(chord_mm=chord_mm, span_mm=span_mm, surface_deg=surface_deg, servo_deg=servo_deg)
    within(0.0, 89.9, surface_deg=surface_deg, servo_deg=servo_deg)
    first, second = math.radians(surface_deg), math.radians(servo_deg)
    size_cm3 = chord_mm**2 * span_mm * 1e-3
    pull = math.sin(first) * math.tan(first) / math.tan(second)
    return 8.5e-6 * size_cm3 * (speed_m_s / MPH_M_S) ** 2 * pull * OZ_IN_N_MM


def flap_effectiveness(chord_share: float) -> float:
    """Change of angle of attack that one degree of a plain full-span flap is worth.

    A model's hinged surface gives 0.6 to 0.8 of it (common practice, no source).

    Args:
        chord_share: flap chord over whole chord, 0 to 1.

    Source: H. Glauert, ARC R&M 1095 (1927), thin-airfoil theory: 1 - (t - sin t)/pi with
        cos t = 2 E - 1, E the flap's share of the chord.
    """
    within(0.0, 1.0, chord_share=chord_share)
    angle = math.acos(2.0 * chord_share - 1.0)
    return 1.0 - (angle - math.sin(angle)) / math.pi


def steady_roll_deg_s(
    roll_per_rad: float, deflection_deg: float, damping: float, speed_m_s: float, span_mm: float
) -> float:
    """Rate of roll at which damping has eaten up the ailerons.

    Args:
        roll_per_rad: rolling moment by aileron (signs as the lattice gives them).
        deflection_deg: of the ailerons.
        damping: Cl_p, below 0.
        speed_m_s: of flight.
        span_mm: of the wing.

    Source: p b/(2 V) = -Cl_delta delta/Cl_p; NACA Report 715 and any text on flying qualities.
    """
    above_zero(roll_damping=-damping, span_mm=span_mm, speed_m_s=speed_m_s)
    helix = -roll_per_rad * math.radians(deflection_deg) / damping
    return math.degrees(2.0 * speed_m_s * helix / (span_mm * 1e-3))


def held_sideslip_deg(yaw_per_rad: float, deflection_deg: float, weathercock: float) -> float:
    """Sideslip that full rudder holds against the weathercock stability.

    Args:
        yaw_per_rad: yawing moment by rudder.
        deflection_deg: of the rudder.
        weathercock: Cn_beta, above 0.

    Source: Cn_beta beta + Cn_delta delta = 0; any text on flying qualities.
    """
    above_zero(weathercock=weathercock)
    return -yaw_per_rad * deflection_deg / weathercock
