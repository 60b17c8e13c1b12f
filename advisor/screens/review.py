"""The review page: where, when and how far outside, why, and what do we change this week?"""

from __future__ import annotations

from datetime import UTC, date, datetime, timedelta
from typing import Any

from dash import Dash, Input, Output, State, ctx, dcc, html

from advisor.errors import AdvisorError
from advisor.figures.bars import bars_height, cause_bars, mix_bars
from advisor.figures.base import STILL, ZOOMED, blank
from advisor.figures.ink import ink_of
from advisor.figures.trend import trend, trend_words
from advisor.figures.week_field import field_height, field_words, week_field
from advisor.review.ranking import cause_shares
from advisor.review.result import Review
from advisor.screens import review_parts as parts
from advisor.screens.choosing import (
    Span,
    cells_of,
    chosen_excursions,
    chosen_span,
    toggled,
)
from advisor.screens.ids import id_of
from advisor.screens.query import days_to_times, review_query
from advisor.screens.shift_parts import error_block
from advisor.screens.source import Source
from advisor.screens.words import moment_words
from advisor.units import UnitSystem

PAGE = "review"
TITLE = "Review"
PATH = "/review"
TRACE_PX = 270
# Over a longer time the loads would lie on one another.
LOADS_SHOWN_WITHIN = timedelta(hours=30)


def layout(source: Source, search: str | None) -> Any:
    """The page for an address such as '/review?from=2026-10-19&to=2026-10-25'."""
    first, last = _data_days(source)
    asked = review_query(search)
    start, end = asked.first or max(first, last - timedelta(days=6)), asked.last or last
    faults = list(asked.faults)
    if start > last or end < first:
        faults.append(f"The log runs from {first} to {last}; showing its last days.")
        start, end = max(first, last - timedelta(days=6)), last
    return html.Div(
        [
            html.Div([html.P(one, className="banner") for one in faults], className="alerts"),
            html.Section(
                [
                    html.Div(_loading("sentence"), className="answer"),
                    html.Div(
                        [
                            html.Label("Period", htmlFor=id_of(PAGE, "first")),
                            dcc.DatePickerRange(
                                id=id_of(PAGE, "period"),
                                start_date=start.isoformat(),
                                end_date=min(end, last).isoformat(),
                                min_date_allowed=first.isoformat(),
                                max_date_allowed=last.isoformat(),
                                start_date_id=id_of(PAGE, "first"),
                                end_date_id=id_of(PAGE, "last"),
                                display_format="D MMM YYYY",
                                first_day_of_week=1,
                                minimum_nights=0,
                                clearable=False,
                                number_of_months_shown=1,
                            ),
                        ],
                        className="choose",
                    ),
                ],
                className="sheet top-line",
            ),
            html.Section(
                [
                    html.H2(id=id_of(PAGE, "field-title")),
                    dcc.Graph(
                        id=id_of(PAGE, "field"), figure=blank(), config=STILL, className="graph"
                    ),
                    html.P(id=id_of(PAGE, "field-words"), className="heard-only"),
                    html.Div(
                        [
                            html.Label("Hours chosen", htmlFor=id_of(PAGE, "hours")),
                            dcc.Dropdown(
                                id=id_of(PAGE, "hours"),
                                multi=True,
                                placeholder="all: press cells above or choose here",
                            ),
                        ],
                        className="choose hours",
                    ),
                ],
                className="sheet field",
            ),
            html.Section(
                [html.H2("Made and wasted"), html.Div(id=id_of(PAGE, "summary"))],
                className="sheet summary",
            ),
            _figure("Likely causes, tonnes outside at the drum", "causes"),
            _figure("By mix over the whole period", "mixes"),
            html.Section(
                [
                    html.H2(id=id_of(PAGE, "trace-title")),
                    dcc.Graph(
                        id=id_of(PAGE, "trace"),
                        figure=blank(),
                        config=ZOOMED,
                        className="graph",
                        style={"height": f"{TRACE_PX}px"},
                    ),
                    html.P(id=id_of(PAGE, "trace-words"), className="heard-only"),
                    html.P(
                        "Band: the window in force; line in it: the target. Drag along the time to "
                        "look closer, press twice to go back; within 30 hours squares show the "
                        "loads at load-out.",
                        className="note screen-only",
                    ),
                ],
                className="sheet trace",
            ),
            html.Section(
                [
                    html.H2(id=id_of(PAGE, "table-title")),
                    parts.excursion_grid(id_of(PAGE, "table")),
                    html.Div(id=id_of(PAGE, "printed"), className="print-only"),
                ],
                className="sheet table",
            ),
            html.Section(
                [html.H2("States of the plant"), html.Div(id=id_of(PAGE, "states"))],
                className="sheet states",
            ),
            html.Section(
                [html.H2("Set aside"), html.Div(id=id_of(PAGE, "set-aside"))],
                className="sheet set-aside",
            ),
        ],
        className="page review",
    )


