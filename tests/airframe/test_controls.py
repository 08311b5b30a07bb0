"""Ailerons, flaps and elevons: where they lie, what they are made of, that they fit."""

from __future__ import annotations

from functools import cache
from pathlib import Path
from tempfile import TemporaryDirectory

import numpy as np
import pytest

import buildgen.design
from buildgen import Build, build, load
from buildgen.airframe.moving import control_places
from buildgen.part import Plate
from buildgen.problems import DesignError
from buildgen.solid import Pose, mesh

SHIPPED = Path(buildgen.design.__file__).parent / "shipped"
WING = """
name = "plover"
[wing]
section = "clarky"
rib_spacing_mm = 70
[[wing.panel]]
span_mm = 420
root_chord_mm = 220
tip_chord_mm = 170
sweep_mm = 30
dihedral_deg = 3
twist_deg = -1.5
[[wing.spar]]
outer_mm = 8
inner_mm = 6
[[wing.control]]
{control}
"""
BUILT_UP = "from_mm = 130\nchord = 0.24"
KINDS = {
    "built-up": BUILT_UP,
    "strip": 'kind = "strip"\nfrom_mm = 130\nto_mm = 380\nwidth_mm = 38\nhinge = "top"',
    "block": 'kind = "block"\nfrom_mm = 130\nhinges = "tape"\ndown_deg = 25',
    "torque rod": BUILT_UP + '\ndrive = "torque-rod"',
    "torque rod, strip": 'kind = "strip"\nfrom_mm = 130\nwidth_mm = 32\ndrive = "torque-rod"',
    "under capstrips": BUILT_UP + """
[wing.leading_edge]
kind = "strip"
[wing.sheeting]
capstrip_mm = 8""",
    "from elsewhere": 'kind = "block"\nfrom_mm = 130\nhorn_side = "up"\ndrive = "none"',
}


@cache
def wing(control: str) -> Build:
    with TemporaryDirectory() as folder:
        path = Path(folder) / "plover.toml"
        path.write_text(WING.format(control=control))
        return build(load(path))


@pytest.fixture(params=KINDS)
def made(request: pytest.FixtureRequest) -> Build:
    return wing(KINDS[request.param])


def test_fits(made):
    assert [f.says for f in made.desk.fit.findings] == []


def test_turned_to_full_throw_it_clears_the_false_spar(made):
    """The nose's bevel lets the surface turn: nothing shared with the false spar or the ribs."""
    place = made.frame and control_places(made.frame.shop, made.frame.wing)[0]
    nose = next(p for p in made.parts if p.id in ("AN1R", "AS1R"))
    spar = made.by_id["AF1R"]
    frame = place.line.frame(0.0)
    for throw, sign in zip(place.throw_deg, (1, -1), strict=True):
        c, s = np.cos(np.radians(throw)), sign * np.sin(np.radians(throw))
        turn = Pose(np.array([[c, -s, 0], [s, c, 0], [0, 0, 1.0]]))
        whole = frame.inverse.then(turn).then(frame)
        moved = mesh(nose.shape).transform(np.column_stack([whole.rotation, whole.origin]))
        assert (moved ^ mesh(spar.shape)).volume() < 0.5


def test_ribs_ahead_stop_at_the_false_spar():
    """A rib within the surface is shorter than the one inboard of it by the surface's share."""
    kit = wing(BUILT_UP)
    place = control_places(kit.frame.shop, kit.frame.wing)[0]
    ribs = [p for p in kit.parts if p.id[0] == "R" and p.id.endswith("R")]
    within = [p for p in ribs if 132 < p.pose.origin[1] < 410]
    assert len(within) >= 3
    for rib in within:
        assert isinstance(rib.form, Plate)
        s = (rib.pose.origin - place.panel.root.nose) @ place.panel.along
        back = rib.form.outline.bounds[2] / place.panel.chord(s)
        assert 0.70 < back < 0.76


def test_tail_ribs_stand_behind_the_wing_ribs():
    kit = wing(BUILT_UP)
    spots = sorted(p.pose.origin[1] for p in kit.parts if p.id[0] == "R" and p.id.endswith("R"))
    tails = sorted(p.pose.origin[1] for p in kit.parts
                   if p.id.startswith("AR1") and p.id.endswith("R"))[1:-1]
    assert tails and all(min(abs(t - s) for s in spots) < 0.6 for t in tails)


def test_both_sides_are_mirror_images(made):
    for part in made.parts:
        if part.id.startswith("A") and part.id.endswith("R") and part.solid is not None:
            other = made.by_id[part.id[:-1] + "L"]
            assert other.centroid_mm == pytest.approx(part.centroid_mm * (1, -1, 1), abs=1e-6)


