"""What became of every row of a source: used, or set aside with its line, text and reason."""

from __future__ import annotations

import csv
import json
from dataclasses import asdict, dataclass, replace
from datetime import datetime
from pathlib import Path

from advisor.errors import AdvisorError, Fault

LONGEST_TEXT = 300  # a set-aside row is shown, not archived; the file itself is kept by its owner


@dataclass(frozen=True)
class SetAsideRow:
    """One row that was not used: its line in the file, the text of it, and why.

    ``near`` is the moment (UTC) of the used row before it, of the one after it where it stands
    first; None where the file holds no used row.
    """

    line: int
    reason: str
    text: str
    near: datetime | None = None


@dataclass(frozen=True)
class UnreadCells:
    """Cells of one signal that hold no number although their row is used; the first as written."""

    signal: str
    reason: str
    count: int
    first_line: int
    first_text: str = ""


@dataclass(frozen=True)
class IntakeReport:
    """How one source was read. ``rows_read`` = ``rows_used`` + the rows set aside, always.

    ``header_lines`` and ``blank_lines`` are lines that are no rows. ``refused`` says why a whole
    file could not be read; it then counts no rows.
    """

    source: str
    kind: str
    rows_read: int
    rows_used: int
    set_aside: tuple[SetAsideRow, ...] = ()
    header_lines: int = 0
    blank_lines: int = 0
    unread_cells: tuple[UnreadCells, ...] = ()
    notes: tuple[str, ...] = ()
    refused: Fault | None = None

    def __post_init__(self) -> None:
        if self.rows_read != self.rows_used + len(self.set_aside):
            raise AdvisorError.of(
                "counts",
                f"{self.rows_read} rows were read, {self.rows_used} used and "
                f"{len(self.set_aside)} set aside: these do not add up.",
                "This is a fault of the program; please report it with the file.",
                file=self.source,
            )

    def reasons(self) -> dict[str, int]:
        """Number of rows set aside for each reason, most frequent first."""
        counted: dict[str, int] = {}
        for row in self.set_aside:
            counted[row.reason] = counted.get(row.reason, 0) + 1
        return dict(sorted(counted.items(), key=lambda item: (-item[1], item[0])))

    def with_set_aside(self, rows: tuple[SetAsideRow, ...]) -> IntakeReport:
        """The report after ``rows`` that counted as used were set aside as well."""
        together = tuple(sorted((*self.set_aside, *rows), key=lambda row: row.line))
        return replace(self, rows_used=self.rows_used - len(rows), set_aside=together)

    def set_aside_between(self, start: datetime, end: datetime) -> tuple[SetAsideRow, ...]:
        """Rows set aside from ``start`` (included) to ``end`` (not included), aware times.

        One of a file that holds no used row has no place in time: it counts in every period.
        """
        return tuple(row for row in self.set_aside if row.near is None or start <= row.near < end)

    def with_notes(self, notes: tuple[str, ...]) -> IntakeReport:
        """The report with ``notes`` added."""
        return replace(self, notes=(*self.notes, *notes))

    def as_dict(self) -> dict[str, object]:
        """Every part by name, for programs."""
        told = {**asdict(self), "refused": self.refused.as_dict() if self.refused else None}
        told["set_aside"] = [
            {**asdict(row), "near": row.near.isoformat() if row.near else None}
            for row in self.set_aside
        ]
        return told


def refused_report(source: str, kind: str, error: AdvisorError) -> IntakeReport:
    """The report of a file that could not be read at all, and why."""
    return IntakeReport(source, kind, 0, 0, refused=error.faults[0])


def write_report(report: IntakeReport, path: Path) -> None:
    """Write ``report`` as JSON to ``path``."""
    path.write_text(json.dumps(report.as_dict(), indent=1, ensure_ascii=False) + "\n", "utf-8")


def write_set_aside(reports: tuple[IntakeReport, ...], path: Path) -> int:
    """Write every row set aside in ``reports`` as CSV a person can open; returns their number."""
    count = 0
    with path.open("w", encoding="utf-8", newline="") as file:
        writer = csv.writer(file)
        writer.writerow(["source", "line", "reason", "text"])
        for report in reports:
            for row in report.set_aside:
                writer.writerow([report.source, row.line, row.reason, _harmless(row.text)])
                count += 1
    return count


def _harmless(text: str) -> str:
    """``text`` that an office program shows instead of working it out as a formula."""
    return f"'{text}" if text[:1] in ("=", "+", "-", "@") else text
