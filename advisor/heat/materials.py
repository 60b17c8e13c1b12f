"""Thermal properties of asphalt mixes: conductivity by voids, specific heat by mass fractions."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from advisor.errors import FaultyInput
from advisor.heat.arrays import Floats, Numbers

WATER_LATENT_JKG = 2.26e6  # at 100 C; common tables, from memory
WATER_HEAT_JKGK = 4186.0  # liquid; common tables, from memory


@dataclass(frozen=True)
class MixThermal:
    """What conduction needs to know of a mix, loose or compacted; fields broadcast over cases.

    ``absorptivity`` is the share of sunlight a fresh surface takes, ``emissivity`` its long-wave
    emissivity; both matter on the mat only. Field cores show an emissivity of 0.70 to 0.90 and an
    albedo at construction of 0.05 to 0.10 (thermal and optical characterization of asphalt field
    cores, abstract); fresh, black mix is taken at 0.93 and 0.92 (from memory).
    """

    conductivity_wmk: Numbers
    density_kgm3: Numbers
    specific_heat_jkgk: Numbers
    emissivity: Numbers = 0.93
    absorptivity: Numbers = 0.92

    @property
    def capacity_jm3k(self) -> Floats:
        """Heat capacity of the volume [J/m3K]."""
        return np.asarray(np.multiply(self.density_kgm3, self.specific_heat_jkgk))

    @property
    def diffusivity_m2s(self) -> Floats:
        """Thermal diffusivity [m2/s]."""
        return np.asarray(self.conductivity_wmk / self.capacity_jm3k)


def mix_conductivity_wmk(voids_of_volume: Numbers) -> Floats:
    """Conductivity [W/mK] of asphalt by its air voids.

    Args:
        voids_of_volume: air voids, (...) [1].

    Raises FaultyInput outside 0 to 0.6.
    Validity: 0.05 to 0.25; above, loose mix, it is an extrapolation. Aggregate moves it more than
    voids do: published values run from 0.74 to 3.0.
    Source: own least squares, 1.230 exp(-1.59 voids), on five slabs of Hassn et al. 2016, Materials
    and Design 91 (values second-hand); residual below 0.045 W/mK.
    """
    voids = np.asarray(voids_of_volume, float)
    if (voids < 0).any() or (voids > 0.6).any():
        raise FaultyInput.of(
            "voids-impossible",
            "Air voids must lie between 0 and 60 % of the volume.",
            field="voids_of_volume",
            value=f"{voids.min():g} to {voids.max():g}",
        )
    return np.asarray(1.230 * np.exp(-1.59 * voids))


def aggregate_heat_jkgk(temperature_c: Numbers) -> Floats:
    """Specific heat [J/kgK] of dry stone.

    Args:
        temperature_c: temperature, (...) [C].

    Source: straight line through 850 at 300 K and 1000 at 480 K, measured on the sand matrix of an
    oil sand (Utah oil-sand study 1985, abstract). Stone at 25 C is 800 to 850 (from memory).
    """
    return np.asarray(850.0 + (np.asarray(temperature_c, float) - 26.85) * (150.0 / 180.0))


def binder_heat_jkgk(temperature_c: Numbers, relative_density: Numbers = 1.02) -> Floats:
    """Specific heat [J/kgK] of binder.

    Args:
        temperature_c: temperature, (...) [C].
        relative_density: density over that of water at 15 C, (...) [1].

    Source: petroleum-oil relation (0.388 + 0.00045 F)/sqrt(d) in Btu/lb F, from memory.
    """
    temperature = np.asarray(temperature_c, float)
    return np.asarray(
        1e3 * (1.685 + 0.00339 * temperature) / np.sqrt(np.asarray(relative_density, float))
    )


def mix_heat_jkgk(
    temperature_c: Numbers, binder_of_mix: Numbers, relative_density: Numbers = 1.02
) -> Floats:
    """Specific heat [J/kgK] of a mix, stone and binder weighted by mass.

    Args:
        temperature_c: temperature, (...) [C].
        binder_of_mix: binder as a share of the mass, (...) [1].
        relative_density: density of the binder over that of water at 15 C, (...) [1].

    Raises FaultyInput for a binder content outside 0 to 0.2.
    Source: mass fractions; those of stone and binder beside their functions.
    """
    share = np.asarray(binder_of_mix, float)
    if (share < 0).any() or (share > 0.2).any():
        raise FaultyInput.of(
            "binder-content-impossible",
            "Binder content must lie between 0 and 20 % of the mix.",
            field="binder_of_mix",
            value=f"{share.min():g} to {share.max():g}",
        )
    binder = binder_heat_jkgk(temperature_c, relative_density)
    return np.asarray((1.0 - share) * aggregate_heat_jkgk(temperature_c) + share * binder)


def moisture_drop_k(evaporated_of_mix: Numbers, specific_heat_jkgk: Numbers) -> Floats:
    """Drop [K] of a mix while water leaves it as steam; 0.1 % of water costs about 2.3 K.

    Args:
        evaporated_of_mix: water that leaves, as a share of the mix, (...) [1].
        specific_heat_jkgk: specific heat of the mix, (...) [J/kgK].

    Raises FaultyInput for a negative share.
    Source: latent heat of water at 100 C over the heat of the mix (derived).
    """
    evaporated = np.asarray(evaporated_of_mix, float)
    if (evaporated < 0).any():
        raise FaultyInput.of(
            "moisture-negative",
            "Water that leaves the mix cannot be negative.",
            field="evaporated_of_mix",
        )
    return np.asarray(WATER_LATENT_JKG * evaporated / np.asarray(specific_heat_jkgk, float))


def film_drop_k(
    film_kgm2: Numbers,
    base_c: Numbers,
    lift_m: Numbers,
    capacity_jm3k: Numbers,
) -> Floats:
    """Drop [K] of the mean of a mat while a water film under it boils off; 0.1 mm cost 50 mm 2.3 K.

    Args:
        film_kgm2: water standing on the base, (...) [kg/m2].
        base_c: temperature of that water, (...) [C].
        lift_m: thickness of the mat, (...) [m].
        capacity_jm3k: heat capacity of the mat, (...) [J/m3K].

    Source: water warmed to 100 C and evaporated (derived).
    """
    heat = WATER_LATENT_JKG + WATER_HEAT_JKGK * (100.0 - np.asarray(base_c, float))
    body = np.asarray(lift_m, float) * np.asarray(capacity_jm3k, float)
    return np.asarray(np.asarray(film_kgm2, float) * heat / body)
