"""Moving parts that press to where they do least harm: compiled inner loops.

The weight of a pair grows while it keeps pressing, so that a search caught in a bad place changes
what it minds most. Method: guided local search on overlaps, well known for irregular packing
(Egeblad, Nielsen and Odgaard 2007; Umetani and Murakami 2022; from memory).
"""

from __future__ import annotations

import math
from typing import Any

import numpy as np

from buildgen.sheets.nest_jit import compiled, compiled_inline, compiled_inside
from buildgen.sheets.nest_press import (
    COS,
    EDGE_MM,
    GONE,
    LEAN,
    POSE,
    SIDE,
    SIN,
    TURN,
    Crowd,
    X,
    Y,
    depths,
    harm,
    place,
    transform,
)

TOP = 3  # starts that are refined
COARSE_MM, FINE_MM = 0.2, 0.01  # smallest steps of a first and a last walk downhill


@compiled_inline
def random(dice: Any) -> float:
    """Next random number from 0 up to 1 (splitmix64)."""
    dice[0] += np.uint64(0x9E3779B97F4A7C15)
    z = dice[0]
    z = (z ^ (z >> np.uint64(30))) * np.uint64(0xBF58476D1CE4E5B9)
    z = (z ^ (z >> np.uint64(27))) * np.uint64(0x94D049BB133111EB)
    z = z ^ (z >> np.uint64(31))
    value: float = (z >> np.uint64(11)) / 9007199254740992.0
    return value


@compiled_inside
def _try(c: Crowd, i: int, sheet: int, bound: float) -> float:
    """Harm of copy i if it lay at the trial pose."""
    trial = c.shape.shape[0]
    transform(c, c.shape[i], trial)
    return harm(c, i, trial, sheet, bound)


@compiled_inside
def _turn(c: Crowd, sheet: int, slot: int, turn: int, lean: float) -> None:
    """Write turn, lean and side of a pose."""
    angle = c.turns[turn, 1] + lean - c.sheet_turn[sheet]
    c.pose[slot, COS] = math.cos(angle)
    c.pose[slot, SIN] = math.sin(angle)
    c.pose[slot, SIDE] = c.turns[turn, 0]
    c.pose[slot, TURN] = turn
    c.pose[slot, LEAN] = lean


@compiled_inside
def _some_sheet(c: Crowd) -> int:
    """A random open sheet, long rooms more often."""
    length = 0.0
    for s in range(c.rooms.shape[0]):
        length += max(0.0, c.rooms[s, 2] - c.rooms[s, 0])
    pick = random(c.dice) * length
    last = 0
    for s in range(c.rooms.shape[0]):
        here = max(0.0, c.rooms[s, 2] - c.rooms[s, 0])
        if here > 0.0:
            last = s
            if pick < here:
                break
            pick -= here
    return last


@compiled_inside
def _anywhere(c: Crowd, i: int) -> int:
    """Set the trial to a random pose within a random sheet; the sheet, or -1."""
    trial = c.shape.shape[0]
    sheet = _some_sheet(c)
    first, end = c.turn_first[i], c.turn_first[i + 1]
    turn = first + int(random(c.dice) * (end - first))
    _turn(c, sheet, trial, turn, (2.0 * random(c.dice) - 1.0) * c.turns[turn, 2])
    c.pose[trial, X] = 0.0
    c.pose[trial, Y] = 0.0
    transform(c, c.shape[i], trial)
    x0, y0 = c.rooms[sheet, 0] - c.bounds[trial, 0], c.rooms[sheet, 1] - c.bounds[trial, 1]
    wide = c.rooms[sheet, 2] - c.bounds[trial, 2] - x0
    high = c.rooms[sheet, 3] - c.bounds[trial, 3] - y0
    if wide < 0.0 or high < -EDGE_MM:
        return -1
    c.pose[trial, X] = x0 + random(c.dice) * wide
    c.pose[trial, Y] = y0 + random(c.dice) * max(high, 0.0)
    return sheet


@compiled_inside
def _nearby(c: Crowd, i: int, size: float) -> None:
    """Set the trial to a random move of up to ``size`` from where copy i lies."""
    trial = c.shape.shape[0]
    for k in range(POSE):
        c.pose[trial, k] = c.pose[i, k]
    c.pose[trial, X] += (2.0 * random(c.dice) - 1.0) * size
    c.pose[trial, Y] += (2.0 * random(c.dice) - 1.0) * size


@compiled_inside
def _step_aside(c: Crowd, t: int, sheet: int, axis: int, step: float) -> None:
    """Set the trial one step from start t: along x, y, a diagonal, or in lean about its middle."""
    trial = c.shape.shape[0]
    for k in range(POSE):
        c.pose[trial, k] = c.tops[t, 2 + k]
    if axis != 4:
        if axis != 1:
            c.pose[trial, X] += step
        if axis != 0:
            c.pose[trial, Y] += -step if axis == 3 else step
        return
    turn = int(c.pose[trial, TURN])
    before = c.pose[trial, LEAN]
    most = c.turns[turn, 2]
    # bounds are those of the trial before, near enough for a middle
    x0, y0 = c.bounds[trial, 0], c.bounds[trial, 1]
    x1, y1 = c.bounds[trial, 2], c.bounds[trial, 3]
    lean = min(most, max(-most, before + 4.0 * step / (x1 - x0 + y1 - y0)))
    _turn(c, sheet, trial, turn, lean)
    mx, my = 0.5 * (x0 + x1), 0.5 * (y0 + y1)
    rx, ry = c.pose[trial, X] - mx, c.pose[trial, Y] - my
    cos, sin = math.cos(lean - before), math.sin(lean - before)
    c.pose[trial, X] = mx + cos * rx - sin * ry
    c.pose[trial, Y] = my + sin * rx + cos * ry


