"""Fin, dihedral and one motor out: rules of thumb marked as such, and the yaw that must be held."""

from __future__ import annotations

import math
from dataclasses import dataclass

from buildgen.aero.bounds import above_zero, not_negative


@dataclass(frozen=True, slots=True)
class Band:
    """Usual values: from ``low`` to ``high``, and on what ground."""

    low: float
    high: float
    basis: str

    def holds(self, value: float) -> bool:
        """Whether a value lies within, ends included."""
        return self.low <= value <= self.high


_HABIT = "common practice, from memory"
TAIL_VOLUME = Band(0.3, 0.6, "M. Drela, MIT design notes, and hobby practice, from memory")
TRAINER_TAIL_VOLUME = Band(0.5, 0.7, _HABIT)
FIN_VOLUME = Band(0.02, 0.05, "M. Drela, MIT design notes, and hobby practice, from memory")
STATIC_MARGIN = Band(0.05, 0.15, "at least 5 %: A. Lennon, ch. 6, as quoted; bands from memory")
TRAINER_STATIC_MARGIN = Band(0.10, 0.20, _HABIT)
AEROBATIC_STATIC_MARGIN = Band(0.03, 0.08, _HABIT)
DIHEDRAL_DEG = {
    "high wing with ailerons": Band(1.0, 4.0, _HABIT),
    "rudder and elevator only": Band(5.0, 9.0, _HABIT),
    "low wing": Band(3.0, 6.0, _HABIT),
    "aerobatic": Band(0.0, 2.0, _HABIT),
}
SPIRAL_STABLE = 5.0
"""Blaine Rawdon's number above which the spiral mode is stable (rule of thumb, from memory)."""
RUDDER_ROLL = Band(0.10, 0.20, "M. Drela, MIT design notes, from memory")
"""Fin volume times spiral number, for a model that is rolled by its rudder."""


def spiral_number_deg(
    fin_arm_mm: float, span_mm: float, dihedral_deg: float, c_lift: float
) -> float:
    """Blaine Rawdon's spiral number: above 5 stable, below it slowly unstable. A rule of thumb.

    Args:
        fin_arm_mm: CG to the fin's quarter chord.
        span_mm: of the wing.
        dihedral_deg: of each side, above the level (equivalent, for polyhedral).
        c_lift: at which it is asked.

    Source: B = (l_v/b)(dihedral/CL), M. Drela, MIT Unified Engineering notes (from memory).
    """
    above_zero(span_mm=span_mm, c_lift=c_lift)
    not_negative(fin_arm_mm=fin_arm_mm)
    return fin_arm_mm / span_mm * dihedral_deg / c_lift


def fin_yaw_slope_per_rad(fin_volume: float, fin_slope_per_rad: float) -> float:
    """A fin's share of the weathercock stability, sidewash left out.

    Source: Cn_beta = a_v V_v; any text on stability.
    """
    not_negative(fin_volume=fin_volume, fin_slope_per_rad=fin_slope_per_rad)
    return fin_volume * fin_slope_per_rad


def equivalent_dihedral_deg(
    spans_mm: tuple[float, ...], dihedrals_deg: tuple[float, ...]
) -> float:
    """One dihedral angle that rolls as much as the panels of a constant-chord wing do.

    Args:
        spans_mm: of the panels, from the root out.
        dihedrals_deg: of each, above the level.

    Source: strip theory, rolling moment int angle(y) y dy over int y dy, constant chord.
    """
    start = lever = total = 0.0
    for span, angle in zip(spans_mm, dihedrals_deg, strict=True):
        above_zero(span_mm=span)
        step = 0.5 * ((start + span) ** 2 - start**2)
        lever, total, start = lever + step * angle, total + step, start + span
    above_zero(panels=total)
    return lever / total


def one_motor_out_yaw_n_mm(thrust_n: float, dead_drag_n: float, motor_y_mm: float) -> float:
    """Yawing moment of a pair of which one motor has stopped.

    Args:
        thrust_n: of the one that runs.
        dead_drag_n: of the propeller that stands or windmills.
        motor_y_mm: of both, from the plane of symmetry.

    Source: moments about the CG; 14 CFR 23.149 (former) as the situation meant.
    """
    not_negative(thrust_n=thrust_n, dead_drag_n=dead_drag_n)
    return (thrust_n + dead_drag_n) * abs(motor_y_mm)


def minimum_control_speed_m_s(
    yaw_n_mm: float, rudder_per_rad: float, rudder_deg: float, wing_area_mm2: float,
    span_mm: float, density_kg_m3: float = 1.225, thrust_gone_m_s: float = math.inf,
) -> float:
    """Speed at which full rudder just holds a yawing moment, no sideslip, wings level.

    Args:
        yaw_n_mm: at standstill, as ``one_motor_out_yaw_n_mm`` gives it.
        rudder_per_rad: yawing moment coefficient by rudder.
        rudder_deg: full throw.
        wing_area_mm2: whole wing.
        span_mm: of the wing.
        density_kg_m3: of the air.
        thrust_gone_m_s: speed at which the thrust has fallen to nothing, in a line from standstill.

    Raises:
        DesignError: the rudder does nothing, or a number makes no sense.

    Source: q S b Cn_delta delta = N, any text on flying qualities; with falling thrust
        q S b Cn_delta delta = N (1 - V/V_0), a quadratic in V.
    """
    above_zero(
        rudder_per_rad=abs(rudder_per_rad), rudder_deg=abs(rudder_deg),
        wing_area_mm2=wing_area_mm2, span_mm=span_mm, density_kg_m3=density_kg_m3,
    )
    not_negative(yaw_n_mm=yaw_n_mm)
    power = abs(rudder_per_rad * math.radians(rudder_deg))
    by_square = 0.5 * density_kg_m3 * wing_area_mm2 * 1e-6 * span_mm * power
    fall = yaw_n_mm / thrust_gone_m_s
    return (math.sqrt(fall**2 + 4.0 * by_square * yaw_n_mm) - fall) / (2.0 * by_square)
