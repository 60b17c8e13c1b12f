"""What a mat is laid on: dense materials by their numbers, moist and frozen ground by formula."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from advisor.errors import FaultyInput
from advisor.heat.arrays import Floats, Numbers
from advisor.heat.materials import WATER_HEAT_JKGK, MixThermal

ICE_LATENT_JKG = 3.34e5  # melting; common tables, from memory
ICE_HEAT_JKGK = 2100.0  # common tables, from memory


@dataclass(frozen=True)
class BaseThermal:
    """What conduction needs to know of a base; fields broadcast over cases.

    ``latent_jm3`` is the heat that melts the ice of a frozen base, else 0.
    """

    conductivity_wmk: Numbers
    density_kgm3: Numbers
    specific_heat_jkgk: Numbers
    latent_jm3: Numbers = 0.0

    @property
    def capacity_jm3k(self) -> Floats:
        """Heat capacity of the volume [J/m3K]."""
        return np.asarray(np.multiply(self.density_kgm3, self.specific_heat_jkgk))

    @property
    def diffusivity_m2s(self) -> Floats:
        """Thermal diffusivity [m2/s]."""
        return np.asarray(self.conductivity_wmk / self.capacity_jm3k)


def granular_base(
    dry_density_kgm3: Numbers,
    water_of_dry_mass: Numbers,
    *,
    frozen: bool = False,
    quartz_of_stone: Numbers = 0.4,
    stone_density_kgm3: Numbers = 2700.0,
    crushed: bool = True,
) -> BaseThermal:
    """Unbound stone with water or ice in its pores, as a base.

    Args:
        dry_density_kgm3: mass of dry stone per volume, (...) [kg/m3].
        water_of_dry_mass: water or ice over dry stone, (...) [1].
        frozen: whether the water is ice; its melting is then part of the base.
        quartz_of_stone: share of quartz in the stone, (...) [1].
        stone_density_kgm3: density of the grains, (...) [kg/m3].
        crushed: lifts the dry conductivity to at least 0.5 W/mK, as the formula for it under-reads
            crushed rock (from memory).

    Raises FaultyInput where the water does not fit the pores.
    Validity: saturation 0.1 to 1; conductivity within about 25 %.
    Source: Johansen 1975, structure and constants as in an open land-surface code, exponents and
    dry conductivity from memory: k = Ke k_sat + (1 - Ke) k_dry, Ke = 1 + log10(Sr), or Sr frozen;
    k_sat is the geometric mean of stone (7.7 W/mK for quartz, 2.0 for the rest) and water (0.57) or
    ice (2.29). Heat capacities of stone 800, water 4186, ice 2100 J/kgK, from memory.
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
    upper: MixThermal | BaseThermal,
    upper_c: Numbers,
    lower: MixThermal | BaseThermal,
    lower_c: Numbers,
) -> Floats:
    """Temperature [C] that two thick bodies take at once where they touch, perfectly.

    Args:
        upper: the body on top.
        upper_c: its temperature, (...) [C].
        lower: the body below.
        lower_c: its temperature, (...) [C].

    Source: weights by effusivity sqrt(k rho c), Carslaw and Jaeger 1959 (from memory).
    """
    above = np.sqrt(upper.capacity_jm3k * upper.conductivity_wmk)
    below = np.sqrt(lower.capacity_jm3k * lower.conductivity_wmk)
    hot, cold = np.asarray(upper_c, float), np.asarray(lower_c, float)
    return np.asarray((above * hot + below * cold) / (above + below))
