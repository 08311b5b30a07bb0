"""One nesting job from checked input to checked layouts."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace

from shapely.geometry import Polygon

from buildgen.problems import DesignError
from buildgen.sheets.nest_check import layout_is_sound
from buildgen.sheets.nest_ease import Easing
from buildgen.sheets.nest_fill import Filling, Item, Shapes, lay
from buildgen.sheets.nest_input import ran_out, too_large
from buildgen.sheets.nest_leftover import largest_leftover
from buildgen.sheets.nest_search import best_filling, score
from buildgen.sheets.nest_sheet import Kind, Sheet, kind_of, new_sheet
from buildgen.sheets.nest_types import (
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
        laid: copies laid in all when trying changed orders, two of these at least.
        work_least: points held against outlines when easing; about 120 million take a second.
        work_each: the same for each copy; the larger of the two sums counts.
    """

    laid: int
    work_least: int
    work_each: int


EFFORTS = {
    "quick": _Bounds(140, 20_000_000, 1_000_000),
    "normal": _Bounds(6_400, 420_000_000, 25_000_000),
    "high": _Bounds(16_000, 1_500_000_000, 80_000_000),
}


def solve(
    parts: Sequence[NestPart],
    stock: Sequence[NestStock],
    fixed: Sequence[NestFixed],
    spacing_mm: float,
    margin_mm: float,
    effort: str,
) -> NestResult:
    """Lay checked parts on checked stock; see ``nest``.

    Raises:
        DesignError: a part fits on no sheet, or the stock runs out.
    """
    kinds = [k for s in stock if (k := kind_of(s, spacing_mm, margin_mm, CELLS)) is not None]
    items, shapes = _items(parts, spacing_mm)
    begun = _begun(kinds, fixed)
    items = _with_fitting_turns(items, shapes, kinds, parts, stock, margin_mm)
    job = _Job(parts, items, shapes, fixed, spacing_mm, margin_mm, EFFORTS[effort])
    return job.result(job.filled(kinds) if items else Filling([], []), begun)


@dataclass(frozen=True)
class _Job:
    parts: Sequence[NestPart]
    items: Sequence[Item]
    shapes: Shapes
    fixed: Sequence[NestFixed]
    spacing_mm: float
    margin_mm: float
    bounds: _Bounds

    def filled(self, kinds: Sequence[Kind]) -> Filling:
        """Sheets filled and shortened.

        Raises:
            DesignError: the stock runs out.
        """
        first = self._laid(kinds)
        if not first.left:
            return self._eased(first, kinds)
        largest = max(kinds, key=lambda k: k.outline.area)
        limit = largest.stock.quantity or 0
        lent = [
            replace(k, stock=replace(k.stock, quantity=limit + 1)) if k is largest else k
            for k in kinds
        ]
        second = self._laid(lent)  # with one sheet more than there is, to be emptied again
        if not second.left:
            eased = self._eased(second, lent)
            begun = [s for s in _begun(kinds, self.fixed) if s.kind is largest]
            used = [s for s in eased.used() if s.kind.stock.id == largest.stock.id]
            if all(n < limit for n in _numbers(used, begun)):
                return eased
        raise DesignError(*ran_out(first.left, self.items, self.parts))

    def _laid(self, kinds: Sequence[Kind]) -> Filling:
        begun = _begun(kinds, self.fixed)
        tries = max(2, self.bounds.laid // len(self.items))
        return best_filling(self.items, self.shapes, kinds, begun, tries)

    def _eased(self, filling: Filling, kinds: Sequence[Kind]) -> Filling:
        easing = Easing(filling, self.items, self.shapes, kinds, self.spacing_mm, self.margin_mm)
        easing.shorten(max(self.bounds.work_least, self.bounds.work_each * len(self.items)))
        return min(filling, easing.filling(), key=lambda f: score(f, kinds))

    def result(self, filling: Filling, begun: Sequence[Sheet]) -> NestResult:
        """Layouts of the sheets, each checked; sheets with old parts only are told as well."""
        used = filling.used()
        idle = [s for s in begun if not any(_same(s, u) for u in used)]
        equivalent = len(used) - 1 + min(s.share for s in used) if used else 0.0
        numbers = _numbers(used, begun)
        layouts = [self._layout(s, n) for s, n in zip(used, numbers, strict=True)]
        return NestResult((*layouts, *(self._layout(s, s.number) for s in idle)), equivalent)

    def _layout(self, sheet: Sheet, number: int) -> NestLayout:
        placements = []
        for index, spot in sorted(zip(sheet.items, sheet.spots, strict=True)):
            item = self.items[index]
            placements.append(sheet.kind.to_sheet(spot, self.parts[item.part].id, item.copy))
        return self._checked(sheet.kind.stock, number, placements, sheet.fixed)

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


def _same(a: Sheet, b: Sheet) -> bool:
    """Whether two fillings of a sheet are of one that was begun before."""
    return bool(b.fixed) and a.kind.stock.id == b.kind.stock.id and a.number == b.number


def _numbers(used: Sequence[Sheet], begun: Sequence[Sheet]) -> list[int]:
    """Numbers of sheets within their kind: begun ones keep theirs, fresh ones follow in order."""
    following = {s.kind.stock.id: 0 for s in used}
    for sheet in begun:
        kind = sheet.kind.stock.id
        following[kind] = max(following.get(kind, 0), sheet.number + 1)
    numbers = []
    for sheet in used:
        kind = sheet.kind.stock.id
        fresh = not sheet.fixed
        numbers.append(following[kind] if fresh else sheet.number)
        following[kind] += 1 if fresh else 0
    return numbers


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
    problems = [too_large(parts[p], stock, margin_mm) for p, t in turns.items() if t is None]
    if problems:
        raise DesignError(*problems)
    return [replace(i, tries=turns[i.part] or i.turns) for i in items]
