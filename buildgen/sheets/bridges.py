"""Bridges: short uncut places that hold a part in its sheet until the knife frees it."""

from __future__ import annotations

import numpy as np

from buildgen.solid import Array


def bridged(ring: Array, count: int, gap_mm: float) -> tuple[Array, ...]:
    """A closed ring cut in runs, with gaps in the middle of straight places.

    Bridges stand as evenly along the ring as its straight edges allow; where the nearest edge is
    shorter than the bridge they stand on the curve.

    Args:
        ring: (n, 2) without the repeated point.
        count: bridges; fewer where the ring is shorter than six of them each.
        gap_mm: length of path left uncut: the bridge's width and the beam's.

    Returns:
        As many runs as there are bridges, (n, 2) each.
    """
    closed = np.vstack([ring, ring[:1]])
    steps = np.linalg.norm(np.diff(closed, axis=0), axis=1)
    marks = np.concatenate([[0.0], np.cumsum(steps)])
    whole = float(marks[-1])
    count = min(count, int(whole / (6 * gap_mm)))
    if count < 1:
        return (closed,)
    middles = sorted(_middle(marks, whole * (k + 0.5) / count, gap_mm, whole / count)
                     for k in range(count))
    found = []
    for k, middle in enumerate(middles):
        start = middle + gap_mm / 2
        end = middles[(k + 1) % count] - gap_mm / 2 + (whole if k == count - 1 else 0.0)
        found.append(_run(closed, marks, start, end, whole))
    return tuple(found)


def _middle(marks: Array, wanted: float, gap: float, share: float) -> float:
    """Nearest place at the middle of a straight edge that holds the bridge; else as wanted."""
    lengths = np.diff(marks)
    middles = (marks[:-1] + marks[1:]) / 2
    # along a long edge the wanted place itself is as good as the middle
    inset = np.clip(lengths / 4, gap, 6 * gap)  # well away from the corners
    spots = np.clip(wanted, marks[:-1] + inset, marks[1:] - inset)
    spots = np.where(lengths > 2 * gap, spots, middles)
    away = np.where(lengths > 2 * gap, np.abs(spots - wanted), np.inf)
    best = int(np.argmin(away))
    return float(spots[best]) if away[best] < share / 3 else wanted


def _run(closed: Array, marks: Array, start: float, end: float, whole: float) -> Array:
    """The piece of a closed ring between two lengths along it."""
    twice = np.concatenate([marks, marks[1:] + whole])
    points = np.vstack([closed, closed[1:]])
    inner = points[(twice > start + 1e-6) & (twice < end - 1e-6)]
    ends = [[np.interp(at, twice, points[:, k]) for k in (0, 1)] for at in (start, end)]
    return np.vstack([ends[:1], inner, ends[1:]])
