"""Shaded pictures of parts as flowables, each rendered once."""

from __future__ import annotations

from collections.abc import Sequence
from functools import lru_cache
from typing import TypeAlias

import numpy as np
from numpy.typing import NDArray
from PIL import Image
from reportlab.lib.units import mm
from reportlab.lib.utils import ImageReader

from buildgen.packet.pen import SMALL_PT, Pen, Picture, text_width_mm
from buildgen.packet.render import Facing, Ints, Scene, facing, isometric
from buildgen.part import Cover, Part
from buildgen.solid import Array, Placed, Surface, mesh, triangles

Tone: TypeAlias = tuple[float, float, float]
Bytes: TypeAlias = NDArray[np.uint8]
NEW: Tone = (0.93, 0.78, 0.55)
NEW_EDGE: Tone = (0.10, 0.10, 0.12)
EARLIER: Tone = (0.95, 0.95, 0.95)
EARLIER_EDGE: Tone = (0.74, 0.75, 0.77)
PIXELS_PER_MM, OVER = 6.0, 2
MARGIN, LEVELS, LEAST_PIXELS = 0.06, 48, 10
SKIN_NEARER_MM = 5.0
"""Skins are drawn this much before the plates that they lie on."""
HIDDEN_EDGE: Tone = (0.48, 0.44, 0.38)
PAPER: Tone = (1.0, 1.0, 1.0)
EDGE_CODE = 3 * LEVELS
PAPER_CODE = EDGE_CODE + 3


@lru_cache(maxsize=4096)
def part_triangles(part: Part) -> tuple[Array, Ints] | None:
    """Vertices in the aircraft's frame and faces; None for what has no shape."""
    if part.shape is None:
        return None
    if isinstance(part.form, Cover):
        assert isinstance(part.shape, Placed) and isinstance(part.shape.shape, Surface)
        return part.shape.pose(part.shape.shape.vertices), part.shape.shape.faces
    return triangles(mesh(part.shape))


def shaded(
    new: Sequence[Part],
    width_mm: float,
    high_mm: tuple[float, float],
    earlier: Sequence[Part] = (),
    label: bool = False,
    tones: tuple[Tone, Tone] = (NEW, EARLIER),
) -> Picture:
    """A picture of parts: new ones strong, earlier ones pale; what those hide shines through.

    Args:
        new: at least one of them with a shape.
        high_mm: least and greatest height of the picture.
        label: write the ids of new parts where they fit.
    """
    drawn = [p for p in new if part_triangles(p) is not None]
    old = [p for p in earlier if part_triangles(p) is not None]
    low, high = _frame(drawn, old)
    tall = float((high[1] - low[1]) / (high[0] - low[0]))
    height_mm = min(max(high_mm[0], width_mm * tall), high_mm[1])
    front = _framed(low, high, width_mm, height_mm)
    _draw(front, drawn, 0)
    whole = front.copy()
    _draw(whole, old, len(drawn))
    image = ImageReader(_coloured(front, whole, len(drawn), tones))
    labels = _labels(front, drawn, width_mm, height_mm) if label else []

    def paint(pen: Pen) -> None:
        pen.canvas.drawImage(image, 0, 0, width_mm * mm, height_mm * mm)
        for x, y, words in labels:
            pen.text((x, y), words, SMALL_PT - 1, "middle", halo=True)

    return Picture(width_mm, height_mm, paint)


def _mesh(part: Part) -> tuple[Array, Ints]:
    found = part_triangles(part)
    assert found is not None
    return found


@lru_cache(maxsize=4096)
def _facing(part: Part) -> Facing:
    return facing(isometric(), *_mesh(part), isinstance(part.form, Cover))


def _draw(scene: Scene, parts: Sequence[Part], first: int) -> None:
    """Closed parts, then skins a little nearer than the frame that they touch."""
    numbered = list(enumerate(parts, first))
    scene.add([(n, _facing(p)) for n, p in numbered if not isinstance(p.form, Cover)])
    scene.add([(n, _facing(p)) for n, p in numbered if isinstance(p.form, Cover)], SKIN_NEARER_MM)


