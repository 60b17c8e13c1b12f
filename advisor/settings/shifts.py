"""Which working shift is on at a moment, and when it ends."""

from __future__ import annotations

from collections.abc import Sequence
from datetime import UTC, datetime, timedelta

from advisor.settings.plant import Shift

_DAYS = ("mon", "tue", "wed", "thu", "fri", "sat", "sun")


def shift_at(shifts: Sequence[Shift], local: datetime) -> Shift | None:
    """The shift that is on at ``local``, an aware plant time; None between shifts."""
    return next((shift for shift, _ in _on(shifts, local)), None)


def shift_end(shifts: Sequence[Shift], local: datetime) -> datetime | None:
    """When the shift that is on at ``local`` ends [UTC]; None between shifts."""
    ends = [end for _, end in _on(shifts, local)]
    return min(ends).astimezone(UTC) if ends else None


def next_start(shifts: Sequence[Shift], after: datetime) -> datetime | None:
    """When the first shift after ``after``, an aware plant time, starts [UTC]; None without one."""
    starts = [
        datetime.combine(day, shift.start, tzinfo=after.tzinfo)
        for ahead in range(8)
        for day in (after.date() + timedelta(days=ahead),)
        for shift in shifts
        if _DAYS[day.weekday()] in shift.days
    ]
    later = [one for one in starts if one > after]
    return min(later).astimezone(UTC) if later else None


def _on(shifts: Sequence[Shift], local: datetime) -> list[tuple[Shift, datetime]]:
    """Shifts of the day of ``local`` and of the day before that are on, with their ends."""
    found = []
    for shift in shifts:
        for day in (local.date() - timedelta(days=1), local.date()):
            if _DAYS[day.weekday()] not in shift.days:
                continue
            start = datetime.combine(day, shift.start, tzinfo=local.tzinfo)
            last = day + timedelta(days=1) if shift.end <= shift.start else day
            end = datetime.combine(last, shift.end, tzinfo=local.tzinfo)
            if start <= local < end:
                found.append((shift, end))
    return found
