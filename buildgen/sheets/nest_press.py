"""How hard parts press on each other and on the edges of sheets: compiled inner loops.

Two parts press by the depth to which a point or inner circle of one reaches into the other grown
by the spacing. Each pair has a weight by which its depth counts.
"""

from __future__ import annotations

from typing import Any, NamedTuple

from buildgen.sheets.nest_field import Fields
from buildgen.sheets.nest_jit import compiled, compiled_inline, compiled_inside

X, Y, COS, SIN, SIDE, TURN, LEAN = 0, 1, 2, 3, 4, 5, 6  # columns of a pose
POSE = 7
GONE = 1e9
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
def transform(c: Crowd, k: int, slot: int) -> None:
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
    transform(c, c.shape[i], i)


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
def harm(c: Crowd, i: int, slot: int, sheet: int, bound: float) -> float:
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
