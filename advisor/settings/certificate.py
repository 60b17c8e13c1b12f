"""A binder certificate or laboratory sheet as it is written, with its units."""

from __future__ import annotations

from typing import Annotated, Any, Literal

from pydantic import Field, field_validator, model_validator

from advisor.binder import density_15c_from_density, density_15c_from_specific_gravity
from advisor.settings.binder_tables import known_modifiers, modifier_named
from advisor.settings.faults import nearest
from advisor.settings.fields import (
    Angle,
    Day,
    Density,
    Duration,
    FlashPoint,
    Fraction,
    KinematicFactor,
    KinematicViscosity,
    Name,
    Penetration,
    Pressure,
    Rotation,
    Sentence,
    ShearRate,
    SofteningPoint,
    Strict,
    Temperature,
    VacuumFactor,
    Viscosity,
    refusal,
)

Condition = Literal["original", "rtfo", "pav", "recovered"]


class _Test(Strict):
    """What every test on a sheet may say of itself."""

    condition: Condition = "original"
    """what was tested: as delivered, after the rolling or pressure oven, or recovered"""
    laboratory: Sentence | None = None
    """who tested, where it was not the laboratory of the sheet"""


class VacuumBulb(Strict):
    """One timed bulb of a vacuum capillary."""

    name: Name = "B"
    factor: VacuumFactor
    time: Duration


class KinematicBulb(Strict):
    """One timed bulb of a kinematic capillary."""

    name: Name = "C"
    factor: KinematicFactor
    time: Duration


class VacuumCapillary(_Test):
    """Flow times of a vacuum capillary: one bulb, or several in the order they were timed."""

    method: Literal["vacuum capillary"]
    temperature: Temperature
    factor: VacuumFactor | None = None
    time: Duration | None = None
    bulbs: Annotated[tuple[VacuumBulb, ...], Field(strict=False)] = ()
    average: bool = False
    """whether the laboratory's method averages the bulbs over a minute"""

    @model_validator(mode="after")
    def _one(self) -> VacuumCapillary:
        _factor_or_bulbs(self.factor, self.time, len(self.bulbs))
        return self


class KinematicCapillary(_Test):
    """Flow times of a kinematic capillary: one bulb, or several in the order they were timed."""

    method: Literal["kinematic capillary"]
    temperature: Temperature
    factor: KinematicFactor | None = None
    time: Duration | None = None
    bulbs: Annotated[tuple[KinematicBulb, ...], Field(strict=False)] = ()
    average: bool = False
    """whether the laboratory's method averages the bulbs over a minute"""

    @model_validator(mode="after")
    def _one(self) -> KinematicCapillary:
        _factor_or_bulbs(self.factor, self.time, len(self.bulbs))
        return self


def _factor_or_bulbs(factor: object, time: object, bulbs: int) -> None:
    single = factor is not None and time is not None
    if (factor is None) != (time is None) or single == bool(bulbs):
        raise refusal(
            "bulbs",
            "A capillary has either 'factor' and 'time', or a list of 'bulbs'.",
            "Write factor and time of the one bulb, or each bulb with its own.",
        )


class KinematicValue(_Test):
    """A kinematic viscosity given without its flow time."""

    method: Literal["kinematic viscosity"]
    temperature: Temperature
    viscosity: KinematicViscosity


class Rotational(_Test):
    """Readings of a rotational viscometer: one value, or those taken a minute apart."""

    method: Literal["rotational"]
    temperature: Temperature
    viscosity: Viscosity | None = None
    viscosities: Annotated[tuple[Viscosity, ...], Field(strict=False)] = ()
    """readings a minute apart"""
    spindle: int | None = None
    speed: Rotation | None = None
    torque: Fraction | None = None
    """torque shown, as a share of full scale"""

    @model_validator(mode="after")
    def _one(self) -> Rotational:
        if (self.viscosity is None) == (not self.viscosities):
            raise refusal(
                "one-of",
                "A rotational test has either 'viscosity' or 'viscosities'.",
                "Write the mean as 'viscosity', or every reading in 'viscosities'.",
            )
        return self


class DynamicValue(_Test):
    """A dynamic viscosity given without its method's figures."""

    method: Literal["viscosity"]
    temperature: Temperature
    viscosity: Viscosity


class Rheometer(_Test):
    """Modulus and phase angle of a dynamic shear rheometer."""

    method: Literal["rheometer"]
    temperature: Temperature
    modulus: Pressure
    phase_angle: Angle
    frequency: Rotation | None = None
    """10 rad/s where it is absent, the frequency of grading"""


class RuttingStiffness(_Test):
    """G*/sin(delta) at a temperature, as grading sheets print it."""

    method: Literal["rutting stiffness"]
    temperature: Temperature
    value: Pressure


class FrequencySweep(_Test):
    """Phase angles of a frequency sweep, for the phase angle method at 80 C."""

    method: Literal["frequency sweep"]
    temperature: Temperature
    frequencies: Annotated[tuple[Rotation, ...], Field(strict=False, min_length=2)]
    phase_angles: Annotated[tuple[Angle, ...], Field(strict=False, min_length=2)]

    @model_validator(mode="after")
    def _pairs(self) -> FrequencySweep:
        _same_length(self.frequencies, self.phase_angles, "frequencies", "phase_angles")
        return self


