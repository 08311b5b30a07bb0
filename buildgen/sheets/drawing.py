"""A sheet as plain geometry by layer: what DXF and SVG writers have in common."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from buildgen.design.schema import Laser
from buildgen.part import Kit
from buildgen.sheets.contour import Contours, moved, moved_strokes
from buildgen.sheets.layout import Sheet
from buildgen.sheets.letters import write
from buildgen.sheets.marks import strokes_of
from buildgen.solid import Array

CUT_INSIDE, CUT_OUTSIDE, SCORE, MARK, SHEET = (
    "CUT_INSIDE", "CUT_OUTSIDE", "SCORE", "MARK", "SHEET",
)
LAYERS = (MARK, SCORE, CUT_INSIDE, CUT_OUTSIDE, SHEET)
COLOURS = {MARK: 3, SCORE: 4, CUT_INSIDE: 5, CUT_OUTSIDE: 1, SHEET: 8}
TITLE_MM = 3.0


@dataclass(frozen=True, eq=False)
class Piece:
    """One part on the sheet: its beam path and what is engraved on it."""

    part: str
    path: Contours
    strokes: tuple[Array, ...]
    id_inside: bool


@dataclass(frozen=True, eq=False)
class Drawing:
    """A sheet ready for a writer.

    Attributes:
        outline: corners of the sheet.
        title: strokes of the line that names design, revision, material and kerf; outside the
            sheet, never under the beam.
        pieces: in the order of cutting.
    """

    outline: Array
    title: tuple[Array, ...]
    pieces: tuple[Piece, ...]


def colours(laser: Laser) -> dict[str, int]:
    """Colour number of each layer: only to tell layers apart."""
    return {**COLOURS, **{k: v for k, v in laser.colours.items() if k in COLOURS}}


def draw(sheet: Sheet, kit: Kit, laser: Laser) -> Drawing:
    """Everything on a sheet where it lies."""
    pieces = []
    for part, at, path in zip(sheet.parts, sheet.placements, sheet.paths, strict=True):
        place = (at.x_mm, at.y_mm, at.rotation_deg, at.flipped)
        strokes, inside = strokes_of(part, laser.letter_mm)
        marks = moved_strokes(strokes, *place)
        put = moved(path, *place)
        if not inside:
            marks += _beside(part.id, put)
        pieces.append(Piece(part.id, put, tuple(marks), inside))
    w, h = sheet.width_mm, sheet.height_mm
    words = (f"{kit.title.line}  {sheet.file}  {sheet.material} {sheet.thickness_mm:g} mm"
             f"  kerf {sheet.kerf_mm:g} mm")
    title = [np.array(s) for s in write(words, TITLE_MM, (0.0, h + 2.0), "start")]
    return Drawing(np.array([(0, 0), (w, 0), (w, h), (0, h)], float), tuple(title), tuple(pieces))


def _beside(id: str, path: Contours) -> list[Array]:
    """An id too long for its part, beside it on the sheet."""
    low, high = path.outside.min(axis=0), path.outside.max(axis=0)
    at = (float(low[0] + high[0]) / 2, float(high[1]) + 1.6)
    return [np.array(s) for s in write(id, 2.0, at)]
