"""Sheeting and capstrips: sheet glued on the ribs, which are inset by its thickness."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass, replace
from functools import cached_property

import numpy as np
from shapely.geometry import box

from buildgen.airframe.bays import Bay, on_edge
from buildgen.airframe.blank import Blank, Cut, solid_cut
from buildgen.airframe.members.spars import GLUE_GAP_MM, vector
from buildgen.airframe.shop import Shop
from buildgen.airframe.skin import Line, Skin
from buildgen.airframe.surface import AFT, Panel, WingShape
from buildgen.form import Formed, Plate
from buildgen.part import Joint, Part
from buildgen.problems import DesignError, Problem
from buildgen.solid import Pose

SHEETING = "Wing: sheeting"
THIN_TAIL_MM = 1.0
"""A rib's tail thinner than this between two sheets breaks off; it ends there instead."""
TRIM_MM = 2.0
"""Trimmed from either edge of a sheet of stock; common practice, no source."""
MOUNT_CLEAR_MM = 13.0
"""Behind the saddle of a mount: its pocket follows the bare ribs so far."""


@dataclass(frozen=True, eq=False)
class Sheet:
    """One sheet or capstrip on one surface, starboard and port."""

    shop: Shop
    skin: Skin
    id: str
    name: str
    material: str
    nominal_mm: float
    step: str
    key: str
    low_mm: float
    high_mm: float
    """Along the panel: where it begins and ends, for the ribs that ask."""
    strip_mm: float = 0.0
    """Width of a capstrip, cut from strip wood; 0 for sheet that is cut out."""
    only: str = ""
    """Id of the one rib it lies on; empty for all that it meets."""
    butts: tuple[str, ...] = ()
    """Ids, without their side, of what its edges are glued to."""

    @cached_property
    def parts(self) -> tuple[Part, ...]:
        right = self._strip() if self.strip_mm else self._sheet()
        return right, right.mirrored(f"{self.id}L", f"{self.name}, left")

    def _sheet(self) -> Part:
        grain = 0.0 if self.shop.material(self.material, self.key, "sheet").grain else None
        form = Plate(self.skin.flat, self.skin.thick_mm, (), grain, (), False,
                     Formed(self.skin.shape))
        return self.shop.part(f"{self.id}R", f"{self.name}, right", self.material, form, Pose(),
                              self.step, self.key, self.nominal_mm)

    def _strip(self) -> Part:
        x0, y0, x1, y1 = self.skin.flat.bounds
        size = f"{self.nominal_mm:g} x {self.strip_mm:g}"
        return self.shop.stick(f"{self.id}R", f"{self.name}, right", self.material, size,
                               self.skin.shape, y1 - y0, self.step, self.key)

    def cut(self, blank: Blank) -> Cut:
        if not self._meets(blank):
            return Cut()
        return solid_cut(self.skin.cutter, blank, 0.0)

    def _meets(self, blank: Blank) -> bool:
        """Does the rib stand under this sheet?"""
        if self.only:
            return blank.id == self.only
        middle = blank.pose.origin + blank.pose.rotation[:, 2] * blank.thickness_mm / 2
        along = float((middle - self.skin.panel.root.nose) @ self.skin.panel.along)
        return self.low_mm - 1e-6 < along < self.high_mm + 1e-6

    def joint(self, blank: Blank) -> Joint | None:
        if not self.cut(blank).holes:
            return None
        down = -1 if self.skin.upper else 1
        return Joint("sheet on rib", self.parts[0].id, blank.id,
                     (0.0, self._bevel(blank) + GLUE_GAP_MM),
                     vector(down * self.skin.panel.up))

    def _bevel(self, blank: Blank) -> float:
        """A rib is cut square to its sheet: what its edge falls short of a surface that tapers,
        or that rises from a rib at a break."""
        panel = self.skin.panel
        depths = [np.ptp(p.contour[:, 1]) * p.chord_mm for p in (panel.root, panel.tip)]
        normal = blank.pose.rotation[:, 2]
        rise = abs(float(normal @ panel.up)) / abs(float(normal @ panel.along))
        taper = float(abs(depths[0] - depths[1])) / panel.length_mm
        return (taper + rise) * blank.thickness_mm

    @property
    def joints(self) -> tuple[Joint, ...]:
        return tuple(
            Joint("edge to edge", f"{self.id}{side}", f"{other}{side}", (0.0, GLUE_GAP_MM),
                  facing=self._facing(side))
            for other in self.butts for side in "RL"
        )

    def _facing(self, side: str) -> tuple[float, float, float]:
        """Towards what it butts against: the strip ahead, or the upper sheet at the tail."""
        x, y, z = vector(-AFT if self.step == SHEETING and self.id[0] == "N"
                         else self.skin.panel.up)
        return x, y * (1 if side == "R" else -1), z


