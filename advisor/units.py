"""Units at the edges: text with a unit in, SI inside, text with a unit out.

Inside, temperatures are in degrees Celsius and every other quantity is in SI base or derived
units. A temperature and a temperature difference are different kinds and convert by different
rules: 30 F of tolerance is 16.7 K.
"""

from __future__ import annotations

import difflib
import math
import re
from dataclasses import dataclass
from typing import Literal

from advisor.errors import FaultyInput

UnitSystem = Literal["si", "us"]

ABSOLUTE_ZERO_C = -273.15
RANKINE_PER_KELVIN = 1.8
FAHRENHEIT_ZERO_R = 459.67


def celsius_from_fahrenheit(temperature_f: float) -> float:
    """Temperature [C] of a temperature [F]."""
    return (temperature_f - 32.0) / 1.8


def fahrenheit_from_celsius(temperature_c: float) -> float:
    """Temperature [F] of a temperature [C]."""
    return temperature_c * 1.8 + 32.0


def kelvin_delta_from_fahrenheit_delta(delta_f: float) -> float:
    """Temperature difference [K] of a temperature difference [F]."""
    return delta_f / 1.8


def fahrenheit_delta_from_kelvin_delta(delta_k: float) -> float:
    """Temperature difference [F] of a temperature difference [K]."""
    return delta_k * 1.8


@dataclass(frozen=True)
class Unit:
    """One way to write a quantity: SI value = number * factor + offset."""

    factor: float
    offset: float = 0.0


_SHORT_TON_KG = 907.18474
_US_GALLON_M3 = 3.785411784e-3
_INCH_M = 0.0254
_POUND_KG = 0.45359237
_BTU_J = 1055.05585262
_FT_M = 12 * _INCH_M

