"""Nesting: flat parts on as few sheets as can be, the last one with the largest piece left."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace

from shapely.geometry import Polygon

from buildgen.problems import DesignError, Problem
from buildgen.sheets.nest_check import layout_is_sound
from buildgen.sheets.nest_ease import Easing
from buildgen.sheets.nest_fill import Filling, Item, Shapes, lay
from buildgen.sheets.nest_input import (
    faulty_fixed,
    faulty_numbers,
    faulty_parts,
    faulty_stock,
    ran_out,
    too_large,
)
from buildgen.sheets.nest_leftover import largest_leftover
from buildgen.sheets.nest_search import best_filling, score
from buildgen.sheets.nest_sheet import Kind, Sheet, kind_of, new_sheet
from buildgen.sheets.nest_types import (
    Effort,
    NestFixed,
    NestLayout,
    NestPart,
    NestPlacement,
    NestResult,
    NestStock,
    placed,
)

CELLS = 160_000


@dataclass(frozen=True)
class _Bounds:
    """How much to search.

    Attributes:
        tries: changed orders when filling sheets.
        work_least: points held against outlines when easing; about 100 million take a second.
        work_each: the same for each copy; the larger of the two sums counts.
    """

    tries: int
    work_least: int
    work_each: int


EFFORTS = {
    "quick": _Bounds(2, 20_000_000, 800_000),
    "normal": _Bounds(20, 300_000_000, 14_000_000),
    "high": _Bounds(100, 1_500_000_000, 80_000_000),
}


def nest(
    parts: Sequence[NestPart],
    stock: Sequence[NestStock],
    *,
    spacing_mm: float,
    margin_mm: float,
    effort: Effort = "normal",
    fixed: Sequence[NestFixed] = (),
) -> NestResult:
    """Lay flat parts on sheets.

    Fewest sheets first, then the shortest length used of the last one. Sheets that hold fixed
    parts and stock of limited quantity that is smaller than the rest (offcuts) are used first
    where that saves material. The search is bounded by counts, never by a clock: the same input
    gives the same layouts.

    Args:
        parts: what to cut; small parts may end up inside the openings of large ones.
        stock: sheets at hand.
        spacing_mm: least gap between two parts; 0 or more.
        margin_mm: least gap between a part and the edge of the sheet; 0 or more.
        effort: how long to search: "quick", "normal" or "high".
        fixed: parts that already have their place.

    Returns:
        Layouts, all checked with the true outlines: spacing and margin are kept to 0.001 mm.

    Raises:
        DesignError: an input makes no sense, a part fits on no sheet, or the stock runs out.
    """
    _refuse(
        [
            *faulty_numbers(spacing_mm, margin_mm, effort, EFFORTS),
            *faulty_parts(parts),
            *faulty_stock(stock),
            *faulty_fixed(fixed, stock),
        ]
    )
    kinds = [k for s in stock if (k := kind_of(s, spacing_mm, margin_mm, CELLS)) is not None]
    items, shapes = _items(parts, spacing_mm)
    begun = _begun(kinds, fixed)
    items = _with_fitting_turns(items, shapes, kinds, parts, stock, margin_mm)
    job = _Job(parts, items, shapes, fixed, spacing_mm, margin_mm)
    if not items:
        return job.result(Filling([], []), begun)
    bounds = EFFORTS[effort]
    filling = best_filling(items, shapes, kinds, begun, bounds.tries)
    _refuse(ran_out(filling.left, items, parts))
    easing = Easing(filling, items, shapes, kinds, spacing_mm, margin_mm)
    easing.shorten(max(bounds.work_least, bounds.work_each * len(items)))
    return job.result(min(filling, easing.filling(), key=lambda f: score(f, kinds)), begun)


@dataclass(frozen=True)
class _Job:
    parts: Sequence[NestPart]
    items: Sequence[Item]
    shapes: Shapes
    fixed: Sequence[NestFixed]
    spacing_mm: float
    margin_mm: float

    def result(self, filling: Filling, begun: Sequence[Sheet]) -> NestResult:
        """Layouts of the sheets, each checked; sheets with old parts only are told as well."""
        used = filling.used()
        idle = [
            s for s in begun if not any(u.kind is s.kind and u.number == s.number for u in used)
        ]
        equivalent = len(used) - 1 + min(s.share for s in used) if used else 0.0
        return NestResult(tuple(self._layout(s) for s in [*used, *idle]), equivalent)

    def _layout(self, sheet: Sheet) -> NestLayout:
        placements = []
        for index, spot in sorted(zip(sheet.items, sheet.spots, strict=True)):
            item = self.items[index]
            placements.append(sheet.kind.to_sheet(spot, self.parts[item.part].id, item.copy))
        return self._checked(sheet.kind.stock, sheet.number, placements, sheet.fixed)

    def _checked(
        self,
        stock: NestStock,
        number: int,
        placements: Sequence[NestPlacement],
        fixed: tuple[NestFixed, ...],
    ) -> NestLayout:
        by_id = {p.id: p for p in self.parts}
        lying = [placed(by_id[p.part_id], p) for p in placements]
        old = [f.polygon for f in fixed]
        outline = stock.outline
        if not layout_is_sound(outline, lying, old, self.spacing_mm, self.margin_mm):
            raise AssertionError(f"unsound layout of {stock.id}")
        area = sum(p.area for p in (*lying, *old)) / outline.area
        leftover = largest_leftover(outline, [*lying, *old], self.spacing_mm)
        return NestLayout(stock.id, number, outline, tuple(placements), fixed, area, leftover)


def _refuse(problems: Sequence[Problem]) -> None:
    if problems:
        raise DesignError(*problems)


def _items(parts: Sequence[NestPart], spacing_mm: float) -> tuple[list[Item], Shapes]:
    """All copies, and the distinct outlines among the parts."""
    numbers: dict[bytes, int] = {}
    outlines: list[Polygon] = []
    items = []
    for p, part in enumerate(parts):
        shape = numbers.setdefault(part.polygon.wkb, len(numbers))
        if shape == len(outlines):
            outlines.append(part.polygon)
        sides = (False, True) if part.flip else (False,)
        turns = tuple((side, float(angle) % 360.0) for side in sides for angle in part.angles_deg)
        items += [Item(p, c, shape, turns, part.lean_deg, turns) for c in range(part.quantity)]
    return items, Shapes(outlines, spacing_mm / 2.0)


def _begun(kinds: Sequence[Kind], fixed: Sequence[NestFixed]) -> list[Sheet]:
    """Sheets that already hold parts."""
    found = []
    for kind in kinds:
        here = [f for f in fixed if f.stock_id == kind.stock.id]
        for number in sorted({f.sheet for f in here}):
            found.append(new_sheet(kind, number, [f for f in here if f.sheet == number]))
    return found


def _with_fitting_turns(
    items: Sequence[Item],
    shapes: Shapes,
    kinds: Sequence[Kind],
    parts: Sequence[NestPart],
    stock: Sequence[NestStock],
    margin_mm: float,
) -> list[Item]:
    """The items; those that fit on a bare sheet only when leaning get these turns as well."""
    turns: dict[int, tuple[tuple[bool, float], ...] | None] = {}
    for item in items:
        if item.part in turns:
            continue
        leans = [item.lean_deg * f for f in (0.0, -1.0, 1.0, -0.5, 0.5)] if item.lean_deg else [0.0]
        turns[item.part] = None
        for lean in leans:
            tried = tuple((side, (angle + lean) % 360.0) for side, angle in item.turns)
            trial = replace(item, tries=tried)
            if any(lay(Sheet(k, 0, (), k.empty.copy()), 0, trial, shapes) for k in kinds):
                turns[item.part] = tried
                break
    _refuse([too_large(parts[p], stock, margin_mm) for p, t in turns.items() if t is None])
    return [replace(i, tries=turns[i.part] or i.turns) for i in items]
