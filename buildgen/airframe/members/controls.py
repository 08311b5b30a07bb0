"""Ailerons, flaps and elevons: false spar, nose, rib tails, hinges and horn.

The ribs ahead stop at the false spar. Everything of the surface is what the wing's envelope keeps
between its two ends; its nose leans back from the hinge line by the throws.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass, replace
from functools import cached_property

import numpy as np
from shapely.geometry import Polygon, box

from buildgen.airframe.bays import Bay
from buildgen.airframe.blank import Bar, Blank, Cut, apply, bar_cut, parts_of
from buildgen.airframe.hinge import bevel_mm, tape
from buildgen.airframe.members.control_hinges import LETTERS, MOVING, in_frame
from buildgen.airframe.members.control_horn import Horned
from buildgen.airframe.members.edges import Edge
from buildgen.airframe.members.false_spar import FAR, GLUE_MM, SLOT_PLAY_MM, FalseSpar
from buildgen.airframe.moving import control_places
from buildgen.airframe.shop import Shop
from buildgen.airframe.stations import places
from buildgen.airframe.surface import WingShape
from buildgen.part import Joint, Part, Plate
from buildgen.solid import Array, Common, Difference, Pose, Ruled, Shape, ring


@dataclass(frozen=True, eq=False)
class MovingSurface(Horned):
    """What hangs on the false spar, both sides."""

    def _region(self, back_mm: float) -> Shape:
        """The wedge behind the hinge line, leaning back by the throws, to `back_mm` aft."""
        given = self.place.given
        above = {"top": 0.0}.get(given.hinge, FAR)
        below = {"bottom": 0.0}.get(given.hinge, FAR)
        top, low = bevel_mm(above, below, self.place.throw_deg)
        g = given.gap_mm / 2
        flat = np.array([[g, 0.0], [g + low, -FAR], [g + FAR * 9, -FAR],
                         [g + FAR * 9, FAR], [g + top, FAR]])
        whole = Polygon(flat).intersection(box(-FAR, -FAR, back_mm, FAR))
        corners = np.asarray(whole.exterior.coords)[:-1]
        return self._swept(corners)

    def _swept(self, corners: Array) -> Shape:
        """A bar of this section along the hinge line, beyond both ends."""
        x, y = self.frame.rotation[:, 0], self.frame.rotation[:, 1]
        flat = np.vstack([corners, corners[:1]])
        offset = np.outer(flat[:, 0], x) + np.outer(flat[:, 1], y)
        line = self.place.line
        a, b = line.start - 40 * line.axis, line.end + 40 * line.axis
        return Ruled(ring((a + offset, False)), ring((b + offset, False)))

    @cached_property
    def nose(self) -> Part:
        """The nose stick, or the whole of a solid surface."""
        given, line = self.place.given, self.place.line
        back = 8 * FAR if self.solid else given.nose_mm + given.gap_mm / 2
        body: Shape = Common((self.place.panel.envelope(*self.ends), self._region(back)))
        room = [*self._slots(), *self._horn_room(), *self._torque_room()]
        if room:
            body = Difference(body, tuple(room))
        words = {"built-up": "nose of the ", "strip": "", "block": ""}[given.kind]
        letter = "S" if self.solid else "N"
        part = self.shop.stick(f"A{letter}{self.n}R", f"{words}{given.name}, right",
                               given.material, self._stock(back), body, line.length_mm, MOVING,
                               self.place.key)
        x, up = self.frame.rotation[:, 0], self.frame.rotation[:, 1]
        return in_frame(part, Pose.at(self.frame.origin, x, np.cross(up, x)))

    def _stock(self, back_mm: float) -> str:
        """What to ask for: the stock, not the shaped stick."""
        place = self.place
        deep = max(sum(place.depth_mm(s)) for s in place.ends_mm)
        wide = back_mm
        if self.solid:
            wide = max(place.panel.chord(s) * (1 - place.fraction(s)) for s in place.ends_mm)
        kind = {"built-up": "", "strip": " tapered", "block": " block"}[place.given.kind]
        return f"{np.ceil(deep):.0f} x {np.ceil(wide):.0f}{kind}"

    @cached_property
    def edge(self) -> Edge | None:
        """The surface's own trailing edge."""
        given = self.place.given
        if self.solid:
            return None
        return Edge(self.shop, "stock", f"trailing edge of the {given.name}", f"AT{self.n}",
                    self.place.key, given.material, given.edge_mm, self.place.panel, *self.ends,
                    self.place.ends_mm)

    @cached_property
    def tails(self) -> list[Part]:
        """Ribs of the surface: one at either end, and one behind each rib of the wing."""
        given = self.place.given
        if self.edge is None:
            return []
        thick = self.shop.thickness(given.material, given.rib_thickness_mm)
        low, high = self.place.ends_mm
        inner = [m + thick / 2 for m in self.marks[1:-1]]
        faces = [low + thick, *(f for f in inner if low + 2 * thick < f < high - thick), high]
        return [self._tail(k, face, thick) for k, face in enumerate(faces, start=1)]

    def _tail(self, k: int, face_mm: float, thick: float) -> Part:
        given = self.place.given
        assert self.edge is not None
        panel = self.place.panel
        pose = panel.plane(face_mm)
        inner = Pose(pose.rotation, pose.origin + pose.rotation[:, 2] * thick)
        other = Polygon(pose.local(panel.ring(inner))[:, :2])
        whole = max(parts_of(panel.outline(pose).intersection(other)), key=lambda p: p.area)
        id = f"AR{self.n}{LETTERS[k - 1]}R"
        blank = Blank(id, pose, thick, whole)
        outline, _, _ = apply(whole, [self._ahead(blank), self.edge.cut(blank)])
        return self.shop.plate(id, f"rib tail of the {given.name}, right", given.material,
                               given.rib_thickness_mm, outline, pose, MOVING, self.place.key,
                               grain_deg=0.0)

    def _ahead(self, blank: Blank) -> Cut:
        """Everything of a rib ahead of the nose's back."""
        back = self.place.given.nose_mm + self.place.given.gap_mm / 2
        region = np.array([[-9 * FAR, -FAR], [back, -FAR], [back, FAR], [-9 * FAR, FAR]])
        x, y = self.frame.rotation[:, 0], self.frame.rotation[:, 1]
        line = self.place.line
        reach = 2 * FAR * line.axis
        return bar_cut(Bar(line.start - reach, line.end + reach, x, y, region), blank,
                       self.shop.press_mm)

    # ------------------------------------------------------------ the member

    @cached_property
    def right(self) -> list[Part]:
        found = [*self.blocks, self.nose, *self.tails]
        found += [self.edge.parts[0]] if self.edge else []
        found += [p for p in (self.horn_block, self.horn) if p is not None]
        if self.place.given.hinges == "tape":
            found.append(tape(self.place.line, f"AH{self.n}R",
                              f"hinge of the {self.place.given.name}, right", MOVING,
                              self.place.key))
        found += self.leaves
        return [replace(p, step=p.step if p.id.startswith("AB") else MOVING) for p in found]

    @cached_property
    def parts(self) -> tuple[Part, ...]:
        pairs = ((p, p.mirrored(other_side(p.id), p.name.replace("right", "left")))
                 for p in self.right)
        return tuple(p for pair in pairs for p in pair)

    def cut(self, blank: Blank) -> Cut:
        return Cut()

    def joint(self, blank: Blank) -> Joint | None:
        return None

    @property
    def joints(self) -> tuple[Joint, ...]:
        found = [*self._hinged(), *self._glued()]
        return tuple(j for joint in found for j in (joint, mirrored_joint(joint)))

    def _hinged(self) -> Iterable[Joint]:
        gap = self.place.given.gap_mm
        lean = max(max(bevel_mm(*self.place.depth_mm(s), self.place.throw_deg))
                   for s in self.place.ends_mm)
        spar, nose = f"AF{self.n}R", self.nose.id
        yield Joint("hinged", nose, spar, (0.7 * gap, 1.3 * gap + lean))
        x, y, z = (float(v) for v in self.frame.rotation[:, 0])
        band = (0.0, 2 * SLOT_PLAY_MM + 0.1)
        for leaf in self.leaves:
            yield Joint("tab in slot", leaf.id, spar, band, (-x, -y, -z))

    def _glued(self) -> Iterable[Joint]:
        nose = self.nose.id
        lean = abs(float(self.frame.rotation[:, 0] @ self.place.panel.along))
        for tail in self.tails:
            thick = tail.form.thickness_mm if isinstance(tail.form, Plate) else 0.0
            slack = self.shop.press_mm + thick * lean + GLUE_MM
            yield Joint("stick in notch", nose, tail.id, (0.0, slack), (1.0, 0.0, 0.0))
            assert self.edge is not None
            yield Joint("stick in notch", self.edge.parts[0].id, tail.id, (0.0, slack),
                        (-1.0, 0.0, 0.0))
        for block in self.blocks:
            yield Joint("face to face", block.id, f"AF{self.n}R", (0.0, GLUE_MM))
        if self.horn is not None:
            x, y, z = (float(-v) for v in self.horn.pose.rotation[:, 1])
            holder = self.horn_block.id if self.horn_block else nose
            yield Joint("tab in slot", self.horn.id, holder, (0.0, 0.3), (x, y, z))


def other_side(id: str) -> str:
    """The id of the part on the left, from that on the right: the last R of its letters."""
    k = id.rindex("R")
    return f"{id[:k]}L{id[k + 1:]}"


def mirrored_joint(joint: Joint) -> Joint:
    """The same joint on the left."""
    way = joint.way and (joint.way[0], -joint.way[1], joint.way[2])
    return replace(joint, inner=other_side(joint.inner), outer=other_side(joint.outer), way=way)


def make(
    shop: Shop, wing: WingShape, bays: tuple[Bay, ...]
) -> Iterable[FalseSpar | MovingSurface]:
    """Both members of every moving surface."""
    ribs = places(shop, wing, bays)
    for place in control_places(shop, wing):
        low, high = place.bay_mm
        margin = 1.5 * place.rib_mm
        middles = (r.face_mm - r.thickness_mm / 2 for r in ribs if r.panel is place.panel)
        surface = MovingSurface(place, tuple(
            m for m in middles if low - margin < m < high + margin))
        yield surface.spar
        yield surface
