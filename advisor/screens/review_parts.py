"""The pieces of the review page, each from what it shows to components."""

from __future__ import annotations

from collections.abc import Sequence
from datetime import datetime
from typing import Any
from zoneinfo import ZoneInfo

import dash_ag_grid as dag
from dash import html

from advisor.figures.base import degrees
from advisor.figures.week_field import Cell, cell_words
from advisor.review.result import NO_WASTE, Excursion, Review
from advisor.screens.choosing import value_of
from advisor.screens.notices import LABELS
from advisor.screens.words import (
    MARKS,
    energy_words,
    mass_words,
    moment_words,
    money_words,
    unit_words,
)
from advisor.units import UnitSystem, from_si, shown_number, shown_unit

# A chosen excursion is shown with this much before and after it.
AROUND_MIN = 30
# Rows of the excursions table on one leaf.
LEAF = 20
_WRAPPED = {"wrapText": True, "autoHeight": True, "cellClass": "wrapped"}


def summary(review: Review, units: UnitSystem) -> Any:
    """What was made, how much of it outside, and what that is worth."""
    whole = max(review.tonnes, 1e-9)
    rows: list[tuple[Any, str, str]] = [
        ("Made", mass_words(review.tonnes, units), ""),
        ("Inside the window", *_share(review.in_window_tonnes, whole, units)),
        (_marked("hot"), *_share(review.hot_tonnes, whole, units)),
        (_marked("cold"), *_share(review.cold_tonnes, whole, units)),
        ("No advice in force", *_share(review.no_advice_tonnes, whole, units)),
    ]
    of_co2 = "lb" if units == "us" else "kg"
    low, high = (
        from_si(kg, of_co2, "mass") for kg in (review.waste.co2_kg.low, review.waste.co2_kg.high)
    )
    waste = [
        ("Too much fuel", energy_words(review.waste.fuel_kwh, units)),
        ("worth", money_words(review.waste.money, review.currency)),
        ("CO2", _range(low, high, of_co2)),
        ("start-ups and changes, apart", energy_words(review.start_up_waste.fuel_kwh, units)),
    ]
    return [
        html.Table(
            html.Tbody(
                [
                    html.Tr(
                        [
                            html.Th(name, scope="row"),
                            html.Td(mass, className="number"),
                            html.Td(share, className="number"),
                        ]
                    )
                    for name, mass, share in rows
                ]
            )
        ),
        html.Table(
            html.Tbody(
                [
                    html.Tr([html.Th(name, scope="row"), html.Td(words, className="number")])
                    for name, words in waste
                ]
            )
        ),
        html.Ul([html.Li(one) for one in review.cautions], className="cautions"),
    ]


def _share(tonnes: float, whole: float, units: UnitSystem) -> tuple[str, str]:
    return mass_words(tonnes, units), f"{100 * tonnes / whole:.1f} %"


def _marked(side: str) -> Any:
    return html.Span(f"{MARKS[side]} {side.capitalize()}", className=side)  # type: ignore[index]


def _range(low: float, high: float, unit: str) -> str:
    return f"{low:,.0f} – {high:,.0f} {unit}"


def field_title(units: UnitSystem) -> str:
    """What the field shows, with its unit."""
    return f"Mean distance from the window by day and hour, {unit_words(units)}"


def empty_review(plant: str, start: datetime, end: datetime, time_zone: str) -> Review:
    """A period with nothing in it."""
    return Review(
        plant, start, end, time_zone, 0, 0, 0, (), (), (), (), (), 0.0, 0.0, 0.0, 0.0, 0.0,
        NO_WASTE, NO_WASTE, "", "",
    )  # fmt: skip


def hour_options(
    review: Review, units: UnitSystem, chosen: Sequence[Cell] = ()
) -> list[dict[str, str]]:
    """The hours that can be chosen by name: those outside, and any that is chosen already."""
    return [
        {"label": cell_words(one, units), "value": value_of((one.day, one.hour))}
        for one in review.cells
        if one.distance_k or (one.day, one.hour) in chosen
    ]


def states_table(review: Review, units: UnitSystem) -> Any:
    """How long the plant was in each state, and what it made there."""
    return html.Table(
        [
            html.Thead(
                html.Tr(
                    [
                        html.Th("state"),
                        html.Th("time", className="number"),
                        html.Th("made", className="number"),
                    ]
                )
            ),
            html.Tbody(
                [
                    html.Tr(
                        [
                            html.Th(one.state, scope="row"),
                            html.Td(_hours(one.minutes), className="number"),
                            html.Td(mass_words(one.tonnes, units), className="number"),
                        ]
                    )
                    for one in review.states
                ]
            ),
        ]
    )


def _hours(minutes: float) -> str:
    return f"{minutes / 60:.1f} h" if minutes >= 60 else f"{minutes:.0f} min"


