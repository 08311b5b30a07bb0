"""Drag without lift, built up from skin friction over the wetted area, and the drag polar."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

from buildgen.aero.bounds import above_zero, not_negative, within


@dataclass(frozen=True, slots=True)
class Wetted:
    """One thing that the air rubs on.

    Attributes:
        name: wing, fuselage, tail.
        area_mm2: its skin.
        length_mm: along the flow: mean chord, body length.
        form: factor for its thickness.
        laminar: share of the length from the nose that is laminar, 0 to 1.
        interference: factor for where it joins others.
    """

    name: str
    area_mm2: float
    length_mm: float
    form: float = 1.0
    laminar: float = 0.0
    interference: float = 1.0


@dataclass(frozen=True, slots=True)
class Polar:
    """Drag coefficient over lift: ``zero`` plus ``by_square`` times lift coefficient squared."""

    zero: float
    by_square: float

    def __post_init__(self) -> None:
        above_zero(zero=self.zero, by_square=self.by_square)

    def drag(self, c_lift: float) -> float:
        """Drag coefficient at a lift coefficient."""
        return self.zero + self.by_square * c_lift**2


def laminar_friction(reynolds: float) -> float:
    """Mean friction coefficient of one side of a laminar plate.

    Source: H. Blasius, 1.328/sqrt(Re); H. Schlichting, Boundary-Layer Theory, chapter 7.
    """
    above_zero(reynolds=reynolds)
    return 1.328 / math.sqrt(reynolds)


def turbulent_friction(reynolds: float) -> float:
    """Mean friction coefficient of one side of a smooth plate, turbulent from the nose.

    Args:
        reynolds: by the plate's length, above 1000.

    Source: L. Prandtl and H. Schlichting, 0.455/log10(Re)^2.58; H. Schlichting, Boundary-Layer
        Theory, chapter 21.
    """
    above_zero(reynolds_above_1000=reynolds - 1000.0)
    return 0.455 / math.pow(math.log10(reynolds), 2.58)


def friction(reynolds: float, laminar: float) -> float:
    """Mean friction coefficient of a plate that is laminar over a share of its length.

    Args:
        reynolds: by the whole length, above 1000.
        laminar: 0 to 1. Where the laminar stretch itself is too short for a turbulent layer
            (Re below 1000) it is taken as none.

    Source: L. Prandtl (1927): the turbulent plate less the turbulent front, plus the laminar front;
        H. Schlichting, Boundary-Layer Theory, chapter 21.
    """
    within(0.0, 1.0, laminar=laminar)
    whole = turbulent_friction(reynolds)
    front = laminar * reynolds
    if front <= 1000.0:
        return whole
    return whole - laminar * (turbulent_friction(front) - laminar_friction(front))


def section_form(thickness_ratio: float) -> float:
    """Form factor of a wing or tail section on the friction of both its faces.

    Source: S. F. Hoerner, Fluid-Dynamic Drag (1965), chapter 6: 1 + 2 t/c + 60 (t/c)^4.
    """
    within(0.0, 0.4, thickness_ratio=thickness_ratio)
    return 1.0 + 2.0 * thickness_ratio + 60.0 * thickness_ratio**4


def body_form(fineness: float) -> float:
    """Form factor of a streamlined body on its friction.

    Args:
        fineness: length over diameter (of a circle of the same frontal area), above 1.

    Source: S. F. Hoerner, Fluid-Dynamic Drag (1965), chapter 6: 1 + 1.5 (d/l)^1.5 + 7 (d/l)^3.
    """
    above_zero(fineness_above_1=fineness - 1.0)
    return 1.0 + 1.5 / math.pow(fineness, 1.5) + 7.0 / fineness**3


def drag_area_mm2(item: Wetted, speed_m_s: float, kinematic_m2_s: float) -> float:
    """Drag of one thing over dynamic pressure.

    Source: f = Cf FF Q S_wet, component build-up; D. P. Raymer, Aircraft Design, chapter 12.
    """
    above_zero(speed_m_s=speed_m_s, kinematic_m2_s=kinematic_m2_s, length_mm=item.length_mm)
    not_negative(area_mm2=item.area_mm2)
    reynolds = speed_m_s * item.length_mm * 1e-3 / kinematic_m2_s
    factor = item.form * item.interference
    return friction(reynolds, item.laminar) * factor * item.area_mm2


def zero_lift_drag(
    items: Sequence[Wetted], speed_m_s: float, kinematic_m2_s: float, wing_area_mm2: float,
    blunt_mm2: float = 0.0, leaks: float = 0.1,
) -> float:
    """Drag coefficient of a whole aircraft without lift, by its wing area.

    Args:
        items: all that the air rubs on.
        speed_m_s: of flight.
        kinematic_m2_s: kinematic viscosity.
        wing_area_mm2: whole wing.
        blunt_mm2: drag area of wheels, struts, cooling (frontal area times its coefficient).
        leaks: share added for gaps, hinges, horns and seams (0.05 to 0.2: common practice, no
            source).

    Source: D. P. Raymer, Aircraft Design: A Conceptual Approach, chapter 12.
    """
    above_zero(wing_area_mm2=wing_area_mm2)
    not_negative(blunt_mm2=blunt_mm2, leaks=leaks)
    rubbed = sum(drag_area_mm2(item, speed_m_s, kinematic_m2_s) for item in items)
    return (rubbed * (1.0 + leaks) + blunt_mm2) / wing_area_mm2


def polar(zero_lift: float, aspect_ratio: float, efficiency: float) -> Polar:
    """Drag polar from drag without lift, and the span efficiency of the whole aircraft.

    Source: CD = CD0 + CL^2/(pi AR e); any aerodynamics text.
    """
    above_zero(aspect_ratio=aspect_ratio, efficiency=efficiency)
    return Polar(zero_lift, 1.0 / (math.pi * aspect_ratio * efficiency))
