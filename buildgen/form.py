"""Forms: how a part is made, and the shape that comes of it in the part's own frame."""

from __future__ import annotations

from dataclasses import dataclass, field
from functools import cached_property
from itertools import pairwise
from typing import Literal, TypeAlias

import numpy as np
from shapely.geometry import Polygon, box

from buildgen.solid import (
    Array,
    Circle,
    Prism,
    Shape,
    Surface,
    Union,
    mesh,
    triangles,
    with_circles,
)

Process: TypeAlias = Literal["cut", "stick", "print", "cover", "bought", "allowance"]


@dataclass(frozen=True, eq=False)
class Mark:
    """Something engraved on a plate's upper face (z = thickness), never cut.

    Either `text` centred on `at` with its baseline turned by `angle_deg`, or a `line` of points.
    """

    text: str = ""
    at: tuple[float, float] = (0.0, 0.0)
    height_mm: float = 5.0
    angle_deg: float = 0.0
    line: tuple[tuple[float, float], ...] = ()


@dataclass(frozen=True, eq=False)
class Bend:
    """A plate bent about its local y: flat x runs along a folded path in the x, z plane.

    `flat_mm` (n,) are the flat x of the folds, `path_mm` (n, 2) their x, z in place; the length
    of each leg is kept (a developable surface). The thickness lies to the left of the path.
    """

    flat_mm: Array
    path_mm: Array


@dataclass(frozen=True, eq=False)
class Formed:
    """A plate bent over a surface: its solid as it stands, in the plate's frame.

    The plate's outline is the sheet laid flat; its mass is that of the sheet as cut.
    """

    shape: Shape


@dataclass(frozen=True, eq=False)
class Plate:
    """Cut from sheet: nominal outline in local x, y; z from 0 to thickness."""

    outline: Polygon
    thickness_mm: float
    circles: tuple[Circle, ...] = ()
    grain_deg: float | None = None
    marks: tuple[Mark, ...] = ()
    may_turn_over: bool = True
    bend: Bend | Formed | None = None

    process: Process = field(default="cut", init=False)

    @cached_property
    def shape2d(self) -> Polygon:
        """The outline with circles as polygons (for nesting and pictures)."""
        return with_circles(self.outline, self.circles)

    @cached_property
    def area_mm2(self) -> float:
        """Nominal area, circles exact."""
        return float(self.outline.area - sum(np.pi * r * r for _, _, r in self.circles))

    @cached_property
    def shape(self) -> Shape:
        """The solid as it stands in its frame."""
        if self.bend is None:
            return Prism(self.outline, self.thickness_mm, self.circles)
        if isinstance(self.bend, Formed):
            return self.bend.shape
        return bent(self.shape2d, self.thickness_mm, self.bend)


@dataclass(frozen=True, eq=False)
class Stick:
    """A stick, tube, rod or wire cut to length; `shape` as it stands, after shaping.

    Attributes:
        section: what to ask for at the counter: "8 x 6 tube", "5 x 5", "2 wire".
        length_mm: to cut, the developed length of a bent one.
        bends: (distance from the start [mm], angle [deg]) of each bend.
    """

    shape: Shape
    length_mm: float
    section: str
    bends: tuple[tuple[float, float], ...] = ()

    process: Process = field(default="stick", init=False)


@dataclass(frozen=True, eq=False)
class PrintSettings:
    """How solids are printed: what decides their mass and the least wall."""

    line_width_mm: float = 0.45
    perimeters: int = 2
    layer_mm: float = 0.2
    skin_layers: int = 4
    infill: float = 0.25
    hole_oversize_mm: float = 0.2
    slip_mm: float = 0.15
    bed_mm: tuple[float, float, float] = (220.0, 220.0, 220.0)

    @property
    def wall_mm(self) -> float:
        """Least wall: both faces printed in full perimeters."""
        return self.line_width_mm * self.perimeters


