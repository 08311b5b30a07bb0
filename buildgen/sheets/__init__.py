"""Flat parts on sheets."""

from buildgen.sheets.nest import nest
from buildgen.sheets.nest_types import (
    NestFixed,
    NestLayout,
    NestPart,
    NestPlacement,
    NestResult,
    NestStock,
    placed,
)

__all__ = [
    "NestFixed",
    "NestLayout",
    "NestPart",
    "NestPlacement",
    "NestResult",
    "NestStock",
    "nest",
    "placed",
]
