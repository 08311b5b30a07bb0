"""An elliptical wing, as many straight panels as its tolerance asks."""

from __future__ import annotations

import math
from typing import Annotated

import numpy as np
from pydantic import Field, Strict, model_validator

from buildgen.design.schema.types import Angle, Fraction, Length, Number, Table

MOST_PANELS = 24


class Elliptic(Table):
    """Chords along a quarter of an ellipse; instead of [[wing.panel]]."""

    half_span_mm: Length = Field(description="Along the panels, to the tip rib.")
    root_chord_mm: Length
    tip_chord_mm: Length = Field(description="Where the ellipse is cut off: room for a tip rib.")
    straight_at: Fraction = Field(
        0.25, description="Fraction of the chord that lies on a straight line."
    )
    sweep_mm: Number = Field(0.0, description="How far that line's outer end lies aft.")
    dihedral_deg: Angle = 0.0
    twist_deg: Angle = Field(0.0, description="At the tip, nose up positive.")
    tolerance_mm: Annotated[float, Strict(), Field(gt=0.01, le=20)] = Field(
        1.0, description="Greatest distance of the straight panels' outline from the ellipse."
    )

    @model_validator(mode="after")
    def _tip_below_root(self) -> Elliptic:
        if self.tip_chord_mm >= self.root_chord_mm:
            raise ValueError(
                f"tip_chord_mm {self.tip_chord_mm:g} must be below root_chord_mm"
                f" {self.root_chord_mm:g}"
            )
        off = self.worst_mm(MOST_PANELS)
        if off > self.tolerance_mm:
            raise ValueError(
                f"{MOST_PANELS} panels stand {off:.2f} mm off the ellipse: raise tolerance_mm"
            )
        return self

    def _corners(self, count: int) -> tuple[list[float], list[float]]:
        """Distances along the span and chords of `count` panels, even in the ellipse's angle."""
        last = math.acos(self.tip_chord_mm / self.root_chord_mm)
        axis = self.half_span_mm / math.sin(last)
        angles = [last * k / count for k in range(count + 1)]
        return ([axis * math.sin(a) for a in angles],
                [self.root_chord_mm * math.cos(a) for a in angles])

    def worst_mm(self, count: int) -> float:
        """Greatest distance of an edge from its ellipse, square to it.

        Leading and trailing edge share the chord's deviation as `straight_at` divides it.
        """
        share = max(self.straight_at, 1 - self.straight_at)
        spans, chords = self._corners(count)
        axis = self.half_span_mm / math.sin(math.acos(self.tip_chord_mm / self.root_chord_mm))
        worst = 0.0
        for (y0, c0), (y1, c1) in zip(
            zip(spans, chords, strict=True), list(zip(spans, chords, strict=True))[1:],
            strict=False,
        ):
            y = np.linspace(y0, y1, 41)
            true = self.root_chord_mm * np.sqrt(np.maximum(0.0, 1 - (y / axis) ** 2))
            off = share * (true - (c0 + (c1 - c0) * (y - y0) / (y1 - y0)))
            lean = math.cos(math.atan(share * (c0 - c1) / (y1 - y0)))
            worst = max(worst, float(np.max(off)) * lean)
        return worst

    def panels(self) -> list[dict[str, float]]:
        """The tables of [[wing.panel]] that stand for it."""
        count = next(n for n in range(2, MOST_PANELS + 1) if self.worst_mm(n) <= self.tolerance_mm)
        spans, chords = self._corners(count)
        found: list[dict[str, float]] = []
        for k in range(count):
            span, share = spans[k + 1] - spans[k], spans[k + 1] / self.half_span_mm
            table = {
                "span_mm": span,
                "tip_chord_mm": chords[k + 1],
                "sweep_mm": self.straight_at * (chords[k] - chords[k + 1])
                + self.sweep_mm * span / self.half_span_mm,
                "dihedral_deg": self.dihedral_deg,
                "twist_deg": self.twist_deg * share,
            }
            found.append({"root_chord_mm": self.root_chord_mm, **table} if k == 0 else table)
        return found
