"""Moments written by people: local clock time in, UTC out, the hour of a clock change refused."""

from __future__ import annotations

import datetime as dt
from zoneinfo import ZoneInfo

from advisor.errors import FaultyInput

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


def local_text(moment: dt.datetime, zone: ZoneInfo) -> str:
    """``moment`` as plant time, with the offset so that no hour is read twice."""
    return moment.astimezone(zone).isoformat(sep=" ", timespec="minutes")
