"""Printed solids: the two kernels agree; files are closed, repeatable, readable by others."""

from __future__ import annotations

import io
import zipfile
from pathlib import Path

import numpy as np
import pytest

from buildgen import Build
from buildgen.part import Printed, PrintSettings
from buildgen.prints.brep import brep, missing_text, solid_of, volume_mm3
from buildgen.prints.files import jobs_of, start
from buildgen.prints.make import Job, make, on_bed, watertight
from buildgen.prints.three_mf import three_mf
from buildgen.solid import (
    Box,
    Common,
    Difference,
    Mirrored,
    Placed,
    Pose,
    Prism,
    Rod,
    Union,
    mesh,
)


@pytest.fixture(scope="module")
def reports(marram: Build, tmp_path_factory: pytest.TempPathFactory):  # type: ignore[no-untyped-def]
    folder = tmp_path_factory.mktemp("prints")
    return folder, start(marram.of("print"), folder).finish()


def test_every_mount_is_sound(reports) -> None:  # type: ignore[no-untyped-def]
    folder, found = reports
    assert [r.key for r in found] == ["M1R", "M2R", "M2L"]
    for report in found:
        assert report.faults == ()
        assert report.mesh_volume_mm3 == pytest.approx(report.volume_mm3, rel=0.005)
        assert report.recipe_volume_mm3 == pytest.approx(report.volume_mm3, rel=0.005)
        for name in report.files:
            assert (folder / name).stat().st_size > 1000


def test_other_readers_see_the_same_closed_solid(reports) -> None:  # type: ignore[no-untyped-def]
    import cadquery
    import trimesh

    folder, found = reports
    for report in found:
        for ending in (".stl", ".3mf"):
            loaded = trimesh.load(folder / f"{report.key}{ending}", force="mesh")
            loaded.merge_vertices()
            assert loaded.is_watertight
            assert loaded.volume == pytest.approx(report.volume_mm3, rel=0.005)
            assert loaded.bounds[0][2] == pytest.approx(0.0, abs=1e-3)
    again = cadquery.importers.importStep(str(folder / "M1R.step")).val()
    assert again.isValid()
    assert volume_mm3(again) == pytest.approx(found[0].volume_mm3, rel=1e-4)


def test_left_and_right_differ_where_they_must(reports) -> None:  # type: ignore[no-untyped-def]
    """The outer mount sits on a tapered panel: its left one is the mirror image, not a copy."""
    folder, found = reports
    by_key = {r.key: r for r in found}
    assert by_key["M2L"].volume_mm3 == pytest.approx(by_key["M2R"].volume_mm3, rel=1e-6)
    assert (folder / "M2L.stl").read_bytes() != (folder / "M2R.stl").read_bytes()


def test_files_are_the_same_each_time(marram: Build, reports, tmp_path: Path) -> None:  # type: ignore[no-untyped-def]
    folder, _ = reports
    start(marram.of("print"), tmp_path).finish()
    for path in sorted(folder.iterdir()):
        assert (tmp_path / path.name).read_bytes() == path.read_bytes(), path.name


SHAPES = {
    "box": Box((0, 0, 0), (10, 20, 30)),
    "tube": Rod(5, 40, 4),
    "cut": Difference(Box((0, 0, 0), (20, 20, 20)), (Placed(
        Rod(4, 60), Pose.at((-20, 10, 10), (1, 0, 0), (0, 1, 0))),)),
    "union": Union((Box((0, 0, 0), (10, 10, 10)), Box((5, 5, 5), (15, 15, 15)))),
    "common": Common((Box((0, 0, 0), (10, 10, 10)), Box((5, 5, 5), (15, 15, 15)))),
    "mirrored": Mirrored(Placed(Rod(3, 20), Pose(origin=np.array([5.0, 0, 0]))), 0),
}


@pytest.mark.parametrize("name", SHAPES)
def test_both_kernels_agree(name: str) -> None:
    shape = SHAPES[name]
    solid = solid_of(shape)
    assert volume_mm3(solid) == pytest.approx(mesh(shape).volume(), rel=5e-3)
    box = solid.BoundingBox()
    assert mesh(shape).bounding_box()[0] == pytest.approx(box.xmin, abs=1e-3)


def test_a_prism_with_holes() -> None:
    from shapely.geometry import Polygon

    outline = Polygon([(0, 0), (30, 0), (30, 20), (0, 20)], [[(2, 2), (8, 2), (8, 8), (2, 8)]])
    shape = Prism(outline, 3, ((20, 10, 4),))
    by_hand = 3 * (600 - 36 - np.pi * 16)
    assert volume_mm3(brep(shape)) == pytest.approx(by_hand, rel=1e-6)
    assert mesh(shape).volume() == pytest.approx(by_hand, rel=1e-3)


def test_a_print_larger_than_the_bed_is_said(tmp_path: Path) -> None:
    job = Job("X", Box((0, 0, 0), (300, 20, 10)), (0, 0, 1), (220, 220, 220))
    assert "do not fit the bed" in make(job, tmp_path, {}).faults[0]


def test_prints_lie_on_the_bed_with_their_up_side_up() -> None:
    laid = on_bed(Box((5, 5, 5), (45, 15, 8)), (1, 0, 0))
    x0, y0, z0, x1, y1, z1 = mesh(laid).bounding_box()
    assert (z0, z1) == pytest.approx((0, 40), abs=1e-5)
    assert x0 + x1 == pytest.approx(0, abs=1e-5)
    assert y0 + y1 == pytest.approx(0, abs=1e-5)


def test_mass_is_shell_and_infill_not_a_full_solid() -> None:
    """A 40 mm cube: shell 6 faces, inside at a quarter; by hand."""
    settings = PrintSettings(0.5, 2, 0.2, 5, 0.25)
    form = Printed(Box((0, 0, 0), (40, 40, 40)), settings)
    shell = 4 * 1600 * 1.0 + 2 * 1600 * 1.0
    assert form.plastic_mm3 == pytest.approx(shell + (64000 - shell) * 0.25, rel=1e-6)


def test_an_open_mesh_is_seen() -> None:
    faces = np.array([[0, 1, 2], [0, 2, 3], [0, 3, 1], [1, 3, 2]])
    assert watertight(faces)
    assert not watertight(faces[:3])
    assert not watertight(np.vstack([faces[:3], [[1, 2, 3]]]))


def test_the_3mf_holds_one_welded_model_in_millimetres() -> None:
    vertices = np.array([[0.0, 0, 0], [1, 0, 0], [0, 1, 0], [0, 0, 1]])
    faces = np.array([[0, 2, 1], [0, 1, 3], [0, 3, 2], [1, 2, 3]])
    data = three_mf("tetra", vertices, faces)
    archive = zipfile.ZipFile(io.BytesIO(data))
    assert archive.testzip() is None
    model = archive.read("3D/3dmodel.model").decode()
    assert 'unit="millimeter"' in model
    assert model.count("<vertex ") == 4
    assert three_mf("tetra", vertices, faces) == data


def test_a_missing_system_library_names_the_packages() -> None:
    error = ImportError("libGL.so.1: cannot open shared object file: No such file or directory")
    assert "libgl1 libx11-6" in missing_text(error)
    assert "pip install cadquery" in missing_text(ImportError("No module named 'cadquery'"))


def test_only_distinct_solids_are_built(marram: Build) -> None:
    assert len(marram.of("print")) == 4
    assert len(jobs_of(marram.of("print"))) == 3
