"""The signals a source can carry: their names, quantities and units, by kind of source.

A numbered signal (``silo_1_c``) belongs to one silo or tank, in the order of the plant's settings.
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from typing import Literal

from advisor.glossary import QUANTITIES, Quantity

SourceKind = Literal["plant_log", "tickets", "arrivals", "weather", "forecast"]

# Signal to glossary entry; "<n>" stands for a number.
_QUANTITY_OF = {
    "discharge_c": "discharge_c",
    "hot_aggregate_c": "hot_aggregate_c",
    "stack_c": "stack_c",
    "binder_tank_<n>_c": "binder_tank_c",
    "silo_<n>_c": "silo_c",
    "silo_<n>_kg": "silo_kg",
    "rate_kgs": "rate_kgs",
    "burner_load": "burner_load",
    "moisture_entered": "moisture_of_dry_mass",
    "rap_of_mix": "rap_of_mix",
    "mass_kg": "mass_kg",
    "load_out_c": "load_out_c",
    "delivery_c": "delivery_c",
    "air_c": "air_c",
    "wind_ms": "wind_ms",
    "cloud_of_sky": "cloud_of_sky",
    "dew_point_c": "dew_point_c",
}
_TEXTS = {"mix_id", "ticket", "silo", "truck", "job", "where", "issued"}
_SWITCHES = {"conveyor_on", "rain"}


@dataclass(frozen=True)
class SourceShape:
    """What one kind of source holds: its signals, which it needs, and what names a row.

    ``regular`` sources have a row every so often; the others a row per event.
    """

    signals: tuple[str, ...]
    needed: tuple[str, ...]
    key: str
    regular: bool


SHAPES: dict[SourceKind, SourceShape] = {
    "plant_log": SourceShape(
        signals=(
            "mix_id", "discharge_c", "stack_c", "hot_aggregate_c", "binder_tank_<n>_c",
            "silo_<n>_c", "silo_<n>_kg", "rate_kgs", "burner_load", "moisture_entered",
            "rap_of_mix", "conveyor_on",
        ),
        needed=("discharge_c", "rate_kgs", "mix_id"),
        key="time",
        regular=True,
    ),
    "tickets": SourceShape(
        signals=("ticket", "silo", "mix_id", "truck", "mass_kg", "load_out_c", "job"),
        needed=("ticket", "mix_id", "mass_kg"),
        key="ticket",
        regular=False,
    ),
    "arrivals": SourceShape(
        signals=("ticket", "delivery_c", "where"),
        needed=("ticket", "delivery_c"),
        key="ticket",
        regular=False,
    ),
    "weather": SourceShape(
        signals=("air_c", "wind_ms", "cloud_of_sky", "dew_point_c", "rain"),
        needed=("air_c",),
        key="time",
        regular=True,
    ),
    "forecast": SourceShape(
        signals=("air_c", "wind_ms", "cloud_of_sky", "dew_point_c", "rain", "issued"),
        needed=("air_c", "wind_ms", "cloud_of_sky", "dew_point_c"),
        key="time",
        regular=True,
    ),
}  # fmt: skip


def plain_signal(signal: str) -> str:
    """``signal`` with its number replaced by <n>."""
    return re.sub(r"_\d+_", "_<n>_", signal)


def signal_quantity(signal: str) -> Quantity | None:
    """Glossary entry of ``signal``; None for text and for on-off signals."""
    entry = _QUANTITY_OF.get(plain_signal(signal))
    return QUANTITIES[entry] if entry else None


def is_text(signal: str) -> bool:
    """Whether ``signal`` is a name rather than a number."""
    return signal in _TEXTS


def is_switch(signal: str) -> bool:
    """Whether ``signal`` is on or off."""
    return signal in _SWITCHES


def known_signals(kind: SourceKind) -> tuple[str, ...]:
    """Names of the signals a source of ``kind`` can carry; <n> stands for a number."""
    return SHAPES[kind].signals
