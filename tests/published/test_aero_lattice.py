"""The vortex lattice held against published wings; sources in data/aero_lifting_surface.toml."""

from __future__ import annotations

import math
import tomllib
from pathlib import Path
from typing import Any

import numpy as np
import pytest

from buildgen.aero.derivatives import control_slopes, derivatives
from buildgen.aero.lattice import (
    Flow,
    Lattice,
    Reference,
    downwash_deg,
    lattice_of,
    loads,
    span_efficiency,
)
from buildgen.aero.lattice_surface import Flap, Station, Surface
from buildgen.aero.lattice_wash import far_wash

DATA = tomllib.loads(
    (Path(__file__).parent / "data" / "aero_lifting_surface.toml").read_text(encoding="utf-8")
)


def case(name: str) -> tuple[dict[str, Any], dict[str, Any]]:
    check = next(c for c in DATA["check"] if c["id"] == name)
    return (
        {k: v["value"] if isinstance(v, dict) else v for k, v in check["inputs"].items()},
        {e["quantity"]: pytest.approx(e["value"], abs=e["tol"]) for e in check["expected"]},
    )


def rectangle(aspect_ratio: float, **cut: Any) -> tuple[Lattice, Reference]:
    """A flat wing of unit chord, referred to its quarter chord."""
    tip = Station(0, aspect_ratio / 2, 0, 1)
    wing = Surface("wing", (Station(0, 0, 0, 1), tip), **cut)
    return lattice_of([wing]), Reference(aspect_ratio, 1, aspect_ratio, 0.25)


def elliptic(aspect_ratio: float) -> tuple[Lattice, Reference]:
    """Elliptic chords on a straight quarter line, root chord 1."""
    span = aspect_ratio * math.pi / 4
    place = np.sin(np.linspace(0, math.pi / 2, 81))
    chords = np.sqrt(np.maximum(1 - place**2, 0))
    stations = tuple(
        Station(-c / 4, y * span / 2, 0, c) for y, c in zip(place, chords, strict=True)
    )
    wing = Surface("wing", stations, chordwise=2, spanwise=80)
    return lattice_of([wing]), Reference(span * math.pi / 4, 1, span)


def test_swept_wing_of_four_horseshoes_a_side() -> None:
    """Bertin and Smith, Aerodynamics for Engineers, worked example, on its own coarse lattice."""
    given, expected = case("ls-bertin-4x1")
    half = given["AR"] / 2
    tip = Station(half * math.tan(math.radians(given["sweep"])), half, 0, 1)
    wing = Surface(
        "wing", (Station(0, 0, 0, 1), tip), chordwise=given["panels_chordwise"],
        spanwise=given["panels_per_half_wing_span"], spacing="uniform",
    )
    lattice, reference = lattice_of([wing]), Reference(given["AR"], 1, given["AR"])
    slope = derivatives(lattice, reference, Flow()).alpha.lift
    assert slope == expected["CL_alpha"]
    assert math.radians(slope) == expected["CL_alpha_per_deg"]
    alpha = 0.01
    found = loads(lattice, reference, Flow(alpha))
    own = found.circulation_mm[:4] / (4 * math.pi * given["AR"] * math.radians(alpha))
    for k, value in enumerate(own, start=1):
        assert value == expected[f"gamma_strip_{k}_over_4_pi_b_U_alpha"]


def test_warren_12() -> None:
    """The Warren-12 planform: lift and moment slopes, aerodynamic centre."""
    given, expected = case("ls-warren12")
    back = given["semispan"] * math.tan(math.radians(given["le_sweep"]))
    wing = Surface(
        "wing",
        (Station(0, 0, 0, given["root_chord"]),
         Station(back, given["semispan"], 0, given["tip_chord"])),
        chordwise=8, spanwise=20,
    )
    reference = Reference(given["S_ref"], given["c_ref"], 2 * given["semispan"])
    found = derivatives(lattice_of([wing]), reference, Flow())
    assert found.alpha.lift == expected["CL_alpha"]
    assert found.alpha.pitch == expected["CM_alpha"]
    assert found.neutral_x_mm == expected["aerodynamic_centre_aft_of_apex"]


@pytest.mark.parametrize(
    ("name", "quantity"),
    [("ls-tuck-5", "CL_alpha"), ("ls-tuck-8", "CL_alpha"), ("ls-tuck-1", "CL_alpha")],
)
def test_rectangular_wings(name: str, quantity: str) -> None:
    """E. O. Tuck, J. Austral. Math. Soc. B 35 (1993) 127-144, lifting-surface slopes.

    A lattice errs in proportion to its chordwise step, so two steps give the limit.
    """
    given, expected = case(name)
    slopes = []
    for chordwise in (4, 8):
        lattice, reference = rectangle(given["AR"], chordwise=chordwise, spanwise=24)
        slopes.append(derivatives(lattice, reference, Flow()).alpha.lift)
    assert 2 * slopes[1] - slopes[0] == expected[quantity]


def test_long_elliptic_wing_is_a_lifting_line() -> None:
    """Prandtl: CL_alpha = 2 pi AR/(AR + 2), e = 1; a lifting surface nears both as AR grows."""
    gaps = []
    for aspect_ratio in (10.0, 20.0, 60.0):
        lattice, reference = elliptic(aspect_ratio)
        slope = derivatives(lattice, reference, Flow()).alpha.lift
        gaps.append(1 - slope * (aspect_ratio + 2) / (math.tau * aspect_ratio))
        efficiency = span_efficiency(loads(lattice, reference, Flow(2.0)), aspect_ratio)
        assert efficiency == pytest.approx(1.0, abs=0.003)
    assert gaps[0] > gaps[1] > gaps[2] > 0
    assert gaps[2] == pytest.approx(0, abs=0.003)


