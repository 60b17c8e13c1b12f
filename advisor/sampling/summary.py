"""What draws of an output say: quantiles, shares and which input adds how much."""

from __future__ import annotations

from collections.abc import Mapping

import numpy as np
from numpy.typing import ArrayLike, NDArray

Floats = NDArray[np.float64]


def quantile(draws: ArrayLike, probability: float) -> Floats:
    """Quantile of each row of draws, in the unit of the draws [any]; shape (...).

    Infinite draws are allowed and stay infinite where they reach the quantile.

    Args:
        draws: draws of one output or of many [any], shape (..., count).
        probability: share of the draws below the quantile [1], 0 to 1.
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
    """Share [1] of draws that are true along the last axis.

    Args:
        draws: true or false for each draw [1], shape (..., count).
    """
    share: Floats = np.mean(np.asarray(draws, bool), axis=-1)
    return share


def contributions_sd(output: ArrayLike, inputs: Mapping[str, ArrayLike]) -> dict[str, float]:
    """Standard deviation each input adds to an output, in its unit [any], largest first.

    The output is regressed linearly on the standardised inputs; what the line does not explain
    is called 'interaction'.

    Args:
        output: draws of the output [any], shape (count,).
        inputs: the draws of each input by its name, each in its own unit [any], shape (count,).
    """
    found = np.asarray(output, float)
    centred = found - found.mean()
    names = [name for name, values in inputs.items() if np.std(np.asarray(values, float)) > 0]
    if not names or not np.all(np.isfinite(found)):
        return {}
    columns = np.stack([np.asarray(inputs[name], float) for name in names], axis=-1)
    columns = (columns - columns.mean(axis=0)) / columns.std(axis=0)
    # Through the small matrix of products: the columns are as good as independent.
    weights, *_ = np.linalg.lstsq(columns.T @ columns, columns.T @ centred, rcond=None)
    shares = {name: abs(float(weight)) for name, weight in zip(names, weights, strict=True)}
    shares["interaction"] = float(np.std(centred - columns @ weights))
    return dict(sorted(shares.items(), key=lambda pair: -pair[1]))
