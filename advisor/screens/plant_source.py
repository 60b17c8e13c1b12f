"""A plant folder as the pages see it: opened once, opened anew when its files change."""

from __future__ import annotations

import threading
import time
from collections.abc import Callable, Hashable, Sequence
from dataclasses import dataclass, replace
from datetime import datetime, timedelta
from pathlib import Path
from typing import TypeVar, cast
from zoneinfo import ZoneInfo

import numpy as np
import pandas as pd

from advisor.advice.advise import advise, advise_all, sensor_sd_k
from advisor.advice.facts import PlantFacts
from advisor.advice.open_plant import moment_now, open_plant
from advisor.advice.result import Advice, Point
from advisor.advice.situation import Situation, gather_situation
from advisor.advice.timeline import why_none
from advisor.errors import AdvisorError
from advisor.figures.drawn import Reading, TicketPoint, Trace, WindowSpan
from advisor.logs import PlantLog, read_logs
from advisor.records.opening import STORE
from advisor.review.plant import PlantReview, log_span, review_plant
from advisor.review.result import Excursion, Review
from advisor.screens.log_rows import last_before, loads_of_job, value_in, windows_in
from advisor.screens.source import JobChoice, LaterHour
from advisor.settings.certificate import Certificate
from advisor.settings.folder import PlantFolder
from advisor.settings.shifts import shift_at, shift_end
from advisor.units import UnitSystem, shown

T = TypeVar("T")

_LOOK_EVERY_S = 5.0  # how often the folder is asked whether a file has changed
_KEPT = 64  # answers kept
# The shift page needs the last hours judged; with some more before, so that a stretch which began
# earlier is seen from its start.
_RECENT = timedelta(hours=8)
_LATER_HOURS = 6
_STILL_OPEN = timedelta(minutes=5)


@dataclass(frozen=True, eq=False)
class _Opened:
    """A plant folder as it was read; ``log`` is None where there is none."""

    facts: PlantFacts
    log: PlantLog | None


