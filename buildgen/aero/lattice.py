"""A vortex lattice for any number of surfaces: loads, span loading, downwash, induced drag.

Horseshoe vortices on the quarter line of each panel, no flow through its three-quarter point, flat
wakes along x, no body, no viscosity. Forces follow Kutta and Joukowski on the bound vortices and on
the legs as far as the trailing edge; induced drag comes from the far wake.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field

import numpy as np
from numpy.typing import ArrayLike

from buildgen.aero.bounds import Floats, Whole, above_zero
from buildgen.aero.lattice_mesh import Mesh, mesh_of
from buildgen.aero.lattice_surface import Surface
from buildgen.aero.lattice_wake import (
    CORE_SHARE,
    strip_widths_mm,
    strips_across,
    wash_from,
    wash_within,
)
from buildgen.aero.lattice_wash import far_wash
from buildgen.problems import DesignError, Problem, nearest


@dataclass(frozen=True, slots=True)
class Reference:
    """What makes forces into coefficients, and the point that moments and rates are about.

    Attributes:
        area_mm2: whole wing.
        chord_mm: for the pitching moment and the rate of pitch.
        span_mm: for rolling and yawing.
        x_mm: of the point, commonly the CG.
        y_mm: of the point.
        z_mm: of the point.
    """

    area_mm2: float
    chord_mm: float
    span_mm: float
    x_mm: float = 0.0
    y_mm: float = 0.0
    z_mm: float = 0.0

    def __post_init__(self) -> None:
        above_zero(area_mm2=self.area_mm2, chord_mm=self.chord_mm, span_mm=self.span_mm)

    @property
    def point_mm(self) -> Floats:
        """(3,)."""
        return np.array([self.x_mm, self.y_mm, self.z_mm])


@dataclass(frozen=True, slots=True)
class Flow:
    """How the air meets the aircraft; rates about stability axes (roll about the way of flight).

    Attributes:
        alpha_deg: angle of attack of the x axis.
        beta_deg: sideslip, wind from starboard positive.
        roll_rate: p b/(2 V), starboard wing down positive.
        pitch_rate: q c/(2 V), nose up positive.
        yaw_rate: r b/(2 V), nose to starboard positive.
        flaps_deg: deflection of flaps by their names; others stand at 0.
    """

    alpha_deg: float = 0.0
    beta_deg: float = 0.0
    roll_rate: float = 0.0
    pitch_rate: float = 0.0
    yaw_rate: float = 0.0
    flaps_deg: Mapping[str, float] = field(default_factory=dict)


@dataclass(frozen=True, slots=True)
class Loads:
    """What the air does, as coefficients; moments about the reference point.

    Rolling and yawing are about stability axes: x along the way of flight in the plane of symmetry.

    Attributes:
        c_lift: square to the wind, up.
        c_side: to starboard.
        c_drag_induced: from the far wake.
        c_roll: by the span, starboard wing down positive.
        c_pitch: by the chord, nose up positive.
        c_yaw: by the span, nose to starboard positive.
        circulation_mm: (n,), of each panel over the speed.
        strip_lift: (m,), section lift coefficient of each strip by its own chord.
    """

    c_lift: float
    c_side: float
    c_drag_induced: float
    c_roll: float
    c_pitch: float
    c_yaw: float
    circulation_mm: Floats
    strip_lift: Floats


@dataclass(frozen=True, slots=True)
class Lattice:
    """Surfaces ready to be met by any flow. Made by ``lattice_of``.

    Attributes:
        mesh: the panels.
        inverse: (n, n), circulation for a unit velocity through each control point.
        middle_wash: (n, n, 3), velocity at the middles of the bound vortices.
    """

    mesh: Mesh
    inverse: Floats
    middle_wash: Floats

    @property
    def middle_mm(self) -> Floats:
        """(n, 3): middles of the bound vortices."""
        return 0.5 * (self.mesh.port_mm + self.mesh.starboard_mm)

    def strips(self, surface: str) -> Whole:
        """Numbers of a surface's strips, port tip to starboard tip (a fin's from the root up)."""
        mesh = self.mesh
        if surface not in mesh.names:
            raise DesignError(Problem(surface, "is no surface.", nearest(surface, mesh.names)))
        return strips_across(mesh, mesh.names.index(surface))


def lattice_of(surfaces: Sequence[Surface]) -> Lattice:
    """Build the lattice and solve it once for all flows.

    Raises:
        DesignError: surfaces are missing, share a name, or leave the lattice without a solution.

    Source: J. Katz and A. Plotkin, Low-Speed Aerodynamics, section 12.1; J. J. Bertin and M. L.
        Smith, Aerodynamics for Engineers, chapter on wings of finite span.
    """
    mesh = mesh_of(surfaces)
    owner = mesh.strip_surface[mesh.strip]
    at_control = wash_within(mesh, mesh.control_mm, owner)
    through = np.einsum("mni,mi->mn", at_control, _normals(mesh, mesh.slope_rad))
    try:
        inverse = np.linalg.inv(through)
    except np.linalg.LinAlgError:
        raise DesignError(Problem("surfaces", "overlap: the lattice has no solution.")) from None
    middles = 0.5 * (mesh.port_mm + mesh.starboard_mm)
    return Lattice(mesh, inverse, wash_within(mesh, middles, owner))


def loads(lattice: Lattice, reference: Reference, flow: Flow) -> Loads:
    """Forces and moments in one flow.

    Raises:
        DesignError: the flow names a flap that is not there.

    Source: Kutta-Joukowski, F = rho Gamma V x l: J. Katz and A. Plotkin, section 12.1.
    """
    mesh = lattice.mesh
    circulation = _circulation(lattice, reference, flow)
    force, moment = _forces(lattice, reference, flow, circulation)
    strip: Floats = np.zeros(len(mesh.strip_chord_mm))
    np.add.at(strip, mesh.strip, circulation)
    area, alpha = reference.area_mm2, np.radians(flow.alpha_deg)
    lift = force[2] * np.cos(alpha) - force[0] * np.sin(alpha)
    roll = -moment[0] * np.cos(alpha) - moment[2] * np.sin(alpha)
    yaw = moment[0] * np.sin(alpha) - moment[2] * np.cos(alpha)
    return Loads(
        c_lift=float(lift / area),
        c_side=float(force[1] / area),
        c_drag_induced=float(_far_drag_mm2(mesh, strip) / area),
        c_roll=float(roll / (area * reference.span_mm)),
        c_pitch=float(moment[1] / (area * reference.chord_mm)),
        c_yaw=float(yaw / (area * reference.span_mm)),
        circulation_mm=circulation,
        strip_lift=2.0 * strip / mesh.strip_chord_mm,
    )


def downwash_deg(
    lattice: Lattice, found: Loads, points_mm: ArrayLike, surfaces: Sequence[str] = ()
) -> Floats:
    """Angle by which the lattice turns the flow down at points.

    Args:
        lattice: the surfaces.
        found: loads in the flow in question.
        points_mm: (m, 3), anywhere but on a vortex.
        surfaces: those that count; none means all.

    Returns:
        (m,), down positive (upwash ahead of a wing is negative).

    Source: Biot-Savart law, as ``wash``.
    """
    mesh = lattice.mesh
    points = np.asarray(points_mm, dtype=np.float64).reshape(-1, 3)
    velocity = np.zeros(len(points))
    for name in surfaces or mesh.names:
        if name not in mesh.names:
            raise DesignError(Problem(name, "is no surface.", nearest(name, mesh.names)))
        field = wash_from(mesh, points, mesh.names.index(name))
        velocity += field[..., 2] @ found.circulation_mm
    angle: Floats = -np.degrees(np.arctan(velocity))
    return angle


def span_efficiency(found: Loads, aspect_ratio: float) -> float:
    """Lift squared over (pi AR) over induced drag; 1 for an elliptic load.

    Source: CDi = CL^2/(pi AR e); any aerodynamics text.
    """
    above_zero(c_drag_induced=found.c_drag_induced, aspect_ratio=aspect_ratio)
    return found.c_lift**2 / (np.pi * aspect_ratio * found.c_drag_induced)


def _normals(mesh: Mesh, slope_rad: Floats) -> Floats:
    """(n, 3): normals of the chord surface, turned aft by the local angle."""
    normals: Floats = mesh.lean * np.cos(slope_rad)[:, None]
    normals[:, 0] += np.sin(slope_rad)
    return normals


def _onset(points_mm: Floats, reference: Reference, flow: Flow) -> Floats:
    """(m, 3): velocity over speed of the air as it meets the points, without the lattice."""
    alpha, beta = np.radians([flow.alpha_deg, flow.beta_deg])
    stream = np.array([np.cos(alpha) * np.cos(beta), -np.sin(beta), np.sin(alpha) * np.cos(beta)])
    roll, yaw = flow.roll_rate / reference.span_mm, flow.yaw_rate / reference.span_mm
    turn = 2.0 * np.array([
        yaw * np.sin(alpha) - roll * np.cos(alpha),
        flow.pitch_rate / reference.chord_mm,
        -yaw * np.cos(alpha) - roll * np.sin(alpha),
    ])
    met: Floats = stream - np.cross(turn, points_mm - reference.point_mm)
    return met


def _circulation(lattice: Lattice, reference: Reference, flow: Flow) -> Floats:
    mesh = lattice.mesh
    slope = mesh.slope_rad.copy()
    for name, angle in flow.flaps_deg.items():
        if name not in mesh.flaps:
            raise DesignError(Problem(name, "is no flap.", nearest(name, mesh.flaps)))
        slope += np.radians(angle) * mesh.flaps[name]
    met = _onset(mesh.control_mm, reference, flow)
    solved: Floats = -lattice.inverse @ np.einsum("ni,ni->n", met, _normals(mesh, slope))
    return solved


def _forces(
    lattice: Lattice, reference: Reference, flow: Flow, circulation: Floats
) -> tuple[Floats, Floats]:
    """Force (mm2) and moment (mm3) over dynamic pressure, along the axes."""
    mesh, middle = lattice.mesh, lattice.middle_mm
    velocity = _onset(middle, reference, flow)
    velocity = velocity + np.einsum("mni,n->mi", lattice.middle_wash, circulation)
    pieces = [(middle, velocity, mesh.starboard_mm - mesh.port_mm)]
    for side, (end, sign) in enumerate(((mesh.port_mm, -1.0), (mesh.starboard_mm, 1.0))):
        run = np.zeros_like(end)
        run[:, 0] = mesh.tail_mm[:, side] - end[:, 0]
        place = end + 0.5 * run
        # A leg's neighbours all but cancel it; only what the stream does to it is counted.
        pieces.append((place, _onset(place, reference, flow), sign * run))
    force, moment = np.zeros(3), np.zeros(3)
    for place, met, line in pieces:
        share = 2.0 * circulation[:, None] * np.cross(met, line)
        force += share.sum(axis=0)
        moment += np.cross(place - reference.point_mm, share).sum(axis=0)
    return force, moment


def _far_drag_mm2(mesh: Mesh, strip_circulation_mm: Floats) -> float:
    """Induced drag over dynamic pressure."""
    ends = mesh.strip_ends_mm[:, :, 1:]
    other = mesh.strip_surface[:, None] != mesh.strip_surface[None]
    core = CORE_SHARE * float(strip_widths_mm(mesh).mean()) * other
    velocity = np.einsum(
        "mni,n->mi", far_wash(mesh.strip_middle_mm[:, 1:], ends, core), strip_circulation_mm
    )
    along = ends[:, 1] - ends[:, 0]
    through = velocity[:, 1] * along[:, 0] - velocity[:, 0] * along[:, 1]
    return float(-strip_circulation_mm @ through)
