"""Stability by the classical method held against textbooks; sources in the data file."""

from __future__ import annotations

import math
import tomllib
from pathlib import Path
from typing import Any

import pytest

from buildgen.aero import stability
from buildgen.aero.stability import WingAndTail

DATA = tomllib.loads(
    (Path(__file__).parent / "data" / "aero_lifting_surface.toml").read_text(encoding="utf-8")
)


def case(name: str) -> tuple[dict[str, Any], dict[str, Any]]:
    check = next(c for c in DATA["check"] if c["id"] == name)
    return (
        {k: v["value"] for k, v in check["inputs"].items()},
        {e["quantity"]: pytest.approx(e["value"], abs=e["tol"]) for e in check["expected"]},
    )


def per_deg(per_rad: float) -> float:
    return math.radians(per_rad)


def test_lift_slope_of_helmbold_and_polhamus() -> None:
    """NACA TN 3911 (1957), USAF DATCOM 4.1.3.2."""
    _, expected = case("ls-helmbold-polhamus")
    assert stability.lift_slope_per_rad(6.0) == expected["CL_alpha_AR6"]
    assert stability.lift_slope_per_rad(8.0) == expected["CL_alpha_AR8"]
    assert stability.lift_slope_per_rad(5.0, 45.0) == expected["CL_alpha_AR5_sweep45"]


@pytest.mark.parametrize("aspect_ratio", [4, 6, 8, 10])
def test_elliptic_wing_on_a_lifting_line(aspect_ratio: int) -> None:
    """Prandtl: 2 pi AR/(AR + 2)."""
    _, expected = case("ls-elliptic-ll")
    found = stability.elliptic_slope_per_rad(aspect_ratio)
    assert found == expected[f"CL_alpha_AR{aspect_ratio}"]


def test_far_downwash() -> None:
    """Lifting-line theory: 0.5 far behind an elliptic wing of aspect ratio 6."""
    given, expected = case("ls-downwash-elliptic")
    far = stability.far_downwash_slope(given["CL_alpha"], given["AR"])
    assert far == expected["d_eps_d_alpha_far"]
    assert far / 2 == expected["d_eps_d_alpha_at_wing"]


@pytest.mark.parametrize("aspect_ratio", [4, 6, 8, 10])
def test_downwash_at_the_tail(aspect_ratio: int) -> None:
    """USAF DATCOM 4.4.1, method 2."""
    given, expected = case("ls-downwash-datcom")
    found = stability.tail_downwash_slope(
        aspect_ratio, given["taper"], given["quarter_chord_sweep"],
        given["two_tail_arm_over_span"] / 2, given["tail_height_over_span"],
    )
    assert found == expected[f"d_eps_d_alpha_AR{aspect_ratio}"]


def test_wing_body_centre_of_the_wind_tunnel_model() -> None:
    """J. D. Anderson, Introduction to Flight, examples 7.3 and 7.4."""
    given, expected = case("ls-np-anderson-wb")
    slope = given["CL_at_5deg"] / (5.0 - given["alpha_L0"])
    assert slope == expected["a_wb"]
    lifts = [slope * (alpha - given["alpha_L0"]) for alpha in (1.0, 7.88)]
    centre, moment = stability.wing_body_centre(
        given["CM_cg_at_1deg"], lifts[0], given["CM_cg_at_7.88deg"], lifts[1], given["h_cg"]
    )
    assert centre == expected["h_ac"]
    assert given["h_cg"] - centre == expected["h_minus_hac"]
    assert moment == expected["CM_ac"]


def test_wing_body_and_tail() -> None:
    """J. D. Anderson, Introduction to Flight, examples 7.5 to 7.7."""
    given, expected = case("ls-np-anderson-wbt")
    volume = stability.tail_volume(
        given["tail_area"] * 1e6, given["tail_arm_from_cg"] * 1e3,
        given["wing_area"] * 1e6, given["chord"] * 1e3,
    )
    assert volume == expected["V_H"]
    craft = WingAndTail(
        math.degrees(given["a_wb"]), given["h_ac"], given["CM_ac_wb"],
        math.degrees(given["a_tail"]), volume, given["downwash_slope"],
        tail_down_deg=given["tail_setting_nose_down"],
        zero_lift_downwash_deg=given["downwash_at_zero_lift"],
    )
    neutral, cg = stability.neutral_point(craft), given["h_cg"]
    assert neutral == expected["h_n"]
    assert stability.static_margin(neutral, cg) == expected["static_margin"]
    slope = per_deg(stability.pitch_slope_per_rad(craft, cg))
    assert slope == expected["dCM_dalpha"]
    assert stability.zero_lift_moment(craft) == expected["CM_at_zero_lift"]
    assert stability.trim_angle_deg(craft, cg) == expected["alpha_trim_absolute"]
    moment = stability.zero_lift_moment(craft) + slope * given["alpha_absolute"]
    assert moment == expected["CM_cg_at_alpha"]


def test_both_ways_to_the_neutral_point_agree() -> None:
    """The same aircraft, the tail's arm reckoned from the CG or between the centres (Etkin).

    By hand: with the whole slope a + a_t (S_t/S)(1 - e) and the arm from the aerodynamic centre,
    l = l_cg + (h - h_ac) c, both moments vanish at the same point when h is the neutral point.
    """
    a, at, washed, ratio, h_ac = 4.5, 3.6, 0.6, 0.2, 0.25
    arm = 2.5
    craft = WingAndTail(a, h_ac, 0.0, at, ratio * arm, 1 - washed)
    h_n = stability.neutral_point_between_centres(craft, ratio)
    from_there = WingAndTail(a, h_ac, 0.0, at, ratio * (arm - (h_n - h_ac)), 1 - washed)
    assert stability.neutral_point(from_there) == pytest.approx(h_n, abs=1e-12)
