"""The worked example of DEVELOPERS.md, run as it stands there."""

from __future__ import annotations

import re
import sys
from collections.abc import Iterator
from pathlib import Path
from types import ModuleType

import pytest

from buildgen import Build, build, load
from buildgen.airframe import members
from buildgen.design.schema import Definition, Wing
from buildgen.part import Plate

HEADING = "### A worked example"
EXAMPLE = (Path(__file__).parents[2] / "DEVELOPERS.md").read_text().split(HEADING)[1]
CODE, SECTION = (
    re.search(rf"```{kind}\n(.*?)```", EXAMPLE, re.S)[1] for kind in ("python", "toml")
)


@pytest.fixture(scope="module")
def lath(tmp_path_factory: pytest.TempPathFactory) -> Iterator[Build]:
    """The kit of the example's definition, with the module in place for the time of the test."""
    module = ModuleType("trip_of_the_example")
    sys.modules[module.__name__] = module
    exec(compile(CODE, "DEVELOPERS.md", "exec"), module.__dict__)
    line = re.search(r"`Wing` is `trip: (.*?) = None`", EXAMPLE)[1]

    class WithTrip(Wing):
        trip: eval(line, module.__dict__) = None  # type: ignore[valid-type]

    class Whole(Definition):
        wing: WithTrip

    path = tmp_path_factory.mktemp("example") / "lath.toml"
    path.write_text(SECTION)
    with pytest.MonkeyPatch.context() as patch:
        assert "`trip.make,`" in EXAMPLE
        patch.setattr(members, "MAKERS", (*members.MAKERS, module.make))
        patch.setattr(sys.modules["buildgen.design.load"], "Definition", Whole)
        yield build(load(path))
    del sys.modules[module.__name__]


def test_it_makes_its_parts_on_both_sides(lath):
    right, left = lath.by_id["TRR"], lath.by_id["TRL"]
    assert right.material == "spruce" and right.mass_g > 0
    assert left.centroid_mm == pytest.approx(right.centroid_mm * (1, -1, 1), abs=1e-6)


def test_every_rib_is_notched_for_it_and_the_kit_fits(lath):
    joints = [j for j in lath.joints if j.inner in ("TRR", "TRL")]
    ribs = [p for p in lath.parts if isinstance(p.form, Plate) and p.id[0] == "R"]
    assert len(joints) == len(ribs) >= 10
    assert [f.says for f in lath.desk.fit.findings] == []
