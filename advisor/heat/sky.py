"""What a surface radiates to: the sky's emissivity and temperature, clear and clouded."""

from __future__ import annotations

from collections.abc import Callable
from types import MappingProxyType

import numpy as np

from advisor.errors import FaultyInput
from advisor.heat.arrays import Floats, Numbers
from advisor.heat.surroundings import ZERO_C_IN_K


def vapour_pressure_pa(dew_point_c: Numbers) -> Floats:
    """Vapour pressure [Pa] of air with ``dew_point_c`` (Magnus form 6.112, 17.62, 243.12)."""
    dew = np.asarray(dew_point_c, float)
    return np.asarray(611.2 * np.exp(17.62 * dew / (243.12 + dew)))


def walton_emissivity(air_c: Numbers, dew_point_c: Numbers) -> Floats:
    """Clear-sky emissivity [1]: 0.787 + 0.764 ln(dew point/273), in K.

    Clark and Allen 1978 as printed in the EnergyPlus Engineering Reference.
    """
    dew_k = np.asarray(dew_point_c, float) + ZERO_C_IN_K
    return np.asarray(0.787 + 0.764 * np.log(dew_k / 273.0) + 0.0 * np.asarray(air_c))


def brutsaert_emissivity(air_c: Numbers, dew_point_c: Numbers) -> Floats:
    """Clear-sky emissivity [1]: 1.24 (e/T)^(1/7), e in hPa (Brutsaert 1975, as in open code)."""
    air_k = np.asarray(air_c, float) + ZERO_C_IN_K
    return np.asarray(1.24 * (vapour_pressure_pa(dew_point_c) / 100.0 / air_k) ** (1.0 / 7.0))


def konzelmann_emissivity(air_c: Numbers, dew_point_c: Numbers) -> Floats:
    """Clear-sky emissivity [1]: 0.23 + 0.443 (e/T)^(1/8), e in Pa (Konzelmann 1994, open code)."""
    air_k = np.asarray(air_c, float) + ZERO_C_IN_K
    return np.asarray(0.23 + 0.443 * (vapour_pressure_pa(dew_point_c) / air_k) ** 0.125)


_CLEAR: MappingProxyType[str, Callable[[Numbers, Numbers], Floats]] = MappingProxyType(
    {
        "Clark-Allen": walton_emissivity,
        "Brutsaert": brutsaert_emissivity,
        "Konzelmann": konzelmann_emissivity,
    }
)
SKY_METHODS: tuple[str, ...] = tuple(_CLEAR)


def sky_emissivity(
    air_c: Numbers,
    dew_point_c: Numbers,
    cloud_of_sky: Numbers,
    *,
    method: str = "Clark-Allen",
) -> Floats:
    """Emissivity [1] of the sky under cloud, at most 1.

    The clear-sky value by ``method`` times 1 + 0.0224 N - 0.0035 N^2 + 0.00028 N^3, N the opaque
    cloud in tenths (Walton 1983, as printed in the EnergyPlus Engineering Reference).
    ``cloud_of_sky`` [1] from 0 to 1.

    Raises FaultyInput for an unknown name and for a dew point above the air.
    """
    if method not in _CLEAR:
        raise FaultyInput.of(
            "sky-unknown",
            f"'{method}' is not a known relation for the sky.",
            f"Known: {', '.join(SKY_METHODS)}.",
            field="method",
            value=method,
        )
    if (np.asarray(dew_point_c, float) > np.asarray(air_c, float) + 0.5).any():
        raise FaultyInput.of(
            "dew-point-above-air",
            "A dew point cannot be above the air temperature.",
            "Check that the two are not swapped.",
            field="dew_point_c",
        )
    tenths = 10.0 * np.asarray(cloud_of_sky, float)
    clouded = 1.0 + 0.0224 * tenths - 0.0035 * tenths**2 + 0.00028 * tenths**3
    return np.asarray(np.minimum(_CLEAR[method](air_c, dew_point_c) * clouded, 1.0))


def sky_temperature_c(
    air_c: Numbers,
    dew_point_c: Numbers,
    cloud_of_sky: Numbers,
    *,
    method: str = "Clark-Allen",
) -> Floats:
    """Temperature [C] of a black sky that radiates as the real one.

    Args:
        air_c: air temperature, (...) [C].
        dew_point_c: dew point, (...) [C].
        cloud_of_sky: share of the sky under cloud, (...) [1].
        method: one of ``SKY_METHODS`` for the clear sky.

    Raises FaultyInput for an unknown name and for a dew point above the air.
    Validity: the methods spread by 10 K in dry cold air, which moves a cooling time by 1 %.
    Source: emissivity^0.25 times air; emissivity beside ``sky_emissivity``.
    """
    emissivity = sky_emissivity(air_c, dew_point_c, cloud_of_sky, method=method)
    air_k = np.asarray(air_c, float) + ZERO_C_IN_K
    return np.asarray(emissivity**0.25 * air_k - ZERO_C_IN_K)
