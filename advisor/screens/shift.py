"""The shift page: what do I set, and am I there?"""

from __future__ import annotations

from datetime import datetime
from typing import Any, cast

from dash import ALL, ClientsideFunction, Dash, Input, Output, State, ctx, dcc, html, no_update

from advisor.advice.result import Point
from advisor.errors import AdvisorError
from advisor.figures.base import STILL, blank
from advisor.figures.heat_path import heat_path, heat_path_words
from advisor.figures.ink import Ink, ink_of
from advisor.figures.trend import trend, trend_words
from advisor.screens import shift_parts as parts
from advisor.screens.ids import id_of
from advisor.screens.notices import notices
from advisor.screens.query import shift_query
from advisor.screens.shift_view import TREND_HOURS, ShiftView, shift_view
from advisor.screens.source import Source
from advisor.screens.why import why_sheet
from advisor.screens.words import moment_words
from advisor.units import UnitSystem

PAGE = "shift"
TITLE = "Shift"
PATH = "/"
# Heights of the figures [px]: with the setpoints they fill a screen of 768.
HEIGHTS = {"path": 222, "trend": 122}


def layout(source: Source, search: str | None) -> Any:
    """The page for an address such as '/?job=J-1&at=2026-10-23T10:10'."""
    jobs = source.jobs()
    asked = shift_query(search, tuple(one.code for one in jobs), source.zone)
    options = [{"label": "the job that runs", "value": ""}] + [
        {"label": f"{one.name}, {one.mix} ({one.code})", "value": one.code} for one in jobs
    ]
    return html.Div(
        [
            dcc.Store(id=id_of(PAGE, "at"), data=asked.at.isoformat() if asked.at else None),
            dcc.Store(id=id_of(PAGE, "faults"), data=list(asked.faults)),
            html.Div(id=id_of(PAGE, "alerts"), className="alerts"),
            html.Div(
                [
                    _set_now(options, asked.job or ""),
                    _section("Heat path, minutes after discharge", "path", figure=True),
                    _section(f"Drum discharge, last {TREND_HOURS:.0f} hours", "trend", figure=True),
                ],
                className="column",
            ),
            html.Div(
                [
                    _section("Notices", "notices"),
                    _section("This load", "load"),
                    _section("Rest of the shift", "later"),
                    _section("Cautions", "cautions"),
                    _section("Why these numbers", "reasons"),
                ],
                className="column aside",
            ),
            _sheet(),
        ],
        className="page shift",
    )


def _set_now(options: list[dict[str, str]], job: str) -> Any:
    return html.Section(
        [
            html.Div(
                [
                    html.Div(id=id_of(PAGE, "heading"), className="heading"),
                    html.Div(
                        [
                            html.Label("Job", htmlFor=id_of(PAGE, "job")),
                            dcc.Dropdown(
                                id=id_of(PAGE, "job"),
                                options=options,
                                value=job,
                                clearable=False,
                                searchable=False,
                            ),
                        ],
                        className="choose",
                    ),
                ],
                className="top",
            ),
            html.Div(id=id_of(PAGE, "setpoints"), className="setpoints-place"),
        ],
        className="sheet set-now",
    )


def _section(title: str, part: str, figure: bool = False) -> Any:
    if not figure:
        body: list[Any] = [html.Div(id=id_of(PAGE, part))]
    else:
        body = [
            dcc.Graph(
                id=id_of(PAGE, part),
                figure=blank(),
                config=STILL,
                className="graph",
                style={"height": f"{HEIGHTS[part]}px"},
            ),
            html.P(id=id_of(PAGE, f"{part}-words"), className="heard-only"),
        ]
    return html.Section([html.H2(title), *body], className=f"sheet {part}")


def _sheet() -> Any:
    return html.Aside(
        [
            html.Div(
                [
                    html.Button("Print", type="button", className="print"),
                    html.Button("Close", id=id_of(PAGE, "close"), type="button", className="close"),
                ],
                className="sheet-bar",
            ),
            html.Div(id=id_of(PAGE, "why")),
        ],
        id=id_of(PAGE, "sheet"),
        className="why-sheet",
        hidden=True,
        role="dialog",
        **{"aria-labelledby": "why-title"},
    )


