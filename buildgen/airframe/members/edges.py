"""Leading-edge stick, interrupted by motor bays, and trailing-edge stock.

Both are shaped to the section after gluing: their solid is what the wing's envelope keeps of the
raw stock, so their weight is the shaped one.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from functools import cached_property
from typing import Literal

import numpy as np

from buildgen.airframe.bays import Bay, on_edge
from buildgen.airframe.blank import Bar, Blank, Cut, bar_cut
from buildgen.airframe.moving import fixed_edge
from buildgen.airframe.shop import Shop
from buildgen.airframe.surface import AFT, Panel, WingShape
from buildgen.part import Joint, Part
from buildgen.problems import DesignError, Problem
from buildgen.solid import Array, Common, Pose, Ruled, Shape, circle_points, ring

STEP = "Wing: edges"
FAR = 60.0
BEVEL_MM = 0.3
"""What glue may fill between a stick and a rib that is cut square to its sheet."""


@dataclass(frozen=True, eq=False)
class Edge:
    """A length of edge stock along one panel, between two planes across the span."""

    shop: Shop
    kind: Literal["square", "round", "strip", "stock"]
    name: str
    letter: str
    key: str
    material: str
    size_mm: float
    panel: Panel
    inner: Pose
    outer: Pose
    ends_mm: tuple[float, float]
    """Along the panel: where it begins and ends, for the ribs that ask."""
    through: bool = False

    @cached_property
    def axis(self) -> tuple[Array, Array]:
        """Reference line, at the panel's two ends: nose corner, or front of the trailing edge."""
        found = []
        for placed in (self.panel.root, self.panel.tip):
            middle = (len(placed.points) - 1) // 2
            if self.kind == "stock":
                found.append(placed.points[0] / 2 + placed.points[-1] / 2 - self.size_mm * AFT)
            else:
                found.append(placed.points[middle])
        return found[0], found[1]

    def bar(self, section: Array) -> Bar:
        """A bar of this section along the reference line, well beyond both ends."""
        a, b = self.axis
        way = (b - a) / np.linalg.norm(b - a)
        return Bar(a - 20 * way, b + 20 * way, AFT, self.panel.up, section)

    @property
    def raw(self) -> Array:
        """Section of the stock before shaping, x aft of the reference line."""
        s = self.size_mm
        if self.kind == "square":
            h = s / np.sqrt(2)
            return np.array([[0, 0], [h, -h], [2 * h, 0], [h, h]])
        if self.kind == "round":
            return circle_points(s / 2, 48) + (s / 2, 0)
        if self.kind == "strip":
            return np.array([[-FAR, -FAR], [s, -FAR], [s, FAR], [-FAR, FAR]])
        return np.array([[0, -FAR], [2 * s, -FAR], [2 * s, FAR], [0, FAR]])

    @cached_property
    def shape(self) -> Shape:
        bar = self.bar(self.raw)
        flat = np.vstack([self.raw, self.raw[:1]])
        offset = np.outer(flat[:, 0], bar.x) + np.outer(flat[:, 1], bar.y)
        stock = Ruled(ring((bar.start + offset, False)), ring((bar.end + offset, False)))
        return Common((self.panel.envelope(self.inner, self.outer), stock))

    @cached_property
    def parts(self) -> tuple[Part, ...]:
        a, b = self.axis
        share = (self.ends_mm[1] - self.ends_mm[0]) / self.panel.length_mm
        length = float(np.linalg.norm(b - a)) * share
        right = self.shop.stick(
            f"{self.letter}R", f"{self.name}, right", self.material, self.size,
            self.shape, length, STEP, self.key,
        )
        return right, right.mirrored(f"{self.letter}L", f"{self.name}, left")

    @property
    def size(self) -> str:
        """What to ask for: the stock, not the shaped stick."""
        if self.kind == "round":
            return f"{self.size_mm:g} rod"
        if self.kind == "square":
            return f"{self.size_mm:g} x {self.size_mm:g}"
        depths = []
        for placed in (self.panel.root, self.panel.tip):
            share = self.size_mm / placed.chord_mm
            low, high = placed.height(share if self.kind == "strip" else 1 - share)
            depths.append(high - low)
        depth = max(depths)
        if self.kind == "strip":
            return f"{np.ceil(depth):.0f} x {self.size_mm:g}"
        return f"{np.ceil(depth):.0f} x {self.size_mm:g} tapered"

    def cut(self, blank: Blank) -> Cut:
        """Everything of the rib ahead of the stick's back, or behind the stock's front."""
        if not self._meets(blank):
            return Cut()
        s = self.size_mm
        if self.kind == "stock":
            regions = [np.array([[0, -FAR], [FAR * 3, -FAR], [FAR * 3, FAR], [0, FAR]])]
        elif self.kind == "strip":
            regions = [np.array([[-2 * FAR, -FAR], [s, -FAR], [s, FAR], [-2 * FAR, FAR]])]
        elif self.kind == "square":
            apex = s * np.sqrt(2)
            regions = [np.array([[apex, 0], [apex - FAR, FAR], [apex - FAR, -FAR]])]
        else:
            regions = [
                np.array([[-FAR, -FAR], [s / 2, -FAR], [s / 2, FAR], [-FAR, FAR]]),
                circle_points(s / 2, 64, outside=True) + (s / 2, 0),
            ]
        play = self.shop.press_mm
        cuts = [bar_cut(self.bar(region), blank, play) for region in regions]
        return Cut(holes=tuple(h for c in cuts for h in c.holes))

    def _meets(self, blank: Blank) -> bool:
        """Does the rib stand within this length of the edge?"""
        middle = blank.pose.origin + blank.pose.rotation[:, 2] * blank.thickness_mm / 2
        along = float((middle - self.panel.root.nose) @ self.panel.along)
        if self.through and abs(float(middle[1])) < 1e-6:
            return True
        return self.ends_mm[0] - 1e-6 < along < self.ends_mm[1] + 1e-6

    def joint(self, blank: Blank) -> Joint | None:
        if not self.cut(blank).holes:
            return None
        ahead = -1.0 if self.kind == "stock" else 1.0
        play = self.shop.press_mm
        axis = blank.pose.rotation.T @ self.bar(self.raw).axis
        slack = play + BEVEL_MM + blank.thickness_mm * abs(float(axis[0] / axis[2]))
        return Joint("stick in notch", self.parts[0].id, blank.id, (0.0, slack),
                     (ahead, 0.0, 0.0))

    @property
    def joints(self) -> tuple[Joint, ...]:
        return ()


