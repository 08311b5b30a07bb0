"""Part: the one type that everything downstream is made from; Kit: all of them.

The forms stand in `form.py`. Nothing downstream of this module knows what a rib is. A part knows
its place, its material, its form and from these its mass, centroid, inertia and solid.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import cached_property
from typing import TYPE_CHECKING

import numpy as np
from shapely.affinity import scale

from buildgen.form import (
    Allowance,
    Bend,
    Bought,
    Cover,
    Form,
    Formed,
    Mark,
    Plate,
    Printed,
    PrintSettings,
    Process,
    Stick,
)
from buildgen.solid import (
    Array,
    Figures,
    Mirrored,
    Placed,
    Pose,
    Shape,
    Surface,
    mesh,
    skin_figures,
    solid_figures,
    triangles,
)

if TYPE_CHECKING:
    from manifold3d import Manifold

G_PER_MM3 = 1e-6  # of one kg/m3


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
        tool: made with the kit but no part of the aircraft: it weighs nothing in it, and neither
            the dry fit nor the model sees it.
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
    tool: bool = False

    def as_tool(self) -> Part:
        """The same, to build with and not to fly with."""
        return replace(self, tool=True)

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
        """In the aircraft: a tool has none."""
        if self.tool:
            return 0.0
        match self.form:
            case Bought() | Allowance():
                return self.form.mass_g
            case Cover():
                return self._skin[0] * 1e-6 * self.form.area_density_g_m2
        return self.volume_mm3 * self.density_kg_m3 * G_PER_MM3

    @cached_property
    def mass_sigma_g(self) -> float:
        """One standard deviation of the mass, from its material's spread."""
        if self.tool:
            return 0.0
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

    @property
    def skin_area_mm2(self) -> float:
        """Area of a covering."""
        return self._skin[0]

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
    bend = plate.bend
    if isinstance(bend, Formed):
        bend = Formed(Mirrored(bend.shape, 1))
    return replace(
        plate,
        bend=bend,
        outline=scale(plate.outline, 1, -1, origin=(0, 0)),
        circles=tuple((x, -y, r) for x, y, r in plate.circles),
        marks=marks,
    )


# ---------------------------------------------------------------- joints and the kit


@dataclass(frozen=True, eq=False)
class Joint:
    """Two parts that meet and how: what the dry fit measures.

    Attributes:
        kind: "spar in hole", "stick in notch", "tab in slot", "mount on ribs", "face to face"...
        inner, outer: part ids; the inner one enters the outer one.
        gap_mm: least and greatest clearance all round; (0, 0) where faces touch.
        way: direction along which the inner part goes in, or None where it is laid on.
        facing: direction from the inner part's glued face to the outer one's, where that is not
            the way in.
    """

    kind: str
    inner: str
    outer: str
    gap_mm: tuple[float, float] = (0.0, 0.5)
    way: tuple[float, float, float] | None = None
    facing: tuple[float, float, float] | None = None


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
class Board:
    """A full-size drawing that parts are pinned on.

    Attributes:
        right, up: the drawing's axes in the aircraft.
        parts: ids of what is drawn.
        span_mm: along `right` from where to where it is drawn; None for all of it.
    """

    name: str
    right: tuple[float, float, float]
    up: tuple[float, float, float]
    parts: tuple[str, ...]
    span_mm: tuple[float, float] | None = None


@dataclass(frozen=True, eq=False)
class Kit:
    """Every part in its place, in the order of the build.

    Raises:
        ValueError: two parts carry the same id (a fault of the program).
    """

    title: Title
    parts: tuple[Part, ...]
    joints: tuple[Joint, ...] = ()
    boards: tuple[Board, ...] = ()

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
    def flying(self) -> tuple[Part, ...]:
        """Every part of the aircraft: all but the tools."""
        return tuple(p for p in self.parts if not p.tool)

    @cached_property
    def steps(self) -> tuple[str, ...]:
        """Build steps in the order of their first part."""
        return tuple(dict.fromkeys(p.step for p in self.parts))

__all__ = [
    "G_PER_MM3", "Allowance", "Bend", "Board", "Bought", "Cover", "Form", "Formed", "Joint", "Kit",
    "Mark", "Part", "Plate", "PrintSettings", "Printed", "Process", "Stick", "Title",
]
