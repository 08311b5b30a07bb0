"""One printed solid: built, meshed, checked against its recipe, written."""

from __future__ import annotations

import itertools
import re
from dataclasses import dataclass, field
from pathlib import Path
from typing import Any

import numpy as np
from numpy.typing import NDArray

from buildgen.prints.brep import solid_of, volume_mm3
from buildgen.prints.three_mf import binary_stl, three_mf
from buildgen.solid import Array, Mirrored, Placed, Pose, Shape, mesh

TOLERANCE_MM, ANGLE_RAD = 0.02, 0.3
LEAST_AGREEMENT = 0.005
"""Volumes of boundary representation, its mesh and the recipe's mesh agree this closely."""
WELD_MM = 1e-5


@dataclass(frozen=True, eq=False)
class Job:
    """What the solids' process needs to know of one print."""

    key: str
    shape: Shape
    print_up: tuple[float, float, float]
    bed_mm: tuple[float, float, float]


@dataclass(frozen=True, eq=False)
class Report:
    """What was measured on a print.

    Attributes:
        size_mm: as it lies on the bed.
        volume_mm3: of the boundary representation.
        mesh_volume_mm3, recipe_volume_mm3: of its mesh, and of the recipe's own mesh.
        faults: in words; empty when sound.
        files: written, by name.
    """

    key: str
    size_mm: tuple[float, float, float]
    volume_mm3: float
    mesh_volume_mm3: float
    recipe_volume_mm3: float
    triangles: int
    faults: tuple[str, ...] = ()
    files: tuple[str, ...] = field(default=())


def on_bed(shape: Shape, up: tuple[float, float, float]) -> Placed:
    """The recipe turned so that `up` is z, its lowest point at z = 0, its middle over x = y = 0."""
    z = np.asarray(up, float) / np.linalg.norm(up)
    other = np.array([1.0, 0, 0]) if abs(z[0]) < 0.9 else np.array([0, 1.0, 0])
    x = np.cross(other, z)
    x /= np.linalg.norm(x)
    turn = np.vstack([x, np.cross(z, x), z])
    x0, y0, z0, x1, y1, _ = mesh(Placed(shape, Pose(turn))).bounding_box()
    return Placed(shape, Pose(turn, -np.array([(x0 + x1) / 2, (y0 + y1) / 2, z0])))


def make(job: Job, folder: Path, built: dict[int, Any]) -> Report:
    """Build one print, write its files, report; `built` keeps solids whose mirror may follow."""
    recipe = on_bed(job.shape, job.print_up)
    inner = job.shape.shape if isinstance(job.shape, Mirrored) else job.shape
    key = id(inner)
    if key not in built:
        built[key] = solid_of(inner)
    solid = built[key]
    if isinstance(job.shape, Mirrored):
        solid = solid.mirror(("YZ", "XZ", "XY")[job.shape.axis])
    solid = placed(solid, recipe.pose)
    vertices, faces = welded(solid)
    report = _report(job, recipe, solid, vertices, faces)
    names = tuple(f"{job.key}{e}" for e in (".step", ".stl", ".3mf"))
    (folder / names[0]).write_text(step_text(solid, job.key), "utf-8", newline="\n")
    (folder / names[1]).write_bytes(binary_stl(job.key, vertices, faces))
    (folder / names[2]).write_bytes(three_mf(job.key, vertices, faces))
    return Report(**{**report.__dict__, "files": names})


def placed(solid: Any, pose: Pose) -> Any:
    """A solid moved into a frame."""
    import cadquery as cq

    plane = cq.Plane(tuple(map(float, pose.origin)), tuple(map(float, pose.rotation[:, 0])),
                     tuple(map(float, pose.rotation[:, 2])))
    return solid.moved(cq.Location(plane))


def welded(solid: Any) -> tuple[Array, NDArray[np.int64]]:
    """A mesh of the solid whose faces share their vertices."""
    points, triangles = solid.tessellate(TOLERANCE_MM, ANGLE_RAD)
    raw = np.array([p.toTuple() for p in points])
    cells = np.round(raw / WELD_MM).astype(np.int64)
    _, first, back = np.unique(cells, axis=0, return_index=True, return_inverse=True)
    order = np.argsort(first)
    rank = np.empty_like(order)
    rank[order] = np.arange(len(order))
    faces = rank[back.ravel()][np.asarray(triangles, np.int64)]
    keep = (faces[:, 0] != faces[:, 1]) & (faces[:, 1] != faces[:, 2]) & (
        faces[:, 0] != faces[:, 2])
    return raw[first[order]], faces[keep]


def watertight(faces: NDArray[np.int64]) -> bool:
    """Every edge is walked once each way."""
    edges = np.vstack([faces[:, [0, 1]], faces[:, [1, 2]], faces[:, [2, 0]]])
    codes = edges[:, 0] * (faces.max() + 1) + edges[:, 1]
    back = edges[:, 1] * (faces.max() + 1) + edges[:, 0]
    return len(np.unique(codes)) == len(codes) and bool(np.isin(back, codes).all())


def _report(
    job: Job, recipe: Placed, solid: Any, vertices: Array, faces: NDArray[np.int64]
) -> Report:
    a, b, c = (vertices[faces[:, k]] for k in range(3))
    meshed = float(np.einsum("ij,ij->i", a, np.cross(b, c)).sum() / 6)
    exact, own = volume_mm3(solid), float(mesh(recipe).volume())
    size = tuple(float(v) for v in np.ptp(vertices, axis=0))
    faults = []
    if not watertight(faces):
        faults.append("its mesh is not closed")
    for what, volume in (("mesh", meshed), ("recipe", own)):
        if abs(volume / exact - 1) > LEAST_AGREEMENT:
            faults.append(f"the volume of its {what}, {volume:.0f} mm3, is not that of the solid,"
                          f" {exact:.0f} mm3")
    flat, bed = sorted(size[:2]), sorted(job.bed_mm[:2])
    if flat[0] > bed[0] or flat[1] > bed[1] or size[2] > job.bed_mm[2]:
        faults.append(f"its {size[0]:.0f} x {size[1]:.0f} x {size[2]:.0f} mm do not fit the bed")
    return Report(job.key, size, exact, meshed, own, len(faces), tuple(faults))  # type: ignore[arg-type]


def step_text(solid: Any, name: str) -> str:
    """The STEP file of a solid, the same text each time."""
    import tempfile

    with tempfile.TemporaryDirectory() as room:
        path = Path(room) / "part.step"
        solid.exportStep(str(path), write_pcurves=False)
        text = path.read_text("utf-8")
    return fixed_header(text, name)


def fixed_header(text: str, name: str) -> str:
    """A STEP file without the writer's clock and its counters of products and of their uses."""
    count = itertools.count(1)
    text = re.sub(r"NEXT_ASSEMBLY_USAGE_OCCURRENCE\('\d+'",
                  lambda _: f"NEXT_ASSEMBLY_USAGE_OCCURRENCE('{next(count)}'", text)
    text = re.sub(r"FILE_NAME\(.*?\);", f"FILE_NAME('{name}','1980-01-01T00:00:00',(''),(''),"
                  "'buildgen','buildgen','');", text, count=1, flags=re.DOTALL)
    return re.sub(r"'Open CASCADE STEP translator [^']*'", f"'{name}'", text)
