"""What is left of a sheet once its parts are out, as stock for the next job."""

from __future__ import annotations

from collections.abc import Iterable

import shapely
from shapely.geometry import Polygon, box

from buildgen.sheets.sheet import Sheet

LEAST_SIDE_MM = 30.0
"""A leftover narrower than this is not listed; common practice, no source."""


def leftovers(sheet: Sheet, spacing_mm: float) -> list[Polygon]:
    """Pieces of a cut sheet that are worth keeping, largest first, clear of every cut."""
    taken = [Polygon(s.exterior).buffer(spacing_mm, join_style="mitre")
             for s in sheet.placed_shapes()]
    rest = sheet.outline.difference(shapely.union_all(taken))
    holes = [h for g in getattr(rest, "geoms", [rest]) for h in g.interiors]
    rest = rest.difference(shapely.union_all([_slit(Polygon(h), sheet) for h in holes]))
    half = LEAST_SIDE_MM / 2
    pieces = []
    for piece in getattr(rest, "geoms", [rest]):
        solid = piece.buffer(-half, join_style="mitre").buffer(half - 0.5, join_style="mitre")
        pieces += [g.simplify(0.4) for g in getattr(solid, "geoms", [solid]) if not g.is_empty]
    return sorted(pieces, key=lambda g: -g.area)


def _slit(hole: Polygon, sheet: Sheet) -> Polygon:
    """A saw cut across the sheet through a hole, so that no leftover has one."""
    x = hole.centroid.x
    return box(x - 0.1, 0.0, x + 0.1, sheet.height_mm)


def leftovers_text(sheets: Iterable[Sheet], spacing_mm: float) -> str:
    """Leftovers as tables to paste into a definition, where they are stock from then on."""
    rows = ["# What is left of the sheets that were cut; paste what you keep into the definition."]
    for sheet in sheets:
        for piece in leftovers(sheet, spacing_mm):
            x0, y0, x1, y1 = piece.bounds
            points = ", ".join(f"[{x:.1f}, {y:.1f}]" for x, y in list(piece.exterior.coords)[:-1])
            rows += ["", f"# of {sheet.file}: {x1 - x0:.0f} x {y1 - y0:.0f} mm over all,"
                     f" {piece.area / 100:.0f} cm2", "[[stock.offcut]]",
                     f'material = "{sheet.material}"', f"thickness_mm = {sheet.thickness_mm!r}",
                     f"outline_mm = [{points}]"]
    return "\n".join(rows) + "\n"
