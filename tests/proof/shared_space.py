"""Do any two parts of a written packet stand in each other? From its files alone.

    python tests/proof/shared_space.py out/NAME [out/NAME ...]

Reads model/airframe.glb with trimesh, intersects every pair of closed solids whose boxes meet
with manifold3d, and shares no code with the program. Exit status 1 where a pair shares more
than the stated volume.
"""

from __future__ import annotations

import sys
from itertools import combinations
from pathlib import Path

import manifold3d
import numpy as np
import trimesh

LIMIT_MM3 = 0.5
"""What facets and rounding may share."""
MOVING = ("PROP",)
"""Propellers are drawn as discs: room for them is a check of its own."""


def solids_of(path: Path) -> dict[str, manifold3d.Manifold]:
    """Closed solids in mm by the name of their node; open skins are left out."""
    scene = trimesh.load(path)
    found = {}
    for node in sorted(scene.graph.nodes_geometry):
        matrix, name = scene.graph[node]
        one = scene.geometry[name].copy()
        one.apply_transform(matrix)
        raw = manifold3d.Mesh64(
            vert_properties=np.ascontiguousarray(one.vertices * 1000.0, np.float64),
            tri_verts=np.ascontiguousarray(one.faces, np.uint64),
        )
        raw.merge()
        solid = manifold3d.Manifold(raw)
        closed = solid.status() == manifold3d.Error.NoError and solid.volume() > 0
        if closed and not node.startswith(MOVING):
            found[node] = solid
    return found


def overlaps(solids: dict[str, manifold3d.Manifold]) -> tuple[int, list[tuple[str, str, float]]]:
    """How many pairs were looked at, and those that share more than the limit."""
    boxes = {name: np.array(s.bounding_box()) for name, s in solids.items()}
    count, found = 0, []
    for one, two in combinations(solids, 2):
        a, b = boxes[one], boxes[two]
        low, high = np.maximum(a[:3], b[:3]), np.minimum(a[3:], b[3:])
        if np.any(high <= low) or np.prod(high - low) <= LIMIT_MM3:
            continue
        count += 1
        room = manifold3d.Manifold.cube(high - low + 0.04).translate(low - 0.02)
        volume = ((solids[one] ^ room) ^ solids[two]).volume()
        if volume > LIMIT_MM3:
            found.append((one, two, float(volume)))
    return count, found


def main(folders: list[str]) -> int:
    """One line for each packet and one for each pair that shares space."""
    worst = 0
    for folder in folders:
        solids = solids_of(Path(folder) / "model" / "airframe.glb")
        count, found = overlaps(solids)
        print(f"{folder}: {len(solids)} solids, {count} pairs looked at,"
              f" {len(found)} share more than {LIMIT_MM3} mm3")
        for one, two, volume in found:
            print(f"  {one} and {two}: {volume:.1f} mm3")
        worst = max(worst, bool(found) or count == 0)
    return worst


if __name__ == "__main__":
    sys.exit(main(sys.argv[1:]))
