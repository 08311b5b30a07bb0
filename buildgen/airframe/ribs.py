"""Ribs: blanks cut out of the wing's shape, then cut by every member that passes."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass, replace

import numpy as np
from shapely.geometry import Polygon, box

from buildgen.airframe.bays import Bay
from buildgen.airframe.blank import Blank, Cut, apply, lightening, parts_of
from buildgen.airframe.members import Member
from buildgen.airframe.members.spars import SparRun
from buildgen.airframe.shop import Shop
from buildgen.airframe.stations import HALF, Place, places
from buildgen.airframe.surface import WingShape
from buildgen.part import Joint, Part, Plate
from buildgen.problems import DesignError, Problem
from buildgen.solid import Array, Pose

STEP = "Wing: ribs on the spars"
FACE_MM = (0.0, 0.1)
TOUCH_MM = 0.05
END_MM = 0.3
"""A half rib's end is cut square to its sheet, the spar runs past it at an angle."""


@dataclass(frozen=True, eq=False)
class Ribs:
    """Every rib of both halves, their joints, and the starboard ribs of each motor's bay."""

    parts: tuple[Part, ...]
    joints: tuple[Joint, ...]
    of_bay: Mapping[int, tuple[str, ...]]


def make_ribs(
    shop: Shop, wing: WingShape, bays: tuple[Bay, ...], members: tuple[Member, ...],
    extra: Mapping[int, Callable[[Pose], Cut]] | None = None,
) -> Ribs:
    """Every rib of both halves with its joints.

    Args:
        extra: cuts and tabs for the ribs of a bay, by its index (tongues for the mounts).
    """
    parts: list[Part] = []
    joints: list[Joint] = []
    of_bay: dict[int, tuple[str, ...]] = {}
    before: Part | None = None
    number = 0
    for place in places(shop, wing, bays):
        if not place.single:
            number += 1
        id_right = "R0" if place.single else f"R{number}R"
        blank = _blank(shop, place, id_right)
        more = (extra[place.bay.index](blank.pose),) if extra and place.bay else ()
        part = _cut_rib(shop, place, blank, members, more)
        parts.append(part)
        left = None if place.single else part.mirrored(
            f"R{number}L", part.name.replace("right", "left"))
        parts += [left] if left else []
        for member in members:
            joint = member.joint(blank)
            if place.why == HALF:
                joint = _half_joint(joint, member.cut(blank), part)
            joints += _both_sides(joint, member, left)
        joints += _faces(place, part, left, before)
        before = part
        if place.bay:
            of_bay[place.bay.index] = (*of_bay.get(place.bay.index, ()), part.id)
    return Ribs(tuple(parts), tuple(joints), of_bay)


def _half_joint(joint: Joint | None, cut: Cut, part: Part) -> Joint | None:
    """A half rib meets only what lies before the spar; against that it is glued by its end."""
    assert isinstance(part.form, Plate)
    outline = part.form.outline
    if joint is None or not any(outline.distance(hole) < TOUCH_MM for hole in cut.holes):
        return None
    if joint.kind != "strip in notch":
        return joint
    return replace(joint, kind="edge to edge", way=None, facing=(-1.0, 0.0, 0.0),
                   gap_mm=(0.0, joint.gap_mm[1] + END_MM))


def _both_sides(joint: Joint | None, member: Member, left: Part | None) -> list[Joint]:
    """A member's joint with a rib, and the same on the other side."""
    if joint is None:
        return []
    inner = member.parts[-1].id
    if inner == joint.inner and left is None:
        return [joint]
    other = replace(joint, inner=inner, outer=left.id if left else joint.outer)
    return [joint, replace(other, way=joint.way and _mirrored(joint.way))]


def _mirrored(way: tuple[float, float, float]) -> tuple[float, float, float]:
    return way[0], -way[1], way[2]


def _faces(place: Place, part: Part, left: Part | None, before: Part | None) -> list[Joint]:
    """Ribs glued face to face: the two root ribs, and those that meet at a break."""
    if not place.against_inner or left is None:
        return []
    if before is None:
        return [Joint("face to face", part.id, left.id, FACE_MM)]
    other = f"{before.id[:-1]}L"
    return [Joint("face to face", part.id, before.id, FACE_MM),
            Joint("face to face", left.id, other, FACE_MM)]


