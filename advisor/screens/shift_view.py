"""Everything the shift page shows at one moment, asked of the source once."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from datetime import datetime, timedelta
from zoneinfo import ZoneInfo

from advisor.advice.result import Advice
from advisor.figures.drawn import Reading, Trace, WindowSpan
from advisor.review.result import Excursion
from advisor.screens.source import LaterHour, Source, is_stale
from advisor.units import UnitSystem

TREND_HOURS = 4.0


@dataclass(frozen=True)
class ShiftView:
    """One moment of the shift; ``age_s`` is the age of the newest reading, None without one."""

    at: datetime
    zone: ZoneInfo
    shift_name: str
    advice: Advice
    readings: Sequence[Reading]
    age_s: float | None
    last_reading_at: datetime | None
    discharge: Trace
    windows: Sequence[WindowSpan]
    excursions: Sequence[Excursion]
    later: Sequence[LaterHour]

    @property
    def stale(self) -> bool:
        """Whether the newest reading is too old to be called the present."""
        return is_stale(self.age_s)

    @property
    def expired(self) -> bool:
        """Whether the advice has run out."""
        return self.at >= self.advice.valid_until

    @property
    def trend_start(self) -> datetime:
        """Left end of the trend."""
        return self.at - timedelta(hours=TREND_HOURS)


def shift_view(
    source: Source, job: str | None, at: datetime | None, units: UnitSystem = "si"
) -> ShiftView:
    """The shift at ``at`` or now, for ``job`` or the job that runs, told in ``units``.

    Raises AdvisorError where the source cannot give an advice.
    """
    moment = at or source.now()
    advice = source.current_advice(job, moment, units)
    last = source.last_reading_at(moment)
    start = moment - timedelta(hours=TREND_HOURS)
    return ShiftView(
        at=moment,
        zone=source.zone,
        shift_name=source.shift_name(moment),
        advice=advice,
        readings=[_dated(one, moment, source.zone) for one in source.readings(moment)],
        age_s=(moment - last).total_seconds() if last else None,
        last_reading_at=last,
        discharge=source.discharge(start, moment),
        excursions=source.excursions_open(moment, units),  # first: it finds the windows too
        windows=source.windows_in_force(start, moment),
        later=source.rest_of_shift(job, moment, units),
    )


def _dated(reading: Reading, at: datetime, zone: ZoneInfo) -> Reading:
    """The reading with its age as a doubt where it is too old to be called the present."""
    if reading.doubt or reading.taken_at is None:
        return reading
    if not is_stale((at - reading.taken_at).total_seconds()):
        return reading
    return replace(reading, doubt=f"from {reading.taken_at.astimezone(zone):%H:%M}")
