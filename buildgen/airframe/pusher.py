"""The printed mount of a motor that pushes, on the wing's trailing edge.

The mount of the nose turned about: the bay's frame has its origin at the trailing edge of the
motor's station, x forward, y inboard along the panel, z along its normal. A tail is thin, so the
tongues of the two ribs are taller than it: they stand out of the section above and below, inside
the mount, from where the rib is deep enough to carry them.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np
from shapely.affinity import scale, translate
from shapely.geometry import Polygon

from buildgen.airframe.blank import Cut
from buildgen.airframe.mount import MountShape, thrust_axis
from buildgen.airframe.surface import AFT
from buildgen.solid import Array, Pose

LEAST_TONGUE_MM = 14.0
"""Height of a tongue: room for the lock screw and as much wood on either side of it."""


@dataclass(frozen=True, eq=False)
class PusherShape(MountShape):
    """The geometry of one starboard mount on the trailing edge."""

    @cached_property
    def frame(self) -> Pose:
        """The bay's frame in the aircraft."""
        panel = self.bay.panel
        ring = panel.ring(panel.plane(self.bay.s_mm))
        return Pose.at((ring[0] + ring[-1]) / 2, -AFT, -panel.along)

    def _ring(self, y: float) -> Array:
        """The wing's section at an offset y, (n, 3), its trailing edge in the middle."""
        points = self.bay.panel.ring(self.bay.panel.plane(self.bay.s_mm - y))
        nose = (len(points) - 1) // 2
        edge = (points[:1] + points[-1:]) / 2
        return self.frame.local(np.vstack([points[nose:], edge, points[: nose + 1]]))

    @cached_property
    def nose_mm(self) -> tuple[float, float, float]:
        """As of the nose, but with room for the tongues."""
        middle, low, high = super().nose_mm
        reach = LEAST_TONGUE_MM / 2 + 1.0
        return middle, min(low, middle - reach), max(high, middle + reach)

    @cached_property
    def face(self) -> Pose:
        """Frame of the motor's seat in the aircraft: x forward along the thrust line."""
        thrust = thrust_axis(self.power)
        middle, _, _ = self.nose_mm
        seat = self.frame((-self.mount.ahead_mm, 0.0, middle))
        return Pose.at(seat, thrust, np.cross((0.0, 0.0, 1.0), thrust))

    def rib_cut(self, rib: Pose) -> Cut:
        """Its tongue, and the hole of the lock screw; a rib's x runs against the frame's."""
        dx, dy, _ = (float(v) for v in rib.local(self.frame.origin))
        x0, x1, z0, z1 = self.tongue
        corner = 2.0
        tab = Polygon(
            [(x0 + corner, z0), (x1, z0), (x1, z1), (x0 + corner, z1),
             (x0, z1 - corner), (x0, z0 + corner)]
        )
        turned = translate(scale(tab, -1, 1, origin=(0, 0)), dx, dy)
        hole = (dx - self.lock_x_mm, dy + (z0 + z1) / 2, self.lock_hole_mm / 2)
        return Cut(circles=(hole,), tabs=(turned,))
