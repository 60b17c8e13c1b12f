"""The mat backwards: which laydown temperature leaves the rolling time that is wanted."""

from __future__ import annotations

import numpy as np

from advisor.heat.arrays import Floats, Numbers
from advisor.heat.mat import (
    Criterion,
    Mat,
    cases_of,
    chosen,
    cool_mat,
    some_cases,
    steps_until_s,
    value_at,
)

_STEPS_QUICK, _STEPS = 12, 20
_FIRST_C, _SECOND_C = 130.0, 160.0


def laydown_needed_c(
    mat: Mat, rolling_s: Numbers, end_c: Numbers, *, criterion: Criterion = "mean"
) -> Floats:
    """Laydown temperature [C] from which the mat is at its end temperature when the time is over.

    The temperature after a fixed time is a nearly straight function of the laydown temperature: two
    quick runs give its slope, one full run close to the answer gives its place.

    Args:
        mat: the mat, its base and its weather.
        rolling_s: rolling time wanted, (...) [s].
        end_c: temperature at which rolling ends, (...) [C].
        criterion: which temperature of the mat is meant, as in ``rolling_time_s``.

    Validity: within 0.05 K of the full solver. The answer is computed whatever it is; whether a mix
    may be that hot is for limits to say.
    Source: derived.
    """
    shape = cases_of(mat, rolling_s, end_c)
    every = some_cases(mat, shape, slice(None))
    until, end = (
        np.broadcast_to(np.asarray(one, float), shape).ravel() for one in (rolling_s, end_c)
    )

    def left_c(laydown_c: Numbers, steps: int, grids: int) -> Floats:
        times = steps_until_s(every, until, steps)
        values = chosen(cool_mat(every, laydown_c, times, grids=grids), criterion)
        return value_at(times, values, until)

    low, high = left_c(_FIRST_C, _STEPS_QUICK, 1), left_c(_SECOND_C, _STEPS_QUICK, 1)
    slope = (high - low) / (_SECOND_C - _FIRST_C)
    near = np.clip(_FIRST_C + (end - low) / slope, 0.0, 390.0)
    return np.asarray(near + (end - left_c(near, _STEPS, 2)) / slope).reshape(shape)
