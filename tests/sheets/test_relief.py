"""Corner relief, bridges and arcs."""

from __future__ import annotations

import math

import numpy as np
import pytest
from shapely.geometry import LineString, Point, Polygon, box
from shapely.geometry.polygon import orient

from buildgen.design.schema import Laser
from buildgen.part import Part, Plate
from buildgen.sheets.arcs import with_arcs
from buildgen.sheets.bridges import bridged
from buildgen.sheets.relief import relieved, relieved_outline
from buildgen.solid import Pose

SLOT = box(0, 0, 60, 40).difference(box(20, 15, 40, 18))
NOTCH = box(0, 0, 60, 40).difference(box(20, 30, 23, 40))


@pytest.mark.parametrize("one_wall", [False, True])
@pytest.mark.parametrize("outline", [SLOT, NOTCH])
def test_a_square_peg_reaches_the_corner(outline: Polygon, one_wall: bool) -> None:
    """A beam of radius r leaves (1 - pi/4) r^2 in a square corner; after the bite, nothing."""
    r, corners = 0.2, 4 if outline is SLOT else 2
    opening = box(0, 0, 60, 40).difference(outline).buffer(-1e-3)

    def in_the_way(cut: Polygon) -> float:
        return cut.buffer(r, 64).buffer(-r, 64).intersection(opening).area

    assert in_the_way(outline) == pytest.approx(corners * (1 - math.pi / 4) * r * r, rel=0.1)
    assert in_the_way(relieved_outline(outline, 0.5, one_wall)) < 0.02 * in_the_way(outline)


def test_a_dog_bone_bites_both_walls_and_a_t_bone_the_shorter() -> None:
    """A circle through the corner on its bisector reaches r (1 - sqrt(1/2)) into each wall."""
    both = SLOT.difference(relieved_outline(SLOT, 0.5, False))
    x0, y0, x1, y1 = both.bounds
    deep = 0.5 * (1 - math.sqrt(0.5))
    assert (20 - x0, x1 - 40) == pytest.approx((deep, deep), abs=0.01)
    assert (15 - y0, y1 - 18) == pytest.approx((deep, deep), abs=0.01)
    one = SLOT.difference(relieved_outline(SLOT, 0.5, True)).bounds
    assert (20 - one[0], one[2] - 40) == pytest.approx((0.5, 0.5), abs=0.01)
    assert (one[1], one[3]) == pytest.approx((15, 18), abs=0.01)


def test_outer_corners_curves_and_tight_places_are_left_alone() -> None:
    assert relieved_outline(box(0, 0, 60, 40), 0.5, False).equals(box(0, 0, 60, 40))
    rounded = box(0, 0, 60, 40).difference(box(20, 15, 40, 25).buffer(3))
    assert relieved_outline(rounded, 0.5, False).equals(rounded)
    narrow = box(0, 0, 60, 40).difference(box(0.3, 15, 40, 18))  # 0.3 mm of material left
    assert isinstance(relieved_outline(narrow, 0.5, True), Polygon)
    assert len(relieved_outline(narrow, 0.5, True).interiors) == 1


def test_only_on_request() -> None:
    plate = Part("P", "p", "balsa", Plate(SLOT, 3.0), Pose(), "s", "k")
    assert relieved(plate, Laser()) is plate
    bitten = relieved(plate, Laser(relief="t-bone"))
    assert isinstance(bitten.form, Plate)
    assert bitten.form.area_mm2 < SLOT.area - 1


@pytest.mark.parametrize("count", [1, 2, 3, 5])
def test_bridges_leave_as_much_uncut_as_asked(count: int) -> None:
    ring = np.asarray(orient(box(0, 0, 60, 40)).exterior.coords)[:-1]
    runs = bridged(ring, count, 0.8)
    assert len(runs) == count
    cut = sum(LineString(r).length for r in runs)
    assert cut == pytest.approx(200 - count * 0.8)
    whole = Polygon(ring).exterior
    for run in runs:
        assert whole.buffer(1e-6).contains(LineString(run))
    ends = [Point(r[k]) for r in runs for k in (0, -1)]
    corners = [Point(p) for p in ring]
    assert min(e.distance(c) for e in ends for c in corners) > 0.3, "a bridge at a corner"


def test_a_small_ring_gets_fewer_bridges() -> None:
    ring = np.asarray(orient(box(0, 0, 3, 2)).exterior.coords)[:-1]
    assert len(bridged(ring, 6, 0.8)) == 2
    assert len(bridged(ring, 6, 5.0)) == 1


def bulge_points(vertices: list[tuple[float, float, float]], step: float = 0.05) -> np.ndarray:
    """Points along a polyline with bulges, by the definition of a bulge."""
    found = []
    for (x0, y0, b), (x1, y1, _) in zip(vertices, [*vertices[1:], vertices[0]], strict=True):
        a, c = np.array([x0, y0]), np.array([x1, y1])
        chord = np.hypot(*(c - a))
        n = max(2, int(chord / step))
        if abs(b) < 1e-12:
            found += [a + (c - a) * t for t in np.linspace(0, 1, n, endpoint=False)]
            continue
        sweep = 4 * math.atan(b)
        radius = chord / 2 / math.sin(sweep / 2)
        left = np.array([-(c - a)[1], (c - a)[0]]) / chord
        middle = (a + c) / 2 + left * radius * math.cos(sweep / 2)
        start = math.atan2(*(a - middle)[::-1])
        found += [middle + abs(radius) * np.array([math.cos(start + sweep * t),
                                                   math.sin(start + sweep * t)])
                  for t in np.linspace(0, 1, n, endpoint=False)]
    return np.array(found)


@pytest.mark.parametrize("error", [0.01, 0.02, 0.05])
def test_arcs_stay_within_the_error_and_are_few(error: float) -> None:
    """A NACA 2412 outline of 200 mm: about 14 to 23 arcs do between 0.02 and 0.005 mm."""
    from buildgen.section import find

    points = np.asarray(find("naca2412").contour(160), float) * 200.0
    ring = points[:-1] if np.allclose(points[0], points[-1]) else points
    arcs = with_arcs(ring, error)
    line = Polygon(ring).exterior
    away = max(line.distance(Point(p)) for p in bulge_points(arcs))
    assert away < error + 0.004  # the points themselves leave the curve by that much
    assert len(arcs) < 45


def test_a_circle_is_few_arcs_and_a_square_none() -> None:
    angles = np.linspace(0, 2 * np.pi, 180, endpoint=False)
    ring = 20 * np.column_stack([np.cos(angles), np.sin(angles)])
    arcs = with_arcs(ring, 0.01)
    assert len(arcs) <= 4
    assert all(b > 0 for *_, b in arcs)
    square = np.array([(0, 0), (10, 0), (20, 0), (20, 20), (0, 20)], float)
    assert [b for *_, b in with_arcs(square, 0.01)] == [0.0] * 4
