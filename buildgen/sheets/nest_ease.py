"""Shortening the last sheet of a layout by letting parts overlap and easing them apart again."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt
from shapely.geometry import LinearRing, Polygon

from buildgen.sheets.nest_check import layout_is_sound
from buildgen.sheets.nest_field import fields_of
from buildgen.sheets.nest_fill import Filling, Item, Shapes, outline_at
from buildgen.sheets.nest_move import TOP, separate
from buildgen.sheets.nest_press import LEAN, POSE, TURN, Crowd, X, Y, place
from buildgen.sheets.nest_search import Dice, is_full
from buildgen.sheets.nest_sheet import Kind, Sheet, Spot, posed

SLACK_MM = 0.03  # added to the spacing: fields are that exact
SAMPLES = 45
PATIENCE = 40
FIRST_CUT = 0.004  # of all usable length in one step
LAST_CUT_MM = 0.25
SWAP_AFTER = 2  # cuts in a row that came to nothing
CLOSED = -1.0


@dataclass
class State:
    """Where every copy lies."""

    sheet: npt.NDArray[np.int64]
    pose: npt.NDArray[np.float64]


class Easing:
    """A filling that is being shortened.

    Args:
        filling: sound layouts to begin with.
        items: all copies.
        shapes: their outlines.
        kinds: all kinds of sheet, to tell counted ones from offcuts.
        spacing_mm: gap between parts.
        margin_mm: gap to the edge.
    """

    def __init__(
        self,
        filling: Filling,
        items: Sequence[Item],
        shapes: Shapes,
        kinds: Sequence[Kind],
        spacing_mm: float,
        margin_mm: float,
    ) -> None:
        self.sheets = filling.used()
        self.items, self.shapes, self.kinds = items, shapes, kinds
        self.spacing_mm, self.margin_mm = spacing_mm, margin_mm
        self.dice = Dice(7 + len(items))
        self.old = [
            (s, sheet.kind.to_frame(f.polygon))
            for s, sheet in enumerate(self.sheets)
            for f in sheet.fixed
        ]
        self.crowd = self._crowd()
        self.deep = np.zeros((len(self.crowd.shape),) * 2)
        self.order = np.arange(len(self.crowd.shape))
        self._place_all()
        self.best = self._state()

    def _crowd(self) -> Crowd:
        """Arrays for the inner loops; copies first, fixed parts after them."""
        n, m, s = len(self.items), len(self.old), len(self.sheets)
        outlines = [self._without_idle_openings(o) for o in self.shapes.outlines]
        rooms = [
            k.inside.buffer(-SLACK_MM) for k in (sh.kind for sh in self.sheets) if not k.plain
        ]
        ways = self._ways() + [()] * (m + len(rooms))
        fields = fields_of([*outlines, *(p for _, p in self.old), *rooms], ways, self.spacing_mm)
        shape = np.array([i.shape for i in self.items] + [len(outlines) + k for k in range(m)])
        counts = fields.first[shape + 1] - fields.first[shape]
        turns = [
            (-1.0 if side else 1.0, math.radians(angle), math.radians(i.lean_deg))
            for i in self.items
            for side, angle in i.turns
        ] + [(1.0, 0.0, 0.0)] * m
        per = [len(i.turns) for i in self.items] + [1] * m
        odd = iter(range(len(outlines) + m, len(outlines) + m + len(rooms)))
        point_first = np.concatenate([[0], np.cumsum(counts)])
        return Crowd(
            fields=fields,
            shape=shape.astype(np.int64),
            loose=np.array([True] * n + [False] * m),
            turns=np.array(turns),
            turn_first=np.concatenate([[0], np.cumsum(per)]).astype(np.int64),
            sheet=np.zeros(n + m, np.int64),
            pose=np.zeros((n + m + 1, POSE)),
            bounds=np.zeros((n + m + 1, 4)),
            points=np.zeros((int(point_first[-1] + counts.max()), 2)),
            point_first=point_first.astype(np.int64),
            weight=np.ones((n + m, n + m)),
            rooms=np.array([sh.kind.room for sh in self.sheets]).reshape(s, 4),
            room_field=np.array([-1 if sh.kind.plain else next(odd) for sh in self.sheets]),
            sheet_turn=np.radians([sh.kind.turn_deg for sh in self.sheets]),
            dice=np.array([len(self.items)], np.uint64),
            work=np.zeros(1, np.int64),
            tops=np.zeros((TOP, 2 + POSE)),
            gap=np.array([self.spacing_mm + SLACK_MM]),
        )

    def _ways(self) -> list[Sequence[float]]:
        """For each outline, the directions in which it may face the edges of a sheet."""
        ways: list[dict[float, None]] = [{} for _ in self.shapes.outlines]
        for item in self.items:
            for side, angle in item.turns:
                for lean in np.linspace(-item.lean_deg, item.lean_deg, 9 if item.lean_deg else 1):
                    a = math.radians(float(angle + lean)) % (math.pi / 2.0)
                    ways[item.shape][round(a if side else -a, 9)] = None
        return [tuple(w) for w in ways]

    def _without_idle_openings(self, outline: Polygon) -> Polygon:
        """The outline less openings that no part could lie in."""
        sizes = {(i.shape, turn): None for i in self.items for turn in i.turns}
        boxes = [posed(self.shapes.outlines[k], *turn).bounds for k, turn in sizes]
        least = self.spacing_mm * 2.0
        lean = math.tan(math.radians(min(45.0, max(i.lean_deg for i in self.items))))

        def takes(ring: LinearRing) -> bool:
            x0, y0, x1, y1 = ring.bounds
            w, h = max(x1 - x0, y1 - y0) - least, min(x1 - x0, y1 - y0) - least
            sides = [sorted((c - a, d - b)) for a, b, c, d in boxes]
            return any(s <= h + lean * t and t <= w + lean * s for s, t in sides)

        return Polygon(outline.exterior, [r for r in outline.interiors if takes(r)])

    def _place_all(self) -> None:
        """Take over the places of the filling and of fixed parts."""
        c = self.crowd
        for s, sheet in enumerate(self.sheets):
            for i, spot in zip(sheet.items, sheet.spots, strict=True):
                angle = (spot.angle_deg + sheet.kind.turn_deg) % 360.0
                turn, lean = self._turn_of(self.items[i], spot.flipped, angle)
                a = math.radians(spot.angle_deg)
                side = -1.0 if spot.flipped else 1.0
                c.sheet[i] = s
                c.pose[i, :5] = (spot.x_mm, spot.y_mm, math.cos(a), math.sin(a), side)
                c.pose[i, 5:] = (c.turn_first[i] + turn, math.radians(lean))
                place(c, i)
        for k, (s, _) in enumerate(self.old):
            i = len(self.items) + k
            c.sheet[i] = s
            c.pose[i, :5] = (0.0, 0.0, 1.0, 0.0, 1.0)
            place(c, i)

    @staticmethod
    def _turn_of(item: Item, flipped: bool, angle_deg: float) -> tuple[int, float]:
        """Which of the allowed turns this is, and the lean off it."""
        leans = [
            ((angle_deg - base + 180.0) % 360.0 - 180.0) if side == flipped else 999.0
            for side, base in item.turns
        ]
        turn = min(range(len(leans)), key=lambda k: abs(leans[k]))
        return turn, leans[turn]

    def _state(self) -> State:
        c = self.crowd
        return State(c.sheet.copy(), c.pose.copy())

    def _restore(self, state: State) -> None:
        c = self.crowd
        c.sheet[:] = state.sheet
        c.pose[:] = state.pose
        for i in range(len(self.items)):
            place(c, i)

    def shorten(self, work: int) -> None:
        """Cut the length of the emptiest counted sheet bit by bit, within ``work`` points."""
        c = self.crowd
        target = self._emptiest()
        cut = cut_most = FIRST_CUT * float(sum(r[2] - r[0] for r in c.rooms))
        failures = 0
        while c.work[0] < work and target is not None:
            self._restore(self.best)
            end = self._reach(target)
            if failures >= SWAP_AFTER:
                self._swap_two()
            full = c.rooms[target, 2]
            c.rooms[target, 2] = self._next_end(target, end - cut)
            c.weight[:] = 1.0
            left = separate(c, SAMPLES, PATIENCE, work, self.deep, self.order)
            if left == 0.0 and self._sound():
                self.best = self._state()
                failures = 0
                cut = min(cut * 1.5, cut_most)
                if c.rooms[target, 2] <= c.rooms[target, 0]:
                    target = self._emptiest()
                continue
            c.rooms[target, 2] = full
            cut = max(cut * 0.6, LAST_CUT_MM)
            failures += 1

    def _emptiest(self) -> int | None:
        """The open counted sheet (or offcut, if there are no others) that is used least."""
        c = self.crowd
        ids = [s for s in range(len(self.sheets)) if c.rooms[s, 2] > c.rooms[s, 0]]
        full = [s for s in ids if is_full(self.sheets[s].kind, self.kinds)] or ids
        return min(full, key=lambda s: (self._reach(s), -s)) if len(ids) > 0 else None

    def _reach(self, s: int) -> float:
        """Where the new parts on a sheet end along x."""
        c = self.crowd
        ends = [c.bounds[i, 2] for i in range(len(self.items)) if c.sheet[i] == s]
        return float(max(ends, default=c.rooms[s, 0]))

    def _next_end(self, s: int, end: float) -> float:
        """The end asked for, or closed if no part could lie there any more."""
        c = self.crowd
        n = len(self.items)
        least = float((c.bounds[:n, 2] - c.bounds[:n, 0]).min())
        return end if end - c.rooms[s, 0] >= least else float(c.rooms[s, 0]) + CLOSED

    def _swap_two(self) -> None:
        """Let two unlike copies of the larger half change places, to leave a dead end."""
        c = self.crowd
        n = len(self.items)
        b = c.bounds[:n]
        sizes = (b[:, 2] - b[:, 0]) * (b[:, 3] - b[:, 1])
        large = sorted(range(n), key=lambda k: (-sizes[k], k))[: max(2, n // 2)]
        i = large[self.dice.below(len(large))]
        turn = c.sheet_turn[c.sheet]
        unlike = [k for k in large if c.shape[k] != c.shape[i] and turn[k] == turn[i]]
        if not unlike:
            return
        j = unlike[self.dice.below(len(unlike))]
        move = 0.5 * (b[j, :2] + b[j, 2:] - b[i, :2] - b[i, 2:])
        sheets = int(c.sheet[i]), int(c.sheet[j])
        for k, sheet, sign in ((i, sheets[1], 1.0), (j, sheets[0], -1.0)):
            c.pose[k, X : Y + 1] += sign * move
            c.sheet[k] = sheet
            place(c, k)

    def _sound(self) -> bool:
        """Whether the layouts pass the check with true outlines."""
        for s, sheet in enumerate(self.sheets):
            lying = [
                outline_at(self.shapes, self.items[i], self._spot(i))
                for i in range(len(self.items))
                if self.crowd.sheet[i] == s
            ]
            old = [p for k, p in self.old if k == s]
            if not layout_is_sound(
                sheet.kind.outline, lying, old, self.spacing_mm, self.margin_mm
            ):
                return False
        return True

    def _spot(self, i: int) -> Spot:
        c = self.crowd
        item = self.items[i]
        side, base = item.turns[int(c.pose[i, TURN]) - int(c.turn_first[i])]
        lean = min(item.lean_deg, max(-item.lean_deg, math.degrees(float(c.pose[i, LEAN]))))
        angle = base + lean - self.sheets[int(c.sheet[i])].kind.turn_deg
        return Spot(float(c.pose[i, X]), float(c.pose[i, Y]), angle % 360.0, side)

    def filling(self) -> Filling:
        """The best layouts found."""
        self._restore(self.best)
        sheets = []
        for s, old in enumerate(self.sheets):
            sheet = Sheet(old.kind, old.number, old.fixed, old.taken)
            sheet.items = [i for i in range(len(self.items)) if self.crowd.sheet[i] == s]
            sheet.spots = [self._spot(i) for i in sheet.items]
            sheet.end_mm = self._reach(s) if sheet.items else -math.inf
            sheets.append(sheet)
        return Filling(sheets, [])
