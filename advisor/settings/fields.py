"""The fields settings and records are made of: quantities with their unit, clock times, names.

Every quantity is written as text with its unit and read into the inside unit (temperatures in C,
everything else in SI); how it was written is kept. A temperature and a temperature difference are
two types.
"""

from __future__ import annotations

import datetime as dt
import math
import re
from dataclasses import dataclass
from typing import Annotated, Any

from pydantic import BaseModel, ConfigDict, Field, PlainSerializer, PlainValidator
from pydantic_core import CoreSchema, PydanticCustomError, core_schema

from advisor.errors import AdvisorError
from advisor.glossary import QUANTITIES
from advisor.units import from_si, parse_quantity, to_si, units_of


class Strict(BaseModel):
    """Base of all models: nothing unknown, nothing converted in silence, nothing changed later."""

    model_config = ConfigDict(
        frozen=True,
        strict=True,
        extra="forbid",
        allow_inf_nan=False,
        use_attribute_docstrings=True,
    )


class Written(float):
    """A number in the inside unit that remembers how its owner wrote it."""

    text: str

    def __new__(cls, value: float, text: str = "") -> Written:
        number = super().__new__(cls, value)
        number.text = text
        return number


@dataclass(frozen=True)
class OfKind:
    """Marks a ``Written`` field: its kind of quantity, and what is believable, inside unit."""

    kind: str
    low: float = -math.inf
    high: float = math.inf
    words: str = ""

    def example(self) -> str:
        """How such a value is written."""
        return f"a number with a unit ({', '.join(units_of(self.kind))})"

    def read(self, raw: Any) -> Written:
        """The value of ``raw``; a pydantic error where it has no unit or cannot be believed."""
        if isinstance(raw, Written):
            return raw
        try:
            value = parse_quantity(raw, self.kind)
        except AdvisorError as error:
            fault = error.faults[0]
            remedy = self._with_unit(raw) if fault.code == "unit-missing" else fault.remedy
            raise refusal(fault.code, fault.problem, remedy) from None
        if not self.low <= value <= self.high:
            words = self.words or self.kind.replace("_delta", " difference").replace("_", " ")
            raise refusal(
                "not-believable",
                f"'{raw}' is outside what is believable for {words}.",
                f"Believable is {self._bound(self.low, raw)} to {self._bound(self.high, raw)}.",
            )
        return Written(value, str(raw))

    def _with_unit(self, raw: Any) -> str:
        """What to write for a number without a unit: the first unit that makes it believable."""
        number, units = float(raw), units_of(self.kind)
        fits = (unit for unit in units if self.low <= to_si(number, unit, self.kind) <= self.high)
        return f"Write the unit, for example '{number:g} {next(fits, units[0])}'."

    def _bound(self, value: float, raw: Any) -> str:
        """A bound in the unit the number was written in."""
        unit = re.sub(r"^[\s\d._+-]+(?:[eE][+-]?\d+)?", "", str(raw)).strip()
        return f"{from_si(value, unit, self.kind):.6g} {unit}"

    def __get_pydantic_core_schema__(self, source: Any, handler: Any) -> CoreSchema:
        return core_schema.no_info_plain_validator_function(
            self.read,
            serialization=core_schema.plain_serializer_function_ser_schema(
                lambda value: getattr(value, "text", "") or float(value)
            ),
        )


def refusal(code: str, problem: str, remedy: str = "") -> PydanticCustomError:
    """A pydantic error that carries our code, sentence and remedy."""
    return PydanticCustomError(
        "advisor", "{problem} {remedy}", {"code": code, "problem": problem, "remedy": remedy}
    )


def glossary_kind(entry: str) -> OfKind:
    """The mark of the glossary's ``entry``, with its believable range."""
    known = QUANTITIES[entry]
    return OfKind(known.kind, known.low, known.high, f"'{known.label}'")


