"""Rows of published and separately worked figures, each with its source, for the tests."""

from __future__ import annotations

import csv
from dataclasses import dataclass
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
    how_known: str = ""

    def __getitem__(self, name: str) -> float:
        return float(self.inputs[name])

    def __contains__(self, name: str) -> bool:
        return name in self.inputs

    def __str__(self) -> str:
        return self.id

    def several(self, name: str) -> NDArray[np.float64]:
        """The numbers of an input that holds several, parted by upright strokes."""
        return np.array([float(part) for part in self.inputs[name].split("|")])


def read_cases(path: Path) -> dict[str, Case]:
    """All rows of the file at ``path`` by id, in the order of the file."""
    with path.open(encoding="utf-8", newline="") as file:
        rows = list(csv.DictReader(file))
    return {
        row["id"]: Case(
            row["id"],
            dict(part.split("=", 1) for part in row["inputs"].split(";")),
            float(row["expected"]),
            float(row["tolerance"]),
            row["source"],
            row.get("how_known", ""),
        )
        for row in rows
    }
