"""Which sheets to open and in which order to lay the parts: tried in bounded numbers."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from buildgen.sheets.nest_fill import Filling, Item, Shapes, fill
from buildgen.sheets.nest_sheet import Kind, Sheet, posed

Score = tuple[int, int, float, int, float]


@dataclass(frozen=True)
class Plan:
    """Sheets to use first, then kinds to open as needed: kind, sheets at hand, first number."""

    opened: tuple[Sheet, ...]
    fresh: tuple[tuple[Kind, int, int], ...]


class Dice:
    """Small repeatable random numbers (a 64-bit linear congruential generator)."""

    def __init__(self, seed: int) -> None:
        self.state = (seed * 0x9E3779B97F4A7C15 + 1) % 2**64

    def below(self, n: int) -> int:
        """A whole number from 0 to n - 1."""
        self.state = (self.state * 6364136223846793005 + 1442695040888963407) % 2**64
        return (self.state >> 33) * n >> 31


def is_full(kind: Kind, kinds: Sequence[Kind]) -> bool:
    """Whether a sheet of this kind is counted: bought as needed; else every whole rectangle."""
    if any(k.stock.quantity is None for k in kinds):
        return kind.stock.quantity is None
    largest = max(k.outline.area for k in kinds)
    return kind.stock.polygon is None or kind.outline.area >= largest * 0.999


def plans(kinds: Sequence[Kind], begun: Sequence[Sheet], wanted: int) -> list[Plan]:
    """Ways to open sheets: begun ones first; offcuts at once, as needed or never."""
    full = sorted((k for k in kinds if is_full(k, kinds)), key=lambda k: -k.outline.area)
    offcuts = sorted((k for k in kinds if not is_full(k, kinds)), key=lambda k: k.outline.area)
    numbers = {id(k): 1 + max([-1, *(s.number for s in begun if s.kind is k)]) for k in kinds}

    def at_hand(kind: Kind) -> tuple[Kind, int, int]:
        quantity = kind.stock.quantity
        first = numbers[id(kind)]
        return kind, wanted if quantity is None else max(0, quantity - first), first

    early = tuple(begun) + tuple(
        Sheet(k, first + n, (), k.empty.copy())
        for k, limit, first in map(at_hand, offcuts)
        for n in range(min(limit, wanted))
    )
    late = [at_hand(k) for k in offcuts]
    found = []
    for k in full:
        rest = [at_hand(k), *(at_hand(o) for o in full if o is not k)]
        if offcuts:
            found.append(Plan(early, tuple(rest)))
        found.append(Plan(tuple(begun), (*rest, *late)))
    return found


def score(filling: Filling, kinds: Sequence[Kind]) -> Score:
    """Less is better: parts left, counted sheets, material of them used up, all sheets, length."""
    full = [s for s in filling.used() if is_full(s.kind, kinds)]
    return (
        len(filling.left),
        len(full),
        round(_used(full, area=True), 3),
        len(filling.used()),
        _used(filling.used(), area=False),
    )


def _used(sheets: Sequence[Sheet], area: bool) -> float:
    """Sheets used up, the emptiest counted by its length taken; as area or as a number."""
    shares = [s.share for s in sheets]
    sizes = [s.kind.inside.area if area else 1.0 for s in sheets]
    if not sheets:
        return 0.0
    k = min(range(len(sheets)), key=lambda i: shares[i] * sizes[i])
    return sum(sizes) - sizes[k] * (1.0 - shares[k])


def orders(items: Sequence[Item], shapes: Shapes) -> list[list[int]]:
    """Orders worth a try: by bounding area, length, net area and height, largest first."""
    sizes = []
    for item in items:
        x0, y0, x1, y1 = posed(shapes.outlines[item.shape], *item.turns[0]).bounds
        sizes.append((x1 - x0, y1 - y0, shapes.outlines[item.shape].area))
    keys = (
        lambda i: (-sizes[i][0] * sizes[i][1], i),
        lambda i: (-sizes[i][0], -sizes[i][1], i),
        lambda i: (-sizes[i][2], i),
        lambda i: (-sizes[i][1], -sizes[i][0], i),
    )
    return [sorted(range(len(items)), key=k) for k in keys]


def best_filling(
    items: Sequence[Item],
    shapes: Shapes,
    kinds: Sequence[Kind],
    begun: Sequence[Sheet],
    tries: int,
) -> Filling:
    """The best of all plans and orders, then of ``tries`` changed orders under the best plan."""
    best: tuple[Score, Filling, Plan, list[int]] | None = None
    for plan in plans(kinds, begun, len(items)):
        for order in orders(items, shapes):
            found = fill(order, items, shapes, plan.opened, plan.fresh)
            mark = score(found, kinds)
            if best is None or mark < best[0]:
                best = (mark, found, plan, order)
    assert best is not None
    dice = Dice(len(items))
    for _ in range(tries if len(items) > 1 else 0):
        order = list(best[3])
        for _ in range(1 + dice.below(3)):
            moved = order.pop(dice.below(len(order)))
            order.insert(dice.below(len(order) + 1), moved)
        found = fill(order, items, shapes, best[2].opened, best[2].fresh)
        mark = score(found, kinds)
        if mark <= best[0]:
            best = (mark, found, best[2], order)
    return best[1]
