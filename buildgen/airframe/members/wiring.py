"""The way for the harness: a hole in every rib out to the outermost motor."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass

from buildgen.airframe.bays import Bay
from buildgen.airframe.blank import Blank, Cut
from buildgen.airframe.shop import Shop
from buildgen.airframe.surface import WingShape
from buildgen.part import Joint, Part


@dataclass(frozen=True, eq=False)
class Wiring:
    """Holes of one diameter at one fraction of the chord; it has no parts of its own."""

    wing: WingShape
    fraction: float
    diameter_mm: float
    reach_mm: float

    @property
    def parts(self) -> tuple[Part, ...]:
        return ()

    def cut(self, blank: Blank) -> Cut:
        span = self.span(blank)
        if span > self.reach_mm:
            return Cut()
        panel, s = self.wing.at(max(span, 0.0))
        x, y, _ = blank.pose.local(panel.point(s, self.fraction))
        return Cut(circles=((float(x), float(y), self.diameter_mm / 2),))

    def span(self, blank: Blank) -> float:
        """Distance of a blank along the span, on either side."""
        y = abs(float(blank.pose.origin[1]))
        for panel in self.wing.panels:
            inner, outer = panel.root.nose[1], panel.tip.nose[1]
            if y <= outer + 1e-6:
                return float(panel.start_mm + (y - inner) / (outer - inner) * panel.length_mm)
        return self.wing.half_span_mm

    def joint(self, blank: Blank) -> Joint | None:
        return None

    @property
    def joints(self) -> tuple[Joint, ...]:
        return ()


def make(shop: Shop, wing: WingShape, bays: tuple[Bay, ...]) -> Iterable[Wiring]:
    """One way, where the definition asks for it."""
    hole = shop.definition.wing.wiring_hole
    if hole is None:
        return
    reach = bays[-1].span_mm + bays[-1].half_mm + 20 if bays else wing.half_span_mm
    yield Wiring(wing, hole.at_chord, hole.diameter_mm, reach)
