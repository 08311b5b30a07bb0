"""Every cut sheet as a picture to scale, with all that a person at the cutter asks."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

from reportlab.platypus import Flowable, KeepTogether, PageBreak
from shapely.geometry import Point as ShapelyPoint
from shapely.geometry import Polygon

from buildgen.packet import words
from buildgen.packet.amounts import fixed, plain, size_with_inches, with_inches
from buildgen.packet.cautions import caution
from buildgen.packet.package import Package
from buildgen.packet.page import NOTE, WIDTH_MM, Heading, gap, text
from buildgen.packet.pen import (
    HAIR_PT,
    HEAVY_PT,
    INK,
    SMALL_PT,
    SOFT,
    THIN_PT,
    WASH,
    Pen,
    Picture,
    Point,
    text_width_mm,
)
from buildgen.packet.three_view import round_scale
from buildgen.part import Part, Plate
from buildgen.sheets.marks import id_mark
from buildgen.sheets.nest_types import NestPlacement, placed

if TYPE_CHECKING:
    from buildgen.sheets.layout import Placement, Sheet

MOST_HIGH_MM, ABOVE_MM, BETWEEN_MM = 150.0, 5.0, 4.0
LABEL_PT, LEAST_PT, PT_MM = 5.0, 3.2, 25.4 / 72
CAPITAL = 0.73
"""Height of a capital over the size of the letters."""
LONG = 4.5
"""Sheets longer than this times their width are drawn in two strips."""


def sheet_pages(package: Package) -> list[Flowable]:
    """One block for each sheet, as many on a page as fit."""
    if not package.sheets:
        return []
    story: list[Flowable] = [PageBreak(), Heading(words.SHEETS), caution("cut"), gap(3)]
    for sheet in package.sheets:
        story.append(KeepTogether(_block(package, sheet)))
    return story


def _block(package: Package, sheet: Sheet) -> list[Flowable]:
    parts = package.kit.by_id
    count = len(sheet.placements)
    mass = sum(parts[p.part].mass_g for p in sheet.placements)
    listed = ", ".join(f"{n}\u00a0{p.part}" for n, p in enumerate(sheet.placements, start=1))
    return [
        Heading(f"{sheet.file} · {sheet.material} {with_inches(sheet.thickness_mm)}, "
                f"{size_with_inches(sheet.width_mm, sheet.height_mm)}", 1),
        sheet_picture(package, sheet),
        gap(2),
        text(words.SHEET_FACTS.format(
            parts=words.PART_COUNT[count > 1].format(count=count), mass=fixed(mass),
            used=fixed(sheet.used_fraction * 100),
            length=fixed(sheet.cut_length_mm / 1000, 2), kerf=plain(sheet.kerf_mm, 3))),
        text(f"{words.ON_SHEET}: {listed}", NOTE),
        gap(3),
    ]


def laid(placement: Placement) -> NestPlacement:
    """The placement as the nesting understands it."""
    return NestPlacement(placement.part, 0, placement.x_mm, placement.y_mm,
                         placement.rotation_deg, placement.flipped)


def sheet_picture(package: Package, sheet: Sheet) -> Picture:
    """The sheet to a plain scale; a long one in two strips, so that it shows larger."""
    long = sheet.width_mm / (2 if sheet.width_mm > LONG * sheet.height_mm else 1)
    strips = 1 + (long < sheet.width_mm and used_to_mm(package, sheet) > long)
    n = round_scale((WIDTH_MM, MOST_HIGH_MM), (long, sheet.height_mm))
    high = sheet.height_mm / n
    whole = strips * high + (strips - 1) * BETWEEN_MM + ABOVE_MM

    def paint(pen: Pen) -> None:
        for strip in range(strips):
            foot = whole - ABOVE_MM - (strip + 1) * high - strip * BETWEEN_MM
            inner = pen.scaled(1 / n, (-strip * long / n, foot))
            _strip(package, sheet, n, (strip * long, (strip + 1) * long), inner)
        _head(pen, sheet, n, whole)
        if strips * long < sheet.width_mm:
            pen.text((long / n, whole - 2.4), words.REST_EMPTY, SMALL_PT - 1, "right", ink=SOFT)

    return Picture(WIDTH_MM, whole, paint)


def used_to_mm(package: Package, sheet: Sheet) -> float:
    """How far along the sheet its parts reach."""
    return max((outline_of(package, at).bounds[2] for at in sheet.placements), default=0.0)


def outline_of(package: Package, at: Placement) -> Polygon:
    """A part's outline where it lies on its sheet."""
    part = package.kit.by_id[at.part]
    assert isinstance(part.form, Plate)
    return placed(part.form.shape2d, laid(at))


