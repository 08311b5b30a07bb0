"""Plates of the kit laid on stock sheets, group by group of material and thickness."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass, replace
from itertools import count

from shapely.geometry import Polygon

from buildgen.design.schema import Definition, Laser
from buildgen.part import Kit, Part, Plate
from buildgen.problems import DesignError, Problem
from buildgen.sheets.nest import nest
from buildgen.sheets.nest_types import (
    Effort,
    NestLayout,
    NestPart,
    NestResult,
    NestStock,
    placed,
)
from buildgen.sheets.order import cutting_order
from buildgen.sheets.relief import relieved
from buildgen.sheets.seats import may_turn_over, with_seats
from buildgen.sheets.sheet import Placement, Sheet
from buildgen.sheets.stock import kerf_of, stock_of
from buildgen.shelf import Material, Shelf

__all__ = ["Placement", "Sheet", "lay_out"]

ANY_WAY = (0.0, 90.0, 180.0, 270.0)
WORTH_A_SEARCH = 0.08
"""A longer search shortens a layout by some hundredths: 0.04 to 0.07 on the benchmark's sets."""


@dataclass(frozen=True)
class Group:
    """Parts of one material and thickness, and which copies of each are wanted.

    Attributes:
        copies: numbers of the kits that still need the part, by its id.
        taken: names of sheets that have been cut.
    """

    material: Material
    thickness_mm: float
    parts: tuple[Part, ...]
    copies: dict[str, tuple[int, ...]]
    taken: frozenset[str] = frozenset()


def lay_out(
    kit: Kit, definition: Definition, shelf: Shelf, *, kits: int = 1,
    cut: Sequence[Sheet] = (),
) -> tuple[Sheet, ...]:
    """Every plate of the kit on a sheet.

    Args:
        kits: how many kits to cut together; above 1 each part's mark names its kit.
        cut: sheets that have been cut; what is still good on them comes first in the result and
            is not cut again.

    Raises:
        DesignError: no stock, a part larger than its stock, or a material not for a laser.
    """
    numbers = tuple(range(1, kits + 1)) if kits > 1 else (0,)
    there = {(p.part, p.kit or numbers[0]) for s in cut for p in s.placements if p.good}
    taken = frozenset(s.file for s in cut)
    groups: dict[tuple[str, float], list[Part]] = {}
    plates = with_seats(kit) if definition.laser.seat_lines else {}
    for part in (plates.get(p.id) or _bare(p) for p in kit.of("cut")):
        assert isinstance(part.form, Plate)
        groups.setdefault((part.material, part.form.thickness_mm), []).append(part)
    sheets = [s for s in map(_still_good, cut) if s.parts]
    problems: list[Problem] = []
    for (material, thickness), parts in sorted(groups.items()):
        copies = {p.id: tuple(n for n in numbers if (p.id, n) not in there) for p in parts}
        wanted = tuple(p for p in parts if copies[p.id])
        if not wanted:
            continue
        try:
            found = shelf.material(material, wanted[0].from_key, "sheet")
            sheets += _laid(Group(found, thickness, wanted, copies, taken), definition)
        except DesignError as error:
            problems += error.problems
    if problems:
        raise DesignError(*problems)
    return tuple(sheets)


def _laid(group: Group, definition: Definition) -> list[Sheet]:
    """Sheets for one group."""
    laser, material = definition.laser, group.material
    refuse(material, group.parts[0].from_key)
    stock = stock_of(definition, material, group.thickness_mm, group.parts[0].from_key)
    parts = {p.id: relieved(p, laser) for p in group.parts}
    lean = material.lean_deg if material.grain else 0.0
    given = [
        NestPart(p.id, p.form.shape2d, len(group.copies[p.id]), _angles(p.form), lean,
                 laser.turn_over and p.form.may_turn_over)
        for p in parts.values() if isinstance(p.form, Plate)
    ]
    try:
        result = _nested(given, stock, laser)
    except DesignError as error:
        raise DesignError(*(_named(p, parts, material) for p in error.problems)) from None
    blank = Sheet("", material.name, group.thickness_mm, 0.0, 0.0,
                  kerf_of(definition, material, group.thickness_mm), material.grain, (), (),
                  (0.0, 0.0, 0.0, 0.0))
    names = (f"{material.name}-{group.thickness_mm:g}-{n:02d}" for n in count(1))
    free = (name for name in names if name not in group.taken)
    return [
        _sheet(replace(blank, file=name), layout, parts, group.copies)
        for layout, name in zip(result.layouts, free, strict=False)
    ]


