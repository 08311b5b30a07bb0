"""What checks and the weights and balance hand on: plain figures, no working."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal, TypeAlias

Verdict: TypeAlias = Literal["pass", "warn", "fail"]
WORST_FIRST: tuple[Verdict, ...] = ("fail", "warn", "pass")


@dataclass(frozen=True, slots=True)
class Check:
    """One check with its verdict.

    Attributes:
        id: short and stable, in lower case: ``static-margin``.
        title: what was looked at, in words.
        value: what was found; None where the check has no figure.
        limit: what it was held against, in the same unit; None where there is no figure.
        unit: of both, empty for pure numbers.
        basis: method and source.
        advice: what to change, one sentence; empty when all is well.
    """

    id: str
    title: str
    verdict: Verdict
    value: float | None
    limit: float | None
    unit: str
    basis: str
    advice: str = ""


@dataclass(frozen=True, slots=True)
class Movable:
    """Something that slides along x; `range_mm` is the (foremost, aftmost) x of its middle."""

    item: str
    x_mm: float
    range_mm: tuple[float, float]


@dataclass(frozen=True, slots=True)
class Ballast:
    """Mass to add at a place to bring the balance into its range."""

    item: str
    mass_g: float
    x_mm: float


@dataclass(frozen=True, slots=True)
class GroupRow:
    """One line of the weights table; `arm_mm` is the x of the group's centre of mass."""

    group: str
    mass_g: float
    mass_sigma_g: float
    arm_mm: float


@dataclass(frozen=True, slots=True)
class Balance:
    """Weights and balance of the finished aircraft.

    x is counted from the leading edge of the wing's root chord, positive aft. Mass and centre of
    gravity are the sums over the kit's parts.

    Attributes:
        cg_mm: x, y, z.
        cg_sigma_mm: one standard deviation of the x.
        inertia_g_mm2: Ixx, Iyy, Izz, Ixz about the centre of gravity.
        mac_mm: mean aerodynamic chord; `mac_le_x_mm` is the x of its leading edge.
        neutral_point_x_mm: None where it is not known, as is the static margin then.
        static_margin: as a fraction of the mean aerodynamic chord.
        target_cg_x_mm: (fore, aft) limits of where the centre of gravity shall be.
        table: by group; its masses add up to `mass_g`.
        span_mm, wing_area_mm2: projected, the measures that the figures are stated in; 0 where
            there is no wing.
    """

    mass_g: float
    mass_sigma_g: float
    cg_mm: tuple[float, float, float]
    cg_sigma_mm: float
    inertia_g_mm2: tuple[float, float, float, float]
    mac_mm: float
    mac_le_x_mm: float
    neutral_point_x_mm: float | None
    static_margin: float | None
    target_cg_x_mm: tuple[float, float]
    movable: tuple[Movable, ...] = ()
    ballast: tuple[Ballast, ...] = ()
    table: tuple[GroupRow, ...] = ()
    span_mm: float = 0.0
    wing_area_mm2: float = 0.0
