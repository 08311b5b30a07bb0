"""Screw sizes turned into holes, lengths and masses."""

from __future__ import annotations

import math

from buildgen.problems import DesignError, Problem
from buildgen.shelf.lookup import Shelf, load_shelf

FITS = ("fine", "medium", "coarse")
HEADS = ("cap", "pan", "countersunk")

# g/mm3 of steel: 7850 kg/m3, engineering handbooks, from memory.
_STEEL_G_MM3 = 7.85e-3


def clearance_hole_mm(
    size: str, fit: str = "medium", path: str = "", shelf: Shelf | None = None
) -> float:
    """Diameter of a through hole for a screw.

    Args:
        size: "M3".
        fit: "fine" (H12), "medium" (H13) or "coarse" (H14).
        path: key of the definition that asks, for the message.

    Raises:
        DesignError: no such size or fit.

    Source: ISO 273:1979.
    """
    screw = (shelf or load_shelf()).screw(size, path)
    if fit not in FITS:
        says = f'"{fit}" is no fit of a clearance hole.'
        raise DesignError(Problem(path, says, f"Allowed: {', '.join(FITS)}."))
    return screw.clearance_mm[FITS.index(fit)]


def screw_length_mm(
    minimum_mm: float, size: str, path: str = "", shelf: Shelf | None = None
) -> float:
    """The shortest standard screw that is at least so long under the head.

    Raises:
        DesignError: no such size, or no standard screw of it is long enough.
    """
    lengths = (shelf or load_shelf()).screw(size, path).lengths_mm
    # A millionth of a millimetre is rounding, not length.
    for length in sorted(lengths):
        if length >= minimum_mm - 1e-6:
            return length
    says = f"No standard {size.upper()} screw is {minimum_mm:g} mm long."
    hint = f"The longest is {max(lengths):g} mm; clamp less thickness or take a larger screw."
    raise DesignError(Problem(path, says, hint))


def screw_mass_g(
    size: str, length_mm: float, head: str = "cap", path: str = "", shelf: Shelf | None = None
) -> float:
    """Mass of a steel screw, estimated from a plain shank and a solid head.

    The shank counts with the mean of the outside and the core diameter of the thread; a cap
    head is taken with its hexagon socket half its height deep. A countersunk length counts
    over all. Estimated: within about 15 % of weighed screws, common practice, no source.
    """
    screw = (shelf or load_shelf()).screw(size, path)
    if head not in HEADS:
        says = f'"{head}" is no screw head.'
        raise DesignError(Problem(path, says, f"Allowed: {', '.join(HEADS)}."))
    mean = screw.diameter_mm - 0.6134 * screw.pitch_mm
    width, height = {
        "cap": screw.cap_head_mm,
        "pan": screw.pan_head_mm,
        "countersunk": screw.countersunk_head_mm,
    }[head]
    shank_length = length_mm - height if head == "countersunk" else length_mm
    volume = math.pi / 4 * mean**2 * max(shank_length, 0.0)
    if head == "countersunk":
        small, large = screw.diameter_mm / 2, width / 2
        volume += math.pi * height / 3 * (large**2 + large * small + small**2)
    else:
        volume += math.pi / 4 * width**2 * height * (0.75 if head == "pan" else 1.0)
    if head == "cap":
        volume -= math.sqrt(3) / 2 * screw.hex_key_mm**2 * height / 2
    return volume * _STEEL_G_MM3


def nut_mass_g(size: str, path: str = "", shelf: Shelf | None = None) -> float:
    """Mass of a steel hexagon nut, estimated from its prism less the core of its thread."""
    screw = (shelf or load_shelf()).screw(size, path)
    flats, height = screw.nut_mm
    mean = screw.diameter_mm - 0.6134 * screw.pitch_mm
    area = math.sqrt(3) / 2 * flats**2 - math.pi / 4 * mean**2
    # The chamfers of the corners take about a twentieth.
    return 0.95 * area * height * _STEEL_G_MM3
