"""The stream behind a propeller, and what a blown wing gains between its two limits."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from buildgen.drive.slipstream import lift_gain, speed_near_m_s, stream


@given(st.floats(0.1, 40), st.floats(80, 500), st.floats(0.5, 30))
def test_the_stream_grows_from_the_disc_to_its_far_speed(
    thrust: float, diameter: float, speed: float
) -> None:
    found = stream(thrust, diameter, speed)
    assert speed_near_m_s(found, speed, 0.0, diameter) == pytest.approx(speed + found.induced_m_s)
    assert speed_near_m_s(found, speed, 1e6, diameter) == pytest.approx(found.far_m_s, rel=1e-6)
    assert diameter * 0.7071 < found.diameter_mm + 1e-9 <= diameter


@given(st.floats(2, 20), st.floats(1, 3), st.floats(0, 1), st.floats(0, 1))
def test_the_gain_lies_between_the_product_and_the_square(
    speed: float, ratio: float, blown: float, share: float
) -> None:
    low, found, high = (lift_gain(speed, ratio * speed, blown, s) for s in (0.0, share, 1.0))
    assert low == pytest.approx(1 + blown * (ratio - 1))
    assert high == pytest.approx(1 + blown * (ratio**2 - 1))
    assert low - 1e-9 <= found <= high + 1e-9


def test_still_air_gives_nothing() -> None:
    assert lift_gain(10.0, 10.0, 1.0) == 1.0
    assert lift_gain(10.0, 8.0, 1.0) == 1.0
