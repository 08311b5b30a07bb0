"""The build, step by step: what is new, where it comes from, where it goes."""

from __future__ import annotations

import numpy as np
from reportlab.lib.units import mm
from reportlab.platypus import CondPageBreak, Flowable, KeepTogether, PageBreak

from buildgen.packet import words
from buildgen.packet.amounts import grams
from buildgen.packet.cautions import caution
from buildgen.packet.kit_json import quantity
from buildgen.packet.package import Package
from buildgen.packet.page import NOTE, WIDTH_MM, Column, Heading, gap, table, text
from buildgen.packet.shaded import part_triangles, shaded
from buildgen.packet.tables import where_from
from buildgen.part import Cover, Part
from buildgen.solid import Array

COLUMNS = (
    Column("", 6), Column(words.ID, 24), Column(words.NAME, 58), Column(words.MATERIAL, 34),
    Column(words.SHEET_OF, 38), Column(words.MASS_G, 14, True),
)
PICTURE_HIGH_MM = 82.0
LABEL_MOST, SHORT_TABLE = 40, 12
BOX = "☐"


def step_pages(package: Package) -> list[Flowable]:
    """One block for each step of the kit, in order."""
    story: list[Flowable] = [PageBreak(), Heading(words.STEPS), text(words.STEP_NOTE, NOTE),
                             gap(2), caution("dust", "glue")]
    earlier: list[Part] = []
    for number, step in enumerate(package.kit.steps, start=1):
        new = [p for p in package.kit.parts if p.step == step]
        story += _block(package, words.STEP.format(number=number, name=step), new, earlier)
        earlier += new
    return story


def _block(package: Package, title: str, new: list[Part], earlier: list[Part]) -> list[Flowable]:
    rows = [
        [BOX, p.id, _counted(p), p.material, where_from(package, p), grams(p.mass_g)] for p in new
    ]
    head: list[Flowable] = [Heading(title, 1)]
    if any(part_triangles(p) is not None for p in new):
        head.append(step_picture(new, earlier))
    listed = table(COLUMNS, rows)
    if len(rows) <= SHORT_TABLE:
        return [KeepTogether([*head, listed]), gap(4)]
    return [CondPageBreak((PICTURE_HIGH_MM + 50) * mm), *head, listed, gap(4)]


def _counted(part: Part) -> str:
    pieces = quantity(part)
    return part.name if pieces == 1 else f"{pieces} x {part.name}"


def step_picture(new: list[Part], earlier: list[Part]) -> Flowable:
    """New parts strong, earlier ones pale and without their coverings, framed on the new."""
    bare = [p for p in earlier if not isinstance(p.form, Cover)]
    return shaded(new, WIDTH_MM, PICTURE_HIGH_MM, bare, _frame(new, [*new, *bare]),
                  label=len(new) <= LABEL_MOST)


def _frame(new: list[Part], every: list[Part]) -> Array:
    """Corners of the room the new parts take, at least a third of the whole each way."""
    def corners(parts: list[Part]) -> Array:
        found = [t[0] for p in parts if (t := part_triangles(p)) is not None]
        return np.array([[f(v[:, k].min() if f is min else v[:, k].max() for v in found)
                          for k in range(3)] for f in (min, max)])

    inner, outer = corners(new), corners(every)
    middle, half = inner.mean(axis=0), np.ptp(inner, axis=0) / 2
    half = np.maximum(half, np.ptp(outer, axis=0) / 6)
    low, high = np.maximum(middle - half, outer[0]), np.minimum(middle + half, outer[1])
    return np.array([[(low, high)[i >> k & 1][k] for k in range(3)] for i in range(8)])
