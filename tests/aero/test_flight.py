"""Performance, controls, bodies and motors: limits, roundabouts, faults."""

from __future__ import annotations

import math

import numpy as np
import pytest

from buildgen.aero import atmosphere, contributions, controls, drag, lateral, performance
from buildgen.aero.contributions import BodyFlow
from buildgen.aero.drag import Polar, Wetted
from buildgen.aero.lattice import Flow, Reference, downwash_deg, lattice_of, loads
from buildgen.aero.lattice_surface import Station, Surface
from buildgen.aero.performance import Craft
from buildgen.problems import DesignError

CRAFT = Craft(1200, 300_000, Polar(0.035, 0.055))


def test_a_warm_day_is_thin_air() -> None:
    """By hand: at one pressure density goes with 1/T; the density height follows."""
    warm = atmosphere.air(500, 20)
    standard = atmosphere.air(500)
    ratio = standard.temperature_k / warm.temperature_k
    assert warm.density_kg_m3 == pytest.approx(standard.density_kg_m3 * ratio)
    assert atmosphere.density_height_m(atmosphere.air(1234)) == pytest.approx(1234)
    assert atmosphere.density_height_m(warm) > 1000
    with pytest.raises(DesignError):
        atmosphere.air(20000)


def test_least_drag_and_least_power_are_least() -> None:
    """By search: no speed near them needs less."""
    for c_lift, cost in (
        (performance.best_glide_c_lift(CRAFT.polar), performance.drag_n),
        (performance.least_power_c_lift(CRAFT.polar), performance.power_required_w),
    ):
        best = performance.level_speed_m_s(CRAFT, c_lift)
        speeds = np.linspace(0.7 * best, 1.4 * best, 2001)
        costs = [cost(CRAFT, float(v)) for v in speeds]
        assert speeds[int(np.argmin(costs))] == pytest.approx(best, rel=1e-3)


def test_level_speed_and_lift_are_each_others_reverse() -> None:
    speed = performance.level_speed_m_s(CRAFT, 0.7, 2.0)
    assert performance.level_c_lift(CRAFT, speed, 2.0) == pytest.approx(0.7)
    stall = performance.level_speed_m_s(CRAFT, 1.1)
    factor = performance.pull_up_load_factor(2 * stall, stall)
    assert performance.level_c_lift(CRAFT, 2 * stall, factor) == pytest.approx(1.1)


def test_endurance_and_range() -> None:
    """By hand: 20 Wh at 50 % through a drag of D at V."""
    speed = 12.0
    power = performance.drag_n(CRAFT, speed) * speed
    assert performance.endurance_s(CRAFT, speed, 20, 0.5) == pytest.approx(36000 / power)
    assert performance.range_m(CRAFT, speed, 20, 0.5) == pytest.approx(12 * 36000 / power)


def test_rolls_against_stepping_in_time() -> None:
    """By stepping Newton's law in small steps; 1e-4 is the step."""
    speed, thrust, mu, lift, air_drag = 9.0, 6.0, 0.08, 0.3, 0.06
    found = performance.ground_roll_m(CRAFT, speed, thrust, mu, lift, air_drag)
    v = x = 0.0
    step = 1e-4
    while v < speed:
        q = CRAFT.pressure_n(v)
        pull = thrust - q * air_drag - mu * (CRAFT.weight_n - q * lift)
        x, v = x + v * step, v + pull / 1.2 * step
    assert found == pytest.approx(x, rel=1e-3)
    found = performance.landing_roll_m(CRAFT, speed, mu, lift, air_drag)
    v, x = speed, 0.0
    while v > 0:
        q = CRAFT.pressure_n(v)
        pull = q * air_drag + mu * (CRAFT.weight_n - q * lift)
        x, v = x + v * step, v - pull / 1.2 * step
    assert found == pytest.approx(x, rel=1e-3)
    with pytest.raises(DesignError, match="lift_off"):
        performance.ground_roll_m(CRAFT, 30, 1.0, 0.08, 0.0, 0.06)


def test_stall_onset_is_where_the_first_strip_is_full() -> None:
    """By hand: washout of 0.1 at the tip delays it; the root fills first at (1.2 - 0)/1.05."""
    onset = performance.stall_onset([0.0, 0.0, -0.1], [1.05, 1.0, 0.95], 1.2)
    assert onset.strip == 0
    assert onset.c_lift == pytest.approx(1.2 / 1.05)
    assert onset.spare == pytest.approx([0, 1.2 - 1.2 / 1.05, 1.3 - 0.95 * 1.2 / 1.05])
    with pytest.raises(DesignError):
        performance.stall_onset([0.0], [0.0], 1.2)


