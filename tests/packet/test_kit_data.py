"""kit.json, the lists and the manifest."""

from __future__ import annotations

import csv
import hashlib
import json
from dataclasses import replace
from io import StringIO
from pathlib import Path

import numpy as np
import pytest

from buildgen.packet import Package, kit_json, write_manifest, write_packet
from buildgen.packet.amounts import section_with_inches
from buildgen.packet.bill import bill
from buildgen.packet.write import bom_csv, parts_csv


def test_stable_keys(package: Package) -> None:
    data = kit_json(package)
    assert data["schema"] == "buildgen-kit/1"
    assert data["units"] == {"length": "mm", "mass": "g", "angle": "deg"}
    assert {"name", "source_sha256"} <= data["design"].keys()
    always = {"id", "name", "material", "process", "quantity", "mass_g", "mass_sigma_g",
              "centroid_mm", "density_kg_m3", "step", "from_key"}
    extra = {"cut": {"thickness_mm", "sheet"}, "stick": {"length_mm"}, "print": {"files"}}
    for part in data["parts"]:
        assert always | extra.get(part["process"], set()) <= part.keys()
    assert {"file", "material", "thickness_mm", "width_mm", "height_mm", "kerf_mm",
            "parts_area_mm2", "used_fraction", "cut_length_mm",
            "placements"} <= data["sheets"][0].keys()
    assert {"part", "x_mm", "y_mm", "rotation_deg"} <= data["sheets"][0]["placements"][0].keys()
    assert {"mass_g", "mass_sigma_g", "cg_mm", "cg_sigma_mm", "inertia_g_mm2", "mac_mm",
            "mac_le_x_mm", "neutral_point_x_mm", "static_margin", "target_cg_x_mm", "movable",
            "ballast"} <= data["balance"].keys()
    assert {"id", "title", "verdict", "value", "limit", "unit", "basis"} <= data["checks"][0].keys()


def test_masses_and_balance_are_the_sums_over_the_parts(package: Package) -> None:
    data = json.loads(json.dumps(kit_json(package)))
    mass = np.array([p["mass_g"] for p in data["parts"]])
    centroid = np.array([p["centroid_mm"] for p in data["parts"]])
    assert mass.sum() == pytest.approx(data["balance"]["mass_g"], abs=1e-3)
    assert mass @ centroid / mass.sum() == pytest.approx(data["balance"]["cg_mm"], abs=1e-3)
    assert sum(r["mass_g"] for r in data["balance"]["table"]) == pytest.approx(
        data["balance"]["mass_g"], abs=1e-3)


def test_every_cut_part_names_the_sheet_that_places_it(package: Package) -> None:
    data = kit_json(package)
    placed = {p["part"]: s["file"] for s in data["sheets"] for p in s["placements"]}
    cut = {p["id"]: p["sheet"] for p in data["parts"] if p["process"] == "cut"}
    assert cut == placed


def test_no_minus_zero_anywhere(package: Package) -> None:
    assert "-0.0," not in json.dumps(kit_json(package)) + ","


def test_unknown_neutral_point_is_null(package: Package) -> None:
    balance = replace(package.balance, neutral_point_x_mm=None, static_margin=None)
    data = kit_json(replace(package, balance=balance))
    assert data["balance"]["neutral_point_x_mm"] is None
    assert data["balance"]["static_margin"] is None


def test_bill_counts_every_part_once(package: Package) -> None:
    made_or_bought = [i for line in bill(package) if line.section in ("make", "buy")
                      for i in line.parts]
    allowances = [p.id for p in package.kit.of("allowance")]
    assert sorted(made_or_bought + allowances) == sorted(p.id for p in package.kit.parts)
    weighed = sum(line.mass_g or 0 for line in bill(package) if line.section != "stock")
    weighed += sum(p.mass_g for p in package.kit.of("allowance"))
    assert weighed == pytest.approx(package.balance.mass_g, abs=1e-6)


def test_bill_adds_up_pieces_and_shows_inches(package: Package) -> None:
    lines = {line.item: line for line in bill(package)}
    assert lines["M3 x 10 ISO 4762"].amount == 8
    assert lines["outrunner 28 x 26"].amount == 2
    # 1 in = 25.4 mm exactly (international yard and pound agreement, 1959).
    assert "(0.118 in)" in lines["Sheet, lite-ply 3 mm (0.118 in)"].item
    tube = next(line for line in bill(package) if line.item.startswith("Length, carbon-tube"))
    assert tube.amount == 1
    assert tube.size == "1200 mm (47.2 in)"
    covering = next(line for line in bill(package) if line.unit == "m²")
    mass = sum(p.mass_g for p in package.kit.of("cover"))
    assert covering.amount == pytest.approx(mass / 60.0, abs=1e-3), "60 g/m2 in the example"


def test_lists_agree_with_the_data(package: Package) -> None:
    rows = list(csv.DictReader(StringIO(parts_csv(package))))
    data = kit_json(package)["parts"]
    assert [r["id"] for r in rows] == [p["id"] for p in data]
    for row, part in zip(rows, data, strict=True):
        assert float(row["mass_g"]) == part["mass_g"]
        assert [float(row[k]) for k in ("x_mm", "y_mm", "z_mm")] == part["centroid_mm"]
    bom = list(csv.DictReader(StringIO(bom_csv(package))))
    assert {r["section"] for r in bom} == {"make", "stock", "buy"}


def test_manifest_knows_every_file(
    package: Package, pdf_bytes: bytes, tmp_path: Path
) -> None:
    written = write_packet(package, tmp_path)
    assert (tmp_path / "packet.pdf").read_bytes() == pdf_bytes, "same package, same bytes"
    (tmp_path / "sheets").mkdir()
    (tmp_path / "sheets" / "a.dxf").write_text("0\nEOF\n")
    data = json.loads(write_manifest(package, tmp_path).read_text(encoding="utf-8"))
    assert {p.name for p in written} == {"packet.pdf", "kit.json", "bom.csv", "parts.csv"}
    assert set(data["files"]) == {"packet.pdf", "kit.json", "bom.csv", "parts.csv",
                                  "sheets/a.dxf"}
    for name, sha in data["files"].items():
        assert hashlib.sha256((tmp_path / name).read_bytes()).hexdigest() == sha
    assert data["definition"]["text"] == package.source_text
    assert hashlib.sha256(package.source_text.encode()).hexdigest() == (
        data["design"]["source_sha256"])
    assert {"python", "numpy", "reportlab"} <= data["versions"].keys()


@pytest.mark.parametrize(
    ("section", "said"),
    [("8 x 6 tube", "8 x 6 mm tube (0.315 x 0.236 in)"), ("3 rod", "3 mm rod (0.118 in)"),
     ("5 x 22 tapered", "5 x 22 mm tapered (0.197 x 0.866 in)"), ("6.35 dowel",
     "6.35 mm dowel (0.25 in)"), ("strip", "strip")],
)
def test_sections_are_said_in_both_units(section: str, said: str) -> None:
    assert section_with_inches(section) == said
