"""The wing's shape in space: ruled panels between placed sections, starboard side.

A panel is ruled between two placed sections whose points are matched by surface and fraction of
the chord, so every generator runs at a constant fraction. The outline of the wing in any plane is
where the plane meets the generators; nothing else in the project derives it again.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np
from shapely.geometry import Polygon

from buildgen.aero.planform import Panel as PlanPanel
from buildgen.design.schema import Wing
from buildgen.section import Section, blend
from buildgen.solid import Array, Pose, Ruled, ring

PER_SIDE = 201
"""Points on each surface: chord error below 0.01 mm at 300 mm of chord, measured."""
AFT = np.array([1.0, 0.0, 0.0])


@dataclass(frozen=True, eq=False)
class Placed:
    """A section standing in the aircraft: unit contour, chord, twist, leading edge."""

    contour: Array
    chord_mm: float
    twist_deg: float
    nose: Array
    """Leading edge before twist, (3,)."""
    up: Array
    """Unit normal of the panel, (3,)."""

    @cached_property
    def points(self) -> Array:
        """(n, 3) in the aircraft: twist turns about the quarter chord, nose up positive."""
        return self.place(self.contour * self.chord_mm)

    def place(self, flat: Array) -> Array:
        """Points (n, 2) in the untwisted section's plane [mm] to the aircraft."""
        angle = np.radians(self.twist_deg)
        x, y = flat[:, 0] - self.chord_mm / 4, flat[:, 1]
        along = x * np.cos(angle) + y * np.sin(angle) + self.chord_mm / 4
        above = -x * np.sin(angle) + y * np.cos(angle)
        return self.nose + np.outer(along, AFT) + np.outer(above, self.up)

    def height(self, fraction: float) -> tuple[float, float]:
        """Lower and upper ordinate [mm] at a fraction of the chord."""
        middle = (len(self.contour) - 1) // 2
        upper, lower = self.contour[middle::-1], self.contour[middle:]
        low = np.interp(fraction, lower[:, 0], lower[:, 1])
        high = np.interp(fraction, upper[:, 0], upper[:, 1])
        return float(low) * self.chord_mm, float(high) * self.chord_mm

    def point(self, fraction: float, place: str = "middle", inset_mm: float = 0.0) -> Array:
        """A point (3,) in the section at a fraction of the chord: middle, or under a surface."""
        low, high = self.height(fraction)
        level = {"middle": (low + high) / 2, "top": high - inset_mm, "bottom": low + inset_mm}
        return np.asarray(self.place(np.array([[fraction * self.chord_mm, level[place]]]))[0])


@dataclass(frozen=True, eq=False)
class Panel:
    """One ruled panel, starboard; `inner_normal` and `outer_normal` are those of its end planes."""

    index: int
    length_mm: float
    root: Placed
    tip: Placed
    along: Array
    up: Array
    dihedral_deg: float
    inner_normal: Array
    outer_normal: Array
    start_mm: float
    """Distance along the span of its inner end."""

    @property
    def key(self) -> str:
        return f"wing.panel[{self.index + 1}]"

    def nose(self, s_mm: float) -> Array:
        """Untwisted leading edge (3,) at a distance along this panel."""
        share = s_mm / self.length_mm
        return self.root.nose * (1 - share) + self.tip.nose * share

    def chord(self, s_mm: float) -> float:
        share = s_mm / self.length_mm
        return self.root.chord_mm * (1 - share) + self.tip.chord_mm * share

    def twist(self, s_mm: float) -> float:
        share = s_mm / self.length_mm
        return self.root.twist_deg * (1 - share) + self.tip.twist_deg * share

    def point(self, s_mm: float, fraction: float, place: str = "middle") -> Array:
        """A point (3,) on the generator at this fraction of the chord."""
        share = s_mm / self.length_mm
        inner, outer = self.root.point(fraction, place), self.tip.point(fraction, place)
        return inner * (1 - share) + outer * share

    def plane(self, s_mm: float, normal: Array | None = None) -> Pose:
        """Frame of a rib's outer face: x aft, y up in the plane, z towards the root."""
        inward = -(self.along if normal is None else normal)
        return Pose.at(self.nose(s_mm), AFT, np.cross(inward, AFT))

    def ring(self, pose: Pose) -> Array:
        """(n, 3) points where the plane z = 0 of `pose` meets the generators."""
        normal = pose.rotation[:, 2]
        run = self.tip.points - self.root.points
        share = ((pose.origin - self.root.points) @ normal) / (run @ normal)
        return self.root.points + share[:, None] * run

    def outline(self, pose: Pose) -> Polygon:
        """The wing's outline in a plane, in its x, y."""
        return Polygon(pose.local(self.ring(pose))[:, :2])

    def end_plane(self, outer: bool) -> Pose:
        """Frame of the plane in which the panel ends."""
        if outer:
            return self.plane(self.length_mm, self.outer_normal)
        return self.plane(0.0, self.inner_normal)

    def envelope(self, inner: Pose, outer: Pose) -> Ruled:
        """The solid wing between two planes: upper curve, lower curve, trailing edge."""
        rings = [self.ring(pose) for pose in (inner, outer)]
        middle = (len(rings[0]) - 1) // 2
        first, last = (
            ring(
                (points[: middle + 1], True),
                (points[middle:], True),
                (np.vstack([points[-1:], points[:1]]), False),
            )
            for points in rings
        )
        return Ruled(first, last)

    @cached_property
    def whole(self) -> Ruled:
        """The solid panel between its end planes."""
        return self.envelope(self.end_plane(False), self.end_plane(True))


