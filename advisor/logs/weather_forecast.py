"""Hourly forecast files: every issue kept, so that the past is worked out as it was foretold."""

from __future__ import annotations

import pandas as pd

from advisor.errors import AdvisorError
from advisor.logs.clock import zone_named
from advisor.logs.intake import read_export
from advisor.logs.plant_log import files_of
from advisor.logs.report import IntakeReport, refused_report
from advisor.settings.folder import PlantFolder
from advisor.settings.moments import utc_of
from advisor.settings.signals import LogSource

KIND = "forecast"


def read_forecast(folder: PlantFolder) -> tuple[pd.DataFrame, tuple[IntakeReport, ...]]:
    """All forecasts of a plant folder, a row for each hour of each issue; a report of each file.

    One file is one issue. ``issued`` is when it was made: the first time told in its column of
    that name or, where there is none, its first hour, which its report then says. ``issue_told``
    says which of the two. Sorted by issue and time.
    """
    frames: list[pd.DataFrame] = []
    reports: list[IntakeReport] = []
    for source in folder.signals.of_kind(KIND):
        for path in files_of(folder.path, source.files):
            try:
                intake = read_export(path, source, folder.plant.time_zone)
                frame, told = _with_issue(intake.frame, source, folder)
            except AdvisorError as error:
                reports.append(refused_report(path.name, KIND, error))
                continue
            notes = () if told else ("No time of issue is told: its first hour is taken for it.",)
            frames.append(frame)
            reports.append(intake.report.with_notes(notes))
    if not frames:
        return pd.DataFrame(), tuple(reports)
    whole = pd.concat(frames, ignore_index=True)
    return whole.sort_values(["issued", "time"], kind="stable", ignore_index=True), tuple(reports)


def _with_issue(
    frame: pd.DataFrame, source: LogSource, folder: PlantFolder
) -> tuple[pd.DataFrame, bool]:
    told = [text for text in frame.get("issued", pd.Series(dtype="str")) if text]
    issued = frame["time"].min()
    if told:
        zone = folder.zone if source.time.zone == "plant" else zone_named(source.time.zone)
        issued = pd.Timestamp(utc_of(str(told[0]), zone))
    dated = frame.drop(columns="issued", errors="ignore")
    return dated.assign(issued=issued, issue_told=bool(told)), bool(told)
