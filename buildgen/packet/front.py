"""The title page: what it is, its figures, and how it looks."""

from __future__ import annotations

from functools import partial

from reportlab.lib.styles import ParagraphStyle
from reportlab.lib.units import mm
from reportlab.platypus import Flowable

from buildgen.packet import words
from buildgen.packet.amounts import fixed, plain
from buildgen.packet.package import Package
from buildgen.packet.page import (
    HEIGHT_MM,
    NOTE,
    TEXT,
    WIDTH_MM,
    Heading,
    gap,
    text,
)
from buildgen.packet.pen import BOLD, HAIR_PT, PALE, SMALL_PT, SOFT, Pen, Picture, fitted
from buildgen.packet.three_view import three_view

BIG = ParagraphStyle("big", TEXT, fontName=BOLD, fontSize=24, leading=29, spaceAfter=1.5 * mm)
ROW_MM, PER_ROW = 12.5, 4
AROUND_MM = 54.0
"""Room for a title of two lines, the revision, gaps and the note."""


def front(package: Package) -> list[Flowable]:
    """The title page."""
    title, figures = package.kit.title, key_figures(package)
    rows = -(-len(figures) // PER_ROW)
    room = HEIGHT_MM - AROUND_MM - rows * ROW_MM
    return [
        Heading(title.title or title.name, 0, BIG),
        text(title.name + " · " + words.REVISION.format(
            revision=title.revision, hash=title.short_hash)),
        *([text(package.definition.kind, NOTE)] if package.definition.kind else []),
        gap(6),
        three_view(package.kit, package.balance, WIDTH_MM, room),
        gap(6),
        Picture(WIDTH_MM, rows * ROW_MM, partial(_paint_figures, figures)),
        text(words.ESTIMATED, NOTE),
    ]


def key_figures(package: Package) -> list[tuple[str, str, str]]:
    """(name, figure, remark) of what a reader wants first; what is not known is left out."""
    b = package.balance
    area_dm2 = b.wing_area_mm2 / 1e4
    figures = []
    if b.span_mm:
        figures.append((words.SPAN, f"{fixed(b.span_mm, 0)} mm", f"{plain(b.span_mm / 25.4)} in"))
    if area_dm2:
        figures.append((words.AREA, f"{fixed(area_dm2)} dm²",
                        f"{fixed(area_dm2 * 15.5, 0)} in²"))
    figures.append((words.MASS, f"{fixed(b.mass_g)} ± {fixed(b.mass_sigma_g)} g",
                    f"{plain(b.mass_g / 28.349523)} oz"))
    if area_dm2:
        loading = b.mass_g / area_dm2
        figures.append((words.LOADING, f"{fixed(loading)} g/dm²",
                        f"{fixed(loading * 0.327706, 1)} oz/ft²"))
    figures.append((words.CG, f"{fixed(abs(b.cg_mm[0]))} ± {fixed(b.cg_sigma_mm)} mm",
                    words.BEHIND_LE if b.cg_mm[0] >= 0 else words.AHEAD_OF_LE))
    if b.static_margin is not None:
        figures.append((words.MARGIN, f"{fixed(b.static_margin * 100)} %", words.OF_MAC))
    power = package.definition.power
    if power is not None:
        figures.append((words.MOTORS, str(power.motors), fitted(power.motor.name, 40)))
    figures.append((words.PARTS, str(len(package.kit.parts)),
                    words.SHEETS_COUNT.format(count=len(package.sheets))))
    return figures


def _paint_figures(figures: list[tuple[str, str, str]], pen: Pen) -> None:
    rows = -(-len(figures) // PER_ROW)
    wide = WIDTH_MM / PER_ROW
    for index, (name, figure, remark) in enumerate(figures):
        x, top = index % PER_ROW * wide, (rows - index // PER_ROW) * ROW_MM
        pen.line([(x, top - 0.5), (x + wide - 4, top - 0.5)], HAIR_PT, PALE)
        pen.text((x, top - 3.8), name, SMALL_PT, ink=SOFT)
        pen.text((x, top - 7.6), figure, 9, bold=True)
        pen.text((x, top - 10.8), fitted(remark, wide - 4, SMALL_PT - 0.5), SMALL_PT - 0.5,
                 ink=SOFT)
