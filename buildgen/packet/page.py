"""The page: one grid, headings with bookmarks, tables that wrap, page x of y."""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import dataclass
from io import BytesIO
from typing import Any
from xml.sax.saxutils import escape

from reportlab import rl_config
from reportlab.lib.enums import TA_RIGHT
from reportlab.lib.pagesizes import A4
from reportlab.lib.styles import ParagraphStyle
from reportlab.lib.units import mm
from reportlab.pdfgen.canvas import Canvas
from reportlab.platypus import (
    BaseDocTemplate,
    Flowable,
    Frame,
    PageTemplate,
    Paragraph,
    Spacer,
    Table,
)

from buildgen.packet import words
from buildgen.packet.pen import (
    BOLD,
    HAIR_PT,
    INK,
    LINE_PT,
    PALE,
    PLAIN,
    SMALL_PT,
    SOFT,
    TEXT_PT,
    fitted,
    text_width_mm,
    use_letters,
)
from buildgen.part import Title

MARGIN_MM, TOP_MM, BOTTOM_MM = 18.0, 24.0, 20.0
PAGE_MM = (A4[0] / mm, A4[1] / mm)
WIDTH_MM = PAGE_MM[0] - 2 * MARGIN_MM
HEIGHT_MM = PAGE_MM[1] - TOP_MM - BOTTOM_MM

TEXT = ParagraphStyle(
    "text", fontName=PLAIN, bulletFontName=PLAIN, fontSize=TEXT_PT, leading=12.5, textColor=INK
)
CELL = ParagraphStyle("cell", TEXT, fontSize=SMALL_PT + 0.3, leading=9.6)
CELL_RIGHT = ParagraphStyle("cell right", CELL, alignment=TA_RIGHT)
NOTE = ParagraphStyle("note", TEXT, fontSize=SMALL_PT, leading=10, textColor=SOFT)
HEAD = ParagraphStyle("head", TEXT, fontName=BOLD, fontSize=15, leading=19, spaceAfter=5 * mm)
PART_HEAD = ParagraphStyle(
    "part head", TEXT, fontName=BOLD, fontSize=10, leading=13, spaceBefore=4 * mm,
    spaceAfter=1.6 * mm, keepWithNext=1,
)

BOX = "☐"
"""To tick."""
PLAIN_CELLS = ("FONTNAME", (0, 0), (-1, -1), PLAIN)
"""Without it a table names a letter that is not embedded."""


class Heading(Paragraph):  # type: ignore[misc]
    """A heading that is a bookmark as well, and names the pages that follow."""

    def __init__(self, text: str, level: int = 0, style: ParagraphStyle | None = None) -> None:
        super().__init__(escape(text), style or (HEAD, PART_HEAD)[min(level, 1)])
        self.words, self.level = text, level

    def split(self, *_: float) -> list[Flowable]:
        """Never: it moves to the next page as a whole."""
        return []

    def draw(self) -> None:
        key = f"s{self.canv.getPageNumber()}-{id_of(self.canv)}"
        self.canv.bookmarkHorizontal(key, 0, self.height + 6 * mm)
        self.canv.addOutlineEntry(self.words, key, self.level, closed=self.level == 0)
        super().draw()


def id_of(canvas: Any) -> int:
    """Running number of a bookmark in its document."""
    canvas.bookmarks_made = getattr(canvas, "bookmarks_made", 0) + 1
    return int(canvas.bookmarks_made)


def text(words_: str, style: ParagraphStyle = TEXT) -> Paragraph:
    """A paragraph of plain words."""
    return Paragraph(escape(unbroken(words_)), style)


def unbroken(words_: str) -> str:
    """Figures stay on the line of their unit."""
    return re.sub(r"(?<=\d) (?=(%|±|g|mm|in|m|V|°C)\b|[%±])", "\u00a0", words_)


def gap(height_mm: float) -> Spacer:
    return Spacer(1, height_mm * mm)


@dataclass(frozen=True)
class Column:
    """A column of a table: its words wrap; numbers stand to the right."""

    title: str
    width_mm: float
    number: bool = False


