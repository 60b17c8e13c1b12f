"""The kinds of dated facts and what each holds."""

from __future__ import annotations

import datetime as dt
from typing import Annotated, Any, Literal
from zoneinfo import ZoneInfo

from pydantic import Field, PlainSerializer, PlainValidator, ValidationInfo, model_validator

from advisor.errors import AdvisorError
from advisor.settings.certificate import Certificate
from advisor.settings.fields import (
    AirTemperature,
    BaseTemperature,
    BinderTankTemperature,
    DewPoint,
    Fraction,
    Length,
    Mass,
    MassRate,
    Moisture,
    Name,
    Sentence,
    Speed,
    Strict,
    Volume,
    refusal,
)
from advisor.settings.moments import utc_of


def _read_moment(raw: Any, info: ValidationInfo) -> dt.datetime:
    if isinstance(raw, dt.datetime):
        return raw
    zone = (info.context or {}).get("zone", ZoneInfo("UTC"))
    try:
        return utc_of(raw if isinstance(raw, str) else repr(raw), zone)
    except AdvisorError as error:
        fault = error.faults[0]
        raise refusal(fault.code, fault.problem, fault.remedy) from None


def _utc_text(moment: dt.datetime) -> str:
    return moment.astimezone(dt.UTC).strftime("%Y-%m-%dT%H:%M:%SZ")


Moment = Annotated[dt.datetime, PlainValidator(_read_moment), PlainSerializer(_utc_text)]


class Receipt(Strict):
    """A load of binder pumped into a tank; its subject is the tank."""

    mass: Mass
    """net mass of the load"""
    temperature: BinderTankTemperature
    """temperature of the load as it was pumped in"""
    certificate: Name
    """lot whose certificate belongs to the load"""
    load: Name
    """number of the delivery paper"""
    last_product: Sentence | None = None


class Dip(Strict):
    """What a tank was found to hold; its subject is the tank."""

    mass: Mass | None = None
    volume: Volume | None = None
    temperature: BinderTankTemperature
    """temperature of the binder at the dip"""
    certificate: Name | None = None
    """lot the tank is taken to hold, at the first dip of a ledger"""

    @model_validator(mode="after")
    def _one(self) -> Dip:
        if (self.mass is None) == (self.volume is None):
            raise refusal("one-of", "A dip has either 'mass' or 'volume'.", "Give one of them.")
        return self


class Moist(Strict):
    """Water in a pile; its subject is the pile."""

    water: Moisture
    """mass of water as a share of the mass stated by ``basis``"""
    basis: Literal["dry", "wet"]
    """whether it is a share of the dry or of the wet mass"""
    method: Sentence
    """how it was found"""

    @property
    def of_dry_mass(self) -> float:
        """Mass of water over mass of dry stone [1]."""
        return self.water if self.basis == "dry" else self.water / (1 - self.water)


class JobRun(Strict):
    """Production for one job, planned or run; its subject is 'plant'."""

    until: Moment
    """when it ends"""
    job: Name
    """code of the job"""
    tank: Name
    """tank it is fed from"""
    silo: Name | None = None
    rate: MassRate
    """mix per hour"""


class SurfaceReading(Strict):
    """The base as it was found on site; its subject is the job."""

    temperature: BaseTemperature
    """surface temperature of the base"""
    condition: Literal["dry", "wet", "frozen"]
    """state of the surface"""


class WeatherSeen(Strict):
    """Weather as somebody read it; its subject is the job it was read at, or 'plant'."""

    air: AirTemperature
    """temperature of the air, in the shade"""
    wind: Speed
    """wind speed"""
    wind_height: Length
    """height above the ground at which the wind was taken: 10 m for a mast, 1.5 m by hand"""
    cloud: Fraction
    """share of the sky under cloud"""
    dew_point: DewPoint | None = None
    humidity: Fraction | None = None
    """relative humidity, in place of the dew point"""
    rain: bool
    """whether rain or snow falls"""

    @model_validator(mode="after")
    def _one(self) -> WeatherSeen:
        if (self.dew_point is None) == (self.humidity is None):
            raise refusal("one-of", "Air has either 'dew_point' or 'humidity'.", "Give one.")
        if self.dew_point is not None and self.dew_point > self.air:
            raise refusal(
                "dew-above-air", "A dew point above the air temperature.", "Are they swapped?"
            )
        if self.humidity is not None and self.humidity < 0.01:
            raise refusal("not-believable", "Air is never that dry.", "Write it as 65 %.")
        return self


class Note(Strict):
    """A remark; its subject is what it is about."""

    text: Annotated[str, Field(min_length=1, max_length=4000)]
    """the remark"""


KINDS: dict[str, type[Strict]] = {
    "certificate": Certificate,
    "receipt": Receipt,
    "dip": Dip,
    "moisture": Moist,
    "job_run": JobRun,
    "surface_reading": SurfaceReading,
    "weather": WeatherSeen,
    "note": Note,
}
