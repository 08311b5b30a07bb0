"""A sheet as plain geometry by layer: what DXF and SVG writers have in common."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from buildgen.design.schema import Laser
from buildgen.part import Kit, Part, Plate
from buildgen.sheets.arcs import Bulges, with_arcs
from buildgen.sheets.bare import Bare
from buildgen.sheets.bridges import bridged
from buildgen.sheets.contour import Contours, beam_path, moved, moved_strokes
from buildgen.sheets.letters import width_mm, write
from buildgen.sheets.marks import strokes_of
from buildgen.sheets.order import guests_of
from buildgen.sheets.sheet import Placement, Sheet
from buildgen.solid import Array

CUT_INSIDE, CUT_OUTSIDE, SCORE, MARK, SHEET = (
    "CUT_INSIDE", "CUT_OUTSIDE", "SCORE", "MARK", "SHEET",
)
LAYERS = (MARK, SCORE, CUT_INSIDE, CUT_OUTSIDE, SHEET)
COLOURS = {MARK: 3, SCORE: 4, CUT_INSIDE: 5, CUT_OUTSIDE: 1, SHEET: 8}
TITLE_MM, LEAST_TITLE_MM = 3.0, 1.5


@dataclass(frozen=True, eq=False)
class Piece:
    """One part on the sheet: its beam path and what is engraved on it."""

    part: str
    path: Contours
    strokes: tuple[Array, ...]
    id_inside: bool
    outside: tuple[Array, ...] = ()
    """The outside in pieces, with bridges between them; empty where it is cut whole."""
    arcs: tuple[Bulges, ...] = ()
    """Outside and insides with arcs, in this order; empty where lines are asked for."""
    guest: bool = False
    """It lies in the opening of another part, and is cut with the insides, before that one."""


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
    shapes = sheet.placed_shapes()
    guests = guests_of(shapes)
    bare = Bare(sheet.outline, shapes)
    pieces = [
        _piece(part, at, moved(path, *_place(at)), sheet, laser, n in guests, bare)
        for n, (part, at, path) in enumerate(
            zip(sheet.parts, sheet.placements, sheet.paths, strict=True))
    ]
    w, h = sheet.width_mm, sheet.height_mm
    words = (f"{kit.title.line}  {sheet.file}  {sheet.material} {sheet.thickness_mm:g} mm"
             f"  kerf {sheet.kerf_mm:g} mm")
    high = max(LEAST_TITLE_MM, TITLE_MM * min(1.0, w / width_mm(words, TITLE_MM)))
    title = [np.array(s) for s in write(words, high, (0.0, h + 2.0), "start")]
    outline = np.array([(0, 0), (w, 0), (w, h), (0, h)], float)
    if sheet.offcut is not None:
        outline = np.asarray(sheet.offcut.exterior.coords)[:-1]
    return Drawing(outline, tuple(title), tuple(pieces))


def _place(at: Placement) -> tuple[float, float, float, bool]:
    return at.x_mm, at.y_mm, at.rotation_deg, at.flipped


def _piece(
    part: Part, at: Placement, path: Contours, sheet: Sheet, laser: Laser, guest: bool, bare: Bare
) -> Piece:
    """One part where it lies."""
    assert isinstance(part.form, Plate)
    strokes, inside = strokes_of(part, laser.letter_mm, at.label, laser.grain_arrows,
                                 at.flipped)
    marks = moved_strokes(strokes, *_place(at))
    if not inside:
        marks += bare.written(at.label, at.of(part.form.shape2d))
    runs: tuple[Array, ...] = ()
    arcs: tuple[Bulges, ...] = ()
    if laser.bridges:
        runs = bridged(path.outside, laser.bridges, laser.bridge_mm + sheet.kerf_mm)
    elif laser.arc_mm:
        fine = moved(beam_path(part, sheet.kerf_mm, 0.0), *_place(at))
        arcs = tuple(with_arcs(ring, laser.arc_mm) for ring in (fine.outside, *fine.inside))
    return Piece(at.label, path, tuple(marks), inside, runs, arcs, guest)
