"""Tails of every arrangement: areas, mirror images, hinges, and a clean dry fit."""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import replace
from pathlib import Path
from tempfile import TemporaryDirectory

import numpy as np
import pytest
from hypothesis import HealthCheck, Phase, given, settings
from hypothesis import strategies as st
from shapely.geometry import Polygon

from buildgen import Build, build, load
from buildgen.airframe.tail import stations
from buildgen.checks.balance import neutral_point
from buildgen.checks.fit import fit_of
from buildgen.part import Kit, Part, Plate
from buildgen.problems import DesignError
from buildgen.solid import Pose

TEXT = """
name = "dunlin"
[wing]
section = "naca2412"
[[wing.panel]]
span_mm = 420
root_chord_mm = 190
[[wing.spar]]
outer_mm = 8
inner_mm = 6
[fuselage]
station = [
  {{ x_mm = -140, width_mm = 46, top_mm = 14, bottom_mm = -44 }},
  {{ x_mm = 200, width_mm = 56, top_mm = 14, bottom_mm = -44 }},
  {{ x_mm = 700, width_mm = 26, top_mm = 14, bottom_mm = -20 }},
]
[tail]
arm_mm = 450
{tail}
"""
PLANE = "span_mm = 400, root_chord_mm = 110, tip_chord_mm = 90, sweep_mm = 10"
FIN = "fin = { span_mm = 150, root_chord_mm = 120, tip_chord_mm = 95, sweep_mm = 25 }"
TAILS = {
    "conventional": f"tailplane = {{ {PLANE}, lightening = true }}\n{FIN}",
    "t-tail": f'arrangement = "t-tail"\ntailplane = {{ {PLANE}, incidence_deg = -1 }}\n{FIN}',
    "v-tail": f'arrangement = "v-tail"\ntailplane = {{ {PLANE}, incidence_deg = -1 }}',
}


def made(tail: str) -> Build:
    with TemporaryDirectory() as folder:
        path = Path(folder) / "dunlin.toml"
        path.write_text(TEXT.format(tail=tail))
        return build(load(path))


@pytest.fixture(scope="module", params=TAILS)
def dunlin(request: pytest.FixtureRequest) -> Build:
    return made(TAILS[request.param])


def tail_joints(kit: Build) -> set[tuple[str, str, str]]:
    return {(j.kind, j.inner, j.outer) for j in kit.joints if j.inner[0] in "TV"}


def test_every_arrangement_fits(dunlin: Build) -> None:
    fit = fit_of(dunlin)
    assert fit.findings == ()
    joined = tail_joints(dunlin)
    assert any(o.startswith("FT") for _, _, o in joined), "the tail stands on the fuselage"
    solids = {p.id for p in dunlin.parts if p.id[0] in "TV" and p.solid is not None}
    assert solids <= {i for _, a, b in joined for i in (a, b)}, "no part of the tail hangs loose"


def test_hinges_are_marked_on_both_sides_of_their_line(dunlin: Build) -> None:
    tail = dunlin.frame.tail
    assert tail is not None
    wanted = sum(len(stations(line, surface, tail.clear_mm)) for line, surface in tail.hinged)
    lines = [m for p in dunlin.parts if p.id[0] in "TV" and isinstance(p.form, Plate)
             for m in p.form.marks if m.line]
    assert len(lines) == 2 * wanted


def test_horns_hang_on_the_parts_that_move(dunlin: Build) -> None:
    tail = dunlin.frame.tail
    assert tail is not None
    assert {h.part for h in tail.horns} == {
        p.id for p in dunlin.parts if p.id[:2] in ("T2", "V2")}
    for horn in tail.horns:
        assert np.linalg.norm(horn.pivot_mm - horn.hinge_mm) == pytest.approx(horn.radius_mm)


def test_a_v_tail_works_by_its_dihedral() -> None:
    """Level area by the square of the cosine, upright by that of the sine; sums by hand.

    Purser and Campbell, NACA Report 823 (1945), from memory: the projected areas of the two
    halves, turned once more for the part of the angle of attack that each half sees.
    """
    tail = made(TAILS["v-tail"]).frame.tail
    assert tail is not None
    both = 400 * (110 + 90) / 2
    assert tail.level_area_mm2 == pytest.approx(both * math.cos(math.radians(38)) ** 2)
    assert tail.upright_area_mm2 == pytest.approx(both * math.sin(math.radians(38)) ** 2)


def test_a_volume_asked_of_a_v_tail_is_that_of_its_level_area() -> None:
    kit = made('arrangement = "v-tail"\ndihedral_deg = 35\ntailplane = { volume = 0.5 }')
    found = neutral_point(kit.frame)
    assert found.tail_volume == pytest.approx(0.5)
    assert "Report 823" in found.basis


def test_the_arm_is_kept_by_every_arrangement(dunlin: Build) -> None:
    """Quarter of the tailplane's mean chord behind that of the wing (190 mm, unswept)."""
    tail = dunlin.frame.tail
    assert tail is not None
    taper = 90 / 110
    mean = 2 / 3 * 110 * (1 + taper + taper**2) / (1 + taper)
    at = 10 * (1 + 2 * taper) / 3 / (1 + taper)
    root = tail.half if hasattr(tail, "half") else tail.flat
    assert root.origin[0] + at + mean / 4 == pytest.approx(190 / 4 + 450, abs=0.2)


