"""Flying wings and canards: neutral point, tip fins, elevons."""

from __future__ import annotations

import numpy as np
import pytest

from buildgen import Build, build, load
from buildgen.aero.planform import Panel, mean_aerodynamic_chord
from buildgen.airframe.members.tip_fins import tip_fins
from buildgen.checks.tailless import fin_volume, wing_neutral_x_mm
from buildgen.problems import DesignError
from tests.conftest import shipped_kit


def test_a_straight_wing_is_neutral_near_its_quarter_chord():
    """Thin wings of high aspect ratio: 0.25 of the chord, a little less of low (textbook)."""
    assert wing_neutral_x_mm((Panel(1500.0, 200.0, 200.0, 0.0, 0.0),)) == pytest.approx(
        50.0, abs=3.0)


def test_sweep_moves_it_aft_with_the_mean_chord():
    swept = (Panel(640.0, 280.0, 180.0, 190.0, 0.0),)
    quarter = mean_aerodynamic_chord(swept).quarter_x_mm
    assert wing_neutral_x_mm(swept) == pytest.approx(quarter, abs=0.03 * 234)


def test_thrift_flies():
    """Balanced ahead of its neutral point, every check passes, nothing shares space."""
    kit = shipped_kit("thrift")
    assert [c.id for c in kit.checks if c.verdict != "pass"] == []
    assert 0.05 < kit.balance.static_margin < 0.15


def test_fin_volume_by_hand():
    """Both fins by their arm, over the wing's area and span: V = 2 S l / (S_w b)."""
    frame = shipped_kit("thrift").frame
    fins = tip_fins(frame.shop, frame.wing)
    quarter = mean_aerodynamic_chord(frame.wing.plan).quarter_x_mm
    by_hand = 2 * fins.area_mm2 * (fins.middle_x_mm - quarter) / (2 * 640 * 230 * 1280)
    assert fin_volume(frame) == pytest.approx(by_hand, rel=1e-6)


def test_both_elevons_have_a_horn_and_turn_alike():
    right, left = (h for h in shipped_kit("thrift").frame.horns if "elevon" in h.surface)
    assert left.pivot_mm == pytest.approx(right.pivot_mm * (1, -1, 1))
    for horn in (right, left):
        assert np.cross(horn.axis, (1.0, 0.0, 0.0)) @ horn.side < 0


# ---------------------------------------------------------------- canards

CANARD = """
name = "avocet"
[wing]
section = "clarky"
rib_spacing_mm = 65
[[wing.panel]]
span_mm = 520
root_chord_mm = 210
tip_chord_mm = 150
sweep_mm = 90
[[wing.spar]]
outer_mm = 8
inner_mm = 6
to_mm = 516
[[wing.control]]
from_mm = 250
chord = 0.25
servo = { kind = "sub-micro", at_chord = 0.48 }
[wing.tip_fin]
height_mm = 150
aft_mm = 30
[power]
motors = 2
first_mm = 180
motor = { mass_g = 25, diameter_mm = 27.5, length_mm = 18, pattern = "16x16" }
propeller = { diameter_in = 6, pitch_in = 4, mass_g = 4 }
[fuselage]
station = [
  { x_mm = -420, width_mm = 44, top_mm = 16, bottom_mm = -24 },
  { x_mm = -200, width_mm = 60, top_mm = 16, bottom_mm = -44 },
  { x_mm = -20, width_mm = 60, top_mm = 16, bottom_mm = -44 },
  { x_mm = 260, width_mm = 50, top_mm = 16, bottom_mm = -30 },
]
[tail]
arm_mm = -400
thickness_mm = 4
tailplane = { span_mm = 380, root_chord_mm = 90, control = 0.35 }
[[equipment]]
name = "battery"
kind = "battery"
mass_g = 150
size_mm = [75, 34, 24]
x_mm = -150
z_mm = -24
range_mm = [-150, -70]
"""


@pytest.fixture(scope="module")
def avocet(tmp_path_factory) -> Build:
    path = tmp_path_factory.mktemp("canard") / "avocet.toml"
    path.write_text(CANARD)
    return build(load(path))


def test_a_canard_balances_and_fits(avocet):
    found = {c.id: c.verdict for c in avocet.checks}
    assert "fail" not in found.values()
    assert {found[id] for id in ("balance", "static-margin", "fin-volume", "dry-fit",
                                 "joint-fit", "way-in")} == {"pass"}
    assert avocet.by_id["T1"].centroid_mm[0] < -300


def test_its_foreplane_moves_the_neutral_point_forward(avocet):
    """By hand, no wash: slopes 2 pi A / (A + 2) at the quarter chords; the wash takes some back."""
    frame = avocet.frame
    fore, plan = frame.tail, frame.wing.plan
    alone, both = wing_neutral_x_mm(plan), avocet.balance.neutral_point_x_mm
    wing_area, fore_area = 2 * 520 * 180, 380 * 90
    lift = wing_area * aspect_slope(1040**2 / wing_area)
    fore_lift = fore_area * aspect_slope(380**2 / fore_area)
    by_hand = alone + fore.given.arm_mm * fore_lift / (fore_lift + lift)
    assert by_hand - 15 < both < alone - 30


def aspect_slope(aspect: float) -> float:
    return 2 * np.pi * aspect / (aspect + 2)


@pytest.mark.parametrize("tail", [
    "arm_mm = -400\nfin = { span_mm = 100, root_chord_mm = 80 }", "arm_mm = 400", "arm_mm = 0",
])
def test_a_fin_stands_behind_the_wing(tmp_path, tail):
    path = tmp_path / "avocet.toml"
    path.write_text(CANARD.replace("arm_mm = -400", tail))
    with pytest.raises(DesignError) as caught:
        load(path)
    assert any(p.path.startswith("tail") for p in caught.value.problems)