# Every spelling we accept, by kind; the first of a kind is the one we write in SI.
# Factors are exact by definition (BIPM SI brochure 2019; NIST SP 811, 2008, appendix B).
_KINDS: dict[str, dict[str, Unit]] = {
    "temperature": {
        "C": Unit(1.0),
        "degC": Unit(1.0),
        "°C": Unit(1.0),
        "F": Unit(1 / 1.8, -32 / 1.8),
        "degF": Unit(1 / 1.8, -32 / 1.8),
        "°F": Unit(1 / 1.8, -32 / 1.8),
        "K": Unit(1.0, ABSOLUTE_ZERO_C),
    },
    "temperature_delta": {
        "K": Unit(1.0),
        "C": Unit(1.0),
        "degC": Unit(1.0),
        "°C": Unit(1.0),
        "F": Unit(1 / 1.8),
        "degF": Unit(1 / 1.8),
        "°F": Unit(1 / 1.8),
    },
    "length": {
        "m": Unit(1.0),
        "mm": Unit(1e-3),
        "cm": Unit(1e-2),
        "km": Unit(1e3),
        "in": Unit(_INCH_M),
        "ft": Unit(_FT_M),
        "mi": Unit(1609.344),
    },
    "area": {"m2": Unit(1.0), "ft2": Unit(_FT_M**2)},
    "volume": {
        "m3": Unit(1.0),
        "L": Unit(1e-3),
        "gal": Unit(_US_GALLON_M3),
        "bbl": Unit(42 * _US_GALLON_M3),
    },
    "mass": {
        "kg": Unit(1.0),
        "t": Unit(1000.0),
        "g": Unit(1e-3),
        "ton": Unit(_SHORT_TON_KG),
        "lb": Unit(_POUND_KG),
    },
    "mass_rate": {
        "kg/s": Unit(1.0),
        "t/h": Unit(1000 / 3600),
        "kg/h": Unit(1 / 3600),
        "ton/h": Unit(_SHORT_TON_KG / 3600),
        "tph": Unit(_SHORT_TON_KG / 3600),
        "lb/h": Unit(_POUND_KG / 3600),
    },
    "duration": {
        "s": Unit(1.0),
        "min": Unit(60.0),
        "h": Unit(3600.0),
        "d": Unit(86400.0),
    },
    "viscosity": {
        "Pa.s": Unit(1.0),
        "Pa·s": Unit(1.0),
        "mPa.s": Unit(1e-3),
        "mPa·s": Unit(1e-3),
        "P": Unit(0.1),
        "cP": Unit(1e-3),
    },
    "kinematic_viscosity": {
        "m2/s": Unit(1.0),
        "mm2/s": Unit(1e-6),
        "cSt": Unit(1e-6),
        "St": Unit(1e-4),
    },
    "vacuum_capillary_factor": {"Pa.s/s": Unit(1.0), "P/s": Unit(0.1)},
    "kinematic_capillary_factor": {"m2/s2": Unit(1.0), "mm2/s2": Unit(1e-6), "cSt/s": Unit(1e-6)},
    "density": {
        "kg/m3": Unit(1.0),
        "g/cm3": Unit(1000.0),
        "kg/L": Unit(1000.0),
        "lb/gal": Unit(_POUND_KG / _US_GALLON_M3),
    },
    "speed": {
        "m/s": Unit(1.0),
        "km/h": Unit(1 / 3.6),
        "mph": Unit(0.44704),
        "kt": Unit(1852 / 3600),
    },
    "rotation": {"rad/s": Unit(1.0), "rpm": Unit(2 * math.pi / 60)},
    "shear_rate": {"1/s": Unit(1.0)},
    "fraction": {"%": Unit(0.01), "1": Unit(1.0)},
    "pressure": {
        "Pa": Unit(1.0),
        "kPa": Unit(1e3),
        "hPa": Unit(100.0),
        "mbar": Unit(100.0),
        "bar": Unit(1e5),
        "MPa": Unit(1e6),
        "inHg": Unit(3386.389),
        "psi": Unit(6894.757293168),
    },
    "angle": {"deg": Unit(1.0)},
    "energy": {
        "J": Unit(1.0),
        "MJ": Unit(1e6),
        "GJ": Unit(1e9),
        "kWh": Unit(3.6e6),
        "MWh": Unit(3.6e9),
        "Btu": Unit(_BTU_J),
        "MMBtu": Unit(_BTU_J * 1e6),
        "therm": Unit(_BTU_J * 1e5),
    },
    "power": {
        "W": Unit(1.0),
        "kW": Unit(1e3),
        "MW": Unit(1e6),
        "MMBtu/h": Unit(_BTU_J * 1e6 / 3600),
    },
    "heat_per_mass": {
        "J/kg": Unit(1.0),
        "MJ/kg": Unit(1e6),
        "kJ/kg": Unit(1e3),
        "MJ/t": Unit(1e3),
        "kWh/t": Unit(3600.0),
        "Btu/lb": Unit(_BTU_J / _POUND_KG),
        "Btu/ton": Unit(_BTU_J / _SHORT_TON_KG),
    },
    "mass_per_heat": {
        "kg/J": Unit(1.0),
        "kg/MMBtu": Unit(1e-6 / _BTU_J),
        "kg/GJ": Unit(1e-9),
        "kg/kWh": Unit(1 / 3.6e6),
    },
    "emission_factor": {"kg/kg": Unit(1.0), "kg/t": Unit(1e-3), "lb/ton": Unit(1 / 2000)},
    "conductivity": {"W/mK": Unit(1.0), "W/(m.K)": Unit(1.0)},
    "specific_heat": {"J/kgK": Unit(1.0), "J/(kg.K)": Unit(1.0), "kJ/(kg.K)": Unit(1e3)},
    "heat_transfer": {"W/m2K": Unit(1.0), "W/(m2.K)": Unit(1.0)},
    "thermal_resistance": {"m2K/W": Unit(1.0)},
    "irradiance": {"W/m2": Unit(1.0)},
    "volume_flow": {
        "m3/s": Unit(1.0),
        "m3/h": Unit(1 / 3600),
        "cfm": Unit(_FT_M**3 / 60),
        "L/h": Unit(1e-3 / 3600),
        "gal/h": Unit(_US_GALLON_M3 / 3600),
    },
    "penetration": {"dmm": Unit(1.0), "0.1 mm": Unit(1.0)},
    "mass_per_area": {"kg/m2": Unit(1.0)},
}

_WRITTEN = re.compile(
    r"^\s*(?P<number>[+-]?(?:(?:\d{1,3}(?:[ _]\d{3})+(?!\d)|\d+)(?:\.\d*)?|\.\d+)(?:[eE][+-]?\d+)?)"
    r"\s*(?P<unit>(?!,).*?)\s*$"
)


def kinds() -> tuple[str, ...]:
    """Names of the kinds of quantity that can be read and written."""
    return tuple(_KINDS)


def units_of(kind: str) -> tuple[str, ...]:
    """Spellings accepted for ``kind``; the first is the one used inside."""
    return tuple(_KINDS[kind])


def to_si(number: float, unit: str, kind: str) -> float:
    """Value in the inside unit of ``kind`` of ``number`` written in ``unit``."""
    table = _KINDS[kind]
    if unit not in table:
        raise FaultyInput.of(
            "unit",
            f"'{unit}' is not a unit of {_words(kind)}.",
            _unit_remedy(unit, kind),
            value=f"{number:g} {unit}".strip(),
        )
    return number * table[unit].factor + table[unit].offset


