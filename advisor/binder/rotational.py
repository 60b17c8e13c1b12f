"""Rotational viscometer: shear rate, torque and whether the reading may be believed."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import ArrayLike, NDArray

from advisor.binder.readings import (
    SAMPLE,
    Precision,
    Reading,
    Sample,
    measured_reading,
    require_positive,
)
from advisor.errors import FaultyInput

Floats = NDArray[np.float64]

# Range of the rotational method, ASTM D4402-23 scope (looked up).
_ROTATIONAL_RANGE_C = (38.0, 260.0)
# Torque window: 10 to 98 % of full scale (from memory; some laboratories go down to 2 %).
TORQUE_LOW, TORQUE_HIGH = 0.10, 0.98
# Reported value from the mean of three: the spread that asks for a repeat. Common practice.
_THREE_READINGS_SPREAD = 0.05


@dataclass(frozen=True)
class Spindle:
    """A bob of the heated-cup viscometer: radius and effective length [m] (from memory)."""

    number: int
    radius_m: float
    effective_length_m: float | None


CUP_RADIUS_M = 9.525e-3  # from memory
SPINDLES: dict[int, Spindle] = {
    21: Spindle(21, 8.385e-3, 35.15e-3),
    27: Spindle(27, 5.88e-3, 39.29e-3),
    29: Spindle(29, 3.81e-3, None),
}
FULL_SCALE_TORQUE_NM = 0.7187e-3  # 7187 dyn.cm, from memory


def shear_rate_per_s(speed_rad_s: ArrayLike, spindle: Spindle) -> Floats:
    """Shear rate [1/s] at the bob of concentric cylinders.

    Args:
        speed_rad_s: rotation [rad/s].
        spindle: geometry of the bob.

    Source: Newtonian flow between concentric cylinders (textbook); agrees with the factors 0.93,
    0.34 and 0.25 1/s per rpm quoted for bobs 21, 27 and 29 (from memory).
    """
    cup, bob = CUP_RADIUS_M**2, spindle.radius_m**2
    found: Floats = 2.0 * np.asarray(speed_rad_s, float) * cup / (cup - bob)
    return found


def torque_share(viscosity_pas: ArrayLike, speed_rad_s: ArrayLike, spindle: Spindle) -> Floats:
    """Torque [1] as a share of full scale that a viscosity gives at a speed.

    Args:
        viscosity_pas: dynamic viscosity [Pa.s].
        speed_rad_s: rotation [rad/s].
        spindle: geometry of the bob, with its effective length.

    Raises:
        FaultyInput: the effective length of the bob is not known.

    Source: Newtonian flow between concentric cylinders (textbook).
    """
    if spindle.effective_length_m is None:
        raise FaultyInput.of(
            "spindle-length",
            f"The effective length of spindle {spindle.number} is not known.",
            "Enter the torque the instrument showed.",
            field="torque",
        )
    cup, bob = CUP_RADIUS_M**2, spindle.radius_m**2
    torque = (
        4.0
        * np.pi
        * spindle.effective_length_m
        * np.asarray(speed_rad_s, float)
        * np.asarray(viscosity_pas, float)
        * bob
        * cup
        / (cup - bob)
    )
    found: Floats = torque / FULL_SCALE_TORQUE_NM
    return found


def rotational_reading(
    temperature_c: float,
    values_pas: Sequence[float],
    precision: Precision,
    *,
    spindle: int | None = None,
    speed_rad_s: float | None = None,
    torque: float | None = None,
    sample: Sample = SAMPLE,
) -> Reading:
    """Viscosity from the readings of a rotational viscometer, mean of those given.

    Where the torque was not noted it is worked out from spindle and speed; outside 10 to 98 % of
    full scale the reading is set aside.

    Args:
        temperature_c: temperature of the cup [C].
        values_pas: readings [Pa.s], three of them a minute apart by the method.
        precision: precision of the method.
        spindle: number of the bob.
        speed_rad_s: rotation [rad/s].
        torque: torque shown, as a share of full scale [1].
        sample: what was measured, and by whom.

    Raises:
        FaultyInput: no value, or one that is not positive.

    Source: ASTM D4402, AASHTO T 316 (range, three readings looked up; torque window from memory).
    """
    if not values_pas:
        raise FaultyInput.of("no-value", "A rotational reading has no value.", field="values")
    for value in values_pas:
        require_positive(value, "viscosity")
    mean = float(np.mean(values_pas))
    unusable: list[str] = []
    remarks: list[str] = []
    low, high = _ROTATIONAL_RANGE_C
    if not low <= temperature_c <= high:
        unusable.append(f"{temperature_c:g} C is outside the method's {low:g} to {high:g} C.")
    bob = SPINDLES.get(spindle) if spindle is not None else None
    rate = None
    if bob is not None and speed_rad_s is not None:
        rate = float(shear_rate_per_s(speed_rad_s, bob))
    if torque is None and rate is not None and bob is not None and bob.effective_length_m:
        torque = float(torque_share(mean, speed_rad_s or 0.0, bob))
        remarks.append(f"Torque worked out from spindle and speed: {torque:.1%} of full scale.")
    if torque is None:
        remarks.append("Torque unknown: whether it was inside 10 to 98 % cannot be checked.")
    elif not TORQUE_LOW <= torque <= TORQUE_HIGH:
        unusable.append(
            f"The torque, {torque:.1%} of full scale, is outside 10 to 98 %: change the speed or "
            "the spindle."
        )
    if len(values_pas) < 3:
        remarks.append("The method asks for three readings a minute apart.")
    elif float(np.ptp(values_pas)) > _THREE_READINGS_SPREAD * mean:
        spread = float(np.ptp(values_pas)) / mean
        unusable.append(
            f"The readings spread by {spread:.0%} of their mean: the sample had not settled."
        )
    written = ", ".join(f"{value:g}" for value in values_pas) + " Pa.s"
    reading = measured_reading(
        "rotational", temperature_c, mean, precision, written, sample, unusable, remarks
    )
    return replace(reading, shear_rate=rate)
