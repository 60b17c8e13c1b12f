"""Heat lost between the drum and the silo."""

from __future__ import annotations

import numpy as np

from advisor.errors import FaultyInput
from advisor.heat.arrays import Floats, Numbers


def transfer_drop_k(
    mix_c: Numbers,
    air_c: Numbers,
    rate_kgs: Numbers,
    length_m: Numbers,
    girth_m: Numbers,
    coefficient_wm2k: Numbers,
    specific_heat_jkgk: Numbers,
) -> Floats:
    """Drop [K] of mix along the conveyor from the drum to the silo.

    Args:
        mix_c: temperature where it enters, (...) [C].
        air_c: air temperature, (...) [C].
        rate_kgs: rate of mix, (...) [kg/s].
        length_m: length of the conveyor, (...) [m].
        girth_m: its casing around, (...) [m].
        coefficient_wm2k: through the casing, (...) [W/m2K].
        specific_heat_jkgk: of the mix, (...) [J/kgK].

    Raises FaultyInput where the rate is not above 0.
    Validity: a warm conveyor; a cold chain takes heat from the first 10 to 20 t besides (from
    memory).
    Source: plug flow, excess times 1 - exp(-U A/(m c)) (derived).
    """
    rate = np.asarray(rate_kgs, float)
    if (rate <= 0).any():
        raise FaultyInput.of(
            "rate-not-positive", "The rate of a running conveyor is above 0.", field="rate_kgs"
        )
    conductance = (
        np.asarray(coefficient_wm2k, float)
        * np.asarray(length_m, float)
        * np.asarray(girth_m, float)
    )
    share = -np.expm1(-conductance / (rate * np.asarray(specific_heat_jkgk, float)))
    return np.asarray(share * (np.asarray(mix_c, float) - np.asarray(air_c, float)))
