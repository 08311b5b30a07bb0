"""The whole aircraft as one GLB file: a named node for each part."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import numpy as np

from buildgen.part import Cover, Kit, Part
from buildgen.solid import triangles

COLOURS: dict[str, tuple[int, int, int, int]] = {
    "cut": (222, 196, 150, 255), "stick": (70, 72, 76, 255), "print": (96, 125, 139, 255),
    "cover": (235, 235, 230, 90), "bought": (150, 110, 90, 255), "allowance": (200, 200, 200, 255),
}
TO_GLTF = np.array([[0.0, 0.001, 0, 0], [0, 0, 0.001, 0], [0.001, 0, 0, 0], [0, 0, 0, 1.0]])
"""mm to metres; the standard has y up and looks along z: starboard becomes x, up y, aft z."""


def write_glb(kit: Kit, path: Path) -> None:
    """Write the model; parts without a solid become empty nodes at their place."""
    path.write_bytes(glb(kit))


def glb(kit: Kit) -> bytes:
    """The model's bytes, equal for equal kits. Node names are part ids.

    Source of the axes: glTF 2.0 specification (Khronos Group), an open standard.
    """
    import trimesh

    scene = trimesh.Scene(base_frame="aircraft")
    for part in kit.flying:
        solid = _triangles(part)
        if solid is None:
            matrix = np.eye(4)
            matrix[:3, 3] = part.centroid_mm
            scene.graph.update(frame_to=part.id, frame_from="aircraft",
                               matrix=TO_GLTF @ matrix)
            continue
        model = trimesh.Trimesh(*solid, process=False)
        model.visual = _material(trimesh, part)
        scene.add_geometry(model, node_name=part.id, geom_name=part.id,
                           parent_node_name="aircraft", transform=TO_GLTF)
    return bytes(scene.export(file_type="glb"))


def _material(trimesh: Any, part: Part) -> Any:
    colour = COLOURS[part.process]
    material = trimesh.visual.material.PBRMaterial(
        name=part.process, baseColorFactor=colour, metallicFactor=0.0, roughnessFactor=0.8,
        doubleSided=True, alphaMode="BLEND" if colour[3] < 255 else "OPAQUE",
    )
    return trimesh.visual.TextureVisuals(material=material)


def _triangles(part: Part) -> tuple[Any, Any] | None:
    if isinstance(part.form, Cover):
        return part.pose(part.form.skin.vertices), part.form.skin.faces
    solid = part.solid
    return None if solid is None or solid.is_empty() else triangles(solid)
