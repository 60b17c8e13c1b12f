"""Penetration and softening point as viscosity, with the doubt such a conversion carries."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike, NDArray

from advisor.binder.readings import SAMPLE, Precision, Reading, Sample, require_positive

Floats = NDArray[np.float64]

# Range in which the formula was made and is used here; outside it is computed and remarked.
_PENETRATION_RANGE_DMM = (10.0, 300.0)  # common practice, no source
SOFTENING_VISCOSITY_PAS = 1300.0  # 13,000 P, the usual convention (from memory)

# Where the mixing line (drawn through 60 and 135 C) lies against these two conversions:
# mean and standard deviation of ln(line / conversion). Derived here from eight SHRP core binders
# (AAA-1, AAB-1, AAC-1, AAD-1, AAF-1, AAG-1, AAK-1, AAM-1), whose figures are from memory: real
# binder is stiffer when cool than the line that serves for mixing.
_PENETRATION_TO_LINE_LN, _PENETRATION_TO_LINE_SD = -1.19, 0.55
_SOFTENING_TO_LINE_LN, _SOFTENING_TO_LINE_SD = -0.63, 0.42
# Change of ln(viscosity) per K near the softening point: derived from the lines of the same eight.
_SOFTENING_SLOPE_PER_K = 0.18


def penetration_viscosity_pas(penetration_dmm: ArrayLike) -> Floats:
    """Viscosity [Pa.s] at the temperature of a penetration test (100 g, 5 s).

    Args:
        penetration_dmm: penetration [dmm], any shape.

    Source: Mirza and Witczak, as in NCHRP 1-37A (from memory).
    """
    decades = np.log10(np.asarray(penetration_dmm, float))
    poise = 10.0 ** (10.5012 - 2.2601 * decades + 0.00389 * decades**2)
    found: Floats = poise / 10.0
    return found


def penetration_index(penetration_dmm: ArrayLike, softening_point_c: ArrayLike) -> Floats:
    """Penetration index [1]; outside -2 to +2 one of the two results is in question.

    Args:
        penetration_dmm: penetration at 25 C [dmm].
        softening_point_c: ring-and-ball softening point [C].

    Source: Pfeiffer and van Doormaal 1936 (from memory).
    """
    pen = 50.0 * np.log10(np.asarray(penetration_dmm, float))
    soft = np.asarray(softening_point_c, float)
    found: Floats = (1952.0 - 10.0 * pen - 20.0 * soft) / (pen - soft - 120.0)
    return found


def penetration_reading(
    penetration_dmm: float,
    precision: Precision,
    *,
    temperature_c: float = 25.0,
    as_written: str = "",
    sample: Sample = SAMPLE,
) -> Reading:
    """Penetration as a wide point of the mixing line.

    Args:
        penetration_dmm: penetration [dmm] under 100 g for 5 s.
        precision: precision of the test.
        temperature_c: temperature of the test [C]; only 25 C is converted.
        as_written: the value as the sheet prints it.
        sample: what was measured, and by whom.

    Source: ``penetration_viscosity_pas``, moved to the mixing line by the mean of eight binders.
    """
    require_positive(penetration_dmm, "penetration")
    plain = float(penetration_viscosity_pas(penetration_dmm))
    unusable: tuple[str, ...] = ()
    remarks = [
        (
            f"The formula gives {plain:,.0f} Pa.s; the mixing line lies lower at 25 C, so the "
            f"point enters at {np.exp(_PENETRATION_TO_LINE_LN):.2f} of it, with a wide bar."
        )
    ]
    if abs(temperature_c - 25.0) > 0.2:
        unusable = (f"Penetration is converted at 25 C, not at {temperature_c:g} C.",)
    low, high = _PENETRATION_RANGE_DMM
    if not low <= penetration_dmm <= high:
        remarks.append(f"{penetration_dmm:g} dmm is outside {low:g} to {high:g} dmm.")
    model = _PENETRATION_TO_LINE_SD
    per_dmm = 2.26 / penetration_dmm  # slope of the formula, in ln(viscosity)
    return Reading(
        method="penetration",
        temperature_c=temperature_c,
        viscosity_pas=plain * float(np.exp(_PENETRATION_TO_LINE_LN)),
        relative_sd=_with_model(per_dmm * precision.sd(penetration_dmm, "several"), model),
        repeat_sd=_with_model(per_dmm * precision.sd(penetration_dmm, "one"), model),
        as_written=as_written or f"{penetration_dmm:g} dmm",
        model_sd=model,
        sample=sample,
        unusable=unusable,
        remarks=tuple(remarks),
        precision_source=precision.source,
        precision_how_known=precision.how_known,
    )


def softening_point_reading(
    softening_point_c: float,
    precision: Precision,
    *,
    modified: bool = False,
    as_written: str = "",
    sample: Sample = SAMPLE,
) -> Reading:
    """Softening point as a wide point of the mixing line.

    Args:
        softening_point_c: ring-and-ball softening point [C].
        precision: precision of the test.
        modified: whether the binder holds polymer, rubber or wax, for which the convention fails.
        as_written: the value as the sheet prints it.
        sample: what was measured, and by whom.

    Source: 1300 Pa.s at the softening point (convention, from memory), moved to the mixing line by
    the mean of eight binders.
    """
    unusable = (
        ("The viscosity at the softening point of a modified binder is not 1300 Pa.s.",)
        if modified
        else ()
    )
    remarks = (
        (
            f"By convention {SOFTENING_VISCOSITY_PAS:g} Pa.s; the mixing line lies lower there, "
            f"so the point enters at {np.exp(_SOFTENING_TO_LINE_LN):.2f} of it, with a wide bar."
        ),
    )
    slope, model = _SOFTENING_SLOPE_PER_K, _SOFTENING_TO_LINE_SD
    return Reading(
        method="softening point",
        temperature_c=softening_point_c,
        viscosity_pas=SOFTENING_VISCOSITY_PAS * float(np.exp(_SOFTENING_TO_LINE_LN)),
        relative_sd=_with_model(slope * precision.sd(softening_point_c, "several"), model),
        repeat_sd=_with_model(slope * precision.sd(softening_point_c, "one"), model),
        as_written=as_written or f"{softening_point_c:g} C",
        model_sd=model,
        sample=sample,
        unusable=unusable,
        remarks=remarks,
        precision_source=precision.source,
        precision_how_known=precision.how_known,
    )


def _with_model(test_sd: float, model_sd: float) -> float:
    return float(np.hypot(test_sd, model_sd))
