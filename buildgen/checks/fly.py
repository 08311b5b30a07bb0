"""Is it a sane aeroplane: tail volumes, wing loading, stall speed?"""

from __future__ import annotations

import math
from collections.abc import Iterator

from buildgen.checks.desk import Check, Desk, verdict

TAIL_VOLUME = (0.35, 0.80)
FIN_VOLUME = (0.02, 0.05)
TAILLESS_FIN_VOLUME = (0.012, 0.04)
"""Tip fins of swept flying wings, whose sweep helps; common practice, no source."""
BASIS_VOLUME = "tail volume coefficient (Raymer, chapter 6); bands for models: common practice"
CUBE_LOADING = (2.0, 12.0)
"""kg/m3: gliders and slow flyers to fast sport models; common practice, no source."""
CL_MAX = 1.1
"""Plain small wing at low Reynolds number; common practice, no source."""
RHO = 1.225
GRAVITY = 9.80665
HAND_LAUNCH_M_S = 12.0


def tail_volumes(desk: Desk) -> Iterator[Check]:
    """Tailplane and fin large enough by their volume coefficients."""
    rows: tuple[tuple[str, str, float, tuple[float, float]], ...] = (
        ("tail-volume", "Tailplane volume", desk.neutral.tail_volume, TAIL_VOLUME),
        ("fin-volume", "Fin volume", desk.neutral.fin_volume, FIN_VOLUME),
    )
    if desk.frame.tail is None or not desk.frame.tail.upright_area_mm2:
        rows = (("fin-volume", "Volume of the tip fins", desk.neutral.fin_volume,
                 TAILLESS_FIN_VOLUME),) if desk.neutral.fin_volume else ()
    for id, title, value, (low, high) in rows:
        good = low <= value <= high
        small = value < low
        advice = "" if good else (
            f"{'Enlarge' if small else 'Reduce'} it, or its arm, to reach {low:g} to {high:g}."
        )
        yield Check(id, title, verdict(good, 0.7 * low <= value <= 1.5 * high), value,
                    low if small else high, "", BASIS_VOLUME, advice)


def loading(desk: Desk) -> Iterator[Check]:
    """Wing cube loading in the range of flyable models."""
    b = desk.balance
    if b.wing_area_mm2 <= 0:
        return
    value = b.mass_g / 1000 / (b.wing_area_mm2 * 1e-6) ** 1.5
    low, high = CUBE_LOADING
    yield Check(
        "cube-loading", "Wing cube loading", verdict(low <= value <= high, value <= 1.3 * high),
        value, high, "kg/m3", "mass / area^1.5; band for models: common practice, no source",
        "" if value <= high else "Take weight out or enlarge the wing.",
    )


def stall(desk: Desk) -> Iterator[Check]:
    """Stall speed, power off, at sea level; a figure to plan with."""
    b = desk.balance
    if b.wing_area_mm2 <= 0:
        return
    area = b.wing_area_mm2 * 1e-6
    speed = math.sqrt(2 * b.mass_g / 1000 * GRAVITY / (RHO * area * CL_MAX))
    good = speed <= HAND_LAUNCH_M_S
    yield Check(
        "stall-speed", "Stall speed, power off", verdict(good, True), speed, HAND_LAUNCH_M_S,
        "m/s", f"V = sqrt(2 m g / (rho S CL)), CL = {CL_MAX:g} and limit: common practice",
        "" if good else "Too fast for a throw by hand: plan for a runway, or lighten it.",
    )
