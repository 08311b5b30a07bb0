"""Part: the one type that everything downstream is made from; Kit: all of them.

Nothing downstream of this module knows what a rib is. A part knows its place, its material, its
form and from these its mass, centroid, inertia and solid.
"""

from __future__ import annotations

from dataclasses import dataclass, field, replace
from functools import cached_property
from itertools import pairwise
from typing import TYPE_CHECKING, Literal, TypeAlias

import numpy as np
from shapely.affinity import scale
from shapely.geometry import Polygon, box

from buildgen.solid import (
    Array,
    Circle,
    Figures,
    Mirrored,
    Placed,
    Pose,
    Prism,
    Shape,
    Surface,
    Union,
    mesh,
    skin_figures,
    solid_figures,
    triangles,
    with_circles,
)

if TYPE_CHECKING:
    from manifold3d import Manifold

Process: TypeAlias = Literal["cut", "stick", "print", "cover", "bought", "allowance"]
G_PER_MM3 = 1e-6  # of one kg/m3


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
class Plate:
    """Cut from sheet: nominal outline in local x, y; z from 0 to thickness."""

    outline: Polygon
    thickness_mm: float
    circles: tuple[Circle, ...] = ()
    grain_deg: float | None = None
    marks: tuple[Mark, ...] = ()
    may_turn_over: bool = True
    bend: Bend | None = None

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


@dataclass(frozen=True, eq=False)
class Part:
    """One thing the builder cuts, prints or buys. Never changed once made; see `replace`.

    Attributes:
        id: printed on the part itself, unique in the kit.
        name: in words.
        material: a name on the shelf; for a bought item what it is.
        form: how it is made.
        pose: its frame in the aircraft.
        step: the build step it belongs to.
        from_key: the key of the definition it comes from.
        density_kg_m3: 0 for bought items, coverings and allowances.
        basis: how its mass was found: "measured", "catalogue", "estimated".
    """

    id: str
    name: str
    material: str
    form: Form
    pose: Pose
    step: str
    from_key: str
    density_kg_m3: float = 0.0
    density_sigma_kg_m3: float = 0.0
    basis: str = "estimated"

    @property
    def process(self) -> Process:
        return self.form.process

    @property
    def files_key(self) -> str:
        """Stem of the printed solid's files: equal solids share them."""
        twin = self.form.twin if isinstance(self.form, Printed) else ""
        return twin or self.id

    @cached_property
    def volume_mm3(self) -> float:
        """Material of the part: plates by their true outline, prints by the plastic laid down."""
        match self.form:
            case Plate():
                return self.form.area_mm2 * self.form.thickness_mm
            case Printed():
                return self.form.plastic_mm3
            case Stick():
                return self._figures.volume_mm3
        return 0.0

    @cached_property
    def mass_g(self) -> float:
        match self.form:
            case Bought() | Allowance():
                return self.form.mass_g
            case Cover():
                return self._skin[0] * 1e-6 * self.form.area_density_g_m2
        return self.volume_mm3 * self.density_kg_m3 * G_PER_MM3

    @cached_property
    def mass_sigma_g(self) -> float:
        """One standard deviation of the mass, from its material's spread."""
        match self.form:
            case Bought() | Allowance():
                return self.form.mass_sigma_g
            case Cover():
                return self._skin[0] * 1e-6 * self.form.area_density_sigma_g_m2
        return self.volume_mm3 * self.density_sigma_kg_m3 * G_PER_MM3

    @cached_property
    def shape(self) -> Shape | None:
        """The solid or skin in the aircraft's frame; None for an allowance."""
        local = self.form.skin if isinstance(self.form, Cover) else (
            None if isinstance(self.form, Allowance) else self.form.shape
        )
        return None if local is None else Placed(local, self.pose)

    @property
    def solid(self) -> Manifold | None:
        """The closed solid in the aircraft's frame; None for coverings and allowances."""
        if self.shape is None or isinstance(self.form, Cover):
            return None
        return mesh(self.shape)

    @cached_property
    def _skin(self) -> tuple[float, Array, Array]:
        assert isinstance(self.form, Cover)
        return skin_figures(self.pose(self.form.skin.vertices), self.form.skin.faces)

    @cached_property
    def _figures(self) -> Figures:
        solid = self.solid
        if solid is None:
            return Figures(0.0, self.pose.origin, np.zeros((3, 3)))
        return solid_figures(*triangles(solid))

    @cached_property
    def centroid_mm(self) -> Array:
        """(3,) in the aircraft's frame."""
        if isinstance(self.form, Cover):
            return self._skin[1]
        if isinstance(self.form, Plate) and self.form.bend is None:
            return self._plate_centroid()
        return self._figures.centroid_mm

    def _plate_centroid(self) -> Array:
        assert isinstance(self.form, Plate)
        plate = self.form
        moment = np.array(plate.outline.centroid.coords[0]) * plate.outline.area
        for x, y, r in plate.circles:
            moment = moment - np.pi * r * r * np.array([x, y])
        return self.pose(np.append(moment / plate.area_mm2, plate.thickness_mm / 2))

    @cached_property
    def inertia_g_mm2(self) -> Array:
        """(3, 3) about its own centroid, axes of the aircraft."""
        unit = self._skin[2] if isinstance(self.form, Cover) else self._figures.radius2
        return np.asarray(unit * self.mass_g)

    def mirrored(self, new_id: str, name: str, from_key: str = "") -> Part:
        """The same part on the other side of the aircraft, really handed.

        A flat plate is turned over: its outline stays, its engraving goes on the other face.
        """
        other = replace(self, id=new_id, name=name, from_key=from_key or self.from_key)
        match self.form:
            case Plate(bend=None):
                marks = tuple(
                    replace(m, text=new_id) if m.text == self.id else m for m in self.form.marks
                )
                lift = Pose(origin=np.array([0.0, 0.0, self.form.thickness_mm]))
                flipped = lift.then(self.pose).mirrored(2)
                return replace(other, form=replace(self.form, marks=marks), pose=flipped)
            case Allowance():
                return replace(other, pose=self.pose.mirrored(1))
            case Cover():
                skin = self.form.skin
                turned = Surface(skin.vertices * (1, -1, 1), skin.faces[:, ::-1])
                return replace(
                    other, form=replace(self.form, skin=turned), pose=self.pose.mirrored(1)
                )
            case Plate():
                return replace(other, form=_bent_other_way(self.form, new_id, self.id),
                               pose=self.pose.mirrored(1))
        if self.form.shape is None:
            return replace(other, pose=self.pose.mirrored(1))
        form = replace(self.form, shape=Mirrored(self.form.shape, 1))
        if isinstance(form, Printed):
            form = replace(form, twin="")
        return replace(other, form=form, pose=self.pose.mirrored(1))


