"""Strength against closed forms of the textbooks; values from memory of the named source."""

from __future__ import annotations

import math

import numpy as np
import pytest

from buildgen.strength.beam import deflection_mm, from_tip, point_loads, schrenk_n_mm
from buildgen.strength.section import (
    Piece,
    euler_n,
    rectangle_mm,
    stiffness_n_mm2,
    stress_mpa,
    tube_mm,
    web_shear_mpa,
)

# Roark's Formulas for Stress and Strain, from memory; recomputed by numerical integration.


def test_tube_rod_and_rectangle() -> None:
    area, second = tube_mm(8, 6)
    assert (area, second) == pytest.approx((21.9911, 137.4447), abs=5e-4)
    assert second / 4 == pytest.approx(34.36117, abs=5e-4)
    assert tube_mm(5) == pytest.approx((19.63495, 30.67962), abs=1e-4)
    assert rectangle_mm(3, 10) == pytest.approx((30, 250))
    assert rectangle_mm(10, 3)[1] == pytest.approx(22.5)


def test_two_materials() -> None:
    # Caps of I = 3420 mm4, a web of 216 mm4 and half the modulus: 3528 mm4 of cap material.
    caps = Piece(60.0, 3420.0, 0.0, 9.0, 10000.0, 50.0)
    web = Piece(20.0, 216.0, 0.0, 9.0, 5000.0, 20.0)
    assert stiffness_n_mm2([caps, web])[0] / 10000 == pytest.approx(3528)


def test_cantilever_with_a_tip_load() -> None:
    # P L^3/(3 E I): 10 N at 0.5 m on an 8 x 6 carbon tube of 127 GPa.
    y = np.linspace(0, 500, 201)
    _, moment = point_loads(y, [500.0], [10.0])
    assert moment[0] == pytest.approx(5000)
    rigid = 127000 * 137.4447
    assert deflection_mm(y, moment, np.full(201, rigid))[-1] == pytest.approx(23.871, abs=0.002)
    tube = Piece(21.9911, 137.4447, 0.0, 4.0, 127000.0, 1370.0)
    assert stress_mpa([tube], 5000.0)[0] == pytest.approx(145.513, abs=0.005)


def test_cantilever_with_a_uniform_load() -> None:
    # w L^4/(8 E I): 20 N/m on the same tube.
    y = np.linspace(0, 500, 401)
    _, moment = from_tip(y, np.full(401, 0.02))
    assert moment[0] == pytest.approx(2500, rel=1e-5)
    found = deflection_mm(y, moment, np.full(401, 127000 * 137.4447))
    assert found[-1] == pytest.approx(8.9517, abs=0.002)


def test_half_wing_with_an_elliptic_load() -> None:
    # Centroid at 4/(3 pi) of the semispan; tip deflection times E I 0.9671 N m3 for 10 N, 1 m.
    y = 1000 * np.sin(np.linspace(0, math.pi / 2, 2001))
    load = 10 * 4 / (math.pi * 1000) * np.sqrt(np.clip(1 - (y / 1000) ** 2, 0, 1))
    _, moment = from_tip(y, load)
    assert moment[0] / 10000 == pytest.approx(0.424413, abs=1e-4)
    rigid = 1e9
    tip = deflection_mm(y, moment, np.full(len(y), rigid))[-1]
    assert tip * rigid / 1e9 == pytest.approx(0.9671, abs=5e-4)


def test_schrenk_on_a_rectangular_wing() -> None:
    # O. Schrenk, NACA TM 948 (1940), method from memory, worked with own numbers: span 2 m,
    # chord 0.25 m: ordinates 0.28415, 0.26283, 0.22049, 0.125; centroid at 0.462207.
    y = 1000 * np.sin(np.linspace(0, math.pi / 2, 4001))
    load = schrenk_n_mm(y, np.full(len(y), 250.0), 1000.0, 1.0)
    # Load for each mm of half the lift is the ordinate over half the area.
    ordinate = load * 250.0 * 1000.0 / 1000
    for eta, wanted in ((0.0, 0.28415), (0.5, 0.26283), (0.8, 0.22049), (1.0, 0.125)):
        assert np.interp(1000 * eta, y, ordinate) == pytest.approx(wanted, abs=2e-5)
    _, moment = from_tip(y, load)
    assert moment[0] / 1000 == pytest.approx(0.462207, abs=1e-5)


def test_columns_and_webs() -> None:
    # Balsa stick 5 x 5 x 200 mm, 3.4 GPa: 43.69 N pinned, 174.77 N fixed; web 28 N on 1.5 x 18.
    second = rectangle_mm(5, 5)[1]
    assert euler_n(3400, second, 200) == pytest.approx(43.692, abs=0.01)
    assert euler_n(3400, second, 200, 0.5) == pytest.approx(174.77, abs=0.05)
    assert web_shear_mpa(28, 1.5, 18) == pytest.approx(1.03704, abs=1e-4)
