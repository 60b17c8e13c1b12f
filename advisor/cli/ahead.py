"""advisor ahead: what comes: a load, a change, a silo overnight, a tank at rest, the day."""

from __future__ import annotations

from dataclasses import replace
from datetime import datetime
from pathlib import Path
from typing import TYPE_CHECKING, Any

import click

from advisor.cli.asked import json_option, plant_argument, us_option

if TYPE_CHECKING:
    from collections.abc import Callable

    from advisor.advice.facts import PlantFacts
    from advisor.units import UnitSystem


@click.group()
def ahead() -> None:
    """What comes: a load on the road, a change, a silo overnight, a tank at rest, the day.

    What is not known is asked for; nothing that decides a temperature is made up.

    \b
    Example:
      advisor ahead load demo_plant --ticket 40483
    """


def _at_option(command: Callable[..., Any]) -> Callable[..., Any]:
    words = "Plant time, such as '2026-10-23 10:10'; else now."
    return click.option("--at", "at", metavar="TIME", help=words)(command)


@ahead.command("load")
@plant_argument
@click.option("--ticket", metavar="NUMBER", help="Number of a loading ticket in the plant's files.")
@click.option("--load-out", "load_out", metavar="TEMP", help="Mix as loaded, such as '158 C'.")
@click.option("--loaded", metavar="TIME", help="When it left the silo; else --at.")
@click.option("--job", metavar="JOB", help="Code of a job; else that of the ticket or the run.")
@_at_option
@us_option
@json_option
def load(
    plant: Path, ticket: str | None, load_out: str | None, loaded: str | None,
    job: str | None, at: str | None, units: UnitSystem, as_json: bool,
) -> None:  # fmt: skip
    """Will this load be good at the paver, how long may it wait, how long can it be rolled?

    \b
    Examples:
      advisor ahead load demo_plant --ticket 40483
      advisor ahead load demo_plant --job J04 --load-out "172 C" --loaded "2026-10-23 10:00"
    """
    from advisor.advice.coming_load import load_ahead
    from advisor.advice.situation import gather_situation
    from advisor.advice.tickets import ticket_told
    from advisor.cli.ahead_words import print_load
    from advisor.errors import MissingInput

    with _opened(plant, at, units) as (facts, now):
        told = ticket_told(facts.folder, ticket) if ticket else None
        when = _moment(loaded, facts) if loaded else told.loaded_at if told else now
        out_c = _number(load_out, "temperature", "load-out") if load_out else None
        if out_c is None and told is not None:
            out_c = told.load_out_c
        if out_c is None:
            raise MissingInput.of(
                "no-load-out",
                "The temperature of the load is not known.",
                "Give --load-out, or the --ticket it stands on.",
                field="load-out",
            )
        chosen = job or (told.job if told else None)
        # Known is what was known when it was loaded; the weather is that of the road.
        situation = gather_situation(replace(facts, known_at=max(now, when)), when, chosen)
        found = load_ahead(situation, out_c, when)
    _show(found, as_json, lambda: print_load(found, facts.folder.zone, units))


@ahead.command("change")
@plant_argument
@click.option("--job", metavar="JOB", help="Code of a job; else the one that runs.")
@_at_option
@us_option
@json_option
def change(plant: Path, job: str | None, at: str | None, units: UnitSystem, as_json: bool) -> None:
    """When is a change made now felt at the trucks and at the paver?

    \b
    Example:
      advisor ahead change demo_plant --job J02
    """
    from advisor.advice.change_felt import change_felt
    from advisor.advice.situation import gather_situation
    from advisor.cli.ahead_words import print_change

    with _opened(plant, at, units) as (facts, now):
        found = change_felt(gather_situation(facts, now, job))
    _show(found, as_json, lambda: print_change(found, units))


@ahead.command("silo")
@plant_argument
@click.argument("silo", metavar="SILO")
@click.option("--until", required=True, metavar="TIME", help="When it is wanted: '06:00' or dated.")
@click.option("--stored", metavar="TEMP", help="Mix in it now; else the silo's own reading.")
@click.option("--mass", metavar="MASS", help="Mix in it, such as '80 t'; else the log's.")
@click.option("--air", metavar="TEMP", help="Mean air temperature; else the forecast.")
@click.option(
    "--filled", metavar="TIME", help="When the oldest mix went in; else counted from now."
)
@_at_option
@us_option
@json_option
def silo(
    plant: Path, silo: str, until: str, stored: str | None, mass: str | None, air: str | None,
    filled: str | None, at: str | None, units: UnitSystem, as_json: bool,
) -> None:  # fmt: skip
    """What is the mix in SILO at a time, and how many hours are left?

    \b
    Example:
      advisor ahead silo demo_plant "silo 1" --until 06:00 --mass "80 t" --at "2026-10-23 15:30"
    """
    from advisor.advice.silo_hold import silo_ahead
    from advisor.cli.ahead_words import print_silo

    with _opened(plant, at, units) as (facts, now):
        found = silo_ahead(
            facts, silo, now, _moment(until, facts, now),
            stored_c=_number(stored, "temperature", "stored"),
            mass_kg=_number(mass, "mass", "mass"),
            air_c=_number(air, "temperature", "air"),
            filled_at=_moment(filled, facts) if filled else None,
        )  # fmt: skip
    _show(found, as_json, lambda: print_silo(found, facts.folder.zone, units))


