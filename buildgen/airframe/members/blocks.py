"""A trailing edge of triangular blocks: lengths of stock between ribs that reach the edge."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass, field
from itertools import pairwise

from buildgen.airframe.bays import Bay, on_edge
from buildgen.airframe.blank import Blank, Cut
from buildgen.airframe.members.edges import Edge, between_pushers
from buildgen.airframe.members.spars import GLUE_GAP_MM, vector
from buildgen.airframe.moving import fixed_edge
from buildgen.airframe.shop import Shop
from buildgen.airframe.stations import HALF, Place, inner_face, outer_face, places
from buildgen.airframe.surface import WingShape
from buildgen.part import Joint

LEAST_MM = 6.0
"""A narrower bay gets no block."""


@dataclass(frozen=True, eq=False)
class Block(Edge):
    """One block between two ribs, starboard and port; the ribs stay whole."""

    ribs: tuple[str, str] = field(default=("", ""))
    """Ids of the starboard ribs inboard and outboard of it."""

    def cut(self, blank: Blank) -> Cut:
        return Cut()

    def joint(self, blank: Blank) -> Joint | None:
        return None

    @property
    def joints(self) -> tuple[Joint, ...]:
        """Its two ends glued to the faces of the ribs."""
        found = []
        for rib, plane, sign in zip(self.ribs, (self.inner, self.outer), (1, -1), strict=True):
            x, y, z = vector(sign * plane.rotation[:, 2])
            for side, mirror in (("R", 1), ("L", -1)):
                other = rib if rib == "R0" else f"{rib[:-1]}{side}"
                found.append(Joint("edge to face", f"{self.letter}{side}", other,
                                   (0.0, GLUE_GAP_MM), facing=(x, mirror * y, z)))
        return tuple(found)


def make(shop: Shop, wing: WingShape, bays: tuple[Bay, ...]) -> Iterable[Block]:
    """A block in every bay whose edge neither moves nor carries a mount."""
    given = shop.definition.wing.trailing_edge
    if given.kind != "blocks":
        return
    fixed = {panel.index: between_pushers(fixed_edge(shop, wing, panel),
                                          on_edge(bays, panel, rear=True))
             for panel in wing.panels}
    for number, (near, far) in enumerate(pairwise(_whole(shop, wing, bays)), start=1):
        (rib, a), (other, b) = near, far
        low = a.face_mm if a.panel is b.panel else 0.0
        high = b.face_mm - b.thickness_mm
        clear = any(x - 1e-6 <= low and high <= y + 1e-6 for x, y in fixed[b.panel.index])
        if not clear or high - low < LEAST_MM:
            continue
        inner = outer_face(a)
        yield Block(
            shop, "stock", f"trailing-edge block {number}", f"TB{number}", "wing.trailing_edge",
            given.material, given.width_mm, b.panel, inner, inner_face(b), (low, high),
            ribs=(rib, other),
        )


def _whole(
    shop: Shop, wing: WingShape, bays: tuple[Bay, ...]
) -> Iterable[tuple[str, Place]]:
    """Every rib that reaches the trailing edge with its id, from the root out."""
    number = 0
    for place in places(shop, wing, bays):
        number += 0 if place.single else 1
        if place.why != HALF:
            yield "R0" if place.single else f"R{number}R", place
