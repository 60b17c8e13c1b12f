"""Temperature windows read from a viscosity curve: mixing, compaction, pumping."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

import numpy as np
from numpy.typing import ArrayLike, NDArray

from advisor.binder.curve import ViscosityCurve
from advisor.binder.density import Column, density_kgm3
from advisor.errors import FaultyInput

Floats = NDArray[np.float64]
Purpose = Literal["mixing", "compaction", "rolling", "pumping", "spraying"]
Basis = Literal["dynamic", "kinematic", "high shear", "low shear", "steady shear flow"]


@dataclass(frozen=True)
class ViscosityTarget:
    """A viscosity somebody wants for a purpose, with its range.

    ``low``, ``target`` and ``high`` are in Pa.s, or in m2/s where ``basis`` is 'kinematic'.
    """

    name: str
    purpose: Purpose
    basis: Basis
    low: float
    target: float
    high: float
    source: str
    how_known: str

    def __post_init__(self) -> None:
        if not 0.0 < self.low <= self.target <= self.high:
            raise FaultyInput.of(
                "target-order",
                f"The viscosity target '{self.name}' runs from {self.low:g} over {self.target:g} "
                f"to {self.high:g}.",
                "Give 0 < low <= target <= high.",
                field="target",
            )


@dataclass(frozen=True, eq=False)
class Window:
    """Low, target and high temperature [C] with the standard deviation [K] of each.

    A high viscosity belongs to the low temperature. ``cautions`` are sentences to show beside it.
    """

    low_c: Floats
    target_c: Floats
    high_c: Floats
    low_sd_k: Floats
    target_sd_k: Floats
    high_sd_k: Floats
    purpose: Purpose
    method: str
    source: str
    how_known: str
    cautions: tuple[str, ...] = ()


def equiviscous_window(
    curve: ViscosityCurve,
    target_pas: ArrayLike,
    tolerance_pas: ArrayLike,
    *,
    purpose: Purpose = "mixing",
    method: str = "equiviscous",
    source: str = "entered",
    how_known: str = "entered",
) -> Window:
    """Window between the temperatures at a target viscosity plus and minus a tolerance.

    Args:
        curve: viscosity curve of any number of cases.
        target_pas: viscosity wanted [Pa.s].
        tolerance_pas: distance of the edges from the target [Pa.s].
        purpose: what the window is for.
        method: name of the rule.
        source: where the target comes from.
        how_known: how it is known.

    Source: the rule of equal viscosity, Asphalt Institute MS-2 section 4.2.1 (looked up).
    """
    middle = np.asarray(target_pas, float)
    reach = np.asarray(tolerance_pas, float)
    return _dynamic(
        curve, middle - reach, middle, middle + reach, purpose, method, source, how_known
    )


def window_for(
    curve: ViscosityCurve,
    target: ViscosityTarget,
    density_15c_kgm3: ArrayLike | None = None,
    column: Column = "A",
) -> Window:
    """Window of a curve for a named viscosity target.

    Args:
        curve: viscosity curve of any number of cases; of the shear rate the target is meant for.
        target: what is wanted; dynamic or kinematic.
        density_15c_kgm3: density at 15 C [kg/m3], needed for a kinematic target.
        column: volume factor column of the density.

    Raises:
        FaultyInput: a kinematic target without a density.

    Source: as the target names; the kinematic form is Asphalt Institute MS-2, 1974 (looked up).
    """
    values = (target.low, target.target, target.high)
    if target.basis == "kinematic" and density_15c_kgm3 is None:
        raise FaultyInput.of(
            "density-missing",
            f"The target '{target.name}' is kinematic and needs the density of the binder.",
            "Enter the density at 15 C, or choose a dynamic target.",
            field="density",
        )
    thin, middle, thick = (
        np.asarray(value, float)
        if density_15c_kgm3 is None or target.basis != "kinematic"
        else _dynamic_of_kinematic(curve, value, density_15c_kgm3, column)
        for value in values
    )
    words = (target.purpose, target.name, target.source, target.how_known)
    return _dynamic(curve, thin, middle, thick, *words)


def _dynamic(
    curve: ViscosityCurve,
    low_pas: ArrayLike,
    target_pas: ArrayLike,
    high_pas: ArrayLike,
    purpose: Purpose,
    method: str,
    source: str,
    how_known: str,
) -> Window:
    thick, middle, thin = (np.asarray(part, float) for part in (high_pas, target_pas, low_pas))
    low_c, target_c, high_c = (curve.temperature_c(part) for part in (thick, middle, thin))
    return Window(
        low_c=low_c,
        target_c=target_c,
        high_c=high_c,
        low_sd_k=_sd_k(curve, low_c),
        target_sd_k=_sd_k(curve, target_c),
        high_sd_k=_sd_k(curve, high_c),
        purpose=purpose,
        method=method,
        source=source,
        how_known=how_known,
        cautions=(*curve.notes, *_extrapolation(curve, low_c, high_c)),
    )


def _sd_k(curve: ViscosityCurve, temperature_c: Floats) -> Floats:
    found: Floats = curve.relative_sd(temperature_c) / np.abs(curve.log_slope_per_k(temperature_c))
    return found


def _dynamic_of_kinematic(
    curve: ViscosityCurve, kinematic_m2s: float, density_15c_kgm3: ArrayLike, column: Column
) -> Floats:
    # The density falls by 0.06 % per K where the viscosity falls by 4 %: three rounds leave
    # less than a thousandth of a degree.
    density = density_kgm3(150.0, density_15c_kgm3, column)
    for _ in range(3):
        temperature = curve.temperature_c(kinematic_m2s * density)
        density = density_kgm3(temperature, density_15c_kgm3, column)
    found: Floats = kinematic_m2s * density
    return found


# A window this far above or below the readings is called extrapolated. Common practice, no
# source: the usual pair of 60 and 135 C is used up to about 165 C.
_FAR_K = 35.0


def _extrapolation(curve: ViscosityCurve, low_c: Floats, high_c: Floats) -> tuple[str, ...]:
    if np.isnan(curve.measured_low_c) or np.size(low_c) != 1:
        return ()
    far = max(float(curve.outside_measured_k(low_c)), float(curve.outside_measured_k(high_c)))
    if far <= _FAR_K:
        return ()
    sentence = (
        f"The window lies up to {far:.0f} K outside the measured temperatures "
        f"({curve.measured_low_c:.0f} to {curve.measured_high_c:.0f} C); extrapolated values "
        "may be unreliable (ASTM D2493)."
    )
    return (sentence,)
