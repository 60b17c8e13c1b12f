"""Which readings of a sheet may serve the mixing line, and the curve they give together."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace

import numpy as np

from advisor.binder.curve import ViscosityCurve
from advisor.binder.fit import (
    DISAGREE_PROBABILITY,
    AvtsFit,
    AvtsPrior,
    Suspicion,
    fit_avts,
    suspect_reading,
)
from advisor.binder.modifiers import Modifier
from advisor.binder.readings import LINE_FROM_C, Reading, error_correlation
from advisor.binder.vft import VftFit, fit_vft
from advisor.errors import FaultyInput, MissingInput, OutsideValidity

# Two temperatures closer than this do not fix a slope: the grade is then asked as well. Common
# practice, no source.
_LEAST_SPAN_K = 10.0
# A line that has this viscosity outside these temperatures is none of any paving binder. Common
# practice, no source.
_BELIEVED_PAS, _BELIEVED_C = 0.17, (90.0, 250.0)
# Methods whose viscosity comes from a conversion.
_CONVERTED = ("penetration", "softening point", "rheometer")


@dataclass(frozen=True, eq=False)
class SheetCurve:
    """What the readings of one sheet give together.

    ``readings`` are all of them, those that stayed out with their reason. ``curve`` is None where
    no curve may be drawn and ``refused`` says why. ``third`` is the law of three constants, where
    three or more readings show that the line does not hold. ``quality`` says in words how well
    the readings agree with the line.
    """

    readings: tuple[Reading, ...]
    curve: ViscosityCurve | None
    fit: AvtsFit | None
    suspicion: Suspicion | None
    third: VftFit | None
    quality: str
    refused: str = ""


def select_for_mixing(
    readings: Sequence[Reading], melting_c: float | None = None
) -> tuple[Reading, ...]:
    """All readings, those that do not belong on the mixing line marked with the reason.

    Args:
        readings: readings of one sheet, already judged by the rules of their methods.
        melting_c: top of the melting range of a wax in the binder [C]; none without wax.

    Source: ASTM D2493 section 5 (looked up): below 60 C the consistency rises above the line;
    aged residue is another binder.
    """
    first = tuple(_marked(one, off_the_line(one, melting_c)) for one in readings)
    measured = [one for one in first if one.usable and one.method not in _CONVERTED]
    if _span_k(measured) < _LEAST_SPAN_K:
        return first
    words = "Viscosity was measured at two temperatures: a conversion would only blur the line."
    return tuple(_marked(one, words * (one.method in _CONVERTED)) for one in first)


def curve_of_sheet(
    readings: Sequence[Reading],
    prior: AvtsPrior | None,
    modifiers: Sequence[Modifier] = (),
    *,
    same_laboratory: bool = False,
) -> SheetCurve:
    """Curve through the readings of one sheet, by the grade as well where they are too few.

    Args:
        readings: readings of one sheet.
        prior: usual curves of its grade, un-aged; none where no grade describes the binder.
        modifiers: what was in the binder when it was tested.
        same_laboratory: whether only the laboratory's own repeatability counts, for a comparison
            of two of its sheets.

    Source: ``fit_avts``; VFT where three or more readings refuse the line.
    """
    melting = max((one.applies_above_c or 0.0 for one in modifiers), default=0.0) or None
    chosen = select_for_mixing(readings, melting)
    drifting = next((one for one in modifiers if not one.line), None)
    if drifting is not None:
        refused = f"No viscosity line is drawn with {drifting.name}: {drifting.reason}"
        return SheetCurve(chosen, None, None, None, None, "", refused)
    usable = [one for one in chosen if one.usable]
    measured = [one for one in usable if one.method not in _CONVERTED]
    enough = _span_k(measured) >= _LEAST_SPAN_K
    if not enough and prior is None:
        refused = (
            "The readings do not fix a curve, and no usual curve describes this binder: measure "
            "the viscosity at two temperatures."
        )
        return SheetCurve(chosen, None, None, None, None, "", refused)
    if not usable and prior is not None:
        curve = prior.curve().noted("Nothing was measured: a wide band of what its grade can be.")
        return SheetCurve(chosen, curve, None, None, None, "No reading to judge.")
    try:
        fit = _fit(usable, None if enough else prior, same_laboratory)
    except FaultyInput as error:
        return SheetCurve(chosen, None, None, None, None, "", str(error))
    suspicion = suspect_reading(fit)
    curve = fit.curve()
    mixed_c = float(curve.temperature_c(_BELIEVED_PAS))
    if not _BELIEVED_C[0] <= mixed_c <= _BELIEVED_C[1]:
        refused = (
            f"The readings give no believable line ({_BELIEVED_PAS:g} Pa.s at {mixed_c:.0f} C): "
            "one of them is wrong."
        )
        return SheetCurve(chosen, None, fit, suspicion, None, _quality(fit), refused)
    if not enough:
        curve = curve.noted(
            "The readings alone do not fix a curve; the usual curves of the grade fill the gap and "
            "the band is wide for it."
        )
    return SheetCurve(chosen, curve, fit, suspicion, _third(fit, usable), _quality(fit))


def _marked(reading: Reading, why: str) -> Reading:
    if not why:
        return reading
    return replace(reading, unusable=(*reading.unusable, why))


def off_the_line(reading: Reading, melting_c: float | None = None) -> str:
    """Why a sound reading does not belong on the mixing line, in a sentence; empty where it does.

    Args:
        reading: the reading.
        melting_c: top of the melting range of a wax in the binder [C]; none without wax.
    """
    if reading.sample.condition != "original":
        return "Measured on aged or recovered binder, not on the binder in the tank."
    if reading.method not in _CONVERTED and reading.temperature_c < LINE_FROM_C:
        return "Below 60 C the binder is stiffer than the line that serves for mixing."
    if melting_c is not None and reading.temperature_c < melting_c:
        return f"Below {melting_c:g} C the wax is not molten and stiffens the binder."
    return ""


def _span_k(readings: Sequence[Reading]) -> float:
    at = [one.temperature_c for one in readings]
    return max(at) - min(at) if at else 0.0


def _fit(usable: Sequence[Reading], prior: AvtsPrior | None, same_laboratory: bool) -> AvtsFit:
    return fit_avts(
        np.array([one.temperature_c for one in usable]),
        np.array([one.viscosity_pas for one in usable]),
        np.array([one.repeat_sd if same_laboratory else one.relative_sd for one in usable]),
        None if same_laboratory else error_correlation(usable),
        prior,
    )


def _third(fit: AvtsFit, usable: Sequence[Reading]) -> VftFit | None:
    if fit.used_prior or not float(fit.probability) < DISAGREE_PROBABILITY:
        return None
    if len({round(one.temperature_c) for one in usable}) < 3:
        return None
    try:
        return fit_vft(
            np.array([one.temperature_c for one in usable]),
            np.array([one.viscosity_pas for one in usable]),
            np.array([one.relative_sd for one in usable]),
        )
    except (OutsideValidity, MissingInput):
        return None


def _quality(fit: AvtsFit) -> str:
    if fit.degrees_of_freedom < 1:
        return "Two readings fit any line: how well it holds cannot be said."
    share = float(fit.probability)
    if share >= DISAGREE_PROBABILITY:
        return (
            f"The readings agree with the line (a worse fit would come by chance in {share:.0%})."
        )
    return (
        f"The readings disagree with the line beyond their precision (chance {share:.1%}); the "
        f"band is widened {float(np.sqrt(fit.widened)):.1f} times."
    )
