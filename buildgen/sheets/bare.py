"""Ids of parts too slim for them, written on the bare sheet as near to the part as is free."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field

import numpy as np
import shapely
from shapely.geometry import Polygon

from buildgen.sheets.letters import width_mm, write
from buildgen.sheets.marks import CLEAR_MM
from buildgen.solid import Array

HIGH_MM = (2.0, 1.5)
FAR_MM, STEP_MM = 40.0, 1.0
"""Further away a reader no longer knows which part is meant."""


@dataclass
class Bare:
    """What of a sheet is neither a part nor written on.

    Attributes:
        sheet: outline of the stock.
        shapes: all parts where they lie.
    """

    sheet: Polygon
    shapes: Sequence[Polygon]
    written_on: list[Polygon] = field(default_factory=list)

    def written(self, label: str, part: Polygon) -> list[Array]:
        """Strokes of a label beside its part, clear of every cut and of other labels.

        Nothing where no place within reach is free: the ticket names the part all the same.
        """
        for high in HIGH_MM:
            spot = self._spot(width_mm(label, high), high, part)
            if spot is None:
                continue
            room = shapely.box(spot[0] - width_mm(label, high) / 2, spot[1] - high / 2,
                               spot[0] + width_mm(label, high) / 2, spot[1] + high / 2)
            self.written_on.append(room.buffer(CLEAR_MM, join_style="mitre"))
            return [np.array(s) for s in write(label, high, spot)]
        return []

    def _spot(self, wide: float, high: float, part: Polygon) -> tuple[float, float] | None:
        """Middle of the nearest free rectangle, on a grid round the part."""
        x0, y0, x1, y1 = part.buffer(FAR_MM).bounds
        grid = np.stack(np.meshgrid(np.arange(x0, x1, STEP_MM), np.arange(y0, y1, STEP_MM),
                                    indexing="ij"), axis=-1).reshape(-1, 2)
        low, top = grid - (wide / 2, high / 2), grid + (wide / 2, high / 2)
        rooms = shapely.box(*low.T, *top.T)
        inner = self.sheet.buffer(-CLEAR_MM)
        shapely.prepare(inner)
        free = shapely.contains(inner, rooms)
        grid, rooms = grid[free], rooms[free]
        taken = [*self.shapes, *self.written_on]
        tree = shapely.STRtree(taken)
        hit = tree.query(rooms, predicate="dwithin", distance=CLEAR_MM)[0]
        free = np.ones(len(rooms), bool)
        free[hit] = False
        grid, rooms = grid[free], rooms[free]
        if not len(rooms):
            return None
        away = np.round(shapely.distance(rooms, part), 3)
        if away.min() > FAR_MM:
            return None
        best = int(np.lexsort((grid[:, 1], grid[:, 0], away))[0])
        return float(grid[best][0]), float(grid[best][1])
