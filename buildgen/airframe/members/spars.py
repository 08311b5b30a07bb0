"""Spars: round tubes and rods, and square strips in notches."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass, field, replace
from functools import cached_property

import numpy as np
from shapely.geometry import Point

from buildgen.airframe.bays import Bay
from buildgen.airframe.blank import Bar, Blank, Cut, bar_cut
from buildgen.airframe.shop import Shop
from buildgen.airframe.surface import AFT, Panel, WingShape
from buildgen.design.schema import Spar
from buildgen.part import Joint, Part
from buildgen.problems import DesignError, Problem
from buildgen.solid import Array, Placed, Pose, Rod, Shape, prism_between

STEP = "Wing: ribs on the spars"
END_PLAY_MM = 0.2
GLUE_GAP_MM = 0.1
"""A gap that a drop of thin glue still bridges; common practice, no source."""
UNDER_MM = 0.1
"""Between a straight stick and the sheet over it, filled with glue."""
UPRIGHT_STEPS = 4
"""Each leaves a twentieth of what a strip is out of line at 3 degrees of twist."""
SURFACE_MM = 0.1
"""A strip that lies under the surface must follow it this closely."""
ONE_PIECE_MM = 3.0
"""Halves of a spar that differ by less at root and tip are made in one straight piece."""


@dataclass(frozen=True, eq=False)
class SparRun:
    """A spar within one run of panels without a break, straight from a to b, starboard."""

    shop: Shop
    number: int
    spar: Spar
    run: tuple[Panel, ...]
    a: Array
    b: Array
    through: bool
    """It runs through to the other side in one piece."""
    piece: int
    cap: str = ""
    """"t" or "b" for the sticks of a capped spar."""
    meet: Array = field(default_factory=lambda: np.zeros(3))
    """Where its axis meets the plane of the break inboard of it; its tube ends short of it."""

    @property
    def key(self) -> str:
        return f"wing.spar[{self.number}]"

    @property
    def round(self) -> bool:
        return self.spar.kind != "strip"

    @property
    def letter(self) -> str:
        return f"{self.number}{'abcdefgh'[self.piece]}{self.cap}"

    @cached_property
    def bar(self) -> Bar:
        """As the ribs see it: they cut past its ends, so that it can be slid in."""
        up = self.run[0].up
        if self.round:
            return Bar(self.a, self.b, AFT, up, radius_mm=(self.spar.outer_mm or 0.0) / 2)
        along = (self.b - self.a) / np.linalg.norm(self.b - self.a)
        side = np.cross(along, up) / np.linalg.norm(np.cross(along, up))
        return Bar(self.a, self.b, side, np.cross(side, along), self._section)

    @property
    def _section(self) -> Array:
        """Corners of a strip; a notch opens to the surface the strip lies under."""
        w, h = (self.spar.width_mm or 0.0) / 2, (self.spar.height_mm or 0.0) / 2
        out = 3 * h
        high = out if self.spar.place == "top" else h
        low = -out if self.spar.place == "bottom" else -h
        return np.array([[-w, low], [w, low], [w, high], [-w, high]])

    @property
    def size(self) -> str:
        """What to ask for at the counter."""
        if self.spar.kind == "tube" and self.spar.inner_mm:
            return f"{self.spar.outer_mm:g} x {self.spar.inner_mm:g} tube"
        if self.round:
            return f"{self.spar.outer_mm:g} rod"
        return f"{self.spar.height_mm:g} x {self.spar.width_mm:g}"

    def _shape(self, start: Array, end: Array) -> Shape:
        if self.round:
            pose = Pose.at(start, end - start, AFT)
            radius = (self.spar.outer_mm or 0.0) / 2
            return Placed(
                Rod(radius, float(np.linalg.norm(end - start)), self.spar.inner_mm / 2), pose
            )
        w, h = (self.spar.width_mm or 0.0) / 2, (self.spar.height_mm or 0.0) / 2
        corners = np.array([[-w, -h], [w, -h], [w, h], [-w, h]])
        return prism_between(corners, start, end, self.run[0].up)

    @cached_property
    def parts(self) -> tuple[Part, ...]:
        name = f"spar {self.number}, {self.spar.place}" if not self.round else f"spar {self.number}"
        length = float(np.linalg.norm(self.b - self.a))
        if self.through:
            both = self._shape(self.b * (1, -1, 1), self.b)
            return (self._stick(f"S{self.letter}", name + ", in one piece", both, 2 * length),)
        right = self._stick(
            f"SR{self.letter}", name + ", right", self._shape(self.a, self.b), length
        )
        return right, right.mirrored(f"SL{self.letter}", name + ", left")

    def _stick(self, id: str, name: str, shape: Shape, length: float) -> Part:
        return self.shop.stick(
            id, name, self.spar.material, self.size, shape, length, STEP, self.key
        )

    def cut(self, blank: Blank) -> Cut:
        play = self.shop.slip_mm if self.round else self.shop.press_mm
        return bar_cut(self.bar, blank, play)

    def joint(self, blank: Blank) -> Joint | None:
        cut = self.cut(blank)
        if not (cut.holes or cut.circles) or self._held_mm(blank) < blank.thickness_mm / 2:
            return None
        closed = self.round or self.spar.place == "middle"
        kind = "spar in hole" if closed else "strip in notch"
        way = self.run[0].up * (1 if self.spar.place == "bottom" else -1)
        play = self.shop.slip_mm if self.round else self.shop.press_mm
        way = self.bar.axis if closed else way
        return Joint(kind, self.parts[0].id, blank.id, (0.0, play + self._lean_mm(blank)),
                     vector(way))

    def _lean_mm(self, blank: Blank) -> float:
        """What the axis wanders through the plate, and some glue: the hole is that much wider."""
        axis = blank.pose.rotation.T @ self.bar.axis
        wander = blank.thickness_mm * float(np.hypot(axis[0], axis[1])) / abs(float(axis[2]))
        return wander + GLUE_GAP_MM

    def _held_mm(self, blank: Blank) -> float:
        """How deep it stands in the plate: ends of swept halves hardly do on the centre line."""
        start = self.b * (1, -1, 1) if self.through else self.a
        low, high = sorted(float(blank.pose.local(p)[2]) for p in (start, self.b))
        return min(high, blank.thickness_mm) - max(low, 0.0)

    @property
    def joints(self) -> tuple[Joint, ...]:
        return ()


def cap_face(
    cap: SparRun, fore: bool, shift: float, top: bool
) -> tuple[Array, Array]:
    """A line along the fore or aft face of a cap: a point of it, and its direction outboard.

    Args:
        shift: up from the cap's inner face towards its outer one, as a share of its height,
            counted upwards for the bottom cap and downwards for the top one.
        top: the cap under the upper surface.
    """
    bar, spar, up = cap.bar, cap.spar, cap.run[0].up
    aft = np.cross(bar.axis, up)
    aft = aft if aft[0] > 0 else -aft
    height = spar.height_mm or 0.0
    level = (-0.5 - shift if top else 0.5 - shift) * height
    side = (-1 if fore else 1) * aft
    return bar.start + side * (spar.width_mm or 0.0) / 2 + up * level, bar.axis


def vector(way: Array) -> tuple[float, float, float]:
    """As a joint wants its way."""
    x, y, z = (float(v) for v in way)
    return x, y, z


def pieces(shop: Shop, wing: WingShape) -> Iterable[tuple[Spar, list[SparRun]]]:
    """Every spar of the definition with its pieces, split at dihedral breaks."""
    for number, spar in enumerate(shop.definition.wing.spar, start=1):
        _check(spar, number, shop)
        for stick, cap in sticks(spar):
            found: list[SparRun] = []
            for i, run in enumerate(wing.runs):
                before = found[-1] if found else None
                piece = _piece(shop, wing, stick, number, run, i, before)
                if piece is not None:
                    found.append(replace(piece, cap=cap))
            yield stick, found


def sticks(spar: Spar) -> Iterable[tuple[Spar, str]]:
    """The spar itself, or the two caps of a capped one."""
    if spar.kind != "capped":
        yield spar, ""
        return
    for place, cap in (("top", "t"), ("bottom", "b")):
        yield spar.model_copy(update={"kind": "strip", "place": place}), cap


def make(shop: Shop, wing: WingShape, bays: tuple[Bay, ...]) -> Iterable[SparRun]:
    """Every piece of every spar."""
    for _, found in pieces(shop, wing):
        yield from found


def _check(spar: Spar, number: int, shop: Shop) -> None:
    key = f"wing.spar[{number}]"
    shop.material(spar.material, f"{key}.material")
    flat = spar.kind in ("strip", "capped")
    wanted = ("width_mm", "height_mm") if flat else ("outer_mm",)
    missing = [
        Problem(f"{key}.{name}", "is missing.", f"A {spar.kind} needs {' and '.join(wanted)}.")
        for name in wanted
        if getattr(spar, name) is None
    ]
    if not flat and spar.outer_mm and spar.inner_mm >= spar.outer_mm:
        missing.append(
            Problem(f"{key}.inner_mm", f"{spar.inner_mm:g} is not below the outside"
                    f" diameter {spar.outer_mm:g}.", "Give the bore of the tube.")
        )
    if missing:
        raise DesignError(*missing)


def _piece(
    shop: Shop, wing: WingShape, spar: Spar, number: int, run: tuple[Panel, ...], index: int,
    before: SparRun | None,
) -> SparRun | None:
    start, end = run[0].start_mm, run[-1].start_mm + run[-1].length_mm
    low, high = max(start, spar.from_mm), min(end, spar.to_mm or wing.half_span_mm)
    if high - low < 1.0:
        return None
    under = _sheet_over(shop, spar)
    a, b = (_place(wing, spar, s, run, under) for s in (low, high))
    if under and spar.place != "middle":
        under += UNDER_MM
        shares = np.linspace(0.0, 1.0, 9)
        line = [_place(wing, spar, low + k * (high - low), run, under) for k in shares]
        inwards = -run[0].up if spar.place == "top" else run[0].up
        proud = max(float((p - a - k * (b - a)) @ inwards)
                    for k, p in zip(shares, line, strict=True))
        a, b = a + proud * inwards, b + proud * inwards
    most = ONE_PIECE_MM if spar.place == "middle" else SURFACE_MM
    through = index == 0 and low == 0 and wing.flat_centre and _in_line(a, b, most)
    if through:
        a, b = _straightened(a, b)
    if before is not None and before.through and before.round:
        # The piece in the middle was straightened: this one goes on where it really ends.
        a = _onto(before.b, before.bar.axis, run[0].end_plane(False))
    way = (b - a) / np.linalg.norm(b - a)
    if low == start and not through:
        a = _onto(a, way, run[0].end_plane(False))
    if high == end:
        b = _onto(b, way, run[-1].end_plane(True))
    short_a = 0.0 if through or low > start else _setback(spar, run[0].inner_normal, way)
    last = run[-1].index == len(wing.panels) - 1
    open_end = last and shop.definition.wing.tip.kind == "rib"
    short_b = 0.0 if open_end or high < end else _setback(spar, run[-1].outer_normal, way)
    piece = SparRun(
        shop, number, spar, run, a + short_a * way, b - short_b * way, through, index, meet=a
    )
    _stays_inside(piece, wing, low, high, under)
    return piece


def _sheet_over(shop: Shop, spar: Spar) -> float:
    """Thickness of the sheeting or capstrips that a spar lies under; 0 where there are none."""
    wing = shop.definition.wing
    given = wing.sheeting
    if given is None:
        return 0.0
    back = given.to_chord if given.to_chord is not None else wing.spar[0].at_chord
    over = given.capstrip_mm > 0 or (given.nose and spar.at_chord <= back)
    return shop.thickness(given.material, given.thickness_mm) if over else 0.0


def _in_line(a: Array, b: Array, most_mm: float) -> bool:
    """Both halves nearly in one straight line through the middle."""
    return bool(np.abs((a - b)[[0, 2]]).max() < most_mm)


def _straightened(a: Array, b: Array) -> tuple[Array, Array]:
    """The ends of a spar in one piece: square to the middle, half way between its two ends."""
    x, _, z = (a + b) / 2
    return np.array([x, a[1], z]), np.array([x, b[1], z])


def _onto(point: Array, way: Array, plane: Pose) -> Array:
    """The point slid along the spar into a plane."""
    normal = plane.rotation[:, 2]
    return np.asarray(point + way * float((plane.origin - point) @ normal) / float(way @ normal))


def _setback(spar: Spar, normal: Array, way: Array) -> float:
    """How far a square-ended spar stops short of a leaning plane, so that two of them meet."""
    lean = float(np.arccos(np.clip(abs(normal @ way), 0.0, 1.0)))
    half = max(spar.outer_mm or 0.0, spar.height_mm or 0.0, spar.width_mm or 0.0) / 2
    return half * float(np.tan(lean)) + END_PLAY_MM


def _place(
    wing: WingShape, spar: Spar, span: float, run: tuple[Panel, ...], under_mm: float
) -> Array:
    """The spar's axis at a distance along the span, under sheeting of this thickness."""
    share = span / wing.half_span_mm
    tip = spar.at_chord if spar.at_tip_chord is None else spar.at_tip_chord
    fraction = spar.at_chord * (1 - share) + tip * share
    panel = next(p for p in run if span <= p.start_mm + p.length_mm + 1e-9)
    s = span - panel.start_mm
    point = panel.point(s, fraction, spar.place)
    if spar.place == "middle":
        return point
    # Right above and below the middle, so that the faces of two caps are in line for a web.
    middle = panel.point(s, fraction, "middle")
    for _ in range(UPRIGHT_STEPS):
        fraction += float((middle - point) @ AFT) / panel.chord(s)
        point = panel.point(s, fraction, spar.place)
    if under_mm and spar.width_mm:
        # Flat under a curved sheet: its corners decide, not its middle.
        beside = spar.width_mm / 2 / panel.chord(s)
        inwards = -panel.up if spar.place == "top" else panel.up
        corners = [panel.point(s, fraction + k * beside, spar.place) for k in (-1, 1)]
        point = point + inwards * max(0.0, *(float((c - point) @ inwards) for c in corners))
    depth = (spar.height_mm or spar.outer_mm or 0.0) / 2
    if spar.kind != "strip":
        depth += 2.0
    depth += under_mm
    return point - depth * panel.up * (1 if spar.place == "top" else -1)


def _stays_inside(
    piece: SparRun, wing: WingShape, low: float, high: float, under_mm: float
) -> None:
    """Depth check at stations along the spar: it must lie in the section, under any sheet."""
    spar = piece.spar
    size = spar.outer_mm if piece.round else spar.height_mm
    for share in np.linspace(0.0, 1.0, 9):
        span = low + float(share) * (high - low)
        panel = next(p for p in piece.run if span <= p.start_mm + p.length_mm + 1e-9)
        pose = panel.plane(span - panel.start_mm)
        outline = panel.outline(pose)
        spot = pose.local(piece.a + share * (piece.b - piece.a))[:2]
        ring = Point(*spot).buffer((size or 0.0) / 2 + under_mm) if piece.round else Point(*spot)
        if not outline.contains(ring):
            raise DesignError(
                Problem(
                    f"{piece.key}.at_chord",
                    f"At {span:.0f} mm from the centre the {spar.kind} of {size:g} mm"
                    f" does not lie inside the section{' and its sheeting' * bool(under_mm)}.",
                    "Move it towards the thickest point, make it thinner or end it with to_mm.",
                )
            )
