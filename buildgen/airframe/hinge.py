"""Hinge lines in space: hinges at pitch, the bevel that a throw needs, the horn and its plate.

A surface that moves hangs on a straight line. Wings and tails give the line; what hangs on it
is made here once: leaf hinges with their slots, tape, horns cut from ply or bought.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from functools import cached_property
from typing import Literal, TypeAlias

import numpy as np
import shapely
from shapely.geometry import Point, Polygon, box

from buildgen.airframe.shop import Shop
from buildgen.part import Bought, Mark, Part
from buildgen.solid import Array, Box, Circle, Pose

At: TypeAlias = Literal["centre", "top", "bottom"]
"""Height of the hinge line in the surface: its middle, or one of its skins."""

GAP_MM = 0.5
LEAF_MM = (18.0, 12.0, 0.4)
"""A fibre leaf: across the line, along it, thick; common practice, no source."""
LEAF_G = 0.3
"""Mass of such a leaf; common practice, no source."""
TAPE_G_MM = 0.0012
"""Clear tape 19 mm wide, 60 g/m2; common practice, no source."""
HORN_G = 1.0
"""A moulded horn with backing plate; common practice, no source."""
HORN_HOLE_MM = 1.6
"""For a wire of 1.5 mm or the pin of a clevis; common practice, no source."""
TAB_MM = 8.0
"""Length of a ply horn's tab along the chord."""
ARM_MM = 7.0
"""Width of a horn's arm round its hole."""


@dataclass(frozen=True, eq=False)
class Horn:
    """Where a pushrod takes hold of a surface.

    Attributes:
        surface: name of the surface, with its side: "aileron, right".
        part: id of the moving part that carries it.
        id: of the horn itself.
        pivot_mm: (3,) of the pushrod's pin in the horn, the surface at rest.
        hinge_mm: (3,) of the hinge line abeam of it.
        axis: unit vector (3,) along the hinge line; a right-handed turn about it moves the
            trailing edge away from `side`.
        side: unit vector (3,) from the hinge to the pivot.
        radius_mm: of the pivot about the hinge line.
        throw_deg: (towards the side `up` of the surface, away from it), both positive.
        key: of the definition.
        driven_by: id of the servo beside it that has its own pushrod already; else empty.
    """

    surface: str
    part: str
    id: str
    pivot_mm: Array
    hinge_mm: Array
    axis: Array
    side: Array
    radius_mm: float
    throw_deg: tuple[float, float]
    key: str
    driven_by: str = ""

    def mirrored(self, id: str, part: str, surface: str, driven_by: str = "") -> Horn:
        """The horn of the other side of the aircraft."""
        flip = np.array([1.0, -1.0, 1.0])
        return Horn(surface, part, id, self.pivot_mm * flip, self.hinge_mm * flip,
                    -self.axis * flip, self.side * flip, self.radius_mm, self.throw_deg, self.key,
                    driven_by)


@dataclass(frozen=True, eq=False)
class HingeLine:
    """A straight hinge line from `start` to `end`; `aft` and `up` need only point that way.

    Attributes:
        aft: (3,) from the fixed surface to the moving one.
        up: (3,) out of the surface's upper (of a fin: starboard) side.
    """

    start: Array
    end: Array
    aft: Array
    up: Array

    @property
    def length_mm(self) -> float:
        return float(np.linalg.norm(self.end - self.start))

    @cached_property
    def axis(self) -> Array:
        return np.asarray((self.end - self.start) / self.length_mm)

    def frame(self, s_mm: float, lift_mm: float = 0.0) -> Pose:
        """Frame on the line: x aft, y up, z along it one way or the other."""
        x = self.aft - (self.aft @ self.axis) * self.axis
        y = np.cross(x, self.axis)
        y = y if y @ self.up > 0 else -y
        y = y / np.linalg.norm(y)
        return Pose.at(self.start + s_mm * self.axis + lift_mm * y, x, y)

    def stations(self, pitch_mm: float, least: int = 2) -> tuple[float, ...]:
        """Middles of hinges along the line: near both ends, at most the pitch apart."""
        inset = min(25.0, self.length_mm / 5)
        run = self.length_mm - 2 * inset
        count = max(least, 1 + int(np.ceil(run / pitch_mm - 0.05)))
        return tuple(float(s) for s in np.linspace(inset, self.length_mm - inset, count))


def bevel_mm(
    above_mm: float, below_mm: float, throw_deg: tuple[float, float]
) -> tuple[float, float]:
    """How far a moving nose goes back at its upper and its lower edge, to clear the throws.

    A face that leans back by the throw stands upright at full throw. Down, what lies below the
    hinge line comes forward; up, what lies above.

    Args:
        above_mm, below_mm: wood above and below the hinge line; 0 for a hinge in that skin.
        throw_deg: (up, down).
    """
    up, down = (float(np.tan(np.radians(t))) for t in throw_deg)
    return above_mm * up, below_mm * down


