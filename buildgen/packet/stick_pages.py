"""Sticks and tubes: each length of stock and how it is cut."""

from __future__ import annotations

from functools import partial

from reportlab.platypus import Flowable, KeepTogether, PageBreak

from buildgen.packet import words
from buildgen.packet.amounts import fixed, plain, section_with_inches, size_with_inches
from buildgen.packet.package import Package
from buildgen.packet.page import NOTE, WIDTH_MM, Heading, gap, text
from buildgen.packet.pen import (
    HAIR_PT,
    INK,
    SMALL_PT,
    SOFT,
    THIN_PT,
    WASH,
    Pen,
    Picture,
    text_width_mm,
)
from buildgen.sheets.sticks import SAW_MM, StickPlan

ROW_MM, BAR_MM, NUMBER_MM = 9.5, 3.4, 7.0


def stick_pages(package: Package) -> list[Flowable]:
    """A block for each material and section."""
    if not package.stick_plans:
        return []
    note = words.STICK_NOTE.format(saw=plain(SAW_MM))
    story: list[Flowable] = [PageBreak(), Heading(words.STICKS), text(note, NOTE), gap(2)]
    for plan in package.stick_plans:
        high = ROW_MM * len(plan.bars)
        story.append(KeepTogether([
            Heading(f"{plan.material} {section_with_inches(plan.section)} · "
                    f"{len(plan.bars)} x {size_with_inches(plan.stock_length_mm)}", 1),
            Picture(WIDTH_MM, high, partial(_paint, plan, high)),
        ]))
    return story


def _paint(plan: StickPlan, high: float, pen: Pen) -> None:
    room = WIDTH_MM - NUMBER_MM
    per_mm = room / plan.stock_length_mm
    for number, bar in enumerate(plan.bars, start=1):
        y = high - number * ROW_MM + 3.6
        pen.text((0, y + 0.7), str(number), SMALL_PT, ink=SOFT)
        x = NUMBER_MM
        for index, piece in enumerate(bar.pieces):
            end = x + piece.length_mm * per_mm
            pen.box((x, y), (end, y + BAR_MM), THIN_PT, INK, WASH)
            _say(pen, x, end, y, piece.part, fixed(piece.length_mm), low=index % 2 == 1)
            x = end + SAW_MM * per_mm
        _left_over(pen, x, WIDTH_MM, y, bar.left_mm)


def _say(pen: Pen, x: float, end: float, y: float, part: str, length: str, low: bool) -> None:
    """Id in the bar and length under it; both beneath where the piece is short."""
    middle = (x + end) / 2
    if text_width_mm(part, SMALL_PT - 1) < end - x - 0.6:
        pen.text((middle, y + 1.0), part, SMALL_PT - 1, "middle")
        if text_width_mm(length, SMALL_PT - 1.5) < end - x - 0.4:
            pen.text((middle, y - 2.1), length, SMALL_PT - 1.5, "middle", ink=SOFT)
        return
    pen.text((middle, y - (3.2 if low else 2.1)), f"{part} {length}", SMALL_PT - 2.5, "middle",
             ink=SOFT)


def _left_over(pen: Pen, x: float, end: float, y: float, left_mm: float) -> None:
    if end - x < 0.3:
        return
    pen.box((x, y), (end, y + BAR_MM), HAIR_PT, SOFT)
    at = x + BAR_MM
    while at < end:
        pen.line([(at - BAR_MM, y), (at, y + BAR_MM)], HAIR_PT, SOFT)
        at += 2.2
    said = f"{words.LEFT_OVER} {plain(left_mm)}"
    if text_width_mm(said, SMALL_PT - 1.5) < end - x:
        pen.text((end, y - 2.1), said, SMALL_PT - 1.5, "right", ink=SOFT)
