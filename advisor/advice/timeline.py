"""The timeline: one row for every change of advice, mix by mix, as it was known at the time."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from datetime import UTC, datetime, timedelta
from typing import TYPE_CHECKING

from advisor.advice.advise import advise_all
from advisor.advice.facts import PlantFacts
from advisor.advice.result import Advice
from advisor.advice.situation import Situation, gather_situation
from advisor.errors import AdvisorError

if TYPE_CHECKING:
    import pandas as pd

# A timeline has many rows: fewer draws each. 128 give the 95 % quantile to about half a kelvin.
_DRAWS = 128
_AT_ONCE = 24
_CHANGING = ("certificate", "receipt", "dip", "moisture", "surface_reading", "job_run")


@dataclass(frozen=True, eq=False)
class TimelineRow:
    """Advice in force from ``start`` for one mix, and what changed then."""

    start: datetime
    advice: Advice
    change: str


def build_timeline(
    facts: PlantFacts,
    start: datetime,
    end: datetime,
    progress: Callable[[int, int], None] | None = None,
) -> list[TimelineRow]:
    """One row for every change of any input of a run from ``start`` to ``end``, oldest first.

    Runs are looked at as they were planned and recorded; each row knows no more than was known at
    its moment. ``progress`` is called with rows done and rows in all.
    """
    wanted = _moments(facts, start, end)
    rows: list[TimelineRow] = []
    for first in range(0, len(wanted), _AT_ONCE):
        part = wanted[first : first + _AT_ONCE]
        situations: list[Situation] = []
        kept: list[tuple[datetime, str]] = []
        for at, job, change in part:
            try:
                situations.append(gather_situation(facts, at, job))
            except AdvisorError:
                continue  # the run was not known yet: there was no advice
            kept.append((at, change))
        for (at, change), advice in zip(
            kept, advise_all(situations, _DRAWS, brief=True), strict=True
        ):
            rows.append(TimelineRow(at, advice, change))
        if progress:
            progress(min(first + _AT_ONCE, len(wanted)), len(wanted))
    return rows


def timeline_frame(rows: list[TimelineRow]) -> pd.DataFrame:
    """The timeline as a table: start, mix, job, tank, and low, target and high at each point [C].

    Where there was no advice the numbers are missing, and ``why_none`` says why.
    """
    import pandas as pd

    points = ("binder_tank", "discharge", "silo", "load_out", "delivery")
    table = []
    for row in rows:
        line: dict[str, object] = {
            "start": row.start,
            "mix": row.advice.mix,
            "job": row.advice.job,
            "tank": row.advice.tank,
            "change": row.change,
            "provisional": row.advice.provisional,
            "why_none": why_none(row.advice),
        }
        for point in points:
            setpoint = row.advice.setpoint(point)  # type: ignore[arg-type]
            for side in ("low", "target", "high"):
                line[f"{point}_{side}_c"] = (
                    getattr(setpoint, f"{side}_c") if setpoint else float("nan")
                )
        table.append(line)
    columns = ["start", "mix", "job", "tank", "change", "provisional", "why_none"]
    columns += [f"{point}_{side}_c" for point in points for side in ("low", "target", "high")]
    frame = pd.DataFrame(table, columns=columns)
    frame["start"] = pd.to_datetime(frame["start"], utc=True).astype("datetime64[us, UTC]")
    return frame.astype({"mix": "str", "job": "str", "tank": "str"})


def why_none(advice: Advice) -> str:
    """Why an advice has no numbers; empty where it has."""
    if advice.clash:
        return f"{advice.clash.lower.name} clashes with {advice.clash.upper.name}"
    return "; ".join(advice.missing)


def _moments(facts: PlantFacts, start: datetime, end: datetime) -> list[tuple[datetime, str, str]]:
    """Every moment, job and what changed, inside a run between ``start`` and ``end``."""
    changes = {at: _CHANGE_WORDS[kind] for at, kind in _changes(facts, start, end)}
    found: dict[tuple[datetime, str], str] = {}
    for run in facts.all_held("job_run", "plant", start - timedelta(days=2), end):
        first, last = max(run.valid_from, start), min(run.fact.until, end)
        if first >= last:
            continue
        found[(first, run.fact.job)] = "job starts"
        hour = first.replace(minute=0, second=0, microsecond=0) + timedelta(hours=1)
        while hour < last:
            found.setdefault((hour, run.fact.job), "weather")
            hour += timedelta(hours=1)
        for at, words in changes.items():
            if first < at < last:
                found[(at, run.fact.job)] = words
    return sorted((at, job, words) for (at, job), words in found.items())


_CHANGE_WORDS = {
    "certificate": "certificate recorded",
    "receipt": "binder received",
    "dip": "tank dipped",
    "moisture": "moisture measured",
    "surface_reading": "base measured",
    "job_run": "order sheet changed",
}


def _changes(facts: PlantFacts, start: datetime, end: datetime) -> list[tuple[datetime, str]]:
    return [
        (at.astimezone(UTC), kind)
        for kind in _CHANGING
        for at, _ in facts.records.changes(kind, start, end)
    ]
