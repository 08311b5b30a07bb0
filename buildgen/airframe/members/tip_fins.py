"""Fins glued on the tip ribs, one on each side, cut from sheet."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from functools import cached_property

import shapely
from shapely.geometry import Polygon

from buildgen.airframe.bays import Bay
from buildgen.airframe.blank import Blank, Cut, parts_of
from buildgen.airframe.shop import Shop
from buildgen.airframe.surface import Panel, WingShape
from buildgen.design.schema import TipFin
from buildgen.part import Joint, Part
from buildgen.solid import Pose

STEP = "Wing: tip fins"
GLUE_MM = 0.2
SEAT_MM = 1.5
"""How far the fin's foot reaches round the tip section: a line to align it by."""


@dataclass(frozen=True, eq=False)
class TipFins:
    """One fin on either tip: starboard as made, port mirrored."""

    shop: Shop
    panel: Panel
    given: TipFin

    @cached_property
    def pose(self) -> Pose:
        """x aft, y up in the plane of the tip, z towards the root: the inner face is z = t."""
        end = self.panel.end_plane(True)
        thick = self.shop.thickness(self.given.material, self.given.thickness_mm)
        return Pose(end.rotation, end.origin - thick * end.rotation[:, 2])

    @cached_property
    def outline(self) -> Polygon:
        """The fin above, its foot round the tip section, a smaller part below."""
        g, chord = self.given, self.panel.tip.chord_mm
        root = g.root_chord_mm or chord
        tip = g.tip_chord_mm or 0.6 * root
        back = chord + g.aft_mm
        front = back - root
        section = self.panel.outline(self.panel.end_plane(True))
        low = -g.below_mm
        fin = Polygon([(front, 0), (back, 0), (front + g.sweep_mm + tip, g.height_mm),
                       (front + g.sweep_mm, g.height_mm)])
        pieces = [fin, section.buffer(SEAT_MM)]
        if g.below_mm:
            pieces.append(Polygon([(front + 0.2 * root, 0), (back, 0), (back - 0.2 * root, low),
                                   (front + 0.45 * root, low)]))
        return max(parts_of(shapely.union_all(pieces)), key=lambda p: p.area)

    @property
    def area_mm2(self) -> float:
        """Of one fin, its foot included."""
        area: float = self.outline.area
        return area

    @property
    def middle_x_mm(self) -> float:
        """x of the middle of its area, a quarter of its length further forward."""
        x0, _, x1, _ = self.outline.bounds
        centroid = float(self.pose((self.outline.centroid.x, 0.0, 0.0))[0])
        return centroid - float(x1 - x0) / 4

    @cached_property
    def parts(self) -> tuple[Part, ...]:
        g = self.given
        right = self.shop.plate("WFR", "tip fin, right", g.material, g.thickness_mm, self.outline,
                                self.pose, STEP, "wing.tip_fin", grain_deg=70.0)
        return right, right.mirrored("WFL", "tip fin, left")

    def cut(self, blank: Blank) -> Cut:
        return Cut()

    def joint(self, blank: Blank) -> Joint | None:
        """On the outer face of the tip rib."""
        away = (blank.pose.origin - self.panel.tip.nose) @ self.panel.along
        if abs(float(away)) > 0.5:
            return None
        return Joint("face to face", self.parts[0].id, blank.id, (0.0, GLUE_MM))

    @property
    def joints(self) -> tuple[Joint, ...]:
        return ()


def tip_fins(shop: Shop, wing: WingShape) -> TipFins | None:
    """The wing's tip fins, where the definition has them."""
    given = shop.definition.wing.tip_fin
    return TipFins(shop, wing.panels[-1], given) if given else None


def make(shop: Shop, wing: WingShape, bays: tuple[Bay, ...]) -> Iterable[TipFins]:
    """The fins of both tips."""
    found = tip_fins(shop, wing)
    if found is not None:
        yield found
