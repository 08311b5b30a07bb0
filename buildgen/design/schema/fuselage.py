"""The fuselage."""

from __future__ import annotations

from typing import Annotated

from pydantic import Field, model_validator

from buildgen.design.schema.types import Length, Number, Table


class Station(Table):
    """One station of the fuselage: outside measures, z from the wing's root leading edge."""

    x_mm: Number
    width_mm: Length
    top_mm: Number
    bottom_mm: Number
    former: bool = True

    @model_validator(mode="after")
    def _top_over_bottom(self) -> Station:
        if self.top_mm <= self.bottom_mm:
            raise ValueError(
                f"top_mm {self.top_mm:g} must be above bottom_mm {self.bottom_mm:g}"
            )
        return self


class Fuselage(Table):
    """A box body of sheet sides, top and bottom over formers."""

    station: Annotated[tuple[Station, ...], Field(strict=False, min_length=2)]
    side_material: str = "balsa"
    side_thickness_mm: Length = 3.0
    deck_material: str = "balsa"
    deck_thickness_mm: Length = 2.0
    former_material: str = "lite-ply"
    former_thickness_mm: Length = 3.0
    firewall_material: str = "birch-ply"
    firewall_thickness_mm: Length = 4.0
    dowel_mm: Length = Field(6.0, description="Dowels for the bands that hold the wing.")
    covering: str | None = "film"
