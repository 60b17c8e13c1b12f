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
    refuse_criterion,
    some_cases,
    steps_until_s,
    value_at,
)

_STEPS = 4
_CELLS: dict[Criterion, tuple[int, int]] = {"mean": (8, 8), "mid": (10, 8)}
_FIRST_C = 145.0
_WITHIN_C = 0.0, 390.0  # where the runs are made, whatever the answer


def laydown_needed_c(
    mat: Mat, rolling_s: Numbers, end_c: Numbers, *, criterion: Criterion = "mean"
) -> Floats:
    """Laydown temperature [C] from which the mat is at its end temperature when the time is over.

    The temperature after a fixed time is a nearly straight function of the laydown temperature: two
    quick runs give its slope, a full run close to the answer gives its place.

    Args:
        mat: the mat, its base and its weather.
        rolling_s: rolling time wanted, (...) [s].
        end_c: temperature at which rolling ends, (...) [C].
        criterion: which temperature of the mat is meant, as in ``rolling_time_s``.

    Validity: within 0.05 K of the full solver. The answer is computed whatever it is; whether a mix
    may be that hot is for limits to say.
    Source: derived.
    """
    refuse_criterion(criterion)
    shape = cases_of(mat, rolling_s, end_c)
    every = some_cases(mat, shape, slice(None))
    until, end = (
        np.broadcast_to(np.asarray(one, float), shape).ravel() for one in (rolling_s, end_c)
    )

    times = steps_until_s(every, until, _STEPS)

    def left_c(laydown_c: Floats, grids: int) -> Floats:
        values = chosen(
            cool_mat(every, laydown_c, times, grids=grids, cells=_CELLS[criterion]), criterion
        )
        return value_at(times, values, until)

    first = np.full(until.shape, _FIRST_C)
    left = left_c(first, 1)
    cold = np.minimum(every.base_c, end - 20.0)
    rough = np.maximum((left - cold) / (_FIRST_C - cold), 0.05)
    # kept 5 K away from the first, so that the slope between them is one
    second = _kept_off(first, first + (end - left) / rough)
    left_second = left_c(second, 1)
    slope = (left_second - left) / (second - first)
    near = np.clip(second + (end - left_second) / slope, *_WITHIN_C)
    return np.asarray(near + (end - left_c(near, 2)) / slope).reshape(shape)


def _kept_off(first_c: Floats, second_c: Floats) -> Floats:
    step = np.clip(second_c, *_WITHIN_C) - first_c
    return np.asarray(first_c + np.where(step < 0, np.minimum(step, -5.0), np.maximum(step, 5.0)))
