"""Weather at one moment: everybody who tells it, and whose word is taken."""

from __future__ import annotations

from collections.abc import Iterator
from datetime import UTC, datetime, timedelta
from typing import TYPE_CHECKING

import numpy as np

from advisor.advice.facts import PlantFacts, Weather, seconds_of
from advisor.errors import MissingInput
from advisor.settings.tables import load_table

if TYPE_CHECKING:
    import pandas as pd

_NUMBERS = ("air_c", "wind_ms", "cloud_of_sky", "dew_point_c")
# Between two hours of a forecast weather is a straight line; over a longer gap it is not told.
_WIDEST_GAP_S = 3 * 3600.0


def weather_told(facts: PlantFacts, at: datetime, job: str) -> tuple[Weather, ...]:
    """The weather at ``at`` from everybody who tells it; the first is the one to take.

    What was seen at the site of ``job`` comes first, then the newest of what was seen at the plant,
    by its station and by the airport, then what was foretold: by hand, then by the newest forecast
    issued. Nothing observed after ``facts.known_at`` is used, however old the forecast.
    """
    known = facts.known_at or at
    seen = sorted(
        [*_by_hand(facts, "plant", at), *_station(facts, at, known), *_airport(facts, at, known)],
        key=lambda one: one.age_s,
    )
    told = [*_by_hand(facts, job, at), *seen, *_forecast(facts, at, known)]
    observed = [one for one in told if not one.foretold]
    return (*observed, *(one for one in told if one.foretold))


def _by_hand(facts: PlantFacts, subject: str, at: datetime) -> Iterator[Weather]:
    entry = facts.held("weather", subject, at)
    if entry is None:
        return
    age = (at - entry.valid_from).total_seconds()
    if age > _oldest_s():
        return
    fact = entry.fact
    air = float(fact.air)
    dew = float(fact.dew_point) if fact.dew_point is not None else _dew_c(air, fact.humidity)
    foretold = facts.known_at is not None and entry.valid_from > facts.known_at
    site = facts.folder.job(subject).terrain if subject != "plant" else None
    yield Weather(
        entry.valid_from, age, air, float(fact.wind), float(fact.cloud), dew, fact.rain,
        origin=f"{'foretold' if foretold else 'seen'} by {entry.who}",
        wind_height_m=float(fact.wind_height), terrain=site, foretold=foretold,
    )  # fmt: skip


def _station(facts: PlantFacts, at: datetime, known: datetime) -> Iterator[Weather]:
    yield from _observed(facts.weather, at, known, "weather file", None)


def _airport(facts: PlantFacts, at: datetime, known: datetime) -> Iterator[Weather]:
    source = facts.folder.signals.metar
    if source is not None:
        name = f"airport report {source.station}"
        yield from _observed(facts.metar, at, known, name, source.terrain)


def _observed(
    frame: pd.DataFrame | None, at: datetime, known: datetime, origin: str, terrain: str | None
) -> Iterator[Weather]:
    """The latest observation of ``frame`` by ``at``, known and not too old."""
    if frame is None or frame.empty:
        return
    times = seconds_of(frame)
    latest = min(at, known).timestamp()
    place = int(np.searchsorted(times, latest, side="right")) - 1
    if place < 0 or at.timestamp() - times[place] > _oldest_s():
        return
    row = frame.iloc[place]
    numbers = [float(row[name]) if name in frame else np.nan for name in _NUMBERS]
    if not np.all(np.isfinite(numbers)):
        return
    when = datetime.fromtimestamp(float(times[place]), UTC)
    age = (at - when).total_seconds()
    air, wind, cloud, dew = numbers
    rain = _true(row.get("rain"))
    yield Weather(when, age, air, wind, cloud, dew, rain, origin=origin, terrain=terrain)


def _forecast(facts: PlantFacts, at: datetime, known: datetime) -> Iterator[Weather]:
    """The newest forecast issued by ``known`` that tells the hour of ``at``."""
    frame = facts.forecast
    if frame is None or frame.empty:
        return
    oldest = timedelta(seconds=load_table("defaults").row("forecast age")["most"])
    issued = frame["issued"]
    of_time = frame[((issued <= known) & (issued >= at - oldest)).to_numpy()]
    for moment in sorted(set(of_time["issued"]), reverse=True):
        issue = of_time[(of_time["issued"] == moment).to_numpy()]
        times = seconds_of(issue)
        after = int(np.searchsorted(times, at.timestamp(), side="left"))
        if after == len(times):
            continue
        before = after if times[after] == at.timestamp() else after - 1
        if before < 0 or times[after] - times[before] > _WIDEST_GAP_S:
            continue
        pair = times[[before, after]]
        numbers = [
            float(np.interp(at.timestamp(), pair, issue[name].to_numpy(float)[[before, after]]))
            for name in _NUMBERS
        ]
        if not np.all(np.isfinite(numbers)):
            continue
        local = moment.to_pydatetime().astimezone(facts.folder.zone)
        told = "issued" if bool(issue["issue_told"].iloc[0]) else "of unknown issue, from"
        air, wind, cloud, dew = numbers
        yield Weather(
            at, 0.0, air, wind, cloud, dew, _true(issue.iloc[before].get("rain")),
            origin=f"forecast {told} {local:%a %H:%M}", foretold=True,
        )  # fmt: skip
        return


def _true(value: object) -> bool:
    """Whether ``value`` of a yes-or-no column is yes; a cell not filled is no."""
    return value is True or (isinstance(value, np.bool_) and bool(value))


def _oldest_s() -> float:
    return float(load_table("defaults").row("weather age")["most"])


def _dew_c(air_c: float, humidity: float) -> float:
    """Dew point [C] from relative humidity [1]: Magnus, 17.62 and 243.12 C (WMO-No. 8, memory)."""
    power = float(np.log(humidity)) + 17.62 * air_c / (243.12 + air_c)
    return 243.12 * power / (17.62 - power)


def mean_air_c(facts: PlantFacts, start: datetime, end: datetime) -> float:
    """Mean air temperature [C] at the plant from ``start`` to ``end``, hour by hour.

    Raises MissingInput where an hour is told by nobody.
    """
    hours = max(int((end - start).total_seconds() // 3600), 1)
    airs = []
    for hour in range(hours + 1):
        at = min(start + timedelta(hours=hour), end)
        told = weather_told(facts, at, "")
        if not told:
            local = at.astimezone(facts.folder.zone)
            raise MissingInput.of(
                "no-air",
                f"No forecast tells the air temperature of {local:%a %d %b %H:%M}.",
                "Bring a forecast file that reaches that far, or give the mean air temperature.",
                field="air",
            )
        airs.append(told[0].air_c)
    return float(np.mean(airs))
