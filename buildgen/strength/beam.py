"""A half wing as a cantilever: span load, shear, bending, deflection."""

from __future__ import annotations

import math
from collections.abc import Sequence

import numpy as np
from numpy.typing import ArrayLike, NDArray

from buildgen.aero.bounds import above_zero

Floats = NDArray[np.float64]


def schrenk_n_mm(
    y_mm: ArrayLike, chord_mm: ArrayLike, semispan_mm: float, half_lift_n: float
) -> Floats:
    """Load for each mm of span [N/mm] at stations of one half wing.

    Half way between the wing's own chords and those of an ellipse of its area and span.

    Args:
        y_mm: (n,) stations from the middle, rising, 0 to the semispan.
        chord_mm: (n,) there.
        half_lift_n: of this half.

    Source: O. Schrenk, A simple approximation method for obtaining the spanwise lift
        distribution, NACA TM 948 (1940).
    """
    y, chord = np.asarray(y_mm, float), np.asarray(chord_mm, float)
    above_zero(semispan_mm=semispan_mm)
    area = float(_outboard(y, chord)[0])
    round_ = 4 * area / (math.pi * semispan_mm) * np.sqrt(
        np.clip(1 - (y / semispan_mm) ** 2, 0, 1))
    both = (chord + round_) / 2
    return np.asarray(half_lift_n * both / float(_outboard(y, both)[0]))


def from_tip(y_mm: ArrayLike, load_n_mm: ArrayLike) -> tuple[Floats, Floats]:
    """Shear [N] and bending moment [N mm] at each station of a cantilever under a line load.

    Source: equilibrium; trapezia between the stations.
    """
    y, load = np.asarray(y_mm, float), np.asarray(load_n_mm, float)
    shear = _outboard(y, load)
    return shear, _outboard(y, shear)


def _outboard(y: Floats, values: Floats) -> Floats:
    """Integral from each station to the tip."""
    pieces = (values[1:] + values[:-1]) / 2 * np.diff(y)
    return np.append(np.cumsum(pieces[::-1])[::-1], 0.0)


def point_loads(
    y_mm: ArrayLike, at_mm: Sequence[float], force_n: Sequence[float]
) -> tuple[Floats, Floats]:
    """Shear [N] and bending moment [N mm] at each station of forces at places of the span."""
    y = np.asarray(y_mm, float)[:, None]
    at, force = np.asarray(at_mm, float)[None], np.asarray(force_n, float)[None]
    arm = np.clip(at - y, 0.0, None)
    return np.where(at > y, force, 0.0).sum(axis=1), (force * arm).sum(axis=1)


def deflection_mm(y_mm: ArrayLike, moment_n_mm: ArrayLike, stiffness_n_mm2: ArrayLike) -> Floats:
    """Deflection [mm] at each station of a cantilever held at the first one.

    Source: w'' = M/(E I), integrated twice from the root.
    """
    y = np.asarray(y_mm, float)
    bent = np.asarray(moment_n_mm, float) / np.asarray(stiffness_n_mm2, float)
    steps = np.diff(y)
    slope = np.append(0.0, np.cumsum((bent[1:] + bent[:-1]) / 2 * steps))
    # Within a step the slope is a parabola where the curvature is a line.
    rise = slope[:-1] * steps + steps**2 * (2 * bent[:-1] + bent[1:]) / 6
    return np.append(0.0, np.cumsum(rise))
