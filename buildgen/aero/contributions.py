"""What bodies and propellers do to stability; all of it upsets when it lies ahead of the CG."""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike

from buildgen.aero.bounds import above_zero, not_negative, row, within
from buildgen.problems import DesignError, Problem

_CELLS = 4000
_BODY_FACTORS = (
    (0.1, 0.115), (0.2, 0.172), (0.3, 0.344), (0.4, 0.487), (0.5, 0.688), (0.6, 0.888), (0.7, 1.146)
)


@dataclass(frozen=True, slots=True)
class BodyFlow:
    """The wing that a body carries, as it bends the flow along the body.

    Attributes:
        wing_le_x_mm: leading edge of the wing at the body.
        wing_te_x_mm: trailing edge there.
        wing_span_mm: of the whole wing.
        wing_mean_chord_mm: its area over its span.
        wing_slope_per_rad: lift slope of the wing.
        tail_x_mm: quarter chord of the tailplane, behind the trailing edge.
        downwash_slope: change of downwash angle at the tail with angle of attack.
    """

    wing_le_x_mm: float
    wing_te_x_mm: float
    wing_span_mm: float
    wing_mean_chord_mm: float
    wing_slope_per_rad: float
    tail_x_mm: float
    downwash_slope: float

    def __post_init__(self) -> None:
        above_zero(
            wing_chord_mm=self.wing_te_x_mm - self.wing_le_x_mm,
            tail_behind_mm=self.tail_x_mm - self.wing_te_x_mm,
            wing_span_mm=self.wing_span_mm,
            wing_mean_chord_mm=self.wing_mean_chord_mm,
            wing_slope_per_rad=self.wing_slope_per_rad,
        )

    @property
    def wing_area_mm2(self) -> float:
        """Of the whole wing."""
        return self.wing_span_mm * self.wing_mean_chord_mm

    def slope_at(self, x_mm: ArrayLike) -> np.ndarray[tuple[int], np.dtype[np.float64]]:
        """(n,): change of the local flow angle with that of the stream.

        Nought beside the wing, rising in a line to the tail's value behind it, upwash ahead.

        Source: H. Multhopp, NACA TM 1036 (1942), who read the upwash off a chart. Here it is the
            flat plate's, sqrt((d + c)/d) - 1, with the circulation of an elliptic load's middle
            and the decay of a horseshoe of pi/4 of the span. Within 5 % of a vortex lattice ahead
            of rectangular wings of aspect ratio 5 to 8 (5.1 % at 10).
        """
        x = np.asarray(x_mm, dtype=np.float64)
        chord = self.wing_te_x_mm - self.wing_le_x_mm
        ahead = np.maximum(self.wing_le_x_mm - x, 1e-9)
        half = math.pi / 8.0 * self.wing_span_mm
        arm = ahead + 0.25 * chord
        decay = (np.hypot(half, arm) - arm) / half
        middle = 4.0 / math.pi * self.wing_slope_per_rad * self.wing_mean_chord_mm / chord
        up = 1.0 + middle / math.tau * decay * (np.sqrt(1.0 + chord / ahead) - 1.0)
        reach = (x - self.wing_te_x_mm) / (self.tail_x_mm - self.wing_te_x_mm)
        down = (1.0 - self.downwash_slope) * np.clip(reach, 0.0, None)
        return np.where(x < self.wing_le_x_mm, up, np.where(x < self.wing_te_x_mm, 0.0, down))


