"""Printed parts: how they look on the bed, what they weigh, which file makes them."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
from reportlab.lib.units import mm
from reportlab.platypus import Flowable, PageBreak, Table

from buildgen.packet import words
from buildgen.packet.amounts import fixed, grams, listed
from buildgen.packet.cautions import caution
from buildgen.packet.package import Package
from buildgen.packet.page import CELL, NOTE, PLAIN_CELLS, WIDTH_MM, Heading, gap, text
from buildgen.packet.shaded import part_triangles, shaded
from buildgen.part import Part, Printed
from buildgen.prints.make import on_bed
from buildgen.solid import HERE

PER_ROW, WIDE_MM, HIGH_MM = 2, 80.0, (52.0, 52.0)
TONE = (0.86, 0.87, 0.89)


def print_pages(package: Package) -> list[Flowable]:
    """One picture for each file; equal parts share it."""
    twins: dict[str, list[Part]] = {}
    for part in package.kit.of("print"):
        twins.setdefault(part.files_key, []).append(part)
    if not twins:
        return []
    cells: list[list[Flowable]] = [_cell(package, *twin) for twin in twins.items()]
    rows = [cells[i : i + PER_ROW] for i in range(0, len(cells), PER_ROW)]
    rows[-1] += [[]] * (PER_ROW - len(rows[-1]))
    laid = Table(rows, colWidths=[WIDTH_MM / PER_ROW * mm] * PER_ROW)
    laid.setStyle([PLAIN_CELLS, ("VALIGN", (0, 0), (-1, -1), "TOP"),
                   ("LEFTPADDING", (0, 0), (-1, -1), 0),
                   ("RIGHTPADDING", (0, 0), (-1, -1), 0),
                   ("BOTTOMPADDING", (0, 0), (-1, -1), 6 * mm)])
    return [PageBreak(), Heading(words.PRINTS), caution("print"), text(words.PRINT_NOTE, NOTE),
            gap(3), laid]


def lying(part: Part) -> Part:
    """The part as it is printed, standing on the bed."""
    assert isinstance(part.form, Printed)
    turned = on_bed(part.form.shape, part.form.print_up)
    return replace(part, pose=HERE, form=replace(part.form, shape=turned))


def bed_size_mm(part: Part) -> tuple[float, ...]:
    """Room that the part takes on the bed, along x, y and up."""
    found = part_triangles(lying(part))
    assert found is not None
    return tuple(float(v) for v in np.ptp(found[0], axis=0))


def _cell(package: Package, key: str, parts: list[Part]) -> list[Flowable]:
    first = parts[0]
    report = package.report_of.get(key)
    size = " x ".join(fixed(v) for v in (report.size_mm if report else bed_size_mm(first)))
    files = ", ".join(package.print_files(first))
    copies = words.PRINT_COPIES.format(count=len(parts), ids=listed([p.id for p in parts], 8))
    return [
        shaded([lying(first)], WIDE_MM, HIGH_MM, tones=(TONE, TONE)),
        text(f"{key} · {first.name}", CELL),
        text(words.PRINT_FACTS.format(mass=grams(first.mass_g), size=size,
                                      material=first.material), CELL),
        text(copies, CELL),
        text(files, NOTE),
    ]
