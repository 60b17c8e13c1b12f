"""The rows of cases.csv: exact solutions, measurements and tables with their sources."""

from __future__ import annotations

import csv
from dataclasses import dataclass
from functools import cache
from pathlib import Path


@dataclass(frozen=True)
class Case:
    """One row: what went in, what came out, how far off a calculation may be."""

    id: str
    inputs: dict[str, str]
    expected: float
    tolerance: float
    source: str

    def __getitem__(self, name: str) -> float:
        return float(self.inputs[name])

    def __str__(self) -> str:
        return self.id


@cache
def every_case() -> tuple[Case, ...]:
    """All rows, in the order of the file."""
    with Path(__file__).with_name("cases.csv").open(encoding="utf-8") as file:
        return tuple(
            Case(
                row["id"],
                dict(part.split("=", 1) for part in row["inputs"].split(";")),
                float(row["expected"]),
                float(row["tolerance"]),
                row["source"],
            )
            for row in csv.DictReader(file)
        )


def cases(*starts: str) -> list[Case]:
    """The rows whose id begins with one of ``starts``."""
    found = [case for case in every_case() if case.id.startswith(starts)]
    assert found, starts
    return found


def value(id_: str) -> float:
    """What the row called ``id_`` expects."""
    return next(case.expected for case in every_case() if case.id == id_)
