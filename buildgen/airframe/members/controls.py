"""Ailerons, flaps and elevons: false spar, nose, rib tails, hinges and horn.

The ribs ahead stop at the false spar. Everything of the surface is what the wing's envelope keeps
between its two ends; its nose leans back from the hinge line by the throws.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass, replace
from functools import cached_property
from itertools import pairwise

import numpy as np
import shapely
from shapely.geometry import Polygon, box

from buildgen.airframe.bays import Bay
from buildgen.airframe.blank import Bar, Blank, Cut, apply, bar_cut, parts_of, solid_cut
from buildgen.airframe.hinge import (
    LEAF_MM,
    TAB_MM,
    bevel_mm,
    horn_outline,
    leaves,
    ply_horn,
    tape,
)
from buildgen.airframe.members.edges import Edge
from buildgen.airframe.moving import ControlPlace, control_places
from buildgen.airframe.shop import Shop
from buildgen.airframe.stations import places
from buildgen.airframe.surface import WingShape
from buildgen.part import Joint, Part, Plate, Stick
from buildgen.solid import (
    Array,
    Box,
    Common,
    Difference,
    Placed,
    Pose,
    Prism,
    Rod,
    Ruled,
    Shape,
    mesh,
    polygons,
    ring,
)

STEP = "Wing: edges"
MOVING = "Wing: control surfaces"
FAR = 60.0
LETTERS = "abcdefghijklmnopqrstuvwxyz"
GLUE_MM = 0.3
"""What glue may fill between a false spar and a rib cut square to its sheet."""
SLOT_PLAY_MM = 0.05
"""Round a leaf hinge, on each side: pressed in with a drop of glue; common practice, no source."""
BLOCK_MM = (6.5, 16.0, 8.0)
"""Behind the false spar at each leaf: along the chord, along the span, high."""
HORN_BLOCK_MM = 14.0
"""Along the span, the wood in which a horn stands."""


def in_frame(part: Part, pose: Pose) -> Part:
    """A stick whose recipe stands in the aircraft, told in a frame of its own."""
    assert isinstance(part.form, Stick)
    shape = Placed(part.form.shape, pose.inverse)
    return replace(part, form=replace(part.form, shape=shape), pose=pose)


@dataclass(frozen=True, eq=False)
class FalseSpar:
    """The upright sheet at which the ribs stop, between the two whole ribs."""

    place: ControlPlace
    leaf_shapes: tuple[Shape, ...]

    @cached_property
    def thick_mm(self) -> float:
        given = self.place.given
        return self.place.shop.thickness(given.spar_material, given.spar_thickness_mm)

    @cached_property
    def pose(self) -> Pose:
        """Its front face: x along the hinge line, y up, z aft."""
        frame = self.place.line.frame(0.0)
        aft, up = frame.rotation[:, 0], frame.rotation[:, 1]
        back = self.place.given.gap_mm / 2 + self.thick_mm
        return Pose.at(frame.origin - back * aft, self.place.line.axis, up)

    @cached_property
    def outline(self) -> Polygon:
        """The smaller of the wing's sections at both faces, from rib to rib."""
        solid = mesh(Placed(self.place.panel.whole, self.pose.inverse))
        faces = [shapely.union_all(polygons(solid.slice(z)))
                 for z in (0.01, self.thick_mm - 0.01)]
        low, high = (self._ends(s, end) for s, end in zip(self.place.bay_mm, (max, min),
                                                          strict=True))
        merged = faces[0].intersection(faces[1]).intersection(box(low, -FAR, high, FAR))
        return max(parts_of(merged), key=lambda p: p.area)

    def _ends(self, s_mm: float, pick: object) -> float:
        """x at which a plane across the panel cuts it square: the shorter of its corners."""
        plane = self.place.panel.plane(s_mm)
        normal = plane.rotation[:, 2]
        slope = float(self.pose.rotation[:, 0] @ normal)
        found = []
        for y in (-10.0, 10.0):
            for z in (0.0, self.thick_mm):
                here = self.pose((0.0, y, z))
                found.append(float((plane.origin - here) @ normal) / slope)
        return max(found) if pick is max else min(found)

    @cached_property
    def parts(self) -> tuple[Part, ...]:
        given, n = self.place.given, self.place.number
        blank = Blank(f"AF{n}R", self.pose, self.thick_mm, self.outline)
        cuts = [solid_cut(s, blank, SLOT_PLAY_MM) for s in self.leaf_shapes]
        outline, circles, _ = apply(self.outline, cuts)
        part = self.place.shop.plate(
            blank.id, f"false spar of the {given.name}, right", given.spar_material,
            given.spar_thickness_mm, outline, self.pose, STEP, self.place.key, circles=circles,
        )
        return part, part.mirrored(f"AF{n}L", f"false spar of the {given.name}, left")

    def _s(self, blank: Blank) -> float:
        """Middle of a rib along the panel; outside of it for another panel's rib."""
        panel = self.place.panel
        middle = blank.pose.origin + blank.pose.rotation[:, 2] * blank.thickness_mm / 2
        s = float((middle - panel.root.nose) @ panel.along)
        away = float(abs((middle - panel.root.nose - s * panel.along) @ panel.up))
        return s if away < 0.5 * panel.length_mm else -FAR

    def cut(self, blank: Blank) -> Cut:
        """Everything of an inner rib behind the front face."""
        low, high = self.place.bay_mm
        if not low < self._s(blank) < high:
            return Cut()
        region = np.array([[0, -FAR], [9 * FAR, -FAR], [9 * FAR, FAR], [0, FAR]])
        x, y = self.pose.rotation[:, 2], self.pose.rotation[:, 1]
        reach = 2 * FAR * self.pose.rotation[:, 0]
        bar = Bar(self.pose.origin - reach, self.pose.origin + reach
                  + self.place.line.length_mm * self.pose.rotation[:, 0], x, y, region)
        return bar_cut(bar, blank, self.place.shop.press_mm)

    def joint(self, blank: Blank) -> Joint | None:
        """The ribs' ends on its front face, its own ends on the whole ribs' faces."""
        (low, high), rib = self.place.bay_mm, self.place.rib_mm
        s = self._s(blank)
        lean = abs(float(self.pose.rotation[:, 0] @ blank.pose.rotation[:, 0]))
        if low < s < high:
            slack = self.place.shop.press_mm + blank.thickness_mm * lean + GLUE_MM
            return Joint("stick in notch", self.parts[0].id, blank.id, (0.0, slack),
                         (-1.0, 0.0, 0.0))
        if low - 1.5 * rib < s < low or high < s < high + 1.5 * rib:
            return Joint("face to face", self.parts[0].id, blank.id,
                         (0.0, self.thick_mm * lean + 2 * GLUE_MM))
        return None

    @property
    def joints(self) -> tuple[Joint, ...]:
        return ()


