"""Hardening of binder: in mixing, in the tank, in the silo, in service, and by what it is told."""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import Literal

import numpy as np
from numpy.typing import ArrayLike, NDArray

from advisor.binder.curve import ViscosityCurve
from advisor.binder.fit import AvtsPrior
from advisor.binder.laws import GAS_CONSTANT_J_MOLK, log_rankine, loglog_viscosity
from advisor.errors import FaultyInput
from advisor.units import ABSOLUTE_ZERO_C, UnitSystem, shown

Floats = NDArray[np.float64]
Resistance = Literal["excellent to good", "average", "fair", "poor"]

# Code by resistance to hardening, Mirza and Witczak 1995 (from memory).
HARDENING_CODES: dict[Resistance, int] = {
    "excellent to good": -1,
    "average": 0,
    "fair": 1,
    "poor": 2,
}
# Activation energy of oxidation, J/mol: 64 to 109 in 14 asphalts (Liu et al. 1996, AIChE J. 42(4),
# looked up; measured near 60 to 100 C). The middle value is common practice, no source.
OXIDATION_LOW_J_MOL, OXIDATION_MIDDLE_J_MOL, OXIDATION_HIGH_J_MOL = 64e3, 85e3, 109e3
# A hot mix film hardens by about this factor at 135 C on its way through plant and laying: derived
# from the hardening codes (1.6 to 2.4 at 0.4 Pa.s).
_MIXING_FACTOR = 1.85
# The softening point rises 1 K for every 5.5 K of mixing temperature (rule of thumb, from memory);
# 1 K along the curve is 5.6 % of viscosity at 135 C (derived from a PG 64-22 line).
_SOFTENING_PER_K, _LN_VISCOSITY_PER_K = 1.0 / 5.5, 0.056
# Storage: days in which a still tank of 0.15 m2 surface per tonne at 150 C hardens by less than
# what a test can see. 'Virtually no change in 4 weeks' of 3 to 4 kt (looked up).
_STILL_DAYS, _STILL_SURFACE_M2_T, _STILL_C = 28.0, 0.15, 150.0
_STILL_CHANGE = 0.05  # most change of viscosity [1] that passes for none; repeatability, T 316
# A return that falls through air or strong circulation: common practice, no source.
_CIRCULATION_FACTOR = 3.0


def _line(code: ArrayLike) -> tuple[Floats, Floats]:
    number = np.asarray(code, float)
    return 0.054405 + 0.004082 * number, 0.972035 + 0.010886 * number


def aged_viscosity_pas(viscosity_pas: ArrayLike, code: ArrayLike = 0) -> Floats:
    """Viscosity [Pa.s] after mixing and laying of a viscosity before.

    Args:
        viscosity_pas: viscosity of the tank binder [Pa.s], at any one temperature.
        code: hardening code [1], -1 (excellent to good) to 2 (poor).

    Source: global ageing system, Mirza and Witczak 1995 (from memory; checked by size).
    """
    level, slope = _line(code)
    loglog = level + slope * loglog_viscosity(viscosity_pas)
    found: Floats = 10.0 ** (10.0**loglog) / 1000.0
    return found


def aged_curve(curve: ViscosityCurve, code: float = 0.0, code_sd: float = 0.0) -> ViscosityCurve:
    """Curve after mixing and laying of the curve of the tank binder.

    Args:
        curve: A-VTS curve before.
        code: hardening code [1], -1 to 2.
        code_sd: standard deviation of the code [1].

    Source: global ageing system, Mirza and Witczak 1995 (from memory).
    """
    level, slope = _line(code)
    parameters = curve.parameters * slope
    parameters[..., 0] += level
    step = 0.010886 * curve.parameters
    step[..., 0] += 0.004082
    spread = code_sd**2 * step[..., :, None] * step[..., None, :]
    return replace(
        curve,
        parameters=parameters,
        covariance=curve.covariance * slope**2 + spread,
        basis=f"{curve.basis}, after mixing",
    )


def original_constants(
    intercept: ArrayLike, slope: ArrayLike, code: ArrayLike = 0
) -> tuple[Floats, Floats]:
    """A and VTS [1] of the tank binder from those after mixing, as tables of defaults give them.

    Args:
        intercept: A after mixing [1].
        slope: VTS after mixing [1].
        code: hardening code [1].

    Source: global ageing system, Mirza and Witczak 1995 (from memory), inverted.
    """
    level, factor = _line(code)
    return (np.asarray(intercept, float) - level) / factor, np.asarray(slope, float) / factor


