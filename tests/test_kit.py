"""The kit: sums, ids, the balance; one truth."""

from __future__ import annotations

import numpy as np
import pytest

from buildgen import Build
from buildgen.part import Bought, Part, Plate
from buildgen.solid import Pose, solid_figures, triangles


def test_mass_and_cg_are_the_sums_over_parts(kit: Build) -> None:
    mass = sum(p.mass_g for p in kit.parts)
    cg = sum((p.mass_g * p.centroid_mm for p in kit.parts), np.zeros(3)) / mass
    assert kit.balance.mass_g == pytest.approx(mass, rel=1e-12)
    assert kit.balance.cg_mm == pytest.approx(tuple(cg), rel=1e-9, abs=1e-9)


def test_no_two_parts_carry_the_same_id(kit: Build) -> None:
    assert len({p.id for p in kit.parts}) == len(kit.parts)


def test_flat_plates_weigh_area_times_thickness_times_density(kit: Build) -> None:
    for part in kit.of("cut"):
        assert isinstance(part.form, Plate)
        by_hand = part.form.area_mm2 * part.form.thickness_mm * part.density_kg_m3 * 1e-6
        assert part.mass_g == pytest.approx(0.0 if part.tool else by_hand)
        solid = part.solid
        assert solid is not None
        # the solid in place is the flat plate, bent or not
        assert solid.volume() == pytest.approx(part.volume_mm3, rel=0.008), part.id


def test_centroid_and_inertia_agree_with_the_mesh(sedge: Build) -> None:
    rib = sedge.by_id["R3R"]
    assert rib.solid is not None
    figures = solid_figures(*triangles(rib.solid))
    assert rib.centroid_mm == pytest.approx(figures.centroid_mm, abs=0.02)
    assert np.allclose(rib.inertia_g_mm2, figures.radius2 * rib.mass_g)


def test_a_solid_box_has_the_textbook_inertia() -> None:
    """m (b^2 + c^2) / 12 about each axis: any mechanics handbook."""
    from buildgen.solid import Box, mesh

    figures = solid_figures(*triangles(mesh(Box((0, 0, 0), (10, 20, 30)))))
    assert figures.volume_mm3 == pytest.approx(6000)
    assert np.diag(figures.radius2) == pytest.approx([1300 / 12, 1000 / 12, 500 / 12], rel=1e-5)
    assert figures.centroid_mm == pytest.approx([5, 10, 15])


def test_every_part_stands_on_its_own_side(kit: Build) -> None:
    for part in kit.parts:
        if part.name.endswith(", right"):
            assert part.centroid_mm[1] > 0, part.id
        if part.name.endswith(", left"):
            assert part.centroid_mm[1] < 0, part.id


def test_the_aircraft_is_balanced_by_its_battery(kit: Build) -> None:
    low, high = kit.balance.target_cg_x_mm
    assert low < kit.balance.cg_mm[0] < high
    for item in kit.balance.movable:
        assert item.range_mm[0] <= item.x_mm <= item.range_mm[1]


def test_a_battery_further_forward_moves_the_cg_by_its_share(sedge: Build) -> None:
    from dataclasses import replace

    from buildgen.airframe.equipment import moved
    from buildgen.checks.balance import balance_of

    battery = next(p for p in sedge.parts if p.name == "flight battery")
    x = float(battery.centroid_mm[0])
    parts = tuple(moved(p, x - 10) if p is battery else p for p in sedge.parts)
    shifted = balance_of(replace(sedge, parts=parts), sedge.frame)  # type: ignore[arg-type]
    by_hand = -10 * battery.mass_g / sedge.balance.mass_g
    assert shifted.cg_mm[0] - sedge.balance.cg_mm[0] == pytest.approx(by_hand, rel=1e-6)


def test_a_mirrored_plate_keeps_its_outline_and_turns_its_face() -> None:
    from shapely.geometry import box

    plate = Plate(box(0, 0, 40, 10), 3.0)
    right = Part("R1R", "rib, right", "balsa", plate, Pose.at((0, 50, 0), (1, 0, 0), (0, 0, 1)),
                 "s", "wing", 160)
    left = right.mirrored("R1L", "rib, left")
    assert left.form.outline.equals(plate.outline)  # type: ignore[union-attr]
    assert right.solid.bounding_box()[1::3] == pytest.approx((47, 50))  # type: ignore[union-attr]
    assert left.solid.bounding_box()[1::3] == pytest.approx((-50, -47))  # type: ignore[union-attr]


def test_screws_are_counted_from_the_pattern(marram: Build) -> None:
    screws = [p for p in marram.parts if p.id.startswith("SCR")]
    assert len(screws) == 4
    for p in screws:
        assert isinstance(p.form, Bought)
        assert p.form.quantity == 4
        assert p.form.order.startswith("M3 x ")
