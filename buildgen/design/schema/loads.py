"""What the structure must carry, and where it flies."""

from __future__ import annotations

from typing import Annotated

from pydantic import Field, Strict

from buildgen.design.schema.types import Table


class Loads(Table):
    """Load factors the wing is checked for."""

    limit: Annotated[float, Strict(), Field(ge=2, le=20)] = Field(
        6.0, description="Greatest load factor in flight; models: 6 to 12."
    )
    safety: Annotated[float, Strict(), Field(ge=1, le=4)] = Field(
        1.5, description="Strength over stress at that load factor."
    )


class Site(Table):
    """The field it flies from."""

    elevation_m: Annotated[float, Strict(), Field(ge=-400, le=6000)] = Field(
        0.0, description="Above the sea."
    )
    warmer_k: Annotated[float, Strict(), Field(ge=-40, le=40)] = Field(
        0.0, description="Than the standard atmosphere there."
    )
