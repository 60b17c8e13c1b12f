"""What a mat is laid on: dense materials by their numbers, moist and frozen ground by formula."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from advisor.errors import FaultyInput
from advisor.heat.materials import WATER_HEAT_JKGK

Floats = NDArray[np.float64]

ICE_LATENT_JKG = 3.34e5  # melting; common tables, from memory
ICE_HEAT_JKGK = 2100.0  # common tables, from memory


@dataclass(frozen=True)
class BaseThermal:
    """What conduction needs to know of a base; fields broadcast over cases.

    ``latent_jm3`` is the heat that melts the ice of a frozen base, else 0.
    """

    conductivity_wmk: ArrayLike
    density_kgm3: ArrayLike
    specific_heat_jkgk: ArrayLike
    latent_jm3: ArrayLike = 0.0

    @property
    def capacity_jm3k(self) -> Floats:
        """Heat capacity of the volume [J/m3K]."""
        return np.asarray(self.density_kgm3, float) * np.asarray(self.specific_heat_jkgk, float)

    @property
    def diffusivity_m2s(self) -> Floats:
        """Thermal diffusivity [m2/s]."""
        return np.asarray(self.conductivity_wmk, float) / self.capacity_jm3k


def granular_base(
    dry_density_kgm3: ArrayLike,
    water_of_dry_mass: ArrayLike,
    *,
    frozen: bool = False,
    quartz_of_stone: ArrayLike = 0.4,
    stone_density_kgm3: ArrayLike = 2700.0,
    crushed: bool = True,
) -> BaseThermal:
    """Unbound stone with ``water_of_dry_mass`` [1] of water or ice in its pores.

    Johansen 1975 (structure and constants as in an open land-surface code; exponents and dry
    conductivity from memory): k = Ke k_sat + (1 - Ke) k_dry, Ke = 1 + log10(Sr) moist and Sr
    frozen, k_sat a geometric mean of stone (7.7 W/mK for ``quartz_of_stone``, 2.0 for the rest)
    and water (0.57) or ice (2.29). ``crushed`` lifts the dry value to at least 0.5 W/mK, as the
    formula for it under-reads crushed rock. Capacities: stone 800, water 4186, ice 2100 J/kgK.

    Raises FaultyInput where the water does not fit the pores.
    """
    dry = np.asarray(dry_density_kgm3, float)
    water = np.asarray(water_of_dry_mass, float)
    stone = np.asarray(stone_density_kgm3, float)
    quartz = np.asarray(quartz_of_stone, float)
    pores = 1.0 - dry / stone
    filled = water * dry / (917.0 if frozen else 1000.0)
    if (pores <= 0).any() or (water < 0).any() or (filled > pores * 1.0001).any():
        raise FaultyInput.of(
            "water-does-not-fit",
            "Dry density and water content do not fit the pores of the base.",
            f"At {float(np.max(dry)):g} kg/m3 the pores are {float(np.min(pores)):.2f} of the "
            "volume; lower the water content or the dry density.",
            field="water_of_dry_mass",
            value=f"{float(np.max(water)):g}",
        )
    saturation = filled / pores
    dry_k = (0.135 * dry + 64.7) / (stone - 0.947 * dry)
    if crushed:
        dry_k = np.maximum(dry_k, 0.5)
    stone_k = 7.7**quartz * 2.0 ** (1.0 - quartz)
    full_k = stone_k ** (1.0 - pores) * (2.29 if frozen else 0.57) ** pores
    if frozen:
        kersten = saturation
    else:
        kersten = np.maximum(0.0, 1.0 + np.log10(np.maximum(saturation, 1e-6)))
    wet_density = dry * (1.0 + water)
    heat = dry * (800.0 + water * (ICE_HEAT_JKGK if frozen else WATER_HEAT_JKGK))
    return BaseThermal(
        conductivity_wmk=kersten * full_k + (1.0 - kersten) * dry_k,
        density_kgm3=wet_density,
        specific_heat_jkgk=heat / wet_density,
        latent_jm3=dry * water * ICE_LATENT_JKG if frozen else 0.0,
    )


def contact_temperature_c(
    upper: object, upper_c: ArrayLike, lower: object, lower_c: ArrayLike
) -> Floats:
    """Temperature [C] that two thick bodies take at once where they touch, perfectly.

    Weighted by effusivity sqrt(k rho c) (Carslaw and Jaeger 1959). ``upper`` and ``lower`` are
    MixThermal or BaseThermal.
    """
    weights = [
        np.sqrt(body.capacity_jm3k * np.asarray(body.conductivity_wmk, float))  # type: ignore[attr-defined]
        for body in (upper, lower)
    ]
    hot, cold = np.asarray(upper_c, float), np.asarray(lower_c, float)
    return np.asarray((weights[0] * hot + weights[1] * cold) / (weights[0] + weights[1]))