@dataclass(frozen=True, eq=False)
class WingShape:
    """The starboard half of the wing; port is its mirror image in y."""

    panels: tuple[Panel, ...]
    plan: tuple[PlanPanel, ...]

    @property
    def flat_centre(self) -> bool:
        """Both halves in line at the root: spars may run through."""
        return abs(self.panels[0].dihedral_deg) < 1e-9

    @cached_property
    def runs(self) -> tuple[tuple[Panel, ...], ...]:
        """Neighbouring panels without a dihedral break between them."""
        groups: list[list[Panel]] = []
        for panel in self.panels:
            if groups and abs(groups[-1][-1].dihedral_deg - panel.dihedral_deg) < 1e-9:
                groups[-1].append(panel)
            else:
                groups.append([panel])
        return tuple(tuple(g) for g in groups)

    @property
    def half_span_mm(self) -> float:
        """Along the panels."""
        return sum(p.length_mm for p in self.panels)

    def at(self, span_mm: float) -> tuple[Panel, float]:
        """The panel at a distance along the span and the distance along it."""
        for panel in self.panels:
            if span_mm <= panel.start_mm + panel.length_mm + 1e-9:
                return panel, span_mm - panel.start_mm
        last = self.panels[-1]
        return last, span_mm - last.start_mm


def _along(dihedral_deg: float) -> Array:
    angle = np.radians(dihedral_deg)
    return np.array([0.0, np.cos(angle), np.sin(angle)])


def _bisector(a: Array, b: Array) -> Array:
    total = a + b
    return np.asarray(total / np.linalg.norm(total))


def shape_wing(wing: Wing, sections: dict[str, Section]) -> WingShape:
    """Place the wing's panels in space.

    Args:
        wing: the definition; chords and twists may be left out and carry on from inboard.
        sections: each section named in the wing.
    """
    directions = [_along(p.dihedral_deg) for p in wing.panel]
    normals = [_bisector(a, b) for a, b in zip(directions, directions[1:], strict=False)]
    normals = [np.array([0.0, 1.0, 0.0]), *normals, directions[-1]]
    nose = np.zeros(3)
    start = 0.0
    chord = wing.panel[0].root_chord_mm or 0.0
    twist, name = 0.0, wing.section
    panels: list[Panel] = []
    plan: list[PlanPanel] = []
    for i, given in enumerate(wing.panel):
        along = directions[i]
        up = np.cross(AFT, along)
        tip_chord = given.tip_chord_mm or chord
        tip_twist = twist if given.twist_deg is None else given.twist_deg
        tip_name = given.section or name
        tip_nose = nose + given.span_mm * along + given.sweep_mm * AFT
        ends = [
            Placed(
                _contour(sections[n], c, wing.min_trailing_edge_mm),
                c, t + wing.incidence_deg, at, up,
            )
            for n, c, t, at in (
                (name, chord, twist, nose), (tip_name, tip_chord, tip_twist, tip_nose),
            )
        ]
        panels.append(
            Panel(i, given.span_mm, ends[0], ends[1], along, up, given.dihedral_deg,
                  normals[i], normals[i + 1], start)
        )
        plan.append(PlanPanel(given.span_mm, chord, tip_chord, given.sweep_mm, given.dihedral_deg))
        nose, chord, twist, name = tip_nose, tip_chord, tip_twist, tip_name
        start += given.span_mm
    return WingShape(tuple(panels), tuple(plan))


def _contour(section: Section, chord_mm: float, least_edge_mm: float) -> Array:
    return np.asarray(section.with_trailing_edge(least_edge_mm / chord_mm).contour(PER_SIDE))


def section_at(panel: Panel, s_mm: float, inner: Section, outer: Section) -> Section:
    """The section of a panel at a distance along it."""
    return blend(inner, outer, s_mm / panel.length_mm)
