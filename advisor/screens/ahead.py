"""The page of what comes: the day hour by hour, this load, the silo overnight, a tank at rest."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from datetime import datetime, timedelta
from typing import Any

from dash import Dash, Input, Output, State, dcc, html

from advisor.advice.coming_day import DayAhead, day_ahead
from advisor.advice.coming_load import LoadAhead, load_ahead
from advisor.advice.facts import PlantFacts
from advisor.advice.silo_hold import SiloAhead, silo_ahead
from advisor.advice.situation import gather_situation
from advisor.advice.tank_rest import TankAhead, tank_ahead
from advisor.advice.tickets import ticket_told
from advisor.errors import AdvisorError, FaultyInput, MissingInput
from advisor.figures.base import STILL, blank
from advisor.figures.hours import coming_hours, coming_hours_words
from advisor.figures.ink import ink_of
from advisor.screens import ahead_parts as parts
from advisor.screens.entry import choice, section
from advisor.screens.ids import id_of
from advisor.screens.query import shift_query
from advisor.screens.source import Source
from advisor.settings.moments import next_moment
from advisor.settings.shifts import next_start
from advisor.units import UnitSystem, parse_quantity

PAGE = "ahead"
TITLE = "Ahead"
PATH = "/ahead"
HOURS = 12
FIGURE_PX = 190
_RECENT = timedelta(hours=4)
_WEEKEND = timedelta(hours=36)
_MORNING = "06:00"  # the hour the silo is asked about until another is written


def layout(source: Source, search: str | None) -> Any:
    """The page for an address such as '/ahead?job=J04&at=2026-10-23T10:10'."""
    jobs = source.jobs()
    asked = shift_query(search, tuple(one.code for one in jobs), source.zone)
    at = asked.at or source.now()
    options = [{"label": "the job that runs", "value": ""}] + [
        {"label": f"{one.name}, {one.mix} ({one.code})", "value": one.code} for one in jobs
    ]
    tickets = [one for one in source.tickets(at - _RECENT, at) if one.load_out_c is not None]
    loads = [
        {"label": f"{one.ticket}, {one.truck} {one.time.astimezone(source.zone):%H:%M}",
         "value": one.ticket}
        for one in reversed(tickets)
    ]  # fmt: skip
    newest = loads[0]["value"] if loads else None
    names = source.ask("names", at, _names)
    return html.Div(
        [
            dcc.Store(id=id_of(PAGE, "at"), data=asked.at.isoformat() if asked.at else None),
            html.Div([html.P(one, className="banner") for one in asked.faults], className="alerts"),
            html.Div(
                [
                    _day(options, asked.job or ""),
                    section(PAGE, "hours", "Hour by hour, at discharge"),
                ],
                className="column",
            ),
            html.Div(
                [
                    _form("load", "This load", [
                        choice(PAGE, "Ticket", "ticket", loads, newest),
                    ]),
                    _form("silo", "Silo overnight", [
                        choice(PAGE, "Silo", "silo-name", _named(names["silos"]), names["silo"]),
                        _entry("Until", "silo-until", _MORNING, "06:00, or 2026-10-24 06:00"),
                        _entry("Mix in it", "silo-mass", "", "by the log, or 80 t"),
                        _entry("Its temperature", "silo-stored", "", "by the log, or 160 C"),
                    ]),
                    _form("tank", "Tank over the weekend", [
                        choice(PAGE, "Tank", "tank-name", _named(names["tanks"]), names["tank"]),
                        _entry("Wanted again", "tank-until", names["monday"], "2026-10-26 05:30"),
                        _entry("Mean air", "tank-air", "", "by the forecast, or 7 C"),
                        _entry("Price of a kWh", "tank-price", "", "not priced, or 0.09"),
                    ]),
                ],
                className="column aside",
            ),
        ],
        className="page ahead",
    )  # fmt: skip


def register(app: Dash, source: Source) -> None:
    """Give the page's callbacks to ``app``."""

    @app.callback(
        output={
            "heading": Output(id_of(PAGE, "heading"), "children"),
            "figure": Output(id_of(PAGE, "figure"), "figure"),
            "words": Output(id_of(PAGE, "figure-words"), "children"),
            "hours": Output(id_of(PAGE, "hours"), "children"),
        },
        inputs={
            "job": Input(id_of(PAGE, "job"), "value"),
            "units": Input("units", "value"),
            "scheme": Input("scheme", "data"),
            "narrow": Input("narrow", "data"),
            "at": State(id_of(PAGE, "at"), "data"),
        },
    )
    def show_day(
        job: str, units: UnitSystem, scheme: str, narrow: bool, at: str | None
    ) -> dict[str, Any]:
        moment = _moment(source, at)

        def work(facts: PlantFacts) -> DayAhead:
            return day_ahead(replace(facts, units=units), moment, job or None, HOURS)

        try:
            day = source.ask(("day", job, units), moment, work)
        except AdvisorError as error:
            refused = parts.refusal(error)
            return {"heading": refused, "figure": blank(), "words": "", "hours": ""}
        return {
            "heading": parts.day_heading(day, source.zone),
            "figure": coming_hours(
                day.hours, day.last_good_at, source.zone, units, ink_of(scheme), narrow
            ),
            "words": coming_hours_words(day.hours, source.zone),
            "hours": parts.day_table(day, source.zone, units),
        }

    @app.callback(
        Output(id_of(PAGE, "load"), "children"),
        Input(id_of(PAGE, "ticket"), "value"),
        Input("units", "value"),
        State(id_of(PAGE, "at"), "data"),
    )
    def show_load(ticket: str | None, units: UnitSystem, at: str | None) -> Any:
        if not ticket:
            return html.P("No load left the silo in the last four hours.", className="quiet")
        return _answered(
            lambda: source.ask(
                ("load", ticket, units),
                _moment(source, at),
                lambda facts: _load(replace(facts, units=units), ticket),
            ),
            lambda load: parts.load_table(load, source.zone, units),
        )

    @app.callback(
        Output(id_of(PAGE, "silo"), "children"),
        Input(id_of(PAGE, "silo-name"), "value"),
        Input(id_of(PAGE, "silo-until"), "value"),
        Input(id_of(PAGE, "silo-mass"), "value"),
        Input(id_of(PAGE, "silo-stored"), "value"),
        Input("units", "value"),
        State(id_of(PAGE, "at"), "data"),
    )
    def show_silo(
        silo: str | None, until: str, mass: str, stored: str, units: UnitSystem, at: str | None
    ) -> Any:
        if not silo:
            return html.P("This plant has no silo.", className="quiet")
        moment = _moment(source, at)

        def work(facts: PlantFacts) -> SiloAhead:
            return silo_ahead(
                replace(facts, units=units), silo, moment, _until(until, source, moment),
                mass_kg=_quantity(mass, "mass", "Mix in it"),
                stored_c=_quantity(stored, "temperature", "Its temperature"),
            )  # fmt: skip

        return _answered(
            lambda: source.ask(("silo", silo, until, mass, stored, units), moment, work),
            lambda found: parts.silo_table(found, source.zone, units),
        )

    @app.callback(
        Output(id_of(PAGE, "tank"), "children"),
        Input(id_of(PAGE, "tank-name"), "value"),
        Input(id_of(PAGE, "tank-until"), "value"),
        Input(id_of(PAGE, "tank-air"), "value"),
        Input(id_of(PAGE, "tank-price"), "value"),
        Input("units", "value"),
        State(id_of(PAGE, "at"), "data"),
    )
    def show_tank(
        tank: str, until: str, air: str, price: str, units: UnitSystem, at: str | None
    ) -> Any:
        moment = _moment(source, at)

        def work(facts: PlantFacts) -> TankAhead:
            return tank_ahead(
                replace(facts, units=units), tank, moment, _until(until, source, moment),
                air_c=_quantity(air, "temperature", "Mean air"),
                price_per_kwh=_price(price),
            )  # fmt: skip

        return _answered(
            lambda: source.ask(("tank", tank, until, air, price, units), moment, work),
            lambda found: parts.tank_table(found, source.zone, units),
        )


