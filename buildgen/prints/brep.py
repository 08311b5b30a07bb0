"""The recipe tree as a boundary representation with CadQuery, for STEP and fine meshes."""

from __future__ import annotations

import sys
from functools import singledispatch
from typing import Any

import numpy as np

from buildgen.solid import (
    Array,
    Box,
    Common,
    Difference,
    Mirrored,
    Placed,
    Prism,
    Rod,
    Ruled,
    Run,
    Shape,
    Surface,
    Union,
)

SPLINE_MM = 0.005
"""Curves are approximated this closely: a tenth of what a printer can show."""

SEW_MM = 1e-5


class KernelMissing(Exception):
    """The CAD kernel cannot be loaded; the message says what to install."""


def kernel() -> Any:
    """The cadquery module.

    Raises:
        KernelMissing: it, or a system library that it needs, is not there.
    """
    try:
        import cadquery
    except ImportError as error:
        raise KernelMissing(missing_text(error)) from error
    return cadquery


def missing_text(error: ImportError) -> str:
    """What to do about a kernel that does not load."""
    text = f"The CAD kernel (cadquery) cannot be loaded: {error}."
    if ".so" in str(error):
        text += (" It needs the system's OpenGL and X11 libraries even without a screen. On Debian"
                 " and its relatives: apt-get install libgl1 libx11-6.")
    elif sys.version_info >= (3, 14):
        text += " It comes for Python 3.11 to 3.13."
    else:
        text += " Install it with pip install cadquery."
    return text + " Cutting, balance and checks work without it."


def solid_of(shape: Shape) -> Any:
    """One valid CadQuery solid.

    Raises:
        ValueError: the recipe gives no single valid solid (a fault of the program).
    """
    made = brep(shape)
    solids = made.Solids()
    if len(solids) != 1:
        raise ValueError(f"the recipe gives {len(solids)} solids, not one")
    if not solids[0].isValid():
        raise ValueError("the recipe gives a solid that is not valid")
    return solids[0]


@singledispatch
def brep(shape: Any) -> Any:
    """A recipe as a CadQuery shape."""
    raise TypeError(f"{type(shape).__name__} is no recipe")


@brep.register
def _(shape: Prism) -> Any:
    cq = kernel()
    outer = _polygon(np.asarray(shape.outline.exterior.coords))
    inner = [_polygon(np.asarray(r.coords)) for r in shape.outline.interiors]
    for x, y, r in shape.circles:
        inner.append(cq.Wire.makeCircle(r, cq.Vector(x, y, 0), cq.Vector(0, 0, 1)))
    return cq.Solid.extrudeLinear(outer, inner, cq.Vector(0, 0, shape.height_mm))


@brep.register
def _(shape: Rod) -> Any:
    cq = kernel()
    x = cq.Vector(1, 0, 0)
    full = cq.Solid.makeCylinder(shape.radius_mm, shape.length_mm, cq.Vector(), x)
    if shape.bore_radius_mm <= 0:
        return full
    return full.cut(cq.Solid.makeCylinder(shape.bore_radius_mm, shape.length_mm, cq.Vector(), x))


@brep.register
def _(shape: Box) -> Any:
    cq = kernel()
    size = np.subtract(shape.high, shape.low)
    return cq.Solid.makeBox(*(float(v) for v in size), cq.Vector(*shape.low))


@brep.register
def _(shape: Ruled) -> Any:
    cq = kernel()
    wires = [_wire(runs) for runs in (shape.first, shape.last)]
    return cq.Solid.makeLoft(wires, True)


@brep.register
def _(shape: Placed) -> Any:
    cq = kernel()
    pose = shape.pose
    plane = cq.Plane(
        origin=tuple(float(v) for v in pose.origin),
        xDir=tuple(float(v) for v in pose.rotation[:, 0]),
        normal=tuple(float(v) for v in pose.rotation[:, 2]),
    )
    return brep(shape.shape).moved(cq.Location(plane))


@brep.register
def _(shape: Mirrored) -> Any:
    return brep(shape.shape).mirror(("YZ", "XZ", "XY")[shape.axis])


@brep.register
def _(shape: Union) -> Any:
    first, *rest = (brep(s) for s in shape.shapes)
    return first.fuse(*rest) if rest else first


@brep.register
def _(shape: Difference) -> Any:
    return brep(shape.body).cut(*(brep(t) for t in shape.tools))


@brep.register
def _(shape: Common) -> Any:
    first, *rest = (brep(s) for s in shape.shapes)
    for other in rest:
        first = first.intersect(other)
    return first


@brep.register
def _(shape: Surface) -> Any:
    return sewn(shape)


def sewn(surface: Surface) -> Any:
    """A triangulated solid with flat faces, coplanar neighbours as one face.

    Raises:
        ValueError: its triangles do not close.
    """
    from OCP.BRepBuilderAPI import BRepBuilderAPI_Sewing
    from OCP.ShapeUpgrade import ShapeUpgrade_UnifySameDomain

    cq = kernel()
    corners = [cq.Vector(*(float(v) for v in p)) for p in surface.vertices]
    sewing = BRepBuilderAPI_Sewing(SEW_MM)
    for a, b, c in surface.faces:
        wire = cq.Wire.makePolygon([corners[a], corners[b], corners[c]], close=True)
        sewing.Add(cq.Face.makeFromWires(wire).wrapped)
    sewing.Perform()
    shells = cq.Shape.cast(sewing.SewedShape()).Shells()
    if len(shells) != 1 or not shells[0].wrapped.Closed():
        raise ValueError("the triangles of a surface do not close to one solid")
    joined = ShapeUpgrade_UnifySameDomain(cq.Solid.makeSolid(shells[0]).wrapped, True, True, False)
    joined.Build()
    return cq.Shape.cast(joined.Shape()).Solids()[0]


def _polygon(points: Array) -> Any:
    cq = kernel()
    flat = [cq.Vector(float(x), float(y), 0) for x, y in points]
    return cq.Wire.makePolygon(flat)


def _wire(runs: tuple[Run, ...]) -> Any:
    cq = kernel()
    return cq.Wire.assembleEdges([e for run in runs for e in _edges(run)])


def _edges(run: Run) -> list[Any]:
    cq = kernel()
    points = [cq.Vector(*(float(v) for v in p)) for p in run.points]
    if run.smooth and len(points) > 3:
        return [cq.Edge.makeSplineApprox(points, tol=SPLINE_MM, minDeg=3, maxDeg=5)]
    return [cq.Edge.makeLine(a, b) for a, b in zip(points, points[1:], strict=False)]


def volume_mm3(solid: Any) -> float:
    """Volume by adaptive Gauss-Kronrod integration: the plain one errs on spline faces."""
    from OCP.BRepGProp import BRepGProp
    from OCP.GProp import GProp_GProps

    found = GProp_GProps()
    BRepGProp.VolumePropertiesGK_s(solid.wrapped, found, 1e-5, False, True)
    return float(found.Mass())
