"""How one surface's wake meets another: as a smooth sheet, not as single legs.

Within a surface every control point lies midway between legs, which is what makes a lattice exact.
A tail behind a wing lies anywhere: bare legs move the neutral point by up to 1.5 % of the chord as
its strips pass them. So seen from elsewhere each strip is cut in pieces, with the circulation
running in straight lines between the strips' middles, and every leg has a core. What is left,
measured with 12 strips a side and a tail in the plane of the wake, is 0.2 % of the chord.
"""

from __future__ import annotations

import numpy as np

from buildgen.aero.bounds import Floats, Whole
from buildgen.aero.lattice_mesh import Mesh
from buildgen.aero.lattice_wash import wash

PIECES = 2
CORE_SHARE = 0.7
"""Core of a leg as seen from elsewhere, over the mean width of the pieces."""


def strips_across(mesh: Mesh, surface: int) -> Whole:
    """Numbers of a surface's strips, port tip to starboard tip, or from the root of a fin up."""
    own = np.flatnonzero(mesh.strip_surface == surface)
    y, z = mesh.strip_middle_mm[own, 1], mesh.strip_middle_mm[own, 2]
    return own[np.lexsort((z, np.round(y, 6)))]


def strip_widths_mm(mesh: Mesh) -> Floats:
    """(m,): width of each strip seen from behind."""
    across = mesh.strip_ends_mm[:, 1, 1:] - mesh.strip_ends_mm[:, 0, 1:]
    widths: Floats = np.linalg.norm(across, axis=1)
    return widths


def wash_within(mesh: Mesh, points_mm: Floats, owner: Whole) -> Floats:
    """Velocity at points that lie on the lattice's own surfaces.

    Args:
        mesh: n panels.
        points_mm: (m, 3).
        owner: (m,), number of the surface on which each point lies.

    Returns:
        (m, n, 3), as ``wash``.
    """
    field = np.empty((len(points_mm), len(mesh.strip), 3))
    panel_surface = mesh.strip_surface[mesh.strip]
    for surface in range(len(mesh.names)):
        panels = np.flatnonzero(panel_surface == surface)
        own, others = np.flatnonzero(owner == surface), np.flatnonzero(owner != surface)
        single = wash(points_mm[own], mesh.port_mm[panels], mesh.starboard_mm[panels],
                      np.zeros(len(panels)))
        field[np.ix_(own, panels)] = single
        if others.size:
            field[np.ix_(others, panels)] = wash_from(mesh, points_mm[others], surface)[:, panels]
    return field


def wash_from(mesh: Mesh, points_mm: Floats, surface: int) -> Floats:
    """Velocity that one surface, as a smooth sheet, induces at points elsewhere.

    Returns:
        (m, n, 3), as ``wash``; 0 for the panels of other surfaces.
    """
    strips = strips_across(mesh, surface)
    widths = strip_widths_mm(mesh)[strips]
    starts = np.concatenate(([0.0], np.cumsum(widths)[:-1]))
    cut = (np.arange(PIECES) + 0.5) / PIECES
    places = (starts[:, None] + widths[:, None] * cut).ravel()
    middles = starts + 0.5 * widths
    share = np.stack([np.interp(places, middles, unit) for unit in np.eye(len(strips))], axis=1)
    # One core for all: pieces that share a leg must cancel there whatever their widths.
    core = np.full(len(places), CORE_SHARE / PIECES * float(widths.mean()))
    field = np.zeros((len(points_mm), len(mesh.strip), 3))
    panels = np.stack([np.flatnonzero(mesh.strip == strip) for strip in strips])
    for chord_row in panels.T:
        port, run = mesh.port_mm[chord_row], (mesh.starboard_mm - mesh.port_mm)[chord_row]
        first = port[:, None] + run[:, None] * (cut[:, None] - 0.5 / PIECES)
        last = first + run[:, None] / PIECES
        fine = wash(points_mm, first.reshape(-1, 3), last.reshape(-1, 3), core)
        field[:, chord_row] = np.einsum("mfi,fs->msi", fine, share)
    return field
