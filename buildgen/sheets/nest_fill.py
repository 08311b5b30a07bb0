"""Filling sheets one part after another, each at the leftmost place that is free."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field

from shapely.geometry import Polygon

from buildgen.sheets.nest_raster import first_place, grown, put
from buildgen.sheets.nest_sheet import Key, Kind, Mask, Sheet, Spot, mask_of, posed


@dataclass(frozen=True)
class Item:
    """One copy of a part.

    Attributes:
        part: number of the part.
        copy: number among its copies.
        shape: number of its outline among the distinct ones.
        turns: whether turned over, and base angle in degrees.
        lean_deg: how far each may be off, either way.
        tries: turns to try on the grid; those of ``turns`` unless it only fits when leaning.
    """

    part: int
    copy: int
    shape: int
    turns: tuple[tuple[bool, float], ...]
    lean_deg: float
    tries: tuple[tuple[bool, float], ...]


@dataclass
class Shapes:
    """The distinct outlines, each also grown by half the spacing, and their masks so far."""

    outlines: Sequence[Polygon]
    half: float
    fat: list[Polygon] = field(init=False)
    masks: dict[tuple[int, Key], Mask] = field(default_factory=dict)
    turns: dict[tuple[int, int, tuple[tuple[bool, float], ...]], list[Key]] = field(
        default_factory=dict
    )

    def __post_init__(self) -> None:
        self.fat = [grown(o, self.half) for o in self.outlines]

    def mask(self, kind: Kind, key: Key) -> Mask:
        """The mask of a shape at one turn, made once for each kind of sheet."""
        where = (id(kind), key)
        if where not in self.masks:
            self.masks[where] = mask_of(kind, self.fat[key[0]], key[1], key[2])
        return self.masks[where]

    def keys(self, kind: Kind, item: Item) -> list[Key]:
        """The turns of an item on a kind of sheet, those that look alike only once."""
        where = (id(kind), item.shape, item.tries)
        if where not in self.turns:
            unlike: dict[bytes, Key] = {}
            for flipped, angle in item.tries:
                key = (item.shape, flipped, (angle - kind.turn_deg) % 360.0)
                mask = self.mask(kind, key)
                if mask.words.shape[0] <= kind.counts[0] and mask.ny <= kind.counts[1]:
                    unlike.setdefault(mask.words.tobytes() + bytes(mask.words.shape[1:]), key)
            self.turns[where] = list(unlike.values())
        return self.turns[where]


def lay(sheet: Sheet, index: int, item: Item, shapes: Shapes) -> bool:
    """Lay an item at the place where it ends leftmost; False if it does not fit."""
    kind = sheet.kind
    nx, ny = kind.counts
    best: tuple[int, int, int, Key] | None = None
    for key in shapes.keys(kind, item):
        mask = shapes.mask(kind, key)
        n = mask.words.shape[0]
        last = nx - n if best is None else min(nx - n, best[0] - n)
        start = sheet.hints.get(key, 0)
        ix, iy = first_place(sheet.taken, mask.words, start, last, ny - mask.ny)
        if ix < 0:
            sheet.hints[key] = max(start, last + 1)
            continue
        sheet.hints[key] = ix
        if best is None or (ix + n, iy) < best[:2]:
            best = (ix + n, iy, ix, key)
    if best is None:
        return False
    _settle(sheet, index, shapes.mask(kind, best[3]), best)
    return True


def _settle(sheet: Sheet, index: int, mask: Mask, best: tuple[int, int, int, Key]) -> None:
    """Take the cells and note the place."""
    end, iy, ix, (_, flipped, angle) = best
    put(sheet.taken, mask.words, ix, iy)
    kind = sheet.kind
    x = kind.corner[0] + ix * kind.cell[0] + mask.at[0]
    y = kind.corner[1] + iy * kind.cell[1] + mask.at[1]
    sheet.items.append(index)
    sheet.spots.append(Spot(x, y, angle, flipped))
    sheet.end_mm = max(sheet.end_mm, kind.corner[0] + end * kind.cell[0] - kind.half)


@dataclass
class Filling:
    """Sheets filled by one order of the parts, and what found no room."""

    sheets: list[Sheet]
    left: list[int]

    def used(self) -> list[Sheet]:
        """Sheets with something new on them."""
        return [s for s in self.sheets if s.items]


def fill(
    order: Sequence[int],
    items: Sequence[Item],
    shapes: Shapes,
    opened: Sequence[Sheet],
    fresh: Sequence[tuple[Kind, int, int]],
) -> Filling:
    """Lay the items in this order, each on the first sheet with room.

    Args:
        order: indices into items.
        items: all copies.
        shapes: their outlines.
        opened: sheets to use first, in order; copied, not changed.
        fresh: kinds to open after that, the first that takes the part: kind, sheets at hand,
            number of the first.
    """
    sheets = [s.again() for s in opened]
    count = [0] * len(fresh)
    left = []
    for index in order:
        if any(lay(s, index, items[index], shapes) for s in sheets):
            continue
        for k, (kind, limit, first) in enumerate(fresh):
            if count[k] >= limit:
                continue
            sheet = Sheet(kind, first + count[k], (), kind.empty.copy())
            if lay(sheet, index, items[index], shapes):
                count[k] += 1
                sheets.append(sheet)
                break
        else:
            left.append(index)
    return Filling(sheets, left)


def outline_at(shapes: Shapes, item: Item, spot: Spot) -> Polygon:
    """The outline of an item in the frame of its sheet."""
    from shapely import affinity

    here = posed(shapes.outlines[item.shape], spot.flipped, spot.angle_deg)
    return affinity.translate(here, spot.x_mm, spot.y_mm)
