"""Faults that no single key shows: panels that do not meet, a wing without a chord."""

from __future__ import annotations

from collections.abc import Iterator
from itertools import pairwise

from buildgen.design.schema import Definition
from buildgen.problems import Problem


def meeting_faults(definition: Definition) -> Iterator[Problem]:
    """Every such fault."""
    yield from _panels(definition)
    yield from _ranges(definition)
    yield from _stations(definition)


def _panels(definition: Definition) -> Iterator[Problem]:
    panels = definition.wing.panel
    if panels[0].root_chord_mm is None:
        yield Problem("wing.panel[1].root_chord_mm", "is missing.",
                      "The innermost panel needs its chord at the root.")
    chord = panels[0].root_chord_mm or 0.0
    for number, (inner, outer) in enumerate(pairwise(panels), start=2):
        chord = inner.tip_chord_mm or (inner.root_chord_mm or chord)
        if outer.root_chord_mm is not None and abs(outer.root_chord_mm - chord) > 0.05:
            yield Problem(
                f"wing.panel[{number}].root_chord_mm",
                f"Panels {number - 1} and {number} do not meet: {chord:g} mm at the tip of the"
                f" one, {outer.root_chord_mm:g} mm at the root of the other.",
                "Make them equal, or leave the root chord out.",
            )
    for number, panel in enumerate(panels, start=1):
        if panel.rib_count and panel.rib_spacing_mm:
            yield Problem(f"wing.panel[{number}].rib_count",
                          "A panel takes either rib_count or rib_spacing_mm.", "Leave one out.")


def _ranges(definition: Definition) -> Iterator[Problem]:
    for number, item in enumerate(definition.equipment, start=1):
        if item.range_mm is not None and item.range_mm[0] > item.range_mm[1]:
            yield Problem(f"equipment[{number}].range_mm",
                          f"{list(item.range_mm)} runs backwards.",
                          "Give the foremost x first, then the aftmost.")


def _stations(definition: Definition) -> Iterator[Problem]:
    if definition.fuselage is None:
        if definition.power is not None and definition.power.place == "nose":
            yield Problem("power.place", "A motor in the nose needs a fuselage.",
                          'Add [fuselage], or place = "wing".')
        return
    xs = sorted(s.x_mm for s in definition.fuselage.station)
    for a, b in pairwise(xs):
        if b - a < 10:
            yield Problem("fuselage.station", f"Stations at x = {a:g} and {b:g} mm stand closer"
                          " than 10 mm.", "Move them apart, or leave one out.")
