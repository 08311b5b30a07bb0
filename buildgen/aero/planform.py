"""Areas and mean chords of a lifting surface built from trapezoid panels.

Panels run from the root out and describe one half of a mirrored surface, or the whole of a fin.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

from buildgen.aero.bounds import above_zero, not_negative
from buildgen.problems import DesignError, Problem


@dataclass(frozen=True, slots=True)
class Panel:
    """One trapezoid of a surface.

    Attributes:
        span_mm: along the panel, not its projection.
        root_chord_mm: inner chord.
        tip_chord_mm: outer chord; 0 makes a point.
        sweep_mm: how far the tip's leading edge lies aft of the root's.
        dihedral_deg: rise of this panel above the level (not above its neighbour).
    """

    span_mm: float
    root_chord_mm: float
    tip_chord_mm: float
    sweep_mm: float = 0.0
    dihedral_deg: float = 0.0

    def __post_init__(self) -> None:
        above_zero(span_mm=self.span_mm)
        not_negative(root_chord_mm=self.root_chord_mm, tip_chord_mm=self.tip_chord_mm)
        above_zero(mean_chord_mm=self.mean_chord_mm)

    @property
    def mean_chord_mm(self) -> float:
        """Geometric mean of the two ends."""
        return 0.5 * (self.root_chord_mm + self.tip_chord_mm)

    @property
    def area_mm2(self) -> float:
        """In the panel's own plane."""
        return self.span_mm * self.mean_chord_mm

    @property
    def rise_mm(self) -> tuple[float, float]:
        """What its span adds to y and to z."""
        lean = math.radians(self.dihedral_deg)
        return self.span_mm * math.cos(lean), self.span_mm * math.sin(lean)


@dataclass(frozen=True, slots=True)
class MeanChord:
    """The mean aerodynamic chord and where it lies, from the leading edge of the root chord.

    Attributes:
        length_mm: its length.
        le_x_mm: x of its leading edge.
        y_mm: its station, projected on the level.
        z_mm: its height.
    """

    length_mm: float
    le_x_mm: float
    y_mm: float
    z_mm: float

    @property
    def quarter_x_mm(self) -> float:
        """x of its quarter chord."""
        return self.le_x_mm + 0.25 * self.length_mm


def area_mm2(panels: Sequence[Panel]) -> float:
    """Sum of the panels' own areas (one half of a mirrored surface), dihedral not projected.

    Source: geometry of the trapezoid, as for the other areas here.
    """
    return sum(panel.area_mm2 for panel in _some(panels))


def projected_area_mm2(panels: Sequence[Panel]) -> float:
    """Area seen from straight above, one half of a mirrored surface; 0 for an upright fin."""
    return sum(panel.rise_mm[0] * panel.mean_chord_mm for panel in _some(panels))


def side_area_mm2(panels: Sequence[Panel]) -> float:
    """Area seen from the side, rises and falls summed as they are; a fin's is its own area."""
    return sum(abs(panel.rise_mm[1]) * panel.mean_chord_mm for panel in _some(panels))


def half_span_mm(panels: Sequence[Panel]) -> float:
    """From the root to the tip, projected on the level."""
    return sum(panel.rise_mm[0] for panel in _some(panels))


def wetted_area_mm2(panels: Sequence[Panel], thickness_ratio: float = 0.0) -> float:
    """Skin of both faces, one half of a mirrored surface, ends not counted.

    Args:
        panels: from the root out.
        thickness_ratio: of the section, 0 to 0.3.

    Source: S (1.977 + 0.52 t/c), 2.003 S below t/c 0.05: D. P. Raymer, Aircraft Design: A
        Conceptual Approach, wetted area (from memory). The girth of a NACA 0012, 2.042 chords,
        is 0.1 % more.
    """
    not_negative(thickness_ratio=thickness_ratio)
    factor = 1.977 + 0.52 * thickness_ratio if thickness_ratio > 0.05 else 2.003
    return factor * area_mm2(panels)


def aspect_ratio(panels: Sequence[Panel], mirrored: bool = True) -> float:
    """Span squared over area, both projected on the level.

    A surface that is not mirrored (a fin) is taken along its own span, as a surface of that span
    alone: what stands at its root is a matter of the method that uses it.

    Source: definition, b^2/S.
    """
    if mirrored:
        return 2.0 * half_span_mm(panels) ** 2 / projected_area_mm2(panels)
    along = sum(panel.span_mm for panel in _some(panels))
    return along**2 / area_mm2(panels)


def taper_ratio(panels: Sequence[Panel]) -> float:
    """Last chord over first. Source: definition."""
    above_zero(root_chord_mm=_some(panels)[0].root_chord_mm)
    return panels[-1].tip_chord_mm / panels[0].root_chord_mm


def sweep_deg(panels: Sequence[Panel], chord_fraction: float = 0.25) -> float:
    """Mean sweep of the line at a fraction of the chord, weighed by the panels' spans.

    Args:
        panels: from the root out.
        chord_fraction: 0 leading edge, 0.25 quarter chord, 0.5 half chord, 1 trailing edge.

    Returns:
        Degrees, aft positive, against a line square to the root.

    Source: geometry.
    """
    back = along = 0.0
    for panel in _some(panels):
        back += panel.sweep_mm + chord_fraction * (panel.tip_chord_mm - panel.root_chord_mm)
        along += panel.span_mm
    return math.degrees(math.atan2(back, along))


def mean_aerodynamic_chord(panels: Sequence[Panel]) -> MeanChord:
    """Mean aerodynamic chord of a surface of any number of panels.

    Each panel's own mean chord is exact; the whole is their mean weighed by the panels' areas,
    which is the integral of chord squared over the integral of chord.

    Raises:
        DesignError: no panel is given.

    Source: MAC = (2/3) c_r (1 + t + t^2)/(1 + t), y = (s/3)(1 + 2 t)/(1 + t) for a trapezoid;
        any aerodynamics text (closed form).
    """
    x = y = z = area = 0.0
    sums = [0.0, 0.0, 0.0, 0.0]
    for panel in _some(panels):
        length, fraction = _own_mean_chord(panel)
        dy, dz = panel.rise_mm
        place = (x + fraction * panel.sweep_mm, y + fraction * dy, z + fraction * dz)
        for axis, value in enumerate((length, *place)):
            sums[axis] += panel.area_mm2 * value
        area += panel.area_mm2
        x, y, z = x + panel.sweep_mm, y + dy, z + dz
    return MeanChord(*(value / area for value in sums))


def _own_mean_chord(panel: Panel) -> tuple[float, float]:
    """Length of one panel's mean chord and its place as a fraction of the panel's span."""
    root, tip = panel.root_chord_mm, panel.tip_chord_mm
    length = 2.0 / 3.0 * (root**2 + root * tip + tip**2) / (root + tip)
    return length, (root + 2.0 * tip) / (3.0 * (root + tip))


def _some(panels: Sequence[Panel]) -> Sequence[Panel]:
    if not panels:
        raise DesignError(Problem("panels", "holds no panel.", "Give at least one."))
    return panels
