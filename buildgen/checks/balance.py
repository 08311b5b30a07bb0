"""Weights and balance of the kit: sums over its parts, neutral point, target, where things go."""

from __future__ import annotations

import math
from dataclasses import dataclass, replace

import numpy as np

from buildgen.aero import planform, stability
from buildgen.aero.balance import (
    Weighed,
    ballast_mass_g,
    centre_of_mass,
    inertia_about_g_mm2,
    move_to_balance_mm,
    uncertainty_mm,
)
from buildgen.airframe import Airframe
from buildgen.airframe.equipment import moved
from buildgen.checks import tailless
from buildgen.checks.report import Balance, Ballast, GroupRow, Movable
from buildgen.part import Kit, Part
from buildgen.solid import Array

TAIL_SPEED_RATIO = 0.9
"""Dynamic pressure at a tail behind a body over that of the stream; common practice: 0.85-0.95."""
PLACE_SIGMA_MM = 1.0
"""A built part stands within this of its drawn place; common practice, no source."""


@dataclass(frozen=True, slots=True)
class Neutral:
    """The neutral point and what it was found from."""

    x_mm: float | None
    mac_mm: float
    mac_le_x_mm: float
    span_mm: float
    area_mm2: float
    tail_volume: float
    fin_volume: float
    basis: str


def neutral_point(frame: Airframe) -> Neutral:
    """Stick-fixed neutral point of wing and tail with downwash.

    Slopes by Helmbold and Polhamus, downwash by DATCOM, lifts balanced between the aerodynamic
    centres (Etkin and Reid); the wing's centre at a quarter of its mean chord.
    """
    plan = frame.wing.plan
    mean = planform.mean_aerodynamic_chord(plan)
    area = 2 * planform.area_mm2(plan)
    span = 2 * sum(p.rise_mm[0] for p in plan)
    if frame.tail is None:
        return Neutral(tailless.wing_neutral_x_mm(plan), mean.length_mm, mean.le_x_mm, span, area,
                       0.0, tailless.fin_volume(frame), tailless.BASIS)
    tail = frame.tail
    if tail.given.arm_mm < 0:
        return Neutral(tailless.with_foreplane_x_mm(plan, tail), mean.length_mm, mean.le_x_mm,
                       span, area, 0.0, tailless.fin_volume(frame), tailless.CANARD_BASIS)
    half = (tail.tailplane.panel,)
    tail_area = tail.level_area_mm2
    arm = tail.given.arm_mm
    aspect = planform.aspect_ratio(plan)
    craft = stability.WingAndTail(
        stability.lift_slope_per_rad(aspect, planform.sweep_deg(plan, 0.5)),
        0.25, 0.0,
        stability.lift_slope_per_rad(planform.aspect_ratio(half), planform.sweep_deg(half, 0.5)),
        stability.tail_volume(tail_area, arm, area, mean.length_mm),
        stability.tail_downwash_slope(
            aspect, planform.taper_ratio(plan), planform.sweep_deg(plan, 0.25), arm / span,
            max(-1.0, min(1.0, tail.height_mm / span)),
        ),
        TAIL_SPEED_RATIO,
    )
    where = stability.neutral_point_between_centres(craft, tail_area / area)
    return Neutral(
        mean.le_x_mm + where * mean.length_mm, mean.length_mm, mean.le_x_mm, span, area,
        craft.tail_volume,
        stability.tail_volume(tail.upright_area_mm2, arm, area, span),
        "wing and tail with downwash: slopes Helmbold-Polhamus (TN 3911), downwash DATCOM 4.4.1,"
        f" balance of lifts Etkin and Reid{tail.area_basis}; body and propellers left out",
    )


def target_mm(frame: Airframe, neutral: Neutral) -> tuple[float, float]:
    """Foremost and aftmost CG for the wanted static margin and its band."""
    wanted = frame.shop.definition.balance
    x = neutral.x_mm or neutral.mac_le_x_mm
    return stability.cg_range_mm(
        x, neutral.mac_mm,
        (wanted.static_margin - wanted.band, wanted.static_margin + wanted.band),
    )