def test_hinges_stand_where_they_are_said_to() -> None:
    kit = made(f"tailplane = {{ {PLANE}, hinge_at_mm = [40, 170] }}\n{FIN}")
    tail = kit.frame.tail
    assert tail is not None
    line, surface = tail.hinged[0]
    ys = [line.frame(s).origin[1] for s in stations(line, surface, tail.clear_mm)]
    assert ys == pytest.approx([-170, -40, 40, 170])


@pytest.mark.parametrize(("tail", "path"), [
    (f'arrangement = "v-tail"\ntailplane = {{ {PLANE} }}\n{FIN}', "tail"),
    (f'arrangement = "t-tail"\ntailplane = {{ {PLANE} }}', "tail"),
    (f'arrangement = "t-tail"\ntailplane = {{ {PLANE} }}\n'
     "fin = { span_mm = 150, root_chord_mm = 120, tip_chord_mm = 70,"
     " sweep_mm = 45, control = 0.5 }",
     "tail.fin.tip_chord_mm"),
    (f'arrangement = "v-tail"\nthickness_mm = 12\ndihedral_deg = 60\ntailplane = {{ {PLANE} }}',
     "tail.arrangement"),
    (f"tailplane = {{ {PLANE}, hinge_at_mm = [40, 300] }}\n{FIN}",
     "tail.tailplane.hinge_at_mm"),
])
def test_faults_are_told_with_their_key(tail: str, path: str) -> None:
    with pytest.raises(DesignError) as caught:
        made(tail)
    assert [p.path for p in caught.value.problems] == [path]


SIZES = st.fixed_dictionaries({
    "arrangement": st.sampled_from(sorted(TAILS)), "span": st.integers(300, 480),
    "root": st.integers(95, 130), "taper": st.sampled_from((0.75, 0.9, 1.0)),
    "sweep": st.integers(0, 25), "control": st.sampled_from((0.25, 0.35)),
    "incidence": st.sampled_from((-2.0, 0.0, 1.5)), "dihedral": st.integers(30, 45),
    "thick": st.sampled_from((3, 4, 5)), "fin": st.integers(120, 180),
})


@settings(max_examples=6, phases=(Phase.generate,),
          suppress_health_check=[HealthCheck.too_slow])
@given(SIZES)
def test_any_tail_fits_and_keeps_its_area(size: dict[str, float]) -> None:
    root, tip = size["root"], size["root"] * size["taper"]
    fin = "" if size["arrangement"] == "v-tail" else (
        f"fin = {{ span_mm = {size['fin']}, root_chord_mm = 125, tip_chord_mm = 95,"
        " sweep_mm = 20 }")
    kit = made(
        f'arrangement = "{size["arrangement"]}"\nthickness_mm = {size["thick"]}\n'
        f"dihedral_deg = {size['dihedral']}\ntailplane = {{ span_mm = {size['span']},"
        f" root_chord_mm = {root}, tip_chord_mm = {tip}, sweep_mm = {size['sweep']},"
        f" control = {size['control']}, incidence_deg = {size['incidence']} }}\n{fin}")
    assert fit_of(kit).findings == ()
    tail = kit.frame.tail
    assert tail is not None
    area = size["span"] * (root + tip) / 2
    assert 2 * tail.tailplane.area_mm2 == pytest.approx(area)
    drawn = sum(p.form.outline.area for p in kit.parts
                if p.id[:2] in ("T1", "T2") and isinstance(p.form, Plate))
    slot = 0.0 if fin == "" else size["thick"] * 80
    corner = 2 * tail.clear_mm * (root * size["control"] + size["sweep"])
    gap = 0.5 * size["span"]
    assert area - gap - slot - corner - 1 <= drawn <= area - 0.4 * size["span"]
    for one in kit.parts:
        if one.id in ("T1R", "T2R"):
            other = kit.by_id[one.id[:-1] + "L"]
            assert other.centroid_mm == pytest.approx(one.centroid_mm * (1, -1, 1))


# ---------------------------------------------------------------- planted faults


def faults_of(kit: Build, id: str, change: Callable[[Part], Part]) -> set[tuple[str, str, str]]:
    parts = tuple(change(p) if p.id == id else p for p in kit.parts)
    return {(f.fault, *sorted((f.inner, f.outer)))
            for f in fit_of(Kit(kit.title, parts, kit.joints)).findings}


def lifted(part: Part, by: tuple[float, float, float]) -> Part:
    return replace(part, pose=Pose(part.pose.rotation, part.pose.origin + np.array(by)))


def test_a_t_tail_without_its_slot_cannot_be_put_on() -> None:
    kit = made(TAILS["t-tail"])

    def closed(plate: Part) -> Part:
        assert isinstance(plate.form, Plate)
        return replace(plate, form=replace(plate.form,
                                           outline=Polygon(plate.form.outline.exterior)))

    assert ("clash", "T1", "V1") in faults_of(kit, "T1", closed)


def test_a_v_tail_off_its_block_has_no_contact() -> None:
    kit = made(TAILS["v-tail"])
    found = faults_of(kit, "T1R", lambda p: lifted(p, (0.0, 0.0, 1.0)))
    assert ("no contact", "T0", "T1R") in found
    assert all("T1R" in ids for _, *ids in found)


def test_an_elevator_too_near_its_tailplane_is_tight() -> None:
    kit = made(TAILS["conventional"])
    found = faults_of(kit, "T2", lambda p: lifted(p, (-0.3, 0.0, 0.0)))
    assert ("tight", "T1", "T2") in found
