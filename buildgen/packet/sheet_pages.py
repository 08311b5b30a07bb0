"""Every cut sheet as a picture to scale, with all that a person at the cutter asks."""

from __future__ import annotations

from functools import partial
from typing import TYPE_CHECKING, Any

from reportlab.platypus import Flowable, KeepTogether, PageBreak
from shapely.affinity import rotate, scale, translate
from shapely.geometry import Polygon

from buildgen.packet import words
from buildgen.packet.amounts import fixed, plain, size_with_inches, with_inches
from buildgen.packet.cautions import caution
from buildgen.packet.package import Package
from buildgen.packet.page import NOTE, WIDTH_MM, Heading, gap, text
from buildgen.packet.pen import (
    HAIR_PT,
    INK,
    LINE_PT,
    SMALL_PT,
    SOFT,
    THIN_PT,
    WASH,
    Pen,
    Picture,
    text_width_mm,
)
from buildgen.packet.three_view import round_scale
from buildgen.part import Part, Plate

if TYPE_CHECKING:
    from buildgen.sheets.layout import Sheet

MOST_HIGH_MM = 150.0
GRAIN_MM = 5.0
LABEL_PT = 5.0


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
    mass = sum(parts[p.part].mass_g for p in sheet.placements)
    listed = ", ".join(f"{n}\u00a0{p.part}" for n, p in enumerate(sheet.placements, start=1))
    return [
        Heading(f"{sheet.file} · {sheet.material} {with_inches(sheet.thickness_mm)}, "
                f"{size_with_inches(sheet.width_mm, sheet.height_mm)}", 1),
        sheet_picture(package, sheet),
        gap(1),
        text(words.SHEET_FACTS.format(
            count=len(sheet.placements), mass=fixed(mass), used=fixed(sheet.used_fraction * 100),
            length=fixed(sheet.cut_length_mm / 1000, 2), kerf=plain(sheet.kerf_mm, 3))),
        text(f"{words.ON_SHEET}: {listed}", NOTE),
    ]


def outline_on_sheet(part: Part, placement: Any) -> Polygon:
    """A plate's outline where it lies: turned over, turned, then moved."""
    assert isinstance(part.form, Plate)
    flat = part.form.shape2d
    if placement.flipped:
        flat = scale(flat, -1, 1, origin=(0, 0))
    turned = rotate(flat, placement.rotation_deg, origin=(0, 0))
    return translate(turned, placement.x_mm, placement.y_mm)


def sheet_picture(package: Package, sheet: Sheet) -> Picture:
    """The sheet with its longer side across the page where that shows it larger."""
    upright = (sheet.width_mm, sheet.height_mm)
    turned = upright[::-1]
    room = (WIDTH_MM - GRAIN_MM - 1, MOST_HIGH_MM)
    turn = round_scale(room, turned) < round_scale(room, upright)
    size = turned if turn else upright
    n = round_scale(room, size)
    return Picture(WIDTH_MM, size[1] / n + 3, partial(_paint, package, sheet, n, turn))


def _paint(package: Package, sheet: Sheet, n: float, turn: bool, pen: Pen) -> None:
    def seen(outline: Polygon) -> Polygon:
        """Turned a quarter to the right where the sheet is drawn lying."""
        if not turn:
            return outline
        return translate(rotate(outline, -90, origin=(0, 0)), 0, sheet.width_mm)

    size = (sheet.height_mm, sheet.width_mm) if turn else (sheet.width_mm, sheet.height_mm)
    inner = pen.scaled(1 / n, (GRAIN_MM, 1))
    inner.box((0, 0), size, THIN_PT, SOFT)
    for number, placement in enumerate(sheet.placements, start=1):
        outline = seen(outline_on_sheet(package.kit.by_id[placement.part], placement))
        inner.shape(outline, HAIR_PT * 1.4, INK, WASH)
        _label(inner, outline, placement.part, str(number), n)
    _grain(pen, size[0] / n, size[1] / n, along_x=size[0] >= size[1])
    corner = (GRAIN_MM, 1 + (size[1] / n if turn else 0))
    down = -1 if turn else 1
    pen.line([(corner[0], corner[1] + 3 * down), corner, (corner[0] + 3, corner[1])], LINE_PT)
    pen.text((WIDTH_MM, size[1] / n + 1.8), words.SCALE.format(scale=plain(n)), SMALL_PT - 1,
             "right", ink=SOFT)


def _label(pen: Pen, outline: Polygon, name: str, number: str, n: float) -> None:
    """The id inside the part where it fits, lying or standing; else its number."""
    low_x, low_y, high_x, high_y = outline.bounds
    at = outline.representative_point()
    width, height = (high_x - low_x) / n, (high_y - low_y) / n
    for words_, size in ((name, LABEL_PT), (name, LABEL_PT - 1), (number, LABEL_PT - 1)):
        long = text_width_mm(words_, size) + 1
        if long <= width and size * 0.3 <= height:
            pen.text((at.x, at.y - size * 0.12 * n), words_, size, "middle")
            return
        if long <= height and size * 0.3 <= width:
            pen.text((at.x + size * 0.12 * n, at.y), words_, size, "middle", turn_deg=90)
            return
    pen.text((at.x, at.y - 0.4 * n), number, LABEL_PT - 1, "middle", halo=True)


def _grain(pen: Pen, width: float, height: float, along_x: bool) -> None:
    """An arrow beside the sheet along its grain, which runs with the longer side."""
    if along_x:
        middle = GRAIN_MM + width / 2
        pen.arrow((middle - 10, height + 2.2), (middle + 10, height + 2.2), HAIR_PT, SOFT,
                  both=True)
        pen.text((middle + 11.5, height + 1.5), words.GRAIN, SMALL_PT - 1, ink=SOFT)
        return
    middle = 1 + height / 2
    pen.arrow((2, middle - 10), (2, middle + 10), HAIR_PT, SOFT, both=True)
    pen.text((2.8, middle + 11.5), words.GRAIN, SMALL_PT - 1, ink=SOFT, turn_deg=90)