def _answered(ask: Any, show: Any) -> Any:
    """What ``show`` makes of the answer, or what is missing for one."""
    try:
        return show(ask())
    except AdvisorError as error:
        return parts.refusal(error)


def _load(facts: PlantFacts, ticket: str) -> LoadAhead:
    told = ticket_told(facts.folder, ticket)
    if told.load_out_c is None:
        raise MissingInput.of("no-load-out", f"Ticket {ticket} tells no temperature.")
    situation = gather_situation(facts, told.loaded_at, told.job)
    return load_ahead(situation, told.load_out_c, told.loaded_at)


def _names(facts: PlantFacts) -> dict[str, Any]:
    """What the choices of the page offer first."""
    folder, at = facts.folder, facts.known_at
    assert at is not None  # noqa: S101 - a page always asks as of a moment
    local = at.astimezone(folder.zone)

    def start(after: timedelta) -> str:
        found = next_start(folder.plant.shifts, local + after)
        return f"{found.astimezone(folder.zone):%Y-%m-%d %H:%M}" if found else ""

    fullest = max(
        folder.plant.silos,
        key=lambda one: (
            (facts.latest(one.content_signal, at) or (0.0, 0.0))[0] if one.content_signal else 0.0
        ),
        default=None,
    )
    run = facts.run_at(at)
    return {
        "silos": [one.name for one in folder.plant.silos],
        "silo": fullest.name if fullest else None,
        "tanks": [one.name for one in folder.tanks],
        "tank": run.fact.tank if run else folder.tanks[0].name,
        "monday": start(_WEEKEND),
    }