def _figure(title: str, part: str) -> Any:
    return html.Section(
        [
            html.H2(title),
            dcc.Graph(id=id_of(PAGE, part), figure=blank(), config=STILL, className="graph"),
        ],
        className=f"sheet {part}",
    )


def _loading(part: str) -> Any:
    return dcc.Loading(
        html.Div(id=id_of(PAGE, part)),
        delay_show=300,
        overlay_style={"visibility": "visible", "opacity": 0.4},
        custom_spinner=html.P("Reviewing the period; a new week takes some seconds.",
                              className="working", role="status"),
    )  # fmt: skip


def _data_days(source: Source) -> tuple[date, date]:
    start, end = source.data_span()
    last = end - timedelta(seconds=1)  # a log that ends at midnight has no reading of that day
    return start.astimezone(source.zone).date(), last.astimezone(source.zone).date()


def _review(source: Source, first: str, last: str, units: UnitSystem) -> Review:
    days = date.fromisoformat(first[:10]), date.fromisoformat(last[:10])
    return source.review(*days_to_times(*days, source.zone), units)


def register(app: Dash, source: Source) -> None:
    """Give the page's callbacks to ``app``."""
    period = {
        "first": Input(id_of(PAGE, "period"), "start_date"),
        "last": Input(id_of(PAGE, "period"), "end_date"),
        "units": Input("units", "value"),
    }
    chosen = {"hours": Input(id_of(PAGE, "hours"), "value"), "scheme": Input("scheme", "data")}

    @app.callback(
        output={
            name: Output(id_of(PAGE, name), "children")
            for name in ("sentence", "summary", "states", "set-aside", "field-words")
        },
        inputs=period,
    )
    def show_period(first: str, last: str, units: UnitSystem) -> dict[str, Any]:
        try:
            review = _review(source, first, last, units)
        except AdvisorError as error:
            empty = dict.fromkeys(("summary", "states", "set-aside", "field-words"), "")
            return {"sentence": error_block(error, "No review"), **empty}
        return {
            "sentence": html.H1(review.sentence),
            "summary": parts.summary(review, units),
            "states": parts.states_table(review, units),
            "set-aside": parts.set_aside_table(review, source.zone),
            "field-words": field_words(review, units),
        }

    @app.callback(
        output={
            "field": Output(id_of(PAGE, "field"), "figure"),
            "field_style": Output(id_of(PAGE, "field"), "style"),
            "field_title": Output(id_of(PAGE, "field-title"), "children"),
            "options": Output(id_of(PAGE, "hours"), "options"),
            "causes": Output(id_of(PAGE, "causes"), "figure"),
            "causes_style": Output(id_of(PAGE, "causes"), "style"),
            "mixes": Output(id_of(PAGE, "mixes"), "figure"),
            "mixes_style": Output(id_of(PAGE, "mixes"), "style"),
            "rows": Output(id_of(PAGE, "table"), "rowData"),
            "columns": Output(id_of(PAGE, "table"), "columnDefs"),
            "grid": Output(id_of(PAGE, "table"), "dashGridOptions"),
            "printed": Output(id_of(PAGE, "printed"), "children"),
            "table_title": Output(id_of(PAGE, "table-title"), "children"),
        },
        inputs={**period, **chosen, "narrow": Input("narrow", "data")},
    )
    def show_chosen(
        first: str, last: str, units: UnitSystem, hours: list[str], scheme: str, narrow: bool
    ) -> dict[str, Any]:
        try:
            review = _review(source, first, last, units)
        except AdvisorError:
            review = _nothing(source, first, last)
        cells = cells_of(hours)
        found = chosen_excursions(review, cells, source.zone)
        rows = parts.excursion_rows(found, source.zone, units, review.currency)
        ink = ink_of(scheme)
        return {
            "field": week_field(review, units, ink, cells, narrow),
            "field_style": {"height": f"{field_height(review)}px"},
            "field_title": parts.field_title(units),
            "options": parts.hour_options(review, units, cells),
            "causes": cause_bars(found, units, ink),
            "causes_style": {"height": f"{bars_height(len(cause_shares(found)))}px"},
            "mixes": mix_bars(review, units, ink),
            "mixes_style": {"height": f"{bars_height(len(review.mixes))}px"},
            "rows": rows,
            "printed": parts.printed_excursions(rows, units),
            "columns": parts.excursion_columns(units),
            "grid": parts.grid_options(len(found)),
            "table_title": f"Excursions: {len(found)} of {len(review.excursions)}",
        }

    @app.callback(
        Output(id_of(PAGE, "hours"), "value"),
        Output(id_of(PAGE, "field"), "clickData"),
        Input(id_of(PAGE, "field"), "clickData"),
        State(id_of(PAGE, "hours"), "value"),
        prevent_initial_call=True,
    )
    def press_cell(pressed: dict[str, Any] | None, hours: list[str] | None) -> tuple[Any, Any]:
        cells = [
            (str(point["customdata"][0]), int(point["x"]))
            for point in (pressed or {}).get("points", ())
            if "customdata" in point
        ]
        return toggled(hours, cells), None

    @app.callback(
        output={
            "trace": Output(id_of(PAGE, "trace"), "figure"),
            "trace_title": Output(id_of(PAGE, "trace-title"), "children"),
            "trace_words": Output(id_of(PAGE, "trace-words"), "children"),
        },
        inputs={
            **period,
            **chosen,
            "rows": Input(id_of(PAGE, "table"), "selectedRows"),
            "zoomed": Input(id_of(PAGE, "trace"), "relayoutData"),
            "narrow": Input("narrow", "data"),
        },
    )
    def show_trace(
        first: str,
        last: str,
        units: UnitSystem,
        hours: list[str],
        scheme: str,
        rows: list[dict[str, Any]] | None,
        zoomed: dict[str, Any] | None,
        narrow: bool,
    ) -> dict[str, Any]:
        try:
            span = _trace_span(source, _review(source, first, last, units), hours, rows)
            if ctx.triggered_id == id_of(PAGE, "trace"):
                span = _zoomed(span, zoomed or {})
            readings = source.discharge(*span)
            windows = source.windows_in_force(*span)
            close = span[1] - span[0] <= LOADS_SHOWN_WITHIN
            tickets = source.tickets(*span) if close else ()
        except AdvisorError:
            return {"trace": blank(), "trace_title": "Trace", "trace_words": ""}
        return {
            "trace": trend(
                readings,
                windows,
                *span,
                source.zone,
                units,
                ink_of(scheme),
                tickets,
                zoom=True,
                narrow=narrow,
            ),
            "trace_title": _trace_title(span, source),
            "trace_words": trend_words(readings, windows, units),
        }


