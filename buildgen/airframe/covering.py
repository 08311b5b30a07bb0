"""Coverings by their true area, and glue as named allowances."""

from __future__ import annotations

from collections.abc import Iterable

import numpy as np

from buildgen.airframe.shop import Shop
from buildgen.airframe.surface import Panel, WingShape
from buildgen.part import Allowance, Cover, Part, Plate
from buildgen.solid import Array, Placed, Pose, Surface, mesh, triangles

STEP = "Covering"
GLUE = "Glue, as you build"
GLUE_SIGMA = 0.4
"""Glue differs from builder to builder: 40 % of the allowance; common practice, no source."""
SKIN_STRIPS = 24


def wing_covers(shop: Shop, wing: WingShape) -> list[Part]:
    """One skin for each panel, upper and lower together, on each side."""
    name = shop.definition.wing.covering
    if name is None:
        return []
    parts: list[Part] = []
    for panel in wing.panels:
        n = panel.index + 1
        right = _cover(shop, f"C{n}R", f"covering of panel {n}, right", name,
                       _panel_skin(panel), "wing.covering")
        parts += [right, right.mirrored(f"C{n}L", f"covering of panel {n}, left")]
    return parts


def _panel_skin(panel: Panel) -> Surface:
    """The ruled skin from trailing edge round the nose to trailing edge, open at the ends."""
    inner, outer = panel.ring(panel.end_plane(False)), panel.ring(panel.end_plane(True))
    step = max(1, len(inner) // (4 * SKIN_STRIPS))
    keep = np.unique(np.r_[0 : len(inner) : step, len(inner) - 1])
    inner, outer = inner[keep], outer[keep]
    n = len(inner)
    i = np.arange(n - 1)
    faces = np.vstack([np.column_stack([i, i + 1, i + n + 1]),
                       np.column_stack([i, i + n + 1, i + n])])
    return Surface(np.vstack([inner, outer]), faces)


def plate_covers(
    shop: Shop, plates: Iterable[Part], id: str, name: str, material: str | None, key: str,
    both_faces: bool,
) -> list[Part]:
    """One skin over the outer faces of some plates (both faces of tail sheets)."""
    if material is None:
        return []
    vertices: list[Array] = []
    faces: list[Array] = []
    count = 0
    for part in plates:
        if not isinstance(part.form, Plate):
            continue
        v, f = _faces_of(part, both_faces)
        vertices.append(v)
        faces.append(f + count)
        count += len(v)
    if not vertices:
        return []
    skin = Surface(np.vstack(vertices), np.vstack(faces).astype(np.int64))
    return [_cover(shop, id, name, material, skin, key)]


def _faces_of(part: Part, both: bool) -> tuple[Array, Array]:
    """Triangles of a plate's lower (outer) face, or of both, in the aircraft's frame."""
    assert isinstance(part.form, Plate)
    shape = part.form.shape
    if part.form.bend is None:
        v, f = triangles(mesh(shape))
        normal = np.cross(v[f[:, 1]] - v[f[:, 0]], v[f[:, 2]] - v[f[:, 0]])
        keep = np.abs(normal[:, 2]) > 0.99 * np.linalg.norm(normal, axis=1)
        if not both:
            keep &= normal[:, 2] < 0
        return part.pose(v), f[keep].astype(float)
    v, f = triangles(mesh(Placed(shape, part.pose)))
    a, b, c = (v[f[:, k]] for k in range(3))
    normal = np.cross(b - a, c - a)
    outwards = (a + b + c) / 3 - part.centroid_mm
    size = np.linalg.norm(normal, axis=1)
    order = np.einsum("ij,ij->i", normal, _outside(part, outwards))
    return v, f[order > 0.5 * size].astype(float)


def _outside(part: Part, outwards: Array) -> Array:
    """Which way is out for a bent sheet: away from its lower face (the outer one)."""
    down = -part.pose.rotation[:, 2]
    away = part.centroid_mm * (0, 1, 0)
    if np.linalg.norm(away) > 1.0:
        down = away / np.linalg.norm(away)
    return np.broadcast_to(down, outwards.shape)


def _cover(shop: Shop, id: str, name: str, material: str, skin: Surface, key: str) -> Part:
    found = shop.material(material, key, "cover")
    form = Cover(skin, found.area_density_g_m2, found.area_density_sigma_g_m2)
    return Part(id, name, material, form, Pose(), STEP, key, basis="catalogue")


def glue(shop: Shop, groups: dict[str, list[Part]]) -> list[Part]:
    """One allowance for each group of made parts, at their common centre of mass."""
    share = shop.definition.balance.glue_share
    found: list[Part] = []
    for name, parts in groups.items():
        made = [p for p in parts if p.process in ("cut", "stick", "print")]
        mass = sum(p.mass_g for p in made)
        if not share or mass <= 0:
            continue
        centre = sum((p.mass_g * p.centroid_mm for p in made), np.zeros(3)) / mass
        form = Allowance(share * mass, share * mass * GLUE_SIGMA)
        found.append(
            Part(f"G-{name}", f"glue in the {name}, {100 * share:g} % of its made parts", "glue",
                 form, Pose(origin=centre), GLUE, "balance.glue_share")
        )
    return found


