"""Momentum theory of a propeller's stream: ideal power, speeds, contraction, and the blown wing."""

from __future__ import annotations

import math
from dataclasses import dataclass

from buildgen.aero.bounds import above_zero, not_negative

RHO = 1.225


@dataclass(frozen=True, slots=True)
class Stream:
    """The stream of one propeller.

    Attributes:
        induced_m_s: at the disc.
        far_m_s: speed far behind, with the speed of flight.
        power_w: ideal, thrust times the speed through the disc.
        diameter_mm: contracted, far behind.
    """

    induced_m_s: float
    far_m_s: float
    power_w: float
    diameter_mm: float


def stream(thrust_n: float, diameter_mm: float, speed_m_s: float = 0.0, rho: float = RHO) -> Stream:
    """Ideal stream of a propeller at rest or in flight.

    Source: W. J. M. Rankine and R. E. Froude, momentum theory; any propeller text.
    """
    above_zero(diameter_mm=diameter_mm, rho=rho)
    not_negative(thrust_n=thrust_n, speed_m_s=speed_m_s)
    area = math.pi * (diameter_mm * 1e-3) ** 2 / 4
    far = math.sqrt(speed_m_s**2 + 2 * thrust_n / (rho * area))
    induced = (far - speed_m_s) / 2
    through = speed_m_s + induced
    narrow = math.sqrt(through / far) if far > 0 else 1.0
    return Stream(induced, far, thrust_n * through, diameter_mm * narrow)


def speed_near_m_s(found: Stream, speed_m_s: float, behind_mm: float, diameter_mm: float) -> float:
    """Speed of the stream at a distance behind the disc.

    Source: induced speed grows as 1 + x/sqrt(x^2 + R^2) behind an actuator disc; B. W. McCormick,
        Aerodynamics of V/STOL Flight (from memory).
    """
    radius = diameter_mm / 2
    return speed_m_s + found.induced_m_s * (1 + behind_mm / math.hypot(behind_mm, radius))


def lift_gain(
    speed_m_s: float, near_m_s: float, blown_share: float, lift_share: float = 0.5
) -> float:
    """Lift of a partly blown wing over that of the same wing in still air, at one angle.

    Between the two limits of a narrow stream: lift grows with the product of the speeds (slender
    stream) or with the square of the stream's (wide stream); `lift_share` 0 to 1 lies between.

    Args:
        blown_share: of the wing's area that stands in the stream, 0 to 1.
        lift_share: 0 for the narrow limit, 1 for the wide one.

    Source: own reasoning from the two limits, no publication; the pair of limits is the band.
    """
    above_zero(speed_m_s=speed_m_s)
    ratio = max(near_m_s / speed_m_s, 1.0)
    grown = ratio ** (1 + lift_share)
    return float(1 + blown_share * (grown - 1))
