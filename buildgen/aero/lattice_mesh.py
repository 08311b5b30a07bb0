"""Lifting surfaces cut into strips and panels for a vortex lattice.

The mesh lies on the flat chords: twist, incidence, camber and flaps turn the normals only, which
keeps the flow linear in all of them (the usual small-angle lattice).
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass

import numpy as np

from buildgen.aero.bounds import Floats, Whole
from buildgen.aero.lattice_surface import Surface
from buildgen.problems import DesignError, Problem


@dataclass(frozen=True, slots=True)
class Mesh:
    """A lattice of n panels in m strips, both sides of mirrored surfaces.

    Attributes:
        port_mm: (n, 3), port end of each bound vortex (of a fin, its lower end).
        starboard_mm: (n, 3), the other end.
        control_mm: (n, 3), where the flow must be along the surface.
        lean: (n, 3), unit normal of the flat chord surface.
        slope_rad: (n,), local angle of the surface, nose up positive: twist less camber.
        tail_mm: (n, 2), x of the trailing edge at both ends.
        strip: (n,), the strip of each panel.
        strip_chord_mm: (m,).
        strip_middle_mm: (m, 3), at the control station, on the quarter chord.
        strip_ends_mm: (m, 2, 3), both ends of each strip on the quarter chord.
        strip_surface: (m,), number of the strip's surface.
        names: of the surfaces.
        flaps: for each flap's name, (n,): share of the panel that it turns, signed.
    """

    port_mm: Floats
    starboard_mm: Floats
    control_mm: Floats
    lean: Floats
    slope_rad: Floats
    tail_mm: Floats
    strip: Whole
    strip_chord_mm: Floats
    strip_middle_mm: Floats
    strip_ends_mm: Floats
    strip_surface: Whole
    names: tuple[str, ...]
    flaps: dict[str, Floats]


def mesh_of(surfaces: Sequence[Surface]) -> Mesh:
    """Cut surfaces into panels.

    Raises:
        DesignError: no surface is given, or two have one name.
    """
    names = tuple(surface.name for surface in surfaces)
    if not names or len(set(names)) < len(names):
        raise DesignError(Problem("surfaces", "must be one or more, each with its own name."))
    flap_names = sorted({flap.name for surface in surfaces for flap in surface.flaps})
    pieces: list[dict[str, Floats]] = []
    owner: list[int] = []
    for number, surface in enumerate(surfaces):
        half = _half(surface, flap_names)
        pieces.append(half)
        if surface.mirrored:
            pieces.append(_mirror(half, surface, flap_names))
        owner += [number] * (len(pieces) - len(owner))
    sizes = [len(piece["strip_chord_mm"]) for piece in pieces]
    whole = {key: np.concatenate([piece[key] for piece in pieces]) for key in pieces[0]}
    chordwise = np.repeat([surfaces[k].chordwise for k in owner], sizes)
    return Mesh(
        **{key: value for key, value in whole.items() if not key.startswith("flap ")},
        strip=np.repeat(np.arange(sum(sizes)), chordwise),
        strip_surface=np.repeat(owner, sizes),
        names=names,
        flaps={name: whole[f"flap {name}"] for name in flap_names},
    )


def _half(surface: Surface, flap_names: Sequence[str]) -> dict[str, Floats]:
    """Arrays of the mesh for the side that the stations draw."""
    edges, middles = _cuts(surface)
    corner, chord, _ = _chords(surface, edges)
    nose, middle_chord, piece = _chords(surface, middles)
    n, step = surface.chordwise, np.arange(surface.chordwise) / surface.chordwise
    aft = step + 0.25 / n
    bound = corner[:, None] + np.einsum("k,s,i->ski", aft, chord, [1.0, 0, 0])
    control = nose[:, None] + np.einsum("k,s,i->ski", aft + 0.5 / n, middle_chord, [1.0, 0, 0])
    across = np.diff(corner, axis=0) * [0, 1, 1]
    lean = np.cross([1.0, 0, 0], across / np.linalg.norm(across, axis=1, keepdims=True))
    quarter = corner + np.outer(0.25 * chord, [1.0, 0, 0])
    tail = corner[:, 0] + chord
    arrays = {
        "port_mm": bound[:-1].reshape(-1, 3),
        "starboard_mm": bound[1:].reshape(-1, 3),
        "control_mm": control.reshape(-1, 3),
        "lean": np.repeat(lean, n, axis=0),
        "slope_rad": _slopes(surface, middles, piece, aft + 0.5 / n).ravel(),
        "tail_mm": np.repeat(np.stack([tail[:-1], tail[1:]], axis=1), n, axis=0),
        "strip_chord_mm": middle_chord,
        "strip_middle_mm": nose + np.outer(0.25 * middle_chord, [1.0, 0, 0]),
        "strip_ends_mm": np.stack([quarter[:-1], quarter[1:]], axis=1),
    }
    for name in flap_names:
        arrays[f"flap {name}"] = _turned(surface, name, middles, step).ravel()
    return arrays


def _cuts(surface: Surface) -> tuple[Floats, Floats]:
    """Ends (s + 1,) and control stations (s,) of the strips, along the surface.

    Even steps of an angle between all breaks: strips close up towards the tip of a mirrored
    surface and towards both ends of any other.
    """
    along = surface.along_mm
    total = along[-1]
    ends = [end for flap in surface.flaps for end in (flap.inner_mm, flap.outer_mm)]
    breaks = np.unique(np.clip(np.concatenate((along, ends)) / total, 0.0, 1.0))
    breaks = breaks[np.concatenate(([True], np.diff(breaks) > 1e-9))]
    breaks[-1] = 1.0
    to_steps, to_share = _spacing(surface)
    knots = to_steps(breaks)
    counts = np.maximum(1, np.rint(surface.spanwise * np.diff(knots) / knots[-1])).astype(int)
    parts = [np.linspace(a, b, c, endpoint=False) for a, b, c in
             zip(knots[:-1], knots[1:], counts, strict=True)]
    steps = np.concatenate([*parts, knots[-1:]])
    return total * to_share(steps), total * to_share(0.5 * (steps[:-1] + steps[1:]))


def _spacing(surface: Surface) -> tuple[Callable[[Floats], Floats], Callable[[Floats], Floats]]:
    """From a share of the span to what is stepped evenly, and back."""
    if surface.spacing == "uniform":
        return (lambda share: share), (lambda step: step)
    if surface.mirrored:
        return (lambda share: np.arcsin(share)), (lambda step: np.sin(step))
    return (
        lambda share: np.arccos(1.0 - 2.0 * share),
        lambda step: 0.5 * (1.0 - np.cos(step)),
    )


def _chords(surface: Surface, along_mm: Floats) -> tuple[Floats, Floats, Floats]:
    """Leading edge (s, 3), chord (s,) and place among the stations (s,) at distances along."""
    ends = surface.along_mm
    table = np.array([(s.x_mm, s.y_mm, s.z_mm, s.chord_mm, k) for k, s in
                      enumerate(surface.stations)], dtype=np.float64)
    columns = [np.interp(along_mm, ends, column) for column in table.T]
    return np.stack(columns[:3], axis=1), columns[3], columns[4]


def _slopes(surface: Surface, middles: Floats, piece: Floats, x_over_c: Floats) -> Floats:
    """(s, chordwise): local angle in radians, blended between neighbouring stations."""
    twist = np.interp(middles, surface.along_mm, [s.twist_deg for s in surface.stations])
    camber = np.array([s.slopes(x_over_c) for s in surface.stations])
    inner = np.minimum(piece.astype(int), len(surface.stations) - 2)
    share = (piece - inner)[:, None]
    slope = camber[inner] * (1.0 - share) + camber[inner + 1] * share
    angle: Floats = np.radians(twist + surface.incidence_deg)[:, None] - np.arctan(slope)
    return angle


def _turned(surface: Surface, name: str, middles: Floats, step: Floats) -> Floats:
    """(s, chordwise): share of each panel behind the hinge of the flaps of that name."""
    share = np.zeros((len(middles), len(step)))
    for flap in surface.flaps:
        if flap.name == name:
            inside = (middles > flap.inner_mm) & (middles < flap.outer_mm)
            # A control point speaks for the stretch between its vortex and the next: with cells
            # of the panels themselves the flap comes out 5 % weak with eight panels.
            first = step + 0.25 / len(step)
            last = np.append(first[1:], 1.0)
            behind = np.clip((last - flap.hinge) / (last - first), 0.0, 1.0)
            share += flap.gain * np.outer(inside, behind)
    return share


def _mirror(
    half: dict[str, Floats], surface: Surface, flap_names: Sequence[str]
) -> dict[str, Floats]:
    """The port side: ends change places so that every vortex runs to starboard."""
    flip = np.array([1.0, -1.0, 1.0])
    port = dict(half)
    port["port_mm"], port["starboard_mm"] = half["starboard_mm"] * flip, half["port_mm"] * flip
    port["tail_mm"] = half["tail_mm"][:, ::-1]
    port["strip_ends_mm"] = half["strip_ends_mm"][:, ::-1] * flip
    for key in ("control_mm", "lean", "strip_middle_mm"):
        port[key] = half[key] * flip
    for name in flap_names:
        signs = {flap.port_sign for flap in surface.flaps if flap.name == name}
        if len(signs) > 1:
            raise DesignError(Problem(name, "moves its port side in two ways on one surface."))
        port[f"flap {name}"] = half[f"flap {name}"] * (signs.pop() if signs else 1.0)
    return port
