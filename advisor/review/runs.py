"""Stretches of a series: where they begin and end, and when a value is outside its window.

Arrays of one dimension in, indices out; times in seconds, ascending.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

Bools = NDArray[np.bool_]
Floats = NDArray[np.float64]
Ints = NDArray[np.intp]


def run_edges(mask: Bools) -> tuple[Ints, Ints]:
    """First and one-past-last index of every stretch of true in ``mask``."""
    padded = np.concatenate(([False], mask, [False])).astype(np.int8)
    steps = np.diff(padded)
    return np.flatnonzero(steps == 1), np.flatnonzero(steps == -1)


def change_edges(values: NDArray[np.generic]) -> tuple[Ints, Ints]:
    """First and one-past-last index of every stretch of equal ``values``."""
    if len(values) == 0:
        nothing = np.zeros(0, np.intp)
        return nothing, nothing
    starts = np.concatenate(([0], np.flatnonzero(values[1:] != values[:-1]) + 1))
    return starts, np.concatenate((starts[1:], [len(values)]))


def row_durations_s(time_s: Floats, longest_s: float) -> Floats:
    """Time [s] each row stands for: until the next row, or the usual step before a gap.

    A gap is a step longer than ``longest_s`` [s]: time nobody saw, not filled with a reading.
    """
    if len(time_s) == 0:
        return np.zeros(0)
    steps = np.diff(time_s)
    usual = float(np.median(steps)) if len(steps) else longest_s
    return np.append(np.where(steps > longest_s, usual, steps), usual)


def outside_runs(
    time_s: Floats, over_k: Floats, dead_band_k: float, on_delay_s: float, longest_s: float
) -> tuple[Ints, Ints]:
    """First and one-past-last index of every excursion of ``over_k`` [K] above 0.

    An excursion begins with the first row of a stretch above 0 that lasts at least
    ``on_delay_s`` [s], and ends when the value has fallen to ``dead_band_k`` [K] below 0 or less.
    A missing value (NaN) or a gap longer than ``longest_s`` [s] ends it: what was not seen is not
    counted. Dead band and delay as in common practice of plant alarms, no source.
    """
    count = len(time_s)
    if count == 0:
        return np.zeros(0, np.intp), np.zeros(0, np.intp)
    after_gap = np.concatenate(([True], np.diff(time_s) > longest_s))
    above = over_k > 0
    begins = np.flatnonzero(above & (after_gap | ~np.concatenate(([False], above[:-1]))))
    seen_s = np.where(above, row_durations_s(time_s, longest_s), 0.0)
    lasted_s = np.add.reduceat(seen_s, begins) if len(begins) else np.zeros(0)
    begins = begins[lasted_s >= on_delay_s]
    # NaN compares false, so a missing value ends an excursion as well.
    ended = np.append(np.flatnonzero(~(over_k > -dead_band_k) | after_gap), count)
    ends = ended[np.searchsorted(ended, begins, side="right")]
    # Stretches that end together are one excursion: the dead band joined them.
    first = np.concatenate(([True], ends[1:] != ends[:-1])) if len(ends) else np.zeros(0, bool)
    return begins[first], ends[first]