def _blank(shop: Shop, place: Place, id: str) -> Blank:
    """Outline at both faces; the smaller or the larger as the definition asks."""
    pose = place.panel.plane(place.face_mm, place.normal)
    if place.against_inner:
        start = place.panel.end_plane(False)
        away = -place.thickness_mm * start.rotation[:, 2]
        pose = Pose(start.rotation, start.origin + away)
    inner = Pose(pose.rotation, pose.origin + pose.rotation[:, 2] * place.thickness_mm)
    faces = [place.panel.outline(pose)]
    shifted = Polygon(pose.local(place.panel.ring(inner))[:, :2])
    faces.append(faces[0] if place.single else shifted)
    if shop.definition.wing.ribs.edges == "smaller":
        merged = faces[0].intersection(faces[1])
    else:
        merged = faces[0].union(faces[1])
    outline = max(parts_of(merged), key=lambda p: p.area)
    return Blank(id, pose, place.thickness_mm, outline)


def _cut_rib(
    shop: Shop, place: Place, blank: Blank, members: tuple[Member, ...], more: tuple[Cut, ...]
) -> Part:
    faces = (blank, _other_side(blank)) if place.single else (blank,)
    cuts = [m.cut(face) for m in members for face in faces] + list(more)
    if place.why == HALF:
        cuts.append(_behind_spar(blank, members))
    outline, circles, marks = apply(blank.outline, cuts)
    if place.why != HALF:
        _still_whole(place, outline, blank)
    ribs = shop.definition.wing.ribs
    if ribs.lightening.use:
        line = _mean_line(blank.outline)
        web = ribs.lightening.min_web_mm or shop.web_mm(
            place.material, place.thickness_mm, "wing.ribs.material"
        )
        circles += lightening(outline, circles, line, web, ribs.lightening.min_diameter_mm)
    side = "" if place.single else ", right"
    nominal = _nominal(shop, place)
    key = "power.mount" if place.bay else place.panel.key
    return shop.plate(
        blank.id, f"{place.why}{side}", place.material, nominal, outline, blank.pose, STEP, key,
        circles=circles, grain_deg=0.0, marks=marks,
    )


def _behind_spar(blank: Blank, members: tuple[Member, ...]) -> Cut:
    """All that a half rib leaves out: from the fore face of the first strip spar aft."""
    runs = [m for m in members if isinstance(m, SparRun) and not m.round]
    starts = [h.bounds[0] for m in runs for h in m.cut(blank).holes]
    if not starts:
        raise DesignError(Problem(
            "wing.ribs.half", "Half ribs end at a strip or capped spar; there is none here.",
            'Give [[wing.spar]] kind = "capped" (or "strip"), or half = false.'))
    x0, y0, x1, y1 = blank.outline.bounds
    return Cut(holes=(box(min(starts), y0 - 50, x1 + 50, y1 + 50),))


def _other_side(blank: Blank) -> Blank:
    """A rib on the centre line as the other half meets it."""
    lift = Pose(origin=np.array([0.0, 0.0, blank.thickness_mm]))
    return Blank(blank.id, lift.then(blank.pose).mirrored(2), blank.thickness_mm, blank.outline)


def _nominal(shop: Shop, place: Place) -> float:
    """The thickness as the definition names it, from the measured one."""
    if place.nominal_mm is not None:
        return place.nominal_mm
    ribs, power = shop.definition.wing.ribs, shop.definition.power
    if place.bay and power:
        return power.mount.rib_thickness_mm
    if place.why in ("centre rib", "root rib", "rib at the break"):
        return ribs.root_thickness_mm or ribs.thickness_mm
    return ribs.thickness_mm


def _mean_line(outline: Polygon, count: int = 160) -> Array:
    """Points half way between the surfaces, nose to tail."""
    x0, y0, x1, y1 = outline.bounds
    ring = np.asarray(outline.exterior.coords)[:-1]
    nose, tail = int(ring[:, 0].argmin()), int(ring[:, 0].argmax())
    ring = np.roll(ring, -nose, axis=0)
    tail = (tail - nose) % len(ring)
    one, two = ring[: tail + 1], np.vstack([ring[tail:], ring[:1]])[::-1]
    xs = np.linspace(x0 + 1, x1 - 1, count)
    ys = [np.interp(xs, side[:, 0], side[:, 1]) for side in (one, two)]
    return np.column_stack([xs, (ys[0] + ys[1]) / 2])


def _still_whole(place: Place, outline: Polygon, blank: Blank) -> None:
    """A rib that its members cut to pieces is a fault of the definition."""
    if outline.is_empty or outline.area < 0.5 * blank.outline.area:
        raise DesignError(
            Problem(
                place.panel.key,
                f"The {place.why} {place.face_mm:.0f} mm along this panel is cut in two:"
                f" {outline.area:.0f} of {blank.outline.area:.0f} mm2 are left in one piece.",
                "Make the spars or holes smaller, or move them apart.",
            )
        )
