"""A box body: developed sheet sides, top and bottom over formers.

The sides stand upright and reach from the lower face of the top sheet to the upper face of the
bottom sheet; top and bottom lie on their edges. Each is a developable surface, so its flat length
is the true one along the fold line.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np
import shapely
from shapely.geometry import Polygon

from buildgen.airframe.blank import Blank, Cut, apply, parts_of, solid_cut
from buildgen.airframe.power import firewall_circles
from buildgen.airframe.seat import Seat, seated
from buildgen.airframe.shop import Shop
from buildgen.airframe.surface import WingShape
from buildgen.design.schema import Fuselage, Station
from buildgen.part import Bend, Joint, Part, Plate
from buildgen.problems import DesignError, Problem
from buildgen.solid import (
    Array,
    Circle,
    Placed,
    Pose,
    Prism,
    Rod,
    Shape,
)

STEP = "Fuselage: sides and formers"
DECKS = "Fuselage: top and bottom"
FAR_MM = 400.0
FORMER_WEB_MM = 7.0
CORNER_MM = 4.0
GLUE_GAP_MM = 0.15
"""A gap that glue still fills; common practice, no source."""
SADDLE_PLAY_MM = 0.3
"""Between the wing and its saddle: covering on both; common practice, no source."""
SADDLE_STEP_MM = 1.5
"""The wing is looked at this often across the body: with dihedral its thin tail moves up."""


@dataclass(frozen=True, eq=False)
class Body:
    """The box fuselage in space and its parts."""

    shop: Shop
    wing: WingShape
    given: Fuselage
    seat: Seat | None = None
    """Of the tailplane."""

    @cached_property
    def stations(self) -> tuple[Station, ...]:
        return seated(self.given.station, self.seat)

    def _number(self, station: Station) -> int:
        """As the definition counts it along the fuselage."""
        return 1 + sum(s.x_mm < station.x_mm for s in self.given.station)

    @cached_property
    def side_mm(self) -> float:
        return self.shop.thickness(self.given.side_material, self.given.side_thickness_mm)

    @cached_property
    def deck_mm(self) -> float:
        return self.shop.thickness(self.given.deck_material, self.given.deck_thickness_mm)

    def width(self, x_mm: float) -> float:
        """Outside width at x."""
        return self._at(x_mm, [s.width_mm for s in self.stations])

    def top(self, x_mm: float) -> float:
        return self._at(x_mm, [s.top_mm for s in self.stations])

    def bottom(self, x_mm: float) -> float:
        return self._at(x_mm, [s.bottom_mm for s in self.stations])

    def middle(self, x_mm: float) -> float:
        """z half way up."""
        return (self.top(x_mm) + self.bottom(x_mm)) / 2

    def _at(self, x_mm: float, values: list[float]) -> float:
        return float(np.interp(x_mm, [s.x_mm for s in self.stations], values))

    @property
    def ends_mm(self) -> tuple[float, float]:
        return self.stations[0].x_mm, self.stations[-1].x_mm

    # ------------------------------------------------------------ the wing's seat

    @cached_property
    def saddle(self) -> Shape | None:
        """What the wing and the way it is lifted off take from the body."""
        panel = self.wing.panels[0]
        half = max(s.width_mm for s in self.stations) / 2 + 2
        reach = min(half, panel.length_mm)
        outlines = [
            Polygon(ring[:, [0, 2]])
            for y in np.linspace(0.0, reach, 2 + int(reach / SADDLE_STEP_MM))
            if (ring := panel.ring(Pose(np.array([[1, 0, 0], [0, 0, -1], [0, 1.0, 0]]),
                                        np.array([0.0, y, 0.0])))) is not None
        ]
        wing = shapely.union_all([o.buffer(SADDLE_PLAY_MM) for o in outlines])
        opened = self._opened(wing)
        frame = Pose.at((0.0, half, 0.0), (1, 0, 0), (0, 0, 1))
        return None if opened is None else Placed(Prism(opened, 2 * half), frame)

    def _opened(self, wing: Polygon) -> Polygon | None:
        """The section opened upwards for a high wing, downwards for a low one."""
        x0, low, x1, high = wing.bounds
        middle = (x0 + x1) / 2
        if low > self.top(middle) or high < self.bottom(middle):
            return None
        points = np.asarray(wing.exterior.coords)[:-1]
        points = np.roll(points, -int(points[:, 0].argmin()), axis=0)
        aft = int(points[:, 0].argmax())
        one, two = points[: aft + 1], np.vstack([points[aft:], points[:1]])[::-1]
        lower, upper = (one, two) if one[:, 1].mean() < two[:, 1].mean() else (two, one)
        if high > self.top(middle) - 8.0:
            return Polygon([*lower, (x1, FAR_MM), (x0, FAR_MM)])
        if low < self.bottom(middle) + 8.0:
            return Polygon([*upper, (x1, -FAR_MM), (x0, -FAR_MM)])
        return wing

    @cached_property
    def dowels(self) -> tuple[tuple[float, float], ...]:
        """(x, z) of the dowels for the wing's bands: ahead of and behind the wing."""
        if self.saddle is None or not self.given.dowel_mm:
            return ()
        chord = self.wing.panels[0].root.chord_mm
        found = []
        for x in (-18.0, chord + 14.0):
            if self.ends_mm[0] + 12 < x < self.ends_mm[1] - 12:
                found.append((x, self.top(x) - self.deck_mm - self.given.dowel_mm / 2 - 6.0))
        return tuple(found)

    def _dowel_shape(self, at: tuple[float, float]) -> Shape:
        half = self.width(at[0]) / 2 + 12.0
        return Placed(Rod(self.given.dowel_mm / 2, 2 * half),
                      Pose.at((at[0], -half, at[1]), (0, 1, 0), (0, 0, 1)))

    # ------------------------------------------------------------ sheets

    def _bend(self, path: Array) -> Bend:
        legs = np.linalg.norm(np.diff(path, axis=0), axis=1)
        return Bend(np.concatenate([[0.0], np.cumsum(legs)]), path)

    def _sheet(
        self, id: str, name: str, material: str, nominal: float, blank: Blank, step: str,
        cuts: tuple[Shape, ...],
    ) -> list[Part]:
        found = [solid_cut(c, blank, 0.0) for c in cuts]
        rods = [solid_cut(self._dowel_shape(d), blank, self.shop.slip_mm) for d in self.dowels]
        outline = blank.outline
        holes = [h for c in (*found, *rods) for h in c.holes]
        body = outline.difference(shapely.union_all(holes)) if holes else outline
        parts = []
        pieces = sorted((p for p in parts_of(body) if p.area > 100), key=lambda p: p.bounds[0])
        grain = 0.0 if self.shop.material(material, "fuselage").grain else None
        for k, piece in enumerate(pieces):
            tag = id if len(pieces) == 1 else f"{id}{k + 1}"
            form = Plate(piece, blank.thickness_mm, (), grain, (), True, blank.bend)
            parts.append(self.shop.part(tag, name, material, form, blank.pose, step,
                                        "fuselage", nominal))
        return parts

    @cached_property
    def side_blank(self) -> Blank:
        """The starboard side; its outer face is z = 0 of its frame, thickness inwards."""
        xs = np.array([s.x_mm for s in self.stations])
        half = np.array([s.width_mm / 2 for s in self.stations])
        bend = self._bend(np.column_stack([xs, -half]))
        top = [s.top_mm - self._side_edge(s.x_mm, True) for s in self.stations]
        bottom = [s.bottom_mm + self._side_edge(s.x_mm, False) for s in self.stations]
        ring = [*zip(bend.flat_mm, bottom, strict=True),
                *list(zip(bend.flat_mm, top, strict=True))[::-1]]
        pose = Pose.at((0, 0, 0), (1, 0, 0), (0, 0, 1))
        return Blank("FS", pose, self.side_mm, Polygon(ring), bend=bend)

    def _deck_blank(self, upper: bool) -> Blank:
        xs = np.array([s.x_mm for s in self.stations])
        level = [
            s.top_mm - self._deck_depth(s.x_mm, True) if upper else s.bottom_mm
            for s in self.stations
        ]
        bend = self._bend(np.column_stack([xs, level]))
        half = [s.width_mm / 2 for s in self.stations]
        ring = [*zip(bend.flat_mm, half, strict=True),
                *[(f, -h) for f, h in zip(bend.flat_mm, half, strict=True)][::-1]]
        pose = Pose.at((0, 0, 0), (1, 0, 0), (0, 1, 0))
        return Blank("FT" if upper else "FB", pose, self.deck_mm, Polygon(ring), bend=bend)

    def _clear_of(self) -> tuple[Shape, ...]:
        return () if self.saddle is None else (self.saddle,)

    # ------------------------------------------------------------ formers

    @cached_property
    def firewall(self) -> Station | None:
        """The first station, where a motor sits in the nose."""
        power = self.shop.definition.power
        return self.stations[0] if power and power.place == "nose" else None

    @cached_property
    def nose_seat(self) -> Pose | None:
        """On the firewall's front face: x forward, z up."""
        if self.firewall is None:
            return None
        s = self.firewall
        return Pose.at((s.x_mm, 0.0, (s.top_mm + s.bottom_mm) / 2), (-1, 0, 0), (0, -1, 0))

    def _former(self, number: int, station: Station) -> Part | None:
        first = station is self.firewall
        wood = self.given.firewall_material if first else self.given.former_material
        nominal = self.given.firewall_thickness_mm if first else self.given.former_thickness_mm
        thick = self.shop.thickness(wood, nominal)
        front = station.x_mm - (thick if station is self.stations[-1] else 0.0)
        front = station.x_mm - thick / 2 if self._inner(station) else front
        pose = Pose.at((front, 0, 0), (0, 1, 0), (0, 0, 1))
        blank = Blank(f"F{number}", pose, thick, self._former_outline(front, front + thick))
        cuts = [solid_cut(s, blank, 0.0) for s in self._clear_of()]
        cuts += [solid_cut(self._dowel_shape(d), blank, 1.0) for d in self.dowels]
        outline, circles, _ = apply(blank.outline, cuts)
        if outline.is_empty:
            return None
        hole = Cut() if first else self._pass(outline)
        holes: tuple[Circle, ...] = ()
        if first and self.shop.definition.power is not None and self.nose_seat is not None:
            z = float(self.nose_seat.origin[2])
            pattern = firewall_circles(self.shop, self.shop.definition.power)
            holes = tuple((y, z + dz, r) for y, dz, r in pattern)
        outline, circles, _ = apply(outline, [Cut(circles=(*circles, *holes)), hole])
        name = "firewall" if first else f"former at {station.x_mm:g} mm"
        return self.shop.plate(f"F{number}", name, wood, nominal, outline, pose, STEP,
                               f"fuselage.station[{number}]", circles=circles, grain_deg=90.0)

    def _inner(self, station: Station) -> bool:
        return station is not self.stations[0] and station is not self.stations[-1]

    def _former_outline(self, front: float, back: float) -> Polygon:
        """The smaller of the two faces, inside sides and decks, with the play of a glued fit."""
        play = self.shop.press_mm
        half = min(self._inside(x) for x in (front, back)) - play
        top = min(self.top(x) - self._deck_depth(x, True) for x in (front, back)) - play
        bottom = max(self.bottom(x) + self._deck_depth(x, False) for x in (front, back)) + play
        if half <= 0 or top <= bottom:
            raise DesignError(
                Problem("fuselage.station", f"At x = {front:g} mm no room is left for a former"
                        " inside the sheets.", "Make the station larger or the sheets thinner.")
            )
        return Polygon([(-half, bottom), (half, bottom), (half, top), (-half, top)])

    def _inside(self, x: float) -> float:
        """Half the clear width: an oblique side takes more than its thickness."""
        steep = self._steepest(x, [s.width_mm / 2 for s in self.stations])
        return self.width(x) / 2 - self.side_mm * float(np.hypot(1, steep))

    def _deck_depth(self, x: float, upper: bool) -> float:
        """What a sloping deck takes of the height: more than its thickness."""
        levels = [s.top_mm if upper else s.bottom_mm for s in self.stations]
        return self.deck_mm * float(np.hypot(1, self._steepest(x, levels)))

    def _side_edge(self, x: float, upper: bool) -> float:
        """How far a side's edge stays from the outside of a deck.

        The edge is cut square to the side; where that stands oblique in plan and the deck slopes,
        its inner corner would reach into the deck.
        """
        levels = [s.top_mm if upper else s.bottom_mm for s in self.stations]
        oblique = self._steepest(x, [s.width_mm / 2 for s in self.stations])
        return self._deck_depth(x, upper) + self.side_mm * oblique * self._steepest(x, levels)

    def _steepest(self, x: float, values: list[float]) -> float:
        """Greatest slope of the legs that meet near x."""
        xs = [s.x_mm for s in self.stations]
        near = [k for k in range(len(xs) - 1) if xs[k] - 6 <= x <= xs[k + 1] + 6]
        return max(abs((values[k + 1] - values[k]) / (xs[k + 1] - xs[k])) for k in near)

    def _pass(self, outline: Polygon) -> Cut:
        """An opening with round corners for battery, wires and hands."""
        inner = outline.buffer(-FORMER_WEB_MM - CORNER_MM).buffer(CORNER_MM, quad_segs=12)
        return Cut(holes=tuple(p for p in parts_of(inner) if p.area > 150))

    # ------------------------------------------------------------ all of it

    @cached_property
    def parts(self) -> tuple[Part, ...]:
        g = self.given
        formers = [
            f for s in self.stations
            if s.former and (f := self._former(self._number(s), s)) is not None
        ]
        right = self._sheet("FSR", "fuselage side, right", g.side_material, g.side_thickness_mm,
                            self.side_blank, STEP, self._clear_of())
        left = [p.mirrored(p.id.replace("FSR", "FSL"), "fuselage side, left") for p in right]
        decks = self._sheet("FT", "fuselage top", g.deck_material, g.deck_thickness_mm,
                            self._deck_blank(True), DECKS, self._clear_of())
        decks += self._sheet("FB", "fuselage bottom", g.deck_material, g.deck_thickness_mm,
                             self._deck_blank(False), DECKS, self._clear_of())
        dowels = [
            self.shop.stick(f"D{k + 1}", "dowel for the wing's bands", "dowel",
                            f"{g.dowel_mm:g} rod", self._dowel_shape(d),
                            self.width(d[0]) + 24.0, DECKS, "fuselage.dowel_mm")
            for k, d in enumerate(self.dowels)
        ]
        return (*formers, *right, *left, *decks, *dowels)

    @property
    def joints(self) -> tuple[Joint, ...]:
        """Formers between the sides, decks on both, dowels through the sides."""
        kinds = {kind: [p for p in self.parts if p.step == step and p.id.startswith(kind)]
                 for kind, step in (("FS", STEP), ("FT", DECKS), ("FB", DECKS), ("D", DECKS))}
        formers = [p for p in self.parts if p.step == STEP and p not in kinds["FS"]]
        down, up, across = (0.0, 0.0, -1.0), (0.0, 0.0, 1.0), (0.0, 1.0, 0.0)
        found = [Joint("face to face", f.id, s.id, self._former_band(f), down)
                 for f in formers for s in kinds["FS"] if _overlap(f, s)]
        for decks, way in ((kinds["FT"], down), (kinds["FB"], up)):
            found += [Joint("face to face", d.id, s.id, (0.0, GLUE_GAP_MM), way)
                      for d in decks for s in kinds["FS"] if _overlap(d, s)]
            found += [Joint("face to face", d.id, f.id, self._former_band(f), way)
                      for d in decks for f in formers if _overlap(d, f)]
        found += [Joint("dowel in hole", d.id, s.id, self._dowel_band(d), across)
                  for d in kinds["D"] for s in kinds["FS"] if _overlap(d, s)]
        if self.firewall is not None:
            found.append(Joint("face to face", "M1", formers[0].id, (0.0, 0.05), (1.0, 0.0, 0.0)))
        return tuple(found)

    def _dowel_band(self, dowel: Part) -> tuple[float, float]:
        """Its hole, square through a side that stands oblique, is wider by what it wanders."""
        x = float(dowel.centroid_mm[0])
        oblique = self._steepest(x, [s.width_mm / 2 for s in self.stations])
        return 0.0, self.shop.slip_mm + self.side_mm * oblique + GLUE_GAP_MM

    def _former_band(self, former: Part) -> tuple[float, float]:
        """A former cut square to the smaller of its faces gapes at the larger one."""
        assert isinstance(former.form, Plate)
        x = float(former.pose.origin[0])
        steep = max(
            self._steepest(x, values) for values in (
                [s.width_mm / 2 for s in self.stations], [s.top_mm for s in self.stations],
                [s.bottom_mm for s in self.stations])
        )
        gape = former.form.thickness_mm * steep
        return 0.0, self.shop.press_mm + gape + GLUE_GAP_MM


def _overlap(a: Part, b: Part) -> bool:
    """Their boxes meet."""
    one, two = (np.array(p.solid.bounding_box()) for p in (a, b) if p.solid is not None)
    return bool(np.all(one[:3] < two[3:] + 1.0) and np.all(two[:3] < one[3:] + 1.0))