def from_si(value: float, unit: str, kind: str) -> float:
    """Number to write in ``unit`` for a ``value`` in the inside unit of ``kind``."""
    chosen = _KINDS[kind][unit]
    return (value - chosen.offset) / chosen.factor


def parse_quantity(text: object, kind: str) -> float:
    """Value in the inside unit of ``kind`` of a text such as '152 C', '305 F' or '4 in'.

    Raises FaultyInput where the unit is missing, unknown or of another kind, where the number
    is not one, and where it is not finite.
    """
    if isinstance(text, bool) or not isinstance(text, (str, int, float)):
        raise FaultyInput.of(
            "not-a-quantity", f"{text!r} is not a quantity.", _example(kind), value=repr(text)
        )
    if not isinstance(text, str):
        raise FaultyInput.of(
            "unit-missing",
            f"{text!r} has no unit.",
            f"Write the unit, for example {_example_text(kind, float(text))}.",
            value=repr(text),
        )
    found = _WRITTEN.match(text)
    if not found:
        comma = "," in text
        raise FaultyInput.of(
            "not-a-quantity",
            f"'{text}' is not a number with a unit.",
            "Use a point for decimals. " * comma + _example(kind),
            value=text,
        )
    number = float(found["number"].replace("_", "").replace(" ", ""))
    if not math.isfinite(number):
        raise FaultyInput.of(
            "not-finite", f"'{text}' is not a finite number.", _example(kind), value=text
        )
    if not found["unit"]:
        raise FaultyInput.of(
            "unit-missing",
            f"'{text}' has no unit.",
            f"Write the unit, for example {_example_text(kind, number)}.",
            value=text,
        )
    return to_si(number, found["unit"], kind)


# What a reader of each system is shown: unit and decimals.
_SHOWN: dict[str, dict[UnitSystem, tuple[str, int]]] = {
    "temperature": {"si": ("°C", 0), "us": ("°F", 0)},
    "temperature_delta": {"si": ("°C", 1), "us": ("°F", 1)},
    "length": {"si": ("mm", 0), "us": ("in", 1)},
    "mass": {"si": ("t", 1), "us": ("ton", 1)},
    "mass_rate": {"si": ("t/h", 0), "us": ("ton/h", 0)},
    "duration": {"si": ("min", 0), "us": ("min", 0)},
    "viscosity": {"si": ("Pa.s", 3), "us": ("cP", 0)},
    "speed": {"si": ("m/s", 1), "us": ("mph", 0)},
    "fraction": {"si": ("%", 1), "us": ("%", 1)},
    "energy": {"si": ("kWh", 0), "us": ("MMBtu", 2)},
    "heat_per_mass": {"si": ("kWh/t", 1), "us": ("Btu/ton", 0)},
    "pressure": {"si": ("hPa", 0), "us": ("inHg", 2)},
    "volume": {"si": ("m3", 1), "us": ("gal", 0)},
}


def shown_unit(kind: str, system: UnitSystem = "si") -> str:
    """Unit in which readers of ``system`` see ``kind``."""
    return _SHOWN[kind][system][0]


def shown_number(value: float, kind: str, system: UnitSystem = "si") -> float:
    """Number, unrounded, that readers of ``system`` see for ``value`` in the inside unit."""
    return from_si(value, _SHOWN[kind][system][0], kind)


def shown(value: float, kind: str, system: UnitSystem = "si", decimals: int | None = None) -> str:
    """Text such as '152 °C' or '306 °F' for a ``value`` in the inside unit of ``kind``."""
    unit, usual = _SHOWN[kind][system]
    places = usual if decimals is None else decimals
    number = round(from_si(value, unit, kind), places) + 0.0  # + 0.0 turns -0 into 0
    return f"{number:.{places}f} {unit}"


def _words(kind: str) -> str:
    words = kind.replace("_delta", " difference").replace("_", " ")
    return f"a {words}" if words[0] not in "aeiou" else f"an {words}"


def _example_text(kind: str, number: float) -> str:
    return f"'{number:g} {next(iter(_KINDS[kind]))}'"


def _example(kind: str) -> str:
    return f"Write a number with one of these units: {', '.join(_KINDS[kind])}."


def _unit_remedy(unit: str, kind: str) -> str:
    others = [name for name, table in _KINDS.items() if unit in table and name != kind]
    near = difflib.get_close_matches(unit, _KINDS[kind], n=1, cutoff=0.6)
    hint = f"Did you mean '{near[0]}'? " if near else ""
    if others and not near:
        hint = f"It is a unit of {_words(others[0])}. "
    return f"{hint}Known here: {', '.join(_KINDS[kind])}."