def _strip(
    package: Package, sheet: Sheet, n: float, ends: tuple[float, float], pen: Pen
) -> None:
    """What lies between two x of the sheet; the pen draws in the sheet's mm."""
    pen.canvas.saveState()
    pen.clip((ends[0] - n * 0.3, -n * 0.3), (ends[1] + n * 0.3, sheet.height_mm + n * 0.3))
    pen.box((0, 0), (sheet.width_mm, sheet.height_mm), THIN_PT, SOFT)
    for at in sheet.placements:
        outline = outline_of(package, at)
        if outline.bounds[2] > ends[0] and outline.bounds[0] < ends[1]:
            pen.shape(outline, HAIR_PT * 1.4, INK, WASH)
    pen.canvas.restoreState()
    for x in ends:
        if 0 < x < sheet.width_mm:
            pen.line([(x, -2 * n), (x, sheet.height_mm + 2 * n)], HAIR_PT, INK, dash=(3, 1.5))
    for number, at in enumerate(sheet.placements, start=1):
        label = _label(package.kit.by_id[at.part], at, str(number), n,
                       package.definition.laser.letter_mm)
        if ends[0] <= label.at[0] < ends[1]:
            half = text_width_mm(label.words, label.size_pt) / 2 * n
            x = min(max(label.at[0], ends[0] + half), ends[1] - half)
            pen.text((x, label.at[1]), label.words, label.size_pt, "middle",
                     turn_deg=label.turn_deg)
    if ends[0] == 0:
        pen.line([(0, 3 * n), (0, 0), (3 * n, 0)], HEAVY_PT)


@dataclass(frozen=True)
class Label:
    """What is written on a part, where, in the sheet's mm."""

    words: str
    at: Point
    size_pt: float
    turn_deg: float = 0.0


def _label(part: Part, at: Placement, number: str, n: float, letter_mm: float) -> Label:
    """The id where it is engraved; else inside the part where it fits, or the part's number."""
    assert isinstance(part.form, Plate)
    marks = [m for m in part.form.marks if m.text == part.id]
    mark = marks[0] if marks else id_mark(part, letter_mm)
    if mark is not None:
        spot = placed(ShapelyPoint(mark.at), laid(at))
        turn = (mark.angle_deg + at.rotation_deg + 90) % 180 - 90
        size = min(LABEL_PT + 1, max(LEAST_PT, mark.height_mm / n / PT_MM / CAPITAL))
        return _middled(part.id, (spot.x, spot.y), size, turn, n)
    outline = placed(part.form.shape2d, laid(at))
    low_x, low_y, high_x, high_y = outline.bounds
    spot = outline.representative_point()
    width, height = (high_x - low_x) / n, (high_y - low_y) / n
    for words_ in (part.id, number):
        long = text_width_mm(words_, LABEL_PT) + 1
        if long <= width:
            return _middled(words_, (spot.x, spot.y), LABEL_PT, 0.0, n)
        if long <= height:
            return _middled(words_, (spot.x, spot.y), LABEL_PT, 90.0, n)
    return _middled(number, (spot.x, spot.y), LABEL_PT - 1, 0.0, n)


def _middled(words_: str, middle: Point, size_pt: float, turn_deg: float, n: float) -> Label:
    """Its base line half a capital below the middle."""
    down = CAPITAL / 2 * size_pt * PT_MM * n
    turn = math.radians(turn_deg)
    x, y = middle
    return Label(words_, (x + down * math.sin(turn), y - down * math.cos(turn)), size_pt, turn_deg)


def _head(pen: Pen, sheet: Sheet, n: float, top: float) -> None:
    """Above the sheet: grain along its longer side, and the scale."""
    y = top - ABOVE_MM + 1.6
    pen.text((WIDTH_MM, y - 0.5), words.SCALE.format(scale=plain(n)), SMALL_PT - 1, "right",
             ink=SOFT)
    if sheet.grain:
        pen.arrow((0, y), (20, y), HAIR_PT, SOFT, both=True)
        pen.text((21.5, y - 0.7), words.GRAIN, SMALL_PT - 1, ink=SOFT)
