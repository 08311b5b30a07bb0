"""A section as a coordinate file, a drawing or a picture; text first, disk last."""

from __future__ import annotations

import io
import math
import re
from collections.abc import Callable
from pathlib import Path
from xml.sax.saxutils import escape

import numpy as np

from buildgen.problems import DesignError, Problem
from buildgen.section.curve import Array, Section
from buildgen.section.figures import figures

PICTURE = (1400, 560)
MARGIN = 70
ROWS = 101
"""Points a side in a coordinate file."""
DRAWN = 201
"""Points a side in a drawing: within 0.01 mm at 300 mm of chord."""
MERGED_MM = 0.001
LAYER = "CUT_OUTSIDE"
NO_TITLE = re.compile(r"#.*|[\d\s.,;+-]*")
"""Names that a reader would take for a remark or for a point."""


def as_dat(section: Section, chord_mm: float) -> bytes:
    """Title line, then x y in unit chord from the upper edge round the nose."""
    title = section.name
    if NO_TITLE.fullmatch(title):
        title = f"section {title}"
    rows = [f" {x:10.7f} {y:10.7f}" for x, y in section.contour(ROWS)]
    return "\n".join([title, *rows, ""]).encode()


def as_csv(section: Section, chord_mm: float) -> bytes:
    """Name and source as remarks, then x,y in unit chord from the upper edge round the nose."""
    rows = [f"{x:.7f},{y:.7f}" for x, y in section.contour(ROWS)]
    head = [f"# name: {section.name}", f"# designer / publication: {section.source}", "x,y"]
    return "\n".join([*head, *rows, ""]).encode()


def _ring_mm(section: Section, chord_mm: float) -> Array:
    """The outline in millimetres, its first point not repeated at the end."""
    points = section.contour(DRAWN) * chord_mm
    return points[:-1] if np.hypot(*(points[0] - points[-1])) < MERGED_MM else points


def as_svg(section: Section, chord_mm: float) -> bytes:
    """A closed path, true size in millimetres."""
    points = _ring_mm(section, chord_mm)
    low, high = points.min(axis=0) - 5, points.max(axis=0) + 5
    width, height = high - low
    path = " L ".join(f"{x:.3f} {-y:.3f}" for x, y in points)
    return (
        f'<svg xmlns="http://www.w3.org/2000/svg" width="{width:.3f}mm" height="{height:.3f}mm"'
        f' viewBox="{low[0]:.3f} {-high[1]:.3f} {width:.3f} {height:.3f}">\n'
        f"<title>{escape(section.name)}, chord {chord_mm:g} mm</title>\n"
        f'<path d="M {path} Z" fill="none" stroke="black" stroke-width="0.2"/>\n</svg>\n'
    ).encode()


def as_dxf(section: Section, chord_mm: float) -> bytes:
    """A closed polyline in millimetres on the layer of outside cuts."""
    import ezdxf

    keep = ezdxf.options.write_fixed_meta_data_for_testing
    ezdxf.options.write_fixed_meta_data_for_testing = True
    try:
        drawing = ezdxf.new("R2010", units=4)
        drawing.layers.add(LAYER)
        drawing.modelspace().add_lwpolyline(
            _ring_mm(section, chord_mm).tolist(), close=True, dxfattribs={"layer": LAYER})
        stream = io.StringIO()
        drawing.write(stream)
        return stream.getvalue().encode()
    finally:
        ezdxf.options.write_fixed_meta_data_for_testing = keep


def as_png(section: Section, chord_mm: float) -> bytes:
    """Outline, mean line and a light grid of tenths of the chord, with the figures below."""
    from PIL import Image, ImageDraw, ImageFont

    scale = 3
    size = (PICTURE[0] * scale, PICTURE[1] * scale)
    image = Image.new("RGB", size, "white")
    draw = ImageDraw.Draw(image)
    unit = (PICTURE[0] - 2 * MARGIN) * scale
    points = section.contour(301)
    middle = (points[:, 1].max() + points[:, 1].min()) / 2

    def at(x: float, y: float) -> tuple[float, float]:
        return MARGIN * scale + x * unit, size[1] * 0.45 - (y - middle) * unit

    font = ImageFont.load_default(15 * scale)
    for tenth in range(11):
        x, top = at(tenth / 10, middle + 0.155)
        bottom = at(tenth / 10, middle - 0.155)[1]
        draw.line([(x, top), (x, bottom)], fill="#dddddd", width=scale)
        draw.text((x, bottom + 4 * scale), f"{tenth * 10}", fill="#777777", font=font, anchor="ma")
    draw.line([at(0, 0), at(1, 0)], fill="#bbbbbb", width=scale)
    half = (len(points) - 1) // 2
    mean = (points[half::-1] + points[half:]) / 2
    draw.line([at(x, y) for x, y in mean], fill="#999999", width=scale)
    draw.line([at(x, y) for x, y in np.vstack([points, points[:1]])], fill="black",
              width=2 * scale, joint="curve")
    f = figures(section)
    text = (f"{section.name}    thickness {100 * f.thickness:.2f} % at {100 * f.thickness_at:.0f}"
            f"    camber {100 * f.camber:.2f} % at {100 * f.camber_at:.0f}"
            f"    nose radius {100 * f.nose_radius:.2f} %")
    draw.text((MARGIN * scale, size[1] - 50 * scale), text, fill="black", font=font)
    image = image.resize(PICTURE, Image.Resampling.LANCZOS)
    stream = io.BytesIO()
    image.save(stream, "PNG")
    return stream.getvalue()


WRITERS: dict[str, Callable[[Section, float], bytes]] = {
    ".dat": as_dat, ".csv": as_csv, ".svg": as_svg, ".png": as_png, ".dxf": as_dxf,
}


def write(section: Section, path: Path | str, chord_mm: float = 200.0) -> None:
    """Write by the file's ending: .dat, .csv, .svg, .png or .dxf.

    Args:
        section: what to write.
        path: the file; its folder exists.
        chord_mm: size of a drawing, above 0; coordinates and pictures are in unit chord.

    Raises:
        DesignError: another ending, no chord, or the file cannot be written.
    """
    path = Path(path)
    maker = WRITERS.get(path.suffix.lower())
    if maker is None:
        raise DesignError(
            Problem("", f'"{path.suffix or path.name}" is no ending for a section.',
                    f"Allowed: {', '.join(WRITERS)}.", path.name)
        )
    if not 0 < chord_mm < math.inf:
        raise DesignError(Problem("", f"{chord_mm:g} mm is no chord.", "Give a length above 0."))
    data = maker(section, chord_mm)
    try:
        path.write_bytes(data)
    except OSError as error:
        raise DesignError(
            Problem("", "The file cannot be written.", f"{error.strerror}.", str(path))
        ) from None
