"""The fit coupon: a small sheet from which kerf and plays are read off, by calipers or by feel.

Everything on it is cut as drawn, without kerf, so that what is measured is the beam itself.
With the kerf k, a slot drawn at thickness + g comes out g + k wider than the thickness, a hole
drawn at diameter + g likewise, and a peg drawn at width + g comes out g - k wider: elementary.
"""

from __future__ import annotations

from dataclasses import dataclass

from shapely.geometry import Polygon, box

from buildgen.part import Kit, Mark, Part, Plate, Title
from buildgen.problems import DesignError, Problem
from buildgen.sheets.layout import refuse
from buildgen.sheets.sheet import Placement, Sheet
from buildgen.sheets.stock import usual_kerf
from buildgen.shelf import Material
from buildgen.solid import Circle, Pose

BARS, BAR_WIDE_MM, BAR_HIGH_MM = 10, 10.0, 20.0
SLOT_GRADES = (-0.30, -0.25, -0.20, -0.15, -0.10, -0.05, 0.0, 0.05, 0.10)
HOLE_GRADES = (-0.40, -0.30, -0.20, -0.10, 0.0, 0.10)
HOLE_MM = (3.0, 4.0, 6.0, 8.0)
PEG_GRADES = (0.0, 0.1, 0.2, 0.3, 0.4, 0.5)
PEG_MM, PEG_DEEP_MM = 8.0, 5.0
SLOT_LONG_MM = 10.6
"""Half a millimetre longer than a bar is wide: only its thickness shall bind."""
PLATE_MM = (132.0, 62.0)
SOCKET_MM = (16.0, 20.0)
THICKEST_MM = 10.0
EDGE_MM, GAP_MM, LETTER_MM = 4.0, 1.5, 2.5
ID, SOCKET_ID = "COUPON", "PEG"


@dataclass(frozen=True, eq=False)
class Coupon:
    """What to cut and what to read off it."""

    sheet: Sheet
    kit: Kit
    text: str


def coupon(material: Material, thickness_mm: float) -> Coupon:
    """The coupon of a material, cut from a piece of it as measured.

    Raises:
        DesignError: the material must not go under a laser, or is too thick.
    """
    refuse(material, "")
    if thickness_mm > THICKEST_MM:
        raise DesignError(Problem("", f"The coupon's slots hold sheets up to {THICKEST_MM:g} mm.",
                                  "Measure the kerf of a thicker sheet on a bar cut from it."))
    plate = _plate(material.name, thickness_mm)
    bars = [_bar(n, material.name, thickness_mm) for n in range(1, BARS + 1)]
    socket = _part(SOCKET_ID, material.name, _socket(thickness_mm))
    small = (*bars, socket)
    places = [
        Placement(p.id, EDGE_MM + n * (BAR_WIDE_MM + GAP_MM), EDGE_MM, 0.0)
        for n, p in enumerate(small)
    ]
    lift = EDGE_MM + BAR_HIGH_MM + GAP_MM + PEG_DEEP_MM
    places.append(Placement(ID, EDGE_MM, lift, 0.0))
    wide, high = PLATE_MM[0] + 2 * EDGE_MM, lift + PLATE_MM[1] + EDGE_MM
    parts = (*small, plate)
    sheet = Sheet(f"coupon-{material.name}-{thickness_mm:g}", material.name, thickness_mm, wide,
                  high, 0.0, material.grain, tuple(places), parts, (0.0, 0.0, 0.0, 0.0))
    kit = Kit(Title("fit-coupon", "Fit coupon", "1", "0" * 64), parts)
    return Coupon(sheet, kit, coupon_text(material, thickness_mm))


def _part(id: str, material: str, form: Plate) -> Part:
    return Part(id, "fit coupon", material, form, Pose(), "", "")


def _bar(number: int, material: str, thickness_mm: float) -> Part:
    outline = box(0, 0, BAR_WIDE_MM, BAR_HIGH_MM)
    return _part(f"B{number}", material, Plate(outline, thickness_mm))


def _plate(material: str, thickness_mm: float) -> Part:
    """Slots above, holes in the middle, pegs along the lower edge; each with its grade."""
    outline = box(0, 0, *PLATE_MM)
    marks: list[Mark] = [Mark(ID, (118.0, 56.0), LETTER_MM),
                         Mark(f"{thickness_mm:g} mm", (118.0, 50.5), LETTER_MM)]
    for slot, mark in _slots(thickness_mm):
        outline = outline.difference(slot)
        marks.append(mark)
    circles = []
    for circle, mark in _holes():
        circles.append(circle)
        marks.append(mark)
    for peg, mark in _pegs():
        outline = outline.union(peg)
        marks.append(mark)
    marks += [Mark(f"{d:g}", (5.0, _row(k)), LETTER_MM) for k, d in enumerate(HOLE_MM)]
    assert isinstance(outline, Polygon)
    return _part(ID, material, Plate(outline, thickness_mm, tuple(circles), None, tuple(marks)))


