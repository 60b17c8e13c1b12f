"""A plant folder opened for advice: settings, records, weather and log in one."""

from __future__ import annotations

from datetime import UTC, datetime
from pathlib import Path

from advisor.advice.facts import PlantFacts
from advisor.records import open_records
from advisor.settings.folder import PlantFolder, read_plant
from advisor.settings.moments import utc_of


def open_plant(path: str | Path, latest_only: bool = False) -> PlantFacts:
    """All that is known of the plant at ``path``; ``latest_only`` skips judging its whole log.

    Raises FaultyInput with every fault of the folder. A plant without a log or weather file opens
    all the same, and so does one whose exports cannot be read: advice then says what it lacks.
    """
    from advisor.logs import read_forecast, read_kind, read_metar
    from advisor.logs.cleaning import mark_faults

    folder = read_plant(path)
    records = open_records(folder)
    weather, of_weather = read_kind(folder, "weather")
    log, of_log = read_kind(folder, "plant_log")
    metar, of_metar = read_metar(folder)
    forecast, of_forecast = read_forecast(folder)
    reports = (*of_log, *of_weather, *of_metar, *of_forecast)
    if len(log) and not latest_only:
        log = mark_faults(log)
    return PlantFacts(
        folder,
        records,
        weather if len(weather) else None,
        log if len(log) else None,
        metar=metar,
        forecast=forecast,
        unread=tuple(report.refused for report in reports if report.refused),
    )


def moment_now(folder: PlantFolder, written: str | None = None) -> datetime:
    """The moment advice is asked for: ``written`` in plant time, an invented plant's own, or now.

    Raises FaultyInput where ``written`` is not a time.
    """
    if written is not None:
        return utc_of(written, folder.zone)
    if folder.plant.shown_at:
        return utc_of(folder.plant.shown_at, folder.zone)
    return datetime.now(UTC)
