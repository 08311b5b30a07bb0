"""Nesting: flat parts on as few sheets as can be, the last one with the largest piece left."""

from __future__ import annotations

from collections.abc import Sequence
from typing import get_args

from buildgen.problems import DesignError
from buildgen.sheets.nest_input import faulty_fixed, faulty_numbers, faulty_parts, faulty_stock
from buildgen.sheets.nest_types import Effort, NestFixed, NestPart, NestResult, NestStock


def nest(
    parts: Sequence[NestPart],
    stock: Sequence[NestStock],
    *,
    spacing_mm: float,
    margin_mm: float,
    effort: Effort = "normal",
    fixed: Sequence[NestFixed] = (),
) -> NestResult:
    """Lay flat parts on sheets.

    Fewest sheets first, then the shortest length used of the last one. Sheets that hold fixed
    parts and stock of limited quantity that is smaller than the rest (offcuts) are used first
    where that saves material. The search is bounded by counts, never by a clock: the same input
    gives the same layouts.

    Args:
        parts: what to cut; small parts may end up inside the openings of large ones.
        stock: sheets at hand.
        spacing_mm: least gap between two parts; 0 or more.
        margin_mm: least gap between a part and the edge of the sheet; 0 or more.
        effort: how long to search: "quick", "normal" or "high".
        fixed: parts that already have their place.

    Returns:
        Layouts, all checked with the true outlines: spacing and margin are kept to 0.001 mm.

    Raises:
        DesignError: an input makes no sense, a part fits on no sheet, or the stock runs out.
    """
    problems = [
        *faulty_numbers(spacing_mm, margin_mm, effort, get_args(Effort)),
        *faulty_parts(parts),
        *faulty_stock(stock),
        *faulty_fixed(fixed, stock),
    ]
    if problems:
        raise DesignError(*problems)
    # the compiler of the inner loops takes a second to load: only when something is nested
    from buildgen.sheets.nest_job import solve

    return solve(parts, stock, fixed, spacing_mm, margin_mm, effort)
