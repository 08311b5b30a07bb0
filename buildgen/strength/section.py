"""Section properties of spars about the wing's bending axis."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

from buildgen.aero.bounds import above_zero


@dataclass(frozen=True, slots=True)
class Piece:
    """One stick or tube of a spar, as it stands in the section.

    Attributes:
        area_mm2: of its section.
        own_mm4: second moment about its own level axis.
        at_mm: height of its middle.
        half_mm: from its middle to its outermost fibre.
        modulus_mpa: along its axis.
        strength_mpa: allowed at that fibre.
        name: for reports.
    """

    area_mm2: float
    own_mm4: float
    at_mm: float
    half_mm: float
    modulus_mpa: float
    strength_mpa: float
    name: str = ""


def tube_mm(outer_mm: float, inner_mm: float = 0.0) -> tuple[float, float]:
    """Area [mm2] and second moment [mm4] of a round tube or rod.

    Source: I = pi (D^4 - d^4)/64, any strength-of-materials text (Roark).
    """
    above_zero(outer_mm=outer_mm)
    return (math.pi / 4 * (outer_mm**2 - inner_mm**2),
            math.pi / 64 * (outer_mm**4 - inner_mm**4))


def rectangle_mm(width_mm: float, height_mm: float) -> tuple[float, float]:
    """Area [mm2] and second moment [mm4] of a rectangle about its level axis.

    Source: I = b h^3/12, any strength-of-materials text (Roark).
    """
    above_zero(width_mm=width_mm, height_mm=height_mm)
    return width_mm * height_mm, width_mm * height_mm**3 / 12


def stiffness_n_mm2(pieces: Sequence[Piece]) -> tuple[float, float]:
    """E I of pieces that bend as one [N mm2], and the height of their neutral axis [mm].

    Source: transformed section by the ratio of moduli, any strength-of-materials text (Roark).
    """
    rigid = sum(p.modulus_mpa * p.area_mm2 for p in pieces)
    above_zero(rigid=rigid)
    axis = sum(p.modulus_mpa * p.area_mm2 * p.at_mm for p in pieces) / rigid
    return sum(p.modulus_mpa * (p.own_mm4 + p.area_mm2 * (p.at_mm - axis) ** 2)
               for p in pieces), axis


def stress_mpa(pieces: Sequence[Piece], moment_n_mm: float) -> list[float]:
    """Greatest stress in each piece under a bending moment, plane sections staying plane.

    Source: sigma = M E y/(sum E I).
    """
    total, axis = stiffness_n_mm2(pieces)
    return [abs(moment_n_mm) * p.modulus_mpa * (abs(p.at_mm - axis) + p.half_mm) / total
            for p in pieces]


def web_shear_mpa(shear_n: float, thickness_mm: float, height_mm: float) -> float:
    """Mean shear stress in a web: V/(t h).

    Source: any strength-of-materials text (Roark).
    """
    above_zero(thickness_mm=thickness_mm, height_mm=height_mm)
    return abs(shear_n) / (thickness_mm * height_mm)


def euler_n(modulus_mpa: float, second_mm4: float, length_mm: float, end: float = 1.0) -> float:
    """Buckling load of a slender stick; `end` is 1 for pinned, 0.5 for fixed ends.

    Source: L. Euler, pi^2 E I/(K L)^2.
    """
    above_zero(modulus_mpa=modulus_mpa, second_mm4=second_mm4, length_mm=length_mm, end=end)
    return math.pi**2 * modulus_mpa * second_mm4 / (end * length_mm) ** 2
