"""What is on board."""

from __future__ import annotations

from typing import Annotated, Literal

from pydantic import Field, Strict

from buildgen.design.schema.types import Length, Mass, Number, Pair, Size, Table


class Equipment(Table):
    """A thing on board: one that may slide along x balances the aircraft."""

    name: str = Field(min_length=1, max_length=40)
    kind: Literal[
        "battery", "controller", "receiver", "servo", "payload", "gear", "other"
    ] = "other"
    mass_g: Mass
    sigma_g: Mass | None = Field(None, description="One standard deviation; 3 % of the mass.")
    size_mm: Size = (20.0, 20.0, 10.0)
    x_mm: Number
    y_mm: Number = 0.0
    z_mm: Number | None = Field(None, description="Its middle; half way up the fuselage.")
    range_mm: Pair | None = Field(None, description="Foremost and aftmost x of its middle.")
    mirrored: bool = Field(False, description="One on each side.")
    cells: Annotated[int, Strict(), Field(ge=1, le=14)] | None = None
    capacity_mah: Length | None = None
