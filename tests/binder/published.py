"""The rows of cases.csv: published and separately worked figures, each with its source."""

from __future__ import annotations

from functools import cache
from pathlib import Path

from published import Case, read_cases


@cache
def every_case() -> dict[str, Case]:
    """All rows by id."""
    return read_cases(Path(__file__).with_name("cases.csv"))


def agrees(one: Case, value: float) -> bool:
    """Whether ``value`` lies within the tolerance of the row; a row of 0 wants its last digit."""
    slack = one.tolerance or 1e-9 * abs(one.expected)
    return abs(float(value) - one.expected) <= slack
