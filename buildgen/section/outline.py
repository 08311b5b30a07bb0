"""The points of a file as one outline: put in order, closed, checked.

Points are (n, 3) here: x, y and the line of the file they stand in.
"""

from __future__ import annotations

from collections.abc import Callable

import numpy as np

from buildgen.problems import DesignError
from buildgen.section.curve import Array

Fault = Callable[[int, str, str], DesignError]

RESIDUAL = 0.001
"""A point of a good set lies nearer to the cubic through its neighbours [chord]."""
ZIGZAG = 8, 0.0001
"""So many points in a row on alternate sides, each so far off [chord], are no print error."""
TURN = 0.001
CROSSED = 1e-5


def ordered(points: Array, counts: tuple[int, int] | None) -> Array:
    """Upper edge, nose, lower edge; rows without an ordinate and exact repeats left out."""
    first = _first_block(points, counts)
    if first:
        blocks = [_clean(points[:first]), _clean(points[first:])]
        one, two = (b if b[0, 0] < b[-1, 0] else b[::-1] for b in blocks)
        points = np.vstack([one[::-1], two])
    else:
        points = _clean(points)
        if points[0, 0] < 0.5:
            end = _end_of_first(points)
            points = np.vstack([points[end::-1], points[:end:-1]])
    x, y = points[:, 0], points[:, 1]
    area = float(np.dot(x, np.roll(y, -1)) - np.dot(np.roll(x, -1), y))
    points = points if area > 0 else points[::-1]
    moved = np.abs(np.diff(points[:, :2], axis=0)).max(axis=1) > 1e-9
    return np.asarray(points[np.r_[True, moved]])


def _clean(points: Array) -> Array:
    return np.asarray(points[~np.isnan(points[:, 1])])


def _first_block(points: Array, counts: tuple[int, int] | None) -> int:
    """Number of rows in the first of two blocks; 0 where there is one block.

    Without counts a new block is seen by the leap from one end of the chord to the other.
    """
    if counts is not None:
        return counts[0]
    leap = np.abs(np.diff(points[:, 0]))
    at = int(leap.argmax()) + 1
    return at if leap[at - 1] > 0.5 and 3 <= at <= len(points) - 3 else 0


def _end_of_first(points: Array) -> int:
    """Row where the first surface of a walk that starts at the nose ends.

    A blunt edge is walked as a steep step: its first corner ends the surface.
    """
    end = int(points[:, 0].argmax())
    dx, dy = np.abs(points[end, :2] - points[end - 1, :2])
    return end - 1 if dy > 2 * dx else end


def closed(points: Array) -> tuple[Array, list[str]]:
    """With the last point that clean-up scripts take for a repeat of the first and drop."""
    for edge, other, whole in (
        (points[0], points[-1], [points, points[:1]]),
        (points[-1], points[0], [points[-1:], points]),
    ):
        if abs(edge[0] - 1) < 1e-6 and abs(edge[1]) < 1e-6 and other[0] < 1 - TURN:
            return np.vstack(whole), ["closed: the repeated last point was missing"]
    return points, []


def checked(points: Array, fault: Fault) -> list[str]:
    """What is unusual about an outline, in words; refuses what is none.

    Raises:
        DesignError: a surface is missing or turns back, or the two cross.
    """
    nose = int(points[:, 0].argmin())
    if nose < 2 or nose > len(points) - 3:
        raise fault(0, "one of the two surfaces is missing.",
                    "Give upper and lower surface, from the trailing edge round the nose.")
    upper, lower = points[nose::-1], points[nose:]
    for side in (upper, lower):
        back = np.maximum.accumulate(side[:, 0]) - side[:, 0]
        if back.max() > TURN:
            raise fault(int(side[int((back > TURN).argmax()), 2]),
                        "here x turns back: the surface would lie double.",
                        "Look for a digit or a row out of place.")
    _not_crossed(upper, lower, fault)
    return [*_datum(points, nose), *_rough(points)]


def _not_crossed(upper: Array, lower: Array, fault: Fault) -> None:
    rows = np.vstack([upper[1:], lower[1:]])
    rows = rows[rows[:, 0] <= min(upper[-1, 0], lower[-1, 0])]
    up, low = (np.interp(rows[:, 0], np.maximum.accumulate(s[:, 0]), s[:, 1])
               for s in (upper, lower))
    if (up - low).max() < 1e-4:
        raise fault(0, "both surfaces are the same line.", "Give upper and lower surface.")
    crossed = up - low < -CROSSED
    if crossed.any():
        row = rows[int((low - up).argmax())]
        raise fault(int(row[2]), f"the outline crosses itself near x = {row[0]:.3f}.",
                    "Look for a digit out of place.")


def _datum(points: Array, nose: int) -> list[str]:
    """Nothing is moved or turned; where the datum is unusual, say so."""
    x, y = points[nose, :2]
    notes = []
    if abs(x) > 0.002 or abs(y) > 0.01:
        notes.append(f"foremost point at ({x:.4f}, {y:.4f})")
    tail = (points[0, 1] + points[-1, 1]) / 2
    if abs(tail) > 0.005:
        notes.append(f"trailing edge at y = {tail:.4f}")
    return notes


def _rough(points: Array) -> list[str]:
    notes = []
    off = _residuals(points)
    k = int(np.abs(off).argmax())
    if abs(off[k]) > RESIDUAL:
        notes.append(f"rough: line {points[k, 2]:.0f}, x = {points[k, 0]:.3f}, lies "
                     f"{abs(off[k]):.4f} chord off its neighbours")
    run, start, longest = 0, 0, (0, 0)
    for k in range(1, len(off)):
        run = run + 1 if off[k] * off[k - 1] < 0 and abs(off[k]) > ZIGZAG[1] else 0
        start = k if run == 0 else start
        longest = max(longest, (run, start))
    if longest[0] >= ZIGZAG[0]:
        first = points[longest[1], 2]
        notes.append(f"zigzag: from line {first:.0f} on, {longest[0]} points in a row lie on "
                     "alternate sides")
    return notes


def _residuals(points: Array) -> Array:
    """Distance of each point from the cubic through its two neighbours on each side.

    0 for the two points at each end and for those near the nose, where no cubic in x fits.
    """
    off = np.zeros(len(points))
    for k in range(2, len(points) - 2):
        near = points[[k - 2, k - 1, k + 1, k + 2]]
        step = np.diff(near[:, 0])
        if near[:, 0].min() < 0.03 or np.any(step * step[0] <= 0):
            continue
        x = near[:, 0] - points[k, 0]
        off[k] = np.linalg.solve(np.vander(x, 4), near[:, 1])[-1] - points[k, 1]
    return off