def _moment(source: Source, at: str | None) -> datetime:
    return datetime.fromisoformat(at) if at else source.now()


def _until(text: str | None, source: Source, after: datetime) -> datetime:
    if not (text or "").strip():
        raise MissingInput.of("no-until", "Say until when: '06:00', or a date and a time.")
    return next_moment(str(text), source.zone, after)


def _quantity(text: str | None, kind: str, field: str) -> float | None:
    if not (text or "").strip():
        return None
    try:
        return parse_quantity(str(text), kind)
    except FaultyInput as error:
        raise FaultyInput(*(replace(fault, field=field) for fault in error.faults)) from None


def _price(text: str | None) -> float | None:
    if not (text or "").strip():
        return None
    try:
        price = float(str(text))
    except ValueError:
        price = 0.0
    if not 0.0 < price < 1000.0:
        raise FaultyInput.of(
            "price", "That is no price of a kWh.", "Write it as 0.09.", field="Price of a kWh",
            value=str(text),
        )  # fmt: skip
    return price


def _named(names: Sequence[str]) -> list[dict[str, str]]:
    return [{"label": one, "value": one} for one in names]


def _day(options: list[dict[str, str]], job: str) -> Any:
    return html.Section(
        [
            html.Div(
                [
                    html.Div(id=id_of(PAGE, "heading"), className="heading"),
                    choice(PAGE, "Job", "job", options, job),
                ],
                className="top",
            ),
            dcc.Graph(
                id=id_of(PAGE, "figure"),
                figure=blank(),
                config=STILL,
                className="graph",
                style={"height": f"{FIGURE_PX}px"},
            ),
            html.P(id=id_of(PAGE, "figure-words"), className="heard-only"),
        ],
        className="sheet day",
    )


def _form(part: str, title: str, entries: list[Any]) -> Any:
    return html.Section(
        [
            html.H2(title),
            html.Div(entries, className="entries"),
            html.Div(id=id_of(PAGE, part), className="answer"),
        ],
        className=f"sheet {part}",
    )


def _entry(label: str, part: str, value: str, example: str) -> Any:
    return html.Div(
        [
            html.Label(label, htmlFor=id_of(PAGE, part)),
            dcc.Input(
                id=id_of(PAGE, part), value=value, type="text", debounce=True, placeholder=example
            ),
        ],
        className="choose",
    )