def register(app: Dash, source: Source) -> None:
    """Give the page's callbacks to ``app``."""

    @app.callback(
        output={
            name: Output(id_of(PAGE, name), "figure" if name in ("path", "trend") else "children")
            for name in (
                "alerts", "heading", "setpoints", "path", "path-words", "trend", "trend-words",
                "notices", "later", "load", "cautions", "reasons",
            )
        },
        inputs={
            "_tick": Input("tick", "n_intervals"),
            "job": Input(id_of(PAGE, "job"), "value"),
            "units": Input("units", "value"),
            "scheme": Input("scheme", "data"),
            "narrow": Input("narrow", "data"),
            "at": State(id_of(PAGE, "at"), "data"),
            "faults": State(id_of(PAGE, "faults"), "data"),
        },
    )  # fmt: skip
    def show(
        _tick: int | None,
        job: str,
        units: UnitSystem,
        scheme: str,
        narrow: bool,
        at: str | None,
        faults: list[str],
    ) -> dict[str, Any]:
        try:
            view = shift_view(
                source, job or None, datetime.fromisoformat(at) if at else None, units
            )
        except AdvisorError as error:
            return _refused(error, faults)
        if at:
            then = moment_words(view.at, view.zone)
            faults = [f"As it was known at {then}, not now.", *faults]
        return shown(view, units, ink_of(scheme), narrow, faults)

    @app.callback(
        Output(id_of(PAGE, "why"), "children"),
        Output(id_of(PAGE, "sheet"), "hidden"),
        Input({"page": PAGE, "part": "why", "key": ALL}, "n_clicks"),
        Input(id_of(PAGE, "close"), "n_clicks"),
        State(id_of(PAGE, "job"), "value"),
        State(id_of(PAGE, "at"), "data"),
        State("units", "value"),
        prevent_initial_call=True,
    )
    def answer_why(
        _asked: list[int | None], _closed: int | None, job: str, at: str | None, units: UnitSystem
    ) -> tuple[Any, Any]:
        # Cards that are drawn anew also fire this: only a real press counts.
        if not ctx.triggered or not ctx.triggered[0]["value"]:
            return no_update, no_update
        if not isinstance(ctx.triggered_id, dict):
            return [], True
        moment = datetime.fromisoformat(at) if at else None
        try:
            advice = source.current_advice(job or None, moment, units)
        except AdvisorError as error:
            return [parts.error_block(error)], False
        return why_sheet(advice, cast(Point, ctx.triggered_id["key"]), source.zone, units), False

    app.clientside_callback(
        ClientsideFunction("screens", "meet_sheet"), Input(id_of(PAGE, "sheet"), "hidden")
    )


def shown(
    view: ShiftView, units: UnitSystem, ink: Ink, narrow: bool, faults: list[str]
) -> dict[str, Any]:
    """Every part of the page for one moment."""
    return {
        "alerts": parts.alerts(view, faults),
        "heading": parts.heading(view),
        "setpoints": parts.setpoint_cards(view, units),
        "path": heat_path(view.advice, view.readings, units, ink, narrow),
        "path-words": heat_path_words(view.advice, view.readings, units),
        "trend": trend(
            view.discharge,
            view.windows,
            view.trend_start,
            view.at,
            view.zone,
            units,
            ink,
            narrow=narrow,
        ),
        "trend-words": trend_words(view.discharge, view.windows, units),
        "notices": parts.notice_list(notices(view, units)),
        "later": parts.later_table(view, units),
        "load": parts.load_table(view, units),
        "cautions": parts.caution_list(view.advice),
        "reasons": parts.reason_list(view.advice),
    }


def _refused(error: AdvisorError, faults: list[str]) -> dict[str, Any]:
    """The page where the plant's data keep it from answering."""
    unknown = html.P("Not known while there are no setpoints.", className="quiet")
    return {
        "alerts": [html.P(one, className="banner") for one in faults],
        "heading": [html.H1("No setpoints")],
        "setpoints": parts.error_block(error),
        "path": blank(),
        "path-words": "No heat path.",
        "trend": blank(),
        "trend-words": "No trend.",
        **dict.fromkeys(("notices", "later", "load", "cautions", "reasons"), unknown),
    }
