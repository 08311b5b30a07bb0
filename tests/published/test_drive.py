"""Propulsion against published tests and closed forms; the source stands beside each."""

from __future__ import annotations

import pytest

from buildgen.drive.motor import Motor, Pack, flight_time_min
from buildgen.drive.propeller import (
    efficiency,
    empirical_thrust_n,
    figure_of_merit,
    pitch_speed_m_s,
    shaft_power_w,
    static_estimate,
    thrust_n,
)
from buildgen.drive.slipstream import stream

IN = 25.4
# UIUC Propeller Database (J. B. Brandt, R. W. Deters, G. K. Ananda, O. D. Dantsker, M. S. Selig,
# University of Illinois), second-hand text: diameter, rpm, CT, CP as published; thrust [N], power
# [W] and figure of merit computed from them at 1.225 kg/m3.
SLOW_FLYER_10X47 = (
    (2377, 0.1059, 0.0431, 0.847, 3.471, 0.638), (4029, 0.1158, 0.0466, 2.662, 18.274, 0.675),
    (5147, 0.1237, 0.0500, 4.641, 40.877, 0.694), (6528, 0.1299, 0.0531, 7.840, 88.570, 0.703),
)
DIRECT_9X5 = (
    (1430, 0.092491, 0.040151, 0.176, 0.416, 0.559),
    (3980, 0.104592, 0.039897, 1.540, 8.905, 0.676),
    (6397, 0.109919, 0.040164, 4.179, 37.219, 0.724),
)


@pytest.mark.parametrize(("diameter", "row"), [
    *((10 * IN, r) for r in SLOW_FLYER_10X47), *((9 * IN, r) for r in DIRECT_9X5)])
def test_static_rows(diameter: float, row: tuple[float, ...]) -> None:
    rpm, ct, cp, thrust, power, merit = row
    assert thrust_n(ct, rpm, diameter) == pytest.approx(thrust, rel=2e-3)
    assert shaft_power_w(cp, rpm, diameter) == pytest.approx(power, rel=2e-3)
    assert figure_of_merit(ct, cp) == pytest.approx(merit, abs=0.001)


def test_efficiency_in_flight() -> None:
    # UIUC Propeller Database, volume 1.7, 10x4.7 slow flyer at 6512 rpm; second-hand text.
    for advance, ct, cp, wanted in ((0.089, 0.1201, 0.0523, 0.204), (0.199, 0.1019, 0.0493, 0.410),
                                    (0.308, 0.0833, 0.0454, 0.566), (0.445, 0.0562, 0.0381, 0.657)):
        assert efficiency(advance, ct, cp) == pytest.approx(wanted, abs=0.003)


def test_the_empirical_formula_gives_its_author_s_example() -> None:
    # G. Staples, Propeller Static and Dynamic Thrust Calculation: 10x6 at 10500 rpm, 1619 gf.
    found = empirical_thrust_n(10 * IN, 6 * IN, 10500)
    assert found / 9.80665 * 1000 == pytest.approx(1619, abs=1)
    assert empirical_thrust_n(10 * IN, 6 * IN, 10500, 26.67) == pytest.approx(0, abs=0.01)


def test_the_estimate_is_as_far_from_the_tunnel_as_its_author_says() -> None:
    # UIUC 9x5 at 6397 rpm over the formula: 1.12, within the 13 % stated for most propellers;
    # the 10x4.7 slow flyer 1.44, within the 67 % stated for such.
    nine = static_estimate(9 * IN, 5 * IN)
    assert DIRECT_9X5[2][1] / nine.ct == pytest.approx(1.12, abs=0.01)
    slow = static_estimate(10 * IN, 4.7 * IN)
    assert SLOW_FLYER_10X47[3][1] / slow.ct == pytest.approx(1.44, abs=0.01)


def test_momentum_theory_at_rest_and_in_flight() -> None:
    # W. J. M. Rankine / R. E. Froude momentum theory; closed form, from memory.
    still = stream(10.0, 254.0)
    assert still.induced_m_s == pytest.approx(8.975, abs=0.002)
    assert still.power_w == pytest.approx(89.75, abs=0.02)
    assert still.far_m_s == pytest.approx(17.95, abs=0.004)
    assert still.diameter_mm / 254 == pytest.approx(0.7071, abs=1e-4)
    moving = stream(5.0, 254.0, 15.0)
    assert moving.induced_m_s == pytest.approx(2.325, abs=0.002)
    assert moving.far_m_s / 15 == pytest.approx(1.31, abs=3e-4)
    assert 15 * 5.0 / moving.power_w == pytest.approx(0.8658, abs=3e-4)


def test_no_tested_propeller_beats_the_ideal() -> None:
    for rpm, ct, cp, *_ in SLOW_FLYER_10X47:
        ideal = stream(thrust_n(ct, rpm, 254.0), 254.0).power_w
        assert ideal < shaft_power_w(cp, rpm, 254.0)


def test_motor_of_three_constants() -> None:
    # M. Drela, First-Order DC Electric Motor Model (2007), as remembered; worked with own numbers.
    motor = Motor(1000, 0.08, 0.8)
    assert motor.rpm(11.1, 15) == pytest.approx(9900)
    assert motor.shaft_w(11.1, 15) == pytest.approx(140.58, abs=0.05)
    assert motor.efficiency(11.1, 15) == pytest.approx(0.8443, abs=5e-4)
    assert motor.torque_n_m_a == pytest.approx(0.0095493, abs=1e-6)


def test_pitch_speed_and_flight_time() -> None:
    # Geometry and definition, from memory: 10000 rpm at 6 in; 2200 mAh, 80 % at 12 A.
    assert pitch_speed_m_s(10000, 6 * IN) == pytest.approx(25.4, abs=0.01)
    assert flight_time_min(2200, 12) == pytest.approx(8.8)


def test_energy_of_a_pack() -> None:
    # Common practice (memory): nominal 3.7 V a cell, 80 % used.
    assert Pack(3, 2200).energy_wh() == pytest.approx(3 * 3.7 * 2.2 * 0.8)
