"""Cradles: plates under the ribs that set a panel true on a flat board, and rails between them.

Everything is computed in the panel's own frame: x aft, y along the panel, z square to it. The board
lies flat in that frame, so twist and taper stand in the plates' upper edges alone.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from functools import cached_property

import numpy as np
import shapely
from shapely.geometry import LineString, Polygon, box

from buildgen.airframe.bays import Bay
from buildgen.airframe.blank import parts_of
from buildgen.airframe.shop import Shop
from buildgen.airframe.stations import Place, places
from buildgen.airframe.surface import Panel, WingShape
from buildgen.design.schema import Jig
from buildgen.part import Mark, Part
from buildgen.solid import Pose

STEP = "Jigs: the board is set up"
KEY = "wing.jig"
CLEAR_MM = 0.3
"""Between a plate's stop and the nose: the finished nose must come out."""
NOSE_MM = 4.0
"""How deep the gap between nose and stop reaches."""
TAIL_MM = 1.0
"""A plate ends this far ahead of the trailing edge."""
RAIL_MOST_MM = 280.0
"""A longer rail is cut in pieces that meet between two plates."""
NARROW_MM = 40.0
"""Where the plates share less than this along the chord, one rail serves."""


@dataclass(frozen=True, eq=False)
class Cradle:
    """The plates and rails under one starboard panel."""

    shop: Shop
    panel: Panel
    given: Jig
    ribs: tuple[Place, ...]

    @cached_property
    def thick_mm(self) -> float:
        return self.shop.thickness(self.given.material, self.given.thickness_mm)

    @cached_property
    def board_mm(self) -> float:
        """The board below the panel's own plane, along its normal."""
        low = min(float(((p.points - self.panel.root.nose) @ self.panel.up).min())
                  for p in (self.panel.root, self.panel.tip))
        return low - self.given.above_board_mm

    @cached_property
    def stations_mm(self) -> tuple[float, ...]:
        """Middles of the plates along the panel: under the first and last rib and every n-th."""
        middles = [r.middle_mm for r in self.ribs]
        inside = [m for m in middles if self.thick_mm < m < self.panel.length_mm - self.thick_mm]
        chosen = inside[:: self.given.every]
        if inside and inside[-1] not in chosen:
            chosen.append(inside[-1])
        half = self.thick_mm / 2 + 0.5
        kept: list[float] = []
        for s in chosen:
            if not kept or s - kept[-1] > 2 * half + 4:
                kept.append(s)
        return tuple(kept)

    def pose(self, s_mm: float) -> Pose:
        """Frame of a plate whose middle stands there: x aft, y up, z towards the root."""
        return self.panel.plane(s_mm + self.thick_mm / 2)

    # ------------------------------------------------------------ plates

    def whole(self, s_mm: float) -> Polygon:
        """A plate with its stop, without slots: under the wing's smaller section of both faces."""
        pose = self.pose(s_mm)
        inner = Pose(pose.rotation, pose.origin + pose.rotation[:, 2] * self.thick_mm)
        sections = [Polygon(pose.local(self.panel.ring(p))[:, :2]) for p in (pose, inner)]
        wing = shapely.union_all(sections)
        x0, _, x1, _ = wing.bounds
        nose_y = max(float(p.exterior.coords[int(np.argmin(np.array(p.exterior.coords)[:, 0]))][1])
                     for p in sections)
        below = parts_of(box(x0, self.board_mm, x1 - TAIL_MM, 500.0).difference(wing))
        under = min(below, key=lambda p: p.bounds[1])
        stop = box(x0 - self.given.stop_mm, self.board_mm, x0 - CLEAR_MM, nose_y)
        foot = box(x0 - self.given.stop_mm, self.board_mm, x0 + 0.1, nose_y - NOSE_MM)
        whole = shapely.union_all([under, stop, foot]).difference(wing)
        return max(parts_of(whole), key=lambda p: p.area)

    @cached_property
    def rails_x_mm(self) -> tuple[float, ...]:
        """x of the rails in the panel's frame: where every plate stands."""
        spans = []
        for s in self.stations_mm:
            x0, _, x1, _ = self.whole(s).bounds
            start = float(self.pose(s).origin[0])
            spans.append((start + x0 + self.given.stop_mm, start + x1))
        low, high = max(a for a, _ in spans) + 8, min(b for _, b in spans) - 8
        if high - low < NARROW_MM:
            return ((low + high) / 2,) if high > low else ()
        return low, high

    def _slot(self, x: float, low: float, high: float) -> Polygon:
        half = self.thick_mm / 2 + self.shop.slip_mm
        return box(x - half, low, x + half, high)

    def _plate(self, k: int, s_mm: float) -> Part:
        pose = self.pose(s_mm)
        body = self.whole(s_mm)
        lap = self.board_mm + self.given.rail_mm / 2
        start = float(pose.origin[0])
        for x in self.rails_x_mm:
            body = body.difference(self._slot(x - start, self.board_mm - 1, lap))
        id = f"JG{self.panel.index + 1}-{k}"
        span = self.panel.start_mm + s_mm
        outline = max(parts_of(body), key=lambda p: p.area)
        return self.shop.plate(
            id, f"cradle plate, {span:.0f} mm along the span", self.given.material,
            self.given.thickness_mm, outline, pose, STEP, KEY,
            marks=self._marks(outline, s_mm)).as_tool()

    def _marks(self, outline: Polygon, s_mm: float) -> tuple[Mark, ...]:
        """A line down from a quarter of the chord: where the wing's twist turns."""
        x = self.panel.chord(s_mm) / 4
        _, y0, _, y1 = outline.bounds
        column = outline.buffer(-1.0).intersection(LineString([(x, y0), (x, y1)]))
        if column.is_empty:
            return ()
        line = max(getattr(column, "geoms", [column]), key=lambda g: g.length)
        (ax, ay), (bx, by) = line.coords[0], line.coords[-1]
        top = max(ay, by)
        return (Mark(line=((ax, top), (bx, max(min(ay, by), top - 8.0)))),)

    # ------------------------------------------------------------ rails

    def _rail_ends(self) -> list[tuple[float, float]]:
        """Pieces of a rail along the panel; they meet half way between two plates."""
        stations = self.stations_mm
        first, last = stations[0] - 12, stations[-1] + 12
        pieces, start = [], first
        for a, b in zip(stations, stations[1:], strict=False):
            ahead = next((c for c in stations if c > b), last)
            if (b + ahead) / 2 - start > RAIL_MOST_MM and (a + b) / 2 - start > 20:
                pieces.append((start, (a + b) / 2))
                start = (a + b) / 2
        return [*pieces, (start, last)]

    def _rails(self) -> Iterator[Part]:
        up, along = self.panel.up, self.panel.along
        for r, x in enumerate(self.rails_x_mm, start=1):
            for p, (low, high) in enumerate(self._rail_ends(), start=1):
                origin = self.panel.root.nose + self.board_mm * up + low * along
                origin = origin + (x - self.panel.root.nose[0] - self.thick_mm / 2) * np.array(
                    [1.0, 0.0, 0.0])
                body = box(0, 0, high - low, self.given.rail_mm)
                for s in self.stations_mm:
                    if low < s < high:
                        body = body.difference(self._slot(s - low, self.given.rail_mm / 2,
                                                          self.given.rail_mm + 1))
                id = f"JR{self.panel.index + 1}-{r}{'abcdefgh'[p - 1]}"
                yield self.shop.plate(
                    id, f"cradle rail {r}", self.given.material, self.given.thickness_mm, body,
                    Pose.at(origin, along, up), STEP, KEY).as_tool()

    @property
    def parts(self) -> tuple[Part, ...]:
        if not self.stations_mm:
            return ()
        plates = (self._plate(k, s) for k, s in enumerate(self.stations_mm, start=1))
        return (*plates, *self._rails())


def make_jigs(shop: Shop, wing: WingShape, bays: tuple[Bay, ...]) -> tuple[Part, ...]:
    """The cradle of every panel, where the definition asks for it."""
    given = shop.definition.wing.jig
    if given is None:
        return ()
    ribs = places(shop, wing, bays)
    return tuple(
        part for panel in wing.panels
        for part in Cradle(shop, panel, given, tuple(
            r for r in ribs if r.panel is panel and r.bay is None and not r.single)).parts
    )