def original_prior(prior: AvtsPrior, code: float = 0.0) -> AvtsPrior:
    """Prior of the tank binder from one that describes the binder after mixing.

    Args:
        prior: belief about the aged binder.
        code: hardening code [1].

    Source: global ageing system, Mirza and Witczak 1995 (from memory), inverted.
    """
    _, factor = _line(code)
    mean = np.stack(original_constants(prior.mean[0], prior.mean[1], code))
    return replace(prior, mean=mean, covariance=prior.covariance / factor**2)


def in_service_viscosity_pas(
    intercept: ArrayLike,
    slope: ArrayLike,
    temperature_c: ArrayLike,
    months: ArrayLike,
    mean_air_c: ArrayLike,
) -> Floats:
    """Viscosity [Pa.s] at the surface of a pavement after years, for a guess of RAP binder.

    Args:
        intercept: A after mixing and laying [1].
        slope: VTS after mixing and laying [1].
        temperature_c: temperature of the viscosity wanted [C].
        months: age [months].
        mean_air_c: mean annual air temperature [C], above -17.8; the model takes Fahrenheit.

    Source: global ageing system, Mirza and Witczak 1995 (from memory; checked by size).
    """
    x = log_rankine(temperature_c)
    fresh = np.asarray(intercept, float) + np.asarray(slope, float) * x
    air = np.log10(np.asarray(mean_air_c, float) * 1.8 + 32.0)
    c = 10.0 ** (274.4946 - 193.831 * x + 33.9366 * x**2)
    d = -14.5521 + 10.47662 * x - 1.88161 * x**2
    a = -0.004166 + 1.41213 * c + c * air + d * fresh
    b = 0.197725 + 0.068384 * np.log10(c)
    age = np.asarray(months, float)
    found: Floats = 10.0 ** (10.0 ** ((fresh + a * age) / (1.0 + b * age))) / 1000.0
    return found


def ageing_index(aged: ArrayLike, original: ArrayLike) -> Floats:
    """Ratio [1] of a property after ageing to the same before.

    Args:
        aged: property after [any unit].
        original: property before [same unit].

    Source: definition.
    """
    found: Floats = np.asarray(aged, float) / np.asarray(original, float)
    return found


def oxidation_ratio(
    from_c: ArrayLike, to_c: ArrayLike, energy_j_mol: ArrayLike = OXIDATION_MIDDLE_J_MOL
) -> Floats:
    """Factor [1] on the rate of oxidation between two temperatures.

    Args:
        from_c: first temperature [C].
        to_c: second temperature [C].
        energy_j_mol: activation energy [J/mol].

    Source: Arrhenius; energies of Liu et al. 1996 (looked up).
    """
    first = np.asarray(from_c, float) - ABSOLUTE_ZERO_C
    second = np.asarray(to_c, float) - ABSOLUTE_ZERO_C
    found: Floats = np.exp(
        np.asarray(energy_j_mol, float) / GAS_CONSTANT_J_MOLK * (1.0 / first - 1.0 / second)
    )
    return found


def oxidation_energy_j_mol(from_c: ArrayLike, to_c: ArrayLike, ratio: ArrayLike) -> Floats:
    """Activation energy [J/mol] that a ratio of rates between two temperatures implies.

    Args:
        from_c: first temperature [C].
        to_c: second temperature [C].
        ratio: ratio of the rates [1].

    Source: Arrhenius, inverted.
    """
    first = np.asarray(from_c, float) - ABSOLUTE_ZERO_C
    second = np.asarray(to_c, float) - ABSOLUTE_ZERO_C
    found: Floats = (
        GAS_CONSTANT_J_MOLK * np.log(np.asarray(ratio, float)) / (1.0 / first - 1.0 / second)
    )
    return found


@dataclass(frozen=True)
class Hardening:
    """Factor on viscosity at 135 C [1], lowest, middle and highest believed, and in words."""

    low: float
    middle: float
    high: float
    sentence: str


