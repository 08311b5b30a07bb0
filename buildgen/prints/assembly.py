"""The whole aircraft as one STEP file: a named product for each part."""

from __future__ import annotations

import tempfile
from collections.abc import Iterable
from dataclasses import dataclass
from pathlib import Path
from typing import Any

import numpy as np

from buildgen.part import Part, Plate, Printed
from buildgen.prints.brep import brep, kernel
from buildgen.prints.make import fixed_header, placed
from buildgen.solid import (
    Common,
    Difference,
    Mirrored,
    Placed,
    Prism,
    Ruled,
    Run,
    Shape,
    Surface,
    Union,
)

CURVE_POINTS = 21
CURVE_MM = 0.02
"""Outlines of plates are thinned this closely: the cut sheets carry the fine ones."""


@dataclass(frozen=True, eq=False)
class Piece:
    """One part of the assembly, its recipe in the aircraft's frame."""

    id: str
    shape: Shape


def pieces_of(parts: Iterable[Part]) -> list[Piece]:
    """Every part that is a solid, plates with thinned outlines."""
    found = []
    for part in parts:
        if part.solid is None or part.shape is None or part.solid.is_empty():
            continue
        shape: Shape = part.shape
        if isinstance(part.form, Plate) and part.form.bend is None:
            plate = part.form
            thin = plate.outline.simplify(CURVE_MM)
            shape = Placed(Prism(thin, plate.thickness_mm, plate.circles), part.pose)
        elif not isinstance(part.form, Printed):
            shape = thinned(shape)
        found.append(Piece(part.id, shape))
    return found


def thinned(shape: Shape) -> Shape:
    """The recipe with its curves given by fewer points: splines run through them all the same."""
    match shape:
        case Placed():
            return Placed(thinned(shape.shape), shape.pose)
        case Mirrored():
            return Mirrored(thinned(shape.shape), shape.axis)
        case Common():
            return Common(tuple(thinned(s) for s in shape.shapes))
        case Difference():
            return Difference(thinned(shape.body), tuple(thinned(t) for t in shape.tools))
        case Ruled():
            return Ruled(*(tuple(_few(run) for run in runs) for runs in (shape.first, shape.last)))
    return shape


def _few(run: Run) -> Run:
    if not run.smooth or len(run.points) <= CURVE_POINTS:
        return run
    keep = np.unique(np.linspace(0, len(run.points) - 1, CURVE_POINTS).round().astype(int))
    return Run(run.points[keep], True)


def assembly_text(name: str, pieces: Iterable[Piece], built: dict[int, Any]) -> str:
    """The STEP file, the same text each time.

    Args:
        name: of the aircraft.
        pieces: in the aircraft's frame [mm].
        built: solids made so far by the identity of their recipe; read and added to.
    """
    cq = kernel()
    whole = cq.Assembly(name=name)
    for piece in pieces:
        whole.add(_body(piece.shape, built), name=piece.id)
    with tempfile.TemporaryDirectory() as room:
        path = Path(room) / "airframe.step"
        whole.export(str(path), "STEP", write_pcurves=False)
        text = path.read_text("utf-8")
    return fixed_header(text, name)


def _body(shape: Shape, built: dict[int, Any]) -> Any:
    """Its solid; folded plates come as one solid for each leg."""
    if isinstance(shape, Placed):
        return placed(_body(shape.shape, built), shape.pose)
    if isinstance(shape, Mirrored):
        return _body(shape.shape, built).mirror(("YZ", "XZ", "XY")[shape.axis])
    if id(shape) not in built:
        legs = shape.shapes if isinstance(shape, Union) else ()
        if legs and all(isinstance(leg, Surface) for leg in legs):
            built[id(shape)] = kernel().Compound.makeCompound([brep(leg) for leg in legs])
        else:
            built[id(shape)] = brep(shape)
    return built[id(shape)]
