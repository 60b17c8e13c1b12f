"""Grades: their limits, what they lead one to expect, and what a certificate says against them."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Literal

from advisor.binder.consistency import penetration_index
from advisor.binder.curve import ViscosityCurve
from advisor.binder.fit import AvtsPrior
from advisor.binder.laws import flow_energy_avts_j_mol
from advisor.binder.readings import Reading

Property = Literal[
    "viscosity_60c",
    "kinematic_135c",
    "viscosity_135c",
    "penetration_25c",
    "softening_point",
    "flash_point",
    "rutting_stiffness",
    "rutting_stiffness_rtfo",
    "viscosity_60c_rtfo",
    "kinematic_135c_rtfo",
]
# How each is shown: factor from the inside unit, unit.
SHOWN: dict[str, tuple[float, str]] = {
    "viscosity_60c": (1.0, "Pa.s"),
    "kinematic_135c": (1e6, "mm2/s"),
    "viscosity_135c": (1.0, "Pa.s"),
    "penetration_25c": (1.0, "dmm"),
    "softening_point": (1.0, "C"),
    "flash_point": (1.0, "C"),
    "rutting_stiffness": (1e-3, "kPa"),
    "rutting_stiffness_rtfo": (1e-3, "kPa"),
    "viscosity_60c_rtfo": (1.0, "Pa.s"),
    "kinematic_135c_rtfo": (1e6, "mm2/s"),
}
WORDS: dict[str, str] = {
    "viscosity_60c": "Viscosity at 60 C",
    "kinematic_135c": "Kinematic viscosity at 135 C",
    "viscosity_135c": "Viscosity at 135 C",
    "penetration_25c": "Penetration at 25 C",
    "softening_point": "Softening point",
    "flash_point": "Flash point",
    "rutting_stiffness": "G*/sin(delta) at the grade temperature, original",
    "rutting_stiffness_rtfo": "G*/sin(delta) at the grade temperature, after RTFO",
    "viscosity_60c_rtfo": "Viscosity at 60 C of the aged residue",
    "kinematic_135c_rtfo": "Kinematic viscosity at 135 C of the aged residue",
}


@dataclass(frozen=True)
class GradeLimit:
    """A grade's limit on one property, in the inside unit; None where there is no bound."""

    name: Property
    low: float | None
    high: float | None
    source: str
    how_known: str


@dataclass(frozen=True, eq=False)
class Grade:
    """A grade of a standard: its limits and the usual curve of its binders, un-aged."""

    name: str
    standard: str
    limits: tuple[GradeLimit, ...]
    prior: AvtsPrior | None = None
    modified: bool = False
    high_temperature_c: float | None = None


@dataclass(frozen=True)
class Check:
    """One comparison: ``agrees`` False calls for attention, None cannot be told."""

    code: str
    agrees: bool | None
    sentence: str
    source: str = ""


def check_grade(grade: Grade, values: Mapping[str, float]) -> tuple[Check, ...]:
    """Whether each value of a certificate lies inside the grade's limits.

    Args:
        grade: the grade with its limits.
        values: value by property name [any unit], inside units.
    """
    found = []
    for limit in grade.limits:
        factor, unit = SHOWN[limit.name]
        value = values.get(limit.name)
        bounds = _bounds(limit, factor, unit)
        source = f"{grade.standard}: {limit.source} ({limit.how_known})"
        code = f"grade-{limit.name}"
        if value is None:
            words = f"{WORDS[limit.name]}: not on the sheet; the grade asks for {bounds}."
            found.append(Check(code, None, words, source))
            continue
        inside = (limit.low is None or value >= limit.low * (1.0 - 1e-9)) and (
            limit.high is None or value <= limit.high * (1.0 + 1e-9)
        )
        words = "inside" if inside else "outside"
        sentence = f"{WORDS[limit.name]}: {value * factor:g} {unit}, {words} {bounds}."
        found.append(Check(code, inside, sentence, source))
    return tuple(found)


def _bounds(limit: GradeLimit, factor: float, unit: str) -> str:
    if limit.low is None and limit.high is not None:
        return f"at most {limit.high * factor:g} {unit}"
    if limit.high is None and limit.low is not None:
        return f"at least {limit.low * factor:g} {unit}"
    return f"{(limit.low or 0.0) * factor:g} to {(limit.high or 0.0) * factor:g} {unit}"


# Slopes seen in paving binder from 60 and 135 C: derived from the default curves and the SHRP core
# binders (from memory).
_SLOPE_RANGE = (-4.2, -3.1)
# Flow energies published for 110 to 160 C: Salomon and Zhai (looked up).
_FLOW_ENERGY_RANGE_J_MOL = (44e3, 90e3)
# Viscosity of the mixing line at the softening point: derived from the SHRP core binders.
_SOFTENING_RANGE_PAS = (300.0, 2000.0)
_INDEX_RANGE = (-2.0, 2.0)
# Two tests of one viscosity: AASHTO T 316 between laboratories, 12 % (from memory).
_SAME_VISCOSITY = 0.12


def cross_checks(
    curve: ViscosityCurve | None, readings: Sequence[Reading], values: Mapping[str, float]
) -> tuple[Check, ...]:
    """Whether a certificate agrees with itself.

    Args:
        curve: A-VTS curve fitted to its readings, where there is one.
        readings: its readings.
        values: value by property name [any unit], inside units.
    """
    found = []
    soft, pen = values.get("softening_point"), values.get("penetration_25c")
    if curve is not None and curve.law == "avts":
        slope = float(curve.parameters[1])
        found.append(
            _range(
                "slope", slope, _SLOPE_RANGE, f"Slope of the line: {slope:.2f}; usual -4.2 to -3.1."
            )
        )
        energy = float(flow_energy_avts_j_mol(0.17, curve.parameters[0], slope))
        words = f"Flow energy at 0.17 Pa.s: {energy / 1e3:.0f} kJ/mol; published 44 to 90."
        found.append(_range("flow-energy", energy, _FLOW_ENERGY_RANGE_J_MOL, words))
        if soft is not None:
            at_soft = float(curve.viscosity_pas(soft))
            words = f"The line gives {at_soft:,.0f} Pa.s at the softening point; usual 300 to 2000."
            found.append(_range("softening-line", at_soft, _SOFTENING_RANGE_PAS, words))
    if soft is not None and pen is not None:
        index = float(penetration_index(pen, soft))
        words = f"Penetration index {index:.1f}; outside -2 to 2 one of the two is in question."
        found.append(_range("penetration-index", index, _INDEX_RANGE, words))
    found += _same_viscosity(readings)
    return tuple(found)


def _range(code: str, value: float, bounds: tuple[float, float], sentence: str) -> Check:
    return Check(code, bounds[0] <= value <= bounds[1], sentence)


def _same_viscosity(readings: Sequence[Reading]) -> list[Check]:
    measured = [one for one in readings if not one.converted and one.sample.condition == "original"]
    found = []
    for i, one in enumerate(measured):
        for other in measured[i + 1 :]:
            if one.method == other.method or abs(one.temperature_c - other.temperature_c) > 0.3:
                continue
            ratio = one.viscosity_pas / other.viscosity_pas
            agrees = abs(ratio - 1.0) <= _SAME_VISCOSITY
            found.append(
                Check(
                    "two-methods",
                    agrees,
                    f"At {one.temperature_c:g} C {one.method} and {other.method} differ by "
                    f"{abs(ratio - 1.0):.0%}; between laboratories 12 % is usual.",
                    "AASHTO T 316 (from memory)",
                )
            )
    return found
