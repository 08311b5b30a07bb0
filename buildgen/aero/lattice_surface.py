"""Lifting surfaces as a vortex lattice wants them: stations, flaps, incidence."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass
from typing import Literal

import numpy as np

from buildgen.aero.bounds import Floats, above_zero, not_negative, within
from buildgen.aero.planform import Panel
from buildgen.problems import DesignError, Problem


@dataclass(frozen=True, slots=True)
class Station:
    """One chord of a surface.

    Attributes:
        x_mm: of the leading edge.
        y_mm: of the leading edge.
        z_mm: of the leading edge.
        chord_mm: along x.
        twist_deg: nose up positive, on top of the surface's incidence.
        mean_line: pairs (x/c, slope dz/dx) from nose to tail, x/c rising; none is a flat plate.
    """

    x_mm: float
    y_mm: float
    z_mm: float
    chord_mm: float
    twist_deg: float = 0.0
    mean_line: tuple[tuple[float, float], ...] = ()

    def slopes(self, x_over_c: Floats) -> Floats:
        """Slope of the mean line, dz/dx, at fractions of the chord, (n,)."""
        if not self.mean_line:
            return np.zeros_like(x_over_c)
        places, slopes = np.asarray(self.mean_line, dtype=np.float64).T
        found: Floats = np.interp(x_over_c, places, slopes)
        return found


@dataclass(frozen=True, slots=True)
class Flap:
    """A hinged tail of a surface: aileron, elevator, rudder, flap.

    Attributes:
        name: what a flow calls it by; the same name on two surfaces moves both.
        hinge: fraction of the chord where the hinge lies, below 1.
        inner_mm: inner end, along the surface from its first station.
        outer_mm: outer end.
        port_sign: 1 when both sides move alike, -1 for ailerons (0: the port side stands still).
        gain: degrees of this flap for one degree of its name; -1 turns it round.

    Positive is trailing edge down; on a fin drawn from the root up, trailing edge to starboard,
    which yaws the nose to starboard. With ``port_sign`` -1 it is the starboard side that goes down.
    """

    name: str
    hinge: float
    inner_mm: float
    outer_mm: float
    port_sign: float = 1.0
    gain: float = 1.0


@dataclass(frozen=True, slots=True)
class Surface:
    """One lifting surface: stations from the root out, or from the root of a fin up.

    Attributes:
        name: wing, tail, fin; unlike any other's.
        stations: two or more.
        mirrored: whether a port side exists; stations then have y of 0 or more.
        incidence_deg: nose up positive.
        chordwise: panels along the chord.
        spanwise: strips along the surface (of one side).
        spacing: of the strips: ``cosine`` closes up towards free ends, ``uniform`` is even.
        flaps: strips are cut at their ends.
    """

    name: str
    stations: tuple[Station, ...]
    mirrored: bool = True
    incidence_deg: float = 0.0
    chordwise: int = 6
    spanwise: int = 16
    spacing: Literal["cosine", "uniform"] = "cosine"
    flaps: tuple[Flap, ...] = ()

    def __post_init__(self) -> None:
        if len(self.stations) < 2:
            raise DesignError(Problem(self.name, "needs two stations or more."))
        above_zero(chordwise=self.chordwise, spanwise=self.spanwise)
        span = self.along_mm[-1]
        if not (np.diff(self.along_mm) > 1e-9 * span).all():
            raise DesignError(Problem(self.name, "has two stations at one place."))
        for station in self.stations:
            not_negative(chord_mm=station.chord_mm, y_mm=station.y_mm if self.mirrored else 0.0)
        for flap in self.flaps:
            within(0.0, 0.999, hinge=flap.hinge)
            within(0.0, flap.outer_mm, inner_mm=flap.inner_mm)
            within(flap.inner_mm + 1e-6 * span, span * (1.0 + 1e-6), outer_mm=flap.outer_mm)

    @property
    def along_mm(self) -> Floats:
        """(k,): distance of each station from the first, along the surface seen from behind."""
        y, z = np.array([(s.y_mm, s.z_mm) for s in self.stations]).T
        return np.concatenate(([0.0], np.cumsum(np.hypot(np.diff(y), np.diff(z)))))


def stations_of(
    panels: Sequence[Panel],
    root_mm: tuple[float, float, float] = (0.0, 0.0, 0.0),
    twists_deg: Sequence[float] = (),
    mean_lines: Sequence[tuple[tuple[float, float], ...]] = (),
) -> tuple[Station, ...]:
    """Stations of a surface given by its panels.

    Args:
        panels: k panels, from the root out.
        root_mm: leading edge of the root chord.
        twists_deg: k + 1, one for each end of a panel, nose up; none is no twist.
        mean_lines: k + 1, likewise; none is flat.

    Raises:
        DesignError: two panels that meet have unlike chords, or the numbers do not match.

    Source: geometry, as ``planform.Panel`` describes it.
    """
    count = len(panels) + 1
    for name, given in (("twists_deg", twists_deg), ("mean_lines", mean_lines)):
        if len(given) not in (0, count):
            raise DesignError(Problem(name, f"has {len(given)} entries, {count} are needed."))
    place, chords = [root_mm], [panels[0].root_chord_mm]
    for k, panel in enumerate(panels):
        if not math.isclose(panel.root_chord_mm, chords[-1], abs_tol=1e-6):
            raise DesignError(Problem(f"panels[{k}]", "does not begin with the last tip's chord."))
        (x, y, z), (dy, dz) = place[-1], panel.rise_mm
        place.append((x + panel.sweep_mm, y + dy, z + dz))
        chords.append(panel.tip_chord_mm)
    return tuple(
        Station(*place[k], chords[k], twists_deg[k] if twists_deg else 0.0,
                mean_lines[k] if mean_lines else ())
        for k in range(count)
    )
