"""Weight and balance held against published worked examples; sources in data/aero_balance.toml.

The handbooks reckon in pounds and inches; the functions keep whatever units they are given.
"""

from __future__ import annotations

import tomllib
from pathlib import Path
from typing import Any

import numpy as np
import pytest

from buildgen.aero import balance
from buildgen.aero.balance import Weighed

DATA = tomllib.loads(
    (Path(__file__).parent / "data" / "aero_balance.toml").read_text(encoding="utf-8")
)


def case(name: str) -> tuple[dict[str, Any], dict[str, Any]]:
    check = next(c for c in DATA["check"] if c["id"] == name)
    return (
        {k: v["value"] for k, v in check["inputs"].items()},
        {e["quantity"]: pytest.approx(e["value"], abs=e["tol"]) for e in check["expected"]},
    )


@pytest.mark.parametrize("name", ["wb-ac43-fig10-13", "wb-lever-110"])
def test_loading_tables(name: str) -> None:
    """FAA AC 43.13-1B, figure 10-13 (a negative arm in it), and the handbook's board."""
    given, expected = case(name)
    total, centre = balance.centre_of_mass(given["weights"], given["arms"])
    assert total * centre[0] == expected["total_moment"]
    assert centre[0] == expected["cg"]


def test_moving_a_load() -> None:
    """FAA-H-8083-25, weight shifting: the CG goes to 78.5 in."""
    given, expected = case("wb-shift-78.5")
    whole = Weighed(given["total_weight"], given["total_moment"] / given["total_weight"])
    after = balance.after_moving(
        whole, given["shifted"], given["from_station"], given["to_station"]
    )
    assert after.at_mm == expected["new_cg"]
    way = given["to_station"] - given["from_station"]
    assert balance.move_to_balance_mm(whole, given["shifted"], after.at_mm) == pytest.approx(way)


def test_adding_a_load() -> None:
    """FAA-H-8083-25, weight addition: 1.4 in further aft."""
    given, expected = case("wb-add-1.4in")
    whole = Weighed(given["total_weight"], given["cg"])
    after = balance.after_adding(whole, Weighed(given["added"], given["station"]))
    assert after.at_mm == expected["new_cg"]
    assert after.at_mm - whole.at_mm == expected["cg_change"]
    place = balance.ballast_place_mm(whole, after.at_mm, given["added"])
    assert place == pytest.approx(given["station"])


def test_weighing_on_wheels() -> None:
    """FAA-H-8083-1: nose wheel, from the main wheels and from the datum; tail wheel."""
    given, expected = case("wb-nosewheel-13.2")
    args = given["nose_weight"], given["total_weight"], given["nose_from_main"]
    assert balance.cg_from_wheels_mm(*args) == expected["cg_from_main"]
    assert balance.cg_from_wheels_mm(*args, given["datum_to_main"]) == expected["cg_from_datum"]
    given, expected = case("wb-tailwheel")
    args = given["tail_weight"], given["total"], given["tail_from_main"]
    assert balance.cg_from_wheels_mm(*args, given["datum_to_main"]) == expected["cg_from_datum"]


def test_permanent_ballast() -> None:
    """FAA-H-8083-1: 7.7 lb in the tail brings the empty CG to the forward limit."""
    given, expected = case("wb-ballast-permanent")
    whole = Weighed(given["empty_weight"], given["ewcg"])
    mass = balance.ballast_mass_g(whole, given["forward_limit"], given["ballast_station"])
    assert mass == expected["ballast"]
    after = balance.after_adding(whole, Weighed(mass, given["ballast_station"]))
    assert after.at_mm == expected["new_ewcg"]


def test_nose_ballast_of_a_model() -> None:
    """The same formula, in grams and millimetres."""
    given, expected = case("wb-model-ballast")
    mass = balance.ballast_mass_g(
        Weighed(given["mass"], given["cg"]), given["target"], given["ballast_x"]
    )
    assert mass == expected["ballast"]


def test_percent_of_mean_chord_both_ways() -> None:
    """FAA-H-8083-1: 27.4 % is station 161 with LEMAC at 144 and a MAC of 62 in."""
    given, expected = case("wb-percent-mac")
    station = given["lemac"] + given["cg_behind_lemac"]
    percent = balance.percent_mac(station, given["lemac"], given["mac"])
    assert percent == expected["percent_mac"]
    back = balance.from_percent_mac(27.4, given["lemac"], given["mac"])
    assert back == expected["cg_station_from_27.4_percent"]


def test_parallel_axis() -> None:
    """Two bodies about their common centre; closed form of any mechanics handbook."""
    given, expected = case("parallel")
    masses = [given["m1"], given["m2"]]
    places = np.array([[given["x1"], 0, 0], [given["x2"], 0, 0]])
    own = np.array([given["I1"] * np.eye(3), given["I2"] * np.eye(3)])
    _, centre = balance.centre_of_mass(masses, places)
    assert centre[0] == expected["x_cg"]
    tensor = balance.inertia_about_g_mm2(masses, places, own, centre)
    assert tensor[1, 1] == expected["I_cg"]


def test_rod_turned_about_its_end() -> None:
    """Slender rod, m L^2/12 at the centre, m L^2/3 at the end."""
    given, expected = case("rod")
    centre = given["mass"] * given["L"] ** 2 / 12
    assert centre == expected["I_centre"]
    own = np.diag([0.0, centre, centre])[None]
    tensor = balance.inertia_about_g_mm2(
        [given["mass"]], [[given["L"] / 2, 0, 0]], own, [0, 0, 0]
    )
    assert tensor[2, 2] == expected["I_end"]


def test_bifilar_pendulum() -> None:
    """Flight-test practice; here in g mm2, the source in kg m2."""
    given, expected = case("pendulum")
    found = balance.bifilar_inertia_g_mm2(
        1000 * given["mass"], 1000 * given["string_length"], 1000 * given["string_spacing"],
        given["period"],
    )
    assert found * 1e-9 == expected["I"]