class ShearSweep(_Test):
    """Viscosities at several shear rates and one temperature."""

    method: Literal["flow sweep"]
    temperature: Temperature
    shear_rates: Annotated[tuple[ShearRate, ...], Field(strict=False, min_length=3)]
    viscosities: Annotated[tuple[Viscosity, ...], Field(strict=False, min_length=3)]

    @model_validator(mode="after")
    def _pairs(self) -> ShearSweep:
        _same_length(self.shear_rates, self.viscosities, "shear_rates", "viscosities")
        return self


class SteadyShear(_Test):
    """Viscosity under a steady stress of 500 Pa."""

    method: Literal["steady shear"]
    temperature: Temperature
    viscosity: Viscosity


class PenetrationTest(_Test):
    """Needle penetration, 100 g for 5 s."""

    method: Literal["penetration"]
    value: Penetration
    temperature: Temperature | None = None
    """25 C where it is absent"""


class SofteningPointTest(_Test):
    """Ring-and-ball softening point."""

    method: Literal["softening point"]
    value: SofteningPoint


def _same_length(one: tuple[Any, ...], other: tuple[Any, ...], name: str, second: str) -> None:
    if len(one) != len(other):
        raise refusal(
            "unequal",
            f"'{name}' has {len(one)} numbers and '{second}' {len(other)}.",
            "Give one for each of the other.",
        )


LabReading = Annotated[
    VacuumCapillary
    | KinematicCapillary
    | KinematicValue
    | Rotational
    | DynamicValue
    | Rheometer
    | RuttingStiffness
    | FrequencySweep
    | ShearSweep
    | SteadyShear
    | PenetrationTest
    | SofteningPointTest,
    Field(discriminator="method"),
]


class DensityAt(Strict):
    """Density and the temperature it was found at."""

    value: Density
    temperature: Temperature


class Flash(Strict):
    """Flash point and its cup."""

    value: FlashPoint
    method: Literal["open cup", "closed cup"]


class Range(Strict):
    """A range of temperature the supplier states."""

    low: Temperature
    high: Temperature

    @model_validator(mode="after")
    def _order(self) -> Range:
        if self.low >= self.high:
            raise refusal(
                "range-order",
                f"The range runs from {self.low.text} to {self.high.text}.",
                "Give the lower temperature as 'low'.",
            )
        return self


class SupplierSheet(Strict):
    """What the supplier's sheet allows."""

    mixing: Range | None = None
    compaction: Range | None = None
    storage_min: Temperature | None = None
    storage_max: Temperature | None = None


class Certificate(Strict):
    """A certificate of one lot of binder."""

    product: Sentence
    grade: Name
    source: Sentence
    lot: Name
    sampled_on: Day
    tested_on: Day
    laboratory: Sentence
    readings: Annotated[tuple[LabReading, ...], Field(strict=False)]
    density: DensityAt | None = None
    specific_gravity: Annotated[float, Field(gt=0.8, lt=1.3)] | None = None
    """at 25 C over water at 25 C, where the sheet gives this in place of a density"""
    flash_point: Flash | None = None
    modifier: Name
    """'none', or what modifies the binder, such as SBS, crumb rubber or wax"""
    additives: Annotated[tuple[Name, ...], Field(strict=False)] = ()
    """what the plant adds after the test, such as a surfactant; not in the readings"""
    supplier: SupplierSheet = SupplierSheet()

    @field_validator("modifier")
    @classmethod
    def _known_modifier(cls, name: str) -> str:
        return name if name == "none" else _modifier(name)

    @field_validator("additives")
    @classmethod
    def _known_additives(cls, names: tuple[str, ...]) -> tuple[str, ...]:
        return tuple(_modifier(name) for name in names)

    @model_validator(mode="after")
    def _density(self) -> Certificate:
        if self.density is not None and self.specific_gravity is not None:
            raise refusal(
                "one-of", "A sheet has either 'density' or 'specific_gravity'.", "Keep one of them."
            )
        if self.tested_on < self.sampled_on:
            raise refusal(
                "days",
                f"Tested on {self.tested_on}, before it was sampled on {self.sampled_on}.",
                "Check both days.",
            )
        return self

    @property
    def modified(self) -> bool:
        """Whether the plain rule of equal viscosity does not apply."""
        return self.modifier != "none" and not modifier_named(self.modifier).plain_rule

    @property
    def density_15c_kgm3(self) -> float | None:
        """Density at 15 C [kg/m3]; None where the sheet gives none."""
        if self.specific_gravity is not None:
            return float(density_15c_from_specific_gravity(self.specific_gravity))
        if self.density is None:
            return None
        return float(density_15c_from_density(self.density.value, self.density.temperature))

    @property
    def flash_c(self) -> float | None:
        """Flash point [C]."""
        return float(self.flash_point.value) if self.flash_point else None

    @property
    def flash_method(self) -> str:
        """Cup of the flash point; empty where the sheet gives none."""
        return self.flash_point.method if self.flash_point else ""

    @property
    def storage_most_c(self) -> float | None:
        """Supplier's highest temperature [C]."""
        most = self.supplier.storage_max
        return None if most is None else float(most)

    @property
    def storage_low_c(self) -> float | None:
        """Supplier's lowest storage temperature [C]."""
        low = self.supplier.storage_min
        return None if low is None else float(low)


def _modifier(name: str) -> str:
    known = known_modifiers()
    if name.lower() not in known:
        raise refusal(
            "unknown-modifier",
            f"'{name}' is no modifier known here.",
            nearest(name, [*dict.fromkeys(known.values()), "none"]),
        )
    return known[name.lower()]
