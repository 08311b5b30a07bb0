"""Balance: the sums are sums, and impossible ballast is refused."""

from __future__ import annotations

import numpy as np
import pytest

from buildgen.aero import balance
from buildgen.aero.balance import Weighed
from buildgen.problems import DesignError


def test_uncertainty_of_the_centre_against_drawn_errors() -> None:
    """By drawing: 200 000 builds with normal errors, seeded; 1 % is their own scatter."""
    masses, places = np.array([300.0, 200, 40]), np.array([60.0, 150, 700])
    sigmas, place_sigmas = np.array([15.0, 6, 4]), np.array([2.0, 5, 1])
    drawn = np.random.default_rng(7)
    m = masses + sigmas * drawn.standard_normal((200_000, 3))
    x = places + place_sigmas * drawn.standard_normal((200_000, 3))
    found = balance.uncertainty_mm(masses, sigmas, places, place_sigmas)
    assert found == pytest.approx(np.std((m * x).sum(1) / m.sum(1)), rel=0.01)


def test_nose_grams_for_tail_grams_keep_the_centre() -> None:
    """By hand: 10 g at the tail and what it costs at the nose leave the centre where it was."""
    whole = Weighed(1200, 80)
    cost = balance.nose_per_tail(700, -140, 80)
    assert cost == pytest.approx(620 / 220)
    after = balance.after_adding(whole, Weighed(10, 700), Weighed(10 * cost, -140))
    assert after.at_mm == pytest.approx(80)


def test_ballast_on_the_wrong_side_is_refused() -> None:
    with pytest.raises(DesignError, match="forward"):
        balance.ballast_mass_g(Weighed(1200, 90), 80, 300)
    assert balance.ballast_mass_g(Weighed(1200, 80), 80, 300) == 0


def test_no_mass_and_unequal_rows_are_refused() -> None:
    with pytest.raises(DesignError):
        balance.centre_of_mass([1, -1], [0, 5])
    with pytest.raises(DesignError):
        balance.centre_of_mass([1, np.nan], [0, 5])
    with pytest.raises(DesignError, match="sigmas_g"):
        balance.uncertainty_mm([1, 2], [1, 2, 3], [0, 1])


def test_inertia_is_moved_back_and_forth() -> None:
    """By hand: about the centre it is least; products follow the sign -sum(m x y)."""
    masses, places = [2.0, 3.0], np.array([[1.0, 2, 0], [-4, 1, 5]])
    _, centre = balance.centre_of_mass(masses, places)
    at_centre = balance.inertia_about_g_mm2(masses, places, np.zeros((3, 3)), centre)
    at_origin = balance.inertia_about_g_mm2(masses, places, np.zeros((3, 3)), [0, 0, 0])
    assert np.all(np.diag(at_centre) < np.diag(at_origin))
    assert at_origin[0, 1] == pytest.approx(-(2 * 1 * 2 + 3 * -4 * 1))
    assert np.allclose(at_origin, at_origin.T)