def _arrays(kit: Kit) -> tuple[Array, Array, Array]:
    masses = np.array([p.mass_g for p in kit.parts])
    sigmas = np.array([p.mass_sigma_g for p in kit.parts])
    return masses, sigmas, np.array([p.centroid_mm for p in kit.parts])


def balanced(kit: Kit, frame: Airframe) -> Kit:
    """The kit with its movable items where the balance wants them, in their order, in range."""
    neutral = neutral_point(frame)
    low, high = target_mm(frame, neutral)
    wanted = (low + high) / 2
    for item in frame.movable:
        masses, _, places = _arrays(kit)
        total, centre = centre_of_mass(masses, places)
        part = kit.by_id[item.part_id]
        here = float(part.centroid_mm[0])
        way = move_to_balance_mm(Weighed(total, float(centre[0])), part.mass_g, wanted)
        x = min(max(here + way, item.range_mm[0]), item.range_mm[1])
        x = round(x, 0) if item.range_mm[0] <= round(x, 0) <= item.range_mm[1] else x
        kit = _with(kit, moved(part, x))
    return kit


def _with(kit: Kit, part: Part) -> Kit:
    return replace(kit, parts=tuple(part if p.id == part.id else p for p in kit.parts))


def balance_of(kit: Kit, frame: Airframe) -> Balance:
    """Weights and balance of a kit whose movable items stand where they shall."""
    neutral = neutral_point(frame)
    masses, sigmas, places = _arrays(kit)
    total, centre = centre_of_mass(masses, places)
    x, y, z = (float(v) for v in centre)
    tensor = inertia_about_g_mm2(
        masses, places, np.array([p.inertia_g_mm2 for p in kit.parts]), centre
    )
    target = target_mm(frame, neutral)
    items = tuple(
        Movable(kit.by_id[m.part_id].name, float(kit.by_id[m.part_id].centroid_mm[0]), m.range_mm)
        for m in frame.movable
    )
    margin = None
    if neutral.x_mm is not None:
        margin = (neutral.x_mm - x) / neutral.mac_mm
    return Balance(
        float(total), float(np.sqrt((sigmas**2).sum())), (x, y, z),
        uncertainty_mm(masses, sigmas, places[:, 0], PLACE_SIGMA_MM),
        (float(tensor[0, 0]), float(tensor[1, 1]), float(tensor[2, 2]), float(tensor[0, 2])),
        neutral.mac_mm, neutral.mac_le_x_mm, neutral.x_mm, margin, target, items,
        _ballast(frame, Weighed(float(total), x), target), _table(kit), neutral.span_mm,
        neutral.area_mm2,
    )


def _ballast(frame: Airframe, whole: Weighed, target: tuple[float, float]) -> tuple[Ballast, ...]:
    """What to add, and where, when the movable items alone do not do it."""
    if target[0] - 1e-9 <= whole.at_mm <= target[1] + 1e-9:
        return ()
    ends = frame.body.ends_mm if frame.body else (-50.0, frame.wing.panels[0].root.chord_mm)
    given = frame.shop.definition.balance
    nose = given.nose_ballast_x_mm if given.nose_ballast_x_mm is not None else ends[0] + 10
    tail = given.tail_ballast_x_mm if given.tail_ballast_x_mm is not None else ends[1] - 10
    heavy_tail = whole.at_mm > target[1]
    goal, place = (target[1], nose) if heavy_tail else (target[0], tail)
    mass = ballast_mass_g(whole, goal, place)
    return (Ballast("ballast in the nose" if heavy_tail else "ballast in the tail",
                    math.ceil(mass), place),)


def _table(kit: Kit) -> tuple[GroupRow, ...]:
    rows = []
    for step in kit.steps:
        parts = [p for p in kit.parts if p.step == step]
        mass = sum(p.mass_g for p in parts)
        sigma = math.sqrt(sum(p.mass_sigma_g**2 for p in parts))
        arm = sum(p.mass_g * float(p.centroid_mm[0]) for p in parts) / mass if mass else 0.0
        rows.append(GroupRow(step, mass, sigma, arm))
    return tuple(rows)
