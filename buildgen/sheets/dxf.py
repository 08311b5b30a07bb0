"""A sheet as DXF: closed polylines and true circles by layer, in millimetres."""

from __future__ import annotations

import io
from typing import Any

from buildgen.design.schema import Laser
from buildgen.part import Kit
from buildgen.sheets.arcs import Bulges
from buildgen.sheets.drawing import (
    CUT_INSIDE,
    CUT_OUTSIDE,
    LAYERS,
    MARK,
    SHEET,
    Drawing,
    Piece,
    colours,
    draw,
)
from buildgen.sheets.sheet import Sheet
from buildgen.solid import Array

MILLIMETRES = 4
PLACES = 4
BULGE_PLACES = 8


def sheet_dxf(sheet: Sheet, kit: Kit, laser: Laser, drawing: Drawing | None = None) -> str:
    """The text of the DXF file; equal sheets give equal text.

    Args:
        drawing: the sheet as drawn already, where it is.
    """
    import ezdxf

    keep = ezdxf.options.write_fixed_meta_data_for_testing
    ezdxf.options.write_fixed_meta_data_for_testing = True
    try:
        document = ezdxf.new(laser.dxf, units=MILLIMETRES)
        for name in LAYERS:
            document.layers.add(name, color=colours(laser)[name])
        drawing = drawing or draw(sheet, kit, laser)
        _fill(document.modelspace(), drawing, laser.dxf == "R12")
        x, y = drawing.outline.max(axis=0)
        far = (float(x), float(y) + 5.5, 0)
        # Both: the library copies the layout's extents to the header, but not a corner at (0, 0).
        document.modelspace().reset_extents((0, 0, 0), far)
        document.header["$EXTMIN"], document.header["$EXTMAX"] = (0, 0, 0), far
        if laser.dxf != "R12":
            document.header["$MEASUREMENT"] = 1
        stream = io.StringIO()
        document.write(stream)
        return stream.getvalue()
    finally:
        ezdxf.options.write_fixed_meta_data_for_testing = keep


def _fill(space: Any, drawing: Drawing, old: bool) -> None:
    """Marks first, then for each part its inside before its outside."""
    _line(space, drawing.outline, SHEET, old, True)
    for stroke in drawing.title:
        _line(space, stroke, SHEET, old, False)
    for piece in drawing.pieces:
        for stroke in piece.strokes:
            _line(space, stroke, MARK, old, False)
    for piece in drawing.pieces:
        _piece(space, piece, old)


def _piece(space: Any, piece: Piece, old: bool) -> None:
    """A part's circles and openings, then its outside."""
    last = CUT_INSIDE if piece.guest else CUT_OUTSIDE
    for x, y, r in piece.path.circles:
        space.add_circle((round(x, PLACES), round(y, PLACES)), round(r, PLACES),
                         dxfattribs={"layer": CUT_INSIDE})
    if piece.arcs:
        for ring in piece.arcs[1:]:
            _arcs(space, ring, CUT_INSIDE, old)
        _arcs(space, piece.arcs[0], last, old)
        return
    for inside in piece.path.inside:
        _line(space, inside, CUT_INSIDE, old, True)
    for run in piece.outside:
        _line(space, run, last, old, False)
    if not piece.outside:
        _line(space, piece.path.outside, last, old, True)


def _arcs(space: Any, ring: Bulges, layer: str, old: bool) -> None:
    rounded = [(round(x, PLACES), round(y, PLACES), round(b, BULGE_PLACES)) for x, y, b in ring]
    add = space.add_polyline2d if old else space.add_lwpolyline
    add(rounded, format="xyb", close=True, dxfattribs={"layer": layer})


def _line(space: Any, points: Array, layer: str, old: bool, close: bool) -> None:
    rounded = [(round(float(x), PLACES), round(float(y), PLACES)) for x, y in points]
    add = space.add_polyline2d if old else space.add_lwpolyline
    add(rounded, close=close, dxfattribs={"layer": layer})