# Kinds without a place of their own: only what cannot be is refused.
Temperature = Annotated[Written, OfKind("temperature", -60.0, 600.0)]
TemperatureDelta = Annotated[Written, OfKind("temperature_delta", -200.0, 200.0)]
Length = Annotated[Written, OfKind("length", 0.0, 1e6)]
Area = Annotated[Written, OfKind("area", 0.0, 1e6)]
Volume = Annotated[Written, OfKind("volume", 0.0, 1e5)]
Mass = Annotated[Written, OfKind("mass", 0.0, 1e9)]
MassRate = Annotated[Written, OfKind("mass_rate", 0.0, 250.0)]
Duration = Annotated[Written, OfKind("duration", 0.0, 3.2e8)]
Viscosity = Annotated[Written, OfKind("viscosity", 1e-4, 1e9)]
KinematicViscosity = Annotated[Written, OfKind("kinematic_viscosity", 1e-7, 1e3)]
VacuumFactor = Annotated[Written, OfKind("vacuum_capillary_factor", 1e-6, 1e6)]
KinematicFactor = Annotated[Written, OfKind("kinematic_capillary_factor", 1e-12, 1.0)]
Density = Annotated[Written, OfKind("density", 0.1, 5000.0)]
Speed = Annotated[Written, OfKind("speed", 0.0, 60.0)]
Rotation = Annotated[Written, OfKind("rotation", 0.0, 1000.0)]
ShearRate = Annotated[Written, OfKind("shear_rate", 0.0, 1e6)]
Fraction = Annotated[Written, OfKind("fraction", 0.0, 1.0, "a share of the whole")]
Ratio = Annotated[Written, OfKind("fraction", 0.0, 100.0, "a ratio")]
Pressure = Annotated[Written, OfKind("pressure", 0.0, 1e8)]
Angle = Annotated[Written, OfKind("angle", -180.0, 180.0)]
Energy = Annotated[Written, OfKind("energy", 0.0, 1e12)]
Power = Annotated[Written, OfKind("power", 0.0, 1e9)]
Irradiance = Annotated[Written, OfKind("irradiance", 0.0, 1500.0)]
HeatTransfer = Annotated[Written, OfKind("heat_transfer", 0.0, 1000.0)]
ThermalResistance = Annotated[Written, OfKind("thermal_resistance", 0.0, 100.0)]
Conductivity = Annotated[Written, OfKind("conductivity", 0.0, 500.0)]
VolumeFlow = Annotated[Written, OfKind("volume_flow", 0.0, 1e4)]
Penetration = Annotated[Written, OfKind("penetration", 1.0, 900.0)]
MassPerArea = Annotated[Written, OfKind("mass_per_area", 0.0, 1e4)]

# Quantities the glossary names, with its believable range.
BinderTankTemperature = Annotated[Written, glossary_kind("binder_tank_c")]
MixTemperature = Annotated[Written, glossary_kind("load_out_c")]
AirTemperature = Annotated[Written, glossary_kind("air_c")]
DewPoint = Annotated[Written, glossary_kind("dew_point_c")]
BaseTemperature = Annotated[Written, glossary_kind("base_c")]
StackTemperature = Annotated[Written, glossary_kind("stack_c")]
RollingEnd = Annotated[Written, glossary_kind("rolling_end_c")]
FlashPoint = Annotated[Written, glossary_kind("flash_point_c")]
SofteningPoint = Annotated[Written, glossary_kind("softening_point_c")]
BinderContent = Annotated[Written, glossary_kind("binder_of_mix")]
Moisture = Annotated[Written, glossary_kind("moisture_of_dry_mass")]
RapShare = Annotated[Written, glossary_kind("rap_of_mix")]
Lift = Annotated[Written, glossary_kind("lift_m")]
Haul = Annotated[Written, glossary_kind("haul_s")]
SiloHold = Annotated[Written, glossary_kind("hold_s")]
RollingTime = Annotated[Written, glossary_kind("rolling_s")]


def _read_clock(raw: Any) -> dt.time:
    if isinstance(raw, dt.time):
        return raw
    if isinstance(raw, str) and re.fullmatch(r"([01]\d|2[0-3]):[0-5]\d", raw):
        return dt.time.fromisoformat(raw)
    raise refusal("clock", f"{raw!r} is not a time of day.", "Write it as 05:30 or 20:00.")


def _read_day(raw: Any) -> dt.date:
    if isinstance(raw, dt.date):
        return raw
    if isinstance(raw, str) and re.fullmatch(r"\d{4}-\d{2}-\d{2}", raw):
        try:
            return dt.date.fromisoformat(raw)
        except ValueError:
            pass
    raise refusal("day", f"{raw!r} is not a day.", "Write it as 2026-10-19.")


_ISO = PlainSerializer(lambda value: value.isoformat(), return_type=str)
ClockTime = Annotated[dt.time, PlainValidator(_read_clock), _ISO]
Day = Annotated[dt.date, PlainValidator(_read_day), _ISO]

NAME_FORM = r"^\S(.*\S)?$"
Name = Annotated[str, Field(min_length=1, max_length=80, pattern=NAME_FORM)]
Sentence = Annotated[str, Field(min_length=1, max_length=600, pattern=r"\S")]
