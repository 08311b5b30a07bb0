"""Where neighbours sit and spars pass, engraved on the plates that carry them.

Found from the parts' own solids: what of a neighbour stands on a plate's upper face, and where a
stick runs through a plate's hole. The lower face is never engraved, so nothing is drawn for it.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import cached_property

import numpy as np
import shapely
from shapely.geometry import LineString, Point, Polygon, box

from buildgen.airframe.blank import Blank, parts_of, solid_cut
from buildgen.part import Formed, Kit, Mark, Part, Plate, Stick
from buildgen.sheets.letters import width_mm
from buildgen.sheets.marks import CLEAR_MM
from buildgen.solid import Array, Placed, Pose, Shape, mesh

OVER_MM, INTO_MM = 0.2, 0.05
"""The layer over the upper face in which neighbours are looked for."""
LEAST_MM2, MOST_SHARE = 20.0, 0.4
"""Smaller touches are no seats; a neighbour that covers more is glued on flat."""
LEAST_LINE_MM = 2.0
TICK_MM = 8.0
LABEL_MM = 2.5
FAR_MM = 4000.0


@dataclass(frozen=True, eq=False)
class Solid:
    """A part as it stands in the aircraft."""

    part: Part
    shape: Shape

    @cached_property
    def bounds(self) -> Array:
        """Least and greatest x, y, z."""
        return np.array(mesh(self.shape).bounding_box()).reshape(2, 3)

    def near(self, other: Solid) -> bool:
        a, b = self.bounds, other.bounds
        return bool(np.all(a[0] < b[1] + OVER_MM) and np.all(b[0] < a[1] + OVER_MM))


def with_seats(kit: Kit) -> dict[str, Part]:
    """The kit's plates by id, with lines and names where others sit and where sticks pass."""
    solids = [
        Solid(p, Placed(p.form.shape, p.pose)) for p in kit.flying
        if isinstance(p.form, Plate | Stick)
    ]
    return {s.part.id: _marked(s, solids) for s in solids if isinstance(s.part.form, Plate)}


def _marked(plate: Solid, solids: list[Solid]) -> Part:
    form = plate.part.form
    assert isinstance(form, Plate)
    free = form.shape2d.buffer(-CLEAR_MM)
    marks: list[Mark] = []
    seats = False
    for other in solids:
        if other is plate or not plate.near(other):
            continue
        if isinstance(other.part.form, Plate):
            found = _seat(plate, other, free, marks)
            seats = seats or bool(found)
            marks += found
        elif form.bend is None and (form.circles or form.outline.interiors):
            marks += _passage(plate, other, free)
    if not marks:
        return replace(plate.part, form=replace(form, may_turn_over=may_turn_over(plate.part)))
    return replace(plate.part, form=replace(
        form, marks=(*form.marks, *marks), may_turn_over=not seats and may_turn_over(plate.part)))


def may_turn_over(part: Part) -> bool:
    """Whether a flat plate may be cut upside down: it carries no mark of one face only."""
    form = part.form
    return (isinstance(form, Plate) and form.may_turn_over and form.bend is None
            and (form.grain_deg or 0.0) % 90.0 == 0.0
            and all(m.text == part.id for m in form.marks))


def _seat(plate: Solid, other: Solid, free: Polygon, before: list[Mark]) -> list[Mark]:
    """The outline of a neighbour's foot on the plate's upper face, and its id beside it.

    The id keeps clear of the marks that were there before, the plate's own among them.
    """
    form, foot_form = plate.part.form, other.part.form
    assert isinstance(form, Plate)
    assert isinstance(foot_form, Plate)
    foot = _foot(plate.part, form, other.shape).intersection(form.shape2d)
    thin = 0.35 * foot_form.thickness_mm
    foot = foot.buffer(-thin, join_style="mitre").buffer(thin, join_style="mitre")
    if not LEAST_MM2 < foot.area < MOST_SHARE * form.area_mm2:
        return []
    marks = _lines(foot.boundary.intersection(free))
    if not marks:
        return []
    names = [_room(m.text, m.at).buffer(0.6) for m in (*form.marks, *before) if m.text]
    return [*marks, *_name(other.part.id, foot, free.difference(shapely.union_all(names)))]


def _room(id: str, at: tuple[float, float]) -> Polygon:
    """What a neighbour's id takes up."""
    wide = width_mm(id, LABEL_MM) / 2
    return box(at[0] - wide, at[1] - LABEL_MM / 2, at[0] + wide, at[1] + LABEL_MM / 2)


def _foot(part: Part, form: Plate, other: Shape) -> Polygon:
    """What of a solid stands just over the upper face; through a bent plate, not what is in it."""
    if form.bend is None:
        lift = Pose(origin=np.array([0.0, 0.0, form.thickness_mm - INTO_MM]))
        blank = Blank(part.id, lift.then(part.pose), OVER_MM + INTO_MM, form.outline)
        return _covered(other, blank)
    if isinstance(form.bend, Formed):
        return Polygon()
    over, inside = (
        _covered(other, Blank(part.id, part.pose, high, form.outline, bend=form.bend))
        for high in (form.thickness_mm + OVER_MM, form.thickness_mm - INTO_MM)
    )
    return over.difference(inside)


def _covered(other: Shape, blank: Blank) -> Polygon:
    return shapely.union_all(solid_cut(other, blank, 0.0).holes)


def _lines(shape: object) -> list[Mark]:
    """Every line of a shapely result that is long enough to be seen."""
    merged = shapely.line_merge(shapely.union_all([
        g for g in shapely.get_parts(shape) if isinstance(g, LineString)]))
    return [
        Mark(line=tuple((float(x), float(y)) for x, y in line.simplify(0.02).coords))
        for line in shapely.get_parts(merged) if line.length >= LEAST_LINE_MM
    ]


def _name(id: str, foot: Polygon, free: Polygon) -> list[Mark]:
    """A neighbour's id beside its foot, where there is room."""
    piece = max(parts_of(foot), key=lambda p: p.area)
    spot = piece.representative_point()
    x, y = spot.x, spot.y
    x0, _, x1, _ = piece.intersection(LineString([(x - FAR_MM, y), (x + FAR_MM, y)])).bounds
    _, y0, _, y1 = piece.intersection(LineString([(x, y - FAR_MM), (x, y + FAR_MM)])).bounds
    wide = width_mm(id, LABEL_MM) / 2
    near = foot.buffer(0.6)
    for at in ((x1 + wide + 1.2, y), (x0 - wide - 1.2, y), (x, y1 + LABEL_MM), (x, y0 - LABEL_MM)):
        room = _room(id, at)
        if free.contains(room) and not near.intersects(room):
            return [Mark(id, at, LABEL_MM)]
    return []


def _passage(plate: Solid, stick: Solid, free: Polygon) -> list[Mark]:
    """The upright centre line of a stick that runs through a hole of the plate."""
    form = plate.part.form
    assert isinstance(form, Plate)
    blank = Blank(plate.part.id, plate.part.pose, form.thickness_mm, form.outline)
    cut = solid_cut(stick.shape, blank, 0.0)
    if not cut.holes:
        return []
    hole = max(cut.holes, key=lambda h: h.area)
    middle = hole.centroid
    if form.shape2d.contains(middle) or not Polygon(form.outline.exterior).contains(
        Point(middle).buffer(0.5)
    ):
        return []
    _, y0, _, y1 = hole.bounds
    line = LineString([(middle.x, y0 - TICK_MM), (middle.x, y1 + TICK_MM)])
    return [m for m in _lines(line.intersection(free)) if len(m.line) > 1]
