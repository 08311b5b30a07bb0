"""Planform: panels add up, and faults are named."""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from buildgen.aero.planform import (
    Panel,
    area_mm2,
    aspect_ratio,
    half_span_mm,
    mean_aerodynamic_chord,
    projected_area_mm2,
    side_area_mm2,
    sweep_deg,
    taper_ratio,
    wetted_area_mm2,
)
from buildgen.problems import DesignError

lengths = st.floats(10.0, 2000.0)


@given(lengths, lengths, lengths, st.floats(-200, 400), st.floats(0.1, 0.9))
def test_a_panel_cut_in_two_is_the_same_wing(
    span: float, root: float, tip: float, sweep: float, cut: float
) -> None:
    """By hand: areas and mean chord do not know where a straight panel is divided."""
    middle = root + cut * (tip - root)
    whole = [Panel(span, root, tip, sweep, 4.0)]
    halves = [
        Panel(cut * span, root, middle, cut * sweep, 4.0),
        Panel((1 - cut) * span, middle, tip, (1 - cut) * sweep, 4.0),
    ]
    assert area_mm2(halves) == pytest.approx(area_mm2(whole))
    one, two = mean_aerodynamic_chord(whole), mean_aerodynamic_chord(halves)
    assert two.length_mm == pytest.approx(one.length_mm)
    assert two.le_x_mm == pytest.approx(one.le_x_mm, abs=1e-6)
    assert two.y_mm == pytest.approx(one.y_mm)
    assert two.z_mm == pytest.approx(one.z_mm)


def test_three_panels_against_numerical_integration() -> None:
    """By quadrature: MAC = int c^2 / int c, x_le and y weighed by c."""
    panels = [Panel(200, 250, 240, 5), Panel(300, 240, 180, 40), Panel(150, 180, 60, 70)]
    ends = np.array([0, 200, 500, 650.0])
    y = np.linspace(0, 650, 650001)
    chord = np.interp(y, ends, [250, 240, 180, 60])
    nose = np.interp(y, ends, [0, 5, 45, 115])

    def integral(values: np.ndarray) -> float:
        return float(np.sum(0.5 * (values[1:] + values[:-1]) * np.diff(y)))

    area = integral(chord)
    mean = mean_aerodynamic_chord(panels)
    assert area_mm2(panels) == pytest.approx(area, rel=1e-9)
    assert mean.length_mm == pytest.approx(integral(chord**2) / area, rel=1e-8)
    assert mean.le_x_mm == pytest.approx(integral(chord * nose) / area, rel=1e-8)
    assert mean.y_mm == pytest.approx(integral(chord * y) / area, rel=1e-8)
    assert mean.quarter_x_mm == mean.le_x_mm + mean.length_mm / 4


def test_dihedral_shows_in_projections_only() -> None:
    """By hand: a panel leaned 60 degrees keeps its area, half of it is seen from above."""
    leaned = [Panel(100, 50, 50, 0, 60.0)]
    assert area_mm2(leaned) == 5000
    assert projected_area_mm2(leaned) == pytest.approx(2500)
    assert side_area_mm2(leaned) == pytest.approx(5000 * math.sqrt(3) / 2)
    assert half_span_mm(leaned) == pytest.approx(50)
    assert mean_aerodynamic_chord(leaned).z_mm == pytest.approx(50 * math.sqrt(3) / 2)


def test_ratios_and_sweep() -> None:
    """By hand: 1400 mm over 200 mm is 7; the quarter chord of a delta's edge."""
    assert aspect_ratio([Panel(700, 200, 200)]) == pytest.approx(7.0)
    assert aspect_ratio([Panel(150, 100, 100, 0, 90)], mirrored=False) == pytest.approx(1.5)
    assert taper_ratio([Panel(100, 100, 80), Panel(100, 80, 40)]) == pytest.approx(0.4)
    delta = [Panel(100, 100, 0, 100)]
    assert sweep_deg(delta, 0.0) == pytest.approx(45.0)
    assert sweep_deg(delta) == pytest.approx(math.degrees(math.atan(0.75)))
    assert sweep_deg(delta, 1.0) == pytest.approx(0.0)
    assert wetted_area_mm2([Panel(100, 100, 100)]) == pytest.approx(20030)


@pytest.mark.parametrize("bad", [(0, 1, 1), (1, -1, 1), (1, 0, 0), (1, math.nan, 1)])
def test_impossible_panels_are_refused(bad: tuple[float, float, float]) -> None:
    with pytest.raises(DesignError):
        Panel(*bad)


def test_no_panel_is_refused() -> None:
    with pytest.raises(DesignError, match="no panel"):
        area_mm2([])
