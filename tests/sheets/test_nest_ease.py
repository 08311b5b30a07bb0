"""Fields of distance against shapely, and easing parts apart on a case with a known answer."""

from __future__ import annotations

import pytest
from shapely.geometry import Point, Polygon, box

from buildgen.sheets import NestPart, NestStock, nest, placed
from buildgen.sheets.nest_field import fields_of
from buildgen.sheets.nest_jit import compiled

NOTCHED = Polygon(
    [(0, 0), (40, 0), (40, 12), (24, 12), (24, 6), (18, 6), (18, 12), (0, 12)],
    [Point(8, 6).buffer(3).exterior],
)


def test_field_values_are_the_signed_distance():
    """Every node against shapely."""
    fields = fields_of([NOTCHED], [()], 1.5)
    _, nx, ny = fields.grid[0].tolist()
    x0, y0, step = fields.frame[0].tolist()
    values = fields.values.reshape(nx, ny)
    for i in range(0, nx, 3):
        for j in range(0, ny, 3):
            node = Point(x0 + i * step, y0 + j * step)
            distance = NOTCHED.boundary.distance(node)
            expected = -distance if NOTCHED.contains(node) else distance
            assert values[i, j] == pytest.approx(expected, abs=1e-4)


def test_circles_lie_inside_and_points_on_the_outline():
    fields = fields_of([NOTCHED], [(0.0, 0.3)], 1.5)
    for x, y, radius in fields.points[: fields.circles[0]].tolist():
        assert NOTCHED.buffer(0.001).covers(Point(x, y).buffer(radius))
    rest = fields.points[fields.circles[0] :]
    assert (rest[:, 2] == 0.0).all()
    assert max(NOTCHED.boundary.distance(Point(x, y)) for x, y, _ in rest.tolist()) < 1e-9


def test_two_wedges_are_laid_head_to_tail():
    """By hand: right wedges of 100 x 40 mm at 0 and 180 degrees make one block.

    Their long sides face each other at the spacing s measured across; along x that is
    s * sqrt(100^2 + 40^2) / 40 = 2 * 2.6926 = 5.385 mm, so the pair is 105.385 mm long in a room
    40 mm high. Side by side at one angle they take about 200 mm.
    """
    parts = [NestPart("w", Polygon([(0, 0), (100, 0), (0, 40)]), 2)]
    result = nest(
        parts, [NestStock("s", 400, 50)], spacing_mm=2.0, margin_mm=5.0, effort="quick"
    )
    ends = [placed(parts[0], p).bounds[2] for p in result.layouts[0].placements]
    assert max(ends) - 5.0 == pytest.approx(105.385, abs=0.6)
    assert max(ends) - 5.0 >= 105.384 - 0.01


def test_parts_spread_over_two_sheets_are_brought_onto_one():
    """Strips of 90, 60 and 40 mm length fill 2 rows of 196 mm only in one way: 90+60+40 each."""
    parts = [NestPart(f"s{n}", box(0, 0, n, 40), 2, angles_deg=(0.0,)) for n in (90, 60, 40)]
    result = nest(
        parts, [NestStock("s", 204, 91)], spacing_mm=1.0, margin_mm=5.0, effort="normal"
    )
    assert len(result.layouts) == 1


def test_a_lean_shortens_tapered_strips():
    """Eight strips that taper from 26 to 8 mm: turned by the taper they lie closer."""
    taper = Polygon([(0, 0), (120, 6), (120, 14), (0, 26)])
    stock = [NestStock("s", 700, 70)]
    a, b = (
        nest([NestPart("t", taper, 8, lean_deg=lean)], stock, spacing_mm=1.0, margin_mm=5.0)
        for lean in (0.0, 5.0)
    )
    assert b.equivalent_sheets < a.equivalent_sheets


def test_a_function_that_cannot_be_kept_on_disk_is_compiled_all_the_same():
    """A function without a file has no place for its machine code."""
    scope: dict[str, object] = {}
    exec("def twice(x):\n    return 2 * x\n", scope)
    assert compiled(scope["twice"])(21) == 42