class PlantSource:
    """The plant in a folder, for the pages. Safe to ask from several threads.

    Raises FaultyInput with every fault of the folder.
    """

    def __init__(self, path: str | Path) -> None:
        self._path = Path(path)
        self._lock = threading.RLock()
        self._answers: dict[Hashable, object] = {}
        self._busy: dict[Hashable, threading.Lock] = {}
        self._state = _state_of(self._path)
        self._looked = time.monotonic()
        self._opened = _open(self._path)

    @property
    def plant_name(self) -> str:
        """Name of the plant."""
        return self._folder.plant.name

    @property
    def invented(self) -> bool:
        """Whether the plant and its data are made up."""
        return self._folder.plant.invented

    @property
    def zone(self) -> ZoneInfo:
        """Time zone of the plant."""
        return self._folder.zone

    def now(self) -> datetime:
        """The clock, to the minute; the moment an invented plant is shown at."""
        return moment_now(self._folder).replace(second=0, microsecond=0)

    def shift_name(self, at: datetime) -> str:
        """Name of the shift at ``at``; empty where none is set."""
        shift = shift_at(self._folder.plant.shifts, at.astimezone(self.zone))
        return f"{shift.name} shift" if shift else ""

    def jobs(self) -> Sequence[JobChoice]:
        """The jobs that can be chosen."""
        return [JobChoice(one.code, one.name, one.mix) for one in self._folder.jobs]

    def current_advice(
        self, job: str | None, at: datetime | None, units: UnitSystem = "si"
    ) -> Advice:
        """The advice for ``job``, or for the job that runs, at ``at`` or now, told in ``units``."""
        moment = at or self.now()
        facts = replace(self._facts, units=units)
        return self._kept(
            ("advice", job, moment, units), lambda: advise(gather_situation(facts, moment, job))
        )

    def rest_of_shift(
        self, job: str | None, at: datetime, units: UnitSystem = "si"
    ) -> Sequence[LaterHour]:
        """The coming hours of the shift for the same job, told in ``units``."""
        return self._kept(("later", job, at, units), lambda: self._later(job, at, units))

    def readings(self, at: datetime) -> Sequence[Reading]:
        """The latest reading at each point of the heat path at ``at``."""
        log = self._log
        if log is None:
            return []
        facts = self._facts
        run = facts.run_at(at)
        row = last_before(log.frame, "time", at)
        found: list[Reading] = []
        if row is not None:
            signals: dict[Point, str | None] = {
                "binder_tank": facts.folder.tank(run.fact.tank).temperature_signal if run else None,
                "hot_aggregate": "hot_aggregate_c",
                "discharge": "discharge_c",
                "silo": facts.folder.silo(run.fact.silo).temperature_signal
                if run and run.fact.silo
                else None,
            }
            found += [
                self._reading(point, signal, row, "time")
                for point, signal in signals.items()
                if signal in row.index
            ]
        loads = loads_of_job(log, run.fact.job if run else None)
        for point, signal, moment in (
            ("load_out", "load_out_c", "time"),
            ("delivery", "delivery_c", "arrived"),
        ):
            last = last_before(loads, moment, at)
            if last is not None and signal in last.index:
                found.append(self._reading(cast(Point, point), signal, last, moment))
        return found

    def last_reading_at(self, at: datetime) -> datetime | None:
        """When the newest reading known at ``at`` was taken; None where there is none."""
        row = last_before(self._log.frame, "time", at) if self._log else None
        return None if row is None else row["time"].to_pydatetime()

    def discharge(self, start: datetime, end: datetime) -> Trace:
        """Discharge temperatures from ``start`` to ``end``, NaN where not trusted."""
        if self._log is None:
            return Trace(np.empty(0, "datetime64[us]"), np.empty(0))
        frame = self._log.between(start, end).frame
        values = frame["discharge_c"].to_numpy(float)
        mark = frame.get("discharge_c_mark", pd.Series("", index=frame.index))
        believed = (mark == "").to_numpy()
        # Without mix on the conveyor the thermometer looks at the conveyor.
        making = frame["rate_kgs"].to_numpy(float) > 0.0
        times = frame["time"].dt.tz_localize(None).to_numpy()
        return Trace(times, np.where(believed & making, values, np.nan))

    def windows_in_force(self, start: datetime, end: datetime) -> Sequence[WindowSpan]:
        """The discharge windows that were in force from ``start`` to ``end``."""
        judged = self._judged(start, end)
        return [] if judged is None else windows_in(judged.rows, start, end)

    def excursions_open(self, at: datetime, units: UnitSystem = "si") -> Sequence[Excursion]:
        """The excursions still running, or just ended, as known at ``at``, told in ``units``."""
        # Judged up to ``at`` alone: a longer review knows what came after.
        try:
            every = self._reviewed(at - _RECENT, at, units).review.excursions
        except AdvisorError:
            return []
        return [one for one in every if one.point == "discharge" and one.end >= at - _STILL_OPEN]

    def data_span(self) -> tuple[datetime, datetime]:
        """First and last moment of the plant's log."""
        return log_span(self._facts)

    def review(self, start: datetime, end: datetime, units: UnitSystem = "si") -> Review:
        """The period against the advice then in force, told in ``units``; quick asked again."""
        return self._reviewed(start, end, units).review

    def certificates(self, at: datetime) -> Sequence[Certificate]:
        """The binder certificates recorded by ``at``, the newest first."""
        held = _as_known(self._facts, at).all_held("certificate", end=at)
        return [entry.fact for entry in reversed(held)]

    def ask(self, question: Hashable, at: datetime, work: Callable[[PlantFacts], T]) -> T:
        """What ``work`` answers of the plant as it was known ``at``; quick when asked again."""
        return self._kept(("ask", question, at), lambda: work(_as_known(self._facts, at)))

    def situation(self, job: str | None, units: UnitSystem = "si") -> Situation:
        """What is known now for ``job``, or for the job that runs."""
        moment = self.now()
        facts = replace(self._facts, units=units)
        return self._kept(
            ("situation", job, moment, units), lambda: gather_situation(facts, moment, job)
        )

    def tickets(self, start: datetime, end: datetime) -> Sequence[TicketPoint]:
        """The truck loads from ``start`` to ``end``."""
        if self._log is None:
            return []
        return [
            TicketPoint(
                ticket=str(row["ticket"]),
                time=row["time"].to_pydatetime(),
                mix=str(row["mix_id"]),
                truck=str(row.get("truck", "")),
                mass_kg=float(row["mass_kg"]),
                load_out_c=value_in(row, "load_out_c"),
            )
            for _, row in self._log.between(start, end).tickets.iterrows()
        ]

    @property
    def _facts(self) -> PlantFacts:
        return self._current().facts

    @property
    def _log(self) -> PlantLog | None:
        return self._current().log

    @property
    def _folder(self) -> PlantFolder:
        return self._current().facts.folder

    def _current(self) -> _Opened:
        """The folder as it is now; where it has become faulty, as it was when it was sound."""
        with self._lock:
            if time.monotonic() - self._looked < _LOOK_EVERY_S:
                return self._opened
            state = _state_of(self._path)
            if state != self._state:
                try:
                    opened = _open(self._path)
                except AdvisorError:
                    pass
                else:
                    # The old records stay open: another thread may still be asking them.
                    self._opened = opened
                    self._answers.clear()
                self._state = state
            self._looked = time.monotonic()
            return self._opened

    def _kept(self, key: Hashable, work: Callable[[], T]) -> T:
        """The answer to ``key``, worked out by one thread and kept until the folder changes."""
        with self._lock:
            turn = self._busy.setdefault(key, threading.Lock())
        with turn:
            with self._lock:
                if key in self._answers:
                    return cast(T, self._answers[key])
                opened = self._opened
            answer = work()
            with self._lock:
                if opened is self._opened:
                    self._answers[key] = answer
                while len(self._answers) > _KEPT:
                    old = next(iter(self._answers))
                    self._answers.pop(old)
                    self._busy.pop(old, None)
            return answer

    def _reviewed(self, start: datetime, end: datetime, units: UnitSystem = "si") -> PlantReview:
        opened = self._current()
        facts = replace(opened.facts, units=units)
        return self._kept(
            ("review", start, end, units),
            lambda: review_plant(facts, start, end, log=opened.log),
        )

    def _judged(self, start: datetime, end: datetime) -> PlantReview | None:
        """A review that covers the period, one at hand before a new one; None without a log."""
        with self._lock:
            for key, answer in self._answers.items():
                of_review = isinstance(key, tuple) and key[0] == "review"
                if of_review and key[1] <= start and end <= key[2]:  # type: ignore[index]
                    return cast(PlantReview, answer)
        try:
            return self._reviewed(min(start, end - _RECENT), end)
        except AdvisorError:
            return None

    def _reading(self, point: Point, signal: str | None, row: pd.Series, moment: str) -> Reading:
        name = str(signal)
        value = value_in(row, name)
        sensor = self._folder.plant.sensors.get(name)
        return Reading(
            point=point,
            value_c=value,
            sd_k=sensor_sd_k(sensor, value) if sensor and value is not None else 0.0,
            taken_at=row[moment].to_pydatetime(),
            doubt=str(row.get(f"{name}_mark", "") or ""),
        )

    def _later(self, job: str | None, at: datetime, units: UnitSystem) -> list[LaterHour]:
        folder = self._folder
        ends = shift_end(folder.plant.shifts, at.astimezone(self.zone))
        last = min(ends or at + timedelta(hours=_LATER_HOURS), at + timedelta(hours=12))
        hour = at.replace(minute=0, second=0, microsecond=0) + timedelta(hours=1)
        # What is read or recorded later is not known yet.
        facts = replace(_as_known(self._facts, at), units=units)
        situations: list[Situation] = []
        found: list[LaterHour] = []
        running = job or _running(facts, at)
        while hour < last:
            try:
                one = gather_situation(facts, hour, job)
            except AdvisorError:
                found.append(LaterHour(hour, "no job planned", None))
                running = None
            else:
                situations.append(one)
                found.append(LaterHour(hour, _change_words(one, running), None))
                running = one.job.code
            hour += timedelta(hours=1)
        answers = iter(advise_all(situations, brief=True))
        return [
            one if one.change == "no job planned" else _with_target(one, next(answers))
            for one in found
        ]