def leaves(
    line: HingeLine, stations: Sequence[float], id: str, name: str, step: str, key: str,
    lift_mm: float = 0.0,
) -> list[Part]:
    """One leaf hinge for each station, half in either surface, as solids that need slots."""
    chord, along, thick = (v / 2 for v in LEAF_MM)
    form = Bought(LEAF_G, 0.2 * LEAF_G, Box((-chord, -thick, -along), (chord, thick, along)),
                  f"fibre hinge, {LEAF_MM[0]:g} x {LEAF_MM[1]:g} mm")
    return [
        Part(f"{id}{n}", name, "hinge", form, line.frame(s, lift_mm), step, key)
        for n, s in enumerate(stations, start=1)
    ]


def tape(line: HingeLine, id: str, name: str, step: str, key: str) -> Part:
    """A tape hinge along the whole line: no solid, it lies on the covering."""
    mass = TAPE_G_MM * line.length_mm
    form = Bought(mass, 0.3 * mass, None, f"hinge tape, 19 mm wide, {line.length_mm:.0f} mm")
    return Part(id, name, "hinge tape", form, line.frame(line.length_mm / 2), step, key)


MARK_FROM_MM = 1.6
"""A slit's mark begins so far from the hinge line: engraving stays clear of the cut."""


def slit_marks(
    line: HingeLine, stations: Sequence[float], plate: Pose, thickness_mm: float
) -> tuple[Mark, ...]:
    """Lines on a sheet surface where its edge is slit for the leaves, across the hinge line."""
    found = []
    for s in stations:
        x, y, _ = plate.local(line.frame(s).origin)
        way = line.frame(s).rotation[:, 0] @ plate.rotation[:, :2]
        reach = LEAF_MM[0] / 2
        for sign in (-1, 1):
            near, far = (np.array([x, y]) + sign * way * r for r in (MARK_FROM_MM, reach))
            found.append(Mark(line=((near[0], near[1]), (far[0], far[1]))))
    return tuple(found)


# ---------------------------------------------------------------- horns


def horn_at(
    line: HingeLine, s_mm: float, radius_mm: float, side: Literal["up", "down"],
    throw_deg: tuple[float, float], id: str, part: str, surface: str, key: str,
    lift_mm: float = 0.0,
) -> Horn:
    """A horn whose pivot stands square over the hinge line.

    Args:
        side: on which face of the surface; "up" is where the line's `up` points.
        lift_mm: of the hinge line over the line's own points.
    """
    frame = line.frame(s_mm, lift_mm)
    way = frame.rotation[:, 1] * (1.0 if side == "up" else -1.0)
    return Horn(surface, part, id, frame.origin + radius_mm * way, frame.origin,
                np.cross(way, frame.rotation[:, 0]), way, radius_mm, throw_deg, key)


def horn_outline(
    radius_mm: float, near_mm: float, skin_mm: float, depth_mm: float, tab_mm: float = TAB_MM
) -> tuple[Polygon, tuple[Circle, ...]]:
    """A ply horn in its own frame: x aft of the hinge line, y out of the surface's face.

    Args:
        near_mm: x where the tab begins.
        skin_mm: y of the face on which the horn's shoulders stand.
        depth_mm: how deep the tab reaches into the surface, below the face.
    """
    far = near_mm + tab_mm
    head = Point(0.0, radius_mm).buffer(ARM_MM / 2)
    foot = box(near_mm - 1.5, skin_mm, far + 1.5, skin_mm + 3.0)
    arm = shapely.union_all([head, foot]).convex_hull
    arm = arm.intersection(box(-100.0, skin_mm, 400.0, 400.0))
    tab = box(near_mm, skin_mm - depth_mm, far, skin_mm + 0.5)
    whole = shapely.union_all([arm, tab])
    return whole, ((0.0, radius_mm, HORN_HOLE_MM / 2),)


def ply_horn(
    shop: Shop, horn: Horn, outline: Polygon, circles: tuple[Circle, ...], name: str,
    material: str, thickness_mm: float, step: str,
) -> Part:
    """The horn as a plate that stands across the hinge line, its thickness about the station."""
    aft = np.cross(horn.axis, horn.side)
    pose = Pose.at(horn.hinge_mm, aft, horn.side)
    half = shop.thickness(material, thickness_mm) / 2
    pose = Pose(pose.rotation, pose.origin - half * pose.rotation[:, 2])
    return shop.plate(horn.id, name, material, thickness_mm, outline, pose, step, horn.key,
                      circles=circles)


def bought_horn(horn: Horn, name: str, step: str) -> Part:
    """A moulded horn with its backing plate; its arm is left out of the dry fit."""
    form = Bought(HORN_G, 0.3 * HORN_G, None, "control horn with backing plate")
    return Part(horn.id, name, "horn", form, Pose(origin=horn.hinge_mm), step, horn.key)
