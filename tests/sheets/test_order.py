"""Order of cutting: nothing drops out before it is cut."""

from __future__ import annotations

from shapely.geometry import box

from buildgen.sheets.order import cutting_order, guests_of

FRAME = box(0, 0, 80, 80).difference(box(10, 10, 70, 70))
INNER = box(12, 12, 60, 60).difference(box(20, 20, 50, 50))
CORE = box(22, 22, 40, 40)


def test_what_lies_in_an_opening_comes_first() -> None:
    shapes = [FRAME, box(100, 0, 110, 10), INNER, CORE]
    order = cutting_order(shapes, ["F", "B", "I", "C"])
    assert order.index(3) < order.index(2) < order.index(0)
    assert guests_of(shapes) == {2, 3}


def test_columns_run_from_left_to_right_and_to_and_fro() -> None:
    shapes = [box(x, y, x + 20, y + 20) for x in (5, 65) for y in (5, 35, 65)]
    order = cutting_order(shapes, list("abcdef"))
    assert order == [0, 1, 2, 5, 4, 3]


def test_equal_places_are_ordered_by_name() -> None:
    shapes = [box(0, 0, 5, 5), box(10, 0, 15, 5)]
    assert cutting_order(shapes, ["b", "a"]) == [1, 0]
