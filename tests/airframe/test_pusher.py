"""Motors that push: mounts on the trailing edge, of straight, swept and raised panels."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest

from buildgen import Build, DesignError, build, load
from buildgen.checks.fit import fit_of
from buildgen.part import Plate
from buildgen.solid import mesh
from tests.airframe.test_variants import LEAST, PLAIN

PUSHED = PLAIN["power"] + '\nmount = { edge = "trailing" }'
SWEPT = "tip_chord_mm = 150\nsweep_mm = 60\ndihedral_deg = 5\ntwist_deg = -2"


def kit_of(folder: Path, **over: str) -> Build:
    path = folder / "tern.toml"
    path.write_text(LEAST.format(**{**PLAIN, "power": PUSHED, **over}))
    return build(load(path))


@pytest.fixture(scope="module")
def swept(tmp_path_factory: pytest.TempPathFactory) -> Build:
    return kit_of(tmp_path_factory.mktemp("swept"), panel=SWEPT)


def test_it_fits(swept: Build) -> None:
    assert [f.says for f in fit_of(swept).findings] == []


def test_the_disc_lies_behind_the_wing_and_pulls_forward(swept: Build) -> None:
    right, left = swept.frame.drive.thrusts
    edge = swept.frame.wing.panels[0].point(170.0, 1.0)
    assert right.disc[0] > right.seat[0] > edge[0] + 20
    assert right.pull[0] < -0.99
    assert left.disc == pytest.approx(right.disc * (1, -1, 1))


def test_the_leading_edge_runs_on_and_the_trailing_edge_stops(swept: Build) -> None:
    assert {"LE1R", "TE1aR", "TE1bR"} <= swept.by_id.keys()
    assert "LE1bR" not in swept.by_id


def test_tongues_are_as_deep_as_their_screw_asks(swept: Build) -> None:
    rib = swept.by_id[next(j.outer for j in swept.joints if j.kind == "mount on tongue")]
    assert isinstance(rib.form, Plate)
    x = rib.form.outline.bounds[2]
    ring = np.asarray(rib.form.outline.exterior.coords)
    tongue = ring[ring[:, 0] > x - 12]
    assert np.ptp(tongue[:, 1]) == pytest.approx(14.0, abs=0.01)


def test_left_mirrors_right(swept: Build) -> None:
    one, two = (mesh(swept.by_id[i].shape) for i in ("M1R", "M1L"))  # type: ignore[arg-type]
    assert (one.mirror((0, 1, 0)) ^ two).volume() == pytest.approx(one.volume(), rel=1e-6)


def test_no_mount_sits_where_the_edge_moves(tmp_path: Path) -> None:
    control = "[[wing.control]]\nfrom_mm = 120\nto_mm = 380\n"
    with pytest.raises(DesignError, match="moves"):
        kit_of(tmp_path, spar=PLAIN["spar"] + "\n" + control)


def test_not_on_a_sheeted_trailing_edge(tmp_path: Path) -> None:
    with pytest.raises(DesignError, match="sheet"):
        kit_of(tmp_path, wing='[wing.trailing_edge]\nkind = "sheet"\n')
