"""Section: a smooth closed outline in unit chord, split at its nose."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, replace
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

Array = NDArray[np.float64]
DENSE = 3001
COARSE = 45
"""Below this many points a set is splined without overshoot (Akima), above with a cubic."""


def cosine(count: int) -> Array:
    """Fractions 0 to 1, dense at the nose."""
    return np.asarray(1 - np.cos(np.linspace(0, np.pi / 2, count)))


@dataclass(frozen=True, eq=False)
class Section:
    """An airfoil section in unit chord.

    Attributes:
        name: as asked for.
        source: the publication behind it.
        notes: what was noticed on reading: scaled, datum, gap.
        upper, lower: (n, 2) dense curves from the shared nose point to the trailing edge, x
            ascending.
    """

    name: str
    source: str
    upper: Array
    lower: Array
    notes: tuple[str, ...] = ()

    def contour(self, per_side: int = 121) -> Array:
        """Outline as (2 * per_side - 1, 2) points: upper edge, nose, lower edge.

        Each surface is sampled at cosine-spaced fractions of its own x range from the nose, dense
        at both ends, so that two sections sampled alike can be blended point by point. The nose is
        a vertex. 181 points a side stay within 0.012 mm of a section of 300 mm chord.
        """
        share = (1 - np.cos(np.linspace(0, np.pi, per_side))) / 2
        up, low = (_at(side, share) for side in (self.upper, self.lower))
        return np.vstack([up[::-1], low[1:]])

    @cached_property
    def trailing_edge_gap(self) -> float:
        """Distance between the two ends [chord]."""
        return float(np.linalg.norm(self.upper[-1] - self.lower[-1]))

    def with_trailing_edge(self, gap: float) -> Section:
        """At least this thick at the trailing edge [chord]; the wedge grows from the nose.

        The addition grows with the square of the chord fraction: nothing at the nose, a smooth
        join everywhere.
        """
        missing = gap - self.trailing_edge_gap
        if missing <= 0:
            return self
        note = f"trailing edge opened by {missing:.4f} chord"
        return replace(
            self, upper=_opened(self.upper, missing / 2), lower=_opened(self.lower, -missing / 2),
            notes=(*self.notes, note),
        )


def _at(side: Array, share: Array) -> Array:
    start, end = side[0, 0], side[-1, 0]
    x = start + share * (end - start)
    return np.column_stack([x, np.interp(x, side[:, 0], side[:, 1])])


def _opened(side: Array, by: float) -> Array:
    share = (side[:, 0] - side[0, 0]) / (side[-1, 0] - side[0, 0])
    return np.column_stack([side[:, 0], side[:, 1] + by * share**2])


def from_dense(name: str, source: str, points: Array, notes: tuple[str, ...] = ()) -> Section:
    """A section from a dense outline, upper edge first; it is split at its foremost point."""
    nose = int(points[:, 0].argmin())
    return Section(
        name, source, _ascending(points[nose::-1]), _ascending(points[nose:]), notes
    )


def _ascending(side: Array) -> Array:
    keep = np.r_[True, np.diff(np.maximum.accumulate(side[:, 0])) > 0]
    return side[keep]


def from_points(
    name: str, source: str, points: Array, notes: tuple[str, ...] = ()
) -> Section:
    """A section through published ordinates, upper edge to lower edge: (n, 2).

    A centripetal spline runs through every point, round the nose; a coarse table is splined by
    Akima's rule, which does not overshoot. The foremost point of the curve becomes the nose.
    """
    step = np.sqrt(np.linalg.norm(np.diff(points, axis=0), axis=1))
    t = np.concatenate([[0.0], np.cumsum(step)])
    # scipy takes most of a second to load: only sections from points need it
    from scipy.interpolate import Akima1DInterpolator, CubicSpline

    curve = Akima1DInterpolator(t, points) if len(points) < COARSE else CubicSpline(t, points)
    nose = _foremost(curve, t)
    half = cosine(DENSE)
    stations = np.concatenate([nose - (nose - t[0]) * half[::-1], nose + (t[-1] - nose) * half[1:]])
    return from_dense(name, source, np.asarray(curve(stations)), notes)


def _foremost(curve: Callable[[Array], Array], t: Array) -> float:
    """Parameter of the least x."""
    low, high = t[0], t[-1]
    for _ in range(6):
        grid = np.linspace(low, high, 2001)
        k = int(curve(grid)[:, 0].argmin())
        low, high = grid[max(k - 1, 0)], grid[min(k + 1, 2000)]
    return float((low + high) / 2)


def blend(a: Section, b: Section, fraction: float) -> Section:
    """Point by point between two sections, 0 being the first."""
    one, two = a.contour(DENSE), b.contour(DENSE)
    mixed = one * (1 - fraction) + two * fraction
    middle = DENSE - 1  # the nose
    return Section(
        f"{a.name} to {b.name} at {fraction:.3f}", f"{a.source}; {b.source}",
        mixed[middle::-1], mixed[middle:],
    )


@dataclass(frozen=True, slots=True)
class Figures:
    """What describes a section; all in chords."""

    thickness: float
    thickness_at: float
    camber: float
    camber_at: float
    nose_radius: float
    area: float
    trailing_edge_gap: float


def figures(section: Section) -> Figures:
    """Thickness and camber measured across the chord line, nose radius by a fitted circle."""
    x = np.linspace(0.0, 1.0, 4001)
    up, low = (_at(side, x) for side in (section.upper, section.lower))
    deep, mean = up[:, 1] - low[:, 1], (up[:, 1] + low[:, 1]) / 2
    tail = (section.upper[-1] + section.lower[-1]) / 2
    chord = section.upper[0] + np.outer(x, tail - section.upper[0])
    camber = mean - chord[:, 1]
    k, c = int(deep.argmax()), int(np.abs(camber).argmax())
    outline = np.vstack([section.upper[::-1], section.lower[1:]])
    px, py = outline.T
    area = abs(float(np.dot(px, np.roll(py, -1)) - np.dot(np.roll(px, -1), py))) / 2
    return Figures(
        float(deep[k]), float(up[k, 0]), float(camber[c]), float(up[c, 0]),
        _nose_radius(section), area, section.trailing_edge_gap,
    )


def _nose_radius(section: Section) -> float:
    """Radius of the circle through the curve near the nose, least squares on 0.2 % of chord."""
    near = [s[s[:, 0] - s[0, 0] < 0.002] for s in (section.upper, section.lower)]
    points = np.vstack([near[0], near[1][1:]])
    if len(points) < 5:
        return 0.0
    system = np.column_stack([2 * points, np.ones(len(points))])
    solved, *_ = np.linalg.lstsq(system, (points**2).sum(axis=1), rcond=None)
    return float(np.sqrt(solved[2] + solved[0] ** 2 + solved[1] ** 2))
