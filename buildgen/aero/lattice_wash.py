"""Velocity that horseshoe vortices induce, near and in the far wake."""

from __future__ import annotations

import numpy as np

from buildgen.aero.bounds import Floats

_TINY = 1e-12


def wash(points_mm: Floats, port_mm: Floats, starboard_mm: Floats, core_mm: Floats) -> Floats:
    """Velocity at points by horseshoes of unit circulation, legs straight aft along x.

    Args:
        points_mm: (m, 3).
        port_mm: (n, 3), port ends of the bound vortices.
        starboard_mm: (n, 3), starboard ends.
        core_mm: (m, n) or (n,), radius within which a leg's velocity is eased off; 0 is none.
            Neighbours that share a leg need the same, or it does not cancel between them.

    Returns:
        (m, n, 3), 1/mm: velocity over speed for a circulation over speed of 1 mm.

    Source: Biot-Savart law for a bound segment and two semi-infinite legs, in the form without
        angles of M. Drela, Flight Vehicle Aerodynamics, chapter 5 (from memory); J. Katz and A.
        Plotkin, Low-Speed Aerodynamics, section 2.12; core of G. H. Vatistas, r/sqrt(r^4 + c^4),
        which leaves the field outside it alone.
    """
    a = points_mm[:, None] - port_mm[None]
    b = points_mm[:, None] - starboard_mm[None]
    length_a, length_b = np.linalg.norm(a, axis=2), np.linalg.norm(b, axis=2)
    facing = length_a * length_b + np.einsum("mni,mni->mn", a, b)
    inverse = 1.0 / np.maximum(length_a, _TINY) + 1.0 / np.maximum(length_b, _TINY)
    # On the segment itself the cross product is 0, and so is what the segment induces there.
    scale = np.maximum(length_a * length_b, _TINY)
    bound = np.where(facing > 1e-9 * scale, inverse / np.maximum(facing, _TINY), 0.0)
    field = np.cross(a, b) * bound[..., None]
    field += _leg(a, length_a, core_mm) - _leg(b, length_b, core_mm)
    field /= 4.0 * np.pi
    return field


def _leg(away: Floats, length: Floats, core_mm: Floats) -> Floats:
    """Half-infinite leg along +x from where ``away`` is measured, (m, n, 3)."""
    ahead = away[..., 0]
    aside = np.hypot(away[..., 1] ** 2 + away[..., 2] ** 2, np.square(core_mm))
    factor = (1.0 + ahead / np.maximum(length, _TINY)) / np.maximum(aside, _TINY)
    factor = np.where(aside > _TINY, factor, 0.0)
    return np.stack([np.zeros_like(ahead), away[..., 2] * factor, -away[..., 1] * factor], axis=2)


def far_wash(points_mm: Floats, ends_mm: Floats, core_mm: Floats) -> Floats:
    """Velocity far behind, where only the legs are left, by strips of unit circulation.

    Args:
        points_mm: (m, 2), y and z.
        ends_mm: (n, 2, 2), y and z of the two ends of each strip.
        core_mm: (m, n) or (n,), as in ``wash``.

    Returns:
        (m, n, 2), 1/mm: sideways and upward.

    Source: plane of E. Trefftz; J. Katz and A. Plotkin, Low-Speed Aerodynamics, section 8.1.
    """
    field = np.zeros((len(points_mm), len(ends_mm), 2))
    for end, sign in ((0, -1.0), (1, 1.0)):
        away = points_mm[:, None] - ends_mm[None, :, end]
        square = np.hypot(np.einsum("mni,mni->mn", away, away), np.square(core_mm))
        square = np.maximum(square, _TINY)
        field[..., 0] += -sign * away[..., 1] / square
        field[..., 1] += sign * away[..., 0] / square
    field /= 2.0 * np.pi
    return field
