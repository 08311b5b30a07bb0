"""How the packet is printed."""

from __future__ import annotations

from typing import Literal

from pydantic import Field

from buildgen.design.schema.types import Table


class Packet(Table):
    """Paper for the full-size plans."""

    paper: Literal["A4", "A3", "letter"] = Field("A4", description="That the printer takes.")
