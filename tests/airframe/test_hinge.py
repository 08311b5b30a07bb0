"""Hinge lines: frames, pitch, bevels, horns."""

from __future__ import annotations

import numpy as np
import pytest

from buildgen.airframe.hinge import HingeLine, bevel_mm, horn_at, horn_outline, leaves, slit_marks
from buildgen.solid import Pose

X, Y, Z = np.eye(3)


def line() -> HingeLine:
    """Swept 100 mm aft over 400 mm, rising 20 mm."""
    return HingeLine(np.zeros(3), np.array([100.0, 400.0, 20.0]), X, Z)


def test_frame_stands_on_the_line():
    frame = line().frame(100.0)
    assert abs(frame.rotation[:, 2] @ line().axis) == pytest.approx(1.0)
    assert frame.rotation[:, 0] @ X > 0.9
    assert frame.rotation[:, 1] @ Z > 0.9


def test_hinges_keep_the_pitch_and_stay_off_the_ends():
    found = line().stations(90.0)
    assert max(np.diff(found)) <= 90.0 * 1.05
    assert found[0] >= 20 and found[-1] <= line().length_mm - 20
    assert len(leaves(line(), found, "H", "hinge", "Wing", "wing")) == len(found)


def test_a_bevelled_nose_clears_its_throw():
    """By hand: a face leaning back by the throw turns upright at full throw."""
    above, below = bevel_mm(6.0, 4.0, (20.0, 30.0))
    for height, back, turn in ((6.0, above, 20.0), (-4.0, below, -30.0)):
        angle = np.radians(turn)
        x = back * np.cos(angle) - height * np.sin(angle)
        assert x == pytest.approx(0.0, abs=1e-9)
    assert bevel_mm(0.0, 8.0, (25.0, 20.0))[0] == 0.0


@pytest.mark.parametrize("side", ["up", "down"])
def test_horn_turns_the_way_it_says(side):
    """A right-handed turn about the axis moves the trailing edge away from the horn's side."""
    horn = horn_at(line(), 200.0, 15.0, side, (20.0, 15.0), "A", "P", "aileron", "wing")
    aft = line().frame(200.0).rotation[:, 0]
    assert np.cross(horn.axis, aft) @ horn.side < 0
    assert np.linalg.norm(horn.pivot_mm - horn.hinge_mm) == pytest.approx(15.0)
    other = horn.mirrored("B", "Q", "aileron, left")
    assert np.cross(other.axis, aft * (1, -1, 1)) @ other.side < 0


def test_ply_horn_is_one_piece_with_its_hole_over_the_hinge():
    outline, circles = horn_outline(15.0, 5.0, 4.0, 6.0)
    assert outline.is_valid and outline.geom_type == "Polygon"
    assert circles[0][:2] == (0.0, 15.0)
    assert outline.bounds[1] == pytest.approx(-2.0)


def test_slits_are_marked_on_both_sides_of_the_line():
    marks = slit_marks(HingeLine(10 * X, 10 * X + 200 * Y, X, Z), (50.0,), Pose(), 3.0)
    xs = sorted(x for m in marks for x, _ in m.line)
    assert xs == pytest.approx([1.0, 8.4, 11.6, 19.0])


def test_every_horn_names_a_part_of_the_kit(kit):
    for horn in kit.frame.horns:
        assert horn.part in kit.by_id and horn.id in kit.by_id
