"""A small kit of plates that asks for everything: holes, circles, grain, curves, long ids."""

from __future__ import annotations

from functools import cache

import numpy as np
from shapely.geometry import Polygon, box

from buildgen.design import load
from buildgen.design.schema import Definition
from buildgen.part import Kit, Part, Plate, Title
from buildgen.sheets.layout import Sheet, lay_out
from buildgen.shelf import load_shelf
from buildgen.solid import Circle, Pose


def plate(
    id: str, outline: Polygon, circles: tuple[Circle, ...] = (), grain: float | None = 0.0,
    material: str = "balsa", thickness: float = 3.0,
) -> Part:
    """A part to cut."""
    form = Plate(outline, thickness, circles, grain)
    return Part(id, f"plate {id}", material, form, Pose(), "wing", "wing.ribs", 160.0)


def ellipse(a: float, b: float, count: int = 400) -> Polygon:
    t = np.linspace(0, 2 * np.pi, count, endpoint=False)
    return Polygon(np.column_stack([a * np.cos(t), b * np.sin(t)]))


def small_kit() -> Kit:
    """Seven plates in two materials."""
    frame = box(0, 0, 90, 80).difference(box(8, 8, 82, 72))
    ply = {"grain": None, "material": "birch-ply"}
    parts = (
        plate("R1", ellipse(70, 14), ((-20.0, 0.0, 6.0), (10.0, 0.0, 4.0))),
        plate("R2", ellipse(60, 12).difference(box(-5, -3, 5, 3))),
        plate("TE1", Polygon([(0, 0), (150, 2), (150, 6), (0, 9)])),
        plate("S-long-1", box(0, 0, 6, 60), grain=90.0),
        plate("F1", frame, **ply),  # type: ignore[arg-type]
        plate("F2", box(0, 0, 30, 30), ((15.0, 15.0, 5.0),), **ply),  # type: ignore[arg-type]
        plate("F3", box(0, 0, 24, 50), **ply),  # type: ignore[arg-type]
    )
    return Kit(Title("small", "Small", "A", "0123456789abcdef" * 4), parts)


@cache
def small_definition() -> Definition:
    """A shipped definition: only its laser and stock count here."""
    definition = load("sedge").definition
    return definition.model_copy(update={"stock": type(definition.stock)()})


@cache
def small_sheets() -> tuple[Sheet, ...]:
    return lay_out(small_kit(), small_definition(), load_shelf())
