"""Rib stations: where ribs stand along the span, of what, and what for."""

from __future__ import annotations

from dataclasses import dataclass
from itertools import pairwise

import numpy as np

from buildgen.airframe.bays import Bay
from buildgen.airframe.moving import wanted_ribs
from buildgen.airframe.shop import Shop
from buildgen.airframe.surface import Panel, WingShape
from buildgen.problems import DesignError, Problem
from buildgen.solid import Array, Pose

BETWEEN_MM = 1.0
"""Between two ribs, for glue and fingers; common practice, no source."""
HALF = "half rib"
LEAST_BAY_MM = 24.0
"""Narrower bays need no half rib."""


@dataclass(frozen=True, eq=False)
class Place:
    """Where a rib stands: its outer face along a panel, its plane, what it is for."""

    panel: Panel
    face_mm: float
    normal: Array
    material: str
    thickness_mm: float
    why: str
    bay: Bay | None = None
    single: bool = False
    """On the centre line, shared by both halves."""
    against_inner: bool = False
    """Its inner face lies on the plane in which the panel begins."""
    nominal_mm: float | None = None
    """Of the sheet, where something of its own asks for this rib."""

    @property
    def middle_mm(self) -> float:
        """Along its panel."""
        return self.face_mm - self.thickness_mm / 2


def outer_face(place: Place) -> Pose:
    """The plane of a rib's outboard face."""
    if place.against_inner:
        start = place.panel.end_plane(False)
        return Pose(start.rotation, start.origin - place.thickness_mm * start.rotation[:, 2])
    return place.panel.plane(place.face_mm, place.normal)


def inner_face(place: Place) -> Pose:
    """The plane of a rib's inboard face."""
    outer = place.panel.plane(place.face_mm, place.normal)
    return Pose(outer.rotation, outer.origin + outer.rotation[:, 2] * place.thickness_mm)


def places(shop: Shop, wing: WingShape, bays: tuple[Bay, ...]) -> list[Place]:
    """Every rib of the starboard half from the root out."""
    found: list[Place] = []
    for panel in wing.panels:
        found += _panel_places(shop, wing, panel, [b for b in bays if b.panel is panel])
    return found


def _panel_places(shop: Shop, wing: WingShape, panel: Panel, bays: list[Bay]) -> list[Place]:
    ribs = shop.definition.wing.ribs
    plain = shop.thickness(ribs.material, ribs.thickness_mm)
    end_wood = ribs.root_material or ribs.material
    end = shop.thickness(end_wood, ribs.root_thickness_mm or ribs.thickness_mm)
    found: list[Place] = []
    centre = panel.index == 0 and wing.flat_centre
    break_in = panel.index > 0 and _breaks(wing, panel.index - 1)
    if centre:
        found.append(Place(panel, end / 2, panel.along, end_wood, end, "centre rib", single=True))
    elif panel.index == 0 or break_in:
        found.append(Place(panel, end, panel.inner_normal, end_wood, end,
                           "root rib" if panel.index == 0 else "rib at the break",
                           against_inner=True))
    for bay in bays:
        power = shop.definition.power
        assert power is not None
        for face, side in ((bay.s_mm - bay.half_mm, "inboard"), (bay.outer_face_mm, "outboard")):
            found.append(Place(panel, face, panel.along, power.mount.rib_material, bay.rib_mm,
                               f"mount rib, motor {bay.index} {side}", bay))
    found += _asked_for(shop, wing, panel, found)
    last = panel.index == len(wing.panels) - 1
    at_break = not last and _breaks(wing, panel.index)
    wood, thick = (end_wood, end) if at_break else (ribs.material, plain)
    why = "tip rib" if last else ("rib at the break" if at_break else "rib between panels")
    found.append(Place(panel, panel.length_mm, panel.outer_normal, wood, thick, why))
    found.sort(key=lambda p: p.face_mm)
    return _filled(shop, panel, found, bays, plain)


def _asked_for(shop: Shop, wing: WingShape, panel: Panel, fixed: list[Place]) -> list[Place]:
    """Ribs that moving surfaces ask for; each needs room of its own."""
    found: list[Place] = []
    problems: list[Problem] = []
    for own in wanted_ribs(shop, wing, panel):
        thick = shop.thickness(own.material, own.nominal_mm)
        place = Place(panel, own.face_mm, panel.along, own.material, thick, own.why,
                      nominal_mm=own.nominal_mm)
        for other in [*fixed, *found]:
            least = (thick + other.thickness_mm) / 2 + BETWEEN_MM
            apart = abs(place.middle_mm - other.middle_mm)
            if apart < least:
                problems.append(Problem(
                    own.key, f"The {own.why} stands in the {other.why},"
                    f" {panel.start_mm + other.middle_mm:.0f} mm along the span.",
                    f"Move it by {least - apart:.1f} mm or more."))
        found.append(place)
    if problems:
        raise DesignError(*problems)
    return found


def _breaks(wing: WingShape, index: int) -> bool:
    a, b = wing.panels[index], wing.panels[index + 1]
    return abs(a.dihedral_deg - b.dihedral_deg) > 1e-9


def _filled(
    shop: Shop, panel: Panel, fixed: list[Place], bays: list[Bay], plain: float
) -> list[Place]:
    """Plain ribs between the fixed ones, at most the wanted spacing apart."""
    given = shop.definition.wing.panel[panel.index]
    spacing = given.rib_spacing_mm or shop.definition.wing.rib_spacing_mm
    if given.rib_count:
        spacing = panel.length_mm / given.rib_count
    marks = [p.face_mm - p.thickness_mm / 2 for p in fixed]
    if marks[0] > spacing / 2:
        marks.insert(0, 0.0)
    found = list(fixed)
    for low, high in zip(marks, marks[1:], strict=False):
        if any(abs((low + high) / 2 - b.s_mm) < 1.0 for b in bays):
            continue
        gaps = max(1, int(np.ceil((high - low) / spacing - 0.05)))
        for k in range(1, gaps):
            face = low + k * (high - low) / gaps + plain / 2
            wood = shop.definition.wing.ribs.material
            found.append(Place(panel, face, panel.along, wood, plain, "rib"))
    found.sort(key=lambda p: p.face_mm)
    return _halved(shop, panel, found, bays) if shop.definition.wing.ribs.half else found


def _halved(shop: Shop, panel: Panel, found: list[Place], bays: list[Bay]) -> list[Place]:
    """Nose ribs half way between the others, but not in the bay of a motor."""
    wood = shop.definition.wing.ribs
    thick = shop.thickness(wood.material, wood.thickness_mm)
    more = []
    for near, far in pairwise(found):
        low, high = near.face_mm, far.face_mm - far.thickness_mm
        middle = (low + high) / 2
        if high - low < LEAST_BAY_MM or any(abs(middle - b.s_mm) < 1.0 for b in bays):
            continue
        more.append(Place(panel, middle + thick / 2, panel.along, wood.material, thick, HALF))
    return sorted([*found, *more], key=lambda p: p.face_mm)
