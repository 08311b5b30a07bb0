"""What is wrong with a moving surface's place: told before anything is made."""

from __future__ import annotations

from collections.abc import Iterator
from typing import TYPE_CHECKING

from buildgen.airframe.shop import Shop
from buildgen.problems import Problem

if TYPE_CHECKING:
    from buildgen.airframe.moving import ControlPlace

TORQUE_WALL_MM = 0.45
"""Of the brass tube in which a torque rod turns: 3 x 2.1 round a wire of 2 mm."""
TORQUE_ARM_MM = (12.0, 22.0)
"""Of a torque rod: from the root along the span, and its length; common practice, no source."""
BEHIND_NOSE_MM = 12.0
"""For the horn's wood between the nose and the edge of a built-up surface."""
def not_together(shop: Shop) -> Iterator[Problem]:
    """What no surface can hang behind as yet."""
    wing = shop.definition.wing
    if not wing.control:
        return
    if wing.trailing_edge.kind == "sheet":
        yield Problem("wing.trailing_edge.kind",
                      "A sheeted trailing edge does not stop at moving surfaces.",
                      'Take "stock" or "none" on a wing with wing.control.')


def place_faults(
    place: ControlPlace, others: list[ControlPlace]
) -> Iterator[Problem]:
    given, panel = place.given, place.panel
    ribs = place.shop.definition.wing.ribs
    end = place.shop.thickness(ribs.root_material or ribs.material,
                               ribs.root_thickness_mm or ribs.thickness_mm)
    margin = place.rib_mm + given.end_gap_mm + end + 2
    low, high = place.ends_mm
    ends = panel.start_mm + margin, panel.start_mm + panel.length_mm - margin
    where = f"The {given.name} from {panel.start_mm + low:.0f} to {panel.start_mm + high:.0f} mm"
    if low < margin or (high > panel.length_mm - margin and not place.at_tip):
        yield Problem(
            f"{place.key}.from_mm" if low < margin else f"{place.key}.to_mm",
            f"{where} reaches over the end of panel {panel.index + 1}.",
            f"In this panel it may lie between {ends[0]:.0f} and {ends[1]:.0f} mm; give each panel"
            " its own surface.",
        )
    for other in others:
        gap = 2 * place.rib_mm + 2
        if other.panel is panel and low < other.bay_mm[1] + gap and high > other.bay_mm[0] - gap:
            yield Problem(f"{place.key}.from_mm",
                          f"{where} runs into the {other.given.name} ({other.key}).",
                          f"Leave {gap + 2 * given.end_gap_mm:.0f} mm between them for two ribs.")
    if given.kind == "built-up":
        widths = [panel.chord(s) * (1 - place.fraction(s)) for s in place.ends_mm]
        least = given.nose_mm + given.edge_mm + BEHIND_NOSE_MM
        if min(widths) < least:
            yield Problem(
                f"{place.key}.chord",
                f"The {given.name} is {min(widths):.0f} mm wide at its narrow end: nose, horn and"
                f" edge need {least:.0f} mm.",
                'Make it wider, edge_mm or nose_mm less, or take kind = "strip".')
    if given.drive == "torque-rod":
        yield from _torque_faults(place)
    if given.drive == "servo" and given.horn_side == "up":
        yield Problem(f"{place.key}.horn_side",
                      "The servo's arm comes out below the wing, the horn stands above it.",
                      'Take horn_side = "down", or drive = "none".')
    bay = place.servo_bay_mm
    if bay is not None and (bay[0] < low + 8 or bay[1] > high - 8):
        least, most = (panel.start_mm + low + 8 + (bay[1] - bay[0]) / 2,
                       panel.start_mm + high - 8 - (bay[1] - bay[0]) / 2)
        yield Problem(f"{place.key}.servo.at_mm",
                      f"The servo's bay does not lie ahead of the {given.name}.",
                      f"Place it between {least:.0f} and {most:.0f} mm.")


def _torque_faults(place: ControlPlace) -> Iterator[Problem]:
    """A torque rod starts at the root, ahead of the fixed trailing edge."""
    panel, edge = place.panel, place.shop.definition.wing.trailing_edge
    if panel.index > 0:
        yield Problem(f"{place.key}.drive",
                      f"A torque rod does not reach into panel {panel.index + 1}.",
                      'Take drive = "servo", or a surface in the first panel.')
        return
    room = place.given.rod_mm / 2 + TORQUE_WALL_MM + 0.5
    for s in (TORQUE_ARM_MM[0], place.bay_mm[0]):
        back = float(panel.point(s, 1.0)[0] - place.axis_point(s)[0])
        if edge.kind != "none" and back - room < edge.width_mm:
            yield Problem(f"{place.key}.drive",
                          f"The torque rod meets the trailing edge, {edge.width_mm:g} mm wide,"
                          f" {back:.0f} mm ahead of its end.",
                          f"Make the {place.given.name} wider than {edge.width_mm + room:.0f} mm,"
                          " or the trailing edge narrower.")
            return
