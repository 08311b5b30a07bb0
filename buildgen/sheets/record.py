"""The record of cut sheets: a small TOML file beside the definition, readable and mergeable."""

from __future__ import annotations

import tomllib
from collections.abc import Iterable
from pathlib import Path
from typing import Any

from shapely.geometry import Polygon

from buildgen.part import Part, Plate
from buildgen.problems import DesignError, Problem
from buildgen.sheets.sheet import Placement, Sheet
from buildgen.solid import Circle, Pose

STORED_MM = 0.005
"""Outlines are recorded within this."""


def record_path(folder: Path, file: str) -> Path:
    """Where the record of a definition's cut sheets lies: `tern.toml` has `tern.cut.toml`."""
    return folder / f"{Path(file).stem}.cut.toml"


def frozen_text(sheets: Iterable[Sheet], design: str) -> str:
    """The record: a table for each sheet, and for each part on it, in the order of cutting.

    Args:
        design: title line of the design that the sheets were cut from.
    """
    rows = ["# Sheets that have been cut. Their parts keep their places and shapes; delete a",
            "# sheet's tables here to cut its parts anew."]
    for sheet in sheets:
        rows += ["", "[[sheet]]", f'file = "{sheet.file}"', f'material = "{sheet.material}"',
                 f"thickness_mm = {sheet.thickness_mm!r}",
                 f"size_mm = [{sheet.width_mm!r}, {sheet.height_mm!r}]",
                 f"kerf_mm = {sheet.kerf_mm!r}", f"grain = {str(sheet.grain).lower()}",
                 f'design = "{sheet.cut_from or design}"']
        if sheet.offcut is not None:
            rows.append(f'offcut = "{_line(sheet.offcut.exterior.coords)}"')
        for at, part in zip(sheet.placements, sheet.parts, strict=True):
            rows += ["", *_part_rows(at, part, not sheet.cut_from)]
    return "\n".join(rows) + "\n"


def _part_rows(at: Placement, part: Part, thin: bool) -> list[str]:
    assert isinstance(part.form, Plate)
    whole = part.form.outline
    outline = whole.simplify(STORED_MM) if thin else whole
    rows = ["[[sheet.part]]", f'id = "{part.id}"']
    rows += [f"kit = {at.kit}"] if at.kit else []
    rows += ["turned_over = true"] if at.flipped else []
    rows += [f"place = [{at.x_mm!r}, {at.y_mm!r}, {at.rotation_deg!r}]",
             f"density_kg_m3 = {part.density_kg_m3!r}",
             f'outline = "{_line(outline.exterior.coords)}"']
    rows += [f'opening_{n} = "{_line(ring.coords)}"'
             for n, ring in enumerate(outline.interiors, start=1)]
    if part.form.circles:
        circles = ", ".join(f"[{x:.3f}, {y:.3f}, {r:.3f}]" for x, y, r in part.form.circles)
        rows.append(f"circles = [{circles}]")
    return rows


def _line(points: Any) -> str:
    return ", ".join(f"{x:.3f} {y:.3f}" for x, y in list(points)[:-1])


def _ring(text: str) -> list[tuple[float, float]]:
    pairs = [p.split() for p in text.split(",")]
    return [(float(x), float(y)) for x, y in pairs]


def read_frozen(path: Path) -> tuple[Sheet, ...]:
    """The sheets of a record, each part in its recorded shape; none where there is no record.

    Raises:
        DesignError: the file cannot be understood.
    """
    if not path.is_file():
        return ()
    try:
        data = tomllib.loads(path.read_text("utf-8"))
        return tuple(_sheet(table) for table in data.get("sheet", []))
    except (tomllib.TOMLDecodeError, KeyError, ValueError, TypeError) as error:
        raise DesignError(Problem("", f"The record of cut sheets cannot be read: {error}.",
                                  "Mend it, or move it away to cut everything anew.",
                                  str(path))) from None


def _sheet(table: dict[str, Any]) -> Sheet:
    parts, places = [], []
    for p in table.get("part", []):
        holes = [_ring(p[k]) for k in sorted(p) if k.startswith("opening_")]
        circles: tuple[Circle, ...] = tuple((c[0], c[1], c[2]) for c in p.get("circles", []))
        form = Plate(Polygon(_ring(p["outline"]), holes), float(table["thickness_mm"]), circles)
        parts.append(Part(p["id"], "cut before", table["material"], form, Pose(), "", "",
                          float(p.get("density_kg_m3", 0.0))))
        x, y, turn = p["place"]
        places.append(Placement(p["id"], float(x), float(y), float(turn),
                                bool(p.get("turned_over", False)),
                                int(p.get("kit", 0)), False))
    offcut = Polygon(_ring(table["offcut"])) if "offcut" in table else None
    wide, high = table["size_mm"]
    return Sheet(table["file"], table["material"], float(table["thickness_mm"]), float(wide),
                 float(high), float(table["kerf_mm"]), bool(table.get("grain", False)),
                 tuple(places), tuple(parts), (0.0, 0.0, 0.0, 0.0), offcut,
                 str(table.get("design", "")))