@pytest.mark.parametrize(("control", "key"), [
    ("from_mm = 1", "wing.control[1].from_mm"),
    ("from_mm = 130\nto_mm = 418\nchord = 0.24\n[[wing.control]]\nfrom_mm = 200",
     "wing.control[2].from_mm"),
    ("from_mm = 130\nchord = 0.1", "wing.control[1].chord"),
    ("from_mm = 130\nservo = { at_mm = 100 }", "wing.control[1].servo.at_mm"),
    ('from_mm = 130\nwidth_mm = 20\nkind = "strip"\ndrive = "torque-rod"',
     "wing.control[1].drive"),
    ('from_mm = 130\nhorn_side = "up"', "wing.control[1].horn_side"),
    ("from_mm = 130\nservo = { kind = \"mikro\" }", "wing.control[1].servo.kind"),
])
def test_faults_name_their_key(control, key):
    with pytest.raises(DesignError) as caught:
        wing(control)
    assert key in [p.path for p in caught.value.problems]


# ---------------------------------------------------------------- servos


def test_a_torque_rod_turns_about_the_hinge_line():
    """Its long run lies on the hinge line, its arm and its leg stand square to it."""
    kit = wing(KINDS["torque rod"])
    place = control_places(kit.frame.shop, kit.frame.wing)[0]
    rod, line = kit.by_id["AY1R"], place.line
    horn = next(h for h in kit.frame.horns if h.id == "AY1R")
    assert abs((horn.pivot_mm - horn.hinge_mm) @ line.axis) < 1e-9
    away = np.cross(horn.hinge_mm - line.start, line.axis)
    assert np.linalg.norm(away) < 1e-9
    assert [angle for _, angle in rod.form.bends] == [90.0, 90.0]
    run = np.linalg.norm(place.torque_leg[0] - horn.hinge_mm)
    assert rod.form.length_mm == pytest.approx(22 + run + place.given.nose_mm - 1, abs=1e-6)


def test_servo_arm_and_horn_lie_in_one_plane():
    kit = wing(BUILT_UP)
    place = control_places(kit.frame.shop, kit.frame.wing)[0]
    horn = place.horn
    assert horn is not None and horn.driven_by in kit.by_id
    arm, s = kit.by_id["AK1R"], place.arm_s_mm
    root, along = place.panel.root.nose, place.panel.along
    assert (horn.pivot_mm - root) @ along == pytest.approx(s, abs=1.0)
    assert (arm.centroid_mm - root) @ along == pytest.approx(s, abs=1.0)


def test_pushrod_is_as_long_as_its_pins_are_apart():
    """By hand: the distance of the two pins, and 8 mm of wire at either end for the bends."""
    kit = wing(BUILT_UP)
    rod, arm = kit.by_id["AW1R"], kit.by_id["AK1R"]
    horn = control_places(kit.frame.shop, kit.frame.wing)[0].horn
    lowest = arm.centroid_mm
    apart = np.linalg.norm(horn.pivot_mm - lowest)
    assert rod.form.length_mm == pytest.approx(apart + 16.0, rel=0.15)
    assert f"{rod.form.length_mm - 16:.1f} mm" in rod.name


def test_leads_reach_every_servo_through_holes_that_pass_their_plug():
    """Every rib from the root to the servo has a hole of 8.6 mm or more (plug 8 x 3 mm)."""
    kit = wing(BUILT_UP)
    place = control_places(kit.frame.shop, kit.frame.wing)[0]
    inside = [p for p in kit.parts if p.id[0] == "R" and p.id.endswith("R")
              and p.pose.origin[1] < place.servo_bay_mm[0] + 1]
    assert len(inside) >= 4
    assert all(max(r for _, _, r in p.form.circles) * 2 >= 8.6 for p in inside)


def test_a_servo_too_thick_for_the_wing_is_said():
    with pytest.raises(DesignError, match="stands .* mm out of the wing"):
        wing('from_mm = 130\nservo = { kind = "standard" }')


def test_a_rib_in_a_rib_is_said(tmp_path):
    """The servo's bay reaches into that of a motor."""
    text = (SHIPPED / "marram.toml").read_text()
    assert "at_mm = 568" in text
    path = tmp_path / "marram.toml"
    path.write_text(text.replace("at_mm = 568", "at_mm = 560"))
    with pytest.raises(DesignError, match="Move it by"):
        build(load(path))
