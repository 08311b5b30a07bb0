"""Moving parts that lie too close to where they do least harm: the compiled inner loops.

Two parts press on each other by the depth to which a point or inner circle of one reaches into
the other grown by the spacing. Each pair has a weight that grows while the pair keeps pressing,
so that a search caught in a bad place changes what it minds most. Method: guided local search
on overlaps, well known for irregular packing (Egeblad, Nielsen and Odgaard 2007; Umetani and
Murakami 2022; from memory).
"""

from __future__ import annotations

import math
from typing import Any, NamedTuple

import numpy as np

from buildgen.sheets.nest_field import Fields
from buildgen.sheets.nest_jit import compiled, compiled_inline, compiled_inside

X, Y, COS, SIN, SIDE, TURN, LEAN = 0, 1, 2, 3, 4, 5, 6  # columns of a pose
POSE = 7
TOP = 3  # starts that are refined
GONE = 1e9
COARSE_MM, FINE_MM = 0.2, 0.01  # smallest steps of a first and a last walk downhill
EDGE_MM = 1e-7  # reached over the edge by rounding alone
PLAIN_MM = 2.0  # overlap of circles from which points are not asked


class Crowd(NamedTuple):
    """All copies and sheets, and where each lies.

    Attributes:
        fields: outlines, then the rooms of sheets that are not plain rectangles.
        shape: (n,) field of each copy.
        loose: (n,) whether it may be moved.
        turns: (t, 3) 1 or -1 if flipped, angle and lean in radians.
        turn_first: (n + 1,) rows of ``turns`` of each copy.
        sheet: (n,) where it lies.
        pose: (n + 1, 7) in the frame of its sheet: x, y, cosine and sine of the turn, 1 or -1 if
            flipped, row of ``turns`` in use, lean in use in radians. The last row is a trial.
        bounds: (n + 1, 4) of its points, likewise.
        points: (p, 2) its points where they lie, likewise.
        point_first: (n + 1,) rows of ``points`` of each copy, and of the trial.
        weight: (n, n) of pairs; on the diagonal of a copy against the edge of its sheet.
        rooms: (s, 4) usable rectangles; x1 below x0 closes a sheet.
        room_field: (s,) field of the room, or -1.
        sheet_turn: (s,) turn of the frame in radians.
        dice: (1,) state of the random numbers.
        work: (1,) points held against fields so far.
        tops: (TOP, 9) scratch: harm, sheet and pose of the best starts for a move.
        gap: (1,) spacing in mm.
    """

    fields: Fields
    shape: Any
    loose: Any
    turns: Any
    turn_first: Any
    sheet: Any
    pose: Any
    bounds: Any
    points: Any
    point_first: Any
    weight: Any
    rooms: Any
    room_field: Any
    sheet_turn: Any
    dice: Any
    work: Any
    tops: Any
    gap: Any


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


@compiled_inline
def _distance(fields: Fields, k: int, x: float, y: float) -> float:
    """Signed distance of a point from outline k, between nodes by bilinear interpolation."""
    nx, ny = fields.grid[k, 1], fields.grid[k, 2]
    step = fields.frame[k, 2]
    u, v = (x - fields.frame[k, 0]) / step, (y - fields.frame[k, 1]) / step
    cu, cv = min(max(u, 0.0), nx - 1.001), min(max(v, 0.0), ny - 1.001)
    i, j = int(cu), int(cv)
    a, b = cu - i, cv - j
    n = fields.grid[k, 0] + i * ny + j
    q = fields.values
    near = (1.0 - a) * ((1.0 - b) * q[n] + b * q[n + 1])
    far = a * ((1.0 - b) * q[n + ny] + b * q[n + ny + 1])
    distance: float = near + far + (abs(u - cu) + abs(v - cv)) * step
    return distance


