"""The rows of cases.csv: published and separately worked figures, each with its source."""

from __future__ import annotations

import csv
from dataclasses import dataclass
from functools import cache
from pathlib import Path

import numpy as np
from numpy.typing import NDArray


@dataclass(frozen=True)
class Case:
    """One row: what went in, what came out, how far off a calculation may be."""

    id: str
    inputs: dict[str, str]
    expected: float
    tolerance: float
    source: str
    how_known: str

    def __getitem__(self, name: str) -> float:
        return float(self.inputs[name])

    def __contains__(self, name: str) -> bool:
        return name in self.inputs

    def __str__(self) -> str:
        return self.id

    def several(self, name: str) -> NDArray[np.float64]:
        """The numbers of an input that holds several, parted by upright strokes."""
        return np.array([float(part) for part in self.inputs[name].split("|")])


@cache
def every_case() -> dict[str, Case]:
    """All rows by id."""
    with Path(__file__).with_name("cases.csv").open(encoding="utf-8", newline="") as file:
        rows = list(csv.DictReader(file))
    return {
        row["id"]: Case(
            row["id"],
            dict(part.split("=", 1) for part in row["inputs"].split(";")),
            float(row["expected"]),
            float(row["tolerance"]),
            row["source"],
            row["how_known"],
        )
        for row in rows
    }


def agrees(one: Case, value: float) -> bool:
    """Whether ``value`` lies within the tolerance of the row; a row of 0 wants its last digit."""
    slack = one.tolerance or 1e-9 * abs(one.expected)
    return abs(float(value) - one.expected) <= slack
