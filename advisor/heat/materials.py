"""Thermal properties of asphalt mixes: conductivity by voids, specific heat by mass fractions."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from advisor.errors import FaultyInput

Floats = NDArray[np.float64]

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

    conductivity_wmk: ArrayLike
    density_kgm3: ArrayLike
    specific_heat_jkgk: ArrayLike
    emissivity: ArrayLike = 0.93
    absorptivity: ArrayLike = 0.92

    @property
    def capacity_jm3k(self) -> Floats:
        """Heat capacity of the volume [J/m3K]."""
        return np.asarray(self.density_kgm3, float) * np.asarray(self.specific_heat_jkgk, float)

    @property
    def diffusivity_m2s(self) -> Floats:
        """Thermal diffusivity [m2/s]."""
        return np.asarray(self.conductivity_wmk, float) / self.capacity_jm3k


def mix_conductivity_wmk(voids_of_volume: ArrayLike) -> Floats:
    """Conductivity [W/mK] of asphalt with ``voids_of_volume`` [1] of air, 0.05 to 0.25.

    Own least squares, 1.230 exp(-1.59 voids), on five slabs of Hassn et al. 2016, Materials and
    Design 91 (values second-hand); residual below 0.045 W/mK. Above 0.25, loose mix, it is an
    extrapolation. Aggregate moves it more than voids do: published values run from 0.74 to 3.0.
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


def aggregate_heat_jkgk(temperature_c: ArrayLike) -> Floats:
    """Specific heat [J/kgK] of dry stone at ``temperature_c``.

    Straight line through 850 at 300 K and 1000 at 480 K, measured on the sand matrix of an oil
    sand (Utah oil-sand study 1985, abstract). Stone at 25 C is 800 to 850 (from memory).
    """
    return np.asarray(850.0 + (np.asarray(temperature_c, float) - 26.85) * (150.0 / 180.0))


def binder_heat_jkgk(temperature_c: ArrayLike, relative_density: ArrayLike = 1.02) -> Floats:
    """Specific heat [J/kgK] of binder at ``temperature_c``; ``relative_density`` at 15 C [1].

    The petroleum-oil relation (0.388 + 0.00045 F)/sqrt(d) Btu/lb F, from memory.
    """
    temperature = np.asarray(temperature_c, float)
    return np.asarray(
        1e3 * (1.685 + 0.00339 * temperature) / np.sqrt(np.asarray(relative_density, float))
    )


def mix_heat_jkgk(
    temperature_c: ArrayLike, binder_of_mix: ArrayLike, relative_density: ArrayLike = 1.02
) -> Floats:
    """Specific heat [J/kgK] of a mix with ``binder_of_mix`` [1] of its mass binder.

    Mass-weighted stone and binder at ``temperature_c``.
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


def moisture_drop_k(
    evaporated_of_mix: ArrayLike, mix_c: ArrayLike, specific_heat_jkgk: ArrayLike
) -> Floats:
    """Drop [K] of a mix at ``mix_c`` while water, ``evaporated_of_mix`` [1], leaves as steam.

    The water is at the temperature of the mix; 0.1 % costs about 2.4 K. Latent heat at 100 C.
    """
    steam = WATER_LATENT_JKG * np.asarray(evaporated_of_mix, float)
    if (steam < 0).any():
        raise FaultyInput.of("moisture-negative", "Evaporated moisture cannot be negative.")
    return np.asarray(steam / np.asarray(specific_heat_jkgk, float) + 0.0 * np.asarray(mix_c))


def film_drop_k(
    film_kgm2: ArrayLike,
    base_c: ArrayLike,
    lift_m: ArrayLike,
    capacity_jm3k: ArrayLike,
) -> Floats:
    """Drop [K] of the mean of a mat while a water film under it boils off.

    ``film_kgm2`` [kg/m2] of water at ``base_c``, warmed to 100 C and evaporated by a mat of
    ``lift_m`` and ``capacity_jm3k``; 0.1 mm of water costs a 50 mm mat 2.4 K.
    """
    heat = WATER_LATENT_JKG + WATER_HEAT_JKGK * (100.0 - np.asarray(base_c, float))
    body = np.asarray(lift_m, float) * np.asarray(capacity_jm3k, float)
    return np.asarray(np.asarray(film_kgm2, float) * heat / body)
