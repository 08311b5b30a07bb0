"""Definitions of every kind build, balance and share no space."""

from __future__ import annotations

from itertools import combinations
from pathlib import Path

import numpy as np
import pytest

from buildgen import Build, build, load

LEAST = """
name = "tern"
[wing]
section = "naca2412"
{wing}
[[wing.panel]]
span_mm = 400
root_chord_mm = 190
{panel}
[[wing.spar]]
{spar}
[power]
{power}
propeller = {{ diameter_mm = 127, pitch_mm = 76 }}
[fuselage]
{body}
station = [
  {{ x_mm = -140, width_mm = 46, top_mm = {top}, bottom_mm = {low} }},
  {{ x_mm = -10, width_mm = 56, top_mm = {top}, bottom_mm = {low} }},
  {{ x_mm = 200, width_mm = 56, top_mm = {top}, bottom_mm = {low} }},
  {{ x_mm = 560, width_mm = 20, top_mm = {top}, bottom_mm = {rise} }},
]
[tail]
arm_mm = 430
{tail}
[[equipment]]
name = "battery"
mass_g = 90
size_mm = [60, 30, 18]
x_mm = -60
z_mm = {mid}
range_mm = [-100, 60]
"""
PLAIN = {
    "wing": "incidence_deg = 1.5", "panel": "tip_chord_mm = 150\nsweep_mm = 12",
    "spar": "outer_mm = 8\ninner_mm = 6",
    "power": 'motors = 2\nfirst_mm = 170\nmotor = { mass_g = 24, pattern = "16x16" }',
    "body": "", "top": "14", "low": "-44", "rise": "-6", "mid": "-24",
    "tail": "thickness_mm = 3\ntailplane = { span_mm = 380, root_chord_mm = 105 }\n"
            "fin = { span_mm = 130, root_chord_mm = 105, tip_chord_mm = 80 }",
}
VARIANTS = {
    "plain": {},
    "rod": {"spar": 'kind = "rod"\nmaterial = "carbon-rod"\nouter_mm = 5'},
    "strips top and bottom": {
        "spar": 'kind = "strip"\nmaterial = "spruce"\nwidth_mm = 6\nheight_mm = 3\nplace = "top"\n'
                '[[wing.spar]]\nkind = "strip"\nmaterial = "spruce"\nwidth_mm = 6\nheight_mm = 3\n'
                'place = "bottom"'},
    "a spar that ends": {"spar": "outer_mm = 8\ninner_mm = 6\nto_mm = 260"},
    "round nose": {"wing": '[wing.leading_edge]\nkind = "round"\nmaterial = "dowel"\nsize_mm = 6'},
    "no sticks": {
        "wing": '[wing.leading_edge]\nkind = "none"\n[wing.trailing_edge]\nkind = "none"'},
    "ribs by count": {"panel": "tip_chord_mm = 150\nrib_count = 6"},
    "larger edges": {"wing": '[wing.ribs]\nedges = "larger"'},
    "measured in inches": {"panel": 'tip_chord_in = "6 1/8"\nsweep_in = "1/2"'},
    "dihedral from the root": {"panel": "tip_chord_mm = 150\ndihedral_deg = 6"},
    "swept, twisted, blended": {
        "panel": 'tip_chord_mm = 120\nsweep_mm = 90\ntwist_deg = -3\nsection = "sd8020"'},
    "polyhedral": {"panel": "[[wing.panel]]\nspan_mm = 200\ntip_chord_mm = 120\ndihedral_deg = 7\n"
                            "sweep_mm = 30"},
    "inverted gull": {"panel": "[[wing.panel]]\nspan_mm = 200\ndihedral_deg = -5"},
    "down and side thrust": {
        "power": 'motors = 2\nfirst_mm = 170\ndown_deg = 3\nside_deg = 2\n'
                 'motor = { mass_g = 24, pattern = "16x19" }'},
    "own bolt circles": {
        "power": "motors = 2\nstations_mm = [180]\nrotation = \"alike\"\n"
                 "motor = { mass_g = 24, pattern_mm = [12, 16], screws = 4, screw = \"M2\" }"},
    "four motors": {
        "power": 'motors = 4\nfirst_mm = 110\nspacing_mm = 150\n'
                 'motor = { mass_g = 15, diameter_mm = 23, pattern = "9x9", screw = "M2" }'},
    "nose motor": {"power": 'place = "nose"\nmotors = 1\ndown_deg = 2\nside_deg = 2\n'
                            'motor = { mass_g = 40, pattern = "16x19" }'},
    "shoulder wing": {"top": "22", "low": "-36", "mid": "-20"},
    "mid wing": {"top": "42", "low": "-30", "mid": "-20"},
    "tail by volume": {
        "tail": "tailplane = { volume = 0.45, aspect = 4.5 }\nfin = { volume = 0.03 }"},
    "ply body": {"body": 'side_material = "lite-ply"\nside_thickness_mm = 2'},
}


def made(name: str, folder: Path) -> Build:
    path = folder / "tern.toml"
    path.write_text(LEAST.format(**{**PLAIN, **VARIANTS[name]}))
    return build(load(path))


@pytest.mark.parametrize("name", VARIANTS)
def test_it_builds_and_shares_no_space(name: str, tmp_path: Path) -> None:
    kit = made(name, tmp_path)
    assert kit.balance.mass_g > 200
    low, high = kit.balance.target_cg_x_mm
    assert low < high
    solid = [p for p in kit.parts
             if p.solid is not None and not p.id.startswith(("PROP", "E", "MOT"))]
    boxes = np.array([p.solid.bounding_box() for p in solid])  # type: ignore[union-attr]
    clashes = []
    for i, k in combinations(range(len(solid)), 2):
        if np.all(boxes[i, :3] < boxes[k, 3:]) and np.all(boxes[k, :3] < boxes[i, 3:]):
            shared = solid[i].solid ^ solid[k].solid  # type: ignore[operator]
            if shared.volume() > 0.5:
                clashes.append((solid[i].id, solid[k].id, round(shared.volume(), 2)))
    assert clashes == []


def test_a_useful_aircraft_fits_in_forty_lines() -> None:
    text = LEAST.format(**PLAIN)
    assert len([row for row in text.splitlines() if row.strip()]) <= 45
