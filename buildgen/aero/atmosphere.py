"""The standard atmosphere up to 11 km, and warm or cold days."""

from __future__ import annotations

import math
from dataclasses import dataclass

from buildgen.aero.balance import GRAVITY_M_S2
from buildgen.aero.bounds import within

SEA_LEVEL_K = 288.15
SEA_LEVEL_PA = 101325.0
LAPSE_K_M = 0.0065
GAS_J_KG_K = 287.05287
"""Source of the four: ISO 2533:1975."""


@dataclass(frozen=True, slots=True)
class Air:
    """Air at one height and temperature.

    Attributes:
        temperature_k: absolute.
        pressure_pa: static.
        density_kg_m3: of dry air.
        viscosity_pa_s: dynamic.
    """

    temperature_k: float
    pressure_pa: float
    density_kg_m3: float
    viscosity_pa_s: float

    @property
    def kinematic_m2_s(self) -> float:
        """Dynamic viscosity over density."""
        return self.viscosity_pa_s / self.density_kg_m3

    @property
    def sound_m_s(self) -> float:
        """Speed of sound, sqrt(1.4 R T). Source: ISO 2533:1975."""
        return math.sqrt(1.4 * GAS_J_KG_K * self.temperature_k)


def air(height_m: float = 0.0, warmer_k: float = 0.0) -> Air:
    """Air at a pressure height; on a warm day the pressure stays and the density falls.

    Args:
        height_m: geopotential, -1000 to 11000.
        warmer_k: day's temperature above that of the standard at this height.

    Raises:
        DesignError: outside these heights, or more than 60 K off the standard.

    Source: ISO 2533:1975 (identical here with US Standard Atmosphere 1976): T = 288.15 - 0.0065 H,
        p = 101325 (T/288.15)^(g/(R L)), rho = p/(R T).
    """
    within(-1000.0, 11000.0, height_m=height_m)
    within(-60.0, 60.0, warmer_k=warmer_k)
    standard_k = SEA_LEVEL_K - LAPSE_K_M * height_m
    power = GRAVITY_M_S2 / (GAS_J_KG_K * LAPSE_K_M)
    pressure = SEA_LEVEL_PA * math.pow(standard_k / SEA_LEVEL_K, power)
    temperature = standard_k + warmer_k
    return Air(
        temperature, pressure, pressure / (GAS_J_KG_K * temperature), viscosity_pa_s(temperature)
    )


def viscosity_pa_s(temperature_k: float) -> float:
    """Dynamic viscosity of air.

    Args:
        temperature_k: 100 to 1900.

    Source: W. Sutherland's law with the constants of US Standard Atmosphere 1976, equation 51:
        1.458e-6 T^1.5/(T + 110.4).
    """
    within(100.0, 1900.0, temperature_k=temperature_k)
    return 1.458e-6 * math.pow(temperature_k, 1.5) / (temperature_k + 110.4)


def density_height_m(air_now: Air) -> float:
    """Height at which the standard atmosphere is as thin as this air.

    Source: ISO 2533:1975, density rho_0 (T/T_0)^(g/(R L) - 1) solved for the height.
    """
    ratio = air_now.density_kg_m3 / (SEA_LEVEL_PA / (GAS_J_KG_K * SEA_LEVEL_K))
    power = GRAVITY_M_S2 / (GAS_J_KG_K * LAPSE_K_M) - 1.0
    return SEA_LEVEL_K / LAPSE_K_M * (1.0 - math.pow(ratio, 1.0 / power))
