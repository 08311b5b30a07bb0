"""Properties of built-up sections."""

from __future__ import annotations

from dataclasses import replace

import pytest
from hypothesis import given
from hypothesis import strategies as st

from buildgen.strength.section import Piece, rectangle_mm, stiffness_n_mm2, stress_mpa

CAP = Piece(*rectangle_mm(6, 3), 10.0, 1.5, 10820.0, 26.3, "cap")


@given(st.floats(-200, 200))
def test_it_does_not_matter_where_heights_are_counted_from(shift: float) -> None:
    pair = [CAP, replace(CAP, at_mm=-10.0)]
    moved = [replace(p, at_mm=p.at_mm + shift) for p in pair]
    assert stiffness_n_mm2(moved)[0] == pytest.approx(stiffness_n_mm2(pair)[0], rel=1e-9)
    assert stiffness_n_mm2(moved)[1] == pytest.approx(shift, abs=1e-9)
    assert stress_mpa(moved, 500.0) == pytest.approx(stress_mpa(pair, 500.0), rel=1e-9)


@given(st.floats(0.1, 30), st.floats(1, 1e5))
def test_stress_carries_the_moment(apart: float, moment: float) -> None:
    pair = [replace(CAP, at_mm=apart), replace(CAP, at_mm=-apart)]
    # Force at the middle of each cap times its arm, and the caps' own bending.
    outer = stress_mpa(pair, moment)[0]
    middle = outer * apart / (apart + 1.5)
    carried = 2 * middle * CAP.area_mm2 * apart + 2 * (outer - middle) * CAP.own_mm4 / 1.5
    assert carried == pytest.approx(moment, rel=1e-9)
