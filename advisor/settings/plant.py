"""What a plant knows about itself: dryer, conveyor, silos, sensors, shifts, its own limits, tanks.

Every quantity is in the inside unit: temperatures in C, differences in K, everything else in SI.
"""

from __future__ import annotations

import re
from typing import Annotated, Any, Literal
from zoneinfo import ZoneInfo, ZoneInfoNotFoundError

from pydantic import Field, field_validator, model_validator

from advisor.glossary import quantity
from advisor.settings.faults import nearest
from advisor.settings.fields import (
    Angle,
    ClockTime,
    Day,
    Fraction,
    HeatTransfer,
    Length,
    Mass,
    MassRate,
    Name,
    OfKind,
    Power,
    Sentence,
    SiloHold,
    StackTemperature,
    Strict,
    Temperature,
    Volume,
    VolumeFlow,
    Written,
    refusal,
)

Latitude = Annotated[Written, OfKind("angle", -90.0, 90.0, "a latitude")]
# Beyond these a plant is out of control or a sensor broken: more likely a slip of the pen.
Scatter = Annotated[Written, OfKind("temperature_delta", 0.0, 30.0, "the scatter of discharge")]
Tolerance = Annotated[Written, OfKind("temperature_delta", 0.0, 30.0, "a sensor's tolerance")]

Point = Literal[
    "binder_tank", "hot_aggregate", "discharge", "silo", "load_out", "delivery", "base", "air"
]
Terrain = Literal["open", "wooded", "town"]
Weekday = Literal["mon", "tue", "wed", "thu", "fri", "sat", "sun"]

# The signals a plant can have; a number stands for the tank's or silo's own number.
SIGNALS = re.compile(
    r"discharge_c|hot_aggregate_c|stack_c|load_out_c|delivery_c|binder_tank_[1-9]\d*_c"
    r"|silo_[1-9]\d*_(c|kg)"
)
_SOME_SIGNALS = (
    *("discharge_c", "hot_aggregate_c", "stack_c", "load_out_c", "delivery_c"),
    *("binder_tank_1_c", "silo_1_c", "silo_1_kg"),
)


def read_signal(name: Any) -> Any:
    """``name`` where it is a signal a plant can have."""
    if isinstance(name, str) and not SIGNALS.fullmatch(name):
        raise refusal(
            "unknown-signal",
            f"'{name}' is not a signal known here.",
            f"{nearest(name, _SOME_SIGNALS)[:-1]} (and other numbers).",
        )
    return name


class OwnLimit(Strict):
    """A bound that the plant, a contract, a supplier or the law sets on one point."""

    point: Point
    """where on the heat path it holds"""
    side: Literal["low", "high"]
    """whether it bounds from below or from above"""
    value: Temperature
    """the bound, in the unit its owner wrote it in"""
    source: Sentence
    """who says so: document and edition"""
    authority: Literal["safety", "supplier", "contract", "national", "house"]
    """whose word it is"""
    clause: Name | None = None

    @model_validator(mode="after")
    def _believable(self) -> OwnLimit:
        known = quantity(f"{self.point}_c")
        if not known.low <= self.value <= known.high:
            raise refusal(
                "not-believable",
                f"'{self.value.text}' is outside what is believable for '{known.label}'.",
                f"Believable is {known.low:g} to {known.high:g} C.",
            )
        return self


class Price(Strict):
    """What fuel costs, as it is billed."""

    amount: Annotated[float, Field(gt=0)]
    """money for one unit of fuel, in the plant's currency"""
    per: Literal["kWh gross", "kWh net", "MMBtu gross", "therm", "m3", "L", "gal", "kg", "t", "ton"]
    """the unit it is billed in"""


class Fuel(Strict):
    """What the burner burns."""

    name: Name
    """a fuel of config/fuels.yaml"""
    price: Price | None = None


class Dryer(Strict):
    """The dryer or drum mixer and what limits it."""

    kind: Literal["counterflow", "parallel", "batch"]
    """how the gas passes the stone; 'batch' where a tower mixes after the dryer"""
    rate_max: MassRate
    """most mix per hour"""
    burner_rating: Power
    """heat release of the burner at full load, net"""
    fuel: Fuel
    air_ratio: Annotated[float, Field(ge=1, le=6)]
    """combustion air and leaks over the air the fuel needs, a plain number"""
    casing_loss: Fraction
    """heat lost through the shell, as a share of the heat released"""
    stack: StackTemperature
    """usual temperature of the exhaust gas"""
    fan_flow: VolumeFlow | None = None
    cloth_max: Temperature
    """highest gas temperature the filter cloth bears"""
    aggregate_max: Temperature
    """highest temperature of the dried stone the plant allows"""


class Conveyor(Strict):
    """What carries the mix from the drum to the silos."""

    length: Length
    """how far it carries"""
    girth: Length
    """inner circumference of the casing, mix and air side"""
    u: HeatTransfer
    """heat loss through the casing"""


