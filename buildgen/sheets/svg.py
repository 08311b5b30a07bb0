"""A sheet as SVG in true millimetres, with the layers of the DXF as groups."""

from __future__ import annotations

import math
from xml.sax.saxutils import escape

from buildgen.design.schema import Laser
from buildgen.part import Kit
from buildgen.sheets.arcs import Bulges
from buildgen.sheets.drawing import CUT_INSIDE, CUT_OUTSIDE, MARK, SHEET, Drawing, Piece, draw
from buildgen.sheets.sheet import Sheet
from buildgen.solid import Array

STROKES = {MARK: "#1a7f37", CUT_INSIDE: "#1f4fd8", CUT_OUTSIDE: "#c62828", SHEET: "#888888"}
TITLE_ROOM_MM = 7.0
HAIR_MM = 0.1


def sheet_svg(sheet: Sheet, kit: Kit, laser: Laser, drawing: Drawing | None = None) -> str:
    """The text of the SVG file; y runs down, the sheet's lower left corner stays lower left."""
    drawing = drawing or draw(sheet, kit, laser)
    width, height = sheet.width_mm, sheet.height_mm + TITLE_ROOM_MM
    groups = [
        _group(SHEET, [_path(drawing.outline, height, True),
                       *(_path(s, height, False) for s in drawing.title)]),
        _group(MARK, [_path(s, height, False) for p in drawing.pieces for s in p.strokes]),
        _group(CUT_INSIDE, _insides(drawing, height)),
        _group(CUT_OUTSIDE, [e for p in drawing.pieces if not p.guest
                             for e in _outside(p, height)]),
    ]
    head = (f'<svg xmlns="http://www.w3.org/2000/svg" width="{width:g}mm" height="{height:g}mm"'
            f' viewBox="0 0 {width:g} {height:g}">\n<title>'
            f"{escape(kit.title.line)}, {escape(sheet.file)}</title>\n")
    return head + "\n".join(groups) + "\n</svg>\n"


def _group(layer: str, elements: list[str]) -> str:
    inner = "\n".join(e for e in elements if e)
    return (f'<g id="{layer}" fill="none" stroke="{STROKES[layer]}" stroke-width="{HAIR_MM}">\n'
            f"{inner}\n</g>")


def _insides(drawing: Drawing, height: float) -> list[str]:
    found = []
    for piece in drawing.pieces:
        found += [f'<circle cx="{x:.4f}" cy="{height - y:.4f}" r="{r:.4f}"/>'
                  for x, y, r in piece.path.circles]
        if piece.arcs:
            found += [_arcs(ring, height) for ring in piece.arcs[1:]]
        else:
            found += [_path(ring, height, True) for ring in piece.path.inside]
        found += _outside(piece, height) if piece.guest else []
    return found


def _outside(piece: Piece, height: float) -> list[str]:
    """A part's outside, named by the part; with bridges its runs."""
    if piece.arcs:
        return [_arcs(piece.arcs[0], height, piece.part)]
    if not piece.outside:
        return [_path(piece.path.outside, height, True, piece.part)]
    return [_path(run, height, False, f"{piece.part}.{n}") for n, run in enumerate(piece.outside)]


def _arcs(ring: Bulges, height: float, part: str = "") -> str:
    """A closed path of lines and arcs; with y down a turn to the left has the sweep flag 0."""
    x, y, _ = ring[0]
    steps = [f"M{x:.4f} {height - y:.4f}"]
    for n, ((x0, y0, bulge), (x1, y1, _)) in enumerate(
        zip(ring, [*ring[1:], ring[0]], strict=True), start=1
    ):
        end = f"{x1:.4f} {height - y1:.4f}"
        if bulge == 0.0:
            steps += [f"L{end}"] if n < len(ring) else []  # Z closes with a straight line
            continue
        radius = math.hypot(x1 - x0, y1 - y0) * (1 + bulge * bulge) / (4 * abs(bulge))
        steps.append(f"A{radius:.4f} {radius:.4f} 0 {int(abs(bulge) > 1)} {int(bulge < 0)} {end}")
    name = f' id="{escape(part)}"' if part else ""
    return f'<path{name} d="{" ".join(steps)} Z"/>'


def _path(points: Array, height: float, close: bool, part: str = "") -> str:
    steps = " L".join(f"{x:.4f} {height - y:.4f}" for x, y in points)
    name = f' id="{escape(part)}"' if part else ""
    return f'<path{name} d="M{steps}{" Z" if close else ""}"/>'