def body_pitch_slope_per_rad(
    x_mm: ArrayLike, widths_mm: ArrayLike, flow: BodyFlow, mac_mm: float
) -> float:
    """Change of a body's pitching moment coefficient with angle of attack; upsets when positive.

    Args:
        x_mm: (n,), stations from nose to tail, rising.
        widths_mm: (n,), width of the body there.
        flow: how the wing bends the flow.
        mac_mm: mean aerodynamic chord.

    Raises:
        DesignError: the stations do not rise, or the rows are unlike.

    Source: H. Multhopp, Aerodynamics of the Fuselage, NACA TM 1036 (1942):
        dM/dalpha = (pi q/2) int w^2 (dbeta/dalpha) dx, known as 1/(36.5 S c) per degree.
    """
    above_zero(mac_mm=mac_mm)
    x = row(x_mm, "x_mm")
    widths = row(widths_mm, "widths_mm", x.size)
    if x.size < 2 or not (np.diff(x) > 0.0).all():
        raise DesignError(Problem("x_mm", "must be two stations or more, rising."))
    # Breaks at the wing's edges keep the cells off the upwash's steep end at the leading edge.
    inside = [e for e in (flow.wing_le_x_mm, flow.wing_te_x_mm) if x[0] < e < x[-1]]
    ends = np.array([x[0], *inside, x[-1]])
    total = 0.0
    for start, stop in zip(ends[:-1], ends[1:], strict=True):
        # Cells shrink as the square towards the aft end, where the upwash rises as 1/sqrt.
        edges = stop - (stop - start) * np.linspace(1.0, 0.0, _CELLS + 1) ** 2
        middles = 0.5 * (edges[1:] + edges[:-1])
        squares = np.interp(middles, x, widths) ** 2
        total += float(np.sum(squares * flow.slope_at(middles) * np.diff(edges)))
    return 0.5 * math.pi * total / (flow.wing_area_mm2 * mac_mm)


def body_pitch_slope_by_factor_per_rad(
    length_mm: float, width_mm: float, quarter_chord_at: float, wing_area_mm2: float, mac_mm: float
) -> float:
    """The same from one chart factor: quick, and for a model's body about half of the first.

    Args:
        length_mm: of the body.
        width_mm: greatest.
        quarter_chord_at: root quarter chord as a fraction of the length from the nose, 0.1 to 0.7.
        wing_area_mm2: whole wing.
        mac_mm: mean aerodynamic chord.

    Source: R. R. Gilruth and M. D. White, NACA Report 711 (1941), K_f w^2 l/(S c); the factors per
        radian from memory of a table drawn from its chart.
    """
    above_zero(
        length_mm=length_mm, width_mm=width_mm, wing_area_mm2=wing_area_mm2, mac_mm=mac_mm
    )
    within(_BODY_FACTORS[0][0], _BODY_FACTORS[-1][0], quarter_chord_at=quarter_chord_at)
    places, factors = zip(*_BODY_FACTORS, strict=True)
    factor = float(np.interp(quarter_chord_at, places, factors))
    return factor * width_mm**2 * length_mm / (wing_area_mm2 * mac_mm)


def apparent_mass_factor(fineness: float) -> float:
    """Crosswise less lengthwise apparent mass of an ellipsoid of revolution, over its own air.

    Args:
        fineness: length over diameter, above 1.

    Source: H. Lamb, Hydrodynamics, article 114, k2 - k1, as tabulated by M. M. Munk, NACA
        Report 184 (1924).
    """
    above_zero(fineness_above_1=fineness - 1.0)
    e = math.sqrt(1.0 - 1.0 / fineness**2)
    log = math.log((1.0 + e) / (1.0 - e))
    along = 2.0 * (1.0 - e**2) / e**3 * (0.5 * log - e)
    across = 1.0 / e**2 - (1.0 - e**2) / (2.0 * e**3) * log
    return across / (2.0 - across) - along / (2.0 - along)


def body_yaw_slope_per_rad(
    volume_mm3: float, fineness: float, wing_area_mm2: float, span_mm: float
) -> float:
    """Change of a body's yawing moment coefficient with sideslip; negative, against the fin.

    Args:
        volume_mm3: of the body.
        fineness: length over (mean of width and depth) diameter.
        wing_area_mm2: whole wing.
        span_mm: of the wing.

    Source: M. M. Munk, NACA Report 184 (1924): couple 2 q (k2 - k1) Vol; real bodies reach some
        60 to 90 % of it (from memory).
    """
    above_zero(volume_mm3=volume_mm3, wing_area_mm2=wing_area_mm2, span_mm=span_mm)
    return -2.0 * apparent_mass_factor(fineness) * volume_mm3 / (wing_area_mm2 * span_mm)


