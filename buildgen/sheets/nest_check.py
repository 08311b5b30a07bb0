"""Is a layout sound? The true outlines decide, never the grid that found it."""

from __future__ import annotations

from collections.abc import Sequence

import shapely
from shapely import STRtree
from shapely.geometry import Polygon

TOLERANCE_MM = 0.001


def layout_is_sound(
    stock: Polygon,
    parts: Sequence[Polygon],
    fixed: Sequence[Polygon],
    spacing_mm: float,
    margin_mm: float,
) -> bool:
    """Whether parts keep the spacing to each other and to fixed ones, and the margin to the edge.

    Args:
        stock: outline of the sheet.
        parts: outlines where they lie, all in sheet coordinates (mm).
        fixed: outlines that were there before; their own margins are not judged.
        spacing_mm: least gap between two outlines, kept to within 0.001 mm.
        margin_mm: least gap to the edge of the sheet and of its holes, likewise.
    """
    edge = stock.boundary
    shapely.prepare(stock)
    for part in parts:
        if not stock.buffer(TOLERANCE_MM).covers(part):
            return False
        if edge.distance(part.boundary) < margin_mm - TOLERANCE_MM:
            return False
    return not meeting_pairs(parts, fixed, spacing_mm)


def meeting_pairs(
    parts: Sequence[Polygon], fixed: Sequence[Polygon], spacing_mm: float
) -> list[tuple[int, int]]:
    """Pairs closer than the spacing, as indices into parts followed by fixed; i < j, sorted.

    Two fixed parts are never a pair.
    """
    everything = [*parts, *fixed]
    if not everything:
        return []
    reach = spacing_mm - TOLERANCE_MM
    tree = STRtree(everything)
    near = tree.query(everything, predicate="dwithin", distance=max(reach, 0.0))
    pairs = []
    for i, j in sorted(zip(*near.tolist(), strict=True)):
        if i < j and i < len(parts) and _too_close(everything[i], everything[j], reach):
            pairs.append((i, j))
    return pairs


def _too_close(a: Polygon, b: Polygon, reach: float) -> bool:
    """Closer than ``reach``; with no spacing asked, a common area instead."""
    if reach > 0.0:
        return bool(a.distance(b) < reach)
    return bool(a.intersection(b).area > TOLERANCE_MM * TOLERANCE_MM and a.buffer(
        -TOLERANCE_MM / 2.0).intersects(b.buffer(-TOLERANCE_MM / 2.0)))
