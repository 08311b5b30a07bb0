"""Plates of the kit laid on stock sheets, group by group of material and thickness."""

from __future__ import annotations

import math
from dataclasses import dataclass
from functools import cached_property
from itertools import combinations

from shapely.geometry import Polygon

from buildgen.design.schema import Definition, Laser
from buildgen.design.schema import Sheet as Rack
from buildgen.part import Kit, Part, Plate
from buildgen.problems import DesignError, Problem
from buildgen.sheets.contour import Contours, beam_path
from buildgen.sheets.nest import nest
from buildgen.sheets.nest_types import (
    NestLayout,
    NestPart,
    NestPlacement,
    NestResult,
    NestStock,
    placed,
)
from buildgen.shelf import Material, Shelf

ANY_WAY = (0.0, 90.0, 180.0, 270.0)


@dataclass(frozen=True, slots=True)
class Placement:
    """Where a part lies: turned about its own origin, then moved."""

    part: str
    x_mm: float
    y_mm: float
    rotation_deg: float
    flipped: bool = False


@dataclass(frozen=True, eq=False)
class Sheet:
    """One sheet of stock and what is cut from it; origin at its lower left corner.

    The grain runs along x, the longer side.
    """

    file: str
    material: str
    thickness_mm: float
    width_mm: float
    height_mm: float
    kerf_mm: float
    grain: bool
    placements: tuple[Placement, ...]
    parts: tuple[Part, ...]
    leftover_mm: tuple[float, float, float, float]
    """Largest whole rectangle left: x, y, width, height."""

    @cached_property
    def parts_area_mm2(self) -> float:
        """Nominal, without kerf."""
        return sum(p.form.area_mm2 for p in self.parts if isinstance(p.form, Plate))

    @property
    def used_fraction(self) -> float:
        return self.parts_area_mm2 / (self.width_mm * self.height_mm)

    @cached_property
    def paths(self) -> tuple[Contours, ...]:
        """The beam's path for each part in its own coordinates, in the order of placements."""
        return tuple(beam_path(p, self.kerf_mm) for p in self.parts)

    @property
    def cut_length_mm(self) -> float:
        return sum(c.length_mm for c in self.paths)

    def placed_shapes(self) -> list[Polygon]:
        """Nominal parts where they lie."""
        return [
            placed(p.form.shape2d, NestPlacement(p.id, 0, at.x_mm, at.y_mm, at.rotation_deg,
                                                 at.flipped))
            for p, at in zip(self.parts, self.placements, strict=True)
            if isinstance(p.form, Plate)
        ]

    def faults(self, spacing_mm: float, margin_mm: float) -> list[str]:
        """Parts too near to each other or to the edge; empty when all is well."""
        shapes = self.placed_shapes()
        found = []
        inner = (margin_mm, margin_mm, self.width_mm - margin_mm, self.height_mm - margin_mm)
        for part, shape in zip(self.parts, shapes, strict=True):
            x0, y0, x1, y1 = shape.bounds
            if (x0 < inner[0] - 1e-3 or y0 < inner[1] - 1e-3 or x1 > inner[2] + 1e-3
                    or y1 > inner[3] + 1e-3):
                found.append(f"{part.id} reaches over the margin")
        for (a, one), (b, two) in combinations(zip(self.parts, shapes, strict=True), 2):
            if one.distance(two) < spacing_mm - 1e-3:
                found.append(f"{a.id} and {b.id} lie closer than {spacing_mm:g} mm")
        return found


def lay_out(kit: Kit, definition: Definition, shelf: Shelf) -> tuple[Sheet, ...]:
    """Every plate of the kit on a sheet.

    Raises:
        DesignError: no stock, a part larger than its stock, or a material not for a laser.
    """
    groups: dict[tuple[str, float], list[Part]] = {}
    for part in kit.of("cut"):
        assert isinstance(part.form, Plate)
        groups.setdefault((part.material, part.form.thickness_mm), []).append(part)
    sheets: list[Sheet] = []
    problems: list[Problem] = []
    for (material, thickness), parts in sorted(groups.items()):
        try:
            found = shelf.material(material, parts[0].from_key, "sheet")
            sheets += _group(found, thickness, parts, definition)
        except DesignError as error:
            problems += error.problems
    if problems:
        raise DesignError(*problems)
    return tuple(sheets)


