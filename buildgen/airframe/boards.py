"""Boards: what is pinned and glued flat on one full-size drawing, and how it is looked at."""

from __future__ import annotations

from collections.abc import Iterable, Iterator

import numpy as np

from buildgen.airframe.surface import AFT, Panel, WingShape
from buildgen.part import Board, Cover, Part
from buildgen.solid import Array, triangles

LEAST_MM = 1.0
"""A part that reaches so little into a panel is not drawn with it."""
UP = np.array([0.0, 0.0, 1.0])
ACROSS = np.array([0.0, 1.0, 0.0])


def make_boards(
    wing: WingShape, wing_parts: Iterable[Part], body: Iterable[Part], tail: Iterable[Part]
) -> tuple[Board, ...]:
    """One board for each panel and side, one for the fuselage from the left, two for the tail."""
    solids = [(p, _corners(p)) for p in wing_parts if not p.tool]
    drawn = [(p, c) for p, c in solids if c is not None]
    found = [b for panel in wing.panels for sign in (1, -1) for b in _panel(panel, sign, drawn)]
    for name, parts, right, up in (
        ("fuselage, from the left", body, AFT, UP),
        ("fuselage, from above", body, AFT, ACROSS),
        ("tail, from above", tail, ACROSS, -AFT),
        ("tail, from the left", tail, AFT, UP),
    ):
        ids = tuple(p.id for p in parts if _corners(p) is not None)
        if ids:
            found.append(Board(name, _row(right), _row(up), ids))
    return tuple(found)


def _panel(panel: Panel, sign: int, drawn: list[tuple[Part, Array]]) -> Iterator[Board]:
    """Along the panel and its chord, so that lengths are true in spite of dihedral."""
    mirror = np.array([1.0, sign, 1.0])
    along, root = panel.along * mirror, panel.root.nose * mirror
    ids = []
    for part, corners in drawn:
        reach = (corners - root) @ along
        inside = min(reach.max(), panel.length_mm) - max(reach.min(), 0.0)
        own_side = (corners[:, 1] * sign).max() > LEAST_MM
        thin = reach.max() - reach.min() < 2 * LEAST_MM
        middle = 0.0 <= (reach.max() + reach.min()) / 2 <= panel.length_mm
        if own_side and (inside > LEAST_MM or (thin and middle)):
            ids.append(part.id)
    side = "right" if sign > 0 else "left"
    if ids:
        # Starboard is to the right on both sides: on port the panel runs the other way.
        start = float(root @ along) * sign
        ends = sorted((start, start + sign * panel.length_mm))
        yield Board(f"wing, panel {panel.index + 1} {side}", _row(along * sign), _row(-AFT),
                    tuple(ids), (ends[0], ends[1]))


def _corners(part: Part) -> Array | None:
    if isinstance(part.form, Cover) or part.solid is None or part.solid.is_empty():
        return None
    return triangles(part.solid)[0]


def _row(v: Array) -> tuple[float, float, float]:
    x, y, z = (float(c) for c in v)
    return x, y, z
