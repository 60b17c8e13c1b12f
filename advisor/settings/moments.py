"""Moments written by people: local clock time in, UTC out, the hour of a clock change refused."""

from __future__ import annotations

import datetime as dt
import re
from zoneinfo import ZoneInfo

from advisor.errors import FaultyInput

_CLOCK = re.compile(r"\d\d:\d\d")
_EXAMPLE = "Write it as 2026-10-19 06:10 (plant time) or 2026-10-19T06:10+01:00."


def utc_of(text: str, zone: ZoneInfo) -> dt.datetime:
    """The moment, in UTC, of ``text`` such as '2026-10-19 06:10' in ``zone``.

    A text with an offset or Z is taken by it. Raises FaultyInput where the text is no moment,
    where the clock skipped it, and where the clock passed it twice and no offset says which.
    """
    try:
        moment = dt.datetime.fromisoformat(text)
    except ValueError:
        raise FaultyInput.of("moment", f"'{text}' is not a moment.", _EXAMPLE, value=text) from None
    if moment.tzinfo is not None:
        return moment.astimezone(dt.UTC)
    earlier = moment.replace(tzinfo=zone, fold=0).astimezone(dt.UTC)
    later = moment.replace(tzinfo=zone, fold=1).astimezone(dt.UTC)
    if earlier != later:
        offset = moment.replace(tzinfo=zone).isoformat(timespec="minutes")
        problem, remedy = (
            (
                f"'{text}' happened twice: the clock was set back.",
                f"Write the offset, for example {offset}.",
            )
            if earlier < later
            else (f"'{text}' never happened: the clock was set forward.", _EXAMPLE)
        )
        raise FaultyInput.of("moment", problem, remedy, value=text)
    return earlier


def next_moment(text: str, zone: ZoneInfo, after: dt.datetime) -> dt.datetime:
    """The moment, in UTC, of ``text`` in ``zone``; a bare time of day is the next one ``after``.

    Raises FaultyInput as ``utc_of`` does.
    """
    clock = text.strip().zfill(5)
    if not _CLOCK.fullmatch(clock):
        return utc_of(text.strip(), zone)
    today = after.astimezone(zone).date()
    moment = utc_of(f"{today} {clock}", zone)
    return moment if moment > after else utc_of(f"{today + dt.timedelta(days=1)} {clock}", zone)


def local_text(moment: dt.datetime, zone: ZoneInfo) -> str:
    """``moment`` as plant time, with the offset so that no hour is read twice."""
    return moment.astimezone(zone).isoformat(sep=" ", timespec="minutes")
