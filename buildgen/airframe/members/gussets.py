"""Gussets: small triangles of sheet in the corners of ribs and trailing-edge stock."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from shapely.geometry import Polygon

from buildgen.airframe.bays import Bay
from buildgen.airframe.blank import Blank, Cut
from buildgen.airframe.members import edges
from buildgen.airframe.members.edges import Edge
from buildgen.airframe.members.skins import sheet_mm
from buildgen.airframe.members.spars import GLUE_GAP_MM, vector
from buildgen.airframe.shop import Shop
from buildgen.airframe.stations import HALF, Place, inner_face, outer_face, places
from buildgen.airframe.surface import AFT, WingShape
from buildgen.part import Joint, Part
from buildgen.problems import DesignError, Problem
from buildgen.solid import Array, Pose

STEP = "Wing: gussets"
PLAY_MM = 0.05
"""From either face, so that it drops in; filled with glue."""
PLAIN = ("rib", HALF)
"""Ribs that carry no more than themselves need none."""


@dataclass(frozen=True, eq=False)
class Gusset:
    """One triangle on one face of a rib, starboard and port."""

    shop: Shop
    place: Place
    edge: Edge
    rib: str
    outboard: bool
    id: str

    @property
    def _face(self) -> Pose:
        return outer_face(self.place) if self.outboard else inner_face(self.place)

    @cached_property
    def _corner(self) -> tuple[Array, Array, Array]:
        """Where rib and stock meet at half depth, and the ways along the stock and the rib."""
        panel, face = self.place.panel, self._face
        a, b = self.edge.axis
        along = (b - a) / np.linalg.norm(b - a)
        normal = face.rotation[:, 2]
        share = float((face.origin - a) @ normal) / float((b - a) @ normal)
        at = a + share * (b - a)
        fraction = 1 - self.edge.size_mm / panel.chord(share * panel.length_mm)
        middle = panel.point(share * panel.length_mm, fraction)
        at = at + panel.up * float((middle - at) @ panel.up)
        ahead = np.cross(normal, panel.up)
        ahead = ahead if float(ahead @ AFT) < 0 else -ahead
        return at, (along if self.outboard else -along), ahead / np.linalg.norm(ahead)

    @property
    def _thick_mm(self) -> float:
        given = self.shop.definition.wing.gusset
        assert given is not None
        return self.shop.thickness(given.material, given.thickness_mm)

    @property
    def _lean_mm(self) -> float:
        """How far a rib that leans against the panel stands off half the sheet's thickness."""
        normal, panel = self._face.rotation[:, 2], self.place.panel
        lean = abs(float(normal @ panel.up)) / abs(float(normal @ panel.along))
        return self._thick_mm / 2 * lean

    @cached_property
    def frame(self) -> Pose:
        """Local x along the stock, z up, half the thickness below the corner."""
        at, along, ahead = self._corner
        up = self.place.panel.up
        flat = along - up * float(along @ up)
        pose = Pose.at(at, flat, ahead)
        return Pose(origin=np.array([0.0, 0.0, -self._thick_mm / 2])).then(pose)

    @cached_property
    def parts(self) -> tuple[Part, ...]:
        given = self.shop.definition.wing.gusset
        assert given is not None
        at, along, ahead = self._corner
        away = along * (PLAY_MM + self._lean_mm) + ahead * PLAY_MM
        ring = np.array([at, at + given.size_mm * along, at + given.size_mm * ahead]) + away
        right = self.shop.plate(
            f"{self.id}R", f"gusset on the {self.place.why}, right", given.material,
            given.thickness_mm, Polygon(self.frame.local(ring)[:, :2]), self.frame, STEP,
            "wing.gusset", grain_deg=45.0,
        )
        return right, right.mirrored(f"{self.id}L", right.name.replace("right", "left"))

    def cut(self, blank: Blank) -> Cut:
        return Cut()

    def joint(self, blank: Blank) -> Joint | None:
        return None

    @property
    def joints(self) -> tuple[Joint, ...]:
        """Its two edges on the rib's face and on the front of the stock."""
        normal = self._face.rotation[:, 2]
        inwards = normal if self.outboard else -normal
        band = (0.0, 2 * (PLAY_MM + self._lean_mm) + GLUE_GAP_MM)
        found = []
        for k, side in ((1, "R"), (-1, "L")):
            rib = self.rib if self.rib == "R0" else f"{self.rib[:-1]}{side}"
            for other, way in ((rib, inwards), (f"{self.edge.letter}{side}", AFT)):
                found.append(Joint("edge to face", f"{self.id}{side}", other, band,
                                   facing=vector(way * (1, k, 1))))
        return tuple(found)


def make(shop: Shop, wing: WingShape, bays: tuple[Bay, ...]) -> Iterable[Gusset]:
    """On both faces of ribs at the root, at breaks, at tips and beside motors."""
    given = shop.definition.wing.gusset
    if given is None:
        return
    if shop.definition.wing.trailing_edge.kind != "stock":
        raise DesignError(Problem("wing.gusset", "Gussets sit before trailing-edge stock.",
                                  'Give [wing.trailing_edge] kind = "stock", or leave them out.'))
    lengths = list(edges.trailing(shop, wing, bays))
    number = 0
    for place in places(shop, wing, bays):
        number += 0 if place.single else 1
        if place.why in PLAIN:
            continue
        rib = "R0" if place.single else f"R{number}R"
        for outboard in (True, False):
            face = place.face_mm - (0.0 if outboard else place.thickness_mm)
            ends = (face, face + given.size_mm) if outboard else (face - given.size_mm, face)
            for edge in lengths:
                inside = edge.ends_mm[0] <= ends[0] and ends[1] <= edge.ends_mm[1]
                if edge.panel is place.panel and inside:
                    _deep_enough(shop, place, edge)
                    yield Gusset(shop, place, edge, rib, outboard,
                                 f"GT{number}{'o' if outboard else 'i'}")


def _deep_enough(shop: Shop, place: Place, edge: Edge) -> None:
    """It must lie inside the wing, clear of capstrips."""
    given = shop.definition.wing.gusset
    assert given is not None
    caps = shop.definition.wing.sheeting
    over = sheet_mm(shop) if caps and caps.capstrip_mm else 0.0
    panel, share = place.panel, place.face_mm / place.panel.length_mm
    fraction = 1 - edge.size_mm / panel.chord(place.face_mm)
    (low, high), (tip_low, tip_high) = panel.root.height(fraction), panel.tip.height(fraction)
    depth = (high - low) * (1 - share) + (tip_high - tip_low) * share
    if depth < given.thickness_mm + 2 * over + 0.5:
        raise DesignError(Problem(
            "wing.gusset.thickness_mm", f"At the {place.why} the wing is {depth:.1f} mm deep"
            " before the trailing-edge stock.",
            f"Take sheet of {max(depth - 2 * over - 0.5, 0):.1f} mm or less, or wider stock."))
