"""The rows of cases.csv: exact solutions, measurements and tables with their sources."""

from __future__ import annotations

from functools import cache
from pathlib import Path

from published import Case, read_cases


@cache
def every_case() -> tuple[Case, ...]:
    """All rows, in the order of the file."""
    return tuple(read_cases(Path(__file__).with_name("cases.csv")).values())


def cases(*starts: str) -> list[Case]:
    """The rows whose id begins with one of ``starts``."""
    found = [case for case in every_case() if case.id.startswith(starts)]
    assert found, starts
    return found


def value(id_: str) -> float:
    """What the row called ``id_`` expects."""
    return next(case.expected for case in every_case() if case.id == id_)