def _coloured(
    front: Scene, whole: Scene, new: int, tones: tuple[Tone, Tone]
) -> Image.Image:
    """Both scenes in their tones, at the size of the page.

    Painted with a palette: three ramps (new, earlier, new behind earlier), their edges, paper.
    """
    owner = whole.rows(whole.owner)
    codes = _levels(whole) + np.where(owner < new, 0, LEVELS).astype(np.uint8)
    codes[owner < 0] = PAPER_CODE
    edge = whole.edges()
    codes[edge] = np.where(whole.nearest()[edge] < new, EDGE_CODE, EDGE_CODE + 1)
    hidden = (front.rows(front.owner) >= 0) & (front.rows(front.owner) != owner)
    if hidden.any():
        codes[hidden] = _levels(front)[hidden] + 2 * LEVELS
        codes[hidden & front.edges()] = EDGE_CODE + 2
    pale = tuple((new_ + 2 * old_) / 3 for new_, old_ in zip(*tones, strict=True))
    ramps = [_ramp(tones[0], 0.42), _ramp(tones[1], 0.16), _ramp(pale, 0.25)]
    lines = np.array([NEW_EDGE, EARLIER_EDGE, HIDDEN_EDGE, PAPER]) * 255
    image = Image.fromarray(codes, "L")
    image.putpalette(np.rint(np.vstack([*ramps, lines])).astype(np.uint8).tobytes())
    return image.convert("RGB").reduce(OVER)


def _levels(scene: Scene) -> Bytes:
    return np.asarray(scene.rows(scene.shade) * (LEVELS - 1) + 0.5, np.uint8)


def _ramp(tone: Sequence[float], depth: float) -> Array:
    """(LEVELS, 3): the tone from its darkest to its full light, 0 to 255."""
    light = 1 - depth + depth * np.linspace(0, 1, LEVELS)
    return np.asarray(light[:, None] * np.array(tone) * 255)


def _frame(new: Sequence[Part], old: Sequence[Part]) -> tuple[Array, Array]:
    """Right and up, lowest and highest: the new parts, and at least a third of the whole."""
    def box(parts: Sequence[Part]) -> tuple[Array, Array]:
        bounds = [_facing(p).bounds for p in parts]
        return (np.min([b[0][:2] for b in bounds], axis=0),
                np.max([b[1][:2] for b in bounds], axis=0))

    inner, outer = box(new), box([*new, *old])
    half = np.maximum((inner[1] - inner[0]) / 2, (outer[1] - outer[0]) / 6)
    middle = (inner[0] + inner[1]) / 2
    return np.maximum(middle - half, outer[0]), np.minimum(middle + half, outer[1])


def _framed(low: Array, high: Array, width_mm: float, height_mm: float) -> Scene:
    """A scene whose picture holds the frame with a margin."""
    wide, tall = (int(round(v * PIXELS_PER_MM)) * OVER for v in (width_mm, height_mm))
    size = np.maximum(high - low, 1e-6)
    scale = (1 - 2 * MARGIN) * min(wide / size[0], tall / size[1])
    return Scene(wide, tall, float(scale), np.append((low + high) / 2, 0.0))


def _labels(
    scene: Scene, parts: Sequence[Part], width_mm: float, height_mm: float
) -> list[tuple[float, float, str]]:
    """Ids in the middle of what is seen of each part, left out where they would collide."""
    placed: list[tuple[float, float, str]] = []
    owners = scene.rows(scene.owner)[::OVER, ::OVER]
    seen = np.flatnonzero(owners >= 0)
    order = np.argsort(owners.ravel()[seen], kind="stable")
    ends = np.searchsorted(owners.ravel()[seen][order], np.arange(len(parts) + 1))
    for owner, part in enumerate(parts):
        mine = seen[order[ends[owner] : ends[owner + 1]]]
        if len(mine) < LEAST_PIXELS:
            continue
        rows, columns = np.divmod(mine, owners.shape[1])
        middle = np.argmin((rows - rows.mean()) ** 2 + (columns - columns.mean()) ** 2)
        half = text_width_mm(part.id, SMALL_PT - 1) / 2 + 0.6
        x = float(columns[middle]) * width_mm / owners.shape[1]
        x = min(max(x, half), width_mm - half)
        y = height_mm * (1 - float(rows[middle]) / owners.shape[0]) - 0.8
        if all(abs(y - q) > 2.8 or abs(x - p) > half + text_width_mm(w, SMALL_PT - 1) / 2 + 0.6
               for p, q, w in placed):
            placed.append((x, y, part.id))
    return placed
