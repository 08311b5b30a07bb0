"""Longitudinal stability by the classical method: slopes, downwash, neutral point, CG range.

Stations may be in any one unit of length when they are fractions of a chord; slopes are per radian
where the name says so. What runs here in closed form is checked by the lattice beside it.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

from buildgen.aero.bounds import above_zero, not_negative, within


def lift_slope_per_rad(
    aspect_ratio: float, half_chord_sweep_deg: float = 0.0, mach: float = 0.0, kappa: float = 1.0
) -> float:
    """Lift slope of a wing of any aspect ratio and sweep.

    Args:
        aspect_ratio: above 0.
        half_chord_sweep_deg: of the half-chord line.
        mach: below 1.
        kappa: section lift slope over 2 pi.

    Source: H. B. Helmbold and E. C. Polhamus: J. G. Lowry and E. C. Polhamus, NACA TN 3911 (1957);
        USAF DATCOM 4.1.3.2. Some 5 % high for a wing of aspect ratio 5 swept 45 degrees.
    """
    above_zero(aspect_ratio=aspect_ratio, kappa=kappa)
    within(0.0, 0.99, mach=mach)
    beta2 = 1.0 - mach**2
    tangent = math.tan(math.radians(half_chord_sweep_deg))
    root = math.sqrt(aspect_ratio**2 / kappa**2 * (beta2 + tangent**2) + 4.0)
    return 2.0 * math.pi * aspect_ratio / (2.0 + root)


def elliptic_slope_per_rad(aspect_ratio: float, section_slope_per_rad: float = math.tau) -> float:
    """Lift slope of an elliptic wing on a lifting line.

    Source: L. Prandtl, CL_alpha = a0/(1 + a0/(pi AR)); any aerodynamics text.
    """
    above_zero(aspect_ratio=aspect_ratio, section_slope_per_rad=section_slope_per_rad)
    return section_slope_per_rad / (1.0 + section_slope_per_rad / (math.pi * aspect_ratio))


def far_downwash_slope(slope_per_rad: float, aspect_ratio: float) -> float:
    """Change of downwash angle with that of attack far behind an elliptically loaded wing.

    At the wing itself it is half as much.

    Source: lifting-line theory, 2 CL_alpha/(pi AR); any aerodynamics text.
    """
    above_zero(slope_per_rad=slope_per_rad, aspect_ratio=aspect_ratio)
    return 2.0 * slope_per_rad / (math.pi * aspect_ratio)


def tail_downwash_slope(
    aspect_ratio: float,
    taper: float,
    quarter_chord_sweep_deg: float,
    tail_arm_over_span: float,
    tail_height_over_span: float = 0.0,
) -> float:
    """Change of the downwash angle at a tail with the wing's angle of attack, low speed.

    Args:
        aspect_ratio: of the wing.
        taper: of the wing, tip over root chord.
        quarter_chord_sweep_deg: of the wing.
        tail_arm_over_span: wing's quarter of the mean chord to the tail's, over the wing's span.
        tail_height_over_span: tail above or below the wing's root-chord plane, over the span.

    Source: USAF DATCOM 4.4.1, method 2, as given by Roskam and Nelson (from memory): 4.44 [K_A K_l
        K_h sqrt(cos L)]^1.19. A flat-wake lattice gives 8 to 15 % more in the wake's plane.
    """
    above_zero(aspect_ratio=aspect_ratio, tail_arm_over_span=tail_arm_over_span)
    not_negative(taper=taper)
    within(-1.0, 1.0, tail_height_over_span=tail_height_over_span)
    within(-80.0, 80.0, quarter_chord_sweep_deg=quarter_chord_sweep_deg)
    by_aspect = 1.0 / aspect_ratio - 1.0 / (1.0 + aspect_ratio**1.7)
    by_taper = (10.0 - 3.0 * taper) / 7.0
    by_place = (1.0 - abs(tail_height_over_span)) / math.cbrt(2.0 * tail_arm_over_span)
    by_sweep = math.sqrt(math.cos(math.radians(quarter_chord_sweep_deg)))
    return 4.44 * math.pow(by_aspect * by_taper * by_place * by_sweep, 1.19)


def tail_volume(
    tail_area_mm2: float, arm_mm: float, wing_area_mm2: float, length_mm: float
) -> float:
    """Tail volume coefficient.

    Args:
        tail_area_mm2: of tailplane or fin.
        arm_mm: wing's quarter of the mean chord (or the CG, where a method says so) to the tail's.
        wing_area_mm2: whole wing.
        length_mm: mean chord for a tailplane, span for a fin.

    Source: c_HT = L S_HT/(MAC S), c_VT = L S_VT/(b S), D. P. Raymer, Aircraft Design, chapter 6.
    """
    not_negative(tail_area_mm2=tail_area_mm2, arm_mm=arm_mm)
    above_zero(wing_area_mm2=wing_area_mm2, length_mm=length_mm)
    return tail_area_mm2 * arm_mm / (wing_area_mm2 * length_mm)


@dataclass(frozen=True, slots=True)
class WingAndTail:
    """A wing with body, and a tail behind it, as the classical method sees them.

    Attributes:
        wing_slope_per_rad: lift slope of wing and body.
        wing_centre: their aerodynamic centre, in chords from the chord's leading edge.
        wing_moment: their moment coefficient about it, nose up positive.
        tail_slope_per_rad: lift slope of the tail by its own area.
        tail_volume: with the arm that the method asks for.
        downwash_slope: change of downwash angle with angle of attack.
        tail_speed_ratio: dynamic pressure at the tail over that of the stream.
        tail_down_deg: tail's setting against the wing's zero-lift line, leading edge down positive.
        zero_lift_downwash_deg: downwash at the tail when wing and body do not lift.
    """

    wing_slope_per_rad: float
    wing_centre: float
    wing_moment: float
    tail_slope_per_rad: float
    tail_volume: float
    downwash_slope: float
    tail_speed_ratio: float = 1.0
    tail_down_deg: float = 0.0
    zero_lift_downwash_deg: float = 0.0

    def __post_init__(self) -> None:
        above_zero(wing_slope_per_rad=self.wing_slope_per_rad)
        not_negative(
            tail_slope_per_rad=self.tail_slope_per_rad,
            tail_volume=self.tail_volume,
            tail_speed_ratio=self.tail_speed_ratio,
        )

    @property
    def _tail_power(self) -> float:
        """Moment slope of the tail per radian of its own angle."""
        return self.tail_speed_ratio * self.tail_volume * self.tail_slope_per_rad


def neutral_point(craft: WingAndTail) -> float:
    """Neutral point in chords from the chord's leading edge, tail volume by the arm from the CG.

    Source: h_n = h_ac + V_H (a_t/a)(1 - d_eps/d_alpha): J. D. Anderson, Introduction to Flight,
        section 7.8. The tail's own lift is left out of the whole slope there.
    """
    share = craft._tail_power / craft.wing_slope_per_rad * (1.0 - craft.downwash_slope)
    return craft.wing_centre + share


def neutral_point_between_centres(craft: WingAndTail, tail_area_ratio: float) -> float:
    """Neutral point in chords, tail volume by the arm between the two aerodynamic centres.

    The tail's lift counts in the whole: moments of the two lifts about the point vanish.

    Args:
        craft: its ``tail_volume`` reckoned between the aerodynamic centres.
        tail_area_ratio: tail area over wing area.

    Source: B. Etkin and L. D. Reid, Dynamics of Flight, chapter 2 (statics of two lifts).
    """
    not_negative(tail_area_ratio=tail_area_ratio)
    washed = craft.tail_speed_ratio * craft.tail_slope_per_rad * (1.0 - craft.downwash_slope)
    whole = craft.wing_slope_per_rad + washed * tail_area_ratio
    return craft.wing_centre + craft.tail_volume * washed / whole


def static_margin(neutral: float, cg: float) -> float:
    """How far the CG lies ahead of the neutral point, in chords; both in chords.

    Source: SM = h_n - h; any text on stability.
    """
    return neutral - cg


def pitch_slope_per_rad(craft: WingAndTail, cg: float) -> float:
    """Change of the pitching moment about the CG with angle of attack; stable when negative.

    Source: dCM/dalpha = a (h - h_n): J. D. Anderson, Introduction to Flight, section 7.9.
    """
    return craft.wing_slope_per_rad * (cg - neutral_point(craft))


def zero_lift_moment(craft: WingAndTail) -> float:
    """Pitching moment coefficient about the CG when wing and body do not lift.

    Source: CM_0 = CM_ac + V_H a_t (i_t + eps_0): J. D. Anderson, Introduction to Flight, 7.7.
    """
    down_deg = craft.tail_down_deg + craft.zero_lift_downwash_deg
    return craft.wing_moment + craft._tail_power * math.radians(down_deg)


def trim_angle_deg(craft: WingAndTail, cg: float) -> float:
    """Angle of attack, from zero lift of wing and body, at which the pitching moment vanishes.

    Raises:
        DesignError: the aircraft is not stable, so no such angle holds.

    Source: J. D. Anderson, Introduction to Flight, section 7.5 and example 7.6.
    """
    slope = pitch_slope_per_rad(craft, cg)
    above_zero(static_margin=-slope)
    return math.degrees(-zero_lift_moment(craft) / slope)


def cg_range_mm(
    neutral_mm: float, mac_mm: float, margins: tuple[float, float] = (0.05, 0.15)
) -> tuple[float, float]:
    """Foremost and aftmost CG for two static margins.

    Args:
        neutral_mm: neutral point.
        mac_mm: mean aerodynamic chord.
        margins: least and greatest static margin, in chords.

    Source: definition of the static margin; usual margins 5 to 15 % (common practice; at least 5 %
        in A. Lennon, Basics of R/C Model Aircraft Design, chapter 6).
    """
    above_zero(mac_mm=mac_mm, margin_span=margins[1] - margins[0])
    return neutral_mm - margins[1] * mac_mm, neutral_mm - margins[0] * mac_mm


def wing_body_centre(moment_a: float, lift_a: float, moment_b: float, lift_b: float,
                     cg: float) -> tuple[float, float]:
    """Aerodynamic centre (chords) and moment about it from two readings of moment and lift.

    Args:
        moment_a: moment coefficient about the CG at the first reading.
        lift_a: lift coefficient there.
        moment_b: at the second.
        lift_b: at the second.
        cg: in chords from the leading edge.

    Source: CM_cg = CM_ac + CL (h - h_ac): J. D. Anderson, Introduction to Flight, example 7.3.
    """
    above_zero(lift_difference=abs(lift_b - lift_a))
    lever = (moment_b - moment_a) / (lift_b - lift_a)
    return cg - lever, moment_a - lift_a * lever
