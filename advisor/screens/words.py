"""Numbers and times as the pages write them."""

from __future__ import annotations

from datetime import datetime
from zoneinfo import ZoneInfo

from advisor.figures.base import degrees, whole_delta
from advisor.figures.drawn import Verdict
from advisor.figures.ink import COLD_MARK, HOT_MARK, UNKNOWN_MARK
from advisor.review.result import Span
from advisor.units import UnitSystem, shown_number, shown_unit

MARKS: dict[Verdict, str] = {
    "hot": HOT_MARK,
    "cold": COLD_MARK,
    "unknown": UNKNOWN_MARK,
    "inside": "",
}


def unit_words(units: UnitSystem) -> str:
    """The unit of temperature, '°C' or '°F'."""
    return shown_unit("temperature", units)


def temperature_words(value_c: float, units: UnitSystem) -> str:
    """A temperature with its unit, such as '156 °C'."""
    return f"{degrees(value_c, units)} {unit_words(units)}"


def delta_words(value_k: float, units: UnitSystem) -> str:
    """A temperature difference with its unit, such as '3 °C'."""
    return f"{whole_delta(value_k, units)} {unit_words(units)}"


def clock_words(at: datetime, zone: ZoneInfo) -> str:
    """The plant's clock, with the zone's name where the hour happens twice."""
    there = at.astimezone(zone)
    twice = there.replace(fold=0).utcoffset() != there.replace(fold=1).utcoffset()
    return f"{there:%H:%M} {there.tzname()}" if twice else f"{there:%H:%M}"


def day_words(at: datetime, zone: ZoneInfo) -> str:
    """The plant's day, such as 'Fri 23 Oct'."""
    there = at.astimezone(zone)
    return f"{there:%a} {there.day} {there:%b}"


def moment_words(at: datetime, zone: ZoneInfo) -> str:
    """Day and clock, such as 'Fri 23 Oct 10:10'."""
    return f"{day_words(at, zone)} {clock_words(at, zone)}"


def age_words(age_s: float) -> str:
    """An age in the largest unit that reads well, such as '8 s', '12 min', '3 h', '2 days'."""
    if age_s < 90:
        return f"{age_s:.0f} s"
    if age_s < 5400:
        return f"{age_s / 60:.0f} min"
    return f"{age_s / 3600:.0f} h" if age_s < 172_800 else f"{age_s / 86400:.0f} days"


def mass_words(tonnes: float, units: UnitSystem, decimals: int = 0) -> str:
    """A mass given in metric tonnes, such as '71 t' or '78 ton'."""
    number = round(shown_number(1000 * tonnes, "mass", units), decimals) + 0.0
    return f"{number:,.{decimals}f} {shown_unit('mass', units)}"


def energy_words(kwh: Span, units: UnitSystem) -> str:
    """Middle and range of an energy, such as '410 kWh (310 – 560)'."""
    places = 0 if units == "si" else 1
    low, middle, high = (
        shown_number(one * 3.6e6, "energy", units) for one in (kwh.low, kwh.middle, kwh.high)
    )
    unit = shown_unit("energy", units)
    return f"{middle:,.{places}f} {unit} ({low:,.{places}f} – {high:,.{places}f})"


def money_words(money: Span, currency: str) -> str:
    """Range of an amount of money, such as '17 – 31 GBP'."""
    places = 0 if money.high >= 10 else 2
    return f"{money.low:,.{places}f} – {money.high:,.{places}f} {currency}"
