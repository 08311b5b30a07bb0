"""The order of cutting: nothing is cut after the piece of sheet that holds it has dropped out."""

from __future__ import annotations

from collections.abc import Sequence

import shapely
from shapely.geometry import Polygon

COLUMN_MM = 60.0
"""Width of the columns in which the beam works its way along; common practice, no source."""


def cutting_order(shapes: Sequence[Polygon], names: Sequence[str]) -> list[int]:
    """Indices of placed parts in the order of cutting.

    Columns from left to right, each from the other end than the one before: the beam travels
    little and heat spreads. A part that lies in the opening of another is cut before that
    opening is, for with it the part's own piece of sheet would drop out.

    Args:
        shapes: where the parts lie, mm.
        names: to order those that lie alike.
    """
    spots = [shape.bounds for shape in shapes]
    columns = [int(b[0] // COLUMN_MM) for b in spots]
    plain = sorted(
        range(len(shapes)),
        key=lambda i: (columns[i], spots[i][1] * (1 if columns[i] % 2 == 0 else -1), names[i]),
    )
    guests = _guests(shapes)
    found: list[int] = []
    seen: set[int] = set()

    def visit(i: int) -> None:
        if i in seen:
            return
        seen.add(i)
        for guest in sorted(guests[i], key=plain.index):
            visit(guest)
        found.append(i)

    for i in plain:
        visit(i)
    return found


def guests_of(shapes: Sequence[Polygon]) -> set[int]:
    """Those of some placed parts that lie in the opening of another."""
    return {k for inside in _guests(shapes) for k in inside}


def _guests(shapes: Sequence[Polygon]) -> list[list[int]]:
    """For each part those that lie in its openings."""
    whole = [Polygon(s.exterior) for s in shapes]
    tree = shapely.STRtree(shapes)
    return [
        [int(k) for k in tree.query(w, predicate="contains") if int(k) != i]
        if shapes[i].interiors else []
        for i, w in enumerate(whole)
    ]
