"""The way for the harness: a hole in every rib out to the outermost motor."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass

import numpy as np

from buildgen.airframe.bays import Bay
from buildgen.airframe.blank import Blank, Cut
from buildgen.airframe.moving import lead_reach_mm
from buildgen.airframe.shop import Shop
from buildgen.airframe.surface import WingShape
from buildgen.design.schema import WiringHole
from buildgen.part import Joint, Part
from buildgen.problems import DesignError, Problem

AHEAD = 0.1
"""Of the chord, ahead of the servo: the lead comes in beside its case."""


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
    """One way, where the definition asks for it, or where servos stand in the wing.

    Raises:
        DesignError: the plug of a servo's lead does not pass the hole.
    """
    hole, servos = shop.definition.wing.wiring_hole, lead_reach_mm(shop, wing)
    if hole is None and servos:
        at = min(c.servo.at_chord for c in shop.definition.wing.control if c.drive == "servo")
        hole = WiringHole(diameter_mm=np.ceil(plug_mm(shop) + 1.0), at_chord=at - AHEAD)
    if hole is None:
        return
    if servos and hole.diameter_mm < plug_mm(shop):
        raise DesignError(Problem(
            "wing.wiring_hole.diameter_mm",
            f"The plug of a servo's lead, {plug_mm(shop):.1f} mm across, does not pass a hole of"
            f" {hole.diameter_mm:g} mm.", f"Make it {np.ceil(plug_mm(shop)):.0f} mm or more."))
    reach = bays[-1].span_mm + bays[-1].half_mm + 20 if bays else wing.half_span_mm
    if shop.definition.wing.wiring_hole is None:
        reach = servos
    yield Wiring(wing, hole.at_chord, hole.diameter_mm, max(reach, servos))


def plug_mm(shop: Shop) -> float:
    """Across the corners of a servo's plug: what its hole must pass."""
    return float(np.hypot(*shop.shelf.connector("servo-plug").size_mm))
