"""Days against hours: where mix ran outside its window, and how far."""

from __future__ import annotations

from collections.abc import Collection
from datetime import date

import plotly.graph_objects as go

from advisor.figures.base import NOTE_PX, TEXT_PX, bare, delta, note, whole_delta
from advisor.figures.ink import COLD_MARK, HOT_MARK, LIGHT, Ink
from advisor.review.result import HourCell, Review
from advisor.units import UnitSystem, shown, shown_unit

Cell = tuple[str, int]

# Distance [K] from which a cell takes the full hue; under it the weak one.
_FAR_K = 5.0
_ROW_PX = 34
_MARGIN = (88, 8, 26, 6)


def week_field(
    review: Review,
    units: UnitSystem = "si",
    ink: Ink = LIGHT,
    chosen: Collection[Cell] = (),
    narrow: bool = False,
) -> go.Figure:
    """Figure of one cell per day and hour, hot and cold told by hue, mark and number.

    Parameters
    ----------
    review : Review with cells in the plant's local time
    units : 'si' or 'us'; the number in a cell is the mean distance from the window
    ink : palette
    chosen : (day, hour) of the cells that are chosen; they get a frame
    narrow : whether the figure is for a phone: marks without numbers
    """
    figure = bare(ink, _MARGIN)
    days = days_of(review)
    if not days:
        return note(figure, "Nothing was made in this period.", ink)
    kinds = ("inside", "hot_weak", "hot", "cold_weak", "cold")
    colours = (ink.window, ink.hot_weak, ink.hot, ink.cold_weak, ink.cold)
    made = [one for one in review.cells if one.distance_k is not None]
    rows = {day: place for place, day in enumerate(days)}
    # Every hour of every day has its place, so that all cells are equally wide.
    kind_of: list[list[int | None]] = [[None] * 24 for _ in days]
    hover = [[["", ""] for _ in range(24)] for _ in days]
    for one in made:
        kind_of[rows[one.day]][one.hour] = kinds.index(_kind(one))
        hover[rows[one.day]][one.hour] = [one.day, _hover(one, units)]
    figure.add_heatmap(
        name="cells",
        x=list(range(24)),
        y=list(range(len(days))),
        z=kind_of,
        customdata=hover,
        zmin=0,
        zmax=4,
        colorscale=[
            [edge, colour]
            for place, colour in enumerate(colours)
            for edge in (place / 5, (place + 1) / 5)
        ],
        showscale=False,
        xgap=2,
        ygap=2,
        hovertemplate="%{customdata[1]}<extra></extra>",
        hoverongaps=False,
    )
    outside = [one for one in made if one.distance_k]
    figure.add_scatter(
        name="marks",
        x=[one.hour for one in outside],
        y=[rows[one.day] for one in outside],
        mode="text",
        text=[_mark(one, units, narrow) for one in outside],
        textfont={
            "size": NOTE_PX,
            "color": [ink.sheet if _is_far(one) else ink.text for one in outside],
        },
        hoverinfo="skip",
    )
    figure.add_scatter(
        name="chosen",
        x=[hour for day, hour in chosen if day in rows],
        y=[rows[day] for day, _ in chosen if day in rows],
        mode="markers",
        marker={
            "symbol": "square-open",
            "size": 26,
            "color": ink.text,
            "line": {"width": 3, "color": ink.text},
        },
        hoverinfo="skip",
    )
    every = 6 if narrow else 2
    figure.update_xaxes(
        side="top",
        range=[-0.6, 23.6],
        tickvals=list(range(0, 24, every)),
        ticktext=[f"{hour:02d}" for hour in range(0, 24, every)],
    )
    figure.update_yaxes(
        range=[len(days) - 0.45, -0.55],
        tickvals=list(range(len(days))),
        ticktext=[day_label(day) for day in days],
        tickfont={"size": TEXT_PX, "color": ink.text},
    )
    return figure


def field_height(review: Review) -> int:
    """Height [px] at which the rows of the field are easy to meet with a finger."""
    return max(4, len(days_of(review))) * _ROW_PX + _MARGIN[2] + _MARGIN[3]


def field_words(review: Review, units: UnitSystem) -> str:
    """One sentence for those who cannot see the figure."""
    outside = [one for one in review.cells if one.distance_k]
    if not outside:
        return "No hour was outside its window."
    worst = max(outside, key=lambda one: abs(one.distance_k or 0.0))
    return f"{len(outside)} hours outside the window; the furthest {_hover(worst, units)}."


def days_of(review: Review) -> list[str]:
    """The days of the review's cells, oldest first."""
    return sorted({one.day for one in review.cells})


def day_label(day: str) -> str:
    """A day such as 'Fri 23 Oct' of '2026-10-23'."""
    there = date.fromisoformat(day)
    return f"{there:%a} {there.day} {there:%b}"


def cell_words(cell: HourCell, units: UnitSystem) -> str:
    """A cell in words, such as 'Fri 23 Oct 09:00, hot by 3 °C'."""
    start = f"{day_label(cell.day)} {cell.hour:02d}:00"
    if not cell.distance_k:
        return f"{start}, inside" if cell.distance_k is not None else f"{start}, nothing made"
    side = "hot" if cell.distance_k > 0 else "cold"
    distance = whole_delta(cell.distance_k, units)
    return f"{start}, {side} by {distance} {shown_unit('temperature_delta', units)}"


def _is_far(cell: HourCell) -> bool:
    return abs(cell.distance_k or 0.0) >= _FAR_K


def _kind(cell: HourCell) -> str:
    if not cell.distance_k:
        return "inside"
    return ("hot" if cell.distance_k > 0 else "cold") + ("" if _is_far(cell) else "_weak")


def _mark(cell: HourCell, units: UnitSystem, narrow: bool) -> str:
    mark = HOT_MARK if (cell.distance_k or 0.0) > 0 else COLD_MARK
    if narrow:
        return mark
    number = abs(delta(cell.distance_k or 0.0, units))
    return f"{mark}{round(number)}" if number >= 0.5 else mark


def _hover(cell: HourCell, units: UnitSystem) -> str:
    made, hot, cold = (
        shown(1000.0 * tonnes, "mass", units, 0)
        for tonnes in (cell.tonnes, cell.hot_tonnes, cell.cold_tonnes)
    )
    return f"{cell_words(cell, units)}; {made} made, {hot} hot, {cold} cold"
