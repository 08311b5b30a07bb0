"""Pages that are mostly tables: the bill of materials and the parts index."""

from __future__ import annotations

import re

from reportlab.platypus import Flowable, PageBreak

from buildgen.packet import words
from buildgen.packet.amounts import fixed, grams, listed
from buildgen.packet.bill import Line, bill
from buildgen.packet.package import Package
from buildgen.packet.page import NOTE, Column, Heading, gap, table, text
from buildgen.part import Bought, Part, Plate, Stick

BILL_COLUMNS = (
    Column(words.ITEM, 62), Column(words.SIZE, 44), Column(words.QUANTITY, 25, True),
    Column(words.MASS_G, 17, True), Column(words.ID, 26),
)
INDEX_COLUMNS = (
    Column(words.ID, 19), Column(words.NAME, 54), Column(words.MATERIAL, 27),
    Column(words.PROCESS, 15), Column(words.MASS_G, 17, True), Column(words.SHEET_OF, 33),
    Column(words.STEP_COLUMN, 9, True),
)
NOTES = {"make": "", "stock": words.STOCK_NOTE, "buy": words.BUY_NOTE}


def bill_pages(package: Package) -> list[Flowable]:
    """To make, stock to buy, to buy."""
    lines = bill(package)
    story: list[Flowable] = [PageBreak(), Heading(words.BILL)]
    for section, title in words.SECTIONS.items():
        rows = [_bill_row(line) for line in lines if line.section == section]
        if not rows:
            continue
        story.append(Heading(title, 1))
        if NOTES[section]:
            story += [text(NOTES[section], NOTE), gap(1.5)]
        story.append(table(BILL_COLUMNS, rows))
    return story


def _bill_row(line: Line) -> list[str]:
    mass = "" if line.mass_g is None else fixed(line.mass_g)
    return [line.item, line.size, line.quantity, mass, listed(list(line.parts), 4)]


def index_pages(package: Package) -> list[Flowable]:
    """Every part of the kit, by its id in natural order."""
    numbers = {step: n for n, step in enumerate(package.kit.steps, start=1)}
    rows = [
        [p.id, p.name, p.material, words.PROCESSES[p.process], grams(p.mass_g),
         "" if isinstance(p.form, Bought) else where_from(package, p), str(numbers[p.step])]
        for p in sorted(package.kit.parts, key=lambda p: natural(p.id))
    ]
    return [PageBreak(), Heading(words.INDEX), table(INDEX_COLUMNS, rows)]


def natural(part_id: str) -> tuple[tuple[int, int | str], ...]:
    """Sorts R2 before R10."""
    return tuple(
        (0, int(run)) if run.isdigit() else (1, run)
        for run in re.findall(r"[0-9]+|[^0-9]+", part_id)
    )


def where_from(package: Package, part: Part) -> str:
    """The sheet and number, the length to cut, or the file to print."""
    if isinstance(part.form, Plate):
        sheet = package.sheet_of.get(part.id)
        if sheet is None:
            return ""
        return words.SHEET_PLACE.format(
            sheet=sheet.file, number=package.place_on_sheet[part.id]
        )
    if isinstance(part.form, Stick):
        return f"{part.form.section}, {fixed(part.form.length_mm)} mm"
    if isinstance(part.form, Bought):
        return part.form.order
    stem = part.files_key
    return words.PRINT_FILE.format(stem=stem) if package.print_files(part) else ""