@ahead.command("tank")
@plant_argument
@click.argument("tank", metavar="TANK")
@click.option("--until", required=True, metavar="TIME", help="When it is wanted again.")
@click.option("--now", "now_c", metavar="TEMP", help="Binder now; else the tank's own reading.")
@click.option("--wanted", metavar="TEMP", help="Temperature wanted then; else that of now.")
@click.option("--low", metavar="TEMP", help="The lowest it may cool to; else the binder's own.")
@click.option("--mass", metavar="MASS", help="Binder in it, such as '40 t'; else by deliveries.")
@click.option("--air", metavar="TEMP", help="Mean air temperature; else the forecast.")
@click.option("--price", type=float, metavar="MONEY", help="What a kWh of heat costs.")
@_at_option
@us_option
@json_option
def tank(
    plant: Path, tank: str, until: str, now_c: str | None, wanted: str | None, low: str | None,
    mass: str | None, air: str | None, price: float | None, at: str | None, units: UnitSystem,
    as_json: bool,
) -> None:  # fmt: skip
    """Hold TANK while the plant rests, or set it back; when to reheat, and what it saves.

    \b
    Example:
      advisor ahead tank demo_plant "tank 2" --at "2026-10-23 15:30" --until "2026-10-26 05:30"
                    --air "7 C" --price 0.09
    """
    from advisor.advice.tank_rest import tank_ahead
    from advisor.cli.ahead_words import print_tank
    from advisor.errors import FaultyInput

    if price is not None and not 0 < price < 1000:
        raise FaultyInput.of(
            "price", "A kWh of heat costs more than nothing.", "Give --price as 0.09.",
            field="price", value=f"{price:g}",
        )  # fmt: skip
    with _opened(plant, at, units) as (facts, now):
        found = tank_ahead(
            facts, tank, now, _moment(until, facts, now),
            now_c=_number(now_c, "temperature", "now"),
            wanted_c=_number(wanted, "temperature", "wanted"),
            low_c=_number(low, "temperature", "low"),
            mass_kg=_number(mass, "mass", "mass"),
            air_c=_number(air, "temperature", "air"),
            price_per_kwh=price,
        )  # fmt: skip
    _show(found, as_json, lambda: print_tank(found, facts.folder.zone, units))


@ahead.command("day")
@plant_argument
@click.option("--job", metavar="JOB", help="Code of a job; else the one that runs.")
@click.option("--hours", type=int, default=10, show_default=True, help="Hours to look ahead.")
@_at_option
@us_option
@json_option
def day(
    plant: Path, job: str | None, hours: int, at: str | None, units: UnitSystem, as_json: bool
) -> None:
    """What to run hour by hour as the weather changes, and when the last good load leaves.

    \b
    Example:
      advisor ahead day demo_plant --job J07 --hours 12
    """
    from advisor.advice.coming_day import day_ahead
    from advisor.cli.ahead_words import print_day

    with _opened(plant, at, units) as (facts, now):
        found = day_ahead(facts, now, job, hours)
    _show(found, as_json, lambda: print_day(found, facts.folder.zone, units))


class _opened:
    """The plant's facts and the moment asked about, closed afterwards."""

    def __init__(self, plant: Path, at: str | None, units: UnitSystem) -> None:
        self._asked = plant, at, units

    def __enter__(self) -> tuple[PlantFacts, datetime]:
        from advisor.advice.open_plant import moment_now, open_plant

        plant, at, units = self._asked
        self._facts = replace(open_plant(plant, latest_only=True), units=units)
        try:
            return self._facts, moment_now(self._facts.folder, at)
        except BaseException:
            self._facts.records.close()
            raise

    def __exit__(self, *error: object) -> None:
        self._facts.records.close()


def _moment(text: str, facts: PlantFacts, after: datetime | None = None) -> datetime:
    """The moment of ``text``; with ``after`` a bare time of day is the next one."""
    from advisor.settings.moments import next_moment, utc_of

    zone = facts.folder.zone
    return utc_of(text, zone) if after is None else next_moment(text, zone, after)


def _number(text: str | None, kind: str, field: str) -> float | None:
    """The quantity ``text`` in the inside unit, or None; its fault names the option."""
    from advisor.errors import FaultyInput
    from advisor.units import parse_quantity

    if text is None:
        return None
    try:
        return parse_quantity(text, kind)
    except FaultyInput as error:
        raise FaultyInput(*(replace(fault, field=field) for fault in error.faults)) from None


def _show(found: object, as_json: bool, print_it: Callable[[], None]) -> None:
    from advisor.cli.output import print_json

    if as_json:
        print_json(found)
    else:
        print_it()
