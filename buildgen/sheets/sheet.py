"""One sheet of stock with what is cut from it."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from itertools import combinations

from shapely.geometry import Polygon, box

from buildgen.part import Part, Plate
from buildgen.sheets.contour import Contours, beam_path
from buildgen.sheets.nest_types import NestPlacement, placed


@dataclass(frozen=True, slots=True)
class Placement:
    """Where a part lies: turned about its own origin, then moved."""

    part: str
    x_mm: float
    y_mm: float
    rotation_deg: float
    flipped: bool = False
    kit: int = 0
    """Which of several kits cut together, from 1; 0 where there is only one."""
    good: bool = True
    """False for a part that was cut and no longer fits the design."""

    def of(self, shape: Polygon) -> Polygon:
        """A shape of the part's where the part lies."""
        here = NestPlacement(self.part, 0, self.x_mm, self.y_mm, self.rotation_deg, self.flipped)
        return placed(shape, here)

    @property
    def label(self) -> str:
        """What is engraved: the part's id, with the kit's number where there are several."""
        return f"{self.part}/{self.kit}" if self.kit else self.part


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
    offcut: Polygon | None = None
    """Outline of an irregular piece of stock; None where the sheet is a whole rectangle."""
    cut_from: str = ""
    """Title line of the design it was cut from; empty while it is still to be cut."""

    @cached_property
    def parts_area_mm2(self) -> float:
        """Nominal, without kerf."""
        return sum(p.form.area_mm2 for p in self.parts if isinstance(p.form, Plate))

    @property
    def outline(self) -> Polygon:
        """Of the stock."""
        return self.offcut or box(0.0, 0.0, self.width_mm, self.height_mm)

    @property
    def used_fraction(self) -> float:
        return self.parts_area_mm2 / float(self.outline.area)

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
            at.of(p.form.shape2d)
            for p, at in zip(self.parts, self.placements, strict=True)
            if isinstance(p.form, Plate)
        ]

    def faults(self, spacing_mm: float, margin_mm: float) -> list[str]:
        """Parts too near to each other or to the edge; empty when all is well."""
        shapes = self.placed_shapes()
        found = []
        edge = self.outline.exterior
        for part, shape in zip(self.parts, shapes, strict=True):
            if not self.outline.contains(shape) or edge.distance(shape) < margin_mm - 1e-3:
                found.append(f"{part.id} reaches over the margin")
        for (a, one), (b, two) in combinations(zip(self.parts, shapes, strict=True), 2):
            if one.distance(two) < spacing_mm - 1e-3:
                found.append(f"{a.id} and {b.id} lie closer than {spacing_mm:g} mm")
        return found
