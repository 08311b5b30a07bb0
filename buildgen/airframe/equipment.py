"""Bought things on board, each a box in its place; movable ones keep their range."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, replace

import numpy as np

from buildgen.airframe.shop import Shop
from buildgen.design.schema import Equipment
from buildgen.part import Bought, Part
from buildgen.solid import Box, Pose

STEP = "Electrics"
SIGMA = 0.03


@dataclass(frozen=True, eq=False)
class Movable:
    """A part that may slide along x, and how far its middle may go."""

    part_id: str
    name: str
    range_mm: tuple[float, float]


def make_equipment(
    shop: Shop, level: Callable[[float], float]
) -> tuple[list[Part], list[Movable]]:
    """Every item as a part (two where mirrored), and those that may move.

    Args:
        level: z half way up the fuselage at x.
    """
    parts: list[Part] = []
    movable: list[Movable] = []
    for n, item in enumerate(shop.definition.equipment, start=1):
        part = _item(n, item, level)
        if item.mirrored:
            part = replace(part, id=f"E{n}R", name=f"{item.name}, right")
            parts += [part, part.mirrored(f"E{n}L", f"{item.name}, left")]
            continue
        parts.append(part)
        if item.range_mm is not None:
            low, high = sorted(item.range_mm)
            movable.append(Movable(part.id, item.name, (low, high)))
    return parts, movable


def _item(n: int, item: Equipment, level: Callable[[float], float]) -> Part:
    half = np.asarray(item.size_mm) / 2
    z = level(item.x_mm) if item.z_mm is None else item.z_mm
    sigma = SIGMA * item.mass_g if item.sigma_g is None else item.sigma_g
    box = Box(tuple(-half), tuple(half))
    order = item.name if not item.cells else (
        f"{item.name}, {item.cells} cells" + (
            f", {item.capacity_mah:g} mAh" if item.capacity_mah else "")
    )
    form = Bought(item.mass_g, sigma, box, order)
    pose = Pose(origin=np.array([item.x_mm, item.y_mm, z]))
    return Part(f"E{n}", item.name, item.kind, form, pose, STEP, f"equipment[{n}]",
                basis="catalogue")


def moved(part: Part, x_mm: float) -> Part:
    """The same item with its middle at x."""
    origin = part.pose.origin.copy()
    origin[0] = x_mm
    return replace(part, pose=Pose(part.pose.rotation, origin))
