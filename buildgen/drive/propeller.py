"""Propellers by their coefficients: published tests where there are any, else estimates.

n is in revolutions a second throughout: T = CT rho n^2 D^4, P = CP rho n^3 D^5, J = V/(n D).
"""

from __future__ import annotations

import math
from dataclasses import dataclass

from buildgen.aero.bounds import above_zero, not_negative

RHO = 1.225
INCH_MM = 25.4
MERIT = 0.66
MERIT_SIGMA = 0.05
"""Static figure of merit: the UIUC rows of 9 and 10 in propellers lie at 0.56 to 0.72."""
EMPIRICAL_SIGMA = 0.13
"""Relative: the formula's author states +-13 % for about 68 % of cases."""
NO_THRUST_FACTOR = 1.2
"""The formula's zero-thrust speed is 15 to 30 % low, says its author; the low end of that."""


@dataclass(frozen=True, slots=True)
class Static:
    """Coefficients of a propeller at rest, with one relative standard deviation of the thrust."""

    ct: float
    cp: float
    sigma: float
    basis: str


def thrust_n(ct: float, rpm: float, diameter_mm: float, rho: float = RHO) -> float:
    """Thrust [N] from its coefficient.

    Source: definition of the coefficient, any propeller text.
    """
    above_zero(rpm=rpm, diameter_mm=diameter_mm, rho=rho)
    return float(ct * rho * (rpm / 60) ** 2 * (diameter_mm * 1e-3) ** 4)


def shaft_power_w(cp: float, rpm: float, diameter_mm: float, rho: float = RHO) -> float:
    """Shaft power [W] from its coefficient.

    Source: definition of the coefficient, any propeller text.
    """
    above_zero(rpm=rpm, diameter_mm=diameter_mm, rho=rho)
    return float(cp * rho * (rpm / 60) ** 3 * (diameter_mm * 1e-3) ** 5)


def figure_of_merit(ct: float, cp: float) -> float:
    """Ideal over true power at rest: sqrt(2/pi) CT^1.5 / CP.

    Source: momentum theory in propeller coefficients.
    """
    above_zero(ct=ct, cp=cp)
    return float(math.sqrt(2 / math.pi) * ct**1.5 / cp)


def advance_ratio(speed_m_s: float, rpm: float, diameter_mm: float) -> float:
    """J = V/(n D)."""
    above_zero(rpm=rpm, diameter_mm=diameter_mm)
    return speed_m_s / (rpm / 60 * diameter_mm * 1e-3)


def efficiency(advance: float, ct: float, cp: float) -> float:
    """Thrust power over shaft power in flight: J CT/CP."""
    above_zero(cp=cp)
    return advance * ct / cp


def pitch_speed_m_s(rpm: float, pitch_mm: float) -> float:
    """Speed of a screw without slip."""
    return rpm / 60 * pitch_mm * 1e-3


def empirical_thrust_n(
    diameter_mm: float, pitch_mm: float, rpm: float, speed_m_s: float = 0.0
) -> float:
    """Thrust [N] of a two-blade propeller from its size alone, sea level.

    Source: G. Staples, Propeller Static and Dynamic Thrust Calculation (2013/2014); within 13 %
        for about 68 % of propellers, slow-flyer blades give up to 67 % more.
    """
    above_zero(diameter_mm=diameter_mm, pitch_mm=pitch_mm, rpm=rpm)
    not_negative(speed_m_s=speed_m_s)
    d, p = diameter_mm / INCH_MM, pitch_mm / INCH_MM
    pitch_speed = 4.23333e-4 * rpm * p
    return float(4.392399e-8 * rpm * d**3.5 / math.sqrt(p) * (pitch_speed - speed_m_s))


def static_estimate(diameter_mm: float, pitch_mm: float, blades: int = 2) -> Static:
    """Coefficients at rest from the size alone.

    Thrust by the empirical formula, whose CT does not depend on the speed of rotation; power from
    that by the usual figure of merit. More blades: thrust and power grow with their number to the
    power 0.8 (common practice, no source).
    """
    rpm = 6000.0
    ct = empirical_thrust_n(diameter_mm, pitch_mm, rpm) / thrust_n(1.0, rpm, diameter_mm)
    cp = math.sqrt(2 / math.pi) * ct**1.5 / MERIT
    more = (blades / 2) ** 0.8
    return Static(ct * more, cp * more, EMPIRICAL_SIGMA,
                  f"thrust by Staples' formula (+-13 %), power by a figure of merit of {MERIT:g}")


def thrust_in_flight_n(
    static: Static, diameter_mm: float, pitch_mm: float, rpm: float, speed_m_s: float,
    rho: float = RHO,
) -> float:
    """Thrust [N] that falls in a line from rest to the zero-thrust speed.

    Source: the straight line of Staples' formula, its zero raised by the least that its author
        found it low.
    """
    zero = NO_THRUST_FACTOR * pitch_speed_m_s(rpm, pitch_mm)
    return max(0.0, thrust_n(static.ct, rpm, diameter_mm, rho) * (1 - speed_m_s / zero))
