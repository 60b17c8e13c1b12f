"""A plant folder opened for advice: settings, records, weather and log in one."""

from __future__ import annotations

from datetime import UTC, datetime
from pathlib import Path

from advisor.advice.facts import PlantFacts
from advisor.errors import AdvisorError
from advisor.records import open_records
from advisor.settings.folder import PlantFolder, read_plant
from advisor.settings.moments import utc_of


def open_plant(
    path: str | Path, start: datetime | None = None, end: datetime | None = None
) -> PlantFacts:
    """All that is known of the plant at ``path``; its log from ``start`` to ``end``.

    Raises FaultyInput with every fault of the folder. A plant without a log or weather file opens
    all the same; advice then says what it lacks.
    """
    from advisor.logs import read_kind
    from advisor.logs.cleaning import mark_faults

    folder = read_plant(path)
    records = open_records(folder)
    frames = {}
    for kind in ("weather", "plant_log"):
        try:
            frame, _ = read_kind(folder, kind)  # type: ignore[arg-type]
        except AdvisorError:
            frame = None
        frames[kind] = frame if frame is not None and len(frame) else None
    log = frames["plant_log"]
    if log is not None:
        inside = (log["time"] >= start if start else True) & (log["time"] < end if end else True)
        log = mark_faults(log[inside].reset_index(drop=True) if start or end else log)
    return PlantFacts(folder, records, frames["weather"], log)


def moment_now(folder: PlantFolder, written: str | None = None) -> datetime:
    """The moment advice is asked for: ``written`` in plant time, an invented plant's own, or now.

    Raises FaultyInput where ``written`` is not a time.
    """
    if written:
        return utc_of(written, folder.zone)
    if folder.plant.invented and folder.plant.shown_at:
        return utc_of(folder.plant.shown_at, folder.zone)
    return datetime.now(UTC)
