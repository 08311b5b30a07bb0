"""Dihedral braces: a ply plate across a break between panels, behind the webs of a capped spar.

It passes the ribs at the break between the caps, so that they stay in one piece, and is glued to
the webs on both sides of it.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from shapely.geometry import Polygon

from buildgen.airframe.bays import Bay
from buildgen.airframe.blank import Blank, Cut, solid_cut
from buildgen.airframe.members.spars import GLUE_GAP_MM, SparRun, cap_face, pieces, vector
from buildgen.airframe.members.webs import Web
from buildgen.airframe.members.webs import make as make_webs
from buildgen.airframe.shop import Shop
from buildgen.airframe.surface import WingShape
from buildgen.part import Joint, Part
from buildgen.problems import DesignError, Problem
from buildgen.solid import Array, Placed, Pose, Prism

BREAK = "Wing: panels joined"
BELOW_CAP = 0.3
"""The brace stays this share of a cap's height away from it: the ribs keep that and the notch's
depth of wood."""
FLAT_MM = 0.6
"""What glue fills between the webs and a flat plate; more is a kink in plan, or webs that step."""
PLAY_MM = 0.05


@dataclass(frozen=True, eq=False)
class Brace:
    """One brace, starboard and port; across the root one that serves both."""

    shop: Shop
    inner: tuple[SparRun, SparRun] | None
    """Top and bottom cap inboard of the break; None at the root, where the mirror image is."""
    outer: tuple[SparRun, SparRun]
    webs: tuple[Web, ...]
    """Those it is glued to, starboard: the last inboard of the break and the first outboard."""

    @property
    def number(self) -> str:
        top = self.outer[0]
        return f"DB{top.number}{'abcdefgh'[top.piece]}"

    def _corners(self, caps: tuple[SparRun, SparRun], at_start: bool) -> list[Array]:
        """Top and bottom of the glued face: at the break, and at the reach."""
        found = []
        for cap, top in zip(caps, (True, False), strict=True):
            start, way = cap_face(cap, False, BELOW_CAP, top)
            start = start + self._behind * self._aft(cap)
            end = cap.meet if at_start else cap.b
            at = float((end - start) @ way)
            reach = cap.spar.brace_mm * (1 if at_start else -1)
            found += [start + way * at, start + way * (at + reach)]
        return found

    @property
    def _behind(self) -> float:
        """Thickness of the thickest web it lies on."""
        return max(w.thick_mm for w in self.webs)

    def _aft(self, cap: SparRun) -> Array:
        aft = np.cross(cap.bar.axis, cap.run[0].up)
        return aft if aft[0] > 0 else -aft

    @cached_property
    def frame(self) -> Pose:
        """Local x outboard, y up, the glued face at z = 0."""
        ring = self._ring
        middle = ring.mean(axis=0)
        _, _, axes = np.linalg.svd(ring - middle)
        x = axes[0] if axes[0][1] > 0 else -axes[0]
        aft = np.cross(x, (0.0, 0.0, 1.0))
        aft /= np.linalg.norm(aft)
        # Clear of the web that stands furthest aft: on swept spars they are not quite in line.
        clear = float(((ring - middle) @ aft).max()) + PLAY_MM
        return Pose.at(middle + clear * aft, x, (0.0, 0.0, 1.0))

    @property
    def _thick_mm(self) -> float:
        spar = self.outer[0].spar
        return self.shop.thickness(spar.brace_material, spar.brace_thickness_mm)

    @cached_property
    def _ring(self) -> Array:
        """(6, 3) corners on the webs' aft faces, from the inner bottom one round the top."""
        top, top_out, low, low_out = self._corners(self.outer, True)
        if self.inner is None:
            other = [p * (1, -1, 1) for p in (top, top_out, low, low_out)]
        else:
            other = self._corners(self.inner, False)
        break_top, break_low = (top + other[0]) / 2, (low + other[2]) / 2
        return np.array([other[3], other[1], break_top, top_out, low_out, break_low])

    @cached_property
    def parts(self) -> tuple[Part, ...]:
        self._check()
        spar, key = self.outer[0].spar, self.outer[0].key
        outline = Polygon(self.frame.local(self._ring)[:, :2])
        both = self.inner is None
        made = self.shop.plate(
            self.number if both else f"{self.number}R",
            f"dihedral brace of spar {self.outer[0].number}", spar.brace_material,
            spar.brace_thickness_mm, outline, self.frame, BREAK, key, grain_deg=0.0,
        )
        if both:
            return (made,)
        return made, made.mirrored(f"{self.number}L", made.name)

    def _check(self) -> None:
        """The webs' faces must lie in one plane, or a flat plate does not touch them."""
        off = float(np.ptp(self.frame.local(self._ring)[:, 2]))
        if off > FLAT_MM:
            raise DesignError(Problem(
                f"{self.outer[0].key}.brace_mm",
                f"The spar is swept differently on both sides of the break: a flat brace would"
                f" stand off it by {off:.1f} mm.",
                "Sweep the spar alike in both panels (at_chord, at_tip_chord, sweep_mm), or join"
                " them with a tube and joiner_mm.",
            ))

    def cut(self, blank: Blank) -> Cut:
        solid = Placed(Prism(Polygon(self.frame.local(self._ring)[:, :2]), self._thick_mm),
                       self.frame)
        return solid_cut(solid, blank, self.shop.slip_mm)

    def joint(self, blank: Blank) -> Joint | None:
        """Slid through the ribs of one panel before the other panel comes on."""
        if not self.cut(blank).holes:
            return None
        first = self.outer[0]
        middle = blank.pose((0.0, 0.0, blank.thickness_mm / 2))
        inwards = float((middle - first.meet) @ first.run[0].inner_normal) < 0
        caps = self.inner if self.inner is not None and inwards else self.outer
        way = caps[0].bar.axis * (-1 if inwards else 1)
        normal = self.frame.rotation[:, 2]
        way = way - normal * float(way @ normal)
        way /= np.linalg.norm(way)
        axis = blank.pose.rotation.T @ way
        wander = blank.thickness_mm * float(np.hypot(axis[0], axis[1])) / abs(float(axis[2]))
        return Joint("brace in slot", self.parts[0].id, blank.id,
                     (0.0, self.shop.slip_mm + wander + GLUE_GAP_MM), vector(way))

    @property
    def joints(self) -> tuple[Joint, ...]:
        """Its glued face lies on the webs on both sides."""
        x, y, z = vector(-self.frame.rotation[:, 2])
        return tuple(
            Joint("face to face", self.parts[k].id, web.parts[k].id, (0.0, FLAT_MM + GLUE_GAP_MM),
                  facing=(x, y if k == 0 else -y, z))
            for web in self.webs for k in (0, -1)
        )


def make(shop: Shop, wing: WingShape, bays: tuple[Bay, ...]) -> Iterable[Brace]:
    """A brace at every break of a capped spar, where it is asked for."""
    caps = [runs for _, runs in pieces(shop, wing) if runs and runs[0].cap]
    webs = [w for w in make_webs(shop, wing, bays) if not w.fore]
    for tops, bottoms in zip(caps[::2], caps[1::2], strict=True):
        if not tops[0].spar.brace_mm:
            continue
        if tops[0].spar.web == "fore":
            raise DesignError(Problem(
                f"{tops[0].key}.brace_mm", "A brace is glued to webs on the aft faces of the caps.",
                'Give web = "aft" or "both".'))
        both = list(zip(tops, bottoms, strict=True))
        own = [[w for w in webs if w.top.letter == top.letter] for top in tops]
        if tops[0].spar.from_mm == 0 and not tops[0].through and not wing.flat_centre:
            yield Brace(shop, None, both[0], tuple(own[0][:1]))
        for i in range(1, len(both)):
            yield Brace(shop, both[i - 1], both[i], (*own[i - 1][-1:], *own[i][:1]))
