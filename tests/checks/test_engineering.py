"""Thrust, flight time and strength of real kits: a change moves the numbers the right way."""

from __future__ import annotations

from dataclasses import replace
from pathlib import Path

import numpy as np
import pytest

from buildgen import Build, build, load
from buildgen.checks import motor_out, propel, strong
from buildgen.checks.desk import Check, Desk
from buildgen.design import find_design
from buildgen.drive.motor import Motor, Pack, static_point
from buildgen.drive.propeller import shaft_power_w, static_estimate
from buildgen.problems import DesignError


def changed(name: str, folder: Path, *swaps: tuple[str, str]) -> Build:
    text = find_design(name).read_text("utf-8")
    for old, new in swaps:
        assert old in text
        text = text.replace(old, new, 1)
    path = folder / f"{name}.toml"
    path.write_text(text)
    return build(load(path))


def checks(made: Build) -> list[Check]:
    """Those of this file alone: the dry fit takes its time."""
    found = (strong.spars, strong.joiners, propel.thrust, propel.cruise, motor_out.motor_out)
    return [c for check in found for c in check(made.desk)]


def value(made: Build, id: str) -> float:
    found = next(c.value for c in checks(made) if c.id == id)
    assert found is not None
    return found


@pytest.fixture(scope="module")
def desk(sedge: Build) -> Desk:
    return sedge.desk


def test_the_root_carries_the_lift_less_the_wing(desk: Desk) -> None:
    y, moment = strong.bending(desk)
    weight = desk.balance.mass_g * 1e-3 * 9.80665 * desk.definition.loads.limit
    # Centre of lift of a straight-tapered half wing between an ellipse's and its own.
    arm = moment[0] / (weight / 2)
    assert 0.25 * y[-1] < arm < 0.47 * y[-1]
    # A tip beyond the last rib only weighs.
    assert abs(moment[-1]) < 2e-3 * moment[0]
    lifted = moment > 0.01 * moment[0]
    assert np.all(np.diff(moment[lifted]) < 0)


def test_twice_the_load_is_half_the_margin(sedge: Build, desk: Desk) -> None:
    station = strong.station(desk, 50.0)
    assert len(station.groups) == 1
    assert len(station.groups[0]) == 2
    one, two = station.worst(1000.0)[0], station.worst(2000.0)[0]
    assert one == pytest.approx(2 * two)


def test_caps_that_bend_as_one_are_stiffer_than_alone(desk: Desk) -> None:
    station = strong.station(desk, 50.0)
    alone = strong.Station(tuple((p,) for p in station.groups[0]))
    assert station.stiffness > 10 * alone.stiffness


def test_a_thicker_cap_is_stronger(sedge: Build, tmp_path: Path) -> None:
    thick = changed("sedge", tmp_path, ("height_mm = 2", "height_mm = 3"))
    assert value(thick, "spar-stress") > 1.15 * value(sedge, "spar-stress")
    assert value(thick, "tip-deflection") < value(sedge, "tip-deflection")


def test_a_larger_propeller_draws_more(sedge: Build, tmp_path: Path) -> None:
    large = changed("sedge", tmp_path, ("diameter_in = 7", "diameter_in = 8"))
    assert value(large, "motor-current") > value(sedge, "motor-current")
    assert value(large, "thrust-weight") > value(sedge, "thrust-weight")


def test_thinner_air_gives_less_thrust(sedge: Build, tmp_path: Path) -> None:
    high = changed("sedge", tmp_path, ("[wing]\n", "[site]\nelevation_m = 2500\n[wing]\n"))
    assert value(high, "thrust-weight") < value(sedge, "thrust-weight")
    assert value(high, "climb") < value(sedge, "climb")


def test_without_constants_it_says_what_is_missing(sedge: Build, tmp_path: Path) -> None:
    bare = changed("sedge", tmp_path, ("kv_rpm_v = 1400, ", ""))
    check = next(c for c in checks(bare) if c.id == "thrust")
    assert check.verdict == "warn"
    assert "kv_rpm_v" in check.advice


def test_drag_is_built_from_the_skins_of_the_kit(desk: Desk) -> None:
    craft = propel.craft_of(desk)
    assert 0.015 < craft.polar.zero < 0.08
    bare = replace(desk.kit, parts=tuple(p for p in desk.kit.parts if p.id != "CF"))
    less = propel.craft_of(replace(desk, kit=bare))
    assert less.polar.zero < craft.polar.zero


def test_the_operating_point_balances_powers() -> None:
    motor, pack = Motor(1400, 0.1, 0.6), Pack(3, 1300)
    propeller = static_estimate(177.8, 101.6)
    point = static_point(motor, pack, propeller, 177.8, 2, 0.01)
    assert point.shaft_w == pytest.approx(
        shaft_power_w(propeller.cp, point.rpm, 177.8), rel=1e-6)
    assert point.battery_a == pytest.approx(2 * point.amperes)
    assert point.battery_v - point.volts == pytest.approx(0.01 * point.amperes)
    assert point.rpm == pytest.approx(motor.rpm(point.volts, point.amperes))


def test_a_propeller_that_does_not_turn_is_refused() -> None:
    with pytest.raises(DesignError):
        static_point(Motor(1000, 0.1, 400.0), Pack(3, 1300), static_estimate(254, 127), 254)


def test_motors_further_out_are_harder_to_hold(marram: Build, tmp_path: Path) -> None:
    far = changed("marram", tmp_path, ("spacing_mm = 320", "spacing_mm = 350"))
    assert value(far, "motor-out") > value(marram, "motor-out")


def test_one_motor_in_the_nose_has_no_such_case(sedge: Build) -> None:
    assert not [c for c in checks(sedge) if c.id == "motor-out"]


def test_a_joiner_is_a_wire_in_bending(marram: Build) -> None:
    y, moment = strong.bending(marram.desk)
    found = value(marram, "joiner-stress")
    # Two thirds of the whole moment at least goes through the main spar's wire, and not more
    # than all of it: strength over stress lies between both.
    at = float(np.interp(420.0, y, moment))
    wire = next(p for p in marram.parts if p.id == "J1bR")
    d = float(wire.form.section.split()[0])  # type: ignore[union-attr]
    alone = 0.9 * 1800 * np.pi * d**3 / 32 / at
    assert alone <= found <= 1.5 * alone