def grade_label(grade_mm: float) -> str:
    """A grade as engraved, in hundredths of a millimetre."""
    return f"{100 * grade_mm:+.0f}" if abs(grade_mm) > 1e-9 else "0"


def _slots(thickness_mm: float) -> list[tuple[Polygon, Mark]]:
    found = []
    for k, grade in enumerate(SLOT_GRADES):
        x, wide = 8.0 + 11.5 * k, thickness_mm + grade
        slot = box(x - wide / 2, 48.0, x + wide / 2, 48.0 + SLOT_LONG_MM)
        found.append((slot, Mark(grade_label(grade), (x, 45.4), LETTER_MM)))
    return found


def _row(k: int) -> float:
    """Middle of a row of holes above the plate's lower edge, the smallest on top."""
    return (40.0, 32.2, 22.0, 9.3)[k]


def _holes() -> list[tuple[Circle, Mark]]:
    found = []
    for k, diameter in enumerate(HOLE_MM):
        for n, grade in enumerate(HOLE_GRADES):
            x, y = 15.0 + 15.5 * n, _row(k)
            radius = (diameter + grade) / 2
            mark = Mark(grade_label(grade), (x, y - radius - 2.6), LETTER_MM * 0.8)
            found.append(((x, y, radius), mark))
    return found


def _pegs() -> list[tuple[Polygon, Mark]]:
    found = []
    for k, grade in enumerate(PEG_GRADES):
        x, wide = 12.0 + 20.0 * k, PEG_MM + grade
        peg = box(x - wide / 2, -PEG_DEEP_MM, x + wide / 2, 1.0)
        found.append((peg, Mark(grade_label(grade), (x, -2.2), LETTER_MM * 0.8)))
    return found


def _socket(thickness_mm: float) -> Plate:
    """A piece of its own with a slot as long as a peg is wide, and loose in the other way."""
    wide, high = SOCKET_MM
    loose = thickness_mm + 0.5
    slot = box((wide - PEG_MM) / 2, 16.0 - loose, (wide + PEG_MM) / 2, 16.0)
    mark = Mark(SOCKET_ID, (wide / 2, 2.7), LETTER_MM)
    return Plate(box(0, 0, wide, high).difference(slot), thickness_mm, (), None, (mark,))


def coupon_text(material: Material, thickness_mm: float) -> str:
    """What to measure, what to try, and what to enter where."""
    usual = usual_kerf(material, thickness_mm)
    rows = [
        f"Fit coupon for {material.name}, {thickness_mm:g} mm. Everything is cut as drawn, without"
        " kerf.", f"Laser: {material.laser_note}", "",
        f"1  Kerf. Lay the {BARS} bars B1 to B{BARS} side by side, measure the row L across their"
        f" {BAR_WIDE_MM:g} mm sides:",
        f"       kerf_mm = ({BARS * BAR_WIDE_MM:g} - L) / {BARS}      usual for this material:"
        f" {usual:g}",
        "   By feel: the largest peg of the plate that enters the loose piece PEG has twice the"
        " kerf as its grade.",
        "2  Glued fits. Find the slot into which a bar goes with its thickness by light pressure."
        " Its grade g, in hundredths of a mm:",
        "       press_mm = (g / 100 + kerf_mm) / 2",
        "3  Sliding fits. The same with the slot in which the bar slides freely:",
        "       slip_mm = (g / 100 + kerf_mm) / 2",
        "   Or with a rod or tube of 3, 4, 6 or 8 mm in the round holes.", "",
        f"   grade g   play on each side at a kerf of {usual:g} mm",
    ]
    rows += [f"   {grade_label(g):>7}   {(g + usual) / 2:+.3f}" for g in
             sorted({*SLOT_GRADES, *HOLE_GRADES})]
    rows += ["", "Enter into the definition:", "", "[laser]", f"kerf_mm = {usual:g}      # step 1",
             "press_mm = 0.0      # step 2", "slip_mm = 0.1       # step 3", "",
             "or, for this material and thickness only:", "", "[[stock.sheet]]",
             f'material = "{material.name}"', f"thickness_mm = {thickness_mm:g}",
             f"measured_mm = {thickness_mm:g}    # with calipers", f"kerf_mm = {usual:g}"]
    return "\n".join(rows) + "\n"
