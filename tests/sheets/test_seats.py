"""Where neighbours sit: drawn on the face that carries them, where they truly stand."""

from __future__ import annotations

import numpy as np
import pytest
from shapely.geometry import LineString, Point, box

from buildgen.part import Kit, Part, Plate, Stick, Title
from buildgen.sheets.marks import CLEAR_MM, strokes_of
from buildgen.sheets.seats import with_seats
from buildgen.solid import Box, Pose
from tests.conftest import shipped_kit


def kit_of(*parts: Part) -> Kit:
    return Kit(Title("t", "t", "A", "0" * 64), parts)


def plate(id: str, outline, pose: Pose, thickness: float = 3.0) -> Part:  # type: ignore[no-untyped-def]
    return Part(id, id, "balsa", Plate(outline, thickness), pose, "s", "k", 160.0)


BASE = plate("BASE", box(0, 0, 200, 80), Pose())


def wall(id: str, x: float, z: float) -> Part:
    """A wall 3 mm thick across the base, from x to x + 3, its foot at z."""
    upright = Pose.at((x, 0, z), (0, 1, 0), (0, 0, 1))
    return plate(id, box(10, 0, 70, 40), upright)


def test_a_wall_on_the_upper_face_is_drawn_with_its_name() -> None:
    marks = with_seats(kit_of(BASE, wall("W1", 50.0, 3.0)))["BASE"].form.marks  # type: ignore[union-attr]
    points = np.array([p for m in marks for p in m.line])
    assert points.min(axis=0) == pytest.approx((50.0, 10.0), abs=0.01)
    assert points.max(axis=0) == pytest.approx((53.0, 70.0), abs=0.01)
    (name,) = [m for m in marks if m.text]
    assert name.text == "W1"
    assert not box(50, 10, 53, 70).buffer(1).contains(Point(name.at))
    assert box(40, 10, 63, 70).contains(Point(name.at))


@pytest.mark.parametrize("z", [-40.0, 3.5])
def test_what_hangs_below_or_stands_clear_is_not_drawn(z: float) -> None:
    kit = kit_of(BASE, wall("W1", 50.0, z))
    assert with_seats(kit)["BASE"].form.marks == ()  # type: ignore[union-attr]


def test_a_plate_glued_on_flat_is_no_seat() -> None:
    lid = plate("LID", box(0, 0, 200, 80), Pose(origin=np.array([0.0, 0.0, 3.0])))
    assert with_seats(kit_of(BASE, lid))["BASE"].form.marks == ()  # type: ignore[union-attr]


def test_a_spar_through_a_hole_gets_its_centre_line() -> None:
    rib = plate("R1", box(0, 0, 100, 40).difference(box(30, 15, 36, 21)), Pose())
    spar = Part("S1", "spar", "balsa", Stick(Box((30, 15, -50), (36, 21, 50)), 100, "6 x 6"),
                Pose(), "s", "k", 160.0)
    lines = [m.line for m in with_seats(kit_of(rib, spar))["R1"].form.marks]  # type: ignore[union-attr]
    assert len(lines) == 2
    assert all(x == pytest.approx(33.0) for line in lines for x, _ in line)
    heights = sorted(y for line in lines for _, y in line)
    assert heights == pytest.approx([7, 15 - CLEAR_MM, 21 + CLEAR_MM, 29], abs=0.02)


@pytest.mark.parametrize("name", ["sedge", "marram"])
def test_shipped_kits_carry_clear_marks(name: str) -> None:
    kit = shipped_kit(name)
    plates = with_seats(kit)
    names = {m.text for m in plates["FSR"].form.marks if m.text}  # type: ignore[union-attr]
    assert {"F1", "F2", "F3"} <= names, "formers on the fuselage's side"
    for part in plates.values():
        assert isinstance(part.form, Plate)
        strokes, _ = strokes_of(part, 5.0)
        clear = part.form.shape2d.buffer(-CLEAR_MM + 0.02)
        assert all(clear.contains(LineString(s)) for s in strokes), part.id
        assert part.mass_g == kit.by_id[part.id].mass_g


@pytest.mark.parametrize("name", ["marram", "samphire"])
def test_left_ribs_carry_the_spar_lines_of_right_ones(name: str) -> None:
    """What stands on one face only, as a servo's rails, may add to either, but takes none."""
    plates = with_seats(shipped_kit(name))
    right = [i for i in plates if i.startswith("R") and i.endswith("R")]
    assert sum(len(upright(plates[id])) for id in right) > len(right)
    for id in right:
        one, two = upright(plates[id]), upright(plates[id[:-1] + "L"])
        assert one <= two or two <= one, id


def upright(rib: Part) -> set[float]:
    """Where along a rib upright lines stand, mm."""
    assert isinstance(rib.form, Plate)
    return {round(m.line[0][0], 2) for m in rib.form.marks
            if len(m.line) == 2 and abs(m.line[0][0] - m.line[1][0]) < 1e-6}
