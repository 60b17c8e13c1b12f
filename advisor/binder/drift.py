"""Successive certificates of one source: drift seen before a limit is crossed."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from advisor.errors import MissingInput

Floats = NDArray[np.float64]

# Cumulative sums with half a standard deviation allowed and a limit of five: about one false
# signal in 465 certificates, and a shift of one deviation seen after about ten (Montgomery,
# Introduction to Statistical Quality Control, table of run lengths; from memory).
ALLOWED_SD, LIMIT_SD = 0.5, 5.0
BASELINE = 8
FEWEST_BASELINE = 5


@dataclass(frozen=True, eq=False)
class DriftChart:
    """Cumulative sums of n certificates: ``rising`` and ``falling`` (n,) in standard deviations.

    ``signal`` is the first certificate outside the limit, ``since`` the one from which the run
    began, both None where all is quiet.
    """

    centre: float
    sd: float
    values: Floats
    rising: Floats
    falling: Floats
    limit: float
    signal: int | None
    since: int | None
    sentence: str


def drift_chart(
    values: ArrayLike, test_sd: float, unit: str, baseline: int = BASELINE
) -> DriftChart:
    """Control chart of one figure over the certificates of one source, oldest first.

    Centre and spread come from the first certificates; the spread is never taken below that of
    the test itself.

    Args:
        values: the figure of each certificate [any unit], shape (n,), oldest first.
        test_sd: standard deviation of the test within its laboratory [same unit].
        unit: unit to name in the sentence.
        baseline: how many certificates set the centre.

    Raises:
        MissingInput: fewer than five certificates.

    Source: cumulative sums, Page 1954, Biometrika 41.
    """
    x = np.asarray(values, float)
    count = min(baseline, x.size)
    if count < FEWEST_BASELINE:
        raise MissingInput.of(
            "few-certificates",
            f"A control chart needs {FEWEST_BASELINE} certificates of one source; {x.size} given.",
            "Collect more before judging drift.",
            field="certificates",
        )
    centre = float(x[:count].mean())
    # differences of neighbours: a drift inside the baseline does not hide itself
    moving = float(np.mean(np.abs(np.diff(x[:count])))) / 1.128
    sd = max(moving, test_sd)
    score = (x - centre) / sd
    rising, falling = _sums(score), _sums(-score)
    outside = np.flatnonzero(np.maximum(rising, falling) > LIMIT_SD)
    signal = int(outside[0]) if outside.size else None
    since = None
    sentence = f"No drift: {x.size} certificates about {centre:.4g} {unit}, spread {sd:.2g} {unit}."
    if signal is not None:
        up = rising[signal] > LIMIT_SD
        sums = rising if up else falling
        quiet = np.flatnonzero(sums[: signal + 1] == 0.0)
        since = int(quiet[-1]) + 1 if quiet.size else 0
        recent = float(x[since : signal + 1].mean())
        sentence = (
            f"Drift {'upwards' if up else 'downwards'} since certificate {since + 1}: on average "
            f"{recent:.4g} {unit} against {centre:.4g} before, seen at certificate {signal + 1}. "
            "Ask the supplier what changed and confirm with a test of your own."
        )
    return DriftChart(centre, sd, x, rising, falling, LIMIT_SD, signal, since, sentence)


def _sums(score: Floats) -> Floats:
    found = np.empty_like(score)
    total = 0.0
    for index, value in enumerate(score):
        total = max(0.0, total + float(value) - ALLOWED_SD)
        found[index] = total
    return found
