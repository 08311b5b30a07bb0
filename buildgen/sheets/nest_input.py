"""What can be wrong with parts and sheets before nesting, and what is said when it fails."""

from __future__ import annotations

import math
from collections.abc import Iterable, Sequence
from numbers import Integral
from typing import TYPE_CHECKING

from shapely.geometry import Polygon
from shapely.validation import explain_validity

from buildgen.problems import Problem, nearest
from buildgen.sheets.nest_types import NestFixed, NestPart, NestStock

if TYPE_CHECKING:
    from buildgen.sheets.nest_fill import Item


def faulty_numbers(
    spacing_mm: float, margin_mm: float, effort: str, efforts: Iterable[str]
) -> list[Problem]:
    """Gaps below 0 and an unknown effort."""
    found = [
        Problem(name, f"{value:g} is not a length of 0 or more.")
        for name, value in (("spacing_mm", spacing_mm), ("margin_mm", margin_mm))
        if not 0.0 <= value < math.inf
    ]
    if effort not in efforts:
        found.append(Problem("effort", f'"{effort}" is unknown.', nearest(effort, efforts)))
    return found


def faulty_parts(parts: Sequence[NestPart]) -> list[Problem]:
    """Parts without an area, with odd numbers, or of the same name."""
    found = _repeated("parts", [p.id for p in parts])
    for part in parts:
        if not _is_area(part.polygon):
            found.append(Problem(part.id, _why_no_area(part.polygon)))
        if not _is_count(part.quantity, 1):
            found.append(Problem(part.id, f"{part.quantity!r} is not a number of copies."))
        if not part.angles_deg or not all(map(math.isfinite, part.angles_deg)):
            found.append(Problem(part.id, "It needs at least one angle."))
        if not 0.0 <= part.lean_deg <= 180.0:
            found.append(Problem(part.id, f"{part.lean_deg:g} is not a lean of 0 to 180 degrees."))
    return found


def faulty_stock(stock: Sequence[NestStock]) -> list[Problem]:
    """Sheets without an area or of the same name, or none at all."""
    if not stock:
        return [Problem("stock", "There are no sheets to cut from.", "Give at least one.")]
    found = _repeated("stock", [s.id for s in stock])
    for sheet in stock:
        if sheet.polygon is None and not min(sheet.width_mm, sheet.height_mm) > 0.0:
            found.append(Problem(sheet.id, "A sheet needs a width and a height above 0."))
        elif not _is_area(sheet.outline):
            found.append(Problem(sheet.id, "Its outline is not a valid area."))
        if sheet.quantity is not None and not _is_count(sheet.quantity, 0):
            found.append(Problem(sheet.id, f"{sheet.quantity!r} is not a number of sheets."))
    return found


def _is_count(value: object, least: int) -> bool:
    return isinstance(value, Integral) and not isinstance(value, bool) and int(value) >= least


def faulty_fixed(fixed: Sequence[NestFixed], stock: Sequence[NestStock]) -> list[Problem]:
    """Fixed parts on sheets that are not there, or without an area."""
    known = [s.id for s in stock]
    found = []
    for old in fixed:
        path = old.id or "fixed"
        if old.stock_id not in known:
            says = f'It lies on "{old.stock_id}", which is not among the stock.'
            found.append(Problem(path, says, nearest(old.stock_id, known)))
        elif old.sheet < 0 or not _is_area(old.polygon):
            found.append(Problem(path, "It needs a sheet number of 0 or more and a valid area."))
    return found


def _repeated(path: str, ids: Sequence[str]) -> list[Problem]:
    twice = sorted({i for i in ids if ids.count(i) > 1})
    return [Problem(path, f'"{i}" is there twice.', "Give each its own name.") for i in twice]


def _is_area(polygon: Polygon) -> bool:
    return isinstance(polygon, Polygon) and polygon.is_valid and polygon.area > 0.0


def _why_no_area(shape: object) -> str:
    """What is the matter with an outline, with the place where it can be told."""
    if not isinstance(shape, Polygon):
        return f"Its outline is a {type(shape).__name__}, not one Polygon."
    if shape.is_empty or not shape.area > 0.0:
        return "Its outline encloses no area."
    return f"Its outline is not a valid area: {explain_validity(shape)}."


def too_large(part: NestPart, stock: Sequence[NestStock], margin_mm: float) -> Problem:
    x0, y0, x1, y1 = part.polygon.bounds
    largest = max(stock, key=lambda s: s.outline.area)
    a, b, c, d = largest.outline.bounds
    return Problem(
        part.id,
        f"Its {x1 - x0:.1f} x {y1 - y0:.1f} mm fit on no sheet; the largest, {largest.id},"
        f" has {c - a:.1f} x {d - b:.1f} mm with {margin_mm:g} mm of margin.",
        "Divide the part, allow other angles, or give a larger sheet.",
    )


def ran_out(left: Sequence[int], items: Sequence[Item], parts: Sequence[NestPart]) -> list[Problem]:
    """One problem for each part that found no room because all sheets are full."""
    short: dict[int, int] = {}
    for index in left:
        short[items[index].part] = short.get(items[index].part, 0) + 1
    return [
        Problem(
            parts[p].id,
            f"No room is left for {n} of {parts[p].quantity} on the sheets at hand.",
            "Add sheets.",
        )
        for p, n in sorted(short.items())
    ]