@compiled_inside
def _refine(c: Crowd, i: int, t: int, step: float, least: float) -> None:
    """Walk start t downhill; steps grow after success and halve after failure."""
    trial = c.shape.shape[0]
    sheet = int(c.tops[t, 1])
    ways = 5.0 if c.turns[int(c.tops[t, 2 + TURN]), 2] > 0.0 else 4.0
    while step > least and c.tops[t, 0] > 0.0:
        axis = int(random(c.dice) * ways)
        sign = step
        better = False
        for _ in range(2):
            _step_aside(c, t, sheet, axis, sign)
            found = _try(c, i, sheet, c.tops[t, 0])
            if found < c.tops[t, 0]:
                c.tops[t, 0] = found
                for k in range(POSE):
                    c.tops[t, 2 + k] = c.pose[trial, k]
                better = True
                break
            sign = -step
        step *= 1.1 if better else 0.5


@compiled_inside
def _keep(c: Crowd, harm: float, sheet: int) -> None:
    """Insert the trial among the best starts."""
    trial = c.shape.shape[0]
    t = TOP - 1
    if harm >= c.tops[t, 0]:
        return
    while t > 0 and c.tops[t - 1, 0] > harm:
        for k in range(2 + POSE):
            c.tops[t, k] = c.tops[t - 1, k]
        t -= 1
    c.tops[t, 0] = harm
    c.tops[t, 1] = sheet
    for k in range(POSE):
        c.tops[t, 2 + k] = c.pose[trial, k]


@compiled_inside
def move(c: Crowd, i: int, samples: int) -> None:
    """Look for the place of least harm for copy i and put it there."""
    size = min(c.bounds[i, 2] - c.bounds[i, 0], c.bounds[i, 3] - c.bounds[i, 1])
    for t in range(TOP):
        c.tops[t, 0] = GONE
    _nearby(c, i, 0.0)
    now = _try(c, i, c.sheet[i], GONE)
    _keep(c, now, c.sheet[i])
    for n in range(samples):
        sheet = c.sheet[i]
        if n % 3 == 0:
            _nearby(c, i, size)
        else:
            sheet = _anywhere(c, i)
        if sheet >= 0:
            _keep(c, _try(c, i, sheet, c.tops[TOP - 1, 0]), sheet)
    best = 0
    for t in range(TOP):
        if c.tops[t, 0] < GONE:
            _refine(c, i, t, 0.15 * size, COARSE_MM)
            if c.tops[t, 0] < c.tops[best, 0]:
                best = t
    _refine(c, i, best, COARSE_MM, FINE_MM)
    if c.tops[best, 0] < now:
        c.sheet[i] = int(c.tops[best, 1])
        for k in range(POSE):
            c.pose[i, k] = c.tops[best, 2 + k]
        place(c, i)


@compiled_inside
def _reweigh(c: Crowd, deep: Any) -> None:
    """Pairs that press weigh more, the deepest most; the others slowly less."""
    n = c.shape.shape[0]
    most = 1e-12
    for i in range(n):
        for j in range(i + 1):
            most = max(most, deep[i, j])
    for i in range(n):
        for j in range(i + 1):
            factor = 1.2 + 0.8 * deep[i, j] / most if deep[i, j] > 0.0 else 0.95
            w = max(1.0, c.weight[i, j] * factor)
            c.weight[i, j] = w
            c.weight[j, i] = w


@compiled_inside
def _shuffle(c: Crowd, order: Any) -> None:
    """Put the copies into a random order."""
    for k in range(order.shape[0] - 1, 0, -1):
        m = int(random(c.dice) * (k + 1))
        swap = order[k]
        order[k] = order[m]
        order[m] = swap


@compiled
def separate(
    c: Crowd, samples: int, patience: int, work_most: int, deep: Any, order: Any
) -> float:
    """Move pressing copies about until none presses; the sum of depths at the end.

    Ends when that sum is 0, when it has not found a smaller one in ``patience`` rounds, or when
    ``work`` passes ``work_most``.
    """
    total = depths(c, deep)
    least, idle = total, 0
    while total > 0.0 and idle < patience and c.work[0] < work_most:
        _shuffle(c, order)
        for k in range(order.shape[0]):
            i = order[k]
            if c.loose[i] and harm(c, i, i, c.sheet[i], 1e-12) > 0.0:
                move(c, i, samples)
        total = depths(c, deep)
        _reweigh(c, deep)
        idle += 1
        if total < least * 0.98:
            least, idle = total, 0
    return total