def _bent_other_way(plate: Plate, new_id: str, old_id: str) -> Plate:
    """A bent plate mirrored in local y: outline, circles and marks change sides."""
    marks = tuple(
        replace(m, text=new_id if m.text == old_id else m.text, at=(m.at[0], -m.at[1]),
                line=tuple((x, -y) for x, y in m.line))
        for m in plate.marks
    )
    return replace(
        plate,
        outline=scale(plate.outline, 1, -1, origin=(0, 0)),
        circles=tuple((x, -y, r) for x, y, r in plate.circles),
        marks=marks,
    )


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


# ---------------------------------------------------------------- joints and the kit


@dataclass(frozen=True, eq=False)
class Joint:
    """Two parts that meet and how: what the dry fit measures.

    Attributes:
        kind: "spar in hole", "stick in notch", "tab in slot", "mount on ribs", "face to face"...
        inner, outer: part ids; the inner one enters the outer one.
        gap_mm: least and greatest clearance all round; (0, 0) where faces touch.
        way: direction along which the inner part goes in, or None where it is laid on.
    """

    kind: str
    inner: str
    outer: str
    gap_mm: tuple[float, float] = (0.0, 0.5)
    way: tuple[float, float, float] | None = None


@dataclass(frozen=True, eq=False)
class Title:
    """What is printed on every sheet and page, so that revisions are never mixed."""

    name: str
    title: str
    revision: str
    source_sha256: str

    @property
    def short_hash(self) -> str:
        return self.source_sha256[:8]

    @property
    def line(self) -> str:
        """``marram rev A (1f3a9c2e)``"""
        return f"{self.name} rev {self.revision} ({self.short_hash})"


@dataclass(frozen=True, eq=False)
class Kit:
    """Every part in its place, in the order of the build.

    Raises:
        ValueError: two parts carry the same id (a fault of the program).
    """

    title: Title
    parts: tuple[Part, ...]
    joints: tuple[Joint, ...] = ()

    def __post_init__(self) -> None:
        seen: set[str] = set()
        for part in self.parts:
            if part.id in seen:
                raise ValueError(f"two parts are called {part.id}")
            seen.add(part.id)

    @cached_property
    def by_id(self) -> dict[str, Part]:
        return {part.id: part for part in self.parts}

    def of(self, *processes: Process) -> tuple[Part, ...]:
        """The parts made by these processes, in order."""
        return tuple(p for p in self.parts if p.process in processes)

    @cached_property
    def steps(self) -> tuple[str, ...]:
        """Build steps in the order of their first part."""
        return tuple(dict.fromkeys(p.step for p in self.parts))
