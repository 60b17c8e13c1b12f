"""The viscosity curve of one binder, or of thousands at once, with its uncertainty."""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import Literal

import numpy as np
from numpy.typing import ArrayLike, NDArray
from scipy.special import ndtri

from advisor.binder.laws import (
    CP_PER_PAS,
    LN_10,
    log_rankine,
    loglog_viscosity,
    temperature_avts,
    temperature_vft,
    viscosity_avts,
    viscosity_vft,
)
from advisor.units import ABSOLUTE_ZERO_C, RANKINE_PER_KELVIN

Floats = NDArray[np.float64]
Law = Literal["avts", "vft"]


@dataclass(frozen=True, eq=False)
class ViscosityCurve:
    """Viscosity against temperature by one law, with the covariance of its parameters.

    ``parameters`` has shape (..., k): (intercept, slope) for 'avts', (level, strength_k, pole_c)
    for 'vft'; ``covariance`` has shape (..., k, k). Leading axes are cases. ``measured_low_c`` to
    ``measured_high_c`` is the span of the readings behind it, NaN where there were none.
    ``basis`` says in words what it rests on, ``notes`` what a reader must know.
    """

    law: Law
    parameters: Floats
    covariance: Floats
    measured_low_c: float = float("nan")
    measured_high_c: float = float("nan")
    basis: str = ""
    notes: tuple[str, ...] = ()

    @property
    def size(self) -> int:
        """Number of parameters of the law: how many normal scores one draw takes."""
        return int(self.parameters.shape[-1])

    def _columns(self) -> tuple[Floats, ...]:
        return tuple(np.moveaxis(self.parameters, -1, 0))

    def viscosity_pas(self, temperature_c: ArrayLike) -> Floats:
        """Dynamic viscosity [Pa.s] at a temperature.

        Args:
            temperature_c: temperature [C], broadcast against the cases.
        """
        law = viscosity_avts if self.law == "avts" else viscosity_vft
        return law(temperature_c, *self._columns())

    def temperature_c(self, viscosity_pas: ArrayLike) -> Floats:
        """Temperature [C] at which the curve has a viscosity.

        Args:
            viscosity_pas: dynamic viscosity [Pa.s], broadcast against the cases.
        """
        law = temperature_avts if self.law == "avts" else temperature_vft
        return law(viscosity_pas, *self._columns())

    def relative_sd(self, temperature_c: ArrayLike) -> Floats:
        """Standard deviation [1] of the natural logarithm of viscosity at a temperature.

        Args:
            temperature_c: temperature [C], broadcast against the cases.
        """
        temperature = np.asarray(temperature_c, float)
        if self.law == "avts":
            x = log_rankine(temperature)
            loglog = self.parameters[..., 0] + self.parameters[..., 1] * x
            # d ln(eta) = ln10^2 * log10(cP) * d loglog, and log10(cP) = 10**loglog
            scale = LN_10**2 * 10.0**loglog
            gradient = np.stack(np.broadcast_arrays(scale, scale * x), axis=-1)
        else:
            _, strength, pole = self._columns()
            above = temperature - pole
            gradient = LN_10 * np.stack(
                np.broadcast_arrays(1.0, 1.0 / above, strength / above**2), axis=-1
            )
        variance = np.einsum("...i,...ij,...j->...", gradient, self.covariance, gradient)
        found: Floats = np.sqrt(np.maximum(variance, 0.0))
        return found

    def log_slope_per_k(self, temperature_c: ArrayLike) -> Floats:
        """Change of ln(viscosity) [1/K] with temperature, negative.

        Args:
            temperature_c: temperature [C], broadcast against the cases.
        """
        temperature = np.asarray(temperature_c, float)
        if self.law == "avts":
            kelvin = temperature - ABSOLUTE_ZERO_C
            nepers = np.log(self.viscosity_pas(temperature) * CP_PER_PAS)
            avts: Floats = self.parameters[..., 1] * nepers / kelvin
            return avts
        _, strength, pole = self._columns()
        vft: Floats = -LN_10 * strength / (temperature - pole) ** 2
        return vft

    def temperature_sd_k(self, viscosity_pas: ArrayLike) -> Floats:
        """Standard deviation [K] of the temperature at which the curve has a viscosity.

        Args:
            viscosity_pas: dynamic viscosity [Pa.s], broadcast against the cases.
        """
        temperature = self.temperature_c(viscosity_pas)
        found: Floats = self.relative_sd(temperature) / np.abs(self.log_slope_per_k(temperature))
        return found

    def viscosity_band_pas(
        self, temperature_c: ArrayLike, confidence: float = 0.95
    ) -> tuple[Floats, Floats]:
        """Lower and upper viscosity [Pa.s] of the band at a temperature.

        Args:
            temperature_c: temperature [C], broadcast against the cases.
            confidence: share of cases the band is to cover [1].
        """
        score = two_sided_score(confidence)
        middle = self.viscosity_pas(temperature_c)
        if self.law == "avts":
            # exact in the loglog, where the error is normal; the plain logarithm is skewed
            nepers = np.log(middle * CP_PER_PAS)
            reach = np.exp(score * self.relative_sd(temperature_c) / nepers)
            with np.errstate(over="ignore"):
                return np.exp(nepers / reach) / CP_PER_PAS, np.exp(nepers * reach) / CP_PER_PAS
        factor = np.exp(score * self.relative_sd(temperature_c))
        return middle / factor, middle * factor

    def temperature_interval_c(
        self, viscosity_pas: ArrayLike, confidence: float = 0.95
    ) -> tuple[Floats, Floats]:
        """Lowest and highest temperature [C] at which the band holds a viscosity.

        Infinite where the readings do not even fix the sign of the slope.

        Args:
            viscosity_pas: dynamic viscosity [Pa.s], broadcast against the cases.
            confidence: share of cases the interval is to cover [1].

        Source: Fieller 1954, J. R. Stat. Soc. B 16 (interval of a ratio, from memory) for the
        A-VTS line; first-order propagation for VFT.
        """
        score = two_sided_score(confidence)
        if self.law == "avts":
            return self._fieller_c(viscosity_pas, score)
        middle = self.temperature_c(viscosity_pas)
        reach = score * self.temperature_sd_k(viscosity_pas)
        return middle - reach, middle + reach

    def _fieller_c(self, viscosity_pas: ArrayLike, score: float) -> tuple[Floats, Floats]:
        # Points u where (miss - slope*u)^2 = score^2 * variance(u), u counted from the
        # estimate itself, so that nothing is lost by cancellation.
        middle = self.temperature_c(viscosity_pas)
        x = log_rankine(middle)
        slope = self.parameters[..., 1]
        var_a, cov, var_s = (self.covariance[..., i, j] for i, j in ((0, 0), (0, 1), (1, 1)))
        var_here = np.maximum(var_a + 2.0 * x * cov + x**2 * var_s, 0.0)
        cov_here = cov + x * var_s
        square = slope**2 - score**2 * var_s
        half = score**2 * cov_here
        root = np.sqrt(np.maximum(half**2 + square * score**2 * var_here, 0.0))
        with np.errstate(divide="ignore", invalid="ignore"):
            low, high = (half - root) / square, (half + root) / square
        bounded = square > 0.0
        low_c = 10.0 ** np.where(bounded, x + low, 0.0) / RANKINE_PER_KELVIN + ABSOLUTE_ZERO_C
        high_c = 10.0 ** np.where(bounded, x + high, 0.0) / RANKINE_PER_KELVIN + ABSOLUTE_ZERO_C
        return np.where(bounded, low_c, -np.inf), np.where(bounded, high_c, np.inf)

    def draws(self, scores: ArrayLike) -> ViscosityCurve:
        """Curve per draw, exact each, whose spread is the covariance of this single curve.

        Args:
            scores: standard normal scores [1] of shape (n, k), k at least ``size``.
        """
        columns = np.asarray(scores, float)[..., : self.size]
        # Eigenvectors rather than Cholesky: two exact points leave a singular covariance.
        values, vectors = np.linalg.eigh(self.covariance)
        root = vectors * np.sqrt(np.maximum(values, 0.0))
        drawn = self.parameters + columns @ root.T
        return replace(
            self, parameters=drawn, covariance=np.zeros((*drawn.shape, self.size)), notes=()
        )

    def outside_measured_k(self, temperature_c: ArrayLike) -> Floats:
        """Distance [K] by which a temperature lies outside the readings; 0 inside, NaN if none.

        Args:
            temperature_c: temperature [C], any shape.
        """
        temperature = np.asarray(temperature_c, float)
        below = self.measured_low_c - temperature
        above = temperature - self.measured_high_c
        found: Floats = np.maximum(np.maximum(below, above), 0.0)
        return found

    def noted(self, *notes: str) -> ViscosityCurve:
        """The same curve with more notes."""
        return replace(self, notes=(*self.notes, *notes))


