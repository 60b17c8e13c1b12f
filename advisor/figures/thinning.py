"""A long trace made short enough to draw, with its peaks and its gaps kept."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from advisor.figures.drawn import Trace


def thinned(trace: Trace, most: int = 2000) -> Trace:
    """The trace in at most about ``most`` points: lowest and highest of each stretch of time.

    Parameters
    ----------
    trace : Trace, times rising
    most : most points wanted, at least 4

    A stretch that holds a gap keeps one NaN after its extremes, so that the line stays open there.
    """
    count = trace.times.size
    if count <= most:
        return trace
    chunk = int(np.ceil(count / (most / 2)))
    kept: list[int] = []
    for begin in range(0, count, chunk):
        values = trace.values_c[begin : begin + chunk]
        known = np.flatnonzero(np.isfinite(values))
        if known.size:
            low = known[np.argmin(values[known])]
            high = known[np.argmax(values[known])]
            kept += sorted({begin + int(low), begin + int(high)})
        if known.size < values.size:
            missing = np.flatnonzero(~np.isfinite(values))
            kept.append(begin + int(missing[-1]))
    order: NDArray[np.int64] = np.unique(np.array(kept, dtype=np.int64))
    return Trace(trace.times[order], trace.values_c[order])


def with_gaps(trace: Trace, longest_s: float) -> Trace:
    """The trace with a NaN put in wherever two readings are more than ``longest_s`` apart."""
    if trace.times.size < 2:
        return trace
    apart_s = np.diff(trace.times) / np.timedelta64(1, "s")
    wide = np.flatnonzero(apart_s > longest_s)
    middle = trace.times[wide] + (trace.times[wide + 1] - trace.times[wide]) // 2
    return Trace(
        np.insert(trace.times, wide + 1, middle),
        np.insert(trace.values_c.astype(np.float64), wide + 1, np.nan),
    )
