"""A second opinion from the written 3D model alone: no code of the checker, no recipes."""

from __future__ import annotations

from pathlib import Path

from buildgen import Build
from buildgen.part import Kit
from buildgen.prints.model import glb
from tests.proof.shared_space import MOVING, overlaps, solids_of


def model_of(kit: Kit, folder: Path) -> Path:
    path = folder / "airframe.glb"
    path.write_bytes(glb(kit))
    return path


def test_no_two_parts_of_the_written_model_share_space(kit: Build, tmp_path: Path) -> None:
    solids = solids_of(model_of(kit, tmp_path))
    closed = {p.id for p in kit.flying if p.solid is not None and not p.id.startswith(MOVING)}
    assert set(solids) == closed, "every made or bought thing with a shape is a closed solid"
    assert len(solids) > 40
    count, found = overlaps(solids)
    assert count > 100
    assert found == []


def test_the_second_opinion_sees_a_part_out_of_place(sedge: Build, tmp_path: Path) -> None:
    solids = solids_of(model_of(sedge, tmp_path))
    solids["SR1at"] = solids["SR1at"].translate((0.0, 0.0, -1.5))
    named = {name: s for name, s in solids.items() if name.startswith(("SR", "R"))}
    _, found = overlaps(named)
    assert {one if two == "SR1at" else two for one, two, _ in found} >= {"R2R", "R5R", "R9R"}
