"""What there is to cut from: sheets on the rack, offcuts, the shelf's sizes; and the kerf."""

from __future__ import annotations

from shapely.affinity import translate
from shapely.geometry import Polygon

from buildgen.design.schema import Definition, Offcut
from buildgen.design.schema import Sheet as Rack
from buildgen.problems import DesignError, Problem
from buildgen.sheets.nest_types import NestStock
from buildgen.shelf import Material

KERF_FROM_MM, KERF_TO_MM, KERF_GROWS_MM = 3.0, 6.0, 0.04
"""Averages of laser services at 3 and 6 mm: plywood 0.20 and 0.25 mm, MDF 0.18 and 0.22, acrylic
0.15 and 0.18 (laserengravingservice.co.uk, artwork guide, read): 0.04 mm more on average."""
USUAL_KERF_MM = 0.16
"""Where the shelf tells none; common practice, no source."""


def racks(definition: Definition, material: str, thickness_mm: float) -> list[Rack]:
    """Entries of the rack for a material in a thickness, as measured or as named."""
    return [
        s for s in definition.stock.sheet
        if s.material == material
        and abs((s.measured_mm or s.thickness_mm) - thickness_mm) < 1e-6
    ]


def kerf_of(definition: Definition, material: Material, thickness_mm: float) -> float:
    """Width of the beam: of the very sheet, else of the machine, else usual for the material."""
    for rack in racks(definition, material.name, thickness_mm):
        if rack.kerf_mm is not None:
            return rack.kerf_mm
    if definition.laser.kerf_mm is not None:
        return definition.laser.kerf_mm
    return usual_kerf(material, thickness_mm)


def usual_kerf(material: Material, thickness_mm: float) -> float:
    """The shelf's kerf, which holds up to 3 mm; thicker sheets open further."""
    thicker = min(max(thickness_mm - KERF_FROM_MM, 0.0) / (KERF_TO_MM - KERF_FROM_MM), 2.0)
    return round((material.kerf_mm or USUAL_KERF_MM) + thicker * KERF_GROWS_MM, 2)


def stock_of(
    definition: Definition, material: Material, thickness_mm: float, path: str
) -> list[NestStock]:
    """Sheets and offcuts to lay on, longer side along x as the grain is.

    Args:
        path: key of a part that needs it, for the message.

    Raises:
        DesignError: there is none.
    """
    found = [
        _flat(f"rack-{n}", s.width_mm, s.height_mm, s.count)
        for n, s in enumerate(racks(definition, material.name, thickness_mm), start=1)
        if s.width_mm and s.height_mm
    ]
    if not found and material.sheets:
        count = next((s.count for s in racks(definition, material.name, thickness_mm)), None)
        found = [_flat("shelf", *material.sheets[0], count)]
    if not found:
        raise DesignError(Problem(path, f"{material.name} has no stock sheet.",
                                  "Give its size under [[stock.sheet]]."))
    return [*found, *_offcuts(definition, material.name, thickness_mm)]


def _flat(id: str, width: float, height: float, count: int | None) -> NestStock:
    return NestStock(id, max(width, height), min(width, height), None, count)


def _offcuts(definition: Definition, material: str, thickness_mm: float) -> list[NestStock]:
    return [
        NestStock(f"offcut-{n}", polygon=offcut_outline(o), quantity=o.count)
        for n, o in enumerate(definition.stock.offcut, start=1)
        if o.material == material and abs(o.thickness_mm - thickness_mm) < 1e-6
    ]


def offcut_outline(offcut: Offcut) -> Polygon:
    """Its outline with the lower left corner of its bounds at (0, 0), mm."""
    outline = Polygon(offcut.outline_mm)
    x, y, _, _ = outline.bounds
    return translate(outline, -x, -y)
