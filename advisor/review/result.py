"""What a review says: where the plant ran outside its window, how far, and what it cost.

Times are aware datetimes in UTC; tonnes are metric; money is in the plant's currency. A ``Span``
is low, middle and high of an estimate.
"""

from __future__ import annotations

from dataclasses import dataclass
from datetime import datetime
from typing import Literal

State = Literal[
    "off",
    "warm-up",
    "start-up",
    "production",
    "mix change",
    "stop",
    "silo only",
    "empty-out",
    "unknown",
]


@dataclass(frozen=True)
class Span:
    """Low, middle and high of an estimate."""

    low: float
    middle: float
    high: float

    def __add__(self, other: Span) -> Span:
        return Span(self.low + other.low, self.middle + other.middle, self.high + other.high)


NOTHING = Span(0.0, 0.0, 0.0)


@dataclass(frozen=True)
class Waste:
    """Excess heat and what it is worth."""

    excess_tk: float  # tonne kelvin above the window
    fuel_kwh: Span
    money: Span
    co2_kg: Span

    def __add__(self, other: Waste) -> Waste:
        return Waste(
            self.excess_tk + other.excess_tk,
            self.fuel_kwh + other.fuel_kwh,
            self.money + other.money,
            self.co2_kg + other.co2_kg,
        )


NO_WASTE = Waste(0.0, NOTHING, NOTHING, NOTHING)


@dataclass(frozen=True)
class Excursion:
    """One stretch outside the window that was in force."""

    point: Literal["discharge", "load_out", "delivery", "binder_tank"]
    side: Literal["hot", "cold"]
    start: datetime
    end: datetime
    minutes: float
    tonnes: float
    peak_k: float
    mean_k: float
    limit_c: float
    mix: str
    job: str
    tank: str
    state: State
    waste: Waste
    cause: str
    evidence: str


@dataclass(frozen=True)
class HourCell:
    """One hour of one day, plant local time: tonnes and their mean distance from the window.

    ``distance_k`` is above 0 for hot, below 0 for cold, 0 inside; None where nothing was made.
    """

    day: str
    hour: int
    tonnes: float
    distance_k: float | None
    hot_tonnes: float
    cold_tonnes: float


@dataclass(frozen=True)
class StateShare:
    """Minutes and tonnes the plant spent in one state."""

    state: State
    minutes: float
    tonnes: float


@dataclass(frozen=True)
class MixShare:
    """How one mix ran: tonnes made, hot, cold and without advice, and the waste."""

    mix: str
    tonnes: float
    hot_tonnes: float
    cold_tonnes: float
    no_advice_tonnes: float
    mean_c: float
    waste: Waste

    @property
    def inside_tonnes(self) -> float:
        """Tonnes made inside the window."""
        return max(self.tonnes - self.hot_tonnes - self.cold_tonnes - self.no_advice_tonnes, 0.0)


@dataclass(frozen=True)
class NoAdvice:
    """Tonnes of a mix made while there was no advice to compare with, and why there was none."""

    mix: str
    why: str
    tonnes: float


@dataclass(frozen=True)
class SetAside:
    """Rows or readings not used, and why; ``signal`` is 'row' where a whole row was not."""

    reason: str
    signal: str
    count: int
    first: datetime | None = None
    last: datetime | None = None


@dataclass(frozen=True)
class Review:
    """A plant's period against the advice that was in force.

    ``rows_read``, ``rows_used`` and ``rows_set_aside`` count the rows of the period, also where
    the log's files reach beyond it.
    """

    plant: str
    start: datetime
    end: datetime
    time_zone: str
    rows_read: int
    rows_used: int
    rows_set_aside: int
    set_aside: tuple[SetAside, ...]
    states: tuple[StateShare, ...]
    cells: tuple[HourCell, ...]
    mixes: tuple[MixShare, ...]
    excursions: tuple[Excursion, ...]
    tonnes: float
    in_window_tonnes: float
    hot_tonnes: float
    cold_tonnes: float
    no_advice_tonnes: float
    waste: Waste
    start_up_waste: Waste
    currency: str
    sentence: str
    cautions: tuple[str, ...] = ()
    no_advice: tuple[NoAdvice, ...] = ()
