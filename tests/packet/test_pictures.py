"""Silhouettes and shaded pictures against closed forms."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from shapely.geometry import Point, Polygon, box

from buildgen.packet.balance_pages import verdict
from buildgen.packet.package import Package
from buildgen.packet.print_pages import bed_size_mm
from buildgen.packet.render import Scene, facing, isometric
from buildgen.packet.sheet_pages import laid
from buildgen.packet.tables import natural
from buildgen.packet.three_view import round_scale
from buildgen.packet.view import FROM_ABOVE, FROM_FRONT, FROM_LEFT, silhouette, view_of
from buildgen.part import Bought, Part, Plate
from buildgen.sheets.nest_types import placed
from buildgen.solid import Array, Box, Pose, mesh, triangles

from .example_kit import Placement


def block(low: tuple[float, float, float], high: tuple[float, float, float]) -> Part:
    return Part("B", "Block", "block", Bought(1.0, shape=Box(low, high)), Pose(), "s", "k")


def test_silhouettes_of_a_block_are_its_faces() -> None:
    part = block((1, 2, 3), (11, 5, 4))
    assert silhouette(part, FROM_ABOVE).bounds == pytest.approx((2, -11, 5, -1))
    assert silhouette(part, FROM_FRONT).bounds == pytest.approx((-5, 3, -2, 4))
    assert silhouette(part, FROM_LEFT).bounds == pytest.approx((1, 3, 11, 4))
    assert silhouette(part, FROM_LEFT).area == pytest.approx(10.0, rel=1e-6)


def test_covering_has_the_shadow_of_its_wing(package: Package) -> None:
    cover = package.kit.by_id["C2"]
    shadow = silhouette(cover, FROM_ABOVE)
    assert shadow.area == pytest.approx(180.0 * 500.0, rel=1e-3)


def test_view_holds_every_part(package: Package) -> None:
    view = view_of(package.kit, FROM_ABOVE)
    assert view.size_mm == pytest.approx((1000.0, 750.0), abs=1.0)
    for _, shadow in view.shadows:
        assert view.outline.buffer(0.7).covers(shadow)


def scene_of(*meshes: tuple[int, Array, np.ndarray], size: int = 400,
             scale: float = 10.0) -> Scene:
    scene = Scene(size, size, scale, np.zeros(3))
    for owner, vertices, faces in meshes:
        scene.add([(owner, facing(FROM_ABOVE, vertices, faces))])
    return scene


def sphere(radius: float, at: tuple[float, float, float] = (0, 0, 0)) -> tuple[Array, np.ndarray]:
    from manifold3d import Manifold

    return triangles(Manifold.sphere(radius, 128).translate(at))


def test_a_sphere_covers_a_disc_and_its_depth_is_a_cap() -> None:
    scene = scene_of((0, *sphere(10.0)))
    seen = scene.rows(scene.owner) == 0
    assert seen.sum() / 100 == pytest.approx(np.pi * 100, rel=2e-3), "area of a circle"
    depth = scene.rows(scene.depth)
    # A sphere's surface lies sqrt(r2 - d2) above its middle.
    assert -depth[200, 200] / 10 == pytest.approx(10.0, abs=0.02)
    assert -depth[200, 260] / 10 == pytest.approx(np.sqrt(100 - 6.05**2), abs=0.03)


def test_the_nearer_thing_is_seen_whatever_the_order() -> None:
    low, high = sphere(5.0, (0, 0, -20)), sphere(5.0, (0, 0, 20))
    for order in ((0, 1), (1, 0)):
        meshes = [(0, *low), (1, *high)]
        scene = scene_of(*(meshes[k] for k in order))
        assert scene.rows(scene.owner)[200, 200] == 1


def test_no_holes_between_triangles_of_a_plate() -> None:
    outline = Point(0, 0).buffer(15, quad_segs=64).difference(box(-2, -2, 2, 2))
    part = Part("P", "Plate", "balsa", Plate(Polygon(outline), 2.0), Pose(), "s", "k", 100.0)
    scene = scene_of((0, *triangles(part.solid)))  # type: ignore[arg-type]
    seen = scene.rows(scene.owner) == 0
    assert seen.sum() / 100 == pytest.approx(outline.area, rel=3e-3)
    assert not seen[185:215, 185:215].any()


def test_isometric_looks_down_from_ahead_on_the_left() -> None:
    rows = isometric().rows
    assert rows @ rows.T == pytest.approx(np.eye(3), abs=1e-12)
    assert rows[2] @ (-1, -1, 1) > 0
    assert rows[1][2] > 0
    assert rows[0][2] == pytest.approx(0.0, abs=1e-12), "the horizon is level"


def test_a_part_on_a_sheet_is_turned_over_then_turned_then_moved() -> None:
    plate = Plate(Polygon([(0, 0), (30, 0), (30, 10)]), 2.0)
    seen = placed(plate.shape2d, laid(Placement("P", 100.0, 50.0, 90.0, True)))  # type: ignore[arg-type]
    assert seen.equals(Polygon([(100, 50), (100, 20), (90, 20)]))


def test_size_on_the_bed_follows_the_print_direction(package: Package) -> None:
    # The block is 40 long, 32 x 32 across, printed standing on its end.
    assert bed_size_mm(package.kit.by_id["M1"]) == pytest.approx((32, 32, 40), abs=1e-3)


@pytest.mark.parametrize(("size", "n"), [((170, 100), 1), ((171, 100), 2), ((1000, 300), 6),
                                         ((170, 1000), 10), ((30000, 10), 177)])
def test_scales_are_plain_and_fit(size: tuple[float, float], n: float) -> None:
    assert round_scale((170, 100), size) == n


def test_ids_sort_as_a_reader_expects() -> None:
    ids = ["R10", "SP1", "R2", "BATTERY", "R2b", "R1"]
    assert sorted(ids, key=natural) == ["BATTERY", "R1", "R2", "R2b", "R10", "SP1"]


@pytest.mark.parametrize(
    ("cg", "said"),
    [(30.0, "10.0 mm too far forward"), (70.0, "8.0 mm too far aft"),
     (50.0, "it does, by 10.0 mm"), (61.0, "less than its own uncertainty")],
)
def test_verdict_says_which_way(package: Package, cg: float, said: str) -> None:
    text = " ".join(verdict(replace(package.balance, cg_mm=(cg, 0.0, 0.0))))
    assert said in text


def test_meshes_of_the_example_are_closed(package: Package) -> None:
    for part in package.kit.of("cut", "stick", "print"):
        assert part.shape is not None
        assert mesh(part.shape).volume() > 0
