"""The A-VTS line through readings by generalised least squares, with or without a prior."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray
from scipy.special import chdtrc, ndtr

from advisor.binder.curve import ViscosityCurve, curve_avts
from advisor.binder.laws import LN_10, log_rankine, loglog_viscosity
from advisor.errors import FaultyInput, MissingInput

Floats = NDArray[np.float64]

# The line is fitted about 100 C, where its two constants are nearly uncorrelated.
_CENTRE = float(log_rankine(100.0))
_TO_CENTRE = np.array([[1.0, _CENTRE], [0.0, 1.0]])
_FROM_CENTRE = np.array([[1.0, -_CENTRE], [0.0, 1.0]])
# Below this probability the readings do not agree with a line within their precision: the
# covariance is then widened by chi2 per degree of freedom (Birge 1932, Phys. Rev. 40; from memory).
DISAGREE_PROBABILITY = 0.05
# Two suspicions closer than this cannot be told apart.
_TELL_APART = 1.1


@dataclass(frozen=True, eq=False)
class AvtsPrior:
    """What is believed of A and VTS before any reading: ``mean`` (2,), ``covariance`` (2, 2)."""

    mean: Floats
    covariance: Floats
    source: str
    how_known: str

    def curve(self) -> ViscosityCurve:
        """The curve where nothing but the grade is known."""
        return curve_avts(
            self.mean[..., 0],
            self.mean[..., 1],
            self.covariance,
            basis=f"grade only: {self.source}",
        )


@dataclass(frozen=True, eq=False)
class AvtsFit:
    """A-VTS line fitted to n readings; leading axes are cases.

    ``covariance`` (..., 2, 2) already holds ``widened`` (...), the factor applied where the
    readings disagree. ``residual_ln`` (..., n) is ln(measured / fitted); ``deleted_score``
    (..., n) is how many standard deviations a reading lies from what all the others (and the
    prior) predict, NaN where the others predict nothing. ``probability`` is that of a chi2 at
    least as large when the line holds, NaN with no degree of freedom.
    """

    intercept: Floats
    slope: Floats
    covariance: Floats
    chi2: Floats
    degrees_of_freedom: int
    probability: Floats
    widened: Floats
    residual_ln: Floats
    deleted_score: Floats
    temperature_c: Floats
    used_prior: bool

    def curve(self) -> ViscosityCurve:
        """The fitted curve with its span of readings."""
        count = self.temperature_c.shape[-1]
        words = f"{count} reading{'s' * (count != 1)}" + " and the grade" * self.used_prior
        return ViscosityCurve(
            "avts",
            np.stack([self.intercept, self.slope], axis=-1),
            self.covariance,
            float(np.min(self.temperature_c)),
            float(np.max(self.temperature_c)),
            basis=words,
        )


@dataclass(frozen=True)
class Suspicion:
    """What the outlier test says: ``index`` of the suspect reading, or None and why not."""

    index: int | None
    score: float
    probability: float
    sentence: str


def prior_from_viscosities(
    temperature_c: ArrayLike,
    viscosity_pas: ArrayLike,
    relative_sd: ArrayLike,
    correlation: float,
    source: str,
    how_known: str,
) -> AvtsPrior:
    """Prior of A and VTS from the typical viscosity at two temperatures and its spread.

    Args:
        temperature_c: two temperatures [C], shape (2,).
        viscosity_pas: median viscosity there [Pa.s], shape (2,).
        relative_sd: standard deviation of ln(viscosity) between sources [1], shape (2,).
        correlation: correlation of the two logarithms [1], -1 to 1.
        source: where the figures come from.
        how_known: 'looked up', 'derived', 'common practice' or 'from memory'.
    """
    y = loglog_viscosity(viscosity_pas)
    sd = np.asarray(relative_sd, float) * _loglog_per_ln(y)
    spread = np.outer(sd, sd) * np.array([[1.0, correlation], [correlation, 1.0]])
    x = log_rankine(temperature_c)
    solve = np.linalg.inv(np.stack([np.ones(2), x], axis=-1))
    return AvtsPrior(solve @ y, solve @ spread @ solve.T, source, how_known)


def fit_avts(
    temperature_c: ArrayLike,
    viscosity_pas: ArrayLike,
    relative_sd: ArrayLike,
    correlation: ArrayLike | None = None,
    prior: AvtsPrior | None = None,
) -> AvtsFit:
    """Best A-VTS line through readings, with covariance, fit and outlier scores.

    Args:
        temperature_c: temperatures [C], shape (..., n).
        viscosity_pas: dynamic viscosities [Pa.s], shape (..., n), above 0.001.
        relative_sd: standard deviation of ln(viscosity) of each reading [1], shape (..., n).
        correlation: correlation of the errors of the readings [1], shape (n, n), for readings
            that share a laboratory's bias; none means independent.
        prior: what the grade says; needed where the readings alone do not fix a line.

    Raises:
        MissingInput: too few readings and no prior.
        FaultyInput: shapes differ, a spread is not positive, all temperatures are one, or the
            viscosity rises with temperature.

    Source: generalised least squares on the axes of ASTM D2493 (Aitken 1935); with a prior, the
    normal posterior of the same model.
    """
    t, eta, sd = np.broadcast_arrays(
        *(np.asarray(part, float) for part in (temperature_c, viscosity_pas, relative_sd))
    )
    count = t.shape[-1]
    _check(t, sd, count, prior)
    x, y = log_rankine(t) - _CENTRE, loglog_viscosity(eta)
    sd_y = sd * _loglog_per_ln(y)
    shared = np.eye(count) if correlation is None else np.asarray(correlation, float)
    weight = np.linalg.inv(sd_y[..., :, None] * sd_y[..., None, :] * shared)

    design = np.stack([np.ones_like(x), x], axis=-1)
    wx = weight @ design
    normal = np.swapaxes(design, -1, -2) @ wx
    right = np.einsum("...ij,...i->...j", wx, y)
    believed = np.zeros(2)
    precision = np.zeros((2, 2))
    if prior is not None:
        believed = _TO_CENTRE @ prior.mean
        precision = np.linalg.inv(_TO_CENTRE @ prior.covariance @ _TO_CENTRE.T)
        normal = normal + precision
        right = right + precision @ believed
    covariance = np.linalg.inv(normal)
    centred = np.einsum("...ij,...j->...i", covariance, right)
    if np.any(centred[..., 1] >= 0.0):
        raise FaultyInput.of(
            "rising-viscosity",
            "The viscosity rises with temperature.",
            "Check the temperatures and units of the readings.",
            field="readings",
        )

    residual = y - np.einsum("...ij,...j->...i", design, centred)
    pull = np.einsum("...ij,...j->...i", weight, residual)
    chi2 = np.einsum("...i,...i->...", residual, pull)
    freedom = count - 2
    if prior is not None:
        shift = centred - believed
        chi2 = chi2 + np.einsum("...i,ij,...j->...", shift, precision, shift)
        freedom = count
    chi2 = np.maximum(chi2, 0.0)
    probability = chdtrc(freedom, chi2) if freedom > 0 else np.full(chi2.shape, np.nan)
    widened = np.where(probability < DISAGREE_PROBABILITY, chi2 / max(freedom, 1), 1.0)
    # What the others predict of a reading: the score is pull / sqrt(diagonal of the projector).
    projector = weight - wx @ covariance @ np.swapaxes(wx, -1, -2)
    free = np.diagonal(projector, axis1=-2, axis2=-1)
    known = free > 1e-9 * np.diagonal(weight, axis1=-2, axis2=-1)
    score = np.where(known, pull / np.sqrt(np.where(known, free, 1.0)), np.nan)

    constants = np.einsum("ij,...j->...i", _FROM_CENTRE, centred)
    spread = _FROM_CENTRE @ covariance @ _FROM_CENTRE.T * widened[..., None, None]
    return AvtsFit(
        intercept=constants[..., 0],
        slope=constants[..., 1],
        covariance=spread,
        chi2=chi2,
        degrees_of_freedom=freedom,
        probability=probability,
        widened=widened,
        residual_ln=residual / _loglog_per_ln(y),
        deleted_score=score,
        temperature_c=t,
        used_prior=prior is not None,
    )


def suspect_reading(fit: AvtsFit) -> Suspicion:
    """Which reading of one fit is suspect, in a sentence, or why none can be named.

    The largest deleted score is judged with the correction of Bonferroni. Three readings without
    a prior all have the same score: the test then sees that they disagree, not which is wrong.

    Args:
        fit: fit of a single case.

    Source: Weisberg, Applied Linear Regression, outlier test (from memory).
    """
    scores = np.abs(np.nan_to_num(fit.deleted_score, nan=0.0))
    order = np.argsort(-scores)
    worst = int(order[0])
    score = float(scores[worst])
    probability = min(1.0, float(2.0 * ndtr(-score)) * scores.size)
    if fit.degrees_of_freedom < 1:
        return Suspicion(
            None, score, probability, "Two readings fit any line: no test is possible."
        )
    if probability >= DISAGREE_PROBABILITY:
        return Suspicion(None, score, probability, "No reading stands out from the others.")
    if scores.size > 1 and score < _TELL_APART * float(scores[order[1]]):
        return Suspicion(
            None,
            score,
            probability,
            "The readings disagree with one another beyond their precision, but the test cannot "
            "tell which is wrong: measure one more temperature.",
        )
    return Suspicion(
        worst,
        score,
        probability,
        f"The reading at {float(fit.temperature_c[..., worst]):g} C lies {score:.1f} standard "
        "deviations from what the others say: repeat it before using it.",
    )


def _loglog_per_ln(loglog: Floats) -> Floats:
    found: Floats = 1.0 / (LN_10**2 * 10.0**loglog)
    return found


def _check(t: Floats, sd: Floats, count: int, prior: AvtsPrior | None) -> None:
    if np.any(~(sd > 0.0)):
        raise FaultyInput.of(
            "no-precision",
            "A reading has no positive standard deviation.",
            "Give the precision of its method.",
            field="relative_sd",
        )
    if prior is not None:
        return
    if count < 2:
        raise MissingInput.of(
            "one-reading",
            "One viscosity does not fix a curve.",
            "Name the grade, whose usual curves then widen the answer, or measure a second "
            "temperature.",
            field="readings",
        )
    if np.any(np.ptp(t, axis=-1) < 1.0):
        raise FaultyInput.of(
            "one-temperature",
            "All readings were taken at one temperature.",
            "Measure a second temperature, or name the grade.",
            field="readings",
        )
