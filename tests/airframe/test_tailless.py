"""Flying wings: neutral point, tip fins, elevons."""

from __future__ import annotations

import numpy as np
import pytest

from buildgen.aero.planform import Panel, mean_aerodynamic_chord
from buildgen.airframe.members.tip_fins import tip_fins
from buildgen.checks.tailless import fin_volume, wing_neutral_x_mm
from tests.conftest import shipped_kit


def test_a_straight_wing_is_neutral_near_its_quarter_chord():
    """Thin wings of high aspect ratio: 0.25 of the chord, a little less of low (textbook)."""
    assert wing_neutral_x_mm((Panel(1500.0, 200.0, 200.0, 0.0, 0.0),)) == pytest.approx(
        50.0, abs=3.0)


def test_sweep_moves_it_aft_with_the_mean_chord():
    swept = (Panel(640.0, 280.0, 180.0, 190.0, 0.0),)
    quarter = mean_aerodynamic_chord(swept).quarter_x_mm
    assert wing_neutral_x_mm(swept) == pytest.approx(quarter, abs=0.03 * 234)


def test_thrift_flies():
    """Balanced ahead of its neutral point, every check passes, nothing shares space."""
    kit = shipped_kit("thrift")
    assert [c.id for c in kit.checks if c.verdict != "pass"] == []
    assert 0.05 < kit.balance.static_margin < 0.15


def test_fin_volume_by_hand():
    """Both fins by their arm, over the wing's area and span: V = 2 S l / (S_w b)."""
    frame = shipped_kit("thrift").frame
    fins = tip_fins(frame.shop, frame.wing)
    quarter = mean_aerodynamic_chord(frame.wing.plan).quarter_x_mm
    by_hand = 2 * fins.area_mm2 * (fins.middle_x_mm - quarter) / (2 * 640 * 230 * 1280)
    assert fin_volume(frame) == pytest.approx(by_hand, rel=1e-6)


def test_both_elevons_have_a_horn_and_turn_alike():
    right, left = (h for h in shipped_kit("thrift").frame.horns if "elevon" in h.surface)
    assert left.pivot_mm == pytest.approx(right.pivot_mm * (1, -1, 1))
    for horn in (right, left):
        assert np.cross(horn.axis, (1.0, 0.0, 0.0)) @ horn.side < 0
