"""A binder certificate or laboratory sheet as it is written, with its units."""

from __future__ import annotations

from typing import Annotated, Literal

from pydantic import Field

from advisor.binder import density_15c_from_density
from advisor.settings.fields import (
    Day,
    Density,
    Duration,
    FlashPoint,
    KinematicFactor,
    KinematicViscosity,
    Name,
    Penetration,
    Rotation,
    Sentence,
    SofteningPoint,
    Strict,
    Temperature,
    VacuumFactor,
    Viscosity,
)


class VacuumCapillary(Strict):
    """Flow time of a bulb of a vacuum capillary."""

    method: Literal["vacuum capillary"]
    temperature: Temperature
    factor: VacuumFactor
    time: Duration


class KinematicCapillary(Strict):
    """Flow time of a bulb of a kinematic capillary."""

    method: Literal["kinematic capillary"]
    temperature: Temperature
    factor: KinematicFactor
    time: Duration


class KinematicValue(Strict):
    """A kinematic viscosity given without its flow time."""

    method: Literal["kinematic viscosity"]
    temperature: Temperature
    viscosity: KinematicViscosity


class Rotational(Strict):
    """A reading of a rotational viscometer."""

    method: Literal["rotational"]
    temperature: Temperature
    viscosity: Viscosity
    spindle: int | None = None
    speed: Rotation | None = None


class DynamicValue(Strict):
    """A dynamic viscosity given without its method's figures."""

    method: Literal["viscosity"]
    temperature: Temperature
    viscosity: Viscosity


class PenetrationTest(Strict):
    """Needle penetration at 25 C."""

    method: Literal["penetration"]
    value: Penetration


class SofteningPointTest(Strict):
    """Ring-and-ball softening point."""

    method: Literal["softening point"]
    value: SofteningPoint


LabReading = Annotated[
    VacuumCapillary
    | KinematicCapillary
    | KinematicValue
    | Rotational
    | DynamicValue
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
    flash_point: Flash | None = None
    modifier: Name
    """'none', or what modifies the binder, such as SBS, crumb rubber or wax"""
    supplier: SupplierSheet = SupplierSheet()

    @property
    def modified(self) -> bool:
        """Whether the plain rule of equal viscosity does not apply."""
        return self.modifier != "none"

    @property
    def density_15c_kgm3(self) -> float | None:
        """Density at 15 C [kg/m3]; None where the sheet gives none."""
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
