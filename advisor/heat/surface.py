"""Surface temperature of a base nobody measured: from the weather now, or from its last days."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from advisor.heat.arrays import Floats, Numbers
from advisor.heat.conduction import conduct
from advisor.heat.ground import BaseThermal
from advisor.heat.layers import Layer
from advisor.heat.surroundings import (
    Face,
    Moving,
    absorbed_wm2,
    radiation_coefficient_wm2k,
)

# Grey, worn asphalt; albedo 0.10 to 0.20 when aged (asphalt field cores, abstract).
ABSORPTIVITY_1, EMISSIVITY_1 = 0.85, 0.93


@dataclass(frozen=True)
class Surface:
    """A surface temperature [C] and its standard deviation [K]."""

    base_c: Floats
    sd_k: Floats


@dataclass(frozen=True)
class BaseHistory:
    """A base through its last days: ``surface_c`` and ``deep_c``, at 0.3 m, at ``times_s``."""

    times_s: Floats
    surface_c: Floats
    deep_c: Floats


def base_surface_c(
    air_c: Numbers, sun_wm2: Numbers, sky_c: Numbers, coefficient_wm2k: Numbers
) -> Surface:
    """Surface temperature [C] of a dry base from the weather of the hour, with its doubt [K].

    Air plus 0.6 of what sun and sky would add to a surface that passes nothing down. After a sunny
    day a base keeps up to 9 K more into the night than this says, so it errs on the cold side.

    Args:
        air_c: air temperature, (...) [C].
        sun_wm2: sun on the horizontal, (...) [W/m2].
        sky_c: sky temperature, (...) [C].
        coefficient_wm2k: convection at the base, (...) [W/m2K].

    Validity: dry, bare, dark; a standard deviation of 4 K and a quarter of the excess. Measure
    where it matters.
    Source: rough rule (derived); held against ``base_history`` over synthetic days in the tests.
    """
    air, sky = np.asarray(air_c, float), np.asarray(sky_c, float)
    long_wave = radiation_coefficient_wm2k(EMISSIVITY_1, air, sky)
    gained = ABSORPTIVITY_1 * np.asarray(sun_wm2, float) - long_wave * (air - sky)
    excess = _SHARE_OF_BALANCE * gained / (np.asarray(coefficient_wm2k, float) + long_wave)
    return Surface(np.asarray(air + excess), np.hypot(_SD_LEAST_K, _SD_OF_EXCESS * excess))


# The ground takes the rest of the balance: 0.6 for a base in the sun (rough rule, derived).
_SHARE_OF_BALANCE = 0.6
_SD_LEAST_K, _SD_OF_EXCESS = 4.0, 0.25


def base_history(
    times_s: Floats,
    air_c: Moving,
    sun_wm2: Moving,
    sky_c: Moving,
    coefficient_wm2k: Moving,
    base: BaseThermal,
    *,
    start_c: Numbers,
    thickness_m: Numbers = 1.0,
) -> BaseHistory:
    """Temperatures [C] of a bare base through days of weather.

    Two days before paving are enough to forget the start.

    Args:
        times_s: rising from 0, half an hour apart or less, (times,) [s].
        air_c: air temperature, moving [C].
        sun_wm2: sun on the horizontal, moving [W/m2].
        sky_c: sky temperature, moving [C].
        coefficient_wm2k: convection at the base, moving [W/m2K].
        base: the base.
        start_c: temperature all through it at first, (cases,) [C].
        thickness_m: how deep it is followed, (cases,) [m].

    Validity: dry, bare and of one material.
    """
    layer = Layer(
        thickness_m,
        base.conductivity_wmk,
        base.capacity_jm3k,
        start_c,
        latent_jm3=base.latent_jm3,
        cells=16,
        spacing="top",
    )
    face = Face(coefficient_wm2k, air_c, EMISSIVITY_1, sky_c, absorbed_wm2(sun_wm2, ABSORPTIVITY_1))
    run = conduct((layer,), face, times_s, depths_m=np.array([0.3]))
    return BaseHistory(np.asarray(times_s, float), run.top_c, run.depth_c[0])
