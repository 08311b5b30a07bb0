"""A sheet as DXF: closed polylines and true circles by layer, in millimetres."""

from __future__ import annotations

import io
from typing import Any

from buildgen.design.schema import Laser
from buildgen.part import Kit
from buildgen.sheets.drawing import (
    CUT_INSIDE,
    CUT_OUTSIDE,
    LAYERS,
    MARK,
    SHEET,
    Drawing,
    colours,
    draw,
)
from buildgen.sheets.layout import Sheet
from buildgen.solid import Array

MILLIMETRES = 4
PLACES = 4


def sheet_dxf(sheet: Sheet, kit: Kit, laser: Laser) -> str:
    """The text of the DXF file; equal sheets give equal text."""
    import ezdxf

    keep = ezdxf.options.write_fixed_meta_data_for_testing
    ezdxf.options.write_fixed_meta_data_for_testing = True
    try:
        document = ezdxf.new(laser.dxf, units=MILLIMETRES)
        for name in LAYERS:
            document.layers.add(name, color=colours(laser)[name])
        drawing = draw(sheet, kit, laser)
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
        for x, y, r in piece.path.circles:
            space.add_circle((round(x, PLACES), round(y, PLACES)), round(r, PLACES),
                             dxfattribs={"layer": CUT_INSIDE})
        for ring in piece.path.inside:
            _line(space, ring, CUT_INSIDE, old, True)
        _line(space, piece.path.outside, CUT_OUTSIDE, old, True)


def _line(space: Any, points: Array, layer: str, old: bool, close: bool) -> None:
    rounded = [(round(float(x), PLACES), round(float(y), PLACES)) for x, y in points]
    add = space.add_polyline2d if old else space.add_lwpolyline
    add(rounded, close=close, dxfattribs={"layer": layer})