def test_turns() -> None:
    """By hand: 60 degrees of bank is 2 g."""
    assert performance.turn_load_factor(60) == pytest.approx(2)
    assert performance.turn_radius_m(10, 45) == pytest.approx(100 / 9.80665)


def test_friction_between_its_limits() -> None:
    """By hand: all laminar is Blasius, none is the turbulent plate."""
    re = 2e5
    assert drag.friction(re, 1.0) == pytest.approx(drag.laminar_friction(re))
    assert drag.friction(re, 0.0) == drag.turbulent_friction(re)
    assert drag.laminar_friction(re) < drag.friction(re, 0.4) < drag.turbulent_friction(re)


def test_drag_builds_up_to_what_models_have() -> None:
    """By hand: one plate of the wing's skin alone, then 10 % for leaks and a blunt cube."""
    wing = Wetted("wing", 610_000, 200, drag.section_form(0.12), 0.3, 1.0)
    nu = atmosphere.air().kinematic_m2_s
    re = performance.reynolds(12, 200, nu)
    one = drag.friction(re, 0.3) * drag.section_form(0.12) * 610_000
    assert drag.drag_area_mm2(wing, 12, nu) == pytest.approx(one)
    whole = drag.zero_lift_drag([wing], 12, nu, 300_000, blunt_mm2=900, leaks=0.1)
    assert whole == pytest.approx((1.1 * one + 900) / 300_000)
    assert drag.polar(whole, 7, 0.8).drag(0.5) == pytest.approx(
        whole + 0.25 / (math.pi * 7 * 0.8)
    )


def test_throws_go_there_and_back() -> None:
    assert controls.throw_deg(40, controls.throw_mm(40, 15)) == pytest.approx(15)
    turned = controls.servo_turn_deg(10, 15, controls.surface_travel_deg(10, 15, 30))
    assert turned == pytest.approx(30)
    with pytest.raises(DesignError, match="too short"):
        controls.surface_travel_deg(20, 10, 60)


def test_linkage_ratio_is_the_slope_of_the_travel() -> None:
    for servo in (0.0, 20.0, 45.0):
        ahead, back = (controls.surface_travel_deg(9, 14, servo + s) for s in (1e-4, -1e-4))
        slope = (ahead - back) / 2e-4
        assert controls.linkage_ratio(9, 14, servo) == pytest.approx(slope, rel=1e-6)
    assert controls.servo_torque_n_mm(-50, 0.6) == pytest.approx(60)


def test_flap_effectiveness_from_nothing_to_all() -> None:
    """By hand: no flap does nothing, all of the chord is a change of incidence."""
    assert controls.flap_effectiveness(0.0) == pytest.approx(0)
    assert controls.flap_effectiveness(1.0) == pytest.approx(1)
    assert controls.flap_effectiveness(0.25) == pytest.approx(0.60900, abs=1e-5)


def test_steady_roll_and_sideslip() -> None:
    """By hand: signs cancel, the helix angle is 0.1 rad."""
    rate = controls.steady_roll_deg_s(-0.2, -math.degrees(0.2), -0.4, 10, 1000)
    assert rate == pytest.approx(math.degrees(2 * 10 * 0.1 / 1.0))
    assert controls.held_sideslip_deg(-0.05, 20, 0.1) == pytest.approx(10)


def test_a_bodys_upset_by_both_ways() -> None:
    """By hand: both upset; a wider nose upsets more; the factor's place runs along its table."""
    flow = BodyFlow(230, 430, 1500, 200, 4.6, 900, 0.35)
    x = [0, 60, 200, 430, 950]
    slim = contributions.body_pitch_slope_per_rad(x, [20, 60, 90, 90, 25], flow, 205)
    wide = contributions.body_pitch_slope_per_rad(x, [20, 80, 90, 90, 25], flow, 205)
    assert 0 < slim < wide
    found = contributions.body_pitch_slope_by_factor_per_rad(950, 90, 0.35, 300_000, 205)
    assert found == pytest.approx(0.4155 * 90**2 * 950 / (300_000 * 205))
    with pytest.raises(DesignError, match="rising"):
        contributions.body_pitch_slope_per_rad([0, 0], [1, 1], flow, 205)


