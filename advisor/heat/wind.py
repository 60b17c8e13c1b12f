"""Wind brought from the weather station to the mat, and air thinned by altitude."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from advisor.errors import FaultyInput
from advisor.heat.arrays import Floats, Numbers


@dataclass(frozen=True)
class Terrain:
    """Wind profile of one kind of country: V grows as height to ``exponent`` up to ``depth_m``."""

    exponent: float
    depth_m: float


# ASHRAE/EnergyPlus profiles (EnergyPlus Engineering Reference, climate calculations).
OPEN_COUNTRY = Terrain(0.14, 270.0)


def wind_at_height_ms(
    station_ms: Numbers,
    terrain: Terrain,
    *,
    height_m: Numbers = 1.5,
    station_height_m: float = 10.0,
    station_terrain: Terrain = OPEN_COUNTRY,
) -> Floats:
    """Wind [m/s] near the ground from the wind a weather station measures.

    Args:
        station_ms: wind at the station, (...) [m/s].
        terrain: country around the site.
        height_m: height wanted, (...) [m].
        station_height_m: height of the station's wind [m].
        station_terrain: country around the station.

    Raises FaultyInput for a negative wind and a height that is not above 0.
    Validity: from 10 m to 1.5 m it is 0.77 in open country, 0.24 in a town; cuttings, screens and
    traffic make it uncertain by 30 %.
    Source: V (d_met/z_met)^a_met (z/d)^a, EnergyPlus Engineering Reference, climate calculations.
    """
    if (np.asarray(station_ms, float) < 0).any() or (np.asarray(height_m, float) <= 0).any():
        raise FaultyInput.of(
            "wind-impossible", "Wind cannot be negative and its height must be above 0."
        )
    aloft = (station_terrain.depth_m / station_height_m) ** station_terrain.exponent
    down = (np.asarray(height_m, float) / terrain.depth_m) ** terrain.exponent
    return np.asarray(np.asarray(station_ms, float) * aloft * down)


def pressure_share(altitude_m: Numbers) -> Floats:
    """Air pressure over 1013.25 hPa [1] in the standard atmosphere.

    Args:
        altitude_m: height above the sea, (...) [m].

    Validity: to 11 km.
    Source: ISO 2533, (1 - 2.25577e-5 z)^5.25588, from memory.
    """
    return np.asarray((1.0 - 2.25577e-5 * np.asarray(altitude_m, float)) ** 5.25588)
