"""The coming hours: what to run for loads that leave at each, and the last good one."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from datetime import datetime, timedelta

from advisor.advice.advise import advise_all
from advisor.advice.facts import PlantFacts
from advisor.advice.result import Advice, Caution
from advisor.advice.situation import Situation, gather_situation
from advisor.advice.timeline import why_none
from advisor.errors import FaultyInput
from advisor.settings.cautions import caution_text

_HOUR = timedelta(hours=1)
_FINE = timedelta(minutes=10)
_DRAWS = 256
_LONGEST_H = 36


@dataclass(frozen=True)
class HourAhead:
    """Loads that leave at ``load_out_at`` and are laid at ``laid_at``: what to run, or why not.

    Temperatures in C at discharge; ``window_k`` is how far low and high are apart there, below 0
    where limits clash; None where something is not known.
    """

    load_out_at: datetime
    laid_at: datetime
    weather: str
    weather_from: str
    low_c: float | None
    target_c: float | None
    high_c: float | None
    low_set_by: str
    high_set_by: str
    window_k: float | None
    rolling_low_min: float | None
    rolling_high_min: float | None
    why_none: str


@dataclass(frozen=True)
class DayAhead:
    """The coming hours of one job.

    ``last_good_at`` is the last load-out, to ten minutes, with a window before there is none;
    None where it stays open as far as is known, or is shut already, which ``last_words`` tells.
    ``opens_at`` is the first load-out with a window where there is none now.
    """

    job: str
    job_name: str
    mix: str
    at: datetime
    hours: tuple[HourAhead, ...]
    last_good_at: datetime | None
    opens_at: datetime | None
    last_words: str
    rolling_wanted_min: float
    cautions: tuple[Caution, ...]


def day_ahead(facts: PlantFacts, at: datetime, job: str | None = None, hours: int = 12) -> DayAhead:
    """What to run for loads of ``job`` that leave at each of the coming ``hours``.

    The weather of a load is that of the time it is laid. Nothing is used that is not known at
    ``at``: coming weather is that of the forecast. Raises FaultyInput for hours outside 1 to 36,
    MissingInput where no job runs and none is named.
    """
    if not 1 <= hours <= _LONGEST_H:
        raise FaultyInput.of(
            "hours", "The hours looked ahead lie between 1 and 36.", field="hours", value=str(hours)
        )
    now = replace(facts, known_at=facts.known_at or at)
    first = gather_situation(now, at, job)
    road = timedelta(seconds=float(first.job.on_road_s))
    whole = at.replace(minute=0, second=0, microsecond=0) + _HOUR
    times = [at, *(whole + hour * _HOUR for hour in range(hours))]
    rows = _rows(now, first, times, road)
    last_good, words = None, _state(rows)
    turn = _turn(rows, good=True)
    if turn is not None:
        between = _between(rows[turn], rows[turn + 1])
        fine = _rows(now, first, between, road)
        good = [one.load_out_at for one in (rows[turn], *fine) if _open(one)]
        last_good = max(good)
        words = "Later loads are laid outside any window: " + rows[turn + 1].why_none
    opens = None
    if not _open(rows[0]):
        turn = _turn(rows, good=False)
        if turn is not None:
            fine = _rows(now, first, _between(rows[turn], rows[turn + 1]), road)
            opens = min(one.load_out_at for one in (*fine, rows[turn + 1]) if _open(one))
    return DayAhead(
        job=first.job.code,
        job_name=first.job.name,
        mix=first.mix.code,
        at=at,
        hours=tuple(rows),
        last_good_at=last_good,
        opens_at=opens,
        last_words=words,
        rolling_wanted_min=float(first.job.rolling_wanted) / 60.0,
        cautions=(Caution("C1", caution_text("C1")), Caution("C12", caution_text("C12"))),
    )


def _rows(
    facts: PlantFacts, first: Situation, times: Sequence[datetime], road: timedelta
) -> list[HourAhead]:
    situations = [
        gather_situation(facts, at + road, first.job.code, first.tank.name) for at in times
    ]
    # Silo, rate and binder are those of now: only the weather and the sun move on.
    kept = [
        replace(
            one, silo=first.silo, silo_kg=first.silo_kg, hold_s=first.hold_s,
            rate_kgs=first.rate_kgs, binder=first.binder,
            base_reading_c=one.base_reading_c, base_condition=first.base_condition,
        )
        for one in situations
    ]  # fmt: skip
    answers = advise_all(kept, _DRAWS)
    return [
        _row(at, road, one, advice) for at, one, advice in zip(times, kept, answers, strict=True)
    ]


def _row(at: datetime, road: timedelta, situation: Situation, advice: Advice) -> HourAhead:
    discharge = advice.setpoint("discharge")
    told = next((one for one in situation.inputs if one.name == "weather"), None)
    window = None
    if discharge is not None:
        window = discharge.high_c - discharge.low_c
    elif advice.clash is not None:
        window = -advice.clash.gap_k
    clash, rolling = advice.clash, advice.rolling
    return HourAhead(
        load_out_at=at,
        laid_at=at + road,
        weather=told.shown if told else "not known",
        weather_from=told.origin if told else "",
        low_c=discharge.low_c if discharge else clash.at_least_c if clash else None,
        target_c=discharge.target_c if discharge else None,
        high_c=discharge.high_c if discharge else clash.at_most_c if clash else None,
        low_set_by=(discharge.low_set_by.name if discharge else clash.lower.name if clash else ""),
        high_set_by=(
            discharge.high_set_by.name if discharge else clash.upper.name if clash else ""
        ),
        window_k=window,
        rolling_low_min=rolling.low_min if rolling else None,
        rolling_high_min=rolling.high_min if rolling else None,
        why_none=why_none(advice),
    )


def _open(row: HourAhead) -> bool:
    return row.target_c is not None


def _turn(rows: Sequence[HourAhead], good: bool) -> int | None:
    """Place of the last row that is open (or shut) before the first that is known not to be."""
    for place in range(len(rows) - 1):
        here, then = rows[place], rows[place + 1]
        if then.window_k is None:
            return None
        if _open(here) == good and _open(then) != good:
            return place
    return None


def _between(first: HourAhead, then: HourAhead) -> list[datetime]:
    times, at = [], first.load_out_at + _FINE
    while at < then.load_out_at:
        times.append(at)
        at += _FINE
    return times


def _state(rows: Sequence[HourAhead]) -> str:
    known = [row for row in rows if row.window_k is not None]
    if not known:
        return rows[0].why_none
    if all(_open(row) for row in known):
        if len(known) < len(rows):
            return "The window stays open as far as the weather is known."
        return "The window stays open through all these hours."
    return known[0].why_none if not _open(known[0]) else ""
