"""The whole aircraft as one STEP file, read back by the kernel."""

from __future__ import annotations

import re
from pathlib import Path

import numpy as np
import pytest

from buildgen import Build
from buildgen.prints.assembly import Piece, assembly_text, pieces_of
from buildgen.prints.brep import sewn
from buildgen.solid import Box, Mirrored, Placed, Pose, Surface, mesh, triangles


@pytest.fixture(scope="module")
def text(sedge: Build) -> str:
    return assembly_text("sedge", pieces_of(sedge.parts), {})


def test_every_solid_part_is_a_named_product(sedge: Build, text: str) -> None:
    named = set(re.findall(r"PRODUCT\('([^']*)'", text))
    solid = {p.id for p in sedge.parts if p.solid is not None}
    assert solid <= named
    assert len(solid) > 30


def test_it_is_read_back_with_the_kit_s_volume_and_place(
    sedge: Build, text: str, tmp_path: Path
) -> None:
    import cadquery as cq

    path = tmp_path / "a.step"
    path.write_text(text)
    whole = cq.importers.importStep(str(path)).val()
    solids = [p.solid for p in sedge.parts if p.solid is not None]
    wanted = sum(s.volume() for s in solids)
    assert whole.Volume() == pytest.approx(wanted, rel=0.003)
    boxes = np.array([s.bounding_box() for s in solids])
    found = whole.BoundingBox()
    low, high = boxes[:, :3].min(axis=0), boxes[:, 3:].max(axis=0)
    assert (found.xmin, found.ymin, found.zmin) == pytest.approx(low, abs=0.1)
    assert (found.xmax, found.ymax, found.zmax) == pytest.approx(high, abs=0.1)


def test_the_text_is_the_same_each_time() -> None:
    box = Box((0, 0, 0), (10, 20, 5))
    pieces = [Piece("A1", Placed(box, Pose(origin=np.array([5.0, 0, 0])))),
              Piece("A2", Placed(Mirrored(box, 1), Pose()))]
    assert assembly_text("tern", pieces, {}) == assembly_text("tern", pieces, {})


def test_triangles_become_flat_faces() -> None:
    vertices, faces = triangles(mesh(Box((0, 0, 0), (10, 20, 5))))
    solid = sewn(Surface(vertices, faces))
    assert solid.isValid()
    assert len(solid.Faces()) == 6
    assert solid.Volume() == pytest.approx(1000)


def test_open_triangles_are_refused() -> None:
    vertices, faces = triangles(mesh(Box((0, 0, 0), (10, 20, 5))))
    with pytest.raises(ValueError, match="do not close"):
        sewn(Surface(vertices, faces[1:]))
