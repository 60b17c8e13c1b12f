"""All a plant folder's exports of a period: log, tickets, arrivals and weather, with reports."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import datetime
from pathlib import Path

import numpy as np
import pandas as pd

from advisor.errors import AdvisorError, Fault, FaultyInput, MissingInput
from advisor.logs.cleaning import mark_faults
from advisor.logs.intake import Intake, read_export
from advisor.logs.report import IntakeReport, SetAsideRow, refused_report
from advisor.logs.signals import SHAPES, SourceKind
from advisor.settings.folder import PlantFolder


@dataclass(frozen=True)
class PlantLog:
    """What the exports of a period say; times in UTC, everything in inside units.

    ``frame`` holds one row per time of the plant log; the other three are empty where the plant
    has no such export. Beside every number stands ``<signal>_mark``: why a reading is not
    believed, empty where it is. ``reports`` count every row of every file, in the period or not.
    """

    frame: pd.DataFrame
    tickets: pd.DataFrame
    arrivals: pd.DataFrame
    weather: pd.DataFrame
    reports: tuple[IntakeReport, ...]

    def between(self, start: datetime | None, end: datetime | None) -> PlantLog:
        """The part from ``start`` (included) to ``end`` (not included), aware times."""
        return PlantLog(
            _between(self.frame, start, end),
            _between(self.tickets, start, end),
            _between(self.arrivals, start, end),
            _between(self.weather, start, end),
            self.reports,
        )


def read_logs(
    folder: PlantFolder, start: datetime | None = None, end: datetime | None = None
) -> PlantLog:
    """The exports of ``folder`` from ``start`` (included) to ``end`` (not included), aware times.

    A file that cannot be read is told in its report and does not stop the others. Raises
    MissingInput where there is no export of the plant log, FaultyInput where none can be read.
    """
    frames: dict[SourceKind, pd.DataFrame] = {}
    reports: list[IntakeReport] = []
    for kind in SHAPES:
        frame, of_kind = read_kind(folder, kind)
        # Marked before the period is cut out: a fault is known by what is before and after it.
        frames[kind] = mark_faults(frame)
        reports.extend(of_kind)
    of_log = [report for report in reports if report.kind == "plant_log"]
    if not of_log:
        patterns = [source.files for source in folder.signals.of_kind("plant_log")]
        raise MissingInput.of(
            "no-log",
            "There is no export of the plant log.",
            f"Put the exports where signals.yaml says: {', '.join(patterns) or 'name a source'}.",
            file=str(folder.path),
        )
    refused = [report.refused for report in of_log if report.refused]
    if len(refused) == len(of_log):
        raise FaultyInput(*refused)
    return PlantLog(
        frames["plant_log"],
        frames["tickets"],
        frames["arrivals"],
        frames["weather"],
        tuple(reports),
    ).between(start, end)


def read_kind(
    folder: PlantFolder, kind: SourceKind
) -> tuple[pd.DataFrame, tuple[IntakeReport, ...]]:
    """All files of one ``kind`` as one frame sorted by time, and a report for each file.

    Where two files hold the same time (or ticket), the one later in the order of names is used
    and the other row is set aside.
    """
    intakes: list[Intake] = []
    reports: list[IntakeReport] = []
    for source in folder.signals.of_kind(kind):
        for path in files_of(folder.path, source.files):
            try:
                intake = read_export(path, source, folder.plant.time_zone)
            except AdvisorError as error:
                reports.append(refused_report(path.name, kind, error))
                continue
            intakes.append(intake)
    joined, joined_reports = _joined(intakes, SHAPES[kind].key)
    return (
        joined if intakes else _nothing(kind),
        tuple(sorted((*reports, *joined_reports), key=lambda report: report.source)),
    )


def files_of(folder: Path, files: str) -> list[Path]:
    """The files in ``folder`` that the pattern ``files`` of signals.yaml names, in order."""
    pattern = Path(files)
    if pattern.is_absolute() or ".." in pattern.parts:
        raise FaultyInput(
            Fault(
                "outside-folder",
                f"'{files}' leads out of the plant folder.",
                "Name the files relative to the plant folder.",
                file="signals.yaml",
            )
        )
    return sorted(path for path in folder.glob(files) if path.is_file())


def _joined(intakes: list[Intake], key: str) -> tuple[pd.DataFrame, list[IntakeReport]]:
    if not intakes:
        return pd.DataFrame(), []
    whole = pd.concat([intake.frame for intake in intakes], ignore_index=True)
    file_of = np.repeat(np.arange(len(intakes)), [len(intake.frame) for intake in intakes])
    lines = np.concatenate([intake.lines for intake in intakes])
    again = whole.duplicated(key, keep="last").to_numpy()
    reports = []
    for number, intake in enumerate(intakes):
        repeated = [
            SetAsideRow(
                int(lines[row]),
                f"same {key} in a later file, which is used",
                "",
                whole["time"].iloc[row].to_pydatetime(),
            )
            for row in np.flatnonzero(again & (file_of == number))
        ]
        reports.append(intake.report.with_set_aside(tuple(repeated)))
    used = whole[~again].sort_values("time", kind="stable", ignore_index=True)
    return used, reports


def _between(frame: pd.DataFrame, start: datetime | None, end: datetime | None) -> pd.DataFrame:
    inside = np.ones(len(frame), bool)
    if start is not None:
        inside &= (frame["time"] >= pd.Timestamp(start)).to_numpy()
    if end is not None:
        inside &= (frame["time"] < pd.Timestamp(end)).to_numpy()
    return frame[inside].reset_index(drop=True)


def _nothing(kind: SourceKind) -> pd.DataFrame:
    """No rows, with the columns that a source of ``kind`` needs."""
    time = pd.DatetimeIndex([], dtype="datetime64[us, UTC]")
    return pd.DataFrame({"time": time, **{name: [] for name in SHAPES[kind].needed}})
