"""Aircraft without a tail behind: neutral point of flying wings and canards, tip fins' volume."""

from __future__ import annotations

from buildgen.aero import planform, stability
from buildgen.aero.lattice import Flow, Reference, lattice_of, loads
from buildgen.aero.lattice_surface import Surface, stations_of
from buildgen.aero.planform import Panel
from buildgen.airframe import Airframe
from buildgen.airframe.members.tip_fins import tip_fins
from buildgen.airframe.tail import SheetTail

BASIS = ("wing alone by a vortex lattice (Katz and Plotkin, 12.1): slope of the moment over that"
         " of the lift; body and propellers left out")
CANARD_BASIS = ("wing and foreplane, each in the other's wash, by a vortex lattice (Katz and"
                " Plotkin, 12.1); body and propellers left out")


def wing_neutral_x_mm(plan: tuple[Panel, ...]) -> float:
    """x of the point about which the wing's moment does not change with its lift."""
    return _neutral_x_mm(plan, (Surface("wing", stations_of(plan), spanwise=20),))


def with_foreplane_x_mm(plan: tuple[Panel, ...], fore: SheetTail) -> float:
    """The same of wing and foreplane together, each in the wash of the other."""
    root = (fore.tailplane_le_mm, 0.0, fore.level_mm + fore.thick_mm / 2)
    return _neutral_x_mm(plan, (
        Surface("wing", stations_of(plan), spanwise=20),
        Surface("foreplane", stations_of((fore.tailplane.panel,), root), spanwise=12),
    ))


def _neutral_x_mm(plan: tuple[Panel, ...], surfaces: tuple[Surface, ...]) -> float:
    mean = planform.mean_aerodynamic_chord(plan)
    reference = Reference(2 * planform.area_mm2(plan), mean.length_mm,
                          2 * sum(p.rise_mm[0] for p in plan), mean.quarter_x_mm)
    lattice = lattice_of(surfaces)
    one, two = (loads(lattice, reference, Flow(a)) for a in (0.0, 4.0))
    slope = (two.c_pitch - one.c_pitch) / (two.c_lift - one.c_lift)
    return mean.quarter_x_mm - slope * mean.length_mm


def fin_volume(frame: Airframe) -> float:
    """Of both tip fins: their area by its arm behind the wing's mean quarter chord."""
    fins = tip_fins(frame.shop, frame.wing)
    plan = frame.wing.plan
    if fins is None:
        return 0.0
    arm = fins.middle_x_mm - planform.mean_aerodynamic_chord(plan).quarter_x_mm
    if arm <= 0:
        return 0.0
    return stability.tail_volume(2 * fins.area_mm2, arm, 2 * planform.area_mm2(plan),
                                 2 * sum(p.rise_mm[0] for p in plan))
