"""Heat a warm drum loses to wind and surroundings, from the temperature of its shell."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from advisor.dryer.properties import KELVIN, STANDARD_PRESSURE_PA, Values

STEFAN_BOLTZMANN_W_M2K4 = 5.670374419e-8  # CODATA 2018
GRAVITY_M_S2 = 9.80665


def shell_loss_w(
    shell_c: ArrayLike,
    air_c: ArrayLike,
    wind_ms: ArrayLike,
    diameter_m: ArrayLike,
    length_m: ArrayLike,
    emissivity: ArrayLike,
) -> Values:
    """Heat [W] lost by the mantle of a drum to air and surroundings.

    It is a constant loss: per tonne it doubles at half the rate.

    Args:
        shell_c: mean temperature of the shell, any shape, above the air's [C].
        air_c: air and surroundings [C].
        wind_ms: wind across the drum [m/s].
        diameter_m: outer diameter [m].
        length_m: length of the warm shell [m].
        emissivity: of the shell, 0.8 to 0.95 for rust or paint [1].

    Source: free convection Churchill and Chu (1975), forced Churchill and Bernstein (1977), both
    for a cylinder across the stream; combined as the cube root of the sum of their cubes.
    """
    shell, air = np.asarray(shell_c, float), np.asarray(air_c, float)
    across = np.asarray(diameter_m, float)
    film_c = (shell + air) / 2.0
    conductivity, viscosity, prandtl = _air(film_c)
    rise = np.abs(shell - air)
    rayleigh = GRAVITY_M_S2 / (film_c + KELVIN) * rise * across**3 * prandtl / viscosity**2
    reynolds = np.asarray(wind_ms, float) * across / viscosity
    free = _nusselt_free(rayleigh, prandtl)
    forced = _nusselt_forced(reynolds, prandtl)
    convection = np.cbrt(free**3 + forced**3) * conductivity / across
    radiation = (
        np.asarray(emissivity, float)
        * STEFAN_BOLTZMANN_W_M2K4
        * ((shell + KELVIN) ** 4 - (air + KELVIN) ** 4)
    )
    area = np.pi * across * np.asarray(length_m, float)
    return np.asarray(area * (convection * (shell - air) + radiation))


def _air(film_c: Values) -> tuple[Values, Values, Values]:
    """Conductivity [W/(m K)], kinematic viscosity [m2/s] and Prandtl number of air at 1 atm.

    Sutherland's law with the constants of the US Standard Atmosphere 1976 (equations 51 and 53).
    """
    kelvin = film_c + KELVIN
    viscosity = 1.458e-6 * kelvin**1.5 / (kelvin + 110.4)
    conductivity = 2.64638e-3 * kelvin**1.5 / (kelvin + 245.4 * 10.0 ** (-12.0 / kelvin))
    density = STANDARD_PRESSURE_PA / (287.053 * kelvin)
    heat = 1007.0  # J/(kg K), within 1 % from 0 to 200 C
    return conductivity, viscosity / density, viscosity * heat / conductivity


def _nusselt_free(rayleigh: Values, prandtl: Values) -> Values:
    """Churchill and Chu, Int. J. Heat Mass Transfer 18, 1975, equation 5."""
    fluid = (1.0 + (0.559 / prandtl) ** (9 / 16)) ** (8 / 27)
    return np.asarray((0.60 + 0.387 * rayleigh ** (1 / 6) / fluid) ** 2)


def _nusselt_forced(reynolds: Values, prandtl: Values) -> Values:
    """Churchill and Bernstein, J. Heat Transfer 99, 1977, without its value at rest."""
    fluid = (1.0 + (0.4 / prandtl) ** (2 / 3)) ** (1 / 4)
    turbulent = (1.0 + (reynolds / 282000.0) ** (5 / 8)) ** (4 / 5)
    return np.asarray(0.62 * np.sqrt(reynolds) * np.cbrt(prandtl) / fluid * turbulent)
