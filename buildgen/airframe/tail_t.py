"""T-tail: the fin on the fuselage between two fillets, the tailplane on top of it."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np
from shapely.geometry import Polygon, box

from buildgen.airframe.hinge import GAP_MM
from buildgen.airframe.seat import Seat
from buildgen.airframe.tail import STEP, SheetTail
from buildgen.part import Joint, Part
from buildgen.problems import DesignError, Problem
from buildgen.solid import Placed, Pose, Prism

FILLET_MM = 6.0
CLEAR_MM = 3.0
"""Between the top of the rudder's trailing edge and the elevator's hinge line."""
UNDER_MM = 1.5
"""Between the rudder's top and the tailplane."""
LEAST_MM = 25.0
"""Of the fixed fin under the tailplane; common practice, no source."""


@dataclass(frozen=True, eq=False)
class TTail(SheetTail):
    """The fin's tab goes up through the tailplane; both stand in one frame at its incidence."""

    @cached_property
    def ahead_mm(self) -> float:
        """Tailplane's leading edge behind that of the fin's root, along the fin."""
        assert self.fin is not None
        return self.fin.sweep_mm + self.fin.tip_mm + CLEAR_MM - self.tailplane.hinge_mm

    @cached_property
    def slope(self) -> tuple[float, float]:
        """Cosine and sine of the incidence."""
        angle = np.radians(self.given.tailplane.incidence_deg)
        return float(np.cos(angle)), float(np.sin(angle))

    @cached_property
    def fin_le_mm(self) -> float:
        """x of the fin's leading edge on the fuselage, from where the tailplane must be."""
        assert self.fin is not None
        cos, sin = self.slope
        return self.tailplane_le_mm - self.ahead_mm * cos - self.fin.span_mm * sin

    @property
    def seat(self) -> Seat:
        assert self.fin is not None
        cos, sin = self.slope
        return Seat(self.fin_le_mm, self.fin_le_mm + self.fin.root_mm, -sin / cos)

    @cached_property
    def upright(self) -> Pose:
        cos, sin = self.slope
        level = self.body.top(self.fin_le_mm) if self.body else 0.0
        return Pose.at((self.fin_le_mm, self.thick_mm / 2, level), (cos, 0, -sin), (sin, 0, cos))

    @cached_property
    def level_mm(self) -> float:
        assert self.fin is not None
        return float(self.upright((self.ahead_mm, self.fin.span_mm, 0.0))[2])

    @cached_property
    def _fin_outline(self) -> Polygon:
        """Fixed fin with its tab up through the tailplane."""
        fin = self.fin
        assert fin is not None
        end = fin.hinge_mm - GAP_MM / 2
        start = max(fin.sweep_mm, self.ahead_mm)
        top = min(end, fin.sweep_mm + fin.tip_mm)
        if top - start < LEAST_MM:
            raise DesignError(Problem(
                "tail.fin.tip_chord_mm",
                f"{max(0.0, top - start):.0f} mm of the fixed fin stand under the tailplane.",
                f"Give it {LEAST_MM:.0f} mm: a longer tip, less sweep_mm, or a smaller control."))
        whole = fin.corners(fin.root_mm).intersection(box(-500, 0, end, 2000))
        inset = 0.2 * (top - start)
        return whole.union(box(start + inset, fin.span_mm - 1.0, top - inset,
                               fin.span_mm + self.thick_mm))

    @cached_property
    def _rudder_outline(self) -> Polygon:
        fin = self.fin
        assert fin is not None
        return fin.corners(fin.root_mm).intersection(
            box(fin.hinge_mm + GAP_MM / 2, 3.0, 4000, fin.span_mm - UNDER_MM))

    def _more(self) -> list[Part]:
        """Triangular fillets on both sides of the fin's foot."""
        if self.body is None or self.fin is None:
            return []
        leg, length = FILLET_MM, 0.9 * self.fin.hinge_mm
        section = Polygon([(0, 0), (leg, 0), (0, leg)])
        x, y, side = self.upright.rotation.T
        found = []
        for z, out in ((0.0, -side), (self.thick_mm, side)):
            id, name = ("VFR", "right") if out[1] > 0 else ("VFL", "left")
            at = self.upright((0.05 * self.fin.hinge_mm, 0.0, z))
            pose = Pose.at(at, out, y) if np.cross(out, y) @ x > 0 else Pose.at(at, y, out)
            found.append(self.shop.stick(
                id, f"fillet of the fin, {name}", self.given.block_material,
                f"triangle {leg:g} x {leg:g}", Placed(Prism(section, length), pose), length,
                STEP, "tail.fin"))
        return found

    @property
    def joints(self) -> tuple[Joint, ...]:
        x, y, z = (float(v) for v in self.upright.rotation[:, 1])
        up, down = (x, y, z), (-x, -y, -z)
        hinge = (0.8 * GAP_MM, 1.2 * GAP_MM)
        feet = self._under()
        return (
            Joint("hinged", "T2", "T1", hinge), Joint("hinged", "V2", "V1", hinge),
            Joint("tab in slot", "V1", "T1", (0.0, self.shop.press_mm + 0.1), up),
            *(Joint("edge to face", "V1", deck, (0.0, 0.2), down) for deck in feet),
            *(Joint("face to face", f, deck, (0.0, 0.2), down)
              for deck in feet for f in ("VFL", "VFR")),
        )

    @property
    def _stand_mm(self) -> float:
        assert self.fin is not None
        return self.fin_le_mm + self.fin.hinge_mm / 2
