"""Corner relief: small bites that let a square corner sit where the beam leaves a round one."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
from shapely.geometry import Point, Polygon
from shapely.geometry.polygon import orient

from buildgen.design.schema import Laser
from buildgen.part import Part, Plate
from buildgen.solid import Array

TURN_FROM_DEG, TURN_TO_DEG = 60.0, 120.0
QUARTER = 12


def relieved(part: Part, laser: Laser) -> Part:
    """The part with its inner corners relieved as the definition asks; itself where it does not."""
    if laser.relief == "none" or not isinstance(part.form, Plate):
        return part
    plate = part.form
    outline = relieved_outline(plate.outline, laser.relief_mm / 2, laser.relief == "t-bone")
    kept = outline if _clear(outline, plate) else plate.outline
    return replace(part, form=replace(plate, outline=kept))


def relieved_outline(outline: Polygon, radius_mm: float, one_wall: bool) -> Polygon:
    """The outline with a bite at each inner corner of two straight edges.

    A dog-bone's circle runs through the corner and bites both walls a little; a T-bone's
    (`one_wall`) bites the shorter wall only, and the longer keeps its whole bearing face. Corners
    where the bite would part the outline stay as they are.
    """
    whole = orient(outline)
    found = whole
    for ring in (whole.exterior, *whole.interiors):
        for middle in _bites(np.asarray(ring.coords)[:-1], radius_mm, one_wall):
            cut = found.difference(Point(*middle).buffer(radius_mm, QUARTER))
            if isinstance(cut, Polygon) and len(cut.interiors) == len(found.interiors):
                found = cut
    return found


def _bites(ring: Array, radius: float, one_wall: bool) -> list[tuple[float, float]]:
    """Middles of the bites along a ring that keeps the material on its left."""
    back, on = np.roll(ring, 1, axis=0) - ring, np.roll(ring, -1, axis=0) - ring
    found = []
    for p, a, b in zip(ring, back, on, strict=True):
        la, lb = float(np.hypot(*a)), float(np.hypot(*b))
        if min(la, lb) < 2 * radius:
            continue
        turn = np.degrees(np.arctan2(-a[0] * b[1] + a[1] * b[0], -(a @ b)))
        if not TURN_FROM_DEG <= -turn <= TURN_TO_DEG:
            continue
        way = (a / la if la <= lb else b / lb) if one_wall else a / la + b / lb
        middle = p + radius * way / np.hypot(*way)
        found.append((float(middle[0]), float(middle[1])))
    return found


def _clear(outline: Polygon, plate: Plate) -> bool:
    """Whether the bites stay clear of the plate's round holes."""
    return all(outline.boundary.distance(Point(x, y)) > r for x, y, r in plate.circles)
