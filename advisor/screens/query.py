"""The question in a page's address, read with care: what it asks for and what is wrong with it."""

from __future__ import annotations

import difflib
from dataclasses import dataclass
from datetime import UTC, date, datetime, timedelta
from urllib.parse import parse_qs
from zoneinfo import ZoneInfo


@dataclass(frozen=True)
class ShiftQuery:
    """What the shift page's address asks for; ``faults`` are sentences for the reader."""

    job: str | None = None
    at: datetime | None = None
    faults: tuple[str, ...] = ()


@dataclass(frozen=True)
class ReviewQuery:
    """What the review page's address asks for; the days are the plant's own."""

    first: date | None = None
    last: date | None = None
    faults: tuple[str, ...] = ()


def shift_query(search: str | None, jobs: tuple[str, ...], zone: ZoneInfo) -> ShiftQuery:
    """Job and time of an address such as '?job=J-1&at=2026-10-23T10:10'."""
    given, faults = _pairs(search, ("job", "at"))
    job, at = given.get("job"), None
    if job is not None and job not in jobs:
        faults.append(
            f"There is no job '{job}' in this plant{_nearest(job, jobs)}; "
            "showing the job that runs."
        )
        job = None
    if "at" in given:
        try:
            at = datetime.fromisoformat(given["at"])
            at = (at if at.tzinfo else at.replace(tzinfo=zone)).astimezone(UTC)
        except (ValueError, OverflowError):
            faults.append(
                f"'{given['at']}' is not a time; showing now. Write it as 2026-10-23T10:10."
            )
    return ShiftQuery(job, at, tuple(faults))


def review_query(search: str | None) -> ReviewQuery:
    """First and last day of an address such as '?from=2026-10-19&to=2026-10-25'."""
    given, faults = _pairs(search, ("from", "to"))
    days: dict[str, date] = {}
    for name, text in given.items():
        try:
            days[name] = date.fromisoformat(text)
        except ValueError:
            faults.append(f"'{text}' is not a day; left out. Write it as 2026-10-19.")
    first, last = days.get("from"), days.get("to")
    if first and last and last < first:
        faults.append(f"The last day {last} is before the first day {first}; showing it reversed.")
        first, last = last, first
    return ReviewQuery(first, last, tuple(faults))


@dataclass(frozen=True)
class BinderQuery:
    """What the binder page's address asks for, by lot."""

    lot: str | None = None
    against: str | None = None
    faults: tuple[str, ...] = ()


def binder_query(search: str | None, lots: tuple[str, ...]) -> BinderQuery:
    """The lots of an address such as '/binder?lot=A-2641&against=B-4410'."""
    given, faults = _pairs(search, ("lot", "against"))
    for name, lot in list(given.items()):
        if lot not in lots:
            faults.append(f"No certificate of lot '{lot}' is recorded{_nearest(lot, lots)}.")
            del given[name]
    return BinderQuery(given.get("lot"), given.get("against"), tuple(faults))


def days_to_times(first: date, last: date, zone: ZoneInfo) -> tuple[datetime, datetime]:
    """Start of the first and end of the last day in the plant's time zone, in UTC."""
    start = datetime(first.year, first.month, first.day, tzinfo=zone)
    after = last + timedelta(days=1)
    end = datetime(after.year, after.month, after.day, tzinfo=zone)
    return start.astimezone(UTC), end.astimezone(UTC)


def _pairs(search: str | None, known: tuple[str, ...]) -> tuple[dict[str, str], list[str]]:
    asked = parse_qs((search or "").lstrip("?"), keep_blank_values=True)
    faults = [
        f"'{name}' is not something this page can be asked{_nearest(name, known)}; left out."
        for name in asked
        if name not in known
    ]
    return {name: values[-1] for name, values in asked.items() if name in known}, faults


def _nearest(name: str, known: tuple[str, ...]) -> str:
    near = difflib.get_close_matches(name, known, n=1, cutoff=0.5)
    return f" (did you mean '{near[0]}'?)" if near else ""
