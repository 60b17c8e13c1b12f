"""The mat backwards: which laydown temperature leaves the rolling time that is wanted."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike, NDArray

from advisor.heat.mat import Criterion, Mat, cases_of, chosen, cool_mat, steps_until_s, value_at

Floats = NDArray[np.float64]

_STEPS_QUICK, _STEPS = 12, 20
_FIRST_C, _SECOND_C = 130.0, 160.0


def laydown_needed_c(
    mat: Mat, rolling_s: ArrayLike, end_c: ArrayLike, *, criterion: Criterion = "mean"
) -> Floats:
    """Laydown temperature [C] from which the mat is still at ``end_c`` after ``rolling_s`` [s].

    ``criterion`` as in ``rolling_time_s``. The temperature after a fixed time is a nearly
    straight function of the laydown temperature: two quick runs give its slope, one full run
    close to the answer gives its place. Accurate to 0.05 K of the full solver.

    The answer is computed whatever it is; whether a mix may be that hot is for limits to say.
    """
    shape = cases_of(mat, rolling_s, end_c)
    until = np.broadcast_to(np.asarray(rolling_s, float), shape)
    end = np.asarray(end_c, float)

    def left_c(laydown_c: ArrayLike, steps: int, grids: int) -> Floats:
        times = steps_until_s(mat, until, steps)
        values = chosen(cool_mat(mat, laydown_c, times, grids=grids), criterion)
        return value_at(times, values, until).reshape(shape)

    low, high = left_c(_FIRST_C, _STEPS_QUICK, 1), left_c(_SECOND_C, _STEPS_QUICK, 1)
    slope = (high - low) / (_SECOND_C - _FIRST_C)
    near = _FIRST_C + (end - low) / slope
    near = np.clip(near, 0.0, 390.0)
    return np.asarray(near + (end - left_c(near, _STEPS, 2)) / slope)
