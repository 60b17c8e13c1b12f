"""What a laboratory reports, as viscosity with its standard deviation and its own validity."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from advisor.errors import FaultyInput, MissingInput

Floats = NDArray[np.float64]
Method = Literal[
    "vacuum capillary",
    "kinematic capillary",
    "rotational",
    "rheometer",
    "penetration",
    "softening point",
    "dynamic viscosity",
]
Condition = Literal["original", "rtfo", "pav", "recovered"]
Laboratories = Literal["one", "several"]

# Points below this temperature bend away from the mixing line: the real binder is stiffer than
# the line drawn from 60 and 135 C (ASTM D2493 section 5, looked up, asks for three points there).
LINE_FROM_C = 59.5
# Correlation of the doubts of the penetration and softening point conversions; derived from the
# eight SHRP core binders named in ``consistency`` (their figures from memory).
CONVERTED_CORRELATION = 0.58


@dataclass(frozen=True)
class Sample:
    """What was measured: ``condition`` of the binder, and by which ``laboratory``."""

    condition: Condition = "original"
    laboratory: str = ""


SAMPLE = Sample()


@dataclass(frozen=True)
class Precision:
    """Standard deviations of one test for results between ``low`` and ``high``.

    ``one_laboratory`` is repetition by one operator, ``several_laboratories`` the spread between
    laboratories: shares of the value [1] where ``relative``, else in the unit of the test (dmm,
    C). Standards usually print the difference two results should not exceed;
    ``difference_two_results`` turns a deviation into that.
    """

    method: str
    one_laboratory: float
    several_laboratories: float
    relative: bool
    source: str
    how_known: str
    low: float = 0.0
    high: float = float("inf")

    def sd(self, value: float, laboratories: Laboratories) -> float:
        """Standard deviation in the unit of ``value``, for the use named."""
        share = self.one_laboratory if laboratories == "one" else self.several_laboratories
        return share * value if self.relative else share


@dataclass(frozen=True)
class PrecisionTable:
    """Precision of every test, to be asked by test and result."""

    rows: tuple[Precision, ...]

    def find(self, method: str, value: float = 1.0) -> Precision:
        """Row for a test and a result; between two rows, the less precise of the test.

        Raises:
            MissingInput: no row names the test.
        """
        named = [row for row in self.rows if row.method == method]
        if not named:
            known = ", ".join(sorted({row.method for row in self.rows}))
            raise MissingInput.of(
                "precision-missing",
                f"No precision is known for '{method}'.",
                f"Known tests: {known}.",
                field="method",
                value=method,
            )
        inside = [row for row in named if row.low <= value <= row.high]
        return max(inside or named, key=lambda row: row.sd(value, "several"))


@dataclass(frozen=True)
class Reading:
    """One reading turned into viscosity.

    ``relative_sd`` is the standard deviation of ln(viscosity) between laboratories and
    ``repeat_sd`` that within one; ``model_sd`` is the doubt of a conversion (0 for a viscosity
    that was measured), contained in both. ``unusable`` says why the reading is kept out of the
    fit, empty where it is in; ``remarks`` are lesser observations.
    """

    method: Method
    temperature_c: float
    viscosity_pas: float
    relative_sd: float
    repeat_sd: float
    as_written: str
    model_sd: float = 0.0
    shear_rate: float | None = None
    sample: Sample = SAMPLE
    unusable: tuple[str, ...] = ()
    remarks: tuple[str, ...] = ()
    precision_source: str = ""
    precision_how_known: str = ""

    @property
    def usable(self) -> bool:
        """Whether the reading may enter a fit."""
        return not self.unusable

    @property
    def converted(self) -> bool:
        """Whether the viscosity comes from an empirical conversion of another test."""
        return self.model_sd > 0.0


def measured_reading(
    method: Method,
    temperature_c: float,
    viscosity_pas: float,
    precision: Precision,
    as_written: str,
    sample: Sample,
    unusable: Sequence[str] = (),
    remarks: Sequence[str] = (),
) -> Reading:
    """Reading of a method that measures viscosity itself.

    Args:
        method: name of the test.
        temperature_c: temperature of the test [C].
        viscosity_pas: dynamic viscosity [Pa.s].
        precision: precision of the method, as shares of the value.
        as_written: the figures as the sheet prints them.
        sample: what was measured, and by whom.
        unusable: why the reading is kept out of the fit.
        remarks: lesser observations.
    """
    return Reading(
        method=method,
        temperature_c=temperature_c,
        viscosity_pas=viscosity_pas,
        relative_sd=precision.several_laboratories,
        repeat_sd=precision.one_laboratory,
        as_written=as_written,
        sample=sample,
        unusable=tuple(unusable),
        remarks=tuple(remarks),
        precision_source=precision.source,
        precision_how_known=precision.how_known,
    )


def viscosity_value_reading(
    temperature_c: float,
    viscosity_pas: float,
    precision: Precision,
    *,
    method: Method = "dynamic viscosity",
    as_written: str = "",
    sample: Sample = SAMPLE,
) -> Reading:
    """Reading from a dynamic viscosity given on a certificate without its raw figures.

    Args:
        temperature_c: temperature of the test [C].
        viscosity_pas: dynamic viscosity [Pa.s].
        precision: precision of the method named.
        method: 'vacuum capillary', 'rotational' or, where none is named, 'dynamic viscosity'.
        as_written: the value as the certificate prints it.
        sample: what was measured, and by whom.

    Raises:
        FaultyInput: the viscosity is not positive.
    """
    require_positive(viscosity_pas, "viscosity")
    written = as_written or f"{viscosity_pas:g} Pa.s"
    remarks = ["Given as a value only: torque, speed or flow times were not stated."]
    return measured_reading(
        method, temperature_c, viscosity_pas, precision, written, sample, remarks=remarks
    )


def require_positive(value: float, name: str) -> None:
    """Refuse a value that is not positive.

    Args:
        value: the value, any unit.
        name: what it is, in words.

    Raises:
        FaultyInput: the value is zero, negative or not a number.
    """
    if not value > 0.0:
        raise FaultyInput.of(
            "not-positive", f"The {name} is {value:g}.", "Enter a positive number.", field=name
        )


def difference_two_results(standard_deviation: float) -> float:
    """Difference that two results exceed once in twenty, in the unit of the deviation.

    Args:
        standard_deviation: standard deviation of one result, any unit.

    Source: ASTM C670, 2 * sqrt(2) (looked up).
    """
    return float(2.0 * np.sqrt(2.0) * standard_deviation)


def error_correlation(readings: Sequence[Reading]) -> Floats:
    """Correlation [1] of the errors of readings, shape (n, n).

    Readings of one method by one laboratory share its bias: the part of the variance between
    laboratories that repetition within one does not explain. Penetration and softening point
    share part of the bend that their conversion leaves out.

    Args:
        readings: the readings, n of them.

    Source: ASTM E691 splits the two variances this way (from memory).
    """
    count = len(readings)
    found = np.eye(count)
    for i, one in enumerate(readings):
        for j, other in enumerate(readings[:i]):
            if {one.method, other.method} == {"penetration", "softening point"}:
                shared = CONVERTED_CORRELATION * one.model_sd * other.model_sd
                found[i, j] = found[j, i] = shared / (one.relative_sd * other.relative_sd)
            elif one.method == other.method and one.sample.laboratory == other.sample.laboratory:
                shared = np.sqrt(_bias_variance(one) * _bias_variance(other))
                found[i, j] = found[j, i] = shared / (one.relative_sd * other.relative_sd)
    return found


def _bias_variance(reading: Reading) -> float:
    return max(reading.relative_sd**2 - reading.repeat_sd**2, 0.0)
