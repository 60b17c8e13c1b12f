"""Convection coefficients of a mat, by several published relations that differ by a factor of two.

Which one is used is always named. The spread between them, not the numerics, limits how well a
cooling time is known.
"""

from __future__ import annotations

from collections.abc import Callable
from types import MappingProxyType

import numpy as np

from advisor.errors import FaultyInput
from advisor.heat.arrays import Floats, Numbers
from advisor.heat.surroundings import ZERO_C_IN_K
from advisor.heat.wind import pressure_share


def mat_power_law_wm2k(wind_ms: Numbers) -> Floats:
    """Coefficient [W/m2K] of a hot mat in ``wind_ms`` [m/s] at 1.5 to 2 m: 7.4 + 6.39 V^0.75.

    The form used with mats in Minnesota work (from memory); within 1 % of Barber 1957,
    1.3 + 0.62 V^0.75 in Btu and mph (from memory; identity derived). Calm, it equals natural
    convection of a plate at 150 C, so no natural term is added.
    """
    return np.asarray(7.4 + 6.39 * np.asarray(wind_ms, float) ** 0.75)


def wall_linear_wm2k(wind_ms: Numbers) -> Floats:
    """Coefficient [W/m2K] in ``wind_ms`` [m/s]: 5.7 + 3.8 V (McAdams; ASHRAE 1985)."""
    return np.asarray(5.7 + 3.8 * np.asarray(wind_ms, float))


def natural_upward_wm2k(surface_delta_k: Numbers) -> Floats:
    """Natural convection [W/m2K] of a hot face looking up, ``surface_delta_k`` [K] above air.

    Walton 1983: 9.482 dT^(1/3)/(7.283 - 1), as printed in the EnergyPlus Engineering Reference.
    """
    return np.asarray(9.482 * np.cbrt(np.abs(np.asarray(surface_delta_k, float))) / 6.283)


def pavement_mixed_wm2k(wind_ms: Numbers, surface_delta_k: Numbers, air_c: Numbers) -> Floats:
    """Coefficient [W/m2K]: 698.24 (0.00144 Tm^0.3 V^0.7 + 0.00097 dT^0.3), Tm mean of both in K.

    Form of the pavement programmes (National Academies record 14410, p. 34); constants 1 and 0.7
    from memory. That print shows a sum of the temperatures where their difference is meant.
    """
    delta = np.abs(np.asarray(surface_delta_k, float))
    mean_k = np.asarray(air_c, float) + ZERO_C_IN_K + delta / 2.0
    forced = 0.00144 * mean_k**0.3 * np.asarray(wind_ms, float) ** 0.7
    return np.asarray(698.24 * (forced + 0.00097 * delta**0.3))


def rough_forced_wm2k(wind_ms: Numbers, surface_delta_k: Numbers) -> Floats:
    """Coefficient [W/m2K] of a medium rough horizontal face, natural and forced combined.

    hn + R (sqrt(hn^2 + (3.26 V^0.89)^2) - hn), R 1.52 (EnergyPlus Engineering
    Reference).
    """
    natural = natural_upward_wm2k(surface_delta_k)
    glass = np.hypot(natural, 3.26 * np.asarray(wind_ms, float) ** 0.89)
    return np.asarray(natural + 1.52 * (glass - natural))


def plate_turbulent_wm2k(speed_ms: Numbers, length_m: Numbers) -> Floats:
    """Coefficient [W/m2K] of a plate of ``length_m`` along a turbulent flow at ``speed_ms``.

    Nu = 0.037 Re^0.8 Pr/(1 + 2.443 Re^-0.1 (Pr^(2/3) - 1)) (VDI Heat Atlas 2002 as given by an
    open Modelica library), 5e5 < Re < 1e7, air with a film at 50 C.
    """
    speed, length = np.asarray(speed_ms, float), np.asarray(length_m, float)
    reynolds = np.maximum(speed * length / _AIR_VISCOSITY_M2S, 1e-9)
    prandtl = _AIR_PRANDTL
    denominator = 1.0 + 2.443 * reynolds**-0.1 * (prandtl ** (2.0 / 3.0) - 1.0)
    nusselt = 0.037 * reynolds**0.8 * prandtl / denominator
    return np.asarray(nusselt * _AIR_CONDUCTIVITY_WMK / length)


# Dry air at 50 C and one atmosphere; standard tables, from memory.
_AIR_VISCOSITY_M2S, _AIR_CONDUCTIVITY_WMK, _AIR_PRANDTL = 1.788e-5, 0.02803, 0.7011

_MATS: MappingProxyType[str, Callable[[Floats, Floats, Floats], Floats]] = MappingProxyType(
    {
        "mat power law": lambda wind, delta, air: mat_power_law_wm2k(wind),
        "wall linear": lambda wind, delta, air: wall_linear_wm2k(wind),
        "pavement mixed": pavement_mixed_wm2k,
        "rough forced": lambda wind, delta, air: rough_forced_wm2k(wind, delta),
        "plate turbulent": lambda wind, delta, air: np.maximum(
            plate_turbulent_wm2k(wind, 3.5), natural_upward_wm2k(delta)
        ),
    }
)

CONVECTION_METHODS: tuple[str, ...] = tuple(_MATS)


def mat_convection_wm2k(
    wind_ms: Numbers,
    *,
    method: str = "mat power law",
    surface_delta_k: Numbers = 90.0,
    air_c: Numbers = 15.0,
    altitude_m: Numbers = 0.0,
) -> Floats:
    """Convection coefficient [W/m2K] of a mat by a named relation.

    Args:
        wind_ms: wind at 1.5 to 2 m, (...) [m/s].
        method: one of ``CONVECTION_METHODS``.
        surface_delta_k: surface above air, which some relations use, (...) [K].
        air_c: air temperature, which some relations use, (...) [C].
        altitude_m: height of the site; thin air carries less, (...) [m].

    Raises FaultyInput for a wind below 0 and for an unknown name, listing the known ones.
    Validity: 0 to 10 m/s. The relations differ by a factor of two at the same wind; 7.4 + 6.39
    V^0.75 is the usual choice, as it reproduced measured curves best.
    Source: beside each relation; the forced part goes with the power 0.75 of pressure (derived).
    """
    wind = np.asarray(wind_ms, float)
    if (wind < 0).any():
        raise FaultyInput.of("wind-negative", "Wind speed cannot be negative.", field="wind_ms")
    if method not in _MATS:
        raise FaultyInput.of(
            "convection-unknown",
            f"'{method}' is not a known relation for convection.",
            f"Known: {', '.join(CONVECTION_METHODS)}.",
            field="method",
            value=method,
        )
    delta, air = np.asarray(surface_delta_k, float), np.asarray(air_c, float)
    calm = _MATS[method](np.zeros_like(wind), delta, air)
    forced = _MATS[method](wind, delta, air) - calm
    return np.asarray(calm + forced * pressure_share(altitude_m) ** 0.75)
