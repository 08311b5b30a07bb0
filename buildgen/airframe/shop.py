"""What the makers of parts need to know of the workshop: materials as weighed, fits, numbering."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

from shapely.geometry import Polygon

from buildgen.design.schema import Definition, Sheet
from buildgen.part import Form, Mark, Part, Plate, PrintSettings, Stick
from buildgen.shelf import Material, Shelf
from buildgen.solid import Circle, Pose, Shape

WEIGHED_SIGMA = 0.03
"""Spread left in a sheet that was weighed (thickness varies along it); common practice."""


@dataclass(frozen=True, eq=False)
class Shop:
    """A definition with its shelf: the one place where materials and fits are looked up."""

    definition: Definition
    shelf: Shelf

    def sheet(self, material: str, thickness_mm: float) -> Sheet | None:
        """The user's own stock of this material and thickness, if the definition names one."""
        for sheet in self.definition.stock.sheet:
            if sheet.material == material and abs(sheet.thickness_mm - thickness_mm) < 1e-6:
                return sheet
        return None

    def thickness(self, material: str, nominal_mm: float) -> float:
        """Measured thickness where it is known: it rules slots and weights."""
        sheet = self.sheet(material, nominal_mm)
        return sheet.measured_mm if sheet and sheet.measured_mm else nominal_mm

    def sheet_width_mm(self, material: str, nominal_mm: float, path: str) -> float:
        """Across the grain of the stock that plates of this thickness are cut from."""
        rack = self.sheet(material, nominal_mm)
        if rack and rack.width_mm and rack.height_mm:
            return min(rack.width_mm, rack.height_mm)
        sizes = self.material(material, path, "sheet").sheets
        return float(min(sizes[0])) if sizes else float("inf")

    def web_mm(self, material: str, thickness_mm: float, path: str) -> float:
        """Least web between holes: the material's, or twice the thickness if that is less."""
        least = self.material(material, path).min_web_mm
        return max(least, 1.0) if least else max(2.0, thickness_mm)

    def material(self, name: str, path: str, form: str = "") -> Material:
        return self.shelf.material(name, path, form)

    @property
    def slip_mm(self) -> float:
        return self.definition.laser.slip_mm

    @property
    def press_mm(self) -> float:
        return self.definition.laser.press_mm

    @cached_property
    def print_settings(self) -> PrintSettings:
        given = self.definition.print
        return PrintSettings(
            given.line_width_mm, given.perimeters, given.layer_mm, given.skin_layers,
            given.infill, given.hole_oversize_mm, given.slip_mm, given.bed_mm,
        )

    def density(self, name: str, path: str, thickness_mm: float = 0.0) -> tuple[float, float, str]:
        """Density and its sigma [kg/m3] and how it is known."""
        sheet = self.sheet(name, thickness_mm) if thickness_mm else None
        if sheet and sheet.density_kg_m3:
            return sheet.density_kg_m3, sheet.density_kg_m3 * WEIGHED_SIGMA, "measured"
        found = self.material(name, path)
        return found.density_kg_m3, found.density_sigma_kg_m3, "catalogue"

    def part(
        self, id: str, name: str, material: str, form: Form, pose: Pose, step: str, key: str,
        nominal_mm: float = 0.0,
    ) -> Part:
        """A part of this material; `nominal_mm` finds a plate's own sheet."""
        density, sigma, basis = self.density(material, key, nominal_mm)
        return Part(id, name, material, form, pose, step, key, density, sigma, basis)

    def plate(
        self, id: str, name: str, material: str, nominal_mm: float, outline: Polygon, pose: Pose,
        step: str, key: str, *, circles: tuple[Circle, ...] = (), grain_deg: float = 0.0,
        marks: tuple[Mark, ...] = (),
    ) -> Part:
        """A flat plate of sheet; the grain counts only where the material has one."""
        grain = grain_deg if self.material(material, key, "sheet").grain else None
        form = Plate(
            outline, self.thickness(material, nominal_mm), circles, grain, marks,
        )
        return self.part(id, name, material, form, pose, step, key, nominal_mm)

    def stick(
        self, id: str, name: str, material: str, section: str, shape: Shape, length_mm: float,
        step: str, key: str, bends: tuple[tuple[float, float], ...] = (),
    ) -> Part:
        """A stick whose recipe stands in the aircraft's frame."""
        form = Stick(shape, length_mm, section, bends)
        return self.part(id, name, material, form, Pose(), step, key)


def sides(part: Part, other_id: str, other_name: str) -> tuple[Part, Part]:
    """A part and its mirror image."""
    return part, part.mirrored(other_id, other_name)
