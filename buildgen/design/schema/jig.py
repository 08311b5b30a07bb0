"""What a panel is built on."""

from __future__ import annotations

from pydantic import Field

from buildgen.design.schema.types import Count, Length, Table


class Jig(Table):
    """A cradle: plates cut to the under-surface that stand on the board under the ribs.

    They hold twist, taper and sweep. They are cut with the kit, weigh nothing in the aircraft and
    serve both halves, standing the other way round.
    """

    material: str = "lite-ply"
    thickness_mm: Length = 3.0
    every: Count = Field(2, description="A plate under every second, third ... rib.")
    above_board_mm: Length = Field(24.0, description="Lowest point of the wing above the board.")
    stop_mm: Length = Field(12.0, description="Of the stop ahead of the nose, along the chord.")
    rail_mm: Length = Field(14.0, description="Height of the rails that space the plates.")
