"""Heat lost between the drum and the silo."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike, NDArray

from advisor.errors import FaultyInput

Floats = NDArray[np.float64]


def transfer_drop_k(
    mix_c: ArrayLike,
    air_c: ArrayLike,
    rate_kgs: ArrayLike,
    length_m: ArrayLike,
    girth_m: ArrayLike,
    coefficient_wm2k: ArrayLike,
    specific_heat_jkgk: ArrayLike,
) -> Floats:
    """Drop [K] of mix that enters a conveyor at ``mix_c`` [C], along its length.

    Excess times 1 - exp(-U A/(m c)) (plug flow; derived). ``rate_kgs`` of mix, conveyor of
    ``length_m`` and ``girth_m`` around, ``coefficient_wm2k`` to the air. Warm conveyor: a cold
    chain takes heat from the first 10 to 20 t besides (from memory).

    Raises FaultyInput where the rate is not above 0.
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
