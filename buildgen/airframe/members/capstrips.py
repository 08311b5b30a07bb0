"""Capstrips: a strip over each rib, above and below, between the nose and the trailing edge."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import replace

from buildgen.airframe.bays import Bay
from buildgen.airframe.members.skins import Sheet, ends, nose_aft, nose_line, sheet_mm, tail_line
from buildgen.airframe.moving import ControlPlace, control_places
from buildgen.airframe.shop import Shop
from buildgen.airframe.skin import Line, Skin
from buildgen.airframe.stations import HALF, Place, places
from buildgen.airframe.surface import WingShape
from buildgen.problems import DesignError, Problem

CAPS = "Wing: capstrips"
LEAST_TAIL_MM = 2.3
"""Depth of a rib that is glued to the trailing-edge stock: 2 mm2 on either half of a 2 mm centre
rib, with what twist and play take from it; common practice, no source."""


def make(shop: Shop, wing: WingShape, bays: tuple[Bay, ...]) -> Iterable[Sheet]:
    """A strip over each rib, between the sheeted nose and the trailing edge."""
    given = shop.definition.wing.sheeting
    if given is None or not given.capstrip_mm:
        return
    _deep_tails(shop, wing)
    number = 0
    moving = control_places(shop, wing)
    for place in places(shop, wing, bays):
        number += 0 if place.single else 1
        if place.why == HALF:
            continue
        rib = "R0" if place.single else f"R{number}R"
        fore, aft = _strip_lines(shop, wing, place)
        low, high = _strip_ends(place, given.capstrip_mm)
        for control in (c for c in moving if c.panel is place.panel):
            low, high, aft = _beside(control, place, low, high, aft)
        skin = Skin(place.panel, True, sheet_mm(shop), fore, aft,
                    *ends(place.panel, low, high))
        for upper in (True, False):
            side = "top" if upper else "bottom"
            yield Sheet(
                shop, replace(skin, upper=upper), f"K{side[0].upper()}{number}",
                f"capstrip {side}, rib {number}", given.material, given.thickness_mm, CAPS,
                "wing.sheeting.capstrip_mm", low, high, high - low, rib,
            )


def _deep_tails(shop: Shop, wing: WingShape) -> None:
    """Inset by two capstrips a rib must still have wood to be glued to the trailing-edge stock."""
    edge = shop.definition.wing.trailing_edge
    if edge.kind != "stock":
        return
    for placed in (p for panel in wing.panels for p in (panel.root, panel.tip)):
        low, high = placed.height(1 - edge.width_mm / placed.chord_mm)
        left = high - low - 2 * sheet_mm(shop)
        if left < LEAST_TAIL_MM:
            raise DesignError(Problem(
                "wing.sheeting.capstrip_mm", f"Between the capstrips ribs are {left:.1f} mm deep"
                f" at the trailing edge, at a chord of {placed.chord_mm:g} mm;"
                f" they need {LEAST_TAIL_MM:g} mm.",
                "Take thinner sheet, wider trailing-edge stock, or a sheeted trailing edge."))


def _beside(
    control: ControlPlace, place: Place, low: float, high: float, aft: Line
) -> tuple[float, float, Line]:
    """A strip ahead of a moving surface ends at its false spar.

    One beside it stays clear of its end, one beside its servo clear of the hatch.
    """
    for inner, outer in (control.bay_mm, control.servo_bay_mm or control.bay_mm):
        if place.middle_mm < inner:
            high = min(high, inner)
        elif place.middle_mm > outer:
            low = max(low, outer)
    if not control.bay_mm[0] < place.middle_mm < control.bay_mm[1]:
        return low, high, aft
    return low, high, Line(control.front_mm(0.0), control.front_mm(control.panel.length_mm))


def _strip_lines(shop: Shop, wing: WingShape, place: Place) -> tuple[Line, Line]:
    edges, given = shop.definition.wing, shop.definition.wing.sheeting
    assert given is not None
    back = edges.leading_edge.size_mm if edges.leading_edge.kind == "strip" else 0.0
    fore = nose_aft(shop, wing, place.panel) if given.nose else nose_line(place.panel, back)
    tail = edges.trailing_edge
    return fore, tail_line(place.panel, tail.width_mm if tail.kind != "none" else -2.0)


def _strip_ends(place: Place, width_mm: float) -> tuple[float, float]:
    """Along the panel: centred on the rib, flush with it where the panel ends."""
    thick = place.thickness_mm
    if place.single:
        return 0.0, max(width_mm, thick) / 2
    if place.against_inner:
        return 0.0, max(width_mm, thick)
    length = place.panel.length_mm
    if place.face_mm > length - 1e-6:
        return length - max(width_mm, thick), length
    middle = place.face_mm - thick / 2
    return middle - width_mm / 2, middle + width_mm / 2
