"""Motors, propellers and their mounts."""

from __future__ import annotations

from typing import Annotated, Literal

from pydantic import Field, Strict, model_validator

from buildgen.design.schema.types import (
    Angle,
    Count,
    Extent,
    Length,
    Lengths,
    Mass,
    Pair,
    Size,
    Table,
)


class Motor(Table):
    """The motor, by its figures: a name is only printed."""

    name: str = "outrunner"
    mass_g: Mass
    diameter_mm: Length = 28.0
    length_mm: Length = 26.0
    pattern_mm: Pair | None = Field(
        None, description="Diameters of the two bolt circles, two screws on each."
    )
    pattern: str | None = Field(None, description="Bolt pattern by its class on the shelf.")
    screws: Annotated[int, Strict(), Field(ge=2, le=8)] = 4
    screw: str = "M3"
    shaft_clearance_mm: Length = 9.0
    kv_rpm_v: Length | None = None
    resistance_ohm: Extent | None = None
    no_load_a: Extent | None = None
    max_current_a: Length | None = None


class Propeller(Table):
    """The propeller."""

    diameter_mm: Length
    pitch_mm: Length
    mass_g: Mass = 0.0
    blades: Annotated[int, Strict(), Field(ge=2, le=8)] = 2


class Mount(Table):
    """The printed mounts."""

    material: str = "petg"
    edge: Literal["leading", "trailing"] = Field(
        "leading", description="Of the wing that carries them; at the trailing edge motors push."
    )
    plate_mm: Length = 4.0
    wall_mm: Length | None = Field(None, description="Walls; three line widths of the printer.")
    ahead_mm: Length = Field(30.0, description="Motor face beyond that edge.")
    wrap_mm: Length = Field(14.0, description="How far the saddle reaches over that edge.")
    bay_mm: Length = Field(36.0, description="Between the two ribs that carry a mount.")
    tongue_mm: Length = Field(18.0, description="How far the ribs' tongues reach into it.")
    rib_material: str = "birch-ply"
    rib_thickness_mm: Length = 3.0
    lock_screw: str = "M3"


class Power(Table):
    """Motors along the wing, or one in the nose."""

    place: Literal["wing", "nose"] = "wing"
    motors: Count = 1
    spacing_mm: Length | None = Field(None, description="Between neighbours on one side.")
    first_mm: Length | None = Field(None, description="Innermost motor from the centre line.")
    stations_mm: Lengths = Field((), description="Distance of each from the centre, one side.")
    motor: Motor
    propeller: Propeller
    mount: Mount = Mount()
    down_deg: Angle = Field(0.0, description="Thrust line nose down against the body's axis.")
    side_deg: Angle = Field(0.0, description="Thrust line to the right, on the right-hand side.")
    rotation: Literal["mirrored", "alike"] = "mirrored"
    min_tip_gap_mm: Extent = Field(10.0, description="Between discs, and to the fuselage.")
    controller_mass_g: Mass = 0.0
    controller_size_mm: Size = (45.0, 25.0, 10.0)
    wire: str = Field("awg-16", description="Of each motor's supply, by its gauge.")

    @model_validator(mode="after")
    def _one_way_to_place(self) -> Power:
        if self.place == "wing" and self.motors % 2:
            raise ValueError(
                "on the wing motors come in pairs: give an even number, or place one in the nose"
            )
        if self.stations_mm and len(self.stations_mm) != self.motors // 2:
            raise ValueError(
                f"stations_mm lists {len(self.stations_mm)} places for one side,"
                f" {self.motors} motors need {self.motors // 2}"
            )
        return self
