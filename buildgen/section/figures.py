"""What describes a section in numbers."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from buildgen.section.curve import Array, Section

NOSE_SHARE = 0.01
"""Share of the chord that the nose radius is fitted on."""
LEVEL = 0.005
"""A trailing edge this near the axis counts as being on it."""


@dataclass(frozen=True, slots=True)
class Figures:
    """Measures of a section, all in chords (area in chord squared).

    Attributes:
        thickness, thickness_at: the greatest, across the datum, and its station.
        camber, camber_at: the greatest distance of the mean line from the chord line; negative
            where it sags.
        nose_radius: of the circle that osculates the foremost point; 0 where there is none.
        area: enclosed, the edge closed by a straight line.
        trailing_edge_gap: between the two ends.
    """

    thickness: float
    thickness_at: float
    camber: float
    camber_at: float
    nose_radius: float
    area: float
    trailing_edge_gap: float


def figures(section: Section) -> Figures:
    """Measure a section."""
    upper, lower = section.upper, section.lower
    x = np.linspace(upper[0, 0], min(upper[-1, 0], lower[-1, 0]), 4001)
    up, low = (np.interp(x, side[:, 0], side[:, 1]) for side in (upper, lower))
    radius = nose_radius(section)
    deep, camber = up - low, (up + low) / 2 - _chord_line(section, x, radius)
    k, c = int(deep.argmax()), int(np.abs(camber).argmax())
    return Figures(
        float(deep[k]), float(x[k]), float(camber[c]), float(x[c]),
        radius, _area(section), section.trailing_edge_gap,
    )


def _chord_line(section: Section, x: Array, radius: float) -> Array:
    """Ordinates of the chord line.

    Published camber is told from the axis that the ordinates stand on. On sections of another
    datum (flat bottom) the line from the foremost point to the middle of the edge takes its place.
    """
    nose, tail = section.upper[0], (section.upper[-1] + section.lower[-1]) / 2
    if np.hypot(*nose) <= max(radius, 1e-4) and abs(tail[1]) < LEVEL:
        return np.zeros_like(x)
    return np.asarray(nose[1] + (x - nose[0]) / (tail[0] - nose[0]) * (tail[1] - nose[1]))


def _area(section: Section) -> float:
    x, y = np.vstack([section.upper[::-1], section.lower[1:]]).T
    return abs(float(np.dot(x, np.roll(y, -1)) - np.dot(np.roll(x, -1), y))) / 2


def nose_radius(section: Section) -> float:
    """Radius of curvature at the foremost point [chord].

    Near it y = y0 + a s + b s^2 + ..., s being the root of the distance aft: the radius is a^2/2.
    a is the mean of both surfaces, each fitted on 1 % of the chord.
    """
    slopes = []
    for side, sign in ((section.upper, 1.0), (section.lower, -1.0)):
        s = np.sqrt(side[:, 0] - side[0, 0])
        near = s <= np.sqrt(NOSE_SHARE)
        if np.count_nonzero(near) < 8:
            return 0.0
        powers = np.column_stack([s[near] ** n for n in (1, 2, 3, 4)])
        solved, *_ = np.linalg.lstsq(powers, side[near, 1] - side[0, 1], rcond=None)
        slopes.append(sign * solved[0])
    return float(np.mean(slopes)) ** 2 / 2