def test_a_bodys_upset_against_plain_quadrature() -> None:
    """By quadrature with a million even cells, past the steep end at the leading edge."""
    flow = BodyFlow(230, 430, 1500, 200, 4.6, 900, 0.35)
    x, widths = [0, 60, 200, 430, 950], [20, 80, 90, 90, 25]
    edges = np.linspace(0, 950, 1_000_001)
    middles = 0.5 * (edges[1:] + edges[:-1])
    squares = np.interp(middles, x, widths) ** 2
    total = float(np.sum(squares * flow.slope_at(middles)) * 950 / 1e6)
    found = contributions.body_pitch_slope_per_rad(x, widths, flow, 205)
    assert found == pytest.approx(math.pi / 2 * total / (300_000 * 205), rel=1e-3)


@pytest.mark.parametrize("aspect_ratio", [5, 6, 8])
def test_upwash_ahead_of_a_wing_agrees_with_the_lattice(aspect_ratio: int) -> None:
    """The two models of this room share no line of code here. 5 % is what the docstring
    promises up to aspect ratio 8; 5.1 % was measured at 10 (a rectangle is fuller there)."""
    tip = Station(0, aspect_ratio / 2, 0, 1)
    wing = Surface("wing", (Station(0, 0, 0, 1), tip), chordwise=20, spanwise=12)
    lattice, reference = lattice_of([wing]), Reference(aspect_ratio, 1, aspect_ratio)
    found = loads(lattice, reference, Flow(1.0))
    flow = BodyFlow(0, 1, aspect_ratio, 1, math.degrees(found.c_lift), 5, 0.4)
    ahead = np.array([-2.0, -1.0, -0.5, -0.2, -0.1])
    points = np.column_stack([ahead, np.full(5, 0.02), np.zeros(5)])
    lattice_slope = 1.0 - downwash_deg(lattice, found, points)
    assert flow.slope_at(ahead) == pytest.approx(lattice_slope, rel=0.05)


def test_flow_along_a_body() -> None:
    """By hand: nothing beside the wing, (1 - e) at the tail, the stream itself far ahead."""
    flow = BodyFlow(200, 400, 1500, 200, 4.5, 900, 0.4)
    found = flow.slope_at([-1e6, 300, 650, 900])
    assert found == pytest.approx([1.0, 0.0, 0.3, 0.6], abs=1e-4)
    assert contributions.body_yaw_slope_per_rad(3e6, 6, 300_000, 1400) < 0


def test_propeller_forces() -> None:
    """By hand: idle factor 1; a tractor upsets, a pusher steadies; thrust adds."""
    assert contributions.inflow_factor(0.0) == 1.0
    idle = contributions.propeller_normal_slope_per_rad(2, 20, 250, 20)
    assert 0 < idle < contributions.propeller_normal_slope_per_rad(2, 20, 250, 20, 0.5)
    tractor = contributions.propeller_pitch_slope_per_rad(idle, 250, 300, 3e5, 200)
    assert tractor == pytest.approx(math.pi * 250**2 / 4 / 3e5 * 1.5 * idle)
    assert contributions.propeller_pitch_slope_per_rad(idle, 250, -300, 3e5, 200) == -tractor


def test_one_motor_out() -> None:
    """By hand: at the speed found the rudder's moment is what is left of the motor's."""
    yaw = lateral.one_motor_out_yaw_n_mm(5.0, 0.4, -200)
    assert yaw == pytest.approx(1080)
    power = 0.06 * math.radians(25)
    for gone in (math.inf, 25.0):
        speed = lateral.minimum_control_speed_m_s(yaw, 0.06, 25, 3e5, 1400, 1.225, gone)
        held = 0.5 * 1.225 * speed**2 * 0.3 * 1400 * power
        assert held == pytest.approx(yaw * (1 - speed / gone))
    with pytest.raises(DesignError):
        lateral.minimum_control_speed_m_s(yaw, 0.0, 25, 3e5, 1400)


def test_polyhedral_weighs_by_its_arm() -> None:
    """By hand: flat to half, 8 degrees outside: 8 times 3/4."""
    assert lateral.equivalent_dihedral_deg((500, 500), (0, 8)) == pytest.approx(6)
    assert lateral.equivalent_dihedral_deg((700,), (5,)) == pytest.approx(5)
    assert lateral.fin_yaw_slope_per_rad(0.04, 3.0) == pytest.approx(0.12)
    assert lateral.STATIC_MARGIN.holds(0.05) and not lateral.STATIC_MARGIN.holds(0.2)
