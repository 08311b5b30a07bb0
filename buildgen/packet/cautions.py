"""The cautions: all of them near the front, the fitting ones again where the work is done."""

from __future__ import annotations

from xml.sax.saxutils import escape

from reportlab.lib.styles import ParagraphStyle
from reportlab.lib.units import mm
from reportlab.platypus import Flowable, KeepTogether, PageBreak, Paragraph, Table

from buildgen.packet import words
from buildgen.packet.page import (
    NOTE,
    PART_HEAD,
    PLAIN_CELLS,
    TEXT,
    WIDTH_MM,
    Heading,
    gap,
    text,
    unbroken,
)
from buildgen.packet.pen import BOLD, INK, LINE_PT, SMALL_PT

GUTTER_MM = 8.0
POINT = ParagraphStyle("point", TEXT, fontSize=SMALL_PT + 0.3, leading=9.8, leftIndent=3.4 * mm,
                       bulletFontSize=SMALL_PT - 1.5, bulletIndent=0, spaceAfter=1.1 * mm)
TICKED = ParagraphStyle("ticked", POINT, leftIndent=6 * mm, bulletFontSize=POINT.fontSize)
FRAMED = ParagraphStyle("framed", TEXT, fontName=BOLD, fontSize=TEXT.fontSize, leading=12.5)


def caution_pages() -> list[Flowable]:
    """One page in two columns under the sentence that matters most."""
    width = WIDTH_MM * mm
    framed = Table([[text(words.NOT_APPROVAL, FRAMED)]], colWidths=[width])
    framed.setStyle([PLAIN_CELLS, ("BOX", (0, 0), (-1, -1), LINE_PT, INK),
                     *((side, (0, 0), (-1, -1), 8)
                       for side in ("LEFTPADDING", "RIGHTPADDING", "TOPPADDING",
                                    "BOTTOMPADDING"))])
    half = len(words.CAUTION_GROUPS) // 2
    columns = [_column(words.CAUTION_GROUPS[:half]), _column(words.CAUTION_GROUPS[half:])]
    wide = (width - GUTTER_MM * mm) / 2
    pair = Table([columns], colWidths=[wide + GUTTER_MM * mm, wide])
    pair.setStyle([PLAIN_CELLS, ("VALIGN", (0, 0), (-1, -1), "TOP"),
                   ("LEFTPADDING", (0, 0), (-1, -1), 0),
                   ("RIGHTPADDING", (0, 0), (0, 0), GUTTER_MM * mm),
                   ("RIGHTPADDING", (1, 0), (1, 0), 0)])
    return [PageBreak(), Heading(words.CAUTIONS), framed, gap(2), pair, gap(2),
            text(words.CAUTION_SEEN, NOTE)]


def _column(groups: tuple[tuple[str, str, tuple[str, ...]], ...]) -> list[Flowable]:
    story: list[Flowable] = []
    for _, title, points in groups:
        story.append(text(title, PART_HEAD))
        story += _points(points)
    return story


def _points(points: tuple[str, ...], mark: str = "•") -> list[Flowable]:
    style = POINT if mark == "•" else TICKED
    return [Paragraph(escape(unbroken(point)), style, bulletText=mark) for point in points]


def caution(*places: str, mark: str = "•") -> Flowable:
    """The cautions of these places as a block, to stand where the work is done."""
    story: list[Flowable] = []
    for place, _, points in words.CAUTION_GROUPS:
        if place in places:
            story += _points(points, mark)
    return KeepTogether(story)
