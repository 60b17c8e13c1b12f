"""Stretches of a series: where a condition holds, where a value does not change."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

Floats = NDArray[np.float64]
Bools = NDArray[np.bool_]
Places = NDArray[np.intp]


def stretches(holds: Bools) -> tuple[Places, Places]:
    """First and one-past-last index of every stretch in which ``holds`` is true."""
    edges = np.diff(np.concatenate(([False], holds, [False])).astype(np.int8))
    return np.flatnonzero(edges == 1), np.flatnonzero(edges == -1)


def stretches_of_equal(
    values: Floats, time_s: Floats, longest_gap_s: float
) -> tuple[Places, Places]:
    """First and one-past-last index of every stretch of one value; NaN and gaps end a stretch."""
    known = np.flatnonzero(np.isfinite(values))
    if not len(known):
        return known, known
    new = (
        (np.diff(values[known]) != 0)
        | (np.diff(known) > 1)
        | (np.diff(time_s[known]) > longest_gap_s)
    )
    first = np.concatenate(([0], np.flatnonzero(new) + 1))
    last = np.concatenate((first[1:], [len(known)])) - 1
    return known[first], known[last] + 1


def elapsed_s(time_s: Floats, starts: Places, ends: Places) -> Floats:
    """Time [s] each stretch stands for, up to the row after it where the next row is usual."""
    steps = np.diff(time_s)
    usual_s = float(np.median(steps)) if len(steps) else 0.0
    return time_s[ends - 1] - time_s[starts] + usual_s
