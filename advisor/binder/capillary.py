"""Capillary viscometers: flow times to viscosity, and whether they may be believed."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace

import numpy as np

from advisor.binder.density import Column, dynamic_from_kinematic_pas
from advisor.binder.readings import (
    SAMPLE,
    Precision,
    Reading,
    Sample,
    difference_two_results,
    measured_reading,
    require_positive,
)
from advisor.errors import FaultyInput

SHORTEST_FLOW_S = 60.0  # ASTM D2170 (looked up), D2171 (from memory)
# Range of the vacuum method, ASTM D2171 scope (looked up).
_VACUUM_RANGE_PAS = (0.0036, 20_000.0)
# Range, and the part of it with a precision statement, ASTM D2170 scope (looked up).
_KINEMATIC_RANGE_M2S = (6e-6, 0.1)
_KINEMATIC_PRECISION_M2S = (30e-6, 6e-3)
# Usual factors of vacuum tubes, P/s by tube size for bulbs B, C, D (from memory). A
# typed factor further than 30 % from all of them is probably mistyped.
VACUUM_FACTORS_P_S: dict[str, tuple[float, ...]] = {
    "25": (2.0, 1.0, 0.7),
    "50": (8.0, 4.0, 3.0),
    "100": (32.0, 16.0, 10.0),
    "200": (128.0, 64.0, 40.0),
    "400": (500.0, 250.0, 160.0),
    "800R": (2000.0, 1000.0, 640.0),
}
_FACTOR_TOLERANCE = 0.30


@dataclass(frozen=True)
class Bulb:
    """One timed bulb of a capillary: factor [Pa or m2/s2, per second] and flow time [s]."""

    name: str
    factor: float
    flow_s: float


def vacuum_capillary_reading(
    temperature_c: float,
    bulbs: Sequence[Bulb],
    precision: Precision,
    *,
    average: bool = False,
    sample: Sample = SAMPLE,
) -> Reading:
    """Viscosity from the timed bulbs of a vacuum capillary at 40 kPa.

    The first bulb that takes 60 s or more counts; with ``average`` all of those do, where the
    laboratory's method says so. A drift from bulb to bulb beyond repeatability means that the
    viscosity depends on shear rate.

    Args:
        temperature_c: bath temperature [C].
        bulbs: bulbs in the order they were timed, factors in Pa (Pa.s per s).
        precision: precision of the method.
        average: whether to average the bulbs that count.
        sample: what was measured, and by whom.

    Source: ASTM D2171 (formula and range looked up; choice of bulb from memory).
    """
    value, unusable, remarks, counted = _flow(bulbs, precision, average)
    low, high = _VACUUM_RANGE_PAS
    if counted and not low <= value <= high:
        unusable.append(f"{value:g} Pa.s is outside the method's {low:g} to {high:g} Pa.s.")
    if abs(temperature_c - 60.0) > 0.5:
        remarks.append("The precision of the method is stated for 60 C only.")
    remarks += [text for bulb in counted if (text := _odd_factor(bulb))]
    written = _written(bulbs, "Pa.s/s")
    return measured_reading(
        "vacuum capillary", temperature_c, value, precision, written, sample, unusable, remarks
    )


def kinematic_capillary_reading(
    temperature_c: float,
    bulbs: Sequence[Bulb],
    density_15c_kgm3: float,
    precision: Precision,
    *,
    average: bool = False,
    column: Column = "A",
    sample: Sample = SAMPLE,
) -> Reading:
    """Dynamic viscosity from the timed bulbs of a kinematic capillary.

    Args:
        temperature_c: bath temperature [C].
        bulbs: bulbs in the order they were timed, factors in m2/s2.
        density_15c_kgm3: density of the binder at 15 C [kg/m3].
        precision: precision of the method.
        average: whether to average the bulbs that count.
        column: volume factor column of the density.
        sample: what was measured, and by whom.

    Source: ASTM D2170 (formula, range and shortest time looked up); density by ASTM D4311.
    """
    kinematic, unusable, remarks, _ = _flow(bulbs, precision, average)
    found = kinematic_value_reading(
        temperature_c,
        kinematic,
        density_15c_kgm3,
        precision,
        as_written=_written(bulbs, "m2/s2"),
        column=column,
        sample=sample,
    )
    return replace(
        found,
        unusable=(*unusable, *found.unusable),
        remarks=(*remarks, *found.remarks),
    )


def kinematic_value_reading(
    temperature_c: float,
    kinematic_m2s: float,
    density_15c_kgm3: float,
    precision: Precision,
    *,
    as_written: str = "",
    column: Column = "A",
    sample: Sample = SAMPLE,
) -> Reading:
    """Dynamic viscosity from a kinematic viscosity given on a certificate.

    Args:
        temperature_c: temperature of the test [C].
        kinematic_m2s: kinematic viscosity [m2/s].
        density_15c_kgm3: density of the binder at 15 C [kg/m3].
        precision: precision of the method.
        as_written: the value as the certificate prints it.
        column: volume factor column of the density.
        sample: what was measured, and by whom.

    Source: ASTM D2170 range (looked up); density by ASTM D4311.
    """
    require_positive(kinematic_m2s, "kinematic viscosity")
    unusable: list[str] = []
    remarks: list[str] = []
    low, high = _KINEMATIC_RANGE_M2S
    if not low <= kinematic_m2s <= high:
        unusable.append(
            f"{kinematic_m2s * 1e6:g} mm2/s is outside the method's {low * 1e6:g} to "
            f"{high * 1e6:,.0f} mm2/s."
        )
    elif not _KINEMATIC_PRECISION_M2S[0] <= kinematic_m2s <= _KINEMATIC_PRECISION_M2S[1]:
        remarks.append("The precision of the method is stated for 30 to 6000 mm2/s only.")
    value = float(
        dynamic_from_kinematic_pas(kinematic_m2s, temperature_c, density_15c_kgm3, column)
    )
    return measured_reading(
        "kinematic capillary",
        temperature_c,
        value,
        precision,
        as_written or f"{kinematic_m2s * 1e6:g} mm2/s",
        sample,
        unusable,
        remarks,
    )


def _flow(
    bulbs: Sequence[Bulb], precision: Precision, average: bool
) -> tuple[float, list[str], list[str], list[Bulb]]:
    if not bulbs:
        raise FaultyInput.of("no-bulb", "A capillary reading has no timed bulb.", field="bulbs")
    for bulb in bulbs:
        require_positive(bulb.factor, f"factor of bulb {bulb.name}")
        require_positive(bulb.flow_s, f"flow time of bulb {bulb.name}")
    counted = [bulb for bulb in bulbs if bulb.flow_s >= SHORTEST_FLOW_S]
    unusable: list[str] = []
    remarks: list[str] = []
    if not counted:
        longest = max(bulbs, key=lambda bulb: bulb.flow_s)
        unusable.append(
            f"No bulb took {SHORTEST_FLOW_S:.0f} s (the longest {longest.flow_s:g} s): use a "
            "smaller tube."
        )
        return longest.factor * longest.flow_s, unusable, remarks, []
    short = [bulb.name for bulb in bulbs if bulb.flow_s < SHORTEST_FLOW_S]
    if short:
        remarks.append(f"Under {SHORTEST_FLOW_S:.0f} s and left out: bulb {', '.join(short)}.")
    values = [bulb.factor * bulb.flow_s for bulb in counted]
    disagreement = bulb_disagreement(counted)
    if disagreement > difference_two_results(precision.one_laboratory):
        unusable.append(
            f"The bulbs differ by {disagreement:.1%}, more than repetition explains: the viscosity "
            "depends on shear rate, or a time or factor is wrong."
        )
    return (float(np.mean(values)) if average else values[0]), unusable, remarks, counted


def bulb_disagreement(bulbs: Sequence[Bulb]) -> float:
    """Largest difference [1] between bulbs as a share of their mean; 0 for a single bulb.

    Args:
        bulbs: bulbs that all took 60 s or more.

    Source: arithmetic, to be compared with the repeatability of ASTM D2171.
    """
    values = [bulb.factor * bulb.flow_s for bulb in bulbs]
    return float(np.ptp(values) / np.mean(values))


def _odd_factor(bulb: Bulb) -> str:
    poise_per_s = bulb.factor * 10.0
    known = [factor for row in VACUUM_FACTORS_P_S.values() for factor in row]
    if any(abs(poise_per_s / factor - 1.0) <= _FACTOR_TOLERANCE for factor in known):
        return ""
    return (
        f"The factor of bulb {bulb.name}, {poise_per_s:g} P/s, is far from every usual tube: "
        "check it against the tube's certificate."
    )


def _written(bulbs: Sequence[Bulb], unit: str) -> str:
    return "; ".join(
        f"{bulb.name}: {bulb.factor:g} {unit} x {bulb.flow_s:g} s".removeprefix(": ")
        for bulb in bulbs
    )
