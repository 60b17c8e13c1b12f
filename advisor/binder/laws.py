"""Viscosity against temperature by the published laws, and back.

All functions broadcast. Viscosities are in Pa.s and temperatures in C at the door; what each law
needs inside (centipoise, degrees Rankine) stays inside.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike, NDArray

from advisor.errors import OutsideValidity
from advisor.units import ABSOLUTE_ZERO_C, RANKINE_PER_KELVIN

Floats = NDArray[np.float64]

CP_PER_PAS = 1000.0
LN_10 = float(np.log(10.0))
GAS_CONSTANT_J_MOLK = 8.314462618  # exact since the 2019 revision of the SI (BIPM brochure)


def log_rankine(temperature_c: ArrayLike) -> Floats:
    """Decimal logarithm [1] of the absolute temperature in degrees Rankine.

    Args:
        temperature_c: temperature [C], any shape.
    """
    kelvin = np.asarray(temperature_c, float) - ABSOLUTE_ZERO_C
    found: Floats = np.log10(kelvin * RANKINE_PER_KELVIN)
    return found


def loglog_viscosity(viscosity_pas: ArrayLike) -> Floats:
    """Twofold decimal logarithm [1] of the viscosity in centipoise.

    Args:
        viscosity_pas: dynamic viscosity [Pa.s], any shape, above 0.001.

    Raises:
        OutsideValidity: a viscosity is at or below 1 cP, where the outer logarithm fails.
    """
    centipoise = np.asarray(viscosity_pas, float) * CP_PER_PAS
    if np.any(centipoise <= 1.0):
        raise OutsideValidity.of(
            "viscosity-too-low",
            "A viscosity at or below 0.001 Pa.s has no place on the log-log line.",
            "Check the unit: the line needs the viscosity of a binder.",
            field="viscosity_pas",
            value=f"{float(np.min(centipoise)) / CP_PER_PAS:g} Pa.s",
        )
    found: Floats = np.log10(np.log10(centipoise))
    return found


def viscosity_avts(temperature_c: ArrayLike, intercept: ArrayLike, slope: ArrayLike) -> Floats:
    """Dynamic viscosity [Pa.s] on the line log10 log10(cP) = intercept + slope * log10(R).

    Args:
        temperature_c: temperature [C], any shape.
        intercept: A of the line [1] (centipoise, degrees Rankine).
        slope: VTS of the line [1].

    Source: ASTM D2493 (axes of the chart, looked up); NCHRP 1-37A (the symbols A and VTS).
    """
    loglog = np.asarray(intercept, float) + np.asarray(slope, float) * log_rankine(temperature_c)
    with np.errstate(over="ignore"):  # far below freezing the line runs to infinity
        found: Floats = 10.0 ** (10.0**loglog) / CP_PER_PAS
    return found


def temperature_avts(viscosity_pas: ArrayLike, intercept: ArrayLike, slope: ArrayLike) -> Floats:
    """Temperature [C] at which the A-VTS line has a viscosity.

    Args:
        viscosity_pas: dynamic viscosity [Pa.s], any shape, above 0.001.
        intercept: A of the line [1].
        slope: VTS of the line [1].

    Raises:
        OutsideValidity: a viscosity is at or below 1 cP.

    Source: ASTM D2493, inverted.
    """
    exponent = (loglog_viscosity(viscosity_pas) - np.asarray(intercept, float)) / np.asarray(
        slope, float
    )
    found: Floats = 10.0**exponent / RANKINE_PER_KELVIN + ABSOLUTE_ZERO_C
    return found


def intercept_kelvin(intercept: ArrayLike, slope: ArrayLike) -> Floats:
    """Intercept [1] of the same line drawn against kelvin; the slope does not change.

    Args:
        intercept: A for degrees Rankine [1].
        slope: VTS [1].

    Source: algebra.
    """
    found: Floats = np.asarray(intercept, float) + np.asarray(slope, float) * np.log10(
        RANKINE_PER_KELVIN
    )
    return found


def temperature_per_decade_k(
    viscosity_pas: ArrayLike, intercept: ArrayLike, slope: ArrayLike
) -> Floats:
    """Change of temperature [K] for one decade of viscosity along the A-VTS line, negative.

    Args:
        viscosity_pas: dynamic viscosity [Pa.s].
        intercept: A of the line [1].
        slope: VTS of the line [1].

    Source: derivative of the line.
    """
    kelvin = temperature_avts(viscosity_pas, intercept, slope) - ABSOLUTE_ZERO_C
    decades = np.log10(np.asarray(viscosity_pas, float) * CP_PER_PAS)
    found: Floats = kelvin / (np.asarray(slope, float) * decades)
    return found


def flow_energy_avts_j_mol(
    viscosity_pas: ArrayLike, intercept: ArrayLike, slope: ArrayLike
) -> Floats:
    """Local activation energy of flow [J/mol] of the A-VTS line at a viscosity.

    Neat and modified binders measured between 110 and 160 C lie at 44,000 to 90,000 J/mol
    (Salomon and Zhai, looked up): a cheap check of a fitted slope.

    Args:
        viscosity_pas: dynamic viscosity [Pa.s].
        intercept: A of the line [1].
        slope: VTS of the line [1].

    Source: derivative of ln(viscosity) against 1/T along the line.
    """
    kelvin = temperature_avts(viscosity_pas, intercept, slope) - ABSOLUTE_ZERO_C
    nepers = np.log(np.asarray(viscosity_pas, float) * CP_PER_PAS)
    found: Floats = GAS_CONSTANT_J_MOLK * kelvin * np.abs(np.asarray(slope, float)) * nepers
    return found


def viscosity_vft(
    temperature_c: ArrayLike, level: ArrayLike, strength_k: ArrayLike, pole_c: ArrayLike
) -> Floats:
    """Dynamic viscosity [Pa.s] of log10(Pa.s) = level + strength / (T - pole).

    Args:
        temperature_c: temperature [C], above ``pole_c``.
        level: a of the law [1], the logarithm reached at infinite temperature.
        strength_k: b of the law [K].
        pole_c: T0 of the law [C], where the viscosity would be infinite.

    Source: Vogel 1921, Fulcher 1925, Tammann and Hesse 1926 (law, from memory).
    """
    with np.errstate(over="ignore", divide="ignore"):
        above = np.asarray(temperature_c, float) - np.asarray(pole_c, float)
        found: Floats = 10.0 ** (np.asarray(level, float) + np.asarray(strength_k, float) / above)
    return found


def temperature_vft(
    viscosity_pas: ArrayLike, level: ArrayLike, strength_k: ArrayLike, pole_c: ArrayLike
) -> Floats:
    """Temperature [C] at which the VFT law has a viscosity.

    Args:
        viscosity_pas: dynamic viscosity [Pa.s], above 10**level.
        level: a of the law [1].
        strength_k: b of the law [K].
        pole_c: T0 of the law [C].

    Source: the law of ``viscosity_vft``, inverted.
    """
    decades = np.log10(np.asarray(viscosity_pas, float)) - np.asarray(level, float)
    found: Floats = np.asarray(pole_c, float) + np.asarray(strength_k, float) / decades
    return found


def wlf_constants(
    strength_k: ArrayLike, pole_c: ArrayLike, reference_c: ArrayLike
) -> tuple[Floats, Floats]:
    """C1 [1] and C2 [K] of the WLF form of a VFT law at a reference temperature.

    Args:
        strength_k: b of the VFT law [K].
        pole_c: T0 of the VFT law [C].
        reference_c: reference temperature [C].

    Source: Williams, Landel and Ferry 1955, J. Am. Chem. Soc. 77 (from memory); algebra.
    """
    second = np.asarray(reference_c, float) - np.asarray(pole_c, float)
    return np.asarray(strength_k, float) / second, second


def arrhenius_between(
    low_c: ArrayLike, low_pas: ArrayLike, high_c: ArrayLike, high_pas: ArrayLike
) -> tuple[Floats, Floats]:
    """Natural logarithm [1] of the factor and flow energy [J/mol] through two points.

    Only for use between the two temperatures: it bends away from a binder outside.

    Args:
        low_c: lower temperature [C].
        low_pas: viscosity there [Pa.s].
        high_c: higher temperature [C].
        high_pas: viscosity there [Pa.s].

    Source: Arrhenius law, ln(eta) = ln(k) + E / (R T).
    """
    low_k = np.asarray(low_c, float) - ABSOLUTE_ZERO_C
    high_k = np.asarray(high_c, float) - ABSOLUTE_ZERO_C
    low_ln, high_ln = np.log(np.asarray(low_pas, float)), np.log(np.asarray(high_pas, float))
    energy: Floats = GAS_CONSTANT_J_MOLK * (low_ln - high_ln) / (1.0 / low_k - 1.0 / high_k)
    return low_ln - energy / (GAS_CONSTANT_J_MOLK * low_k), energy


def temperature_arrhenius(
    viscosity_pas: ArrayLike, ln_factor: ArrayLike, energy_j_mol: ArrayLike
) -> Floats:
    """Temperature [C] at which the Arrhenius law has a viscosity.

    Args:
        viscosity_pas: dynamic viscosity [Pa.s].
        ln_factor: natural logarithm of the factor k in Pa.s [1].
        energy_j_mol: activation energy of flow [J/mol].

    Source: Arrhenius law, inverted.
    """
    excess = np.log(np.asarray(viscosity_pas, float)) - np.asarray(ln_factor, float)
    kelvin = np.asarray(energy_j_mol, float) / (GAS_CONSTANT_J_MOLK * excess)
    found: Floats = kelvin + ABSOLUTE_ZERO_C
    return found


def d341_constants(
    low_c: ArrayLike,
    low_m2s: ArrayLike,
    high_c: ArrayLike,
    high_m2s: ArrayLike,
    kelvin_offset: float = -ABSOLUTE_ZERO_C,
) -> tuple[Floats, Floats]:
    """A and B [1] of log10 log10(cSt + 0.7) = A - B * log10(K) through two kinematic viscosities.

    Args:
        low_c: lower temperature [C].
        low_m2s: kinematic viscosity there [m2/s], above 2e-6.
        high_c: higher temperature [C].
        high_m2s: kinematic viscosity there [m2/s], above 2e-6.
        kelvin_offset: what turns C into kelvin [K]; older worked examples round it to 273.

    Source: ASTM D341 (short form for more than 2 cSt, looked up).
    """
    low_loglog, high_loglog = _loglog_kinematic(low_m2s), _loglog_kinematic(high_m2s)
    low_log = np.log10(np.asarray(low_c, float) + kelvin_offset)
    high_log = np.log10(np.asarray(high_c, float) + kelvin_offset)
    slope = (low_loglog - high_loglog) / (high_log - low_log)
    return low_loglog + slope * low_log, slope


def kinematic_d341_m2s(
    temperature_c: ArrayLike,
    level: ArrayLike,
    slope: ArrayLike,
    kelvin_offset: float = -ABSOLUTE_ZERO_C,
) -> Floats:
    """Kinematic viscosity [m2/s] on the line of ASTM D341.

    Args:
        temperature_c: temperature [C].
        level: A of the line [1].
        slope: B of the line [1], positive.
        kelvin_offset: what turns C into kelvin [K].

    Source: ASTM D341 (short form for more than 2 cSt, looked up).
    """
    kelvin = np.asarray(temperature_c, float) + kelvin_offset
    loglog = np.asarray(level, float) - np.asarray(slope, float) * np.log10(kelvin)
    found: Floats = (10.0 ** (10.0**loglog) - 0.7) * 1e-6
    return found


def _loglog_kinematic(kinematic_m2s: ArrayLike) -> Floats:
    found: Floats = np.log10(np.log10(np.asarray(kinematic_m2s, float) * 1e6 + 0.7))
    return found
