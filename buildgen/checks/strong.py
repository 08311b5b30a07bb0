"""Do the wing's spars carry the load factor that is asked for, as they are built?"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np

from buildgen.airframe.members.joiners import make as make_joiners
from buildgen.airframe.members.spars import SparRun, pieces
from buildgen.checks.desk import Check, Desk, verdict
from buildgen.shelf import Material
from buildgen.strength.beam import deflection_mm, from_tip, point_loads, schrenk_n_mm
from buildgen.strength.section import Piece, rectangle_mm, stiffness_n_mm2, stress_mpa, tube_mm

STATIONS = 61
GRAVITY = 9.80665
WOOD_LEFT = 0.68
"""Share of the mean strength that wood is trusted with: two standard deviations of the modulus of
rupture (16 %) below it; Wood Handbook (Forest Products Laboratory), from memory."""
LAMINATE_LEFT = 0.5
"""The same for pultruded tubes and rods: joints, notches, moisture; common practice, no source."""
METAL_LEFT = 0.9
MOST_TIP = 0.12
"""Tip deflection over the semispan at the limit load; common practice, no source."""
BASIS = ("Schrenk span load (NACA TM 948) less the wing's own parts, spars as built bending"
         " together, skins not counted; strength of the shelf with {knock}")


@dataclass(frozen=True, eq=False)
class Station:
    """The spars at one place of the span: groups that bend alone, joined only by the ribs."""

    groups: tuple[tuple[Piece, ...], ...]

    @property
    def stiffness(self) -> float:
        """E I of all groups side by side [N mm2]."""
        return sum(stiffness_n_mm2(g)[0] for g in self.groups)

    def worst(self, moment_n_mm: float) -> tuple[float, str]:
        """Least strength over stress, and of what."""
        total = self.stiffness
        found = []
        for group in self.groups:
            share = stiffness_n_mm2(group)[0] / total
            for piece, stress in zip(group, stress_mpa(group, moment_n_mm * share), strict=True):
                found.append((piece.strength_mpa / max(stress, 1e-9), piece.name))
        return min(found)


def spars(desk: Desk) -> Iterator[Check]:
    """Stress in the spars at the limit load factor, and how far the tip bends."""
    y, moment = bending(desk)
    found = [station(desk, float(s)) for s in y[:-1]]
    if not all(s.groups for s in found[: int(0.9 * len(found))]):
        yield Check("spar-stress", "Spars run to the tip", "warn", None, None, "",
                    "spars of the definition", "No spar reaches the tip: the sheeting alone"
                    " would carry it there, which is not computed.")
    margins = [(*s.worst(float(m)), float(at)) for s, m, at in zip(found, moment, y, strict=False)
               if s.groups and m > 0]
    if not margins:
        return
    least, name, at = min(margins)
    loads = desk.definition.loads
    good = least >= loads.safety
    yield Check(
        "spar-stress", f"Strength over stress in the spars at {loads.limit:g} g",
        verdict(good), least, loads.safety, "", BASIS.format(knock=_knocks()),
        "" if good else f"{name} at {at:.0f} mm from the middle is the weakest: take a larger"
        f" or stronger one, or state a lower loads.limit.",
    )
    last = next((n for n, s in enumerate(found) if not s.groups), len(found))
    rigid = np.array([s.stiffness for s in found[:last]])
    tip = float(deflection_mm(y[:last], moment[:last], rigid)[-1]) / float(y[-1])
    bends = tip <= MOST_TIP
    yield Check(
        "tip-deflection", f"Tip deflection over the semispan at {loads.limit:g} g",
        verdict(bends, True), tip, MOST_TIP, "",
        "M/(E I) integrated twice from the root; limit: common practice, no source",
        "" if bends else "The wing bends much: take stiffer spars, or put more of their material"
        " near the surfaces.",
    )


def bending(desk: Desk) -> tuple[np.ndarray, np.ndarray]:
    """Stations [mm] from the middle to the tip and the bending moment there at the limit load."""
    wing, loads = desk.frame.wing, desk.definition.loads
    semispan = desk.balance.span_mm / 2
    y = semispan * np.sin(np.linspace(0, np.pi / 2, STATIONS))
    rises = np.cumsum([0.0, *(p.rise_mm[0] for p in wing.plan)])
    chords = [wing.panels[0].root.chord_mm, *(p.tip.chord_mm for p in wing.panels)]
    chord = np.interp(y, rises, chords)
    lift = loads.limit * desk.balance.mass_g * 1e-3 * GRAVITY / 2
    _, up = from_tip(y, schrenk_n_mm(y, chord, semispan, lift))
    own = [p for p in desk.kit.parts if p.centroid_mm[1] > 1.0]
    force = [p.mass_g * 1e-3 * GRAVITY * loads.limit for p in own]
    _, down = point_loads(y, [float(p.centroid_mm[1]) for p in own], force)
    return y, up - down


def station(desk: Desk, y_mm: float) -> Station:
    """The spars that pass a place of the span."""
    groups: dict[int, list[Piece]] = {}
    for number, (_, runs) in enumerate(pieces(desk.frame.shop, desk.frame.wing)):
        for run in runs:
            low, high = (0.0 if run.through else float(run.a[1])), float(run.b[1])
            if not low - 2.0 <= y_mm <= high + 2.0:
                continue
            # The two caps of one spar are joined by their webs and bend as one.
            group = run.number if run.cap else -1 - number
            groups.setdefault(group, []).append(_piece(desk, run, y_mm))
    return Station(tuple(tuple(g) for g in groups.values()))


def joiners(desk: Desk) -> Iterator[Check]:
    """Wires in the bores at the breaks: they carry what their tubes carry."""
    shop, loads = desk.frame.shop, desk.definition.loads
    y, moment = bending(desk)
    found = []
    for joint in make_joiners(shop, desk.frame.wing, desk.frame.drive.bays):
        at = float(joint.outer.meet[1])
        spars_here = station(desk, at + 1.0)
        own = [g for g in spars_here.groups if g[0].name == f"spar {joint.outer.number}"]
        if not own:
            continue
        share = stiffness_n_mm2(own[0])[0] / spars_here.stiffness
        _, second = tube_mm(2 * joint.radius_mm)
        wire = shop.material(joint.outer.spar.joiner_material, joint.outer.key)
        stress = float(np.interp(at, y, moment)) * share * joint.radius_mm / second
        found.append((allowed_mpa(wire, False) / max(stress, 1e-9), at, joint.outer.number))
    if not found:
        return
    least, at, number = min(found)
    good = least >= loads.safety
    yield Check(
        "joiner-stress", f"Strength over stress in the joiners at {loads.limit:g} g",
        verdict(good), least, loads.safety, "",
        f"bending of the wire alone by its spar's share of the moment; {METAL_LEFT:g} of the"
        " wire's strength",
        "" if good else f"The joiner of spar {number} at {at:.0f} mm from the middle is the"
        " weakest: take a tube with a wider bore, or a stronger joiner_material.",
    )


def _piece(desk: Desk, run: SparRun, y_mm: float) -> Piece:
    spar = run.spar
    material = desk.frame.shop.material(spar.material, run.key)
    share = (y_mm - float(run.a[1])) / float(run.b[1] - run.a[1])
    at = float((run.a + np.clip(share, 0, 1) * (run.b - run.a)) @ run.run[0].up)
    if run.round:
        area, own = tube_mm(spar.outer_mm or 0.0, spar.inner_mm)
        half = (spar.outer_mm or 0.0) / 2
    else:
        area, own = rectangle_mm(spar.width_mm or 0.0, spar.height_mm or 0.0)
        half = (spar.height_mm or 0.0) / 2
    return Piece(area, own, at, half, material.modulus_mpa or 1.0, allowed_mpa(material,
                 bool(run.cap)), f"spar {run.number}")


def allowed_mpa(material: Material, squeezed: bool) -> float:
    """Strength to count on: caps of wood fail in compression first."""
    if material.kind == "wire" or material.yield_mpa:
        return METAL_LEFT * (material.yield_mpa or material.tension_mpa or 0.0)
    wood = bool(material.compression_mpa)
    strength = material.compression_mpa if wood and squeezed else material.bending_mpa
    return (WOOD_LEFT if wood else LAMINATE_LEFT) * (strength or 0.0)


def _knocks() -> str:
    return f"{WOOD_LEFT:g} of it for wood, {LAMINATE_LEFT:g} for laminates"