def mixing_hardening(mixing_c: float, hotter_k: float, units: UnitSystem = "si") -> Hardening:
    """How much more the binder hardens when mixed hotter, as a factor on its viscosity at 135 C.

    The hardening that is usual in mixing and laying is taken to happen at the temperature of now.
    The least effect of more believed is a rule of thumb on the softening point; the greatest takes
    all hardening for oxidation with the highest activation energy. The middle lies between the
    rule and oxidation with the middle energy.

    Args:
        mixing_c: temperature the mix is made at now [C].
        hotter_k: how much hotter [K]; negative for cooler.
        units: units of the sentence.

    Source: activation energies of Liu et al. 1996 (looked up, near 60 to 100 C); hardening codes
    of Mirza and Witczak and the softening point rule (from memory). A plant study in Virginia,
    1972, saw no effect in the oven up to 149 C (looked up): plant results conflict.
    """

    def by_oxidation(energy: float) -> float:
        more = oxidation_ratio(mixing_c, mixing_c + hotter_k, energy) - 1.0
        return float(np.log(_MIXING_FACTOR) * more)

    by_rule = _LN_VISCOSITY_PER_K * _SOFTENING_PER_K * hotter_k
    middle = 0.5 * (by_rule + by_oxidation(OXIDATION_MIDDLE_J_MOL))
    most = by_oxidation(OXIDATION_HIGH_J_MOL)
    low, middle, high = sorted(float(np.exp(part)) for part in (by_rule, middle, most))
    word = "hotter" if hotter_k >= 0.0 else "cooler"
    return Hardening(
        low,
        middle,
        high,
        f"Mixed {shown(abs(hotter_k), 'temperature_delta', units)} {word}, the binder leaves the "
        f"plant with {low:.2f} to {high:.2f} times its usual viscosity at "
        f"{shown(135.0, 'temperature', units)} (middle {middle:.2f}); plant studies conflict, so "
        "take this as a size, not a figure.",
    )


def tank_hardening(
    hours: float,
    tank_c: float,
    surface_m2_per_t: float,
    circulated: bool = False,
    units: UnitSystem = "si",
) -> Hardening:
    """Hardening of binder stored in a tank, as a factor on its viscosity at 135 C.

    Exposed surface per tonne drives it, not days alone.

    Args:
        hours: time in the tank [h].
        tank_c: temperature [C].
        surface_m2_per_t: exposed surface per tonne [m2/t], see ``exposed_surface_m2_t``.
        circulated: whether the return falls through air or the tank is stirred hard.
        units: units of the sentence.

    Raises:
        FaultyInput: a negative time or surface.

    Source: scaled from 'virtually no change in 4 weeks' of a large still tank at 150 C (looked
    up) by surface and activation energy; circulation factor common practice, no source.
    """
    if hours < 0.0 or surface_m2_per_t < 0.0:
        raise FaultyInput.of(
            "storage", "Hours and surface cannot be negative.", "Enter zero or more."
        )
    dose = hours / 24.0 / _STILL_DAYS * surface_m2_per_t / _STILL_SURFACE_M2_T
    high_dose = dose * (_CIRCULATION_FACTOR if circulated else 1.0)
    middle = float(np.exp(0.5 * _STILL_CHANGE * dose * oxidation_ratio(_STILL_C, tank_c)))
    ratios = [
        float(oxidation_ratio(_STILL_C, tank_c, energy))
        for energy in (OXIDATION_LOW_J_MOL, OXIDATION_HIGH_J_MOL)
    ]
    high = float(np.exp(_STILL_CHANGE * high_dose * max(ratios)))
    middle = min(max(middle, 1.0), high)
    return Hardening(
        1.0,
        middle,
        high,
        f"After {hours:.0f} h at {shown(tank_c, 'temperature', units)} the binder may have up to "
        f"{high:.2f} times its viscosity at {shown(135.0, 'temperature', units)}; one large still "
        "tank showed no change in four weeks.",
    )


def exposed_surface_m2_t(liquid_height_m: ArrayLike, density_kgm3: ArrayLike = 920.0) -> Floats:
    """Exposed surface per tonne [m2/t] of an upright tank, or about that of one lying down.

    Args:
        liquid_height_m: height of the liquid [m].
        density_kgm3: density at storage temperature [kg/m3].

    Source: geometry.
    """
    found: Floats = 1000.0 / (np.asarray(liquid_height_m, float) * np.asarray(density_kgm3, float))
    return found


def silo_ageing_caution(hours: float, open_graded: bool = False) -> str:
    """Sentence on what storage in a silo does to the binder; empty while short.

    Args:
        hours: time in the silo [h].
        open_graded: whether the mix is open, whose films harden sooner.

    Source: studies disagree: New York saw none in dense mix up to 48 h, New Hampshire some within
    10 h, Ontario none in 24 h (abstracts looked up); thresholds common practice.
    """
    warn, stop = (6.0, 12.0) if open_graded else (10.0, 24.0)
    if hours < warn:
        return ""
    if hours < stop:
        return f"After {hours:.0f} h in the silo hardening is possible; published studies disagree."
    return (
        f"After {hours:.0f} h in the silo take hardening as likely: sample before use, and expect "
        "a stiffer mix."
    )
