"""Kinds of values, and the frozen table they stand in."""

from __future__ import annotations

from typing import Annotated, TypeAlias

from pydantic import BaseModel, ConfigDict, Field, Strict

Number: TypeAlias = Annotated[float, Strict(), Field(allow_inf_nan=False)]
Length: TypeAlias = Annotated[float, Strict(), Field(gt=0, le=20000, allow_inf_nan=False)]
Extent: TypeAlias = Annotated[float, Strict(), Field(ge=0, le=20000, allow_inf_nan=False)]
Mass: TypeAlias = Annotated[float, Strict(), Field(ge=0, le=100000, allow_inf_nan=False)]
Angle: TypeAlias = Annotated[float, Strict(), Field(ge=-60, le=60, allow_inf_nan=False)]
Throw: TypeAlias = Annotated[float, Strict(), Field(ge=0, le=60, allow_inf_nan=False)]
Fraction: TypeAlias = Annotated[float, Strict(), Field(ge=0, le=1, allow_inf_nan=False)]
Count: TypeAlias = Annotated[int, Strict(), Field(ge=1, le=200)]
Lengths: TypeAlias = Annotated[tuple[Number, ...], Field(strict=False)]
Pair: TypeAlias = Annotated[tuple[Number, Number], Field(strict=False)]
Triple: TypeAlias = Annotated[tuple[Number, Number, Number], Field(strict=False)]
Size: TypeAlias = Annotated[tuple[Length, Length, Length], Field(strict=False)]
Name: TypeAlias = Annotated[
    str, Field(min_length=1, max_length=60, pattern=r"^[a-z0-9][a-z0-9-]*$")
]


class Table(BaseModel):
    """A table of the definition."""

    model_config = ConfigDict(frozen=True, extra="forbid", strict=True)
