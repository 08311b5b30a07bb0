"""Masks on a grid, the leftmost free place, and the largest rectangle left."""

from __future__ import annotations

import numpy as np
import pytest
from shapely.geometry import Point, Polygon, box

from buildgen.sheets.nest_check import layout_is_sound, meeting_pairs
from buildgen.sheets.nest_leftover import largest_leftover
from buildgen.sheets.nest_raster import first_place, grown, packed, put, touched, wholly_inside

SHAPES = [
    box(0.3, 0.2, 7.4, 5.1),
    Polygon([(0, 0), (9, 1), (4, 8)], [[(3, 2), (5, 2), (4, 4)]]),
    Point(6, 6).buffer(5.3),
]


@pytest.mark.parametrize("shape", SHAPES)
def test_touched_cells_are_those_that_meet_the_shape(shape):
    """Cell by cell against shapely; a touch at an edge or corner may count either way."""
    got = touched(shape, 25, 20, 0.5, 0.7)
    for i in range(25):
        for j in range(20):
            cell = box(i * 0.5, j * 0.7, (i + 1) * 0.5, (j + 1) * 0.7)
            if shape.intersection(cell).area > 1e-9:
                assert got[i, j]
            elif not shape.intersects(cell.buffer(1e-9)):
                assert not got[i, j]


@pytest.mark.parametrize("shape", SHAPES)
def test_cells_wholly_inside_lie_inside(shape):
    got = wholly_inside(shape, 25, 20, 0.5, 0.7)
    inside = [
        (i, j)
        for i in range(25)
        for j in range(20)
        if shape.buffer(-1e-9).contains(box(i * 0.5, j * 0.7, (i + 1) * 0.5, (j + 1) * 0.7))
    ]
    assert all(got[i, j] for i, j in inside)
    assert all(
        shape.buffer(1e-9).contains(box(i * 0.5, j * 0.7, (i + 1) * 0.5, (j + 1) * 0.7))
        for i, j in np.argwhere(got)
    )


@pytest.mark.parametrize("seed", range(4))
def test_first_place_is_that_of_a_plain_search(seed):
    """Against trying every column and row with whole arrays, over word borders (150 rows)."""
    dice = np.random.default_rng(seed)
    sheet = dice.random((30, 150)) < 0.004
    part = dice.random((4, 70 if seed % 2 else 9)) < 0.3
    part[0, 0] = part[-1, -1] = True
    n, m = part.shape
    expected = next(
        (i, j)
        for i in range(30 - n + 1)
        for j in range(150 - m + 1)
        if not (sheet[i : i + n, j : j + m] & part).any()
    )
    words = np.hstack([packed(sheet), np.zeros((30, 1), np.uint64)])
    got = first_place(words, packed(part), 0, 30 - n, 150 - m)
    assert got == expected
    put(words, packed(part), *got)
    sheet[got[0] : got[0] + n, got[1] : got[1] + m] |= part
    assert (words[:, :-1] == packed(sheet)).all()


def test_grown_outline_misses_the_true_arc_by_no_more_than_stated():
    """A square grown by 2 mm: its new outline is 2 mm off everywhere, at chords 0.0003 less."""
    ring = grown(box(0, 0, 10, 10), 2.0).exterior
    along = [ring.interpolate(t, normalized=True) for t in np.linspace(0, 1, 4001)]
    gaps = [box(0, 0, 10, 10).distance(point) for point in along]
    assert 2.0 - 0.0003 <= min(gaps) <= max(gaps) <= 2.0 + 1e-9


def test_leftover_of_a_sheet_with_a_part_in_its_corner():
    """60 x 40 mm in a 100 x 50 corner, 2 mm spacing: 38 x 50 = 1900 against 100 x 8 = 800 mm2."""
    x, y, w, h = largest_leftover(box(0, 0, 100, 50), [box(0, 0, 60, 40)], 2.0)
    assert (x, y, w, h) == pytest.approx((62.0, 0.0, 38.0, 50.0), abs=0.5)
    assert not box(x, y, x + w, y + h).buffer(1.999).intersects(box(0, 0, 60, 40))


def test_leftover_of_a_full_sheet_is_nothing():
    assert largest_leftover(box(0, 0, 10, 10), [box(0, 0, 10, 10)], 0.0) == (0, 0, 0, 0)


@pytest.mark.parametrize(
    ("gap_mm", "edge_mm", "sound"),
    [(1.5, 5.0, True), (1.4985, 5.0, False), (1.5, 4.9985, False), (1.4995, 4.9995, True)],
)
def test_check_keeps_spacing_and_margin_to_a_thousandth(gap_mm, edge_mm, sound):
    a = box(edge_mm, 5, edge_mm + 10, 20)
    b = box(edge_mm + 10 + gap_mm, 5, edge_mm + 20 + gap_mm, 20)
    assert layout_is_sound(box(0, 0, 100, 50), [a, b], [], 1.5, 5.0) is sound


def test_check_sees_a_part_inside_another_and_lets_one_lie_in_an_opening():
    plate = box(0, 0, 40, 40)
    ring = Polygon(plate.exterior, [box(10, 10, 30, 30).exterior])
    small = box(15, 15, 25, 25)
    assert meeting_pairs([plate, small], [], 1.0) == [(0, 1)]
    assert meeting_pairs([ring, small], [], 1.0) == []
    assert meeting_pairs([plate, small], [], 0.0) == [(0, 1)]
    assert meeting_pairs([small], [plate], 1.0) == [(0, 1)]