def _open(path: Path) -> _Opened:
    facts = open_plant(path, latest_only=True)
    try:
        log = read_logs(facts.folder)
    except AdvisorError:
        return _Opened(replace(facts, log=None), None)
    return _Opened(replace(facts, log=log.frame), log)


def _state_of(path: Path) -> tuple[tuple[str, int, int], ...]:
    """Names, times and sizes of the files of a plant folder; another state means a change."""
    found = []
    for file in sorted(path.rglob("*")):
        # The store's own side files come and go with reading.
        if file.is_file() and not file.name.startswith(f"{STORE}-"):
            stat = file.stat()
            found.append((str(file), stat.st_mtime_ns, stat.st_size))
    return tuple(found)


def _as_known(facts: PlantFacts, at: datetime) -> PlantFacts:
    log = facts.log
    if log is not None:
        log = log[(log["time"] <= pd.Timestamp(at)).to_numpy()]
    return replace(facts, log=log, known_at=at)


def _running(facts: PlantFacts, at: datetime) -> str | None:
    run = facts.run_at(at)
    return run.fact.job if run else None


def _change_words(situation: Situation, before: str | None) -> str:
    """What one coming hour brings: another job, or its weather."""
    if situation.job.code != before:
        return f"{situation.job.name} ({situation.mix.code})"
    weather = situation.weather
    if weather is None:
        return "weather not known"
    rain = ", rain" if weather.rain else ""
    units = situation.facts.units
    air = shown(weather.air_c, "temperature", units)
    return f"air {air}, wind {shown(weather.wind_ms, 'speed', units, 0)}{rain}"


def _with_target(hour: LaterHour, advice: Advice) -> LaterHour:
    discharge = advice.setpoint("discharge")
    if discharge is None:
        reason = "no safe window" if advice.clash else why_none(advice)
        return replace(hour, change=f"{hour.change}: {reason}" if reason else hour.change)
    return replace(hour, target_c=discharge.target_c)
