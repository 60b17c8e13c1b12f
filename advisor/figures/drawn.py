"""What figures draw that is no result of an inner room: readings, windows in time, traces."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import datetime
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from advisor.advice.result import Point

Verdict = Literal["inside", "hot", "cold", "unknown"]


@dataclass(frozen=True)
class Reading:
    """The latest reading at one point of the heat path.

    ``sd_k`` is the standard deviation of the sensor; ``doubt`` says why the reading cannot be
    trusted and is empty where it can. ``value_c`` is None where there is no reading.
    """

    point: Point
    value_c: float | None
    sd_k: float
    taken_at: datetime | None
    doubt: str = ""


@dataclass(frozen=True)
class WindowSpan:
    """The window in force from ``start`` to ``end``; the numbers are None where none was."""

    start: datetime
    end: datetime
    low_c: float | None
    target_c: float | None
    high_c: float | None
    mix: str = ""


@dataclass(frozen=True)
class Trace:
    """A run of readings in time: ``times`` UTC as datetime64, ``values_c`` with NaN for gaps."""

    times: NDArray[np.datetime64]
    values_c: NDArray[np.float64]


@dataclass(frozen=True)
class TicketPoint:
    """One truck load: when it was loaded and how warm it was."""

    ticket: str
    time: datetime
    mix: str
    truck: str
    mass_kg: float
    load_out_c: float | None


def verdict_of(value_c: float | None, low_c: float, high_c: float, doubt: str = "") -> Verdict:
    """Whether a reading is inside, hot or cold against its window, or cannot be told."""
    if value_c is None or doubt or not np.isfinite(value_c):
        return "unknown"
    if value_c > high_c:
        return "hot"
    return "cold" if value_c < low_c else "inside"
