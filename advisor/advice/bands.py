"""A quantity told as a band: low, usual and high of its draws."""

from __future__ import annotations

from dataclasses import dataclass

from numpy.typing import ArrayLike

from advisor.sampling import quantile

_LOW, _HIGH = 0.05, 0.95


@dataclass(frozen=True)
class Band:
    """5 %, 50 % and 95 % of a quantity, in its own unit."""

    low: float
    usual: float
    high: float


def band_of(draws: ArrayLike) -> Band:
    """The band of ``draws`` (count,), in their unit."""
    low, usual, high = (float(quantile(draws, share)) for share in (_LOW, 0.5, _HIGH))
    return Band(low, usual, high)
