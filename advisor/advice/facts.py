"""What is known of a plant: settings, records, weather and the latest readings, by time."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import datetime, timedelta
from functools import cached_property
from typing import TYPE_CHECKING

import numpy as np
from numpy.typing import NDArray

from advisor.errors import Fault
from advisor.records import Entry, Records
from advisor.settings.folder import PlantFolder
from advisor.settings.tables import load_table
from advisor.units import UnitSystem

if TYPE_CHECKING:
    import pandas as pd

Floats = NDArray[np.float64]


@dataclass(frozen=True)
class Weather:
    """Weather at one moment: air and dew point [C], wind [m/s], cloud [1], and who tells it.

    The wind is as it was taken, ``wind_height_m`` above the ground in country called ``terrain``;
    None is that of the plant's own station. ``foretold`` weather has not been seen.
    """

    at: datetime
    age_s: float
    air_c: float
    wind_ms: float
    cloud_of_sky: float
    dew_point_c: float
    rain: bool
    origin: str = "weather file"
    wind_height_m: float = 10.0
    terrain: str | None = None
    foretold: bool = False


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

    ``known_at`` limits records and weather to what was known by then; None means everything.
    ``weather``, ``metar``, ``forecast`` and ``log`` are frames as the logs room returns them, the
    log with its marks; None where the plant has none. ``unread`` are the exports that could not be
    read and why. ``units`` are those of the sentences.
    """

    folder: PlantFolder
    records: Records
    weather: pd.DataFrame | None = None
    log: pd.DataFrame | None = None
    known_at: datetime | None = None
    units: UnitSystem = "si"
    metar: pd.DataFrame | None = None
    forecast: pd.DataFrame | None = None
    unread: tuple[Fault, ...] = ()

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
    def _log_s(self) -> Floats:
        assert self.log is not None  # noqa: S101 - asked for only where there is a log
        return seconds_of(self.log)


def seconds_of(frame: pd.DataFrame) -> Floats:
    """Times of the rows of ``frame`` [s since 1970, UTC]."""
    times: Floats = frame["time"].astype("datetime64[us, UTC]").astype("int64").to_numpy() / 1e6
    return times
