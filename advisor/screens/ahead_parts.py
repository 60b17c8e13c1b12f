"""The pieces of the page of what comes, each from an answer to components."""

from __future__ import annotations

from collections.abc import Sequence
from zoneinfo import ZoneInfo

from dash import html

from advisor.advice.bands import Band
from advisor.advice.coming_day import DayAhead, HourAhead
from advisor.advice.coming_load import LONGEST_WAIT_S, LoadAhead
from advisor.advice.result import Caution
from advisor.advice.silo_hold import SiloAhead
from advisor.advice.tank_rest import TankAhead
from advisor.errors import AdvisorError
from advisor.figures.base import degrees
from advisor.screens.words import (
    clock_words,
    mass_words,
    moment_words,
    temperature_words,
    unit_words,
)
from advisor.units import UnitSystem, shown

Parts = list[object]

_SHORT = 24  # longer words than these break over lines


def day_heading(day: DayAhead, zone: ZoneInfo) -> Parts:
    """The answer of the day in a sentence."""
    if day.last_good_at is not None:
        words = f"Last good load-out {clock_words(day.last_good_at, zone)}"
    elif day.opens_at is not None:
        words = f"No window now; one opens for loads from {clock_words(day.opens_at, zone)} on"
    elif any(one.target_c is not None for one in day.hours):
        words = "A window in every hour"
    else:
        words = "No window in these hours"
    parts: Parts = [
        html.H1(f"{words}: {day.job_name}, {day.mix}"),
    ]
    if day.last_words:
        parts.append(html.Span(_sentence(day.last_words), className="quiet"))
    return parts


def day_table(day: DayAhead, zone: ZoneInfo, units: UnitSystem) -> object:
    """The hours one by one, and who told their weather."""
    heads = ("load-out", "laid", "low", "target", "high", "rolling, min", "weather when laid")
    told = ", ".join(dict.fromkeys(one.weather_from for one in day.hours if one.weather_from))
    return [
        html.Div(
            html.Table(
                [
                    html.Caption(f"at discharge, {unit_words(units)}", className="note"),
                    html.Thead(
                        html.Tr([
                            html.Th(one, scope="col",
                                    className="number" if 2 <= place <= 4 else "")
                            for place, one in enumerate(heads)
                        ])
                    ),
                    html.Tbody(
                        [
                            _hour(one, zone, units, told=before.why_none if before else "")
                            for before, one in zip((None, *day.hours), day.hours, strict=False)
                        ]
                    ),
                ]
            ),
            className="scrolled",
        ),
        html.P(
            f"Rolling: minutes from laying to its end at the target, low to high; "
            f"{day.rolling_wanted_min:.0f} wanted. Weather told by: {told or 'nobody'}.",
            className="note",
        ),
        _cautions(day.cautions),
    ]  # fmt: skip


def load_table(load: LoadAhead, zone: ZoneInfo, units: UnitSystem) -> object:
    """How one load arrives, how long it may wait and be rolled."""
    early, usual, late = (clock_words(one, zone) for one in load.arrives_at)
    wait = f"{load.wait_safe_min:.0f} min" if load.wait_safe_min >= 1.0 else "not at all"
    need = temperature_words(load.need_c, units)
    return [
        _rows(
            [
                (f"Left {clock_words(load.loaded_at, zone)} at",
                 temperature_words(load.load_out_c, units)),
                ("Arrives", f"{usual} ({early} – {late})"),
                ("As it arrives", _temperatures(load.arrives_c, units)),
                (f"After {load.planned_wait_min:.0f} min wait",
                 _temperatures(load.delivered_c, units)),
                (f"Wanted: {load.need_set_by.name}", need),
                (f"May wait, {load.confidence:.0%} sure", wait),
                ("May wait, 5 – 95 %", _minutes(load.wait_min)),
                (f"Time to roll, {load.rolling_wanted_min:.0f} wanted",
                 _minutes(load.rolling_min)),
                (f"Colder than {need}, unmixed", f"{load.cold_share:.0%} of the load"),
                ("Coldest crust", temperature_words(load.crust_c, units)),
            ]
        ),
        _cautions(load.cautions[1:]),
    ]  # fmt: skip


