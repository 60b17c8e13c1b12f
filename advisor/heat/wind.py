"""Wind brought from the weather station to the mat, and air thinned by altitude."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from advisor.errors import FaultyInput

Floats = NDArray[np.float64]


@dataclass(frozen=True)
class Terrain:
    """Wind profile of one kind of country: V grows as height to ``exponent`` up to ``depth_m``."""

    exponent: float
    depth_m: float


# ASHRAE/EnergyPlus profiles (EnergyPlus Engineering Reference, climate calculations).
OPEN_COUNTRY = Terrain(0.14, 270.0)


def wind_at_height_ms(
    station_ms: ArrayLike,
    terrain: Terrain,
    *,
    height_m: ArrayLike = 1.5,
    station_height_m: float = 10.0,
    station_terrain: Terrain = OPEN_COUNTRY,
) -> Floats:
    """Wind [m/s] at ``height_m`` over ``terrain``, from the wind a weather station measures.

    V_met (d_met/z_met)^a_met (z/d)^a (EnergyPlus Engineering Reference). From 10 m to 1.5 m:
    0.77 in open country, 0.24 in a town. Cuttings, screens and traffic make it uncertain by 30 %.
    """
    if (np.asarray(station_ms, float) < 0).any() or (np.asarray(height_m, float) <= 0).any():
        raise FaultyInput.of(
            "wind-impossible", "Wind cannot be negative and its height must be above 0."
        )
    aloft = (station_terrain.depth_m / station_height_m) ** station_terrain.exponent
    down = (np.asarray(height_m, float) / terrain.depth_m) ** terrain.exponent
    return np.asarray(np.asarray(station_ms, float) * aloft * down)


def pressure_share(altitude_m: ArrayLike) -> Floats:
    """Air pressure over 1013.25 hPa [1] at ``altitude_m`` (ISO 2533 standard atmosphere).

    (1 - 2.25577e-5 z)^5.25588, from memory; valid to 11 km.
    """
    return np.asarray((1.0 - 2.25577e-5 * np.asarray(altitude_m, float)) ** 5.25588)
