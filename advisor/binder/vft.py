"""The third law, VFT, through three or more readings, where a straight A-VTS line does not hold."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from advisor.binder.curve import ViscosityCurve
from advisor.binder.laws import LN_10, viscosity_vft
from advisor.errors import MissingInput, OutsideValidity

Floats = NDArray[np.float64]

# Distance of the pole below the coldest reading over which the first guess is sought, K.
_POLE_DISTANCES_K = np.geomspace(1.0, 5000.0, 120)


@dataclass(frozen=True, eq=False)
class VftFit:
    """VFT law fitted to one binder; ``covariance`` (3, 3) of level, strength [K] and pole [C]."""

    level: float
    strength_k: float
    pole_c: float
    covariance: Floats
    chi2: float
    degrees_of_freedom: int
    temperature_c: Floats

    def curve(self) -> ViscosityCurve:
        """The fitted curve with its span of readings."""
        return ViscosityCurve(
            "vft",
            np.array([self.level, self.strength_k, self.pole_c]),
            self.covariance,
            float(self.temperature_c.min()),
            float(self.temperature_c.max()),
            basis=f"{self.temperature_c.size} readings, VFT law",
        )


def fit_vft(temperature_c: ArrayLike, viscosity_pas: ArrayLike, relative_sd: ArrayLike) -> VftFit:
    """Best VFT law through the readings of one binder, by weighted least squares of viscosity.

    Args:
        temperature_c: temperatures [C], shape (n,), three or more different ones.
        viscosity_pas: dynamic viscosities [Pa.s], shape (n,).
        relative_sd: standard deviation of each as a share of it [1], shape (n,).

    Raises:
        MissingInput: fewer than three readings.
        OutsideValidity: the readings bend the wrong way or not at all, so that the law has no
            pole.

    Source: law as in ``viscosity_vft``; Levenberg-Marquardt (MINPACK).
    """
    from scipy.optimize import least_squares

    t, eta, share = np.broadcast_arrays(
        *(np.asarray(part, float) for part in (temperature_c, viscosity_pas, relative_sd))
    )
    if t.size < 3:
        raise MissingInput.of(
            "vft-readings",
            "The VFT law has three constants and needs three readings.",
            "Measure a third temperature, or use the A-VTS line.",
            field="readings",
        )
    sd = share * eta
    coldest = float(t.min())

    def missing(constants: Floats) -> Floats:
        level, strength, distance = constants
        with np.errstate(over="ignore", invalid="ignore"):
            miss = (viscosity_vft(t, level, strength, coldest - np.exp(distance)) - eta) / sd
        return np.where(np.isfinite(miss), miss, 1e150)

    start = _first_guess(t, eta, share, coldest)
    found = least_squares(
        missing, start, method="lm", x_scale="jac", xtol=1e-15, ftol=1e-15, gtol=1e-15
    )
    level, strength, log_distance = (float(part) for part in found.x)
    distance = float(np.exp(log_distance))
    if not 1e-3 < distance < 0.99 * _POLE_DISTANCES_K[-1] or strength <= 0.0:
        raise OutsideValidity.of(
            "vft-no-pole",
            "The readings do not bend as the VFT law does.",
            "Use the A-VTS line, or repeat the reading that stands out.",
            field="readings",
        )
    above = t - (coldest - distance)
    gradient = (eta + found.fun * sd) * LN_10
    jacobian = gradient[:, None] * np.stack(
        [np.ones_like(t), 1.0 / above, strength / above**2], axis=-1
    )
    # QR rather than the normal equations: the columns are nearly parallel
    root = np.linalg.inv(np.linalg.qr(jacobian / sd[:, None], mode="r"))
    return VftFit(
        level=level,
        strength_k=strength,
        pole_c=coldest - distance,
        covariance=root @ root.T,
        chi2=float(found.fun @ found.fun),
        degrees_of_freedom=t.size - 3,
        temperature_c=t,
    )


def _first_guess(t: Floats, eta: Floats, share: Floats, coldest: float) -> Floats:
    # For a given pole the law is straight in 1/(T - pole): solve it, and take the best pole.
    y, weight = np.log10(eta), 1.0 / share
    best = (np.inf, np.zeros(3))
    for distance in _POLE_DISTANCES_K:
        design = np.stack([np.ones_like(t), 1.0 / (t - coldest + distance)], axis=-1)
        line, *_ = np.linalg.lstsq(design * weight[:, None], y * weight, rcond=None)
        miss = float(np.sum(((design @ line - y) * weight) ** 2))
        if miss < best[0]:
            best = (miss, np.array([*line, np.log(distance)]))
    return best[1]