@compiled_inline
def _press(
    c: Crowd, k: int, slot: int, row: int, first: int, n: int, deepest: float, enough: float
) -> float:
    """How deep n points from ``first`` (radii from ``row`` on) reach into outline k at a slot."""
    gap = c.gap[0]
    x0, y0, x1, y1 = c.bounds[slot, 0], c.bounds[slot, 1], c.bounds[slot, 2], c.bounds[slot, 3]
    px, py, side = c.pose[slot, X], c.pose[slot, Y], c.pose[slot, SIDE]
    cos, sin = c.pose[slot, COS], c.pose[slot, SIN]
    for p in range(n):
        reach = c.fields.points[row + p, 2] + gap
        x, y = c.points[first + p, 0], c.points[first + p, 1]
        if x < x0 - reach or x > x1 + reach or y < y0 - reach or y > y1 + reach:
            continue
        dx, dy = x - px, y - py
        deep = reach - _distance(c.fields, k, (cos * dx + sin * dy) * side, cos * dy - sin * dx)
        if deep > deepest:
            deepest = deep
            if deep > enough:
                break
    return deepest


@compiled_inline
def _transform(c: Crowd, k: int, slot: int) -> None:
    """Points of outline k at the pose of a slot, and their bounds."""
    row, first = c.fields.first[k], c.point_first[slot]
    px, py, side = c.pose[slot, X], c.pose[slot, Y], c.pose[slot, SIDE]
    cos, sin = c.pose[slot, COS], c.pose[slot, SIN]
    x0 = y0 = 1e30
    x1 = y1 = -1e30
    n = c.fields.first[k + 1] - row
    for p in range(n):
        lx, ly = c.fields.points[row + p, 0] * side, c.fields.points[row + p, 1]
        x, y = cos * lx - sin * ly + px, sin * lx + cos * ly + py
        c.points[first + p, 0] = x
        c.points[first + p, 1] = y
        x0, x1 = min(x0, x), max(x1, x)
        y0, y1 = min(y0, y), max(y1, y)
    c.work[0] += n
    c.bounds[slot, 0] = x0
    c.bounds[slot, 1] = y0
    c.bounds[slot, 2] = x1
    c.bounds[slot, 3] = y1


@compiled
def place(c: Crowd, i: int) -> None:
    """Bring points and bounds of copy i up to its pose."""
    _transform(c, c.shape[i], i)


@compiled_inline
def _pair(c: Crowd, a: int, slot: int, j: int, enough: float) -> float:
    """Depth to which outline a at a slot and copy j press on each other.

    Circles come first; where they already reach far in, points add nothing of use. Stops short
    once above ``enough``.
    """
    gap = c.gap[0]
    if (
        c.bounds[slot, 0] - gap > c.bounds[j, 2] or c.bounds[slot, 2] + gap < c.bounds[j, 0]
        or c.bounds[slot, 1] - gap > c.bounds[j, 3] or c.bounds[slot, 3] + gap < c.bounds[j, 1]
    ):
        return 0.0
    f = c.fields
    b = c.shape[j]
    ra, rb = f.first[a], f.first[b]
    pa, pb = c.point_first[slot], c.point_first[j]
    ca, cb = f.circles[a], f.circles[b]
    c.work[0] += ca + cb
    deep = _press(c, b, j, ra, pa, ca, 0.0, enough)
    if deep <= enough:
        deep = _press(c, a, slot, rb, pb, cb, deep, enough)
    if deep > enough or deep > gap + PLAIN_MM:
        return deep
    na, nb = f.first[a + 1] - ra - ca, f.first[b + 1] - rb - cb
    c.work[0] += na + nb
    deep = _press(c, b, j, ra + ca, pa + ca, na, deep, enough)
    if deep > enough:
        return deep
    return _press(c, a, slot, rb + cb, pb + cb, nb, deep, enough)


