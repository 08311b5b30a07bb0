"""Planforms of tail surfaces."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from shapely.geometry import Polygon, box

from buildgen.aero.planform import Panel as PlanPanel
from buildgen.design.schema import Surface
from buildgen.solid import Array


@dataclass(frozen=True, eq=False)
class Outline:
    """Planform of one tail surface: half span (or height), chords, sweep of its leading edge."""

    span_mm: float
    root_mm: float
    tip_mm: float
    sweep_mm: float
    control: float

    @property
    def panel(self) -> PlanPanel:
        return PlanPanel(self.span_mm, self.root_mm, self.tip_mm, self.sweep_mm, 0.0)

    @property
    def area_mm2(self) -> float:
        return self.span_mm * (self.root_mm + self.tip_mm) / 2

    @property
    def hinge_mm(self) -> float:
        """x of the hinge line: straight across the span, at the control's share of the root."""
        return self.root_mm * (1 - self.control)

    def corners(self, tail_x: float) -> Polygon:
        """Half outline in x (aft), y (out)."""
        return Polygon([(0, 0), (tail_x, 0), (self.sweep_mm + self.tip_mm, self.span_mm),
                        (self.sweep_mm, self.span_mm)])


def outline_of(given: Surface, area: float, halves: int, aspect: float) -> Outline:
    """From measures, or from an area with the aspect ratio and taper wanted."""
    if given.volume is None:
        assert given.span_mm is not None and given.root_chord_mm is not None
        tip = given.tip_chord_mm or given.root_chord_mm
        return Outline(given.span_mm / halves, given.root_chord_mm, tip, given.sweep_mm,
                       given.control)
    span = float(np.sqrt(area * (given.aspect or aspect)))
    mean = area / span
    root = 2 * mean / (1 + given.taper)
    return Outline(span / halves, root, root * given.taper, given.sweep_mm, given.control)


def both_halves(outline: Outline) -> Polygon:
    half = np.asarray(outline.corners(outline.root_mm).exterior.coords)[:-1]
    return Polygon([*half[[0, 3, 2, 1]], *(half[[2, 3]] * (1, -1))])


def centre_line(outline: Polygon) -> Array:
    """Points half way along the chord, from one tip to the other."""
    x0, y0, x1, y1 = outline.bounds
    ys = np.linspace(y0 + 2, y1 - 2, 120)
    xs = []
    for y in ys:
        cut = outline.intersection(box(x0 - 1, y - 0.05, x1 + 1, y + 0.05))
        xs.append((cut.bounds[0] + cut.bounds[2]) / 2)
    return np.column_stack([xs, ys])