def set_aside_table(review: Review, zone: ZoneInfo) -> Any:
    """What was not used, why, and that the counts add up."""
    rows = [
        html.Tr(
            [
                html.Th(one.reason, scope="row"),
                html.Td(one.signal),
                html.Td(_when(one.first, one.last, zone), className="note"),
                html.Td(f"{one.count:,}", className="number"),
            ]
        )
        for one in review.set_aside
    ]
    return [
        html.P(
            f"{review.rows_read:,} rows of the log = {review.rows_used:,} used + "
            f"{review.rows_set_aside:,} set aside. "
            "A row may carry several marked readings."
        ),
        html.Table(html.Tbody(rows)) if rows else html.P("Nothing was set aside."),
    ]


def _when(first: Any, last: Any, zone: ZoneInfo) -> str:
    if first is None:
        return ""
    if last is None or last == first:
        return moment_words(first, zone)
    return f"{moment_words(first, zone)} – {moment_words(last, zone)}"


def excursion_rows(
    excursions: Sequence[Excursion], zone: ZoneInfo, units: UnitSystem, currency: str
) -> list[dict[str, Any]]:
    """Rows of the excursions table, with the times of each in UTC for the trace."""
    return [
        {
            "start": one.start.isoformat(),
            "end": one.end.isoformat(),
            "when": moment_words(one.start, zone),
            "side": f"{MARKS[one.side]} {one.side}",
            "where": LABELS[one.point],
            "minutes": round(one.minutes),
            "tonnes": round(shown_number(1000 * one.tonnes, "mass", units)),
            "peak": round(shown_number(one.peak_k, "temperature_delta", units), 1),
            "limit": int(degrees(one.limit_c, units)),
            "fuel": round(
                shown_number(one.waste.fuel_kwh.middle * 3.6e6, "energy", units),
                0 if units == "si" else 2,
            ),
            "money": money_words(one.waste.money, currency) if one.waste.excess_tk else "",
            "mix": one.mix,
            "cause": one.cause,
            "evidence": one.evidence,
        }
        for one in excursions
    ]


def excursion_columns(units: UnitSystem) -> list[dict[str, Any]]:
    """Columns of the excursions table, each with its unit."""
    degree = unit_words(units)

    def number(field: str, name: str, width: int) -> dict[str, Any]:
        return {"field": field, "headerName": name, "width": width, "type": "rightAligned"}

    return [
        {"field": "when", "headerName": "start", "width": 144, "pinned": "left"},
        {"field": "where", "headerName": "where", "width": 128},
        {"field": "side", "headerName": "side", "width": 74},
        number("minutes", "min", 62),
        number("tonnes", shown_unit("mass", units), 62),
        number("peak", f"peak, {degree}", 88),
        number("limit", f"limit, {degree}", 88),
        number("fuel", shown_unit("energy", units), 74),
        {"field": "money", "headerName": "money", "width": 130},
        {"field": "mix", "headerName": "mix", "width": 76},
        {"field": "cause", "headerName": "likely cause", "width": 126, **_WRAPPED},
        {"field": "evidence", "headerName": "evidence", "minWidth": 240, "flex": 1, **_WRAPPED},
    ]


def printed_excursions(rows: Sequence[dict[str, Any]], units: UnitSystem) -> Any:
    """The excursions as a plain table with all of them, for paper."""
    columns = excursion_columns(units)
    numbers = {one["field"] for one in columns if one.get("type") == "rightAligned"}

    def style(field: str) -> str:
        return "number" if field in numbers else ""

    return html.Table(
        [
            html.Thead(
                html.Tr(
                    [html.Th(one["headerName"], className=style(one["field"])) for one in columns]
                )
            ),
            html.Tbody(
                [
                    html.Tr(
                        [
                            html.Td(row[one["field"]], className=style(one["field"]))
                            for one in columns
                        ]
                    )
                    for row in rows
                ]
            ),
        ]
    )


def grid_options(count: int) -> dict[str, Any]:
    """Options of the excursions table for ``count`` rows: leaves to turn only where it is long."""
    return {
        "domLayout": "autoHeight",
        "rowSelection": {"mode": "singleRow", "checkboxes": False, "enableClickSelection": True},
        "pagination": count > LEAF,
        "paginationPageSize": LEAF,
        "paginationPageSizeSelector": False,
        "suppressNoRowsOverlay": True,
    }


def excursion_grid(grid_id: str) -> Any:
    """The empty table of excursions; one row can be chosen to see its trace."""
    return dag.AgGrid(
        id=grid_id,
        columnDefs=[],
        rowData=[],
        defaultColDef={"resizable": True, "sortable": True},
        dashGridOptions=grid_options(0),
        className="excursion-grid screen-only",
    )
