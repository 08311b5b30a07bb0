"""A packet on disk: complete, repeatable, swapped in whole."""

from __future__ import annotations

import hashlib
import json
import os
import subprocess
import sys
from dataclasses import replace
from pathlib import Path

import ezdxf
import numpy as np
import pytest
from shapely.geometry import Polygon

from buildgen import Build, build, load
from buildgen.build import swapped_in
from buildgen.design.load import SHIPPED
from tests.conftest import shipped_kit


def quick(name: str) -> Build:
    """A shipped design with the quick nesting effort: the layout is not what is tested here."""
    made = shipped_kit(name)
    assert made.design is not None
    d = made.design.definition
    quicker = d.model_copy(update={"laser": d.laser.model_copy(update={"effort": "quick"})})
    return replace(made, design=replace(made.design, definition=quicker))


@pytest.fixture(scope="module", params=["sedge", "marram", "samphire"])
def packet(request: pytest.FixtureRequest, tmp_path_factory: pytest.TempPathFactory) -> Path:
    return quick(request.param).write(tmp_path_factory.mktemp("out"))


def kit_of(folder: Path) -> dict:  # type: ignore[type-arg]
    return json.loads((folder / "kit.json").read_text())


def test_every_promised_file_is_there(packet: Path) -> None:
    names = {p.name for p in packet.iterdir()}
    assert {"packet.pdf", "kit.json", "bom.csv", "parts.csv", "sticks.csv", "sheets", "prints",
            "plans", "model", "manifest.json"} <= names
    assert {"plans-A4.pdf", "plans-roll.pdf"} == {p.name for p in (packet / "plans").iterdir()}
    assert (packet / "model" / "airframe.step").stat().st_size > 10_000
    kit = kit_of(packet)
    for sheet in kit["sheets"]:
        assert (packet / "sheets" / sheet["file"]).is_file()
        assert (packet / "sheets" / sheet["file"].replace(".dxf", ".svg")).is_file()
    for part in kit["parts"]:
        for name in part.get("files", ()):
            assert (packet / "prints" / name).is_file()
    manifest = json.loads((packet / "manifest.json").read_text())
    for name, digest in manifest["files"].items():
        assert hashlib.sha256((packet / name).read_bytes()).hexdigest() == digest
    on_disk = {p.relative_to(packet).as_posix() for p in packet.rglob("*") if p.is_file()}
    assert on_disk == {*manifest["files"], "manifest.json"}


def test_sums_over_parts_are_the_balance(packet: Path) -> None:
    kit = kit_of(packet)
    mass = sum(p["mass_g"] for p in kit["parts"])
    assert mass == pytest.approx(kit["balance"]["mass_g"], abs=1e-3)
    for axis in range(3):
        moment = sum(p["mass_g"] * p["centroid_mm"][axis] for p in kit["parts"])
        assert moment / mass == pytest.approx(kit["balance"]["cg_mm"][axis], abs=0.01)


def dxf_areas(path: Path, kerf: float) -> float:
    """Nominal area of all parts on a sheet, from the beam's path alone."""
    total = 0.0
    for entity in ezdxf.readfile(path).modelspace():
        layer = entity.dxf.layer
        if layer not in ("CUT_INSIDE", "CUT_OUTSIDE"):
            continue
        if entity.dxftype() == "CIRCLE":
            total -= np.pi * (entity.dxf.radius + kerf / 2) ** 2
            continue
        ring = Polygon([(x, y) for x, y, *_ in entity.get_points("xy")])
        if layer == "CUT_OUTSIDE":
            total += ring.buffer(-kerf / 2, join_style="mitre").area
        else:
            total -= ring.buffer(kerf / 2, join_style="mitre").area
    return total


def test_masses_recomputed_from_the_dxf_agree(packet: Path) -> None:
    kit = kit_of(packet)
    parts = {p["id"]: p for p in kit["parts"]}
    for sheet in kit["sheets"]:
        area = dxf_areas(packet / "sheets" / sheet["file"], sheet["kerf_mm"])
        placed = [parts[p["part"]] for p in sheet["placements"]]
        mass = area * sheet["thickness_mm"] * placed[0]["density_kg_m3"] * 1e-6
        assert mass == pytest.approx(sum(p["mass_g"] for p in placed), rel=0.005)


def test_every_cut_part_is_placed_once(packet: Path) -> None:
    kit = kit_of(packet)
    placed = [p["part"] for s in kit["sheets"] for p in s["placements"]]
    assert sorted(placed) == sorted(p["id"] for p in kit["parts"] if p["process"] == "cut")


def test_the_model_has_a_node_for_each_part(packet: Path) -> None:
    import trimesh

    scene = trimesh.load(packet / "model" / "airframe.glb")
    ids = {p["id"] for p in kit_of(packet)["parts"]}
    assert ids <= set(scene.graph.nodes)


def test_the_same_definition_gives_the_same_bytes(tmp_path: Path) -> None:
    """In another process, under another hash seed."""
    digests = []
    for seed in ("1", "2"):
        folder = tmp_path / seed
        subprocess.run(
            [sys.executable, "-m", "buildgen", "packet", "sedge", "-o", str(folder)],
            env={**os.environ, "PYTHONHASHSEED": seed}, check=True, capture_output=True,
        )
        digests.append((folder / "sedge" / "manifest.json").read_bytes())
    assert digests[0] == digests[1]


def test_a_failed_run_leaves_the_former_packet(tmp_path: Path) -> None:
    goal = tmp_path / "tern"
    swapped_in(goal, lambda room: (room / "a").write_text("first") and None)
    with pytest.raises(RuntimeError):
        swapped_in(goal, _half_written)
    assert (goal / "a").read_text() == "first"
    assert [p.name for p in tmp_path.iterdir()] == ["tern"]
    swapped_in(goal, lambda room: (room / "b").write_text("second") and None)
    assert [p.name for p in goal.iterdir()] == ["b"]


def _half_written(room: Path) -> None:
    (room / "a").write_text("half")
    raise RuntimeError("interrupted")


def test_inches_and_millimetres_give_the_same_aircraft(tmp_path: Path) -> None:
    text = (SHIPPED / "sedge.toml").read_text()
    path = tmp_path / "sedge.toml"
    path.write_text(text.replace("side_thickness_mm = 2.5", "side_thickness_in = 0.0984251968504")
                    .replace("mass_g = 8\n", "mass_oz = 0.28219169559662045\n"))
    a, b = build(load(path)).balance, shipped_kit("sedge").balance
    assert a.mass_g == pytest.approx(b.mass_g, rel=1e-9)
    assert a.cg_mm == pytest.approx(b.cg_mm, rel=1e-9)


def test_a_measured_thickness_and_density_rule(tmp_path: Path) -> None:
    text = (SHIPPED / "sedge.toml").read_text()
    path = tmp_path / "sedge.toml"
    path.write_text(text + '\n[[stock.sheet]]\nmaterial = "balsa"\nthickness_mm = 2\n'
                    "measured_mm = 2.2\ndensity_kg_m3 = 120\n")
    rib = build(load(path)).by_id["R3R"]
    before = shipped_kit("sedge").by_id["R3R"]
    assert rib.basis == "measured"
    assert rib.form.thickness_mm == 2.2  # type: ignore[union-attr]
    assert rib.mass_g == pytest.approx(before.mass_g * 2.2 / 2 * 120 / 155, rel=0.02)
