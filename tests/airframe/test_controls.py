"""Ailerons, flaps and elevons: where they lie, what they are made of, that they fit."""

from __future__ import annotations

from functools import cache
from pathlib import Path
from tempfile import TemporaryDirectory

import numpy as np
import pytest

from buildgen import Build, build, load
from buildgen.airframe.moving import control_places
from buildgen.part import Plate
from buildgen.problems import DesignError
from buildgen.solid import Pose, mesh

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
    "block": 'kind = "block"\nfrom_mm = 130\nhinges = "tape"\nhorn_side = "up"\ndown_deg = 25',
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
    ("from_mm = 130\nservo = { kind = \"mikro\" }", "wing.control[1].servo.kind"),
])
def test_faults_name_their_key(control, key):
    with pytest.raises(DesignError) as caught:
        wing(control)
    assert key in [p.path for p in caught.value.problems]
