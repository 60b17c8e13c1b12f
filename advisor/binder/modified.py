"""Windows of modified binder: the supplier's range governs, published methods stand beside it."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from advisor.binder.curve import curve_through
from advisor.binder.windows import Purpose, ViscosityTarget, Window
from advisor.errors import FaultyInput, OutsideValidity
from advisor.units import ABSOLUTE_ZERO_C, celsius_from_fahrenheit

Floats = NDArray[np.float64]

# Phase angle method: T[F] = factor * w^exponent, w in rad/s where the phase angle is 86 degrees on
# the 80 C master curve. NCHRP Report 648 (from memory, nobody has confirmed it here).
_PHASE_ANGLE = {"mixing": (325.0, -0.0135), "compaction": (300.0, -0.012)}
PHASE_ANGLE_WANTED_DEG = 86.0
_PHASE_ANGLE_HALF_WIDTH_K = 3.0  # common practice, no source: width of the usual window
STEADY_SHEAR_STRESS_PA = 500.0  # NCHRP Report 648 (from memory)


@dataclass(frozen=True)
class SupplierRange:
    """What the supplier allows for a purpose: 'mixing', 'compaction' or 'storage' [C]."""

    purpose: str
    low_c: float
    high_c: float
    source: str

    def __post_init__(self) -> None:
        if not self.low_c < self.high_c:
            raise FaultyInput.of(
                "range-order",
                f"The supplier's {self.purpose} range runs from {self.low_c:g} to "
                f"{self.high_c:g} C.",
                "Give the lower temperature first.",
                field=self.purpose,
            )


@dataclass(frozen=True)
class Governed:
    """Which window rules for a purpose, which stand beside it, and what was refused and why."""

    purpose: Purpose
    governing: Window | None
    beside: tuple[Window, ...]
    refused: tuple[str, ...]


def supplier_window(supplier: SupplierRange) -> Window:
    """Window of the supplier's range, its middle as target.

    Args:
        supplier: the range.
    """
    low, high = np.asarray(supplier.low_c), np.asarray(supplier.high_c)
    none = np.zeros(())
    purpose: Purpose = "compaction" if supplier.purpose == "compaction" else "mixing"
    return Window(
        low, 0.5 * (low + high), high, none, none, none, purpose, "supplier's range",
        supplier.source, "entered",
    )  # fmt: skip


def govern(
    purpose: Purpose,
    plain: Window | None,
    supplier: Window | None,
    others: Sequence[Window] = (),
    modified_because: str = "",
) -> Governed:
    """Which window rules: the plain one for neat binder, the supplier's for modified.

    A modified binder without a supplier's range has no governing window: the range is asked for,
    and nothing computed takes its place.

    Args:
        purpose: what the windows are for.
        plain: window by equal viscosity, where there is a curve.
        supplier: window of the supplier's range, where there is one.
        others: windows by methods for modified binder.
        modified_because: why the plain rule does not apply; empty for neat binder.

    Source: Asphalt Institute MS-2 on modified binder (looked up): its equiviscous results often
    exceed 177 C.
    """
    if not modified_because:
        beside = tuple(one for one in (supplier, *others) if one is not None)
        return Governed(purpose, plain, beside, ())
    refused = [f"The rule of equal viscosity is not used: {modified_because}"]
    if supplier is None:
        refused.append(
            f"No {purpose} temperature is given: ask the supplier for the range and enter it."
        )
    return Governed(purpose, supplier, tuple(others), tuple(refused))


def phase_angle_window(frequency_rad_s: float, purpose: Purpose) -> Window:
    """Window by the phase angle method.

    Args:
        frequency_rad_s: frequency [rad/s] at which the phase angle is 86 degrees on the master
            curve at 80 C.
        purpose: 'mixing' or 'compaction'.

    Raises:
        OutsideValidity: another purpose.

    Source: NCHRP Report 648 (from memory).
    """
    target = phase_angle_temperature_c(frequency_rad_s, purpose)
    none, half = np.zeros(()), _PHASE_ANGLE_HALF_WIDTH_K
    return Window(
        target - half, target, target + half, none, none, none, purpose, "phase angle",
        "NCHRP Report 648, phase angle method", "from memory",
        ("Constants from memory: confirm against the report before use.",),
    )  # fmt: skip


def phase_angle_temperature_c(frequency_rad_s: ArrayLike, purpose: Purpose) -> Floats:
    """Temperature [C] by the phase angle method.

    Args:
        frequency_rad_s: frequency [rad/s] at which the phase angle is 86 degrees on the master
            curve at 80 C.
        purpose: 'mixing' or 'compaction'.

    Raises:
        OutsideValidity: another purpose.

    Source: NCHRP Report 648 (from memory).
    """
    if purpose not in _PHASE_ANGLE:
        raise OutsideValidity.of(
            "phase-angle-purpose",
            f"The phase angle method gives no {purpose} temperature.",
            "It serves mixing and compaction.",
        )
    factor, exponent = _PHASE_ANGLE[purpose]
    frequency = np.asarray(frequency_rad_s, float)
    found: Floats = np.asarray(celsius_from_fahrenheit(factor * frequency**exponent))  # type: ignore[arg-type]
    return found


def steady_shear_temperature_c(
    temperature_c: ArrayLike, viscosity_pas: ArrayLike, wanted_pas: ArrayLike, kelvin: bool = False
) -> Floats:
    """Temperature [C] where the straight line through viscosities at 500 Pa meets a target.

    The line is ln(viscosity) against ln(temperature); whether in C or in kelvin was not
    confirmed, and the two differ by tens of degrees.

    Args:
        temperature_c: test temperatures [C], shape (n,).
        viscosity_pas: viscosities [Pa.s] at 500 Pa, shape (n,).
        wanted_pas: viscosity wanted [Pa.s].
        kelvin: whether the axis is in kelvin rather than C.

    Source: steady shear flow method, NCHRP Report 648 (from memory).
    """
    shift = -ABSOLUTE_ZERO_C if kelvin else 0.0
    x = np.log(np.asarray(temperature_c, float) + shift)
    y = np.log(np.asarray(viscosity_pas, float))
    slope = np.sum((x - x.mean()) * (y - y.mean())) / np.sum((x - x.mean()) ** 2)
    level = y.mean() - slope * x.mean()
    found: Floats = np.exp((np.log(np.asarray(wanted_pas, float)) - level) / slope) - shift
    return found


def steady_shear_window(
    temperature_c: ArrayLike, viscosity_pas: ArrayLike, target: ViscosityTarget
) -> Window:
    """Window by the steady shear flow method.

    Args:
        temperature_c: test temperatures [C], shape (n,).
        viscosity_pas: viscosities [Pa.s] at 500 Pa, shape (n,).
        target: target with basis 'steady shear flow'.

    Source: NCHRP Report 648 (from memory).
    """
    low, middle, high = (
        steady_shear_temperature_c(temperature_c, viscosity_pas, value)
        for value in (target.high, target.target, target.low)
    )
    none = np.zeros(())
    return Window(
        low, middle, high, none, none, none, target.purpose, target.name, target.source,
        target.how_known,
        ("Drawn against C; against kelvin it lies lower. Confirm against the report before use.",),
    )  # fmt: skip


def cross_williamson_pas(
    shear_rate_per_s: ArrayLike,
    zero_pas: ArrayLike,
    time_s: ArrayLike,
    exponent: ArrayLike,
    infinite_pas: ArrayLike = 0.0,
) -> Floats:
    """Viscosity [Pa.s] of a shear-thinning binder at a shear rate.

    Args:
        shear_rate_per_s: shear rate [1/s].
        zero_pas: viscosity at rest [Pa.s].
        time_s: K of the model [s].
        exponent: m of the model [1].
        infinite_pas: viscosity at infinite rate [Pa.s].

    Source: Cross 1965, J. Colloid Sci. 20 (model, from memory).
    """
    rate = np.asarray(time_s, float) * np.asarray(shear_rate_per_s, float)
    infinite = np.asarray(infinite_pas, float)
    found: Floats = infinite + (np.asarray(zero_pas, float) - infinite) / (
        1.0 + rate ** np.asarray(exponent, float)
    )
    return found


@dataclass(frozen=True)
class FlowSweep:
    """Viscosities [Pa.s] at several shear rates [1/s] and one temperature [C]."""

    temperature_c: float
    shear_rate_per_s: tuple[float, ...]
    viscosity_pas: tuple[float, ...]


def fit_cross_williamson(sweep: FlowSweep) -> tuple[float, float, float]:
    """Viscosity at rest [Pa.s], K [s] and m [1] of the three-constant form, by least squares.

    Args:
        sweep: three or more shear rates at one temperature.

    Raises:
        FaultyInput: fewer than three rates.

    Source: Cross 1965 with no infinite-rate viscosity.
    """
    from scipy.optimize import least_squares

    rate, eta = np.asarray(sweep.shear_rate_per_s), np.asarray(sweep.viscosity_pas)
    if rate.size < 3:
        raise FaultyInput.of(
            "few-rates",
            f"The sweep at {sweep.temperature_c:g} C has {rate.size} shear rates.",
            "Measure three or more.",
            field="sweeps",
        )

    def miss(constants: Floats) -> Floats:
        zero, time, exponent = np.exp(constants)
        found: Floats = np.log(cross_williamson_pas(rate, zero, time, exponent) / eta)
        return found

    start = np.log([1.1 * float(eta.max()), 1.0 / float(np.median(rate)), 0.5])
    found = least_squares(miss, start, bounds=([-20, -20, np.log(0.05)], [20, 20, np.log(1.5)]))
    zero, time, exponent = (float(part) for part in np.exp(found.x))
    return zero, time, exponent


def shear_window(
    sweeps: Sequence[FlowSweep], target: ViscosityTarget, shear_rate_per_s: float
) -> Window:
    """Window from the viscosity at one shear rate, or at rest, at two temperatures.

    Args:
        sweeps: flow sweeps at two temperatures or more; the lowest and the highest are used.
        target: viscosity wanted, basis 'high shear' or 'low shear'.
        shear_rate_per_s: shear rate [1/s] the target is meant for; 0 for rest.

    Raises:
        FaultyInput: fewer than two sweeps.

    Source: as the target names; temperature line of ASTM D2493.
    """
    if len(sweeps) < 2:
        raise FaultyInput.of(
            "few-sweeps",
            "A window at a shear rate needs flow sweeps at two temperatures.",
            "Measure a second temperature.",
            field="sweeps",
        )
    ordered = sorted(sweeps, key=lambda sweep: sweep.temperature_c)
    ends = (ordered[0], ordered[-1])
    eta = [cross_williamson_pas(shear_rate_per_s, *fit_cross_williamson(end)) for end in ends]
    line = curve_through(ends[0].temperature_c, eta[0], ends[1].temperature_c, eta[1])
    none = np.zeros(())
    measured = max(ends[0].shear_rate_per_s[-1], ends[1].shear_rate_per_s[-1])
    far = shear_rate_per_s > measured
    return Window(
        line.temperature_c(target.high), line.temperature_c(target.target),
        line.temperature_c(target.low), none, none, none, target.purpose, target.name,
        target.source, target.how_known,
        (f"The sweeps end at {measured:g} 1/s, below the {shear_rate_per_s:g} 1/s wanted.",) * far,
    )  # fmt: skip