def _nothing(source: Source, first: str, last: str) -> Review:
    """A period with nothing in it, for the parts of a page that has no review."""
    start, end = days_to_times(
        date.fromisoformat(first[:10]), date.fromisoformat(last[:10]), source.zone
    )
    return parts.empty_review(source.plant_name, start, end, str(source.zone))


def _trace_span(
    source: Source, review: Review, hours: list[str], rows: list[dict[str, Any]] | None
) -> Span:
    """The chosen excursion with a little around it, or the chosen hours, or the whole period."""
    if rows:
        around = timedelta(minutes=parts.AROUND_MIN)
        start, end = (datetime.fromisoformat(rows[0][side]) for side in ("start", "end"))
        return start - around, end + around
    return chosen_span(cells_of(hours), review, source.zone)


def _zoomed(span: Span, relayout: dict[str, Any]) -> Span:
    """The part of the span that was dragged over; the whole of it where zoom was undone."""
    try:
        start, end = (
            datetime.fromisoformat(str(relayout[f"xaxis.range[{side}]"])).replace(tzinfo=UTC)
            for side in (0, 1)
        )
    except (KeyError, ValueError):
        return span
    return max(start, span[0]), min(end, span[1])


def _trace_title(span: Span, source: Source) -> str:
    return (
        f"Drum discharge, {moment_words(span[0], source.zone)} to "
        f"{moment_words(span[1], source.zone)}"
    )
