"""Dynamic shear rheometer: modulus and phase angle as viscosity, continuous grade, crossover."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike, NDArray

from advisor.binder.readings import SAMPLE, Precision, Reading, Sample, require_positive
from advisor.errors import FaultyInput, OutsideValidity

Floats = NDArray[np.float64]

# Exponent of 1/sin(delta), a0 + a1*w + a2*w^2 with w in rad/s: Bari and Witczak (from memory);
# at 10 rad/s it gives the 4.8628 of NCHRP 1-37A.
_EXPONENT = (3.639216, 0.131373, -0.000901)
_FREQUENCY_RANGE_RAD_S = (0.1, 100.0)  # the quadratic turns negative near 170 rad/s
# Below this phase angle the factor inflates the viscosity of an elastic binder (derived: 1.5 at
# 67 deg, 5.4 at 45 deg); the border is common practice, no source.
ELASTIC_BELOW_DEG = 75.0
# Doubt of the conversion in ln(viscosity). Common practice, no source: the modulus form and the
# steady-flow form differ by this much at 80 deg.
_CONVERSION_SD = 0.10


def complex_viscosity_pas(modulus_pa: ArrayLike, frequency_rad_s: ArrayLike) -> Floats:
    """Magnitude of the complex viscosity [Pa.s].

    Args:
        modulus_pa: complex shear modulus [Pa].
        frequency_rad_s: frequency [rad/s].

    Source: definition.
    """
    found: Floats = np.asarray(modulus_pa, float) / np.asarray(frequency_rad_s, float)
    return found


def flow_exponent(frequency_rad_s: ArrayLike) -> Floats:
    """Exponent [1] of 1/sin(phase angle) in the steady-flow viscosity.

    Args:
        frequency_rad_s: frequency [rad/s], 0.1 to 100.

    Raises:
        OutsideValidity: the frequency is outside the range of the fit.

    Source: Bari and Witczak 2006 (from memory).
    """
    frequency = np.asarray(frequency_rad_s, float)
    low, high = _FREQUENCY_RANGE_RAD_S
    if np.any((frequency < low) | (frequency > high)):
        raise OutsideValidity.of(
            "frequency-range",
            f"A frequency lies outside {low:g} to {high:g} rad/s.",
            "Use the 10 rad/s of the usual test.",
            field="frequency_rad_s",
        )
    constant, first, second = _EXPONENT
    found: Floats = constant + first * frequency + second * frequency**2
    return found


def flow_viscosity_pas(
    modulus_pa: ArrayLike, phase_angle_deg: ArrayLike, frequency_rad_s: ArrayLike = 10.0
) -> Floats:
    """Steady-flow viscosity [Pa.s] estimated from an oscillating test.

    Args:
        modulus_pa: complex shear modulus [Pa].
        phase_angle_deg: phase angle [deg].
        frequency_rad_s: frequency [rad/s], 0.1 to 100.

    Source: NCHRP 1-37A; exponent by Bari and Witczak 2006 (both from memory).
    """
    sine = np.sin(np.radians(np.asarray(phase_angle_deg, float)))
    exponent = flow_exponent(frequency_rad_s)
    found: Floats = complex_viscosity_pas(modulus_pa, frequency_rad_s) * sine**-exponent
    return found


def rutting_stiffness_pa(modulus_pa: ArrayLike, phase_angle_deg: ArrayLike) -> Floats:
    """Modulus over the sine of the phase angle [Pa], the figure of performance grading.

    Args:
        modulus_pa: complex shear modulus [Pa].
        phase_angle_deg: phase angle [deg].

    Source: AASHTO M 320 (limits looked up).
    """
    sine = np.sin(np.radians(np.asarray(phase_angle_deg, float)))
    found: Floats = np.asarray(modulus_pa, float) / sine
    return found


def continuous_grade_c(
    low_c: ArrayLike,
    low_pa: ArrayLike,
    high_c: ArrayLike,
    high_pa: ArrayLike,
    limit_pa: ArrayLike = 1000.0,
) -> Floats:
    """Temperature [C] at which the stiffness meets its limit, between two tests.

    Interpolates the logarithm of stiffness, not the stiffness.

    Args:
        low_c: lower test temperature [C].
        low_pa: stiffness there [Pa].
        high_c: higher test temperature [C].
        high_pa: stiffness there [Pa].
        limit_pa: limit [Pa], 1000 original, 2200 after RTFO.

    Source: reproduces the printed grades of the FHWA pavement testing facility binders (looked up).
    """
    low_t, low_ln = np.asarray(low_c, float), np.log(np.asarray(low_pa, float))
    high_ln, wanted = np.log(np.asarray(high_pa, float)), np.log(np.asarray(limit_pa, float))
    found: Floats = low_t + (np.asarray(high_c, float) - low_t) * (low_ln - wanted) / (
        low_ln - high_ln
    )
    return found


def crossover_frequency_rad_s(
    frequency_rad_s: ArrayLike, phase_angle_deg: ArrayLike, wanted_deg: float = 86.0
) -> float:
    """Frequency [rad/s] at which the phase angle falls through a value, linear in its logarithm.

    Args:
        frequency_rad_s: frequencies of the sweep [rad/s], shape (n,), rising.
        phase_angle_deg: phase angles [deg], shape (n,).
        wanted_deg: phase angle sought [deg].

    Raises:
        OutsideValidity: the sweep never passes the angle, as with some polymer binders.

    Source: phase angle method, NCHRP Report 648 (from memory).
    """
    decades = np.log10(np.asarray(frequency_rad_s, float))
    angle = np.asarray(phase_angle_deg, float)
    passes = np.flatnonzero((angle[:-1] >= wanted_deg) & (angle[1:] < wanted_deg))
    if passes.size == 0:
        raise OutsideValidity.of(
            "no-crossover",
            f"The phase angle never falls through {wanted_deg:g} degrees in this sweep.",
            "The phase angle method does not serve this binder: use the supplier's range.",
            field="phase_angle_deg",
        )
    i = int(passes[0])
    part = (angle[i] - wanted_deg) / (angle[i] - angle[i + 1])
    return float(10.0 ** (decades[i] + part * (decades[i + 1] - decades[i])))


def rheometer_reading(
    temperature_c: float,
    modulus_pa: float,
    phase_angle_deg: float,
    precision: Precision,
    *,
    frequency_rad_s: float = 10.0,
    as_written: str = "",
    sample: Sample = SAMPLE,
) -> Reading:
    """Viscosity from modulus and phase angle, set aside where the binder is too elastic.

    Args:
        temperature_c: temperature of the test [C].
        modulus_pa: complex shear modulus [Pa].
        phase_angle_deg: phase angle [deg], 0 to 90.
        precision: precision of modulus over sine.
        frequency_rad_s: frequency [rad/s].
        as_written: the values as the sheet prints them.
        sample: what was measured, and by whom.

    Raises:
        FaultyInput: the phase angle is not between 0 and 90 degrees.

    Source: ``flow_viscosity_pas``.
    """
    require_positive(modulus_pa, "modulus")
    if not 0.0 < phase_angle_deg <= 90.0:
        raise FaultyInput.of(
            "phase-angle",
            f"A phase angle of {phase_angle_deg:g} degrees cannot be.",
            "Enter degrees between 0 and 90.",
            field="phase_angle",
        )
    unusable: tuple[str, ...] = ()
    if phase_angle_deg < ELASTIC_BELOW_DEG:
        unusable = (
            (
                f"The phase angle, {phase_angle_deg:g} degrees, is below {ELASTIC_BELOW_DEG:g}: "
                "the binder is too elastic for this conversion to serve a mixing temperature."
            ),
        )
    written = as_written or f"{modulus_pa:g} Pa at {phase_angle_deg:g} deg"
    return Reading(
        method="rheometer",
        temperature_c=temperature_c,
        viscosity_pas=float(flow_viscosity_pas(modulus_pa, phase_angle_deg, frequency_rad_s)),
        relative_sd=float(np.hypot(precision.sd(1.0, "several"), _CONVERSION_SD)),
        repeat_sd=float(np.hypot(precision.sd(1.0, "one"), _CONVERSION_SD)),
        as_written=written,
        model_sd=_CONVERSION_SD,
        sample=sample,
        unusable=unusable,
        remarks=("Measured far below mixing: a line from such readings alone is a long reach.",),
        precision_source=precision.source,
        precision_how_known=precision.how_known,
    )
