"""Density of binder at a temperature, and kinematic against dynamic viscosity through it."""

from __future__ import annotations

from typing import Literal

import numpy as np
from numpy.typing import ArrayLike, NDArray

from advisor.errors import FaultyInput

Floats = NDArray[np.float64]
Column = Literal["A", "B"]

# Volume correction factors, ASTM D4311 section 4.2.2 (looked up), base 15 C: constant, per C,
# per C squared. Column A serves nearly all paving binders, column B lighter ones (density at
# 15 C below 967 kg/m3; that border is from memory).
_FACTORS_C: dict[str, tuple[float, float, float]] = {
    "A": (1.009, -6.3341e-4, 1.4571e-7),
    "B": (1.0108, -7.2344e-4, 2.199e-7),
}
# The same standard's second table, column A: Fahrenheit, base 60 F.
_FACTORS_F_A = (1.0211, -3.5490e-4, 4.4988e-8)
BASE_C = 15.0
VALID_LOW_C, VALID_HIGH_C = -25.0, 275.0
# Water at 25 C, 997.05 kg/m3 (derived from the definition of specific gravity 25/25).
WATER_25C_KGM3 = 997.05
# Mean slope of the straight-line rule, ASTM D4311 section 3.3 (looked up); the text seen there
# prints the Celsius and Fahrenheit rows the wrong way round.
LINEAR_EXPANSION_PER_K = 0.00063


def volume_factor(temperature_c: ArrayLike, column: Column = "A") -> Floats:
    """Volume correction factor [1] of ASTM D4311 to the base of 15 C.

    The printed polynomial does not give exactly 1 at 15 C; ``density_kgm3`` divides that out.

    Args:
        temperature_c: temperature [C], -25 to 275.
        column: 'A' for paving binders, 'B' for lighter ones.

    Raises:
        FaultyInput: the column is unknown.

    Source: ASTM D4311 section 4.2.2 (looked up).
    """
    if column not in _FACTORS_C:
        raise FaultyInput.of(
            "volume-column", f"There is no column '{column}'.", "Choose A or B.", value=column
        )
    constant, first, second = _FACTORS_C[column]
    temperature = np.asarray(temperature_c, float)
    found: Floats = constant + first * temperature + second * temperature**2
    return found


def volume_factor_60f(temperature_c: ArrayLike) -> Floats:
    """Volume correction factor [1] of ASTM D4311 column A to the base of 60 F.

    Args:
        temperature_c: temperature [C]; the polynomial itself takes Fahrenheit.

    Source: ASTM D4311 section 4.2.2, second table (looked up).
    """
    constant, first, second = _FACTORS_F_A
    temperature = np.asarray(temperature_c, float) * 1.8 + 32.0
    found: Floats = constant + first * temperature + second * temperature**2
    return found


def linear_volume_factor(temperature_c: ArrayLike) -> Floats:
    """Volume correction factor [1] to the base of 15 C by the straight-line rule, for comparison.

    Args:
        temperature_c: temperature [C].

    Source: ASTM D4311 section 3.3 (coefficient looked up).
    """
    found: Floats = 1.0 - LINEAR_EXPANSION_PER_K * (np.asarray(temperature_c, float) - BASE_C)
    return found


def density_kgm3(
    temperature_c: ArrayLike, density_15c_kgm3: ArrayLike, column: Column = "A"
) -> Floats:
    """Density [kg/m3] of a binder at a temperature.

    Args:
        temperature_c: temperature [C], -25 to 275.
        density_15c_kgm3: density at 15 C [kg/m3].
        column: 'A' for paving binders, 'B' for lighter ones.

    Source: ASTM D4311 section 4.2.2 (looked up), divided by its own value at 15 C.
    """
    ratio = volume_factor(temperature_c, column) / volume_factor(BASE_C, column)
    found: Floats = np.asarray(density_15c_kgm3, float) * ratio
    return found


def density_15c_from_specific_gravity(specific_gravity: ArrayLike, column: Column = "A") -> Floats:
    """Density at 15 C [kg/m3] of a specific gravity at 25 C over water at 25 C.

    Args:
        specific_gravity: mass over mass of the same volume of water, both at 25 C [1].
        column: 'A' for paving binders, 'B' for lighter ones.

    Source: definition; water at 25 C; ASTM D4311 for the step from 25 to 15 C.
    """
    density_25c = np.asarray(specific_gravity, float) * WATER_25C_KGM3
    found: Floats = density_25c * volume_factor(BASE_C, column) / volume_factor(25.0, column)
    return found


def density_15c_from_density(
    density_measured_kgm3: ArrayLike, temperature_c: ArrayLike, column: Column = "A"
) -> Floats:
    """Density at 15 C [kg/m3] of a density measured at another temperature.

    Args:
        density_measured_kgm3: density [kg/m3] at ``temperature_c``.
        temperature_c: temperature [C] of the measurement.
        column: 'A' for paving binders, 'B' for lighter ones.

    Source: ASTM D4311 section 4.2.2 (looked up).
    """
    ratio = volume_factor(BASE_C, column) / volume_factor(temperature_c, column)
    found: Floats = np.asarray(density_measured_kgm3, float) * ratio
    return found


def dynamic_from_kinematic_pas(
    kinematic_m2s: ArrayLike,
    temperature_c: ArrayLike,
    density_15c_kgm3: ArrayLike,
    column: Column = "A",
) -> Floats:
    """Dynamic viscosity [Pa.s] of a kinematic viscosity at a temperature.

    Args:
        kinematic_m2s: kinematic viscosity [m2/s].
        temperature_c: temperature [C].
        density_15c_kgm3: density at 15 C [kg/m3].
        column: 'A' for paving binders, 'B' for lighter ones.

    Source: definition, with the density of ASTM D4311.
    """
    density = density_kgm3(temperature_c, density_15c_kgm3, column)
    found: Floats = np.asarray(kinematic_m2s, float) * density
    return found


def kinematic_from_dynamic_m2s(
    viscosity_pas: ArrayLike,
    temperature_c: ArrayLike,
    density_15c_kgm3: ArrayLike,
    column: Column = "A",
) -> Floats:
    """Kinematic viscosity [m2/s] of a dynamic viscosity at a temperature.

    Args:
        viscosity_pas: dynamic viscosity [Pa.s].
        temperature_c: temperature [C].
        density_15c_kgm3: density at 15 C [kg/m3].
        column: 'A' for paving binders, 'B' for lighter ones.

    Source: definition, with the density of ASTM D4311.
    """
    density = density_kgm3(temperature_c, density_15c_kgm3, column)
    found: Floats = np.asarray(viscosity_pas, float) / density
    return found
