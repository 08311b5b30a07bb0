"""The kit as data: stable keys, one truth with the PDF."""

from __future__ import annotations

from typing import Any, TypeAlias

from buildgen.checks.report import Balance, Check
from buildgen.packet.fit_json import fit_json
from buildgen.packet.package import Package
from buildgen.part import Part, Plate, Stick

Json: TypeAlias = dict[str, Any]
SCHEMA = "buildgen-kit/1"
MASS_DIGITS, LENGTH_DIGITS = 6, 4
"""Masses to a microgram, so that their sum over hundreds of parts holds to 0.001 g."""


def kit_json(package: Package) -> Json:
    """The whole kit with the stable keys of its schema; lengths mm, masses g, angles degrees.

    `mass_g` of a part is that of all its pieces (`quantity`): masses add up as they stand.
    """
    title = package.kit.title
    return {
        "schema": SCHEMA,
        "design": {
            "name": title.name,
            "title": title.title,
            "revision": title.revision,
            "source": package.source_name,
            "source_sha256": title.source_sha256,
        },
        "units": {"length": "mm", "mass": "g", "angle": "deg"},
        "parts": [part_json(package, part) for part in package.kit.parts],
        "sheets": [_sheet(sheet) for sheet in package.sheets],
        "balance": balance_json(package.balance),
        "checks": [check_json(check) for check in package.checks],
        "fit": fit_json(package.fit),
    }


def mm(value: float) -> float:
    """A length as written; never minus zero."""
    return round(float(value), LENGTH_DIGITS) + 0.0


def grams(value: float) -> float:
    return round(float(value), MASS_DIGITS) + 0.0


def quantity(part: Part) -> int:
    return int(getattr(part.form, "quantity", 1))


def part_json(package: Package, part: Part) -> Json:
    """One part; keys that do not concern it are left out."""
    entry: Json = {
        "id": part.id,
        "name": part.name,
        "material": part.material,
        "process": part.process,
        "quantity": quantity(part),
        "mass_g": grams(part.mass_g),
        "mass_sigma_g": grams(part.mass_sigma_g),
        "centroid_mm": [mm(v) for v in part.centroid_mm],
        "density_kg_m3": round(part.density_kg_m3, 3),
        "basis": part.basis,
        "step": part.step,
        "from_key": part.from_key,
    }
    if part.tool:
        entry["note"] = "tool: cut with the kit, no part of the aircraft"
    if isinstance(part.form, Plate):
        entry["thickness_mm"] = mm(part.form.thickness_mm)
        entry["sheet"] = package.sheet_file(part)
    if isinstance(part.form, Stick):
        entry["length_mm"] = mm(part.form.length_mm)
        entry["section"] = part.form.section
    if files := package.print_files(part):
        entry["files"] = list(files)
    if order := getattr(part.form, "order", ""):
        entry["order"] = order
    return entry


def _sheet(sheet: Any) -> Json:
    return {
        "file": f"{sheet.file}.dxf",
        "material": sheet.material,
        "thickness_mm": mm(sheet.thickness_mm),
        "width_mm": mm(sheet.width_mm),
        "height_mm": mm(sheet.height_mm),
        "kerf_mm": mm(sheet.kerf_mm),
        "parts_area_mm2": round(sheet.parts_area_mm2, 3),
        "used_fraction": round(sheet.used_fraction, 5),
        "cut_length_mm": round(sheet.cut_length_mm, 2),
        "placements": [
            {
                "part": p.part,
                "x_mm": mm(p.x_mm),
                "y_mm": mm(p.y_mm),
                "rotation_deg": round(p.rotation_deg, 6) + 0.0,
                "flipped": bool(p.flipped),
            }
            for p in sheet.placements
        ],
    }


def balance_json(balance: Balance) -> Json:
    """The balance, exactly as people read it on paper, in more digits."""
    known = balance.neutral_point_x_mm is not None and balance.static_margin is not None
    return {
        "mass_g": grams(balance.mass_g),
        "mass_sigma_g": grams(balance.mass_sigma_g),
        "cg_mm": [mm(v) for v in balance.cg_mm],
        "cg_sigma_mm": mm(balance.cg_sigma_mm),
        "inertia_g_mm2": [round(v, 1) + 0.0 for v in balance.inertia_g_mm2],
        "mac_mm": mm(balance.mac_mm),
        "mac_le_x_mm": mm(balance.mac_le_x_mm),
        "neutral_point_x_mm": mm(balance.neutral_point_x_mm or 0.0) if known else None,
        "static_margin": round(balance.static_margin or 0.0, 6) if known else None,
        "target_cg_x_mm": [mm(v) for v in balance.target_cg_x_mm],
        "movable": [
            {"item": m.item, "x_mm": mm(m.x_mm), "range_mm": [mm(v) for v in m.range_mm]}
            for m in balance.movable
        ],
        "ballast": [
            {"item": b.item, "mass_g": grams(b.mass_g), "x_mm": mm(b.x_mm)}
            for b in balance.ballast
        ],
        "table": [
            {
                "group": row.group,
                "mass_g": grams(row.mass_g),
                "mass_sigma_g": grams(row.mass_sigma_g),
                "arm_mm": mm(row.arm_mm),
            }
            for row in balance.table
        ],
        "span_mm": mm(balance.span_mm),
        "wing_area_mm2": round(balance.wing_area_mm2, 2),
    }


def check_json(check: Check) -> Json:
    figures = [None if v is None else round(float(v), 6) + 0.0 for v in (check.value, check.limit)]
    return {
        "id": check.id,
        "title": check.title,
        "verdict": check.verdict,
        "value": figures[0],
        "limit": figures[1],
        "unit": check.unit,
        "basis": check.basis,
        "advice": check.advice,
    }
