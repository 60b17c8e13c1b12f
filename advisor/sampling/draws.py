"""Draws from the distributions of uncertain inputs, shared by name."""

from __future__ import annotations

import zlib
from dataclasses import dataclass, field
from functools import lru_cache

import numpy as np
from numpy.typing import ArrayLike, NDArray
from scipy.special import ndtr, ndtri

Floats = NDArray[np.float64]


@lru_cache(maxsize=256)
def _scores(count: int, seed: int, name: str) -> Floats:
    # The name, not the order of asking, seeds the column: whoever asks for 'wind' gets the same
    # draws, so that a shared cause stays shared through the whole chain.
    generator = np.random.default_rng([seed, zlib.crc32(name.encode())])
    scores: Floats = ndtri((generator.permutation(count) + generator.random(count)) / count)
    scores.setflags(write=False)
    return scores


@dataclass(frozen=True)
class Draws:
    """``count`` joint draws of any number of named inputs.

    Each column is a Latin hypercube of standard normal scores (McKay, Beckman and Conover 1979,
    Technometrics 21(2)): one draw in each of ``count`` equally likely strata, so that a few
    hundred draws give stable tails. Columns of different names are independent.
    """

    count: int
    seed: int = 20261
    asked: dict[str, None] = field(default_factory=dict, compare=False, repr=False)

    def __post_init__(self) -> None:
        if self.count < 2:
            raise ValueError(f"count is {self.count}; at least 2 draws are needed")

    def scores(self, name: str) -> Floats:
        """Standard normal scores [1] of shape (count,) of the input called ``name``."""
        self.asked[name] = None
        return _scores(self.count, self.seed, name)

    def normal(self, name: str, mean: ArrayLike, sd: ArrayLike) -> Floats:
        """Normal draws; ``mean`` and ``sd`` in the unit wanted, shape (...), give (..., count)."""
        return _column(mean) + _column(sd) * self.scores(name)

    def lognormal(self, name: str, median: ArrayLike, sd_of_log: ArrayLike) -> Floats:
        """Lognormal draws about ``median``, the log having ``sd_of_log``; shape (..., count)."""
        return _column(median) * np.exp(_column(sd_of_log) * self.scores(name))

    def uniform(self, name: str, low: ArrayLike, high: ArrayLike) -> Floats:
        """Uniform draws between ``low`` and ``high``; shape (..., count)."""
        low, high = _column(low), _column(high)
        drawn: Floats = low + (high - low) * ndtr(self.scores(name))
        return drawn

    def triangular(self, name: str, low: ArrayLike, mode: ArrayLike, high: ArrayLike) -> Floats:
        """Triangular draws with the ends and the mode given; shape (..., count)."""
        low, mode, high = _column(low), _column(mode), _column(high)
        share = ndtr(self.scores(name))
        width = np.maximum(high - low, np.finfo(float).tiny)
        rising = low + np.sqrt(np.maximum(share * width * (mode - low), 0.0))
        falling = high - np.sqrt(np.maximum((1.0 - share) * width * (high - mode), 0.0))
        drawn: Floats = np.where(share * width < mode - low, rising, falling)
        return drawn

    def multinormal(self, name: str, mean: ArrayLike, covariance: ArrayLike) -> Floats:
        """Correlated normal draws of a vector.

        ``mean`` of shape (..., k) and ``covariance`` of shape (..., k, k) give (..., count, k);
        the k columns are called ``name`` with a number behind it.
        """
        mean = np.asarray(mean, float)
        covariance = np.asarray(covariance, float)
        width = mean.shape[-1]
        scores = np.stack([self.scores(f"{name} {i + 1}") for i in range(width)], axis=-1)
        # Eigenvectors rather than Cholesky: a covariance of exact inputs is singular.
        values, vectors = np.linalg.eigh(covariance)
        root = vectors * np.sqrt(np.maximum(values, 0.0))[..., None, :]
        drawn: Floats = mean[..., None, :] + scores @ np.swapaxes(root, -1, -2)
        return drawn


def _column(values: ArrayLike) -> Floats:
    return np.asarray(values, float)[..., None]