def leading(shop: Shop, wing: WingShape, bays: tuple[Bay, ...]) -> Iterable[Edge]:
    """The leading-edge stick of each panel, in lengths between the motor bays."""
    given = shop.definition.wing.leading_edge
    if given.kind == "none":
        return
    for panel in wing.panels:
        own = on_edge(bays, panel, rear=False)
        marks = [0.0, *(m for b in own for m in (b.inner_face_mm, b.outer_face_mm)),
                 panel.length_mm]
        for i, (low, high) in enumerate(zip(marks[::2], marks[1::2], strict=True)):
            letter = f"LE{panel.index + 1}" + ("abcdefgh"[i] if own else "")
            inner, outer = _ends(panel, low, high)
            yield Edge(
                shop, given.kind, f"leading edge, panel {panel.index + 1}", letter,
                "wing.leading_edge", given.material, given.size_mm, panel, inner, outer,
                (low, high), i == 0 and panel.index == 0 and wing.flat_centre,
            )


def trailing(shop: Shop, wing: WingShape, bays: tuple[Bay, ...]) -> Iterable[Edge]:
    """The trailing-edge stock of each panel, in lengths between what moves and what pushes."""
    given = shop.definition.wing.trailing_edge
    if given.kind != "stock":
        return
    for panel in wing.panels:
        lengths = between_pushers(fixed_edge(shop, wing, panel), on_edge(bays, panel, rear=True))
        for i, (low, high) in enumerate(lengths):
            letter = f"TE{panel.index + 1}" + ("abcdefgh"[i] if len(lengths) > 1 else "")
            inner, outer = _ends(panel, low, high)
            yield Edge(
                shop, "stock", f"trailing edge, panel {panel.index + 1}", letter,
                "wing.trailing_edge", given.material, given.width_mm, panel, inner, outer,
                (low, high), low == 0 and panel.index == 0 and wing.flat_centre,
            )


def between_pushers(
    lengths: list[tuple[float, float]], own: list[Bay]
) -> list[tuple[float, float]]:
    """Lengths of fixed trailing edge without the bays of mounts that sit on it.

    Raises:
        DesignError: a bay lies where the edge moves.
    """
    for bay in own:
        faces = bay.inner_face_mm, bay.outer_face_mm
        holds = [(low, high) for low, high in lengths if low <= faces[0] and faces[1] <= high]
        if not holds:
            raise DesignError(Problem(
                "power.stations_mm", f"The mount of motor {bay.index} at {bay.span_mm:g} mm sits"
                " on a trailing edge that moves.",
                "Move the motor or the moving surface, or take mount.edge = \"leading\"."))
        at = lengths.index(holds[0])
        lengths = [*lengths[:at], (holds[0][0], faces[0]), (faces[1], holds[0][1]),
                   *lengths[at + 1:]]
    return lengths


def _ends(panel: Panel, low: float, high: float) -> tuple[Pose, Pose]:
    """End planes: the panel's own where the edge reaches them."""
    inner = panel.end_plane(False) if low <= 0 else panel.plane(low)
    outer = panel.end_plane(True) if high >= panel.length_mm else panel.plane(high)
    return inner, outer
