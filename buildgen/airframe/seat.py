"""The tail's seat: the top of the fuselage runs parallel to the tailplane that stands on it."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from buildgen.design.schema import Station

SAME_MM = 0.05
"""A top that already lies this near to the seat is left as it is."""
NEAR_MM = 2.0


@dataclass(frozen=True, slots=True)
class Seat:
    """From `x_mm`, the tailplane's leading edge, aft to `end_mm`: rise per length."""

    x_mm: float
    end_mm: float
    slope: float


def seated(stations: Sequence[Station], seat: Seat | None) -> tuple[Station, ...]:
    """The stations in order, their tops in the seat's plane from its leading edge aft.

    A station without a former is put in where the seat begins.
    """
    ordered = tuple(sorted(stations, key=lambda s: s.x_mm))
    if seat is None or not ordered[0].x_mm < seat.x_mm < ordered[-1].x_mm:
        return ordered
    xs = [s.x_mm for s in ordered]

    def at(x: float, name: str) -> float:
        return float(np.interp(x, xs, [getattr(s, name) for s in ordered]))

    start = at(seat.x_mm, "top_mm")

    def plane(x: float) -> float:
        return start + seat.slope * (x - seat.x_mm)

    ends = (min(seat.end_mm, xs[-1]), *(x for x in xs if seat.x_mm < x < seat.end_mm))
    if all(abs(at(x, "top_mm") - plane(x)) < SAME_MM for x in ends):
        return ordered
    here = Station(
        x_mm=seat.x_mm, width_mm=at(seat.x_mm, "width_mm"), top_mm=start,
        bottom_mm=at(seat.x_mm, "bottom_mm"), former=False,
    )
    ahead = [s for s in ordered if s.x_mm < seat.x_mm - NEAR_MM]
    behind = [s.model_copy(update={"top_mm": plane(s.x_mm)})
              for s in ordered if s.x_mm > seat.x_mm - NEAR_MM]
    near = bool(behind) and behind[0].x_mm < seat.x_mm + NEAR_MM
    return (*ahead, *(() if near else (here,)), *behind)