def silo_table(silo: SiloAhead, zone: ZoneInfo, units: UnitSystem) -> object:
    """What mix in a silo will be, and the hours left."""
    rows = [
        (f"{mass_words(silo.mass_kg / 1000, units)} of {silo.mix} now",
         f"{temperature_words(silo.stored_c, units)} ({silo.stored_told_by})"),
        (f"All of it, {moment_words(silo.until, zone)}", _temperatures(silo.mean_c, units)),
        ("First out of the cone", _temperatures(silo.first_out_c, units)),
        ("Crust at the wall", _temperatures(silo.wall_c, units)),
    ]  # fmt: skip
    if silo.cone_off_c is not None:
        rows.append(("First out, cone heating failed", _temperatures(silo.cone_off_c, units)))
    needed = (
        (f"{silo.needed_for} needs at load-out", temperature_words(silo.needed_c, units))
        if silo.needed_c is not None
        else ("The next job needs", _sentence(silo.needed_for))
    )
    left = (
        f"{silo.rule_left_h:.1f} h"
        if silo.rule_left_h >= 0
        else f"over by {-silo.rule_left_h:.1f} h"
    )
    since = "from now" if silo.counted_from_now else f"from {clock_words(silo.filled_at, zone)}"
    rows += [needed, (f"Left then of {silo.rule_h:.0f} h allowed, {since}", left)]
    return [
        _rows(rows),
        html.P(f"The hours are a rule ({silo.rule_source}), no model.", className="note"),
        _cautions(silo.cautions[1:]),
    ]


def tank_table(tank: TankAhead, zone: ZoneInfo, units: UnitSystem) -> object:
    """Holding a tank against setting it back."""

    def heat(band: Band) -> str:
        return _three(band, lambda one: shown(one * 3.6e6, "energy", units).split(" ")[0]) + (
            " " + shown(0.0, "energy", units).split(" ")[1]
        )

    rows = [
        (f"{mass_words(tank.mass_kg / 1000, units)} of {tank.binder}",
         f"{temperature_words(tank.now_c, units)} ({tank.now_told_by})"),
        ("Hold: heat", heat(tank.hold_kwh)),
        ("Set back: heat", heat(tank.setback_kwh)),
        ("Saved", heat(tank.saved_kwh)),
    ]  # fmt: skip
    if tank.saved_money is not None and tank.hold_money is not None:
        rows.append((
            f"Hold · saved, {tank.currency}",
            f"{tank.hold_money.usual:.0f} · {_three(tank.saved_money, '{:.0f}'.format)}",
        ))  # fmt: skip
    else:
        rows.append(("Cost", "not priced"))
    if tank.reaches:
        rows.append(("Heater on again at", moment_words(tank.reheat_at, zone)))
    rows += [
        ("Lowest on the way", _temperatures(tank.lowest_c, units)),
        (f"Not under, {tank.low_set_by}", temperature_words(tank.low_c, units)),
    ]
    return [html.P(tank.advised), _rows(rows), _cautions(tank.cautions[1:])]


def refusal(error: AdvisorError) -> object:
    """What is missing or wrong, each with what to do."""
    return html.Div([html.P(str(fault), className="asked") for fault in error.faults], role="alert")


def _hour(one: HourAhead, zone: ZoneInfo, units: UnitSystem, told: str) -> object:
    """One hour; why it has no window is said once, not again where ``told`` said it."""

    def number(value: float | None) -> str:
        return "" if value is None else degrees(value, units)

    rolling = (
        f"{one.rolling_low_min:.0f} – {one.rolling_high_min:.0f}"
        if one.rolling_low_min is not None and one.rolling_high_min is not None
        else ""
    )
    target: object = number(one.target_c) if one.target_c is not None else "none"
    weather: Parts = [one.weather]
    if one.target_c is None and one.why_none != told:
        weather.append(html.Span(f" {_sentence(one.why_none)}", className="quiet"))
    return html.Tr(
        [
            html.Th(clock_words(one.load_out_at, zone), scope="row"),
            html.Td(clock_words(one.laid_at, zone), className="short"),
            html.Td(number(one.low_c), className="number"),
            html.Td(html.B(target), className="number"),
            html.Td(number(one.high_c), className="number"),
            html.Td(rolling, className="short"),
            html.Td(weather),
        ]
    )


def _rows(rows: Sequence[tuple[str, str]]) -> object:
    return html.Table(
        html.Tbody(
            [
                html.Tr(
                    [
                        html.Th(name, scope="row"),
                        html.Td(words, className="number" if len(words) <= _SHORT else "words"),
                    ]
                )
                for name, words in rows
            ]
        )
    )


def _three(band: Band, words: object) -> str:
    low, usual, high = (words(one) for one in (band.low, band.usual, band.high))  # type: ignore[operator]
    return usual if low == high else f"{usual} ({low} – {high})"


def _temperatures(band: Band, units: UnitSystem) -> str:
    return _three(band, lambda one: degrees(one, units)) + f" {unit_words(units)}"


def _minutes(band: Band) -> str:
    most = LONGEST_WAIT_S / 60.0

    def words(one: float) -> str:
        return f"over {most:.0f}" if one >= most else f"{one:.0f}"

    low, high = words(band.low), words(band.high)
    return f"{low} min" if low == high else f"{low} – {high} min"


def _cautions(cautions: Sequence[Caution]) -> object:
    return html.Ul([html.Li(one.text) for one in cautions], className="cautions")


def _sentence(words: str) -> str:
    return words[:1].upper() + words[1:].rstrip(".") + "." if words else ""