@dataclass(frozen=True, eq=False)
class Tail:
    """Ribs end where two sheets leave no wood worth keeping between them."""

    panel: Panel
    thick_mm: float
    wide_mm: float

    @property
    def parts(self) -> tuple[Part, ...]:
        return ()

    def cut(self, blank: Blank) -> Cut:
        along = float((blank.pose.origin - self.panel.root.nose) @ self.panel.along)
        if not -1.0 <= along <= self.panel.length_mm + 1.0:
            return Cut()
        points = blank.pose.local(self.panel.ring(blank.pose))[:, :2]
        middle = (len(points) - 1) // 2
        upper, lower = points[middle::-1], points[middle:]
        depth = upper[:, 1] - lower[:, 1] - 2 * self.thick_mm
        back = upper[-1, 0] - self.wide_mm
        thin = (depth < THIN_TAIL_MM) & (upper[:, 0] > back)
        if not thin.any():
            return Cut()
        x = float(upper[int(np.argmax(thin)), 0])
        return Cut(holes=(box(x, -200, upper[-1, 0] + 200, 200),))

    def joint(self, blank: Blank) -> Joint | None:
        return None

    @property
    def joints(self) -> tuple[Joint, ...]:
        return ()


def nose_line(panel: Panel, behind_mm: float) -> Line:
    """So far behind the true nose, at both ends of a panel."""
    ends = []
    for placed in (panel.root, panel.tip):
        nose = placed.points[(len(placed.points) - 1) // 2]
        ends.append(float((nose - placed.nose) @ AFT) + behind_mm)
    return Line(*ends)


def tail_line(panel: Panel, ahead_mm: float) -> Line:
    """So far ahead of the trailing edge, at both ends of a panel."""
    ends = []
    for placed in (panel.root, panel.tip):
        tail = (placed.points[0] + placed.points[-1]) / 2
        ends.append(float((tail - placed.nose) @ AFT) - ahead_mm)
    return Line(*ends)


def chord_line(wing: WingShape, panel: Panel, root: float, tip: float) -> Line:
    """At fractions of the chord that run evenly from the wing's root to its tip."""
    ends = []
    for placed, span in ((panel.root, panel.start_mm), (panel.tip,
                         panel.start_mm + panel.length_mm)):
        share = span / wing.half_span_mm
        fraction = root * (1 - share) + tip * share
        ends.append(float((placed.point(fraction) - placed.nose) @ AFT))
    return Line(*ends)


def sheet_mm(shop: Shop) -> float:
    """What ribs and spars lie under, as measured; 0 without sheeting."""
    given = shop.definition.wing.sheeting
    return shop.thickness(given.material, given.thickness_mm) if given else 0.0


def nose_aft(shop: Shop, wing: WingShape, panel: Panel) -> Line:
    """Where the nose's sheeting ends: over the middle of the first spar, unless it is said."""
    given = shop.definition.wing.sheeting
    assert given is not None
    if given.to_chord is not None:
        return chord_line(wing, panel, given.to_chord, given.to_chord)
    spars = shop.definition.wing.spar
    if not spars:
        return chord_line(wing, panel, 0.3, 0.3)
    tip = spars[0].at_tip_chord
    return chord_line(wing, panel, spars[0].at_chord, spars[0].at_chord if tip is None else tip)


def make(shop: Shop, wing: WingShape, bays: tuple[Bay, ...]) -> Iterable[Sheet | Tail]:
    """Nose sheets and a sheeted trailing edge, as the definition asks."""
    given = shop.definition.wing.sheeting
    if given is not None:
        shop.material(given.material, "wing.sheeting.material", "sheet")
        if given.nose and shop.definition.wing.leading_edge.kind != "strip":
            raise DesignError(Problem(
                "wing.sheeting.nose", "The nose's sheeting needs an edge to butt against.",
                'Give [wing.leading_edge] kind = "strip", or nose = false.'))
        for panel in wing.panels:
            if given.nose:
                yield from _nose(shop, wing, panel, bays)
    if any(b.rear for b in bays) and shop.definition.wing.trailing_edge.kind == "sheet":
        raise DesignError(Problem(
            "power.mount.edge", "Mounts do not sit on a trailing edge of sheet.",
            'Give [wing.trailing_edge] kind = "stock", or mount.edge = "leading".'))
    yield from _trailing(shop, wing)


def _nose(
    shop: Shop, wing: WingShape, panel: Panel, bays: tuple[Bay, ...]
) -> Iterable[Sheet]:
    given, power = shop.definition.wing.sheeting, shop.definition.power
    assert given is not None
    back = shop.definition.wing.leading_edge.size_mm
    own = on_edge(bays, panel, rear=False)
    marks = [0.0, *(m for b in own for m in (b.s_mm - b.half_mm, b.s_mm + b.half_mm)),
             panel.length_mm]
    aft, n = nose_aft(shop, wing, panel), panel.index + 1
    for i, (low, high) in enumerate(zip(marks, marks[1:], strict=False)):
        in_bay = i % 2 == 1
        letter = "abcdefghijklmnop"[i] if own else ""
        behind = power.mount.wrap_mm + MOUNT_CLEAR_MM if in_bay and power else back
        edge = f"LE{n}" + ("abcdefgh"[i // 2] if own else "")
        for upper in (True, False):
            side = "top" if upper else "bottom"
            whole = Sheet(
                shop, Skin(panel, upper, sheet_mm(shop), nose_line(panel, behind), aft,
                           *ends(panel, low, high)),
                f"N{side[0].upper()}{n}{letter}", f"nose sheeting {side}, panel {n}",
                given.material, given.thickness_mm, SHEETING, "wing.sheeting", low, high,
                butts=() if in_bay else (edge,),
            )
            yield from _spliced(shop, whole)


def _spliced(shop: Shop, sheet: Sheet) -> Iterable[Sheet]:
    """A sheet, or strips of it edge to edge where it is wider than the stock."""
    widest = shop.sheet_width_mm(sheet.material, sheet.nominal_mm, sheet.key) - 2 * TRIM_MM
    strips = sheet.skin.strips(widest)
    before = sheet.butts
    for k, skin in enumerate(strips, start=1):
        tag = f"-{k}" if len(strips) > 1 else ""
        name = f"{sheet.name}, strip {k} of {len(strips)}" if tag else sheet.name
        yield replace(sheet, skin=skin, id=f"{sheet.id}{tag}", name=name, butts=before)
        before = (f"{sheet.id}{tag}",)


def _trailing(shop: Shop, wing: WingShape) -> Iterable[Sheet | Tail]:
    given = shop.definition.wing.trailing_edge
    if given.kind != "sheet":
        return
    thick = shop.thickness(given.material, given.sheet_mm)
    for panel in wing.panels:
        n = panel.index + 1
        for upper in (True, False):
            side = "top" if upper else "bottom"
            yield Sheet(
                shop, Skin(panel, upper, thick, tail_line(panel, given.width_mm),
                           tail_line(panel, -2.0), *ends(panel, 0.0, panel.length_mm)),
                f"E{side[0].upper()}{n}", f"trailing edge {side}, panel {n}", given.material,
                given.sheet_mm, SHEETING, "wing.trailing_edge", 0.0, panel.length_mm,
                butts=() if upper else (f"ET{n}",),
            )
        yield Tail(panel, thick, given.width_mm)


def ends(panel: Panel, low: float, high: float) -> tuple[Pose, Pose]:
    """End planes: the panel's own where it is reached."""
    inner = panel.end_plane(False) if low <= 0 else panel.plane(low)
    outer = panel.end_plane(True) if high >= panel.length_mm else panel.plane(high)
    return inner, outer