def test_roll_damping_of_a_long_elliptic_wing() -> None:
    """Lifting line: Cl_p = -(pi/4) AR/(AR + 4), the second term of the monoplane equation.

    By hand from H. Glauert's equation with mu = a0/(pi AR) and a wash of -p y/V.
    """
    for aspect_ratio, near in ((20.0, 0.03), (60.0, 0.006)):
        lattice, reference = elliptic(aspect_ratio)
        damping = derivatives(lattice, reference, Flow()).roll_rate.roll
        line = -math.pi / 4 * aspect_ratio / (aspect_ratio + 4)
        assert damping == pytest.approx(line, rel=near)


@pytest.mark.parametrize("aspect_ratio", [4, 6, 8, 10])
def test_far_wake_drag_of_the_lifting_line_load(aspect_ratio: int) -> None:
    """Glauert's rectangular-wing factor delta from the same span load in the far wake.

    The load is the solved monoplane equation, 80 odd terms; the wake is this lattice's own.
    """
    given, expected = case("ls-rect-ll")
    odd = np.arange(1, 2 * given["terms"], 2)
    theta = np.arange(1, given["terms"] + 1) * math.pi / (2 * given["terms"])
    mu = given["a0"] / (4 * aspect_ratio)
    rows = np.sin(np.outer(theta, odd)) * (odd * mu + np.sin(theta)[:, None])
    terms = np.linalg.solve(rows, mu * np.sin(theta))
    mesh = rectangle(aspect_ratio, chordwise=1, spanwise=60)[0].mesh
    around = np.arccos(mesh.strip_middle_mm[:, 1] / (aspect_ratio / 2))
    load = 2 * aspect_ratio * np.sin(np.outer(around, odd)) @ terms
    ends = mesh.strip_ends_mm[:, :, 1:]
    width = ends[:, 1, 0] - ends[:, 0, 0]
    down = far_wash(mesh.strip_middle_mm[:, 1:], ends, np.zeros(len(width)))[..., 1] @ load
    drag, lift = -load @ (down * width) / aspect_ratio, 2 * load @ width / aspect_ratio
    delta = math.pi * aspect_ratio * drag / lift**2 - 1
    assert delta == expected[f"delta_AR{aspect_ratio}"]


def test_downwash_far_behind_an_elliptic_load() -> None:
    """Lifting-line theory: 2 CL/(pi AR), the same right across the wake.

    In the plane of a wake of single legs the mean over a stretch tells, not one point.
    """
    aspect_ratio = 20.0
    lattice, reference = elliptic(aspect_ratio)
    found = loads(lattice, reference, Flow(1.0))
    points = [(1e5, y * reference.span_mm, 0) for y in np.linspace(-0.3, 0.3, 401)]
    down = np.radians(downwash_deg(lattice, found, points))
    assert down.mean() == pytest.approx(2 * found.c_lift / (math.pi * aspect_ratio), rel=0.02)


@pytest.mark.parametrize("hinge", [0.6, 0.7, 0.75, 0.8])
def test_flap_of_a_very_long_wing(hinge: float) -> None:
    """Thin-airfoil theory (H. Glauert, ARC R&M 1095, 1927): effectiveness and moment of a flap.

    tau = 1 - (t - sin t)/pi and dCm_c/4 = -sin t (1 - cos t)/2, cos t = 1 - 2 hinge.
    """
    flap = Flap("flap", hinge, 0, 500)
    lattice, reference = rectangle(1000.0, chordwise=20, spanwise=4, flaps=(flap,))
    by_flap = control_slopes(lattice, reference, Flow(), "flap")
    by_alpha = derivatives(lattice, reference, Flow()).alpha
    angle = math.acos(1 - 2 * hinge)
    effect = 1 - (angle - math.sin(angle)) / math.pi
    assert by_flap.lift / by_alpha.lift == pytest.approx(effect, rel=0.002)
    assert by_flap.pitch == pytest.approx(
        -0.5 * math.sin(angle) * (1 - math.cos(angle)), rel=0.005
    )


def test_camber_of_naca_24xx() -> None:
    """Mean line 64 of I. H. Abbott and A. E. von Doenhoff, Theory of Wing Sections, appendix II.

    cl_i 0.76, alpha_i 0.74 deg, c_m -0.157 for 6 % camber at 0.4 (from memory), a third of it here;
    the last digits leave 0.04 deg and 0.0005.
    """
    x = np.linspace(0, 1, 201)
    slope = np.where(x < 0.4, 2 * 0.02 / 0.16 * (0.4 - x), 2 * 0.02 / 0.36 * (0.4 - x))
    line = tuple(zip(x.tolist(), slope.tolist(), strict=True))
    wing = Surface(
        "wing", (Station(0, 0, 0, 1, 0, line), Station(0, 500, 0, 1, 0, line)),
        chordwise=16, spanwise=4,
    )
    lattice, reference = lattice_of([wing]), Reference(1000, 1, 1000, 0.25)
    found = loads(lattice, reference, Flow())
    zero = -math.degrees(found.c_lift / derivatives(lattice, reference, Flow()).alpha.lift)
    assert zero == pytest.approx((0.74 - math.degrees(0.76 / math.tau)) / 3, abs=0.04)
    assert found.c_pitch == pytest.approx(-0.157 / 3, abs=0.0008)
