"""The wing: ruled panels, ribs on the surface, holes that admit what passes."""

from __future__ import annotations

import numpy as np
import pytest
from shapely.geometry import Point, Polygon

from buildgen import Build
from buildgen.aero.planform import area_mm2, mean_aerodynamic_chord
from buildgen.airframe.blank import Bar, Blank, bar_cut, solid_cut
from buildgen.part import Cover, Plate
from buildgen.solid import Placed, Pose, Rod


def frame_of(kit: Build):  # type: ignore[no-untyped-def]
    assert kit.frame is not None
    return kit.frame


def test_a_rib_outline_lies_on_the_ruled_surface(marram: Build) -> None:
    panel = frame_of(marram).wing.panels[1]
    pose = panel.plane(150.0)
    ring = panel.ring(pose)
    share = 150.0 / panel.length_mm
    blend = panel.root.points * (1 - share) + panel.tip.points * share
    # each generator is straight: the point at the plane is the linear blend of its ends
    assert np.abs(ring - blend).max() < 0.01


def test_the_origin_is_the_root_leading_edge(kit: Build) -> None:
    root = frame_of(kit).wing.panels[0].root
    assert np.allclose(root.nose, 0.0)


def test_panels_meet_at_their_breaks(kit: Build) -> None:
    panels = frame_of(kit).wing.panels
    for inner, outer in zip(panels, panels[1:], strict=False):
        a = inner.ring(inner.end_plane(True))
        b = outer.ring(outer.end_plane(False))
        middle = (len(a) - 1) // 2
        # nose and both trailing-edge corners coincide on the shared bisecting plane
        for k in (0, middle, len(a) - 1):
            assert np.linalg.norm(a[k] - b[k]) < 0.6


def test_left_parts_mirror_right_ones(kit: Build) -> None:
    for part in kit.parts:
        if not part.id.endswith("R") or part.id[:-1] + "L" not in kit.by_id:
            continue
        other = kit.by_id[part.id[:-1] + "L"]
        assert other.mass_g == pytest.approx(part.mass_g, rel=1e-6), part.id
        # ruled faces are split along one diagonal: facets of prints and bent sheets differ
        facet = {"print": 0.05, "cut": 0.005}.get(part.process, 1e-3)
        assert other.centroid_mm == pytest.approx(part.centroid_mm * (1, -1, 1), abs=facet)
        if part.solid is not None and other.solid is not None:
            a, b = part.solid.bounding_box(), other.solid.bounding_box()
            assert (-b[4], -b[1]) == pytest.approx((a[1], a[4]), abs=1e-3), part.id


@pytest.mark.parametrize("lean_deg", [0.0, 6.0, 25.0])
def test_a_hole_admits_its_tube_at_the_true_angle(lean_deg: float) -> None:
    """The tube's solid, moved through the plate's whole thickness, stays inside the hole."""
    a = np.radians(lean_deg)
    way = np.array([np.sin(a) * 0.6, np.cos(a), np.sin(a) * 0.8])
    bar = Bar(-50 * way, 50 * way, np.array([1.0, 0, 0]), np.array([0, 0, 1.0]), radius_mm=3.0)
    plate = Blank("R", Pose.at((0, 1.5, 0), (1, 0, 0), (0, 0, 1)), 3.0,
                  Polygon([(-20, -20), (20, -20), (20, 20), (-20, 20)]))
    cut = bar_cut(bar, plate, 0.1)
    holes = [*cut.holes, *(Point(x, y).buffer(r, 64) for x, y, r in cut.circles)]
    assert len(holes) == 1
    tube = Placed(Rod(3.0, 100.0), Pose.at(-50 * way, way, (1, 0, 0)))
    shadow = solid_cut(tube, plate, 0.0).holes[0]
    assert holes[0].contains(shadow)
    assert holes[0].buffer(-0.12).difference(shadow).area < 1e-6  # and is no larger than asked
    assert bool(cut.circles) == (lean_deg == 0.0)


