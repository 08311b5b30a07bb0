"""Resampling, blending, trailing edges."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from shapely.geometry import LineString, Point

from buildgen.section import blend, figures, find, naca, shipped

COARSE = ("goe417a", "goe801")  # tables of 16 to 18 points a side, with corners of their own
ALL = [*shipped(), "naca0012", "naca2412", "naca23012", "naca23112", "0012-64"]


@pytest.mark.parametrize("name", ALL)
def test_a_contour_keeps_the_nose_and_its_order(name: str) -> None:
    section = find(name)
    points = section.contour(141)
    nose = points[140]
    assert np.array_equal(nose, section.upper[0])
    assert points[:, 0].min() == nose[0]
    assert points[0, 1] >= points[-1, 1] - 1e-12
    assert np.all(np.diff(points[:141, 0]) < 0)
    assert np.all(np.diff(points[140:, 0]) > 0)


@pytest.mark.parametrize("name", [n for n in ALL if n not in COARSE])
def test_chord_error_at_300_mm(name: str) -> None:
    """181 points a side stay within 0.012 mm of the curve at 300 mm of chord."""
    section = find(name)
    polyline = LineString(section.contour(181) * 300)
    dense = np.vstack([section.upper[::7], section.lower[::7]]) * 300
    assert max(polyline.distance(Point(p)) for p in dense) < 0.012


@settings(max_examples=20, deadline=None)
@given(st.sampled_from(ALL), st.sampled_from(ALL), st.floats(0, 1))
def test_a_blend_is_linear_point_by_point(a: str, b: str, share: float) -> None:
    one, two = find(a), find(b)
    mixed = blend(one, two, share).contour(81)
    straight = one.contour(81) * (1 - share) + two.contour(81) * share
    assert np.abs(mixed - straight).max() < 2e-5


@settings(max_examples=20, deadline=None)
@given(st.sampled_from(ALL), st.floats(0, 0.02))
def test_a_trailing_edge_is_at_least_so_thick(name: str, gap: float) -> None:
    section = find(name)
    opened = section.with_trailing_edge(gap)
    assert opened.trailing_edge_gap == pytest.approx(max(gap, section.trailing_edge_gap), abs=2e-5)
    near = section.upper[:, 0] < section.upper[0, 0] + 0.05
    assert np.abs(opened.upper[near] - section.upper[near]).max() < 2e-4
    assert np.array_equal(opened.upper[0], section.upper[0])


def test_closed_and_open_naca_edges() -> None:
    assert naca("2412").trailing_edge_gap == pytest.approx(0.00252, abs=2e-5)
    assert naca("2412", closed=True).trailing_edge_gap < 1e-4
    assert naca("2412-closed").trailing_edge_gap < 1e-4


def test_a_coarse_table_does_not_wiggle() -> None:
    """Between the points of a coarse set the curve stays within their convex neighbourhood."""
    for name in ("goe417a", "n22", "usa35b", "naca_m6"):
        section = find(name)
        for side in (section.upper, section.lower):
            bend = np.diff(np.sign(np.diff(side[side[:, 0] > 0.05, 1], 2)))
            assert np.count_nonzero(np.abs(bend) > 1) < 40, name


def test_figures_of_a_symmetrical_section() -> None:
    f = figures(naca("0012"))
    assert f.thickness == pytest.approx(0.12, abs=5e-5)
    assert f.thickness_at == pytest.approx(0.30, abs=0.01)
    assert f.camber == pytest.approx(0.0, abs=1e-9)