@dataclass(frozen=True, eq=False)
class Printed:
    """A printed solid; `print_up` is its local axis that points up on the bed."""

    shape: Shape
    settings: PrintSettings
    print_up: tuple[float, float, float] = (0.0, 0.0, 1.0)
    twin: str = ""
    """Key shared by solids that are equal: one file serves them all; empty: one of its own."""

    process: Process = field(default="print", init=False)

    @cached_property
    def plastic_mm3(self) -> float:
        """Plastic laid down: shell in full, the inside at the infill.

        Shell volume is its area times its thickness, at most the whole solid.
        Source: common practice, no source; slicers lay perimeters and skins of this thickness.
        """
        solid = mesh(self.shape)
        side = self.settings.wall_mm
        skin = self.settings.skin_layers * self.settings.layer_mm
        vertices, faces = triangles(solid)
        a, b, c = (vertices[faces[:, k]] for k in range(3))
        normal = np.cross(b - a, c - a) / 2
        upright = np.abs(normal @ np.asarray(self.print_up))
        whole = np.linalg.norm(normal, axis=1)
        flat = np.where(upright > 0.9 * whole, skin, side)
        shell = min(float(solid.volume()), float((whole * flat).sum()))
        return shell + (float(solid.volume()) - shell) * self.settings.infill


@dataclass(frozen=True, eq=False)
class Cover:
    """A covering laid over a skin; film or tissue by its mass per area."""

    skin: Surface
    area_density_g_m2: float
    area_density_sigma_g_m2: float = 0.0
    process: Process = field(default="cover", init=False)


@dataclass(frozen=True, eq=False)
class Bought:
    """A thing that is bought; `shape` is the room it takes, None where that does not matter."""

    mass_g: float
    mass_sigma_g: float = 0.0
    shape: Shape | None = None
    order: str = ""
    """What to ask for: "M3 x 10 ISO 4762", "10 x 4.5 propeller"."""
    quantity: int = 1
    process: Process = field(default="bought", init=False)


@dataclass(frozen=True, eq=False)
class Allowance:
    """A named estimate (glue, paint) with a place but no shape."""

    mass_g: float
    mass_sigma_g: float
    process: Process = field(default="allowance", init=False)


Form: TypeAlias = Plate | Stick | Printed | Cover | Bought | Allowance


def bent(outline: Polygon, thickness_mm: float, bend: Bend) -> Union:
    """A flat plate folded along its path: cut at the folds, each leg turned into place."""
    legs: list[Shape] = []
    low_y, high_y = outline.bounds[1] - 1, outline.bounds[3] + 1
    for start, end in pairwise(bend.flat_mm):
        clipped = outline.intersection(box(start, low_y, end, high_y))
        for piece in getattr(clipped, "geoms", [clipped]):
            if isinstance(piece, Polygon) and piece.area > 1e-6:
                legs.append(_leg(piece, thickness_mm, bend, float(start + end) / 2))
    return Union(tuple(legs))


def _leg(piece: Polygon, thickness_mm: float, bend: Bend, middle: float) -> Surface:
    vertices, faces = triangles(mesh(Prism(piece, thickness_mm)))
    x, z = _on_path(vertices[:, 0], vertices[:, 2], bend, middle)
    return Surface(np.column_stack([x, vertices[:, 1], z]), faces)


def _on_path(
    flat_x: Array, height: Array, bend: Bend, middle: float
) -> tuple[Array, Array]:
    """Place points (flat x, height above the lower face) on the leg that holds `middle`."""
    legs = np.diff(bend.path_mm, axis=0)
    legs = legs / np.linalg.norm(legs, axis=1)[:, None]
    normals = np.column_stack([-legs[:, 1], legs[:, 0]])
    mitres = np.vstack([normals[:1], normals[:-1] + normals[1:], normals[-1:]])
    grow = np.einsum("ij,ij->i", mitres, np.vstack([normals[:1], normals[:-1], normals[-1:]]))
    mitres = mitres / grow[:, None]
    leg = min(int(np.searchsorted(bend.flat_mm, middle, side="right")) - 1, len(legs) - 1)
    start, end = bend.flat_mm[leg], bend.flat_mm[leg + 1]
    t = (flat_x - start) / (end - start)
    low = np.outer(1 - t, bend.path_mm[leg]) + np.outer(t, bend.path_mm[leg + 1])
    lean = np.outer(1 - t, mitres[leg]) + np.outer(t, mitres[leg + 1])
    placed = low + lean * height[:, None]
    return placed[:, 0], placed[:, 1]
