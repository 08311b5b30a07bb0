"""The definition of an aircraft as a builder would describe it over the telephone.

Frozen pydantic models; unknown keys are refused. Lengths in mm, masses in g, angles in degrees;
the same keys ending in `_in` and `_oz` are converted before they come here (``design.units``).
Each module holds one top-level table with all that stands below it.
"""

from __future__ import annotations

from typing import Annotated

from pydantic import Field

from buildgen.design.schema.balance import Balance
from buildgen.design.schema.control import Control, ControlServo
from buildgen.design.schema.equipment import Equipment
from buildgen.design.schema.fuselage import Fuselage, Station
from buildgen.design.schema.jig import Jig
from buildgen.design.schema.loads import Loads, Site
from buildgen.design.schema.packet import Packet
from buildgen.design.schema.power import Motor, Mount, Power, Propeller
from buildgen.design.schema.shop import Laser, Offcut, Print, Sheet, Speed, Stock
from buildgen.design.schema.tail import Surface, Tail
from buildgen.design.schema.types import Name, Table
from buildgen.design.schema.wing import (
    LeadingEdge,
    Lightening,
    Panel,
    Ribs,
    Sheeting,
    Spar,
    Tip,
    TipFin,
    TrailingEdge,
    Wing,
    WiringHole,
)


class Definition(Table):
    """One aircraft."""

    schema_: str | None = Field(None, alias="$schema", description="JSON Schema for editors.")
    name: Name
    title: str = Field("", max_length=80)
    revision: str = Field("A", min_length=1, max_length=12)
    kind: str = Field("", description="A word on its use.", max_length=200)
    sections_folder: str | None = Field(None, description="Coordinate files of one's own.")
    wing: Wing
    power: Power | None = None
    fuselage: Fuselage | None = None
    tail: Tail | None = None
    equipment: Annotated[tuple[Equipment, ...], Field(strict=False)] = ()
    stock: Stock = Stock()
    laser: Laser = Laser()
    print: Print = Print()
    balance: Balance = Balance()
    packet: Packet = Packet()
    loads: Loads = Loads()
    site: Site = Site()


__all__ = [
    "Balance",
    "Control",
    "ControlServo",
    "Definition",
    "Equipment",
    "Fuselage",
    "Jig",
    "Laser",
    "LeadingEdge",
    "Lightening",
    "Loads",
    "Motor",
    "Mount",
    "Offcut",
    "Packet",
    "Panel",
    "Power",
    "Print",
    "Propeller",
    "Ribs",
    "Sheet",
    "Sheeting",
    "Site",
    "Spar",
    "Speed",
    "Station",
    "Stock",
    "Surface",
    "Table",
    "Tail",
    "TipFin",
    "Tip",
    "TrailingEdge",
    "Wing",
    "WiringHole",
]
