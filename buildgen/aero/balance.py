"""Centre of gravity, ballast and inertia of a set of masses.

Any one unit of mass and of length will do as long as it is kept; the names say g and mm.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike

from buildgen.aero.bounds import Floats, above_zero, not_negative, row, within
from buildgen.problems import DesignError, Problem

GRAVITY_M_S2 = 9.80665
"""Standard gravity. Source: 3rd General Conference on Weights and Measures (1901)."""


@dataclass(frozen=True, slots=True)
class Weighed:
    """A mass and where it acts: along one line, ``at_mm`` measured from any datum."""

    mass_g: float
    at_mm: float


def centre_of_mass(masses_g: ArrayLike, positions_mm: ArrayLike) -> tuple[float, Floats]:
    """Whole mass and its centre.

    Args:
        masses_g: (n,), with a sum above 0; a single one may be negative (something taken out).
        positions_mm: (n, 3), or (n,) along one line.

    Returns:
        Mass in g, and the centre, (3,) or (1,), mm.

    Raises:
        DesignError: the numbers do not match, or the sum of the masses is not above 0.

    Source: CG = sum(w x)/sum(w), FAA AC 43.13-1B, chapter 10.
    """
    masses = row(masses_g, "masses_g")
    places = np.asarray(positions_mm, dtype=np.float64).reshape(masses.size, -1)
    total = float(masses.sum())
    above_zero(mass_g=total)
    return total, masses @ places / total


def uncertainty_mm(
    masses_g: ArrayLike, sigmas_g: ArrayLike, at_mm: ArrayLike, place_sigmas_mm: ArrayLike = 0.0
) -> float:
    """Standard deviation of the centre along one line, for errors that do not know each other.

    Args:
        masses_g: (n,).
        sigmas_g: (n,), standard deviation of each mass.
        at_mm: (n,), where each acts.
        place_sigmas_mm: (n,) or one number, standard deviation of each place.

    Source: propagation of uncorrelated errors (JCGM 100, 5.1.2): the derivative of the centre by
        one mass is (x_i - x_cg)/M, by one place m_i/M.
    """
    masses, places = row(masses_g, "masses_g"), row(at_mm, "at_mm")
    total, centre = centre_of_mass(masses, places)
    by_mass = (places - centre[0]) / total * row(sigmas_g, "sigmas_g", masses.size)
    by_place = masses / total * np.broadcast_to(place_sigmas_mm, masses.shape)
    return float(np.sqrt(np.sum(by_mass**2) + np.sum(by_place**2)))


def after_moving(whole: Weighed, moved_g: float, from_mm: float, to_mm: float) -> Weighed:
    """The whole after one load in it has changed its place.

    Source: d_CG = w (x2 - x1)/W, FAA-H-8083-25, weight and balance chapter.
    """
    above_zero(mass_g=whole.mass_g)
    return Weighed(whole.mass_g, whole.at_mm + moved_g * (to_mm - from_mm) / whole.mass_g)


def move_to_balance_mm(whole: Weighed, moved_g: float, target_mm: float) -> float:
    """How far a load in the whole must go aft (negative: forward) to bring the centre to a target.

    Source: d_CG = w (x2 - x1)/W solved for the way, FAA-H-8083-25.
    """
    above_zero(mass_g=whole.mass_g, moved_g=moved_g)
    return (target_mm - whole.at_mm) * whole.mass_g / moved_g


def after_adding(whole: Weighed, *loads: Weighed) -> Weighed:
    """The whole with loads put in; a negative mass takes one out.

    Source: d_CG = w (x - CG)/(W + w), FAA-H-8083-25, weight and balance chapter.
    """
    items = (whole, *loads)
    total, centre = centre_of_mass([i.mass_g for i in items], [i.at_mm for i in items])
    return Weighed(total, float(centre[0]))


def ballast_mass_g(whole: Weighed, target_mm: float, ballast_mm: float) -> float:
    """Mass that brings the centre to the target from a given place; 0 when it is there already.

    Raises:
        DesignError: the place lies on the wrong side of the target, or on it.

    Source: W |CG - limit| / |x_ballast - limit| with the weight before ballast,
        FAA-H-8083-1, changes after repair or alteration.
    """
    above_zero(mass_g=whole.mass_g)
    shift = target_mm - whole.at_mm
    if shift == 0.0:
        return 0.0
    lever = ballast_mm - target_mm
    if shift * lever <= 0.0:
        side = "aft" if shift > 0.0 else "forward"
        raise DesignError(
            Problem("ballast_mm", f"{ballast_mm:g} cannot move the centre {side}.",
                    f"Choose a place {side} of {target_mm:g} mm.")
        )
    return whole.mass_g * shift / lever


def ballast_place_mm(whole: Weighed, target_mm: float, ballast_g: float) -> float:
    """Where a given mass must be added to bring the centre to the target.

    Source: d_CG = w (x - CG)/(W + w) solved for the place, FAA-H-8083-25.
    """
    above_zero(mass_g=whole.mass_g, ballast_g=ballast_g)
    return target_mm + (target_mm - whole.at_mm) * whole.mass_g / ballast_g


def nose_per_tail(tail_mm: float, nose_mm: float, cg_mm: float) -> float:
    """Grams of nose ballast that one gram at the tail costs, centre unmoved.

    Raises:
        DesignError: the places do not lie on either side of the centre.

    Source: moments about the centre (statics).
    """
    above_zero(tail_arm_mm=tail_mm - cg_mm, nose_arm_mm=cg_mm - nose_mm)
    return (tail_mm - cg_mm) / (cg_mm - nose_mm)


def cg_from_wheels_mm(end_g: float, total_g: float, end_from_main_mm: float,
                      main_mm: float = 0.0) -> float:
    """Centre of an aircraft weighed on its wheels.

    Args:
        end_g: on the nose or tail wheel.
        total_g: on all wheels.
        end_from_main_mm: nose or tail wheel from the main wheels, aft positive.
        main_mm: main wheels from the datum.

    Source: CG = D + F L/W, FAA-H-8083-1 (nose wheel, L negative; tail wheel, L positive).
    """
    above_zero(total_g=total_g)
    within(0.0, total_g, end_g=end_g)
    return main_mm + end_g * end_from_main_mm / total_g


def percent_mac(at_mm: float, mac_le_mm: float, mac_mm: float) -> float:
    """A station in percent of the mean aerodynamic chord, from its leading edge.

    Source: %MAC = 100 (CG - LEMAC)/MAC, FAA-H-8083-1.
    """
    above_zero(mac_mm=mac_mm)
    return 100.0 * (at_mm - mac_le_mm) / mac_mm


def from_percent_mac(percent: float, mac_le_mm: float, mac_mm: float) -> float:
    """The station, mm, at a percentage of the mean aerodynamic chord.

    Source: CG = LEMAC + %MAC MAC/100, FAA-H-8083-1.
    """
    above_zero(mac_mm=mac_mm)
    return mac_le_mm + percent / 100.0 * mac_mm


def inertia_about_g_mm2(
    masses_g: ArrayLike, positions_mm: ArrayLike, own_g_mm2: ArrayLike, point_mm: ArrayLike
) -> Floats:
    """Inertia tensor of a set of bodies about one point.

    Args:
        masses_g: (n,).
        positions_mm: (n, 3), each body's centre.
        own_g_mm2: (n, 3, 3), each body's tensor about its own centre; 0 for point masses.
        point_mm: (3,), commonly the centre of the whole.

    Returns:
        (3, 3): moments on the diagonal; off it, minus the products (sum of m x y).

    Source: parallel-axis theorem, I = sum(I_i + m_i (d^2 E - d d)); any mechanics handbook.
    """
    masses = row(masses_g, "masses_g")
    away = np.asarray(positions_mm, dtype=np.float64).reshape(masses.size, 3)
    away = away - np.asarray(point_mm, dtype=np.float64)
    own = np.broadcast_to(np.asarray(own_g_mm2, dtype=np.float64), (masses.size, 3, 3))
    squares = np.einsum("ni,ni->n", away, away)[:, None, None] * np.eye(3)
    tensor: Floats = np.sum(
        own + masses[:, None, None] * (squares - np.einsum("ni,nj->nij", away, away)), axis=0
    )
    return tensor


def bifilar_inertia_g_mm2(
    mass_g: float, string_mm: float, spacing_mm: float, period_s: float
) -> float:
    """Moment of inertia from the period of twisting on two parallel strings.

    Args:
        mass_g: of the thing that hangs.
        string_mm: length of each string.
        spacing_mm: between the strings.
        period_s: of one full swing there and back, small.

    Source: I = m g d^2 T^2/(16 pi^2 L), flight-test practice.
    """
    above_zero(mass_g=mass_g, string_mm=string_mm, spacing_mm=spacing_mm)
    not_negative(period_s=period_s)
    gravity_mm_s2 = 1000.0 * GRAVITY_M_S2
    return mass_g * gravity_mm_s2 * (spacing_mm * period_s / (4.0 * math.pi)) ** 2 / string_mm
