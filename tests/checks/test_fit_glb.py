"""A second opinion from the written 3D model alone: no code of the checker, no recipes.

The model is read back with trimesh; every pair of closed meshes whose boxes meet is intersected
with manifold3d.
"""

from __future__ import annotations

from io import BytesIO
from itertools import combinations

import manifold3d
import numpy as np
import trimesh

from buildgen import Build
from buildgen.prints.model import glb

LIMIT_MM3 = 0.5
MOVING = ("PROP",)


def closed_meshes(data: bytes) -> tuple[dict[str, manifold3d.Manifold], list[str]]:
    """Solids of the model in mm by the name of their node, and the names of open skins."""
    scene = trimesh.load(BytesIO(data), file_type="glb")
    found: dict[str, manifold3d.Manifold] = {}
    skins = []
    for node in scene.graph.nodes_geometry:
        matrix, name = scene.graph[node]
        one = scene.geometry[name].copy()
        one.apply_transform(matrix)
        raw = manifold3d.Mesh64(
            vert_properties=np.ascontiguousarray(one.vertices * 1000.0, np.float64),
            tri_verts=np.ascontiguousarray(one.faces, np.uint64),
        )
        raw.merge()
        solid = manifold3d.Manifold(raw)
        if solid.status() == manifold3d.Error.NoError and solid.volume() > 0:
            found[node] = solid
        else:
            skins.append(node)
    return found, skins


def shared_mm3(a: manifold3d.Manifold, b: manifold3d.Manifold) -> float:
    """The volume of both, worked out within their common box."""
    x, y = (np.array(s.bounding_box()) for s in (a, b))
    low, high = np.maximum(x[:3], y[:3]) - 0.02, np.minimum(x[3:], y[3:]) + 0.02
    part = (a if a.num_tri() < b.num_tri() else b) ^ manifold3d.Manifold.cube(
        high - low).translate(low)
    if part.is_empty():
        return 0.0
    return float((part ^ (b if a.num_tri() < b.num_tri() else a)).volume())


def overlaps(solids: dict[str, manifold3d.Manifold]) -> tuple[int, list[tuple[str, str, float]]]:
    boxes = {name: np.array(s.bounding_box()) for name, s in solids.items()}
    count, found = 0, []
    for one, two in combinations(solids, 2):
        a, b = boxes[one], boxes[two]
        room = np.minimum(a[3:], b[3:]) - np.maximum(a[:3], b[:3])
        if np.any(room <= 0) or np.prod(room) <= LIMIT_MM3:
            continue
        count += 1
        volume = shared_mm3(solids[one], solids[two])
        if volume > LIMIT_MM3:
            found.append((one, two, round(volume, 2)))
    return count, found


def test_no_two_parts_of_the_written_model_share_space(kit: Build) -> None:
    solids, skins = closed_meshes(glb(kit))
    covers = {p.id for p in kit.of("cover")}
    assert set(skins) <= covers, "every made or bought thing is a closed solid"
    still = {name: s for name, s in solids.items() if not name.startswith(MOVING)}
    assert len(still) > 40
    count, found = overlaps(still)
    assert count > 100
    assert found == []


def test_the_second_opinion_sees_a_part_out_of_place(sedge: Build) -> None:
    solids, _ = closed_meshes(glb(sedge))
    solids["SR1at"] = solids["SR1at"].translate((0.0, 0.0, -1.5))
    named = {name: s for name, s in solids.items() if name.startswith(("SR", "R"))}
    _, found = overlaps(named)
    assert {one if two == "SR1at" else two for one, two, _ in found} >= {"R2R", "R5R", "R9R"}
