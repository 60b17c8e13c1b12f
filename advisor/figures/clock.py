"""Ticks of a time axis in the plant's own time, right across a change of the clocks.

Positions stay in UTC, so that an hour that happens twice is drawn twice; only the words are local.
"""

from __future__ import annotations

from datetime import UTC, datetime, timedelta
from zoneinfo import ZoneInfo

_STEPS_MIN = (5, 10, 15, 30, 60, 120, 180, 360, 720, 1440, 2880, 10080)


def local_ticks(
    start: datetime, end: datetime, zone: ZoneInfo, most: int = 8
) -> tuple[list[datetime], list[str]]:
    """Positions (naive UTC) and local words of at most ``most`` round ticks from start to end."""
    minutes = max((end - start).total_seconds() / 60, 1.0)
    step = next((one for one in _STEPS_MIN if minutes / one <= most), _STEPS_MIN[-1])
    local = start.astimezone(zone)
    first = local.replace(hour=0, minute=0, second=0, microsecond=0)
    ticks: list[tuple[datetime, str]] = []
    day = first
    while day.astimezone(UTC) <= end:
        ticks += _ticks_of_day(day, step, zone)
        day = (day + timedelta(days=max(1, step // 1440))).replace(tzinfo=zone)
    kept = [(at, words) for at, words in ticks if start <= at <= end]
    return [at.replace(tzinfo=None) for at, _ in kept], [words for _, words in kept]


def _ticks_of_day(day: datetime, step: int, zone: ZoneInfo) -> list[tuple[datetime, str]]:
    if step >= 1440:
        return [(day.astimezone(UTC), f"{day:%a} {day.day} {day:%b}")]
    start = day.astimezone(UTC)
    end = (day + timedelta(days=1)).replace(tzinfo=zone).astimezone(UTC)
    found = []
    at = start
    while at < end:
        there = at.astimezone(zone)
        if (there.hour * 60 + there.minute) % step == 0:
            found.append((at, _words(there)))
        at += timedelta(minutes=min(step, 60))
    return found


def _words(there: datetime) -> str:
    if there.hour == 0 and there.minute == 0:
        return f"{there:%a} {there.day}"
    twice = there.replace(fold=0).utcoffset() != there.replace(fold=1).utcoffset()
    return f"{there:%H:%M} {there.tzname()}" if twice else f"{there:%H:%M}"


def naive_utc(at: datetime) -> datetime:
    """``at`` in UTC without its zone: what a figure's time axis takes."""
    return at.astimezone(UTC).replace(tzinfo=None)
