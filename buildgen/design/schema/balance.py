"""What the balance shall be."""

from __future__ import annotations

from typing import Annotated

from pydantic import Field, Strict

from buildgen.design.schema.types import Number, Table


class Balance(Table):
    """What the balance shall be, and where ballast could go."""

    static_margin: Annotated[float, Strict(), Field(ge=-0.2, le=0.6)] = 0.12
    band: Annotated[float, Strict(), Field(gt=0, le=0.2)] = Field(
        0.05, description="Allowed either way of the static margin."
    )
    nose_ballast_x_mm: Number | None = None
    tail_ballast_x_mm: Number | None = None
    glue_share: Annotated[float, Strict(), Field(ge=0, le=0.5)] = Field(
        0.06, description="Glue as a share of the wooden and printed parts it joins."
    )
