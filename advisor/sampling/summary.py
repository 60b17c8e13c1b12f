"""What draws of an output say: quantiles, shares and which input adds how much."""

from __future__ import annotations

from collections.abc import Mapping

import numpy as np
from numpy.typing import ArrayLike, NDArray

Floats = NDArray[np.float64]


def quantile(draws: ArrayLike, probability: float) -> Floats:
    """Quantile of each row of ``draws`` (..., count), in the unit of the draws; shape (...).

    Infinite draws are allowed and stay infinite where they reach the quantile.
    """
    ordered = np.sort(np.asarray(draws, float), axis=-1)
    place = probability * (ordered.shape[-1] - 1)
    below = int(np.floor(place))
    above = min(below + 1, ordered.shape[-1] - 1)
    low, high = ordered[..., below], ordered[..., above]
    part = place - below
    with np.errstate(invalid="ignore"):
        between = low + part * (high - low)
    found: Floats = np.where(np.isfinite(high) | (part == 0.0), between, high)
    found = np.where(np.isfinite(low), found, low)
    return found


def share_true(draws: ArrayLike) -> Floats:
    """Share [1] of draws that are true along the last axis."""
    share: Floats = np.mean(np.asarray(draws, bool), axis=-1)
    return share


def contributions_sd(output: ArrayLike, inputs: Mapping[str, ArrayLike]) -> dict[str, float]:
    """Standard deviation each input adds to ``output``, in the unit of the output, largest first.

    ``output`` has shape (count,), each input too. The output is regressed linearly on the
    standardised inputs; what the line does not explain is called 'interaction'.
    """
    found = np.asarray(output, float)
    centred = found - found.mean()
    names = [name for name, values in inputs.items() if np.std(np.asarray(values, float)) > 0]
    if not names or not np.all(np.isfinite(found)):
        return {}
    columns = np.stack([np.asarray(inputs[name], float) for name in names], axis=-1)
    columns = (columns - columns.mean(axis=0)) / columns.std(axis=0)
    weights, *_ = np.linalg.lstsq(columns, centred, rcond=None)
    shares = {name: abs(float(weight)) for name, weight in zip(names, weights, strict=True)}
    shares["interaction"] = float(np.std(centred - columns @ weights))
    return dict(sorted(shares.items(), key=lambda pair: -pair[1]))