def curve_avts(
    intercept: ArrayLike,
    slope: ArrayLike,
    covariance: ArrayLike | None = None,
    basis: str = "",
) -> ViscosityCurve:
    """A-VTS curve of known constants.

    Args:
        intercept: A [1] (centipoise, degrees Rankine), any shape.
        slope: VTS [1], same shape.
        covariance: covariance of the two [1], shape (..., 2, 2); none means exact.
        basis: words on where the constants come from.
    """
    parameters = np.stack(
        np.broadcast_arrays(np.asarray(intercept, float), np.asarray(slope, float)), axis=-1
    )
    spread = np.zeros((*parameters.shape, 2)) if covariance is None else np.asarray(covariance)
    return ViscosityCurve("avts", parameters, spread, basis=basis)


def curve_through(
    low_c: ArrayLike, low_pas: ArrayLike, high_c: ArrayLike, high_pas: ArrayLike
) -> ViscosityCurve:
    """Exact A-VTS curve through two points, any number of cases at once.

    Args:
        low_c: one temperature [C].
        low_pas: viscosity there [Pa.s].
        high_c: another temperature [C].
        high_pas: viscosity there [Pa.s].

    Source: ASTM D2493, the straight line of its chart.
    """
    low_x, high_x = log_rankine(low_c), log_rankine(high_c)
    low_y, high_y = loglog_viscosity(low_pas), loglog_viscosity(high_pas)
    slope = (high_y - low_y) / (high_x - low_x)
    return curve_avts(low_y - slope * low_x, slope)


def two_sided_score(confidence: float) -> float:
    """Normal score [1] that leaves ``confidence`` between its negative and itself.

    Args:
        confidence: share inside [1], 0 to 1.
    """
    return float(ndtri(0.5 + 0.5 * confidence))
