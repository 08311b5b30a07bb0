"""Stability and control derivatives, neutral point and trim of a vortex lattice."""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np

from buildgen.aero.lattice import Flow, Lattice, Loads, Reference, loads
from buildgen.problems import DesignError, Problem

_STEP_DEG = 0.05
_STEP_RATE = 0.001
_ROUNDS = 20


@dataclass(frozen=True, slots=True)
class Slopes:
    """Change of the coefficients with one thing, per radian or per unit of a dimensionless rate."""

    lift: float
    side: float
    roll: float
    pitch: float
    yaw: float


@dataclass(frozen=True, slots=True)
class Derivatives:
    """Derivatives about a flow, along stability axes, signs as in ``Loads``.

    Attributes:
        alpha: by angle of attack, per rad (CL_alpha, Cm_alpha).
        beta: by sideslip, per rad (CY_beta, Cl_beta, Cn_beta).
        roll_rate: by p b/(2 V) (Cl_p, Cn_p).
        pitch_rate: by q c/(2 V) (CL_q, Cm_q).
        yaw_rate: by r b/(2 V) (Cl_r, Cn_r).
        neutral_x_mm: where the lift of a change in angle of attack acts.
    """

    alpha: Slopes
    beta: Slopes
    roll_rate: Slopes
    pitch_rate: Slopes
    yaw_rate: Slopes
    neutral_x_mm: float

    @property
    def spiral_surplus(self) -> float:
        """Cl_beta Cn_r - Cn_beta Cl_r; above 0 the spiral mode comes back by itself.

        Source: B. Etkin and L. D. Reid, Dynamics of Flight, chapter 6 (level flight, small angles).
        """
        return self.beta.roll * self.yaw_rate.yaw - self.beta.yaw * self.yaw_rate.roll


@dataclass(frozen=True, slots=True)
class Trim:
    """Steady flight: angle of attack and deflection at which lift is as wanted and pitch is 0."""

    alpha_deg: float
    flap_deg: float
    loads: Loads


def derivatives(lattice: Lattice, reference: Reference, flow: Flow) -> Derivatives:
    """All stability derivatives about one flow, by central differences.

    Source: definitions of B. Etkin and L. D. Reid, Dynamics of Flight, appendix; neutral point
        x_n = x - c Cm_alpha/CL_alpha.
    """
    def by(name: str, step: float, unit: float) -> Slopes:
        """Change of all coefficients with one entry of the flow."""
        value = getattr(flow, name)
        low, high = (
            loads(lattice, reference, replace(flow, **{name: value + s})) for s in (-step, step)
        )
        return _difference(low, high, 2.0 * step * unit)

    alpha = by("alpha_deg", _STEP_DEG, np.pi / 180.0)
    return Derivatives(
        alpha=alpha,
        beta=by("beta_deg", _STEP_DEG, np.pi / 180.0),
        roll_rate=by("roll_rate", _STEP_RATE, 1.0),
        pitch_rate=by("pitch_rate", _STEP_RATE, 1.0),
        yaw_rate=by("yaw_rate", _STEP_RATE, 1.0),
        neutral_x_mm=reference.x_mm - reference.chord_mm * alpha.pitch / alpha.lift,
    )


def control_slopes(lattice: Lattice, reference: Reference, flow: Flow, flap: str) -> Slopes:
    """Change of the coefficients with the deflection of one flap, per radian.

    A lattice knows no gap and no separation: take 0.6 to 0.8 of it for a model's hinged surface
    (common practice, no source).

    Raises:
        DesignError: there is no such flap.

    Source: central difference of ``loads``; the flap turns the normals behind its hinge.
    """
    value = flow.flaps_deg.get(flap, 0.0)
    low, high = (
        loads(lattice, reference, replace(flow, flaps_deg={**flow.flaps_deg, flap: value + s}))
        for s in (-_STEP_DEG, _STEP_DEG)
    )
    return _difference(low, high, float(np.radians(2.0 * _STEP_DEG)))


def trim(
    lattice: Lattice, reference: Reference, c_lift: float, flap: str, flow: Flow | None = None
) -> Trim:
    """Angle of attack and deflection for a lift coefficient without pitching moment.

    Args:
        lattice: the surfaces.
        reference: its point is the CG.
        c_lift: of the whole aircraft.
        flap: the elevator's name.
        flow: what else holds (rates, other flaps); undisturbed level flow if not given.

    Raises:
        DesignError: no such flap, or no deflection trims.

    Source: two equations in two unknowns by Newton's method; the flow is nearly linear in both.
    """
    base = flow or Flow()
    state = np.array([base.alpha_deg, base.flaps_deg.get(flap, 0.0)])
    wanted = np.array([c_lift, 0.0])
    for _ in range(_ROUNDS):
        here = _with(base, flap, state)
        found = loads(lattice, reference, here)
        miss = np.array([found.c_lift, found.c_pitch]) - wanted
        if np.abs(miss).max() < 1e-10:
            return Trim(float(state[0]), float(state[1]), found)
        slopes = np.empty((2, 2))
        for k in range(2):
            moved = loads(lattice, reference, _with(base, flap, state + 0.1 * np.eye(2)[k]))
            slopes[:, k] = moved.c_lift - found.c_lift, moved.c_pitch - found.c_pitch
        slopes /= 0.1
        if abs(np.linalg.det(slopes)) < 1e-12:
            break
        state = state - np.linalg.solve(slopes, miss)
    raise DesignError(Problem(flap, f"cannot trim at a lift coefficient of {c_lift:g}."))


def _with(flow: Flow, flap: str, state: np.ndarray[tuple[int], np.dtype[np.float64]]) -> Flow:
    return replace(
        flow, alpha_deg=float(state[0]), flaps_deg={**flow.flaps_deg, flap: float(state[1])}
    )


def _difference(low: Loads, high: Loads, span: float) -> Slopes:
    names = ("c_lift", "c_side", "c_roll", "c_pitch", "c_yaw")
    return Slopes(*(float((getattr(high, n) - getattr(low, n)) / span) for n in names))
