"""What goes into the nesting of flat parts on sheets and what comes out of it."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Literal

from shapely import affinity
from shapely.geometry import Polygon, box

Effort = Literal["quick", "normal", "high"]


@dataclass(frozen=True, slots=True)
class NestPart:
    """A flat part to be cut ``quantity`` times.

    Attributes:
        id: what messages and placements call it; unique within one call.
        polygon: outline in mm, holes allowed, anywhere in its own coordinates.
        quantity: copies wanted, 1 or more.
        angles_deg: the turns allowed, counter-clockwise from the part's own x axis.
        lean_deg: how far each of those turns may be off, either way (grain); 0 or more.
        flip: whether the part may be turned over.
    """

    id: str
    polygon: Polygon
    quantity: int = 1
    angles_deg: tuple[float, ...] = (0.0, 180.0)
    lean_deg: float = 0.0
    flip: bool = False


@dataclass(frozen=True, slots=True)
class NestStock:
    """Sheets of one kind: a rectangle by its sides, or an offcut by its outline.

    Attributes:
        id: what messages and layouts call it; unique within one call.
        width_mm: side along x of a rectangle from (0, 0); 0 when ``polygon`` is given.
        height_mm: side along y of a rectangle from (0, 0); 0 when ``polygon`` is given.
        polygon: outline of an irregular sheet in mm, holes allowed.
        quantity: sheets at hand; None for as many as it takes.
    """

    id: str
    width_mm: float = 0.0
    height_mm: float = 0.0
    polygon: Polygon | None = None
    quantity: int | None = None

    @property
    def outline(self) -> Polygon:
        """The sheet as a polygon in its own coordinates."""
        if self.polygon is not None:
            return self.polygon
        return box(0.0, 0.0, self.width_mm, self.height_mm)


@dataclass(frozen=True, slots=True)
class NestFixed:
    """A part that already has its place on a sheet; new parts keep clear of it.

    Attributes:
        stock_id: the kind of sheet it lies on.
        polygon: outline in the coordinates of that sheet, in mm.
        sheet: which sheet of that kind, counted from 0.
        id: its name, for the reader only.
    """

    stock_id: str
    polygon: Polygon
    sheet: int = 0
    id: str = ""


@dataclass(frozen=True, slots=True)
class NestPlacement:
    """Where one copy of a part lies.

    The part's own coordinates are mirrored about the y axis (x becomes -x) if ``flipped``,
    then turned by ``angle_deg`` counter-clockwise about (0, 0), then moved by (x_mm, y_mm).

    Attributes:
        part_id: the part.
        copy: which copy of it, counted from 0.
        x_mm: move along x in sheet coordinates.
        y_mm: move along y in sheet coordinates.
        angle_deg: turn, 0 up to (not including) 360.
        flipped: whether it lies turned over.
    """

    part_id: str
    copy: int
    x_mm: float
    y_mm: float
    angle_deg: float
    flipped: bool = False


@dataclass(frozen=True, slots=True)
class NestLayout:
    """One sheet and what is cut from it.

    Attributes:
        stock_id: the kind of sheet.
        sheet: which sheet of that kind, counted from 0.
        stock: its outline in mm.
        placements: new parts, in the order of the parts given.
        fixed: parts that were there before.
        used_fraction: net area of all parts on it over the area of the sheet.
        leftover_mm: largest whole rectangle left, as (x, y, width, height); all 0 if none.
    """

    stock_id: str
    sheet: int
    stock: Polygon
    placements: tuple[NestPlacement, ...]
    fixed: tuple[NestFixed, ...]
    used_fraction: float
    leftover_mm: tuple[float, float, float, float]


@dataclass(frozen=True, slots=True)
class NestResult:
    """All layouts, in the order in which the sheets are filled.

    Attributes:
        layouts: one for each sheet that holds a part, old or new.
        equivalent_sheets: sheets that received new parts, the emptiest of them counted by the
            share of its usable length that is taken up (along its longer side).
    """

    layouts: tuple[NestLayout, ...]
    equivalent_sheets: float

    @property
    def sheets_by_stock(self) -> Mapping[str, int]:
        """How many sheets of each kind hold a part, by stock id."""
        counts: dict[str, int] = {}
        for layout in self.layouts:
            counts[layout.stock_id] = counts.get(layout.stock_id, 0) + 1
        return counts


def placed(part: NestPart | Polygon, placement: NestPlacement) -> Polygon:
    """The outline of a part where ``placement`` puts it, in sheet coordinates (mm)."""
    polygon = part.polygon if isinstance(part, NestPart) else part
    if placement.flipped:
        polygon = affinity.scale(polygon, -1.0, 1.0, origin=(0.0, 0.0))
    polygon = affinity.rotate(polygon, placement.angle_deg, origin=(0.0, 0.0))
    return affinity.translate(polygon, placement.x_mm, placement.y_mm)