@compiled_inside
def _beyond_room(c: Crowd, a: int, slot: int, k: int) -> float:
    """How deep outline a at a slot reaches out of room k, or a corner of the room into it."""
    row, first = c.fields.first[a], c.point_first[slot]
    n = c.fields.first[a + 1] - row
    deep = 0.0
    for p in range(n):
        out = _distance(c.fields, k, c.points[first + p, 0], c.points[first + p, 1])
        deep = max(deep, c.fields.points[row + p, 2] + out)
    corners = c.fields.first[k] + c.fields.circles[k]
    end = c.fields.first[k + 1]
    c.work[0] += n + end - corners
    for p in range(corners, end):
        x, y = c.fields.points[p, 0], c.fields.points[p, 1]
        if (
            x > c.bounds[slot, 0] and x < c.bounds[slot, 2]
            and y > c.bounds[slot, 1] and y < c.bounds[slot, 3]
        ):
            dx, dy = x - c.pose[slot, X], y - c.pose[slot, Y]
            lx = (c.pose[slot, COS] * dx + c.pose[slot, SIN] * dy) * c.pose[slot, SIDE]
            ly = c.pose[slot, COS] * dy - c.pose[slot, SIN] * dx
            deep = max(deep, -_distance(c.fields, a, lx, ly))
    return deep


@compiled_inline
def _edge(c: Crowd, a: int, slot: int, sheet: int) -> float:
    """How far outline a at a slot reaches beyond the room of a sheet."""
    beyond: float = (
        max(0.0, c.rooms[sheet, 0] - c.bounds[slot, 0])
        + max(0.0, c.bounds[slot, 2] - c.rooms[sheet, 2])
        + max(0.0, c.rooms[sheet, 1] - c.bounds[slot, 1])
        + max(0.0, c.bounds[slot, 3] - c.rooms[sheet, 3])
    )
    k = c.room_field[sheet]
    if k < 0:
        return beyond if beyond > EDGE_MM else 0.0
    return beyond + _beyond_room(c, a, slot, k)


@compiled_inside
def _harm(c: Crowd, i: int, slot: int, sheet: int, bound: float) -> float:
    """Weighted depths of copy i as it lies in a slot; once above ``bound`` it may stop short."""
    a = c.shape[i]
    total: float = c.weight[i, i] * _edge(c, a, slot, sheet)
    for j in range(c.shape.shape[0]):
        if total >= bound:
            break
        if j != i and c.sheet[j] == sheet:
            deep = _pair(c, a, slot, j, (bound - total) / c.weight[i, j])
            total += c.weight[i, j] * deep
    return total


@compiled_inside
def _try(c: Crowd, i: int, sheet: int, bound: float) -> float:
    """Harm of copy i if it lay at the trial pose."""
    trial = c.shape.shape[0]
    _transform(c, c.shape[i], trial)
    return _harm(c, i, trial, sheet, bound)


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
    _transform(c, c.shape[i], trial)
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
            harm = _try(c, i, sheet, c.tops[t, 0])
            if harm < c.tops[t, 0]:
                c.tops[t, 0] = harm
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


@compiled
def depths(c: Crowd, deep: Any) -> float:
    """Depth of every pair, and on the diagonal of every copy over the edge; their sum."""
    n = c.shape.shape[0]
    total = 0.0
    for i in range(n):
        deep[i, i] = _edge(c, c.shape[i], i, c.sheet[i]) if c.loose[i] else 0.0
        total += deep[i, i]
        for j in range(i):
            d = 0.0
            if c.sheet[i] == c.sheet[j] and (c.loose[i] or c.loose[j]):
                d = _pair(c, c.shape[i], i, j, GONE)
            deep[i, j] = d
            total += d
    return total


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
            if c.loose[i] and _harm(c, i, i, c.sheet[i], 1e-12) > 0.0:
                move(c, i, samples)
        total = depths(c, deep)
        _reweigh(c, deep)
        idle += 1
        if total < least * 0.98:
            least, idle = total, 0
    return total
