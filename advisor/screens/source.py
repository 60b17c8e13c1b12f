"""What the pages ask for: the one door between the screens and a plant."""

from __future__ import annotations

from collections.abc import Callable, Hashable, Sequence
from dataclasses import dataclass
from datetime import datetime
from typing import Protocol, TypeVar
from zoneinfo import ZoneInfo

from advisor.advice.facts import PlantFacts
from advisor.advice.result import Advice
from advisor.advice.situation import Situation
from advisor.figures.drawn import Reading, TicketPoint, Trace, WindowSpan
from advisor.review.result import Excursion, Review
from advisor.settings.certificate import Certificate
from advisor.units import UnitSystem

T = TypeVar("T")

# Plant logs come once a minute; after five missed ones the reading is history, not the present.
# Common practice, no source.
STALE_AFTER_S = 300.0


def is_stale(age_s: float | None) -> bool:
    """Whether readings of this age [s] are too old to be called the present."""
    return age_s is None or age_s > STALE_AFTER_S


@dataclass(frozen=True)
class JobChoice:
    """A job that can be chosen on the page."""

    code: str
    name: str
    mix: str


@dataclass(frozen=True)
class LaterHour:
    """What one coming hour asks for: why it differs and its target, or why there is none."""

    at: datetime
    change: str
    target_c: float | None


class Source(Protocol):
    """A plant as the pages see it. Times are aware; a method that needs long is cached inside."""

    @property
    def plant_name(self) -> str:
        """Name of the plant."""

    @property
    def invented(self) -> bool:
        """Whether the plant and its data are made up."""

    @property
    def zone(self) -> ZoneInfo:
        """Time zone of the plant."""

    def now(self) -> datetime:
        """The moment the pages call now."""

    def shift_name(self, at: datetime) -> str:
        """Name of the shift at ``at``; empty where none is set."""

    def jobs(self) -> Sequence[JobChoice]:
        """The jobs that can be chosen."""

    def current_advice(
        self, job: str | None, at: datetime | None, units: UnitSystem = "si"
    ) -> Advice:
        """The advice for ``job``, or for the job that runs, at ``at`` or now, told in ``units``."""

    def rest_of_shift(
        self, job: str | None, at: datetime, units: UnitSystem = "si"
    ) -> Sequence[LaterHour]:
        """The coming hours of the shift for the same job, told in ``units``."""

    def readings(self, at: datetime) -> Sequence[Reading]:
        """The latest reading at each point of the heat path at ``at``."""

    def last_reading_at(self, at: datetime) -> datetime | None:
        """When the newest reading known at ``at`` was taken; None where there is none."""

    def discharge(self, start: datetime, end: datetime) -> Trace:
        """Discharge temperatures from ``start`` to ``end``, NaN where not trusted."""

    def windows_in_force(self, start: datetime, end: datetime) -> Sequence[WindowSpan]:
        """The discharge windows that were in force from ``start`` to ``end``."""

    def excursions_open(self, at: datetime, units: UnitSystem = "si") -> Sequence[Excursion]:
        """The excursions still running, or just ended, as known at ``at``, told in ``units``."""

    def data_span(self) -> tuple[datetime, datetime]:
        """First and last moment of the plant's log."""

    def review(self, start: datetime, end: datetime, units: UnitSystem = "si") -> Review:
        """The period against the advice then in force, told in ``units``; quick asked again."""

    def certificates(self, at: datetime) -> Sequence[Certificate]:
        """The binder certificates recorded by ``at``, the newest first."""

    def ask(self, question: Hashable, at: datetime, work: Callable[[PlantFacts], T]) -> T:
        """What ``work`` answers of the plant as it was known ``at``; quick when asked again.

        ``question`` names the work and what it was given.
        """

    def situation(self, job: str | None, units: UnitSystem = "si") -> Situation:
        """What is known now for ``job``, or for the job that runs."""

    def tickets(self, start: datetime, end: datetime) -> Sequence[TicketPoint]:
        """The truck loads from ``start`` to ``end``."""
