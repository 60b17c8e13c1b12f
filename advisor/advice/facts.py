"""What is known of a plant: settings, records, weather and the latest readings, by time."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import UTC, datetime, timedelta
from functools import cached_property
from typing import TYPE_CHECKING

import numpy as np
from numpy.typing import NDArray

from advisor.records import Entry, Records
from advisor.settings.folder import PlantFolder
from advisor.settings.tables import load_table
from advisor.units import UnitSystem

if TYPE_CHECKING:
    import pandas as pd

Floats = NDArray[np.float64]


@dataclass(frozen=True)
class Weather:
    """Weather at one moment: air and dew point [C], wind [m/s] as the station has it, cloud [1]."""

    at: datetime
    age_s: float
    air_c: float
    wind_ms: float
    cloud_of_sky: float
    dew_point_c: float
    rain: bool


@dataclass(frozen=True)
class Series:
    """A signal by time; ``time_s`` [s since 1970, UTC] ascending, NaN where not believed."""

    time_s: Floats
    values: Floats

    def before(self, at: datetime, oldest_s: float) -> tuple[float, float] | None:
        """Latest value at or before ``at`` and its age [s]; None where older than ``oldest_s``."""
        known = np.isfinite(self.values)
        times, values = self.time_s[known], self.values[known]
        place = int(np.searchsorted(times, at.timestamp(), side="right")) - 1
        if place < 0:
            return None
        age = at.timestamp() - float(times[place])
        return (float(values[place]), age) if age <= oldest_s else None


@dataclass(frozen=True, eq=False)
class PlantFacts:
    """All that advice is made of.

    ``known_at`` limits records to what was recorded by then; None means everything. ``weather``
    and ``log`` are frames as the logs room returns them, the log with its marks; None where the
    plant has none. ``units`` are those of the sentences.
    """

    folder: PlantFolder
    records: Records
    weather: pd.DataFrame | None = None
    log: pd.DataFrame | None = None
    known_at: datetime | None = None
    units: UnitSystem = "si"

    def held(self, kind: str, subject: str, at: datetime) -> Entry | None:
        """The fact of ``kind`` about ``subject`` in force ``at``, as known."""
        return self.records.held(kind, subject, at, self.known_at)

    def all_held(
        self,
        kind: str,
        subject: str | None = None,
        start: datetime | None = None,
        end: datetime | None = None,
    ) -> tuple[Entry, ...]:
        """Facts of ``kind`` valid from ``start`` until before ``end``, as known."""
        return self.records.all_held(kind, subject, start, end, self.known_at)

    def run_at(self, at: datetime) -> Entry | None:
        """The job run that is on at ``at``, or None between runs."""
        runs = self.all_held("job_run", "plant", at - timedelta(days=2), at + timedelta(seconds=1))
        on = [run for run in runs if run.fact.until > at]
        return on[-1] if on else None

    def weather_at(self, at: datetime) -> Weather | None:
        """Weather at ``at``, the latest observation not older than config/defaults.yaml allows."""
        oldest = load_table("defaults").row("weather age")["most"]
        if self.weather is None or self.weather.empty:
            return None
        place = int(np.searchsorted(self._weather_s, at.timestamp(), side="right")) - 1
        if place < 0 or at.timestamp() - self._weather_s[place] > oldest:
            return None
        row = self.weather.iloc[place]
        air, wind, cloud, dew = (
            float(row[name]) for name in ("air_c", "wind_ms", "cloud_of_sky", "dew_point_c")
        )
        if not np.all(np.isfinite([air, wind, cloud, dew])):
            return None
        seen = datetime.fromtimestamp(float(self._weather_s[place]), UTC)
        age = (at - seen).total_seconds()
        return Weather(seen, age, air, wind, cloud, dew, bool(row["rain"]))

    def series(self, signal: str) -> Series | None:
        """The readings of ``signal``, those not believed left out; None where not logged."""
        if self.log is None or signal not in self.log.columns:
            return None
        values = self.log[signal].to_numpy(float)
        mark = self.log.get(f"{signal}_mark")
        if mark is not None:
            values = np.where((mark == "").to_numpy(), values, np.nan)
        return Series(self._log_s, values)

    def latest(self, signal: str, at: datetime) -> tuple[float, float] | None:
        """Latest believed reading of ``signal`` at ``at`` and its age [s]; None where stale."""
        found = self.series(signal)
        return (
            found.before(at, load_table("defaults").row("reading age")["most"]) if found else None
        )

    @cached_property
    def _weather_s(self) -> Floats:
        assert self.weather is not None  # noqa: S101 - asked for only where there is weather
        return _seconds(self.weather)

    @cached_property
    def _log_s(self) -> Floats:
        assert self.log is not None  # noqa: S101 - asked for only where there is a log
        return _seconds(self.log)


def _seconds(frame: pd.DataFrame) -> Floats:
    times: Floats = frame["time"].astype("datetime64[us, UTC]").astype("int64").to_numpy() / 1e6
    return times