def test_planform_of_the_covering_agrees_with_the_closed_formula(kit: Build) -> None:
    """Projected skin of each half is twice the planform (upper and lower)."""
    frame = frame_of(kit)
    for panel, plan in zip(frame.wing.panels, frame.wing.plan, strict=True):
        cover = kit.by_id[f"C{panel.index + 1}R"]
        vertices, faces = cover.form.skin.vertices, cover.form.skin.faces  # type: ignore[union-attr]
        a, b, c = (vertices[faces[:, k]] for k in range(3))
        shadow = np.abs(np.cross(b - a, c - a) @ panel.up).sum() / 4
        assert shadow == pytest.approx(plan.area_mm2, rel=0.012)
    total = sum(p.area_mm2 for p in frame.wing.plan)
    assert total == pytest.approx(area_mm2(frame.wing.plan))


def test_every_rib_keeps_its_web(kit: Build) -> None:
    """Lightening holes leave at least the material's least web to every edge and other hole."""
    for part in kit.of("cut"):
        if not part.id.startswith("R") or not isinstance(part.form, Plate):
            continue
        plate = part.form
        least = 1.9
        for i, (x, y, r) in enumerate(plate.circles):
            edge = plate.outline.exterior.distance(Point(x, y)) - r
            assert edge > 0.5, (part.id, x, y)
            others = [np.hypot(x - a, y - b) - r - s
                      for k, (a, b, s) in enumerate(plate.circles) if k != i]
            assert not others or min(others) > least - 1.0


def test_the_tongue_fits_its_socket(marram: Build) -> None:
    """The mount and the ribs that carry it share no space, and the tongue is inside the mount."""
    for mount in marram.of("print"):
        solid = mount.solid
        assert solid is not None
        x0, y0, z0, x1, y1, z1 = solid.bounding_box()
        inside = 0
        for rib in marram.parts:
            if not rib.name.startswith("mount rib"):
                continue
            overlap = solid ^ rib.solid
            assert overlap.volume() < 0.3, (mount.id, rib.id)
            rx0, ry0, _, _, ry1, _ = rib.solid.bounding_box()
            inside += rx0 < x1 - 20 and y0 < ry0 and ry1 < y1
        assert inside == 2


def test_the_ribs_cut_lie_on_the_ruled_surface(marram: Build) -> None:
    panel = frame_of(marram).wing.panels[1]
    seen = 0
    for part in marram.parts:
        if part.name != "rib, right" or part.from_key != panel.key:
            continue
        assert isinstance(part.form, Plate)
        whole = part.form.outline.buffer(0)
        spots = np.asarray(whole.exterior.coords)
        faces = []
        for z in (0.0, part.form.thickness_mm):
            share = float((part.pose((0.0, 0.0, z)) - panel.root.nose) @ panel.along
                          ) / panel.length_mm
            points = panel.root.points * (1 - share) + panel.tip.points * share
            faces.append(Polygon(part.pose.local(points)[:, :2]))
        near = np.array([min(f.exterior.distance(Point(p)) for f in faces) for p in spots])
        # the rest are the edges of notches for the leading and the trailing edge
        assert np.mean(near < 0.01) > 0.8, part.id
        assert all(f.buffer(0.01).contains(Point(p)) for f in faces for p in spots), part.id
        seen += 1
    assert seen >= 3


def test_the_mean_chord_of_the_covering_agrees_with_the_closed_formula(kit: Build) -> None:
    area = moment = 0.0
    for part in kit.parts:
        if not (part.id[0] == "C" and part.id.endswith("R") and isinstance(part.form, Cover)):
            continue
        points = part.pose(part.form.skin.vertices)
        half = len(points) // 2
        ends = points[:half], points[half:]
        inner, outer = (float(np.ptp(e[:, 0])) for e in ends)
        length = float(np.hypot(*(ends[1] - ends[0])[:, 1:].mean(axis=0)))
        chords = np.interp(np.linspace(0, 1, 2001), (0, 1), (inner, outer))
        area += float(np.trapezoid(chords)) / 2000 * length
        moment += float(np.trapezoid(chords**2)) / 2000 * length
    found = mean_aerodynamic_chord(frame_of(kit).wing.plan)
    # twist and incidence shorten what is seen from above by their cosine
    assert moment / area == pytest.approx(found.length_mm, rel=2e-3)
