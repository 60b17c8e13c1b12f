"""Plant exports and weather: read, checked, marked and kept; never changed and never written back.

``read_logs`` is the door: a plant folder and a period in, frames and intake reports out.
"""

from __future__ import annotations

import importlib
from typing import Any

_HOME = {
    "ClockOffset": "ticket_clock",
    "Intake": "intake",
    "IntakeReport": "report",
    "MARKS": "cleaning",
    "PlantLog": "plant_log",
    "SetAsideRow": "report",
    "believed": "cleaning",
    "clock_offset": "ticket_clock",
    "clock_rules": "ticket_clock",
    "mark_faults": "cleaning",
    "read_export": "intake",
    "read_forecast": "weather_forecast",
    "read_kind": "plant_log",
    "read_logs": "plant_log",
    "read_metar": "weather_reports",
    "write_report": "report",
    "write_set_aside": "report",
}

__all__ = sorted(_HOME)


def __getattr__(name: str) -> Any:
    """The public name ``name``, imported on first use: pandas and pyarrow are slow to load."""
    if name not in _HOME:
        raise AttributeError(f"module {__name__!r} has no attribute {name!r}")
    return getattr(importlib.import_module(f"{__name__}.{_HOME[name]}"), name)
