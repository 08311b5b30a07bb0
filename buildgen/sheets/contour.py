"""What the beam follows: contours with kerf, as few vertices as the chord error allows."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from shapely.geometry import Point, Polygon

from buildgen.part import Part, Plate
from buildgen.problems import DesignError, Problem
from buildgen.sheets.letters import Stroke
from buildgen.sheets.thin import thinned
from buildgen.solid import Array, Circle

CHORD_ERROR_MM = 0.005
"""Between the beam's path and its curve, either way; half of what can be seen or felt."""
LEAST_EDGE_MM = 0.002
CLOSED_MM = 0.01
"""Half a closed notch's least width, and in mm2 its least area, that counts as one."""


@dataclass(frozen=True, eq=False)
class Contours:
    """One part's cuts in its own or the sheet's coordinates, beam path or nominal.

    Attributes:
        outside: (n, 2) closed ring without the repeated point, counter-clockwise.
        inside: such rings, clockwise.
        circles: true circles inside, (x, y, radius).
    """

    outside: Array
    inside: tuple[Array, ...]
    circles: tuple[Circle, ...]

    @property
    def length_mm(self) -> float:
        """What the beam travels while cutting."""
        rings = [self.outside, *self.inside]
        straight = sum(
            float(np.linalg.norm(np.diff(np.vstack([r, r[:1]]), axis=0), axis=1).sum())
            for r in rings
        )
        return straight + sum(2 * np.pi * r for _, _, r in self.circles)


def beam_path(part: Part, kerf_mm: float, chord_mm: float = CHORD_ERROR_MM) -> Contours:
    """The path of the beam's middle that leaves the nominal part.

    Args:
        chord_mm: how far the path may leave its curve; 0 keeps every point of the outline.

    Raises:
        DesignError: a hole or notch is too narrow for the beam, with its place.
    """
    assert isinstance(part.form, Plate)
    plate = part.form
    half = kerf_mm / 2
    grown = plate.outline.buffer(half, join_style="mitre", mitre_limit=3.0) if half else (
        plate.outline
    )
    closed = grown.buffer(-half, join_style="mitre", mitre_limit=3.0).difference(
        plate.outline.buffer(CLOSED_MM)
    )
    if not isinstance(grown, Polygon) or closed.area > CLOSED_MM:
        spot = (closed if closed.area > CLOSED_MM else plate.outline).representative_point()
        raise DesignError(_too_fine(part, kerf_mm, (spot.x, spot.y)))
    circles = []
    for x, y, r in plate.circles:
        if r <= half:
            raise DesignError(_too_fine(part, kerf_mm, (x, y)))
        circles.append((x, y, r - half))
    return Contours(
        _ring(grown.exterior.coords, False, chord_mm),
        tuple(_ring(i.coords, True, chord_mm) for i in grown.interiors),
        tuple(circles),
    )


def _too_fine(part: Part, kerf_mm: float, at: tuple[float, float]) -> Problem:
    return Problem(
        part.from_key, f"Part {part.id} has a hole or slot narrower than the beam of"
        f" {kerf_mm:g} mm at x = {at[0]:.1f}, y = {at[1]:.1f} mm of the part.",
        "Make the hole larger, or state a smaller kerf_mm if you measured it.",
    )


def _ring(coords: object, clockwise: bool, chord_mm: float) -> Array:
    """Thinned within the chord error, closed without a repeated point, no zero-length edge."""
    whole = Polygon(coords)
    points = np.asarray(whole.exterior.coords)[:-1]
    points = thinned(points, chord_mm) if chord_mm else points
    edges = np.linalg.norm(points - np.roll(points, 1, axis=0), axis=1)
    points = points[edges > LEAST_EDGE_MM]
    area = float(np.dot(points[:, 0], np.roll(points[:, 1], -1))
                 - np.dot(np.roll(points[:, 0], -1), points[:, 1]))
    return np.asarray(points[::-1] if (area < 0) != clockwise else points)


def moved_points(points: Array, x: float, y: float, angle_deg: float, flipped: bool) -> Array:
    """Points of a part where its placement puts them."""
    flat = np.asarray(points, float) * ((-1, 1) if flipped else (1, 1))
    a = np.radians(angle_deg)
    turn = np.array([[np.cos(a), np.sin(a)], [-np.sin(a), np.cos(a)]])
    return np.asarray(flat @ turn + (x, y))


def moved(c: Contours, x: float, y: float, angle_deg: float, flipped: bool) -> Contours:
    """Contours where a placement puts them."""
    def put(p: Array) -> Array:
        return moved_points(p, x, y, angle_deg, flipped)

    circles = []
    for cx, cy, r in c.circles:
        px, py = put(np.array([[cx, cy]]))[0]
        circles.append((float(px), float(py), r))
    return Contours(put(c.outside), tuple(put(i) for i in c.inside), tuple(circles))


def moved_strokes(
    strokes: list[Stroke], x: float, y: float, angle_deg: float, flipped: bool
) -> list[Array]:
    """Lettering where a placement puts it."""
    return [moved_points(np.array(s), x, y, angle_deg, flipped) for s in strokes]


def widest_spot(shape: Polygon) -> tuple[Point, float]:
    """Middle and radius of the largest circle inside a shape with holes."""
    from shapely import maximum_inscribed_circle

    line = maximum_inscribed_circle(shape, tolerance=0.2)
    return Point(line.coords[0]), float(line.length)


