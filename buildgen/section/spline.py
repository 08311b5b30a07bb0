"""A smooth curve through published points, round the nose."""

from __future__ import annotations

from collections.abc import Callable

import numpy as np

from buildgen.section.curve import DENSE, Array, Section, cosine, from_dense

EMPTY_NOSE = 0.0025
"""A printed table has its nose at station 0 and nothing up to this station."""
LEANING = np.linspace(0.0, 0.06, 121)
"""Roots of how far a curve may reach ahead of station 0: up to 0.36 % of the chord."""


def from_points(
    name: str, source: str, points: Array, notes: tuple[str, ...] = ()
) -> Section:
    """A section through published points; the foremost point of the curve becomes its nose.

    A dense set is splined over the root of its steps (centripetal). A printed table has nothing
    between its nose and 1.25 % of the chord: there every nose is close to a parabola, so it is
    splined over the root of x instead. Held against the equations of the NACA families, printed
    tables come within 0.06 % of the chord that way, 0.2 to 0.4 % by a centripetal spline.

    Args:
        name: as it shall be shown.
        source: the publication.
        points: (n, 2), n at least 7, unit chord, upper edge round the nose to the lower edge.
        notes: what was noticed on reading.
    """
    nose = int(points[:, 0].argmin())
    if _is_table(points, nose):
        return from_dense(name, source, _over_root_of_x(points, nose), notes)
    return from_dense(name, source, _centripetal(points), notes)


def _is_table(points: Array, nose: int) -> bool:
    if not 2 <= nose <= len(points) - 3:
        return False
    return bool(
        abs(points[nose, 0]) < 1e-9
        and min(points[nose - 1, 0], points[nose + 1, 0]) > EMPTY_NOSE
        and np.all(np.diff(points[: nose + 1, 0]) < 0) and np.all(np.diff(points[nose:, 0]) > 0)
    )


def _centripetal(points: Array) -> Array:
    # scipy takes most of a second to load: only sections from points need it
    from scipy.interpolate import CubicSpline

    step = np.sqrt(np.linalg.norm(np.diff(points, axis=0), axis=1))
    t = np.concatenate([[0.0], np.cumsum(step)])
    curve = CubicSpline(t, points)
    nose = _foremost(curve, t)
    return np.asarray(curve(_stations(t[0], nose, t[-1])))


def _stations(first: float, nose: float, last: float) -> Array:
    half = cosine(DENSE)
    return np.concatenate([nose - (nose - first) * half[::-1], nose + (last - nose) * half[1:]])


def _foremost(curve: Callable[[Array], Array], t: Array) -> float:
    """Parameter of the least x."""
    low, high = t[0], t[-1]
    for _ in range(6):
        grid = np.linspace(low, high, 2001)
        k = int(curve(grid)[:, 0].argmin())
        low, high = grid[max(k - 1, 0)], grid[min(k + 1, 2000)]
    return float((low + high) / 2)


def _over_root_of_x(points: Array, nose: int) -> Array:
    """Dense outline: x = start + s^2, y a cubic spline in s.

    The nose that a table puts at station 0 is the end of its mean line; the curve of a cambered
    section reaches a little farther ahead, above it. How far is not printed: it is taken where the
    spline has the least jumps in its third derivative.
    """
    from scipy.interpolate import CubicSpline

    camber = points[nose - 1, 1] + points[nose + 1, 1] - 2 * points[nose, 1]
    tried = LEANING if camber >= 0 else -LEANING
    rough = [
        float((np.diff(CubicSpline(_roots(points, nose, at), points[:, 1]).c[0]) ** 2).sum())
        for at in tried
    ]
    at = float(tried[int(np.argmin(rough))])
    s = _roots(points, nose, at)
    grid = _stations(s[0], 0.0, s[-1])
    y = np.asarray(CubicSpline(s, points[:, 1])(grid))
    return np.column_stack([points[nose, 0] - at**2 + grid**2, y])


def _roots(points: Array, nose: int, at: float) -> Array:
    """Signed roots of the distance from the start, less than 0 above; the nose stands at `at`."""
    s: Array = np.sqrt(points[:, 0] - points[nose, 0] + at**2)
    s[:nose] *= -1
    s[nose] = at
    return s
