"""The last page before the index: what to measure and to look over before the first flight."""

from __future__ import annotations

from reportlab.platypus import Flowable, PageBreak

from buildgen.packet import words
from buildgen.packet.amounts import fixed
from buildgen.packet.cautions import caution
from buildgen.packet.package import Package
from buildgen.packet.page import BOX, NOTE, Column, Heading, gap, table, text

COLUMNS = (
    Column("", 6), Column(words.QUANTITY_NAMED, 60), Column(words.PLANNED, 54),
    Column(words.MEASURED, 30), Column(words.BY, 24),
)


def flight_pages(package: Package) -> list[Flowable]:
    """A table with room to write in, and the cautions as a list."""
    rows = [[BOX, name, planned, "", ""] for name, planned in planned_figures(package)]
    return [
        PageBreak(),
        Heading(words.FLIGHT),
        text(words.FLIGHT_NOTE, NOTE),
        gap(2),
        table(COLUMNS, rows),
        gap(5),
        caution("before", mark=BOX),
        gap(5),
        caution("battery", "propeller", "fly"),
    ]


def planned_figures(package: Package) -> list[tuple[str, str]]:
    """(name, figure) of all that a scale, a ruler and a balance can check."""
    b = package.balance
    fore, aft = b.target_cg_x_mm
    figures = [
        (words.MASS_ROW, f"{fixed(b.mass_g)} ± {fixed(b.mass_sigma_g)} g"),
        (words.CG_ROW, words.FROM_LE.format(x=f"{fixed(b.cg_mm[0])} ± {fixed(b.cg_sigma_mm)}")),
        (words.RANGE_ROW, words.FROM_LE.format(x=f"{fixed(fore)} … {fixed(aft)}")),
        (words.SIDE_ROW, f"{fixed(b.cg_mm[1])} mm"),
    ]
    if b.span_mm:
        figures.insert(0, (words.SPAN_ROW, f"{fixed(b.span_mm, 0)} mm"))
    figures += [
        (words.ITEM_ROW.format(item=m.item), words.FROM_LE.format(x=fixed(m.x_mm)))
        for m in b.movable
    ]
    figures += [
        (x.item, f"{fixed(x.mass_g)} g, " + words.FROM_LE.format(x=fixed(x.x_mm)))
        for x in b.ballast
    ]
    return figures
