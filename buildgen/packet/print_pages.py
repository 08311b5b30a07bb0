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
from buildgen.solid import Array, Pose

PER_ROW, PICTURE_MM = 2, (80.0, 52.0)
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


def on_bed(part: Part) -> Pose:
    """Frame that stands the part as it is printed: its `print_up` upwards."""
    assert isinstance(part.form, Printed)
    up = np.asarray(part.form.print_up, float)
    side = np.eye(3)[int(np.argmin(np.abs(up)))]
    x = np.cross(side, up)
    return Pose.at((0, 0, 0), x, np.cross(up, x)).inverse


def bed_size_mm(part: Part) -> Array:
    """(3,) room that the part takes on the bed."""
    found = part_triangles(replace(part, pose=on_bed(part)))
    assert found is not None
    return np.asarray(np.ptp(found[0], axis=0))


def _cell(package: Package, key: str, parts: list[Part]) -> list[Flowable]:
    first = replace(parts[0], pose=on_bed(parts[0]))
    size = " x ".join(fixed(v) for v in bed_size_mm(first))
    files = ", ".join(package.print_files(parts[0]))
    copies = words.PRINT_COPIES.format(count=len(parts), ids=listed([p.id for p in parts], 8))
    return [
        shaded([first], *PICTURE_MM, tones=(TONE, TONE)),
        text(f"{key} · {parts[0].name}", CELL),
        text(words.PRINT_FACTS.format(mass=grams(first.mass_g), size=size,
                                      material=first.material), CELL),
        text(copies, CELL),
        text(files, NOTE),
    ]
