"""Choosing hours of the field: from cells to values of a control, spans of time and excursions."""

from __future__ import annotations

from collections.abc import Collection, Sequence
from datetime import UTC, date, datetime, time, timedelta
from zoneinfo import ZoneInfo

from advisor.figures.week_field import Cell
from advisor.review.result import Excursion, Review

Span = tuple[datetime, datetime]


def value_of(cell: Cell) -> str:
    """The value that stands for a cell in a control, such as '2026-10-23 09'."""
    return f"{cell[0]} {cell[1]:02d}"


def cells_of(values: Collection[str] | None) -> tuple[Cell, ...]:
    """The cells that the values of a control stand for."""
    return tuple((one[:10], int(one[11:])) for one in values or ())


def toggled(values: Sequence[str] | None, cells: Collection[Cell]) -> list[str]:
    """The values with each cell put in where it was not, and taken out where it was."""
    pressed = [value_of(one) for one in cells]
    kept = [one for one in values or () if one not in pressed]
    added = [one for one in pressed if one not in (values or ())]
    return sorted(kept + added)


def span_of(cell: Cell, zone: ZoneInfo) -> Span:
    """Start and end of a cell in UTC; an hour that happens twice is two hours long."""
    start = datetime.combine(date.fromisoformat(cell[0]), time(cell[1]), tzinfo=zone)
    after = start.replace(fold=1).astimezone(UTC) + timedelta(hours=1)
    return start.astimezone(UTC), after


def chosen_span(cells: Collection[Cell], review: Review, zone: ZoneInfo) -> Span:
    """From the first to the last chosen hour; the whole period where none is chosen."""
    if not cells:
        return review.start, review.end
    spans = [span_of(one, zone) for one in cells]
    return min(one[0] for one in spans), max(one[1] for one in spans)


def chosen_excursions(
    review: Review, cells: Collection[Cell], zone: ZoneInfo
) -> tuple[Excursion, ...]:
    """The excursions that reach into a chosen hour; all of them where none is chosen."""
    if not cells:
        return review.excursions
    spans = [span_of(one, zone) for one in cells]
    return tuple(
        one
        for one in review.excursions
        if any(one.start < end and one.end > start for start, end in spans)
    )
