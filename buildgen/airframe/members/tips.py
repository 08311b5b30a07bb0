"""Wing tips beyond the last rib: a sheet in the chord plane, or a carved block."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from shapely.geometry import Polygon

from buildgen.airframe.bays import Bay
from buildgen.airframe.blank import Blank, Cut
from buildgen.airframe.members.spars import GLUE_GAP_MM, vector
from buildgen.airframe.shop import Shop
from buildgen.airframe.surface import Panel, WingShape
from buildgen.part import Joint, Part
from buildgen.solid import Pose, Ruled, ring

STEP = "Wing: tips"
POINTS = 60
BLOCK_END = 0.35
"""Size of a block's outer end against the tip rib: it is carved round from there by eye."""


@dataclass(frozen=True, eq=False)
class Tip:
    """One tip, starboard and port."""

    shop: Shop
    panel: Panel

    @cached_property
    def parts(self) -> tuple[Part, ...]:
        given = self.shop.definition.wing.tip
        right = self._sheet() if given.kind == "sheet" else self._block()
        return right, right.mirrored("WTL", "wing tip, left")

    def _sheet(self) -> Part:
        """A half ellipse on the mean line, its straight edge on the last rib's face."""
        given = self.shop.definition.wing.tip
        thick = self.shop.thickness(given.material, given.thickness_mm)
        placed = self.panel.tip
        nose, tail = placed.place(np.array([[0.0, 0.0], [placed.chord_mm, 0.0]]))
        low, high = np.mean([placed.height(f) for f in np.linspace(0.1, 0.9, 9)], axis=0)
        pose = Pose.at(nose, tail - nose, self.panel.along)
        lift = Pose(origin=np.array([0.0, 0.0, (low + high) / 2 - thick / 2]))
        t = np.linspace(0, np.pi, POINTS)
        half = placed.chord_mm / 2
        outline = Polygon(np.column_stack([half - half * np.cos(t), given.length_mm * np.sin(t)]))
        return self.shop.plate("WTR", "wing tip, right", given.material, given.thickness_mm,
                               outline, lift.then(pose), STEP, "wing.tip", grain_deg=0.0)

    def _block(self) -> Part:
        given = self.shop.definition.wing.tip
        points = self.panel.ring(self.panel.end_plane(True))
        middle = (points.max(axis=0) + points.min(axis=0)) / 2
        far = middle + BLOCK_END * (points - middle) + given.length_mm * self.panel.along
        rings = [ring((np.vstack([p, p[:1]]), False)) for p in (points, far)]
        depth = float(np.ptp(points @ self.panel.up))
        size = f"{np.ceil(depth):.0f} x {given.length_mm:g} block"
        return self.shop.stick("WTR", "wing tip, right", given.material, size, Ruled(*rings),
                               float(np.ptp(points[:, 0])), STEP, "wing.tip")

    def cut(self, blank: Blank) -> Cut:
        return Cut()

    def joint(self, blank: Blank) -> Joint | None:
        """Glued to the face of the last rib."""
        outer = self.panel.end_plane(True)
        if abs(float((blank.pose.origin - outer.origin) @ outer.rotation[:, 2])) > 1e-6:
            return None
        return Joint("edge to face", self.parts[0].id, blank.id, (0.0, GLUE_GAP_MM),
                     vector(-self.panel.along))

    @property
    def joints(self) -> tuple[Joint, ...]:
        return ()


def make(shop: Shop, wing: WingShape, bays: tuple[Bay, ...]) -> Iterable[Tip]:
    """The tips, where they are more than the last rib."""
    if shop.definition.wing.tip.kind != "rib":
        shop.material(shop.definition.wing.tip.material, "wing.tip.material")
        yield Tip(shop, wing.panels[-1])