@dataclass(frozen=True, eq=False)
class MovingSurface:
    """What hangs on the false spar, both sides."""

    place: ControlPlace
    marks: tuple[float, ...]
    """Middles of the wing's ribs from the whole one inboard to that outboard, along the panel."""

    @property
    def shop(self) -> Shop:
        return self.place.shop

    @property
    def n(self) -> int:
        return self.place.number

    @cached_property
    def frame(self) -> Pose:
        """On the hinge line at its inner end: x aft, y up."""
        return self.place.line.frame(0.0)

    @cached_property
    def spar(self) -> FalseSpar:
        rooms = (p.shape for p in self.leaves if p.shape is not None)
        return FalseSpar(self.place, (*rooms, *self._torque_room(through=True)))

    # ------------------------------------------------------------ hinges

    @cached_property
    def bay_middles(self) -> list[float]:
        """Along the hinge line: middles of the bays between ribs, but that of the horn."""
        line, panel = self.place.line, self.place.panel
        scale = 1 / float(line.axis @ panel.along)
        found = []
        for a, b in pairwise(self.marks):
            middle = (a + b) / 2
            horn = self.place.horn is not None and a < self.place.arm_s_mm < b
            if b - a > BLOCK_MM[1] + 6 and not horn:
                found.append((middle - self.place.ends_mm[0]) * scale)
        return found

    @cached_property
    def leaf_stations(self) -> tuple[float, ...]:
        """Each in the middle of a bay, nearest to where an even pitch wants it."""
        if self.place.given.hinges == "tape":
            return ()
        free = list(self.bay_middles)
        found = []
        for wanted in self.place.line.stations(self.place.given.pitch_mm):
            if free:
                best = min(free, key=lambda s: abs(s - wanted))
                free.remove(best)
                found.append(best)
        return tuple(sorted(found))

    @cached_property
    def leaves(self) -> list[Part]:
        name = f"hinge of the {self.place.given.name}, right"
        return leaves(self.place.line, self.leaf_stations, f"AH{self.n}R", name, MOVING,
                      self.place.key, self.lift_mm)

    @property
    def lift_mm(self) -> float:
        """Leaves lie in the wood, however high the hinge line is: just under a skin."""
        return {"centre": 0.0, "top": -1.5, "bottom": 1.5}[self.place.given.hinge]

    def _slots(self) -> tuple[Shape, ...]:
        """Room for the leaves in the wood."""
        c, a, t = (v / 2 + SLOT_PLAY_MM for v in LEAF_MM)
        room = Box((-c, -t, -a), (c, t, a))
        return tuple(Placed(room, p.pose) for p in self.leaves)

    def _torque_room(self, through: bool = False) -> tuple[Shape, ...]:
        """Groove and hole for a torque rod's end; `through` for the notch in the false spar."""
        if self.place.given.drive != "torque-rod":
            return ()
        bend, end = self.place.torque_leg
        r = self.place.given.rod_mm / 2 + SLOT_PLAY_MM
        start = self.place.line.start - 6.0 * self.place.line.axis
        reach = float(np.linalg.norm(bend - start)) + r
        frame = Pose.at(start, self.place.line.axis, self.frame.rotation[:, 1])
        if through:
            deep = self.place.given.gap_mm / 2 + self.spar_mm + 1.0
            return (Placed(Box((0.0, -r, -deep), (reach, r, 1.0)), frame),)
        leg = Placed(Rod(r, float(np.linalg.norm(end - bend)) + 0.2),
                     Pose.at(bend, end - bend, self.frame.rotation[:, 1]))
        return Placed(Rod(r, reach), frame), leg

    @property
    def spar_mm(self) -> float:
        """Thickness of the false spar."""
        given = self.place.given
        return self.shop.thickness(given.spar_material, given.spar_thickness_mm)

    # ------------------------------------------------------------ wood

    @cached_property
    def ends(self) -> tuple[Pose, Pose]:
        panel = self.place.panel
        a, b = (panel.plane(s) for s in self.place.ends_mm)
        return a, b

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

    @property
    def solid(self) -> bool:
        return self.place.given.kind != "built-up"

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

    # ------------------------------------------------------------ blocks and horn

    @cached_property
    def blocks(self) -> list[Part]:
        """Behind the false spar, where a leaf wants more than a sheet's thickness to hold it."""
        deep, wide, high = BLOCK_MM
        given = self.place.given
        room = self._slots()
        found = []
        front = -given.gap_mm / 2 - self.spar.thick_mm
        for k, (leaf, hole) in enumerate(zip(self.leaves, room, strict=True), start=1):
            s = self.leaf_stations[k - 1]
            above, below = self._room_at(s)
            top, low = min(high / 2, above - 1.0), min(high / 2, below - 0.5)
            block = Placed(Box((front - deep, -low, -wide / 2), (front, top, wide / 2)), leaf.pose)
            part = self.shop.stick(
                f"AB{self.n}{LETTERS[k - 1]}R", f"hinge block of the {given.name}, right",
                given.material, f"{deep:g} x {top + low:.1f}", Difference(block, (hole,)), wide,
                STEP, self.place.key)
            found.append(in_frame(part, leaf.pose))
        return found

    def _room_at(self, s_line: float) -> tuple[float, float]:
        """Wood above and below the leaf at a station of the hinge line."""
        s = self.place.ends_mm[0] + s_line * float(
            self.place.line.axis @ self.place.panel.along)
        above, below = self.place.depth_mm(s)
        return above - self.lift_mm, below + self.lift_mm

    def _horn_tab(self) -> tuple[float, float]:
        """x of the horn's tab from the hinge line, and how deep it reaches below the skin."""
        given = self.place.given
        above, below = self.place.depth_mm(self.place.arm_s_mm)
        back = max(bevel_mm(above, below, self.place.throw_deg))
        near = back + 2.0 if self.solid else given.nose_mm + 1.0
        return given.gap_mm / 2 + near, 0.7 * (above + below)

    @cached_property
    def horn(self) -> Part | None:
        horn, given = self.place.horn, self.place.given
        if horn is None or given.drive == "torque-rod":
            return None
        near, deep = self._horn_tab()
        skin = self._skin_mm(near)
        deep = min(deep, 0.75 * (skin + self._skin_mm(near + TAB_MM, other=True)))
        outline, circles = horn_outline(horn.radius_mm, near, skin, deep)
        return ply_horn(self.shop, horn, outline, circles, f"horn of the {given.name}, right",
                        given.horn_material, given.horn_thickness_mm, MOVING)

    def _skin_mm(self, x_mm: float, other: bool = False) -> float:
        """From the hinge line to the skin on the horn's side (or the other) at x behind it."""
        assert self.place.horn is not None
        horn = self.place.horn
        pose = self.place.panel.plane(self.place.arm_s_mm)
        outline = self.place.panel.outline(pose)
        aft = np.cross(horn.axis, horn.side)
        at = pose.local(horn.hinge_mm + x_mm * aft)[:2]
        slice_ = outline.intersection(box(at[0] - 0.05, -9 * FAR, at[0] + 0.05, 9 * FAR))
        low, high = slice_.bounds[1] - at[1], slice_.bounds[3] - at[1]
        up = (self.place.given.horn_side == "up") != other
        return float(high if up else -low)

    def _horn_room(self) -> tuple[Shape, ...]:
        """The slot of the horn's tab in a solid surface."""
        return (self._horn_slot(),) if self.solid and self.horn is not None else ()

    def _horn_slot(self) -> Shape:
        assert self.horn is not None and isinstance(self.horn.form, Plate)
        play = self.shop.press_mm + SLOT_PLAY_MM
        grown = self.horn.form.outline.buffer(play, join_style="mitre")
        lift = Pose(origin=np.array([0.0, 0.0, -play]))
        return Placed(Prism(grown, self.horn.form.thickness_mm + 2 * play),
                      lift.then(self.horn.pose))

    @cached_property
    def horn_block(self) -> Part | None:
        """Solid wood between the skins behind the nose, for the horn to stand in."""
        if self.solid or self.horn is None or self.place.horn is None:
            return None
        given = self.place.given
        front = given.nose_mm + given.gap_mm / 2
        wide = HORN_BLOCK_MM / 2
        back = self._horn_tab()[0] + TAB_MM + 1.5
        frame = self.place.horn
        aft = np.cross(frame.axis, frame.side)
        pose = Pose.at(frame.hinge_mm, aft, frame.side)
        room = Placed(Box((front, -FAR, -wide), (back, FAR, wide)), pose)
        body = Difference(Common((self.place.panel.envelope(*self.ends), room)),
                          (self._horn_slot(),))
        part = self.shop.stick(f"AQ{self.n}R", f"horn block of the {given.name}, right",
                               given.material, f"{back - front:g} x {2 * wide:g} block", body,
                               2 * wide, MOVING, self.place.key)
        return in_frame(part, pose)

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