def _group(
    material: Material, thickness: float, parts: list[Part], definition: Definition
) -> list[Sheet]:
    laser = definition.laser
    if material.laser == "no":
        raise DesignError(
            Problem(parts[0].from_key, f"{material.name} must not go under a laser.",
                    material.laser_note)
        )
    rack = _rack(definition, material.name, thickness)
    stock = _stock(material, rack, parts)
    lean = material.lean_deg if material.grain else 0.0
    given = [
        NestPart(p.id, p.form.shape2d, 1, _angles(p.form), lean, False)
        for p in parts if isinstance(p.form, Plate)
    ]
    try:
        result = _nested(given, stock, laser)
    except DesignError as error:
        by_id = {p.id: p for p in parts}
        raise DesignError(*(_named(p, by_id, material) for p in error.problems)) from None
    kerf = laser.kerf_mm if rack is None or rack.kerf_mm is None else rack.kerf_mm
    return [
        _sheet(layout, n, material, thickness, kerf, {p.id: p for p in parts}, laser)
        for n, layout in enumerate(result.layouts, start=1)
    ]


def _nested(parts: list[NestPart], stock: list[NestStock], laser: Laser) -> NestResult:
    """A quick layout; a longer search only where it could save a whole sheet."""
    gap, edge = laser.spacing_mm, laser.margin_mm
    quick = nest(parts, stock, spacing_mm=gap, margin_mm=edge, effort="quick")
    if laser.effort == "quick" or len(quick.layouts) <= _least_sheets(parts, stock[0], laser):
        return quick
    return nest(parts, stock, spacing_mm=gap, margin_mm=edge, effort=laser.effort)


def _least_sheets(parts: list[NestPart], stock: NestStock, laser: Laser) -> int:
    """No layout takes fewer: parts grown by half the spacing against the usable sheet."""
    half = laser.spacing_mm / 2
    room = 2 * laser.margin_mm - laser.spacing_mm
    usable = (stock.width_mm - room) * (stock.height_mm - room)
    grown = float(sum(p.polygon.buffer(half).area for p in parts))
    return max(1, math.ceil(grown / usable - 1e-9))


def _named(problem: Problem, by_id: dict[str, Part], material: Material) -> Problem:
    """What the nesting says of a part, with the key of the definition it comes from."""
    part = by_id.get(problem.path)
    if part is None:
        return problem
    return Problem(part.from_key, f"Part {part.id} ({part.name}, {material.name}):"
                   f" {problem.says}", problem.hint)


def _rack(definition: Definition, material: str, thickness: float) -> Rack | None:
    for sheet in definition.stock.sheet:
        if sheet.material == material and abs((sheet.measured_mm or sheet.thickness_mm)
                                              - thickness) < 1e-6:
            return sheet
    return None


def _stock(material: Material, rack: Rack | None, parts: list[Part]) -> list[NestStock]:
    """Sheets to lay on, longer side along x; the first shelf size that holds the largest part."""
    if rack is not None and rack.width_mm and rack.height_mm:
        sizes = [(rack.width_mm, rack.height_mm)]
    else:
        sizes = list(material.sheets)
    if not sizes:
        raise DesignError(Problem(parts[0].from_key, f"{material.name} has no stock sheet.",
                                  "Give its size under [[stock.sheet]]."))
    width, height = sizes[0]
    count = rack.count if rack is not None else None
    long, short = max(width, height), min(width, height)
    return [NestStock(material.name, long, short, None, count)]


def _angles(plate: Plate) -> tuple[float, ...]:
    """Turns that keep the part's grain along the sheet's x."""
    if plate.grain_deg is None:
        return ANY_WAY
    return tuple(sorted(((-plate.grain_deg) % 360, (180 - plate.grain_deg) % 360)))


def _sheet(
    layout: NestLayout, number: int, material: Material, thickness: float, kerf: float,
    by_id: dict[str, Part], laser: Laser,
) -> Sheet:
    x0, y0, x1, y1 = layout.stock.bounds
    placements = _in_order(layout)
    return Sheet(
        f"{material.name}-{thickness:g}-{number:02d}", material.name, thickness, x1 - x0, y1 - y0,
        kerf, material.grain, tuple(placements), tuple(by_id[p.part] for p in placements),
        layout.leftover_mm,
    )


def _in_order(layout: NestLayout) -> list[Placement]:
    """From left to right in columns: the beam travels little and heat spreads."""
    found = [
        Placement(p.part_id, round(p.x_mm, 4), round(p.y_mm, 4), round(p.angle_deg, 4) % 360,
                  p.flipped)
        for p in layout.placements
    ]
    return sorted(found, key=lambda p: (p.x_mm // 60, p.y_mm, p.part))
