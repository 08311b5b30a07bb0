"""Writes the packet: the PDF, the lists, the data, and last the manifest of all files."""

from __future__ import annotations

import csv
import hashlib
import json
import platform
from collections.abc import Iterable, Sequence
from importlib.metadata import PackageNotFoundError, version
from io import StringIO
from pathlib import Path

from reportlab.platypus import Flowable

from buildgen.packet.balance_pages import balance_pages
from buildgen.packet.bill import bill
from buildgen.packet.cautions import caution_pages
from buildgen.packet.fit_pages import fit_pages
from buildgen.packet.flight_pages import flight_pages
from buildgen.packet.front import front
from buildgen.packet.kit_json import Json, kit_json, part_json
from buildgen.packet.package import Package
from buildgen.packet.page import pdf
from buildgen.packet.print_pages import print_pages
from buildgen.packet.sheet_pages import sheet_pages
from buildgen.packet.step_pages import step_pages
from buildgen.packet.stick_pages import stick_pages
from buildgen.packet.tables import bill_pages, index_pages

LIBRARIES = ("buildgen", "cadquery", "ezdxf", "manifold3d", "numpy", "pillow", "pydantic",
             "reportlab", "scipy", "shapely", "trimesh")
PARTS_COLUMNS = ("id", "name", "material", "process", "quantity", "mass_g", "mass_sigma_g",
                 "x_mm", "y_mm", "z_mm", "thickness_mm", "length_mm", "section", "sheet",
                 "files", "order", "step", "from_key", "basis")
BOM_COLUMNS = ("section", "item", "size", "quantity", "unit", "mass_g", "parts")


def write_packet(package: Package, folder: Path) -> list[Path]:
    """Write packet.pdf, kit.json, bom.csv and parts.csv into an existing folder.

    `write_manifest` comes last, when all other files of the packet stand in the folder too.

    Returns:
        The files written.
    """
    made = {
        "packet.pdf": packet_pdf(package),
        "kit.json": json_text(kit_json(package)).encode(),
        "bom.csv": bom_csv(package).encode(),
        "parts.csv": parts_csv(package).encode(),
    }
    for name, data in made.items():
        (folder / name).write_bytes(data)
    return [folder / name for name in made]


def packet_pdf(package: Package) -> bytes:
    """The build packet; equal packages give equal bytes."""
    pages: tuple[list[Flowable], ...] = (
        front(package),
        caution_pages(),
        balance_pages(package),
        bill_pages(package),
        sheet_pages(package),
        print_pages(package),
        stick_pages(package),
        step_pages(package),
        fit_pages(package),
        flight_pages(package),
        index_pages(package),
    )
    return pdf(package.kit.title, [flowable for page in pages for flowable in page])


def json_text(data: Json) -> str:
    return json.dumps(data, indent=1, ensure_ascii=False) + "\n"


def _csv(columns: Sequence[str], rows: Iterable[Sequence[object]]) -> str:
    out = StringIO()
    writer = csv.writer(out, lineterminator="\n")
    writer.writerow(columns)
    writer.writerows(rows)
    return out.getvalue()


def parts_csv(package: Package) -> str:
    """One line for each part, the figures of kit.json."""
    rows = []
    for part in package.kit.parts:
        entry = part_json(package, part)
        entry["x_mm"], entry["y_mm"], entry["z_mm"] = entry["centroid_mm"]
        entry["files"] = " ".join(entry.get("files", ()))
        rows.append([entry.get(column, "") for column in PARTS_COLUMNS])
    return _csv(PARTS_COLUMNS, rows)


def bom_csv(package: Package) -> str:
    """The bill of materials, one line for each of its lines on paper."""
    return _csv(BOM_COLUMNS, (
        (line.section, line.item, line.size, line.amount, line.unit,
         "" if line.mass_g is None else round(line.mass_g, 4), " ".join(line.parts))
        for line in bill(package)
    ))


def manifest(package: Package, folder: Path) -> Json:
    """Checksums of every file in the folder, what made them, and the definition itself."""
    found = sorted(p for p in folder.rglob("*") if p.is_file() and p.name != "manifest.json")
    title = package.kit.title
    return {
        "schema": "buildgen-manifest/1",
        "design": {"name": title.name, "revision": title.revision,
                   "source_sha256": title.source_sha256},
        "files": {
            p.relative_to(folder).as_posix(): hashlib.sha256(p.read_bytes()).hexdigest()
            for p in found
        },
        "versions": {"python": platform.python_version(), **_versions()},
        "definition": {"file": package.source_name, "text": package.source_text},
    }


def _versions() -> dict[str, str]:
    found = {}
    for name in LIBRARIES:
        try:
            found[name] = version(name)
        except PackageNotFoundError:
            continue
    return found


def write_manifest(package: Package, folder: Path) -> Path:
    """manifest.json, written last."""
    path = folder / "manifest.json"
    path.write_text(json_text(manifest(package, folder)), encoding="utf-8", newline="\n")
    return path
