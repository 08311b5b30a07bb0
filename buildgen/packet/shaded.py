"""Shaded pictures of parts as flowables, each rendered once."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from PIL import Image
from reportlab.lib.units import mm
from reportlab.lib.utils import ImageReader

from buildgen.packet.pen import SMALL_PT, Pen, Picture, text_width_mm
from buildgen.packet.render import Scene, Tone, isometric, picture
from buildgen.packet.view import Direction
from buildgen.part import Cover, Part
from buildgen.solid import Array, Placed, Surface, mesh, triangles

NEW: Tone = (0.93, 0.78, 0.55)
NEW_EDGE: Tone = (0.10, 0.10, 0.12)
EARLIER: Tone = (0.95, 0.95, 0.95)
EARLIER_EDGE: Tone = (0.74, 0.75, 0.77)
PIXELS_PER_MM, OVER = 6.0, 2
MARGIN = 0.06


@dataclass(frozen=True)
class Shown:
    """A part in a picture: with its tones, and its id written on it or not."""

    part: Part
    fill: Tone
    edge: Tone
    label: str = ""


def part_triangles(part: Part) -> tuple[Array, np.ndarray] | None:
    """Vertices in the aircraft's frame and faces; None for what has no shape."""
    if part.shape is None:
        return None
    if isinstance(part.form, Cover):
        assert isinstance(part.shape, Placed) and isinstance(part.shape.shape, Surface)
        return part.shape.pose(part.shape.shape.vertices), part.shape.shape.faces
    return triangles(mesh(part.shape))


def shaded(
    shown: Sequence[Shown],
    width_mm: float,
    height_mm: float,
    frame: Array | None = None,
    way: Direction | None = None,
) -> Picture:
    """A picture of parts; `frame` (n, 3) are points that it has to hold, else all of them."""
    way = way or isometric()
    meshes = [(s, t) for s in shown if (t := part_triangles(s.part)) is not None]
    held = frame if frame is not None else np.vstack([v for _, (v, _) in meshes])
    scene = _framed(held, way, width_mm, height_mm)
    for owner, (s, (vertices, faces)) in enumerate(meshes):
        scene.add(vertices, faces, owner, two_sided=isinstance(s.part.form, Cover))
    pixels = picture(scene, [s.fill for s, _ in meshes], [s.edge for s, _ in meshes], OVER)
    image = ImageReader(Image.fromarray(pixels))
    labels = _labels(scene, [s for s, _ in meshes], width_mm, height_mm)

    def paint(pen: Pen) -> None:
        pen.canvas.drawImage(image, 0, 0, width_mm * mm, height_mm * mm)
        for x, y, words in labels:
            pen.text((x, y), words, SMALL_PT - 1, "middle", halo=True)

    return Picture(width_mm, height_mm, paint)


def _framed(points: Array, way: Direction, width_mm: float, height_mm: float) -> Scene:
    """A scene whose picture holds the points with a margin."""
    seen = points @ way.rows.T
    low, high = seen.min(axis=0), seen.max(axis=0)
    wide, tall = (int(round(v * PIXELS_PER_MM)) * OVER for v in (width_mm, height_mm))
    size = np.maximum(high - low, 1e-6)
    scale = (1 - 2 * MARGIN) * min(wide / size[0], tall / size[1])
    return Scene(way, wide, tall, float(scale), (low + high) / 2 @ way.rows)


def _labels(
    scene: Scene, shown: Sequence[Shown], width_mm: float, height_mm: float
) -> list[tuple[float, float, str]]:
    """Ids at the middle of what is seen of each part, left out where they would collide."""
    placed: list[tuple[float, float, str]] = []
    owners = scene.image_rows(scene.owner)
    per_x, per_y = width_mm / scene.width, height_mm / scene.height
    for owner, s in enumerate(shown):
        if not s.label:
            continue
        rows, columns = np.nonzero(owners == owner)
        if len(rows) < 30:
            continue
        middle = np.argmin(
            (rows - rows.mean()) ** 2 + (columns - columns.mean()) ** 2
        )
        x = float(columns[middle]) * per_x
        y = height_mm - float(rows[middle]) * per_y - 0.8
        half = text_width_mm(s.label, SMALL_PT - 1) / 2 + 0.6
        x = min(max(x, half), width_mm - half)
        if all(abs(y - q) > 2.8 or abs(x - p) > half + text_width_mm(w, SMALL_PT - 1) / 2 + 0.6
               for p, q, w in placed):
            placed.append((x, y, s.label))
    return placed
