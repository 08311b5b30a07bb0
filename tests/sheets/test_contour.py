"""The beam's path: what a simulated beam leaves, and what it refuses."""

from __future__ import annotations

import math

import numpy as np
import pytest
import shapely
from hypothesis import given, settings
from hypothesis import strategies as st
from shapely.affinity import rotate
from shapely.geometry import LinearRing, Point, Polygon, box

from buildgen.part import Part, Plate
from buildgen.problems import DesignError
from buildgen.sheets.contour import CHORD_ERROR_MM, Contours, beam_path
from buildgen.sheets.thin import thinned
from buildgen.solid import Circle, Pose
from tests.conftest import shipped_kit


def part(outline: Polygon, circles: tuple[Circle, ...] = ()) -> Part:
    return Part("P1", "a plate", "balsa", Plate(outline, 3.0, circles), Pose(), "s", "wing.ribs")


def burnt_out(path: Contours, kerf_mm: float) -> Polygon:
    """What a round beam along the path leaves of a large sheet: the piece that is the part."""
    lines = [LinearRing(path.outside), *(LinearRing(r) for r in path.inside)]
    beam = shapely.union_all([line.buffer(kerf_mm / 2, quad_segs=32) for line in lines])
    for x, y, r in path.circles:
        ring = Point(x, y).buffer(r, 256).exterior
        beam = beam.union(ring.buffer(kerf_mm / 2, quad_segs=32))
    rest = Polygon(path.outside, path.inside)
    for x, y, r in path.circles:
        rest = rest.difference(Point(x, y).buffer(r, 256))
    left = rest.difference(beam)
    return max(getattr(left, "geoms", [left]), key=lambda g: g.area)


def shape(sides: int, size: float, notch: tuple[float, float], hole: float, turn: float) -> Polygon:
    """A star-shaped plate with a square notch and a square hole."""
    angles = np.linspace(0, 2 * np.pi, sides, endpoint=False)
    radii = size * (1 + 0.12 * np.cos(3 * angles))
    whole = Polygon(np.column_stack([radii * np.cos(angles), radii * np.sin(angles)]))
    wide, deep = notch
    cut = whole.difference(box(-wide / 2, size * 0.9 - deep, wide / 2, size * 2))
    return rotate(cut.difference(box(-hole, -hole, hole, hole)), turn, origin=(0, 0))


@settings(max_examples=40, deadline=None, derandomize=True)
@given(
    sides=st.integers(3, 90), size=st.floats(20, 120), wide=st.floats(1.0, 8.0),
    deep=st.floats(1.0, 5.0), hole=st.floats(0.8, 4.0), turn=st.floats(0, 90),
    kerf=st.floats(0.02, 0.6), radius=st.floats(0.5, 2.5),
)
def test_a_simulated_beam_leaves_the_nominal_part(  # type: ignore[no-untyped-def]
    sides, size, wide, deep, hole, turn, kerf, radius
) -> None:
    outline = shape(sides, size, (wide, deep), hole, turn)
    circle = (0.0, -size * 0.35, radius)
    nominal = outline.difference(Point(circle[:2]).buffer(radius, 256))
    left = burnt_out(beam_path(part(outline, (circle,)), kerf), kerf)
    slack = CHORD_ERROR_MM + 1e-4
    # nothing of the part is burnt: not further in than the allowed 0.005 mm
    assert nominal.buffer(-slack).difference(left).area < 1e-6
    # and nothing is left standing outside it but in inner corners, within the beam's own radius
    rest = left.difference(nominal.buffer(slack, join_style="mitre"))
    corners = shapely.MultiPoint(_inner_corners(outline))
    reach = (math.sqrt(2) - 1) * kerf / 2 + slack
    assert rest.difference(corners.buffer(max(kerf, 0.1))).area < 1e-6
    assert rest.is_empty or shapely.hausdorff_distance(rest.union(nominal), nominal) < 2 * reach


def _inner_corners(outline: Polygon) -> list[tuple[float, float]]:
    found = []
    for ring in (outline.exterior, *outline.interiors):
        found += list(ring.coords)
    return found


@pytest.mark.parametrize("kerf", [0.1, 0.16, 0.3])
def test_the_rest_in_a_square_corner_is_the_one_that_cannot_be_helped(kerf: float) -> None:
    """A beam of radius r leaves (sqrt 2 - 1) r in a square corner: elementary geometry."""
    outline = box(0, 0, 40, 40).difference(box(10, 10, 30, 30))
    left = burnt_out(beam_path(part(outline), kerf), kerf)
    opening = Polygon(left.interiors[0])
    away = Point(10, 10).distance(opening)
    assert away == pytest.approx((math.sqrt(2) - 1) * kerf / 2, abs=2e-3)
    assert opening.bounds == pytest.approx((10, 10, 30, 30), abs=1e-3)


@pytest.mark.parametrize("name", ["marram", "samphire", "sedge"])
def test_areas_of_shipped_parts_are_kept(name: str) -> None:
    for p in shipped_kit(name).of("cut"):
        assert isinstance(p.form, Plate)
        path = beam_path(p, 0.16)
        left = Polygon(path.outside).buffer(-0.08, join_style="mitre")
        nominal = Polygon(p.form.outline.exterior)
        assert left.area == pytest.approx(nominal.area, rel=1e-4), p.id
        edge = nominal.buffer(0.08, join_style="mitre", mitre_limit=3.0).exterior
        away = max(edge.distance(Point(v)) for v in path.outside)
        assert away < CHORD_ERROR_MM + 1e-6, p.id


def test_a_curve_takes_few_points_and_keeps_its_area() -> None:
    """Chords of sagitta s on radius r span 2 acos(1 - s / r): elementary geometry."""
    angles = np.linspace(0, 2 * np.pi, 2000, endpoint=False)
    ring = 50 * np.column_stack([np.cos(angles), np.sin(angles)])
    thin = thinned(ring, 0.005)
    fewest = math.pi / math.acos(1 - 0.005 / 50)
    assert fewest <= len(thin) < 2.1 * fewest
    assert Polygon(thin).area == pytest.approx(Polygon(ring).area, rel=1e-5)
    assert np.abs(np.hypot(*thin.T) - 50).max() < 0.005


def test_corners_stay_where_they_are() -> None:
    ring = np.array([(0, 0), (20, 0), (40, 0), (40, 30), (0, 30)], float)
    assert {tuple(p) for p in thinned(ring, 0.005)} == {(0, 0), (40, 0), (40, 30), (0, 30)}


@pytest.mark.parametrize(
    ("outline", "circles", "at"),
    [
        (box(0, 0, 40, 20).difference(box(19.95, 5, 20.05, 15)), (), "x = 20.0, y = 10.0"),
        (box(0, 0, 40, 20).difference(box(9.95, 5, 10.05, 25)), (), "x = 10.0"),
        (box(0, 0, 40, 20), ((7.0, 8.0, 0.05),), "x = 7.0, y = 8.0"),
    ],
)
def test_what_is_narrower_than_the_beam_is_refused_with_its_place(  # type: ignore[no-untyped-def]
    outline, circles, at: str
) -> None:
    with pytest.raises(DesignError, match="narrower than the beam") as error:
        beam_path(part(outline, circles), 0.16)
    problem = error.value.problems[0]
    assert "P1" in problem.says
    assert at in problem.says
    assert problem.path == "wing.ribs"
    assert beam_path(part(outline, circles), 0.02).outside.shape[1] == 2