def _bare(part: Part) -> Part:
    """A plate without lines of its neighbours, with what is known of turning it over."""
    assert isinstance(part.form, Plate)
    return replace(part, form=replace(part.form, may_turn_over=may_turn_over(part)))


def _still_good(sheet: Sheet) -> Sheet:
    """A sheet that has been cut, with those of its parts that need not be cut again."""
    kept = [(at, part) for at, part in zip(sheet.placements, sheet.parts, strict=True) if at.good]
    return replace(sheet, placements=tuple(at for at, _ in kept),
                   parts=tuple(part for _, part in kept))


def refuse(material: Material, path: str) -> None:
    """Nothing, for a material that a laser may cut.

    Raises:
        DesignError: it must not go under a laser, with the reason.
    """
    if material.laser == "no":
        raise DesignError(
            Problem(path, f"{material.name} must not go under a laser.", material.laser_note)
        )


def _nested(parts: list[NestPart], stock: list[NestStock], laser: Laser) -> NestResult:
    """A quick layout; at normal effort a longer search only where it could save a sheet.

    Parts lie in the openings of others only where that saves a sheet: an operator's program that
    sorts by layer or by nearness must not drop an opening before what lies in it is cut.
    """
    def tried(openings: bool, effort: Effort) -> NestResult:
        given = parts if openings else [
            replace(p, polygon=Polygon(p.polygon.exterior)) for p in parts
        ]
        return nest(given, stock, spacing_mm=laser.spacing_mm, margin_mm=laser.margin_mm,
                    effort=effort)

    least = _least_sheets(parts, stock, laser)
    openings = _may_lie_in_openings(parts, laser.spacing_mm)
    found = tried(False, "high" if laser.effort == "high" else "quick")
    if openings and len(found.layouts) > least:
        found = min(found, tried(True, "quick"), key=lambda r: len(r.layouts))
    fewer = len(found.layouts) - 1
    near = found.equivalent_sheets * (1 - WORTH_A_SEARCH) <= fewer
    if laser.effort == "quick" or fewer < least or not near:
        return found
    longer = tried(openings, laser.effort)
    return min(found, longer, key=lambda r: (len(r.layouts), r.equivalent_sheets))


def _may_lie_in_openings(parts: list[NestPart], spacing_mm: float) -> bool:
    """Whether some opening is large enough for some part, by area."""
    smallest = min(p.polygon.area for p in parts)
    return any(
        Polygon(ring).buffer(-spacing_mm).area >= smallest
        for p in parts for ring in p.polygon.interiors
    )


def _least_sheets(parts: list[NestPart], stock: list[NestStock], laser: Laser) -> int:
    """No layout takes fewer: parts grown by half the spacing against the usable sheet."""
    half = laser.spacing_mm / 2
    usable = max(s.outline.buffer(half - laser.margin_mm, join_style="mitre").area for s in stock)
    grown = sum(float(p.polygon.buffer(half).area) * p.quantity for p in parts)
    return max(1, math.ceil(grown / float(usable) - 1e-9))


def _named(problem: Problem, by_id: dict[str, Part], material: Material) -> Problem:
    """What the nesting says of a part, with the key of the definition it comes from."""
    part = by_id.get(problem.path)
    if part is None:
        return problem
    return Problem(part.from_key, f"Part {part.id} ({part.name}, {material.name}):"
                   f" {problem.says}", problem.hint)


def _angles(plate: Plate) -> tuple[float, ...]:
    """Turns that keep the part's grain along the sheet's x."""
    if plate.grain_deg is None:
        return ANY_WAY
    return tuple(sorted(((-plate.grain_deg) % 360, (180 - plate.grain_deg) % 360)))


def _sheet(
    blank: Sheet, layout: NestLayout, by_id: dict[str, Part],
    copies: dict[str, tuple[int, ...]],
) -> Sheet:
    """One layout as a sheet, its parts in the order of cutting."""
    _, _, x1, y1 = layout.stock.bounds
    shapes = [placed(by_id[p.part_id].form.shape2d, p) for p in layout.placements]  # type: ignore[union-attr]
    order = cutting_order(shapes, [p.part_id for p in layout.placements])
    spots = [
        Placement(p.part_id, round(p.x_mm, 4), round(p.y_mm, 4), round(p.angle_deg, 4) % 360,
                  p.flipped, copies[p.part_id][p.copy])
        for p in (layout.placements[i] for i in order)
    ]
    whole = layout.stock.equals(layout.stock.envelope)
    return replace(
        blank, width_mm=x1, height_mm=y1, placements=tuple(spots),
        parts=tuple(by_id[p.part] for p in spots), leftover_mm=layout.leftover_mm,
        offcut=None if whole else layout.stock,
    )
