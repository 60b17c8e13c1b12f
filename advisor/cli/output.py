"""What commands print: aligned tables for people, JSON for programs."""

from __future__ import annotations

import dataclasses
import datetime as dt
import json
import math
from collections.abc import Iterable, Mapping, Sequence
from pathlib import Path
from typing import Any

import click


def print_table(headings: Sequence[str], rows: Iterable[Sequence[object]], gap: str = "  ") -> None:
    """Print ``rows`` under ``headings``, aligned; columns that hold only numbers to the right."""
    for line in table_lines(headings, rows, gap):
        click.echo(line)


def table_lines(
    headings: Sequence[str], rows: Iterable[Sequence[object]], gap: str = "  "
) -> list[str]:
    """The lines of an aligned table; an empty cell is a cell that says nothing."""
    cells = [["" if cell is None else str(cell) for cell in row] for row in rows]
    widths = [
        max(len(heading), *(len(row[at]) for row in cells)) if cells else len(heading)
        for at, heading in enumerate(headings)
    ]
    right = [
        bool(cells) and all(_is_number(row[at]) for row in cells) for at in range(len(headings))
    ]
    rule = ["-" * width for width in widths]
    return [
        gap.join(
            cell.rjust(width) if to_right else cell.ljust(width)
            for cell, width, to_right in zip(row, widths, right, strict=True)
        ).rstrip()
        for row in [list(headings), rule, *cells]
    ]


def print_json(value: Any) -> None:
    """Print ``value`` (results, dataclasses, models, moments, arrays) as JSON."""
    click.echo(json.dumps(plain(value), ensure_ascii=False, indent=2, allow_nan=False))


def plain(value: Any) -> Any:
    """``value`` made of what JSON knows; what is not a finite number becomes null."""
    if value is None or isinstance(value, str | bool | int):
        return value
    if isinstance(value, float):
        return float(value) if math.isfinite(value) else None
    if isinstance(value, dt.datetime | dt.date | dt.time):
        return value.isoformat()
    if isinstance(value, Path):
        return str(value)
    if dataclasses.is_dataclass(value) and not isinstance(value, type):
        names = (field.name for field in dataclasses.fields(value))
        return {name: plain(getattr(value, name)) for name in names}
    if isinstance(value, Mapping):
        return {str(key): plain(part) for key, part in value.items()}
    if hasattr(value, "model_dump"):
        return plain(value.model_dump(mode="json"))
    if hasattr(value, "tolist"):
        return plain(value.tolist())
    return [plain(part) for part in value]


def _is_number(text: str) -> bool:
    try:
        float(text)
    except ValueError:
        return not text
    return True
