"""Brushless motors by three constants, batteries by their cells, and where both settle."""

from __future__ import annotations

import math
from dataclasses import dataclass

from buildgen.aero.bounds import above_zero, not_negative
from buildgen.drive.propeller import RHO, Static, shaft_power_w, thrust_n
from buildgen.problems import DesignError, Problem

FULL_V, NOMINAL_V, LOW_V = 4.2, 3.7, 3.5
"""Volts of a lithium-polymer cell: full, nominal, and where to stop; common practice."""
USABLE = 0.8
"""Share of the capacity that is used in flight; common practice, no source."""
CELL_OHM_AH = 0.012
"""Resistance of a cell times its capacity, with connector: 4 mohm at 3 Ah; from memory."""
CONTROLLER = 0.95
"""Efficiency of a controller near full throttle, 0.92 to 0.98; common practice."""


@dataclass(frozen=True, slots=True)
class Motor:
    """Its three constants."""

    kv_rpm_v: float
    resistance_ohm: float
    no_load_a: float

    def __post_init__(self) -> None:
        above_zero(kv_rpm_v=self.kv_rpm_v)
        not_negative(resistance_ohm=self.resistance_ohm, no_load_a=self.no_load_a)

    @property
    def torque_n_m_a(self) -> float:
        """Torque for each ampere above the no-load current."""
        return 60 / (2 * math.pi * self.kv_rpm_v)

    def rpm(self, volts: float, amperes: float) -> float:
        """rpm = Kv (V - I R).

        Source: M. Drela, First-Order DC Electric Motor Model (2007), as remembered.
        """
        return self.kv_rpm_v * (volts - amperes * self.resistance_ohm)

    def shaft_w(self, volts: float, amperes: float) -> float:
        """Shaft power [W]: torque times speed of rotation.

        Source: as ``rpm``.
        """
        return (amperes - self.no_load_a) * (volts - amperes * self.resistance_ohm)

    def efficiency(self, volts: float, amperes: float) -> float:
        """(1 - I0/I)(1 - I R/V)."""
        above_zero(volts=volts, amperes=amperes)
        return self.shaft_w(volts, amperes) / (volts * amperes)


@dataclass(frozen=True, slots=True)
class Pack:
    """A battery of lithium-polymer cells in series."""

    cells: int
    capacity_mah: float
    cell_ohm: float | None = None

    @property
    def ohm(self) -> float:
        """All cells: as given, or estimated from the capacity."""
        one = CELL_OHM_AH / (self.capacity_mah / 1000) if self.cell_ohm is None else self.cell_ohm
        return self.cells * one

    def energy_wh(self, usable: float = USABLE) -> float:
        """Taken out in flight, at the nominal voltage."""
        return self.cells * NOMINAL_V * self.capacity_mah / 1000 * usable


@dataclass(frozen=True, slots=True)
class Point:
    """Where a motor, its propeller and the battery settle, for one of equal motors.

    Attributes:
        amperes: through one motor at full throttle; the battery gives all of them.
        volts: at the motor.
    """

    rpm: float
    amperes: float
    volts: float
    shaft_w: float
    thrust_n: float
    battery_a: float
    battery_v: float
    efficiency: float


def flight_time_min(capacity_mah: float, average_a: float, usable: float = USABLE) -> float:
    """t = 60 C usable / I.

    Source: definition.
    """
    above_zero(capacity_mah=capacity_mah, average_a=average_a, usable=usable)
    return 60 * capacity_mah / 1000 * usable / average_a


def static_point(
    motor: Motor, pack: Pack, propeller: Static, diameter_mm: float, motors: int = 1,
    wire_ohm: float = 0.0, cell_v: float = NOMINAL_V, rho: float = RHO,
) -> Point:
    """All motors at full throttle, at rest.

    Each motor's shaft power equals its propeller's; the pack and the common lead carry all
    currents, each motor's own lead one.

    Args:
        motors: equal ones, in parallel.
        wire_ohm: of one motor's own lead, both ways.
        cell_v: at rest, of one cell.

    Raises:
        DesignError: no such point: the propeller is too large for any current.
    """
    above_zero(diameter_mm=diameter_mm, cell_v=cell_v, rho=rho)

    def volts(amperes: float) -> float:
        sag = motors * amperes * pack.ohm + amperes * wire_ohm
        return (pack.cells * cell_v - sag)

    def spare(amperes: float) -> float:
        v = volts(amperes)
        rpm = motor.rpm(v, amperes)
        if rpm <= 0:
            return -math.inf
        return shaft_power_w(propeller.cp, rpm, diameter_mm, rho) - motor.shaft_w(v, amperes)

    low = max(motor.no_load_a, 1e-6)
    high = pack.cells * cell_v / (motor.resistance_ohm + motors * pack.ohm + wire_ohm + 1e-9)
    high = 0.999 * high
    if spare(low) <= 0:
        raise DesignError(Problem("power.propeller", "The motor does not turn this propeller.",
                                  "Check kv_rpm_v, no_load_a and the propeller's size."))
    for _ in range(80):
        middle = (low + high) / 2
        low, high = (middle, high) if spare(middle) > 0 else (low, middle)
    amperes = (low + high) / 2
    v = volts(amperes)
    rpm = motor.rpm(v, amperes)
    battery_v = pack.cells * cell_v - motors * amperes * pack.ohm
    return Point(rpm, amperes, v, motor.shaft_w(v, amperes),
                 thrust_n(propeller.ct, rpm, diameter_mm, rho), motors * amperes, battery_v,
                 motor.efficiency(v, amperes))
