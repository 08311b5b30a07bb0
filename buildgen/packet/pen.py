"""Drawing in millimetres on a page: one set of line weights, one family of letters."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Sequence
from importlib.resources import as_file, files
from typing import Any, TypeAlias

import numpy as np
from reportlab.lib.colors import Color
from reportlab.lib.units import mm
from reportlab.pdfbase import pdfmetrics
from reportlab.pdfbase.ttfonts import TTFont
from reportlab.platypus import Flowable
from shapely.geometry import MultiPolygon, Polygon

from buildgen.solid import Array

PLAIN, BOLD = "Packet", "Packet-Bold"
INK = Color(0.12, 0.13, 0.15)
SOFT = Color(0.42, 0.44, 0.47)
PALE = Color(0.80, 0.81, 0.83)
WASH = Color(0.955, 0.955, 0.95)
WHITE = Color(1, 1, 1)
ACCENT = Color(0.66, 0.20, 0.10)

HAIR_PT, THIN_PT, LINE_PT, HEAVY_PT = 0.25, 0.5, 0.8, 1.4
SMALL_PT, TEXT_PT = 7.0, 8.5

Point: TypeAlias = tuple[float, float]


def use_letters() -> None:
    """Make the embedded letters known to the PDF library; safe to call again."""
    if PLAIN in pdfmetrics.getRegisteredFontNames():
        return
    folder = files("buildgen.packet") / "fonts"
    for name, file in ((PLAIN, "DejaVuSans.ttf"), (BOLD, "DejaVuSans-Bold.ttf")):
        with as_file(folder / file) as path:
            pdfmetrics.registerFont(TTFont(name, str(path)))
    pdfmetrics.registerFontFamily(PLAIN, normal=PLAIN, bold=BOLD, italic=PLAIN, boldItalic=BOLD)


def text_width_mm(text: str, size_pt: float = SMALL_PT, bold: bool = False) -> float:
    use_letters()
    return float(pdfmetrics.stringWidth(text, BOLD if bold else PLAIN, size_pt) / mm)


def fitted(text: str, width_mm: float, size_pt: float = SMALL_PT) -> str:
    """The text, shortened with an ellipsis where it is wider than the room."""
    if text_width_mm(text, size_pt) <= width_mm:
        return text
    while text and text_width_mm(text + "…", size_pt) > width_mm:
        text = text[:-1]
    return text + "…"


class Pen:
    """Draws on a canvas in mm, y up, from an origin at the lower left of the picture."""

    def __init__(self, canvas: Any, scale: float = 1.0, at: Point = (0.0, 0.0)) -> None:
        """`scale` is millimetres of paper for each millimetre drawn; `at` its origin on paper."""
        self.canvas = canvas
        self.scale = scale
        self.at = at

    def scaled(self, scale: float, at: Point) -> Pen:
        """A pen for model millimetres: origin at `at` of this pen's picture."""
        x, y = self.place(at)
        return Pen(self.canvas, self.scale * scale, (x, y))

    def place(self, point: Sequence[float]) -> Point:
        """From drawn millimetres to millimetres of the picture on paper."""
        return self.at[0] + point[0] * self.scale, self.at[1] + point[1] * self.scale

    def _points(self, points: Iterable[Sequence[float]] | Array) -> Array:
        flat = np.asarray(points if isinstance(points, np.ndarray) else list(points), float)
        return np.asarray((flat * self.scale + self.at) * mm)

    def _trace(self, path: Any, points: Array, closed: bool) -> None:
        path.moveTo(*points[0])
        for x, y in points[1:]:
            path.lineTo(x, y)
        if closed:
            path.close()

    def _style(self, weight_pt: float, ink: Color, dash: Sequence[float]) -> None:
        self.canvas.setLineWidth(weight_pt)
        self.canvas.setStrokeColor(ink)
        self.canvas.setLineJoin(1)
        self.canvas.setLineCap(1)
        self.canvas.setDash(list(dash))

    def line(
        self,
        points: Iterable[Sequence[float]] | Array,
        weight_pt: float = THIN_PT,
        ink: Color = INK,
        dash: Sequence[float] = (),
        closed: bool = False,
    ) -> None:
        """A polyline through points of drawn millimetres."""
        self._style(weight_pt, ink, dash)
        path = self.canvas.beginPath()
        self._trace(path, self._points(points), closed)
        self.canvas.drawPath(path, stroke=1, fill=0)

    def shape(
        self,
        outline: Polygon | MultiPolygon,
        weight_pt: float = THIN_PT,
        ink: Color = INK,
        fill: Color | None = None,
        dash: Sequence[float] = (),
    ) -> None:
        """A polygon with its holes."""
        self._style(weight_pt, ink, dash)
        if fill is not None:
            self.canvas.setFillColor(fill)
        path = self.canvas.beginPath()
        for piece in outline.geoms if isinstance(outline, MultiPolygon) else [outline]:
            for ring in (piece.exterior, *piece.interiors):
                self._trace(path, self._points(np.asarray(ring.coords)[:-1, :2]), closed=True)
        self.canvas.drawPath(path, stroke=int(weight_pt > 0), fill=int(fill is not None),
                             fillMode=0)

    def box(self, low: Point, high: Point, weight_pt: float = THIN_PT, ink: Color = INK,
            fill: Color | None = None, dash: Sequence[float] = ()) -> None:
        corners = [low, (high[0], low[1]), high, (low[0], high[1])]
        self.shape(Polygon(corners), weight_pt, ink, fill, dash)

    def clip(self, low: Point, high: Point) -> None:
        """Draw only inside a rectangle, until the canvas' state is restored."""
        (x0, y0), (x1, y1) = self.place(low), self.place(high)
        path = self.canvas.beginPath()
        path.rect(x0 * mm, y0 * mm, (x1 - x0) * mm, (y1 - y0) * mm)
        self.canvas.clipPath(path, stroke=0, fill=0)

    def disc(self, centre: Point, radius_mm: float, weight_pt: float = THIN_PT, ink: Color = INK,
             fill: Color | None = None) -> None:
        """A circle of a radius on paper, whatever the scale."""
        self._style(weight_pt, ink, ())
        if fill is not None:
            self.canvas.setFillColor(fill)
        x, y = self.place(centre)
        self.canvas.circle(x * mm, y * mm, radius_mm * mm, stroke=int(weight_pt > 0),
                           fill=int(fill is not None))

    def text(
        self,
        at: Sequence[float],
        text: str,
        size_pt: float = SMALL_PT,
        align: str = "left",
        bold: bool = False,
        ink: Color = INK,
        turn_deg: float = 0.0,
        halo: bool = False,
    ) -> None:
        """Letters at a place; `align` is left, middle or right; a halo keeps lines off them."""
        x, y = self.place(at)
        width = text_width_mm(text, size_pt, bold)
        left = -{"left": 0.0, "middle": 0.5, "right": 1.0}[align] * width
        self.canvas.saveState()
        self.canvas.translate(x * mm, y * mm)
        self.canvas.rotate(turn_deg)
        if halo:
            self.canvas.setFillColor(WHITE)
            self.canvas.rect((left - 0.4) * mm, -0.25 * size_pt, (width + 0.8) * mm,
                             1.2 * size_pt, stroke=0, fill=1)
        self.canvas.setFillColor(ink)
        self.canvas.setFont(BOLD if bold else PLAIN, size_pt)
        self.canvas.drawString(left * mm, 0, text)
        self.canvas.restoreState()

    def arrow(self, start: Point, end: Point, weight_pt: float = THIN_PT, ink: Color = INK,
              both: bool = False, head_mm: float = 1.6) -> None:
        """A line with a filled head at its end, or at both."""
        self.line([start, end], weight_pt, ink)
        a, b = np.asarray(start, float), np.asarray(end, float)
        length = float(np.linalg.norm(b - a))
        if length == 0:
            return
        along = (b - a) / length / self.scale
        across = np.array([-along[1], along[0]])
        for tip, way in ((b, along), *(((a, -along),) if both else ())):
            back = tip - way * head_mm
            side = across * head_mm * 0.28
            self.shape(Polygon([tip, back + side, back - side]), 0, ink, ink)


class Picture(Flowable):  # type: ignore[misc]
    """A drawing of a fixed size in the run of the page; `paint` gets a pen in mm of paper."""

    def __init__(self, width_mm: float, height_mm: float, paint: Callable[[Pen], None]) -> None:
        super().__init__()
        self.width, self.height = width_mm * mm, height_mm * mm
        self.paint = paint

    def wrap(self, *_: float) -> tuple[float, float]:
        return self.width, self.height

    def draw(self) -> None:
        self.paint(Pen(self.canv))