class Silo(Strict):
    """A hot-mix silo."""

    name: Name
    """what the plant calls it"""
    capacity: Mass
    """most mix it holds"""
    diameter: Length
    """inner diameter"""
    height: Length
    """height of the cylinder"""
    wall_u: HeatTransfer
    """heat loss through the insulated wall"""
    cone_heated: bool
    """whether the cone is heated"""
    hold_max: SiloHold
    """longest time mix may stay in it"""
    hold_max_source: Sentence
    """who says so"""
    temperature_signal: Name | None = None
    content_signal: Name | None = None

    _signals = field_validator("temperature_signal", "content_signal")(read_signal)


class Sensor(Strict):
    """A temperature sensor: its class or its own tolerance, and when it was last checked."""

    kind: Name | None = None
    """a class of config/sensors.yaml"""
    tolerance: Tolerance | None = None
    """tolerance found on site, both ways, in place of that of the class"""
    checked_on: Day | None = None

    @model_validator(mode="after")
    def _known(self) -> Sensor:
        if self.kind is None and self.tolerance is None:
            raise refusal(
                "missing", "Neither 'kind' nor 'tolerance' is given.", "Give one of the two."
            )
        return self


class Shift(Strict):
    """A working shift; one that ends before it starts runs past midnight."""

    name: Name
    """what it is called"""
    start: ClockTime
    """time of day it starts"""
    end: ClockTime
    """time of day it ends"""
    days: Annotated[tuple[Weekday, ...], Field(strict=False, min_length=1)]
    """days on which it starts"""


class Plant(Strict):
    """The plant as a whole."""

    name: Name
    """name of the plant"""
    invented: bool = False
    shown_at: Name | None = None
    """only for an invented plant: the plant time at which it is shown"""
    time_zone: Name
    """zone of the plant's clock, such as Europe/London"""
    latitude: Latitude
    """north is positive"""
    longitude: Angle
    """east is positive"""
    altitude: Annotated[Written, OfKind("length", -430.0, 6000.0)]
    """height above the sea"""
    weather_terrain: Terrain
    """what surrounds the weather station"""
    currency: Annotated[str, Field(pattern=r"^[A-Z]{3}$")]
    """three letters of ISO 4217"""
    published_limits: Annotated[tuple[Name, ...], Field(strict=False)]
    """schemes of config/limits.csv that apply here; an empty list where none does"""
    dryer: Dryer
    conveyor: Conveyor | None = None
    silos: Annotated[tuple[Silo, ...], Field(strict=False)] = ()
    sensors: dict[str, Sensor]
    """tolerance of each temperature signal"""
    control_scatter: Scatter
    """standard deviation of discharge about its setpoint in steady running"""
    confidence: Fraction
    """how sure delivery has to be, such as 95 %"""
    house_limits: Annotated[tuple[OwnLimit, ...], Field(strict=False)] = ()
    shifts: Annotated[tuple[Shift, ...], Field(strict=False, min_length=1)]
    """when the plant works"""

    @field_validator("time_zone")
    @classmethod
    def _zone(cls, name: str) -> str:
        try:
            ZoneInfo(name)
        except (ZoneInfoNotFoundError, ValueError, OSError):
            raise refusal(
                "time-zone", f"'{name}' is not a time zone.", "Write it as Europe/London."
            ) from None
        return name

    @field_validator("sensors")
    @classmethod
    def _signals(cls, sensors: dict[str, Sensor]) -> dict[str, Sensor]:
        for name in sensors:
            read_signal(name)
        return sensors

    @field_validator("confidence")
    @classmethod
    def _useful(cls, share: Written) -> Written:
        if not 0.5 <= share < 1:
            raise refusal(
                "not-believable", f"'{share.text}' is no useful confidence.", "Write 50 to 99.9 %."
            )
        return share

    @property
    def zone(self) -> ZoneInfo:
        """The zone of the plant's clock."""
        return ZoneInfo(self.time_zone)


class Tank(Strict):
    """A binder tank."""

    name: Name
    """what the plant calls it"""
    capacity: Volume
    """most it may hold"""
    heel_min: Mass
    """least that covers the heating surface"""
    diameter: Length
    """inner diameter"""
    length: Length
    """length, or height where it stands upright"""
    upright: bool
    """whether it stands upright"""
    agitated: bool
    """whether it is stirred or circulated"""
    heater: Power
    """heating power"""
    insulation_u: HeatTransfer
    """heat loss through the insulation"""
    temperature_signal: Name
    """log signal of its thermometer, such as binder_tank_1_c"""

    _signal = field_validator("temperature_signal")(read_signal)


class TanksFile(Strict):
    """tanks.yaml"""

    tanks: Annotated[tuple[Tank, ...], Field(strict=False, min_length=1)]
    """the binder tanks"""
