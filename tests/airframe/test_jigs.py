"""Cradles: true under the wing, flat on the board, and no weight in the aircraft."""

from __future__ import annotations

import numpy as np
import pytest
import shapely
from shapely.geometry import Polygon

from buildgen.airframe.jigs import make_jigs
from buildgen.solid import mesh
from tests.conftest import shipped_kit


@pytest.fixture(scope="module")
def cradle():
    return [p for p in shipped_kit("thrift").parts if p.tool]


def plates(cradle):
    return [p for p in cradle if p.id.startswith("JG")]


def test_all_feet_stand_in_one_plane(cradle):
    panel = shipped_kit("thrift").frame.wing.panels[0]
    feet = []
    for part in cradle:
        corners = part.pose(np.column_stack([
            *np.array(part.form.outline.exterior.coords).T, np.zeros(len(
                part.form.outline.exterior.coords))]))
        feet.append(((corners - panel.root.nose) @ panel.up).min())
    assert np.ptp(feet) < 1e-6


def test_upper_edges_follow_the_under_surface(cradle):
    """Between a tenth and nine tenths of the chord: on the smaller section of both faces."""
    panel = shipped_kit("thrift").frame.wing.panels[0]
    for part in plates(cradle):
        wing = Polygon(part.pose.local(panel.ring(part.pose))[:, :2])
        x0, _, x1, _ = wing.bounds
        for share in np.linspace(0.1, 0.9, 9):
            x = x0 + share * (x1 - x0)
            line = shapely.LineString([(x, -200), (x, 200)])
            top = part.form.outline.intersection(line).bounds[3]
            low = wing.intersection(line).bounds[1]
            assert low - 0.35 < top <= low + 1e-6


def test_twist_stands_in_the_plates(cradle):
    """The wing is washed out: from root to tip the tail end rises against the nose."""
    rise = []
    for part in plates(cradle):
        x, y = np.array(part.form.outline.exterior.coords).T
        back = y[x > x.max() - 1].max()
        rise.append((back - y[x < x.min() + 1].max()) / (x.max() - x.min()))
    assert rise[-1] - rise[0] > np.tan(np.radians(1.5))


def test_rails_and_plates_halve_into_each_other(cradle):
    solids = [mesh(p.shape) for p in cradle]
    for i, a in enumerate(solids):
        for b in solids[:i]:
            assert (a ^ b).volume() < 0.5


def test_tools_weigh_nothing_and_do_not_fly(cradle):
    kit = shipped_kit("thrift")
    assert cradle and all(p.mass_g == 0 and p.mass_sigma_g == 0 for p in cradle)
    assert not set(cradle) & set(kit.flying)
    assert all(p.form.area_mm2 > 0 for p in cradle)
    assert kit.steps[0] == cradle[0].step


def test_no_cradle_unless_asked_for():
    frame = shipped_kit("sedge").frame
    assert make_jigs(frame.shop, frame.wing, frame.drive.bays) == ()
