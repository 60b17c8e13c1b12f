"""Two binders side by side: how far every temperature shifts, and whether a test could see it."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from advisor.binder.curve import ViscosityCurve, two_sided_score
from advisor.binder.fit import fit_avts
from advisor.units import UnitSystem, shown

# Shifts below the first are irrelevant to a plant, above the second they are acted on at once.
# Common practice, no source: width of the mixing window and tank thermometer.
RELEVANT_K, LARGE_K = 3.0, 5.0
# The tests that would settle it: rotational at these temperatures, one laboratory, 1.2 % (from
# memory, AASHTO T 316).
_SETTLE_AT_C, _SETTLE_SD = (135.0, 165.0), 0.012


@dataclass(frozen=True)
class Shift:
    """Shift of the temperature at one viscosity from the older binder to the newer."""

    name: str
    viscosity_pas: float
    older_c: float
    newer_c: float
    shift_k: float
    standard_error_k: float
    detectable: bool


@dataclass(frozen=True)
class SourceChange:
    """All shifts, what they mean in a sentence, and what would settle the doubt."""

    shifts: tuple[Shift, ...]
    sentence: str
    settles: str


def compare_curves(
    older: ViscosityCurve,
    newer: ViscosityCurve,
    viscosities: Sequence[tuple[str, float]],
    *,
    same_laboratory: bool = False,
    confidence: float = 0.95,
    units: UnitSystem = "si",
) -> SourceChange:
    """Shift of every temperature between two binders with its standard error.

    Both curves must have been fitted with the precision of the case: repetition within one
    laboratory where one laboratory measured both, else the spread between laboratories.

    Args:
        older: curve of the binder used so far.
        newer: curve of the binder that comes.
        viscosities: name and viscosity [Pa.s] of every temperature asked for, the first decides.
        same_laboratory: whether one laboratory measured both.
        confidence: share of chance differences that must lie below [1].
        units: units of the sentences.

    Source: difference of two independent results, ASTM C670.
    """
    score = two_sided_score(confidence)
    shifts = []
    for name, viscosity in viscosities:
        old, new = float(older.temperature_c(viscosity)), float(newer.temperature_c(viscosity))
        error = float(
            np.hypot(older.temperature_sd_k(viscosity), newer.temperature_sd_k(viscosity))
        )
        seen = abs(new - old) > score * error
        shifts.append(Shift(name, viscosity, old, new, new - old, error, seen))
    first = shifts[0]
    settled = _settled_error_k(older, newer, first.viscosity_pas)
    return SourceChange(
        tuple(shifts),
        _sentence(first, score, same_laboratory, units),
        _settles(first, settled, score, units),
    )


def planned_sd_k(
    curve: ViscosityCurve,
    temperature_c: Sequence[float],
    relative_sd: float,
    viscosity_pas: float,
) -> float:
    """Standard deviation [K] that planned readings would leave at a viscosity.

    Args:
        curve: what is believed of the binder.
        temperature_c: temperatures to be measured [C], two or more.
        relative_sd: standard deviation of each reading [1].
        viscosity_pas: viscosity of the temperature asked for [Pa.s].

    Source: propagation through ``fit_avts``.
    """
    planned = fit_avts(temperature_c, curve.viscosity_pas(temperature_c), relative_sd)
    return float(planned.curve().temperature_sd_k(viscosity_pas))


def _settled_error_k(older: ViscosityCurve, newer: ViscosityCurve, viscosity_pas: float) -> float:
    return math.hypot(
        *(planned_sd_k(one, _SETTLE_AT_C, _SETTLE_SD, viscosity_pas) for one in (older, newer))
    )


def _sentence(shift: Shift, score: float, same_laboratory: bool, units: UnitSystem) -> str:
    who = "one laboratory" if same_laboratory else "different laboratories"
    word = "hotter" if shift.shift_k >= 0.0 else "cooler"
    size = (
        f"For {shift.name} the newer binder runs {_delta(abs(shift.shift_k), units)} {word}, "
        f"plus or minus {_delta(score * shift.standard_error_k, units)} ({who})"
    )
    if not shift.detectable:
        return f"{size}: that may be chance alone, the tests cannot tell the two apart."
    if abs(shift.shift_k) < RELEVANT_K:
        return (
            f"{size}: real, but less than {_delta(RELEVANT_K, units)} does not matter to the plant."
        )
    if abs(shift.shift_k) < LARGE_K:
        return f"{size}: a real change, set the temperatures anew."
    return f"{size}: a large change, act before the first load is mixed."


def _settles(shift: Shift, settled_k: float, score: float, units: UnitSystem) -> str:
    plan = (
        "Retained samples of both, measured by one laboratory at "
        f"{shown(_SETTLE_AT_C[0], 'temperature', units)} and "
        f"{shown(_SETTLE_AT_C[1], 'temperature', units)} on one day, would show differences from "
        f"{_delta(score * settled_k, units)}."
    )
    if shift.detectable:
        return f"Settled by the sheets. {plan}"
    if abs(shift.shift_k) > score * settled_k:
        return f"{plan} The shift seen here would then stand out."
    return f"{plan} The shift seen here would still be too small to matter."


def _delta(value_k: float, units: UnitSystem) -> str:
    return shown(value_k, "temperature_delta", units)
