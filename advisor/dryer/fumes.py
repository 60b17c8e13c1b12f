"""Fume of hot mix, and how much faster its binder oxidises when it is hotter."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike

from advisor.dryer.properties import GAS_CONSTANT_J_MOLK, KELVIN, Values
from advisor.errors import OutsideValidity
from advisor.units import celsius_from_fahrenheit

# Mix temperatures the fume equations were fitted to: about 275 to 350 F, from memory.
FUME_RANGE_C = (celsius_from_fahrenheit(275.0), celsius_from_fahrenheit(350.0))
# Mass change [%] of the binder in the rolling thin-film oven where nobody measured it; a loss is
# negative. AP-42 section 11.1, default, from memory.
USUAL_MASS_CHANGE_PERCENT = -0.5


@dataclass(frozen=True)
class FumeEquation:
    """A pollutant: mass per mass of mix is ``constant_kg_kg + slope_kg_kg`` times volatility."""

    name: str
    constant_kg_kg: float
    slope_kg_kg: float


def volatility(
    mix_c: ArrayLike, mass_change_percent: ArrayLike = USUAL_MASS_CHANGE_PERCENT
) -> Values:
    """How strongly a binder gives off fume, as the fume equations count it [1].

    Args:
        mix_c: mix temperature, any shape [C].
        mass_change_percent: mass change in the rolling thin-film oven, a loss negative [%].

    Source: AP-42 section 11.1 (2004), Table 11.1-14, from memory.
    """
    change = np.asarray(mass_change_percent, float)
    if np.any(change > 0.0):
        raise OutsideValidity.of(
            "mass-gain",
            "A binder that gains mass in the oven is outside the fume equations.",
            "Give the loss as a negative number, or 0.",
            field="mass_change_percent",
        )
    fahrenheit = np.asarray(mix_c, float) * 1.8 + 32.0
    return np.asarray(-change * np.exp(0.0251 * (fahrenheit + 460.0) - 20.43))


def fume_kg_kg(
    mix_c: ArrayLike,
    equation: FumeEquation,
    mass_change_percent: ArrayLike = USUAL_MASS_CHANGE_PERCENT,
) -> Values:
    """Pollutant given off [kg/kg mix].

    Args:
        mix_c: mix temperature at load-out or silo filling, any shape [C].
        equation: which pollutant, and where.
        mass_change_percent: mass change in the rolling thin-film oven, a loss negative [%].
    """
    given_off = equation.slope_kg_kg * volatility(mix_c, mass_change_percent)
    return np.asarray(equation.constant_kg_kg + given_off)


def fume_growth(hotter_c: ArrayLike, cooler_c: ArrayLike) -> Values:
    """Growth of the part of the fume that depends on temperature, as a ratio [1].

    Args:
        hotter_c: mix temperature, any shape [C].
        cooler_c: mix temperature to compare with [C].
    """
    rise = np.asarray(hotter_c, float) - np.asarray(cooler_c, float)
    return np.asarray(np.exp(0.0251 * 1.8 * rise))


def fume_is_known(mix_c: ArrayLike) -> np.ndarray:
    """Whether a mix temperature lies where the fume equations were fitted.

    Args:
        mix_c: mix temperature, any shape [C].
    """
    at_c = np.asarray(mix_c, float)
    return np.asarray((at_c >= FUME_RANGE_C[0]) & (at_c <= FUME_RANGE_C[1]))


def oxidation_growth(
    hotter_c: ArrayLike, cooler_c: ArrayLike, activation_j_mol: ArrayLike
) -> Values:
    """Rate at which binder oxidises over that at a cooler temperature, as a ratio [1].

    Args:
        hotter_c: binder temperature, any shape [C].
        cooler_c: binder temperature to compare with [C].
        activation_j_mol: activation energy, 64 000 to 109 000 for 14 binders [J/mol].

    Source: Arrhenius; energies of Liu et al., AIChE Journal 42(4), 1996, measured near 60 to
    100 C, so here they are used beyond their range.
    """
    hot = np.asarray(hotter_c, float) + KELVIN
    cool = np.asarray(cooler_c, float) + KELVIN
    energy = np.asarray(activation_j_mol, float) / GAS_CONSTANT_J_MOLK
    return np.asarray(np.exp(energy * (1.0 / cool - 1.0 / hot)))
