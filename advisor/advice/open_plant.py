"""A plant folder opened for advice: settings, records, weather and log in one."""

from __future__ import annotations

from collections.abc import Callable
from datetime import UTC, datetime
from pathlib import Path
from typing import TYPE_CHECKING

from advisor.advice.facts import PlantFacts
from advisor.errors import AdvisorError
from advisor.records import open_records
from advisor.settings.folder import PlantFolder, read_plant
from advisor.settings.moments import utc_of

if TYPE_CHECKING:
    import pandas as pd

    from advisor.logs.signals import SourceKind


def open_plant(path: str | Path, latest_only: bool = False) -> PlantFacts:
    """All that is known of the plant at ``path``; ``latest_only`` skips judging its whole log.

    Raises FaultyInput with every fault of the folder. A plant without a log or weather file opens
    all the same; advice then says what it lacks.
    """
    from advisor.logs import read_forecast, read_kind, read_metar
    from advisor.logs.cleaning import mark_faults

    folder = read_plant(path)
    records = open_records(folder)
    weather, log = (_frame(read_kind, folder, kind) for kind in ("weather", "plant_log"))
    if log is not None and not latest_only:
        log = mark_faults(log)
    metar, _ = read_metar(folder)
    forecast, _ = read_forecast(folder)
    return PlantFacts(folder, records, weather, log, metar=metar, forecast=forecast)


def _frame(
    read_kind: Callable[[PlantFolder, SourceKind], tuple[pd.DataFrame, object]],
    folder: PlantFolder,
    kind: SourceKind,
) -> pd.DataFrame | None:
    try:
        frame, _ = read_kind(folder, kind)
    except AdvisorError:
        return None
    return frame if len(frame) else None


def moment_now(folder: PlantFolder, written: str | None = None) -> datetime:
    """The moment advice is asked for: ``written`` in plant time, an invented plant's own, or now.

    Raises FaultyInput where ``written`` is not a time.
    """
    if written:
        return utc_of(written, folder.zone)
    if folder.plant.shown_at:
        return utc_of(folder.plant.shown_at, folder.zone)
    return datetime.now(UTC)