def table(columns: Sequence[Column], rows: Sequence[Sequence[str]], total: bool = False) -> Table:
    """A table over the full grid; its head repeats on every page it runs over.

    Args:
        rows: one text for each column; the last row is a sum when `total`.
    """
    styles = [CELL_RIGHT if c.number else CELL for c in columns]

    def cells(row: Sequence[str], mark: str = "{}") -> list[Paragraph]:
        return [
            Paragraph(mark.format(escape(value)), style)
            for value, style in zip(row, styles, strict=True)
        ]

    body = [cells(row, "<b>{}</b>" if total and row is rows[-1] else "{}") for row in rows]
    made = Table(
        [cells([c.title for c in columns], f'<font color="{SOFT.hexval()}">{{}}</font>'), *body],
        colWidths=[c.width_mm * mm for c in columns],
        repeatRows=1,
        hAlign="LEFT",
    )
    ruled: list[tuple[Any, ...]] = [
        PLAIN_CELLS,
        ("VALIGN", (0, 0), (-1, -1), "TOP"),
        ("TOPPADDING", (0, 0), (-1, -1), 1.9),
        ("BOTTOMPADDING", (0, 0), (-1, -1), 2.6),
        ("LEFTPADDING", (0, 0), (-1, -1), 0),
        ("RIGHTPADDING", (0, 0), (-1, -1), 6),
        *(("RIGHTPADDING", (k, 0), (k, -1), 11) for k, c in enumerate(columns) if c.number),
        ("RIGHTPADDING", (-1, 0), (-1, -1), 0),
        ("LINEBELOW", (0, 0), (-1, 0), LINE_PT, INK),
        ("LINEBELOW", (0, 1), (-1, -1), HAIR_PT, PALE),
    ]
    if total:
        ruled.append(("LINEABOVE", (0, -1), (-1, -1), LINE_PT, INK))
    made.setStyle(ruled)
    return made


class Pages(BaseDocTemplate):  # type: ignore[misc]
    """The document: every page carries the title line and page x of y."""

    def __init__(self, out: BytesIO, title: Title) -> None:
        use_letters()
        super().__init__(
            out, pagesize=A4, invariant=1, initialFontName=PLAIN, initialFontSize=TEXT_PT,
            title=f"{title.title or title.name}: {words.PACKET}",
            author=words.PROGRAM, creator=words.PROGRAM,
            subject=title.line, keywords=[title.name, title.revision, title.short_hash],
            lang="en",
        )
        self.of = title
        frame = Frame(MARGIN_MM * mm, BOTTOM_MM * mm, WIDTH_MM * mm, HEIGHT_MM * mm,
                      leftPadding=0, rightPadding=0, topPadding=0, bottomPadding=0)
        self.addPageTemplates(PageTemplate("page", [frame], onPage=self._furnish))

    def _furnish(self, canvas: Any, _: Any) -> None:
        canvas.setViewerPreference("PrintScaling", "None")
        left, right = MARGIN_MM * mm, (PAGE_MM[0] - MARGIN_MM) * mm
        canvas.setFillColor(SOFT)
        canvas.setFont(PLAIN, SMALL_PT)
        head, foot = (PAGE_MM[1] - 13) * mm, 11 * mm
        canvas.drawString(left, head, fitted(self.of.title or self.of.name, 100))
        canvas.drawRightString(right, head, self.of.line)
        canvas.drawString(left, foot, words.NOT_APPROVAL_SHORT)
        page = words.PAGE_OF.format(page=canvas.getPageNumber())
        room = text_width_mm("000") * mm
        canvas.drawRightString(right - room, foot, page)
        canvas.saveState()
        canvas.translate(right - room, foot)
        canvas.doForm("total")
        canvas.restoreState()


class Leaves(Canvas):  # type: ignore[misc]
    """A canvas that says at its end how many pages there are; every page draws that form."""

    def save(self) -> None:
        self.beginForm("total", 0, -10, 60, 20)
        self.setFillColor(SOFT)
        self.setFont(PLAIN, SMALL_PT)
        self.drawString(0, 0, f" {self.getPageNumber() - 1}")
        self.endForm()
        super().save()


def pdf(title: Title, story: Sequence[Flowable]) -> bytes:
    """The story as a PDF; equal stories give equal bytes."""
    out = BytesIO()
    before, rl_config.useA85 = rl_config.useA85, 0  # binary streams: smaller, and quicker by far
    try:
        Pages(out, title).build(list(story), canvasmaker=Leaves)
    finally:
        rl_config.useA85 = before
    return out.getvalue()