def propeller_normal_slope_per_rad(
    blades: int, blade_chord_mm: float, diameter_mm: float, blade_angle_deg: float,
    thrust_over_rho_v2_d2: float = 0.0,
) -> float:
    """Slope of the force across a propeller's axis with the angle of its inflow, by disc area.

    Args:
        blades: their number.
        blade_chord_mm: at three quarters of the radius.
        diameter_mm: of the disc.
        blade_angle_deg: at three quarters of the radius, 0 to 60.
        thrust_over_rho_v2_d2: T/(rho V^2 D^2), 0 or more.

    Source: H. S. Ribner, NACA Report 819 (1945): factor of the inflow and solidity 4 B b/(3 pi D);
        J. DeYoung, Journal of Aircraft 2 (1965), 4.25 s sin(beta + 3 deg)/(1 + 2 s) for the rest
        (both from memory, not checked against the papers).
    """
    above_zero(blades=blades, blade_chord_mm=blade_chord_mm, diameter_mm=diameter_mm)
    within(0.0, 60.0, blade_angle_deg=blade_angle_deg)
    not_negative(thrust_over_rho_v2_d2=thrust_over_rho_v2_d2)
    solidity = 4.0 * blades * blade_chord_mm / (3.0 * math.pi * diameter_mm)
    angle = math.radians(blade_angle_deg + 3.0)
    still = 4.25 * solidity / (1.0 + 2.0 * solidity) * math.sin(angle)
    return still * inflow_factor(thrust_over_rho_v2_d2)


def inflow_factor(thrust_over_rho_v2_d2: float) -> float:
    """How much more a pulling propeller's cross force is than that of an idling one.

    Source: H. S. Ribner, NACA Report 819 (1945): (1 + a)((1 + a) + (1 + 2 a)^2)/(1 + (1 + 2 a)^2)
        with a = (sqrt(1 + 8 Tc/pi) - 1)/2 from momentum theory.
    """
    not_negative(thrust_over_rho_v2_d2=thrust_over_rho_v2_d2)
    a = 0.5 * (math.sqrt(1.0 + 8.0 * thrust_over_rho_v2_d2 / math.pi) - 1.0)
    wake = (1.0 + 2.0 * a) ** 2
    return (1.0 + a) * (1.0 + a + wake) / (1.0 + wake)


def propeller_pitch_slope_per_rad(
    normal_slope_per_rad: float, diameter_mm: float, ahead_mm: float, wing_area_mm2: float,
    mac_mm: float, upwash_slope: float = 0.0,
) -> float:
    """Change of one propeller's pitching moment coefficient with angle of attack.

    The same number with the span for the chord, and its sign turned, is its share in Cn_beta.

    Args:
        normal_slope_per_rad: from ``propeller_normal_slope_per_rad``.
        diameter_mm: of the disc.
        ahead_mm: disc ahead of the CG (a pusher's is negative: it steadies).
        wing_area_mm2: whole wing.
        mac_mm: mean aerodynamic chord.
        upwash_slope: wing's upwash at the disc by angle of attack, 0 for sideslip.

    Source: moment of the cross force about the CG; C. D. Perkins and R. E. Hage, Airplane
        Performance, Stability and Control, chapter 5.
    """
    above_zero(diameter_mm=diameter_mm, wing_area_mm2=wing_area_mm2, mac_mm=mac_mm)
    disc_mm2 = 0.25 * math.pi * diameter_mm**2
    share = disc_mm2 / wing_area_mm2 * ahead_mm / mac_mm
    return share * normal_slope_per_rad * (1.0 + upwash_slope)
