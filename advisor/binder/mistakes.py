"""Likely typing errors on a sheet: which change of one figure makes the whole agree."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from advisor.binder.fit import AvtsPrior
from advisor.binder.laws import LN_10, log_rankine
from advisor.binder.readings import Reading, error_correlation
from advisor.units import celsius_from_fahrenheit, fahrenheit_from_celsius

Floats = NDArray[np.float64]

# One figure in fifty is mistyped, and each way is as likely. Common practice, no source: it only
# sets how strong the evidence must be.
_CHANCE = 0.02
# Odds from which a mistake is proposed.
_ODDS = 10.0
# A mistake this much less likely than the likeliest one is no longer named. Common practice.
_RIVAL = 20.0
_FACTORS: tuple[tuple[float, str], ...] = (
    (0.1, "ten times too high: poise read as pascal-second, or a slipped decimal point"),
    (10.0, "ten times too low: pascal-second read as poise, or a slipped decimal point"),
    (0.001, "a thousand times too high: mPa.s (cP) read as Pa.s"),
    (1000.0, "a thousand times too low: Pa.s read as mPa.s (cP)"),
)
_MEASURED = ("vacuum capillary", "kinematic capillary", "rotational", "dynamic viscosity")


@dataclass(frozen=True)
class Doubt:
    """A likely mistake: ``index`` of the reading (None for all), what it is, and the repair."""

    index: int | None
    sentence: str
    viscosity_pas: float | None
    temperature_c: float | None
    odds: float


def typing_doubts(readings: Sequence[Reading], prior: AvtsPrior) -> tuple[Doubt, ...]:
    """Mistakes that would explain the sheet far better than the figures as typed, best first.

    Every figure is tried ten and a thousand times off and its temperature in the other scale;
    each trial is weighed by how well the sheet then agrees with itself and with the grade.

    Args:
        readings: readings of one sheet.
        prior: usual curves of its grade, or of any paving binder.

    Source: Bayes' rule on the normal model of the line; chance of a mistake is common practice.
    """
    if not readings:
        return ()
    as_typed = _evidence(readings, prior)
    trials: list[tuple[float, Doubt]] = []
    for index, reading in enumerate(readings):
        if reading.method not in _MEASURED:
            continue
        for changed, sentence in _repairs(reading):
            tried = [*readings[:index], changed, *readings[index + 1 :]]
            doubt = Doubt(
                index,
                f"{reading.method} at {reading.temperature_c:g} C: {sentence}",
                changed.viscosity_pas,
                changed.temperature_c,
                0.0,
            )
            trials.append((_evidence(tried, prior), doubt))
    if len(readings) > 1 and all(reading.method in _MEASURED for reading in readings):
        for factor, sentence in _FACTORS:
            tried = [_scaled(reading, factor) for reading in readings]
            doubt = Doubt(None, f"Every viscosity: {sentence}", None, None, 0.0)
            trials.append((_evidence(tried, prior), doubt))
    chance = _CHANCE / max(len(trials), 1)
    best = max((evidence for evidence, _ in trials), default=-np.inf)
    found = []
    for evidence, doubt in sorted(trials, key=lambda trial: -trial[0]):
        odds = float(np.exp(min(evidence - as_typed, 600.0)) * chance)
        if odds >= _ODDS and evidence >= best - np.log(_RIVAL):
            found.append(replace(doubt, odds=odds))
    return tuple(found)


def unit_confusion(readings: Sequence[Reading], density_kgm3: float) -> str:
    """Sentence where a rotational and a kinematic result differ by just the density; else empty.

    Args:
        readings: readings of one sheet.
        density_kgm3: density at the temperature of the pair [kg/m3].

    Source: definition of kinematic viscosity.
    """
    ratio = 1000.0 / density_kgm3
    for one in readings:
        for other in readings:
            pair = (one.method, other.method) == ("rotational", "kinematic capillary")
            if not pair or abs(one.temperature_c - other.temperature_c) > 0.3:
                continue
            if abs(one.viscosity_pas / other.viscosity_pas / ratio - 1.0) < 0.005:
                return (
                    "The rotational result is the kinematic one without the density: cSt may have "
                    "been copied as cP."
                )
    return ""


def _repairs(reading: Reading) -> list[tuple[Reading, str]]:
    found = [(_scaled(reading, factor), sentence) for factor, sentence in _FACTORS]
    celsius = celsius_from_fahrenheit(reading.temperature_c)
    if 20.0 <= celsius <= 200.0:
        words = f"the temperature is in Fahrenheit, {celsius:.0f} C in truth"
        found.append((replace(reading, temperature_c=celsius), words))
    fahrenheit = fahrenheit_from_celsius(reading.temperature_c)
    if 20.0 <= fahrenheit <= 200.0:
        words = f"the temperature was written in Fahrenheit but is {fahrenheit:.0f} C"
        found.append((replace(reading, temperature_c=fahrenheit), words))
    return found


def _scaled(reading: Reading, factor: float) -> Reading:
    return replace(reading, viscosity_pas=reading.viscosity_pas * factor)


def _evidence(readings: Sequence[Reading], prior: AvtsPrior) -> float:
    # log density of the ln(viscosities), the constants of the line integrated out
    centipoise = np.array([1000.0 * reading.viscosity_pas for reading in readings])
    if np.any(centipoise <= 1.5):
        return -np.inf
    decades = np.log10(centipoise)
    per_ln = 1.0 / (LN_10**2 * decades)
    sd = np.array([reading.relative_sd for reading in readings]) * per_ln
    x = log_rankine([reading.temperature_c for reading in readings])
    design = np.stack([np.ones_like(x), x], axis=-1)
    spread = design @ prior.covariance @ design.T + np.outer(sd, sd) * error_correlation(readings)
    miss = np.log10(decades) - design @ prior.mean
    _, log_size = np.linalg.slogdet(spread)
    return float(
        -0.5 * miss @ np.linalg.solve(spread, miss) - 0.5 * log_size + np.log(per_ln).sum()
    )
