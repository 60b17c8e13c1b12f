"""advisor review: a logged period against the advice that was in force."""

from __future__ import annotations

import sys
from dataclasses import replace
from pathlib import Path
from typing import TYPE_CHECKING

import click

from advisor.cli.asked import json_option, plant_argument, us_option

if TYPE_CHECKING:
    from datetime import datetime
    from zoneinfo import ZoneInfo

    from advisor.review.result import Excursion, Review, Span
    from advisor.units import UnitSystem

_WIDE = 96  # of the column that says why


@click.command()
@plant_argument
@click.option("--from", "start", metavar="TIME", help="Plant time; else the log's first row.")
@click.option("--to", "end", metavar="TIME", help="Plant time; else the log's last row.")
@click.option("--loads", "loads", is_flag=True, help="Also list the loads outside their window.")
@click.option(
    "--set-aside",
    "not_used",
    type=click.Path(dir_okay=False, path_type=Path),
    help="Write the rows of all exports that were not used, and why, to this CSV file.",
)
@us_option
@json_option
def review(
    plant: Path,
    start: str | None,
    end: str | None,
    loads: bool,
    not_used: Path | None,
    units: UnitSystem,
    as_json: bool,
) -> None:
    """Compare the log of PLANT with what was advised: where hot, where cold, why, what it cost.

    \b
    Examples:
      advisor review demo_plant
      advisor review demo_plant --from "2026-10-22 05:00" --to "2026-10-22 16:00" --json
    """
    from advisor.advice.open_plant import open_plant
    from advisor.cli.output import print_json
    from advisor.errors import FaultyInput
    from advisor.logs import write_set_aside
    from advisor.review.plant import log_span, review_plant

    facts = replace(open_plant(plant, latest_only=True), units=units)
    with facts.records:
        first, last = log_span(facts)
        zone = facts.folder.zone
        begin = _moment(start, "--from", zone) or first
        until = _moment(end, "--to", zone) or last
        if until <= begin:
            raise FaultyInput.of(
                "period-empty",
                f"The period ends at {until.astimezone(zone):%Y-%m-%d %H:%M}, not after its begin.",
                f"Give a time after {begin.astimezone(zone):%Y-%m-%d %H:%M} with --to.",
                field="--to",
                value=end or "",
            )
        with click.progressbar(
            length=100, label="Working out the advice of the period", file=sys.stderr
        ) as bar:

            def progress(done: int, of: int) -> None:
                bar.update(round(100 * done / max(of, 1)) - bar.pos)

            made = review_plant(facts, begin, until, progress)
    found = made.review
    if not_used:
        write_set_aside(made.reports, not_used)
    if as_json:
        print_json(found)
        return
    _print(found, zone, units, loads)


def _moment(text: str | None, option: str, zone: ZoneInfo) -> datetime | None:
    """The moment written after ``option``; None where nothing is."""
    from advisor.errors import FaultyInput
    from advisor.settings.moments import utc_of

    if text is None:
        return None
    try:
        return utc_of(text, zone)
    except FaultyInput as error:
        raise FaultyInput(*(replace(one, field=option) for one in error.faults)) from None


def _print(found: Review, zone: ZoneInfo, units: UnitSystem, loads: bool) -> None:
    from advisor.cli.output import print_table
    from advisor.review.ranking import cause_shares
    from advisor.units import shown

    click.echo(
        f"{found.plant}, {found.start.astimezone(zone):%a %d %b %H:%M} to "
        f"{found.end.astimezone(zone):%a %d %b %H:%M %Y}\n\n{found.sentence}\n"
    )

    def mass(tonnes: float) -> str:
        return shown(1000.0 * tonnes, "mass", units, decimals=0)

    print_table(
        ("mix", "made", "inside", "hot", "cold", "no advice", "mean", "fuel too much"),
        [
            (
                one.mix,
                mass(one.tonnes),
                mass(one.inside_tonnes),
                mass(one.hot_tonnes),
                mass(one.cold_tonnes),
                mass(one.no_advice_tonnes),
                shown(one.mean_c, "temperature", units),
                _heat(one.waste.fuel_kwh, units),
            )
            for one in found.mixes
        ],
    )
    click.echo(
        f"\nStart-ups and mix changes, apart: {_heat(found.start_up_waste.fuel_kwh, units)}, "
        f"{_range(found.start_up_waste.money)} {found.currency}.\n"
    )
    for none in found.no_advice:
        click.echo(f"No advice for {mass(none.tonnes)} of {none.mix}: {none.why}.")
    if found.no_advice:
        click.echo()
    causes = cause_shares(found.excursions)
    if causes:
        click.echo("Outside the window at the drum, by likely cause:")
        print_table(
            ("likely cause", "times", "min", "hot", "cold", "fuel too much"),
            [
                (
                    one.cause,
                    str(one.count),
                    f"{one.minutes:.0f}",
                    mass(one.hot_tonnes),
                    mass(one.cold_tonnes),
                    _heat(one.waste.fuel_kwh, units),
                )
                for one in causes
            ],
        )
        click.echo()
    at_drum = [one for one in found.excursions if one.point == "discharge"]
    of_loads = [one for one in found.excursions if one.point != "discharge"]
    if at_drum:
        click.echo("Outside the window at the drum, one by one:")
        _print_excursions(at_drum, zone, units)
    if of_loads and loads:
        click.echo("\nLoads outside their window:")
        _print_excursions(of_loads, zone, units)
    elif of_loads:
        click.echo(f"\nLoads outside their window: {len(of_loads)} stretches; --loads lists them.")
    click.echo(
        f"\nRows of the log in this period: {found.rows_read} read, {found.rows_used} used, "
        f"{found.rows_set_aside} set aside. Not used, or not believed:"
    )
    for one in found.set_aside:
        click.echo(f"  {one.signal}: {one.reason}, {one.count}")
    for caution in found.cautions:
        click.echo(f"\n{caution}")


def _print_excursions(found: list[Excursion], zone: ZoneInfo, units: UnitSystem) -> None:
    import textwrap

    from advisor.cli.output import print_table
    from advisor.units import shown

    print_table(
        ("since", "where", "", "min", "mass", "peak", "mix", "likely cause"),
        [
            (
                f"{one.start.astimezone(zone):%a %d %H:%M}",
                one.point.replace("_", "-"),
                one.side,
                f"{one.minutes:.0f}",
                shown(1000.0 * one.tonnes, "mass", units, decimals=0),
                shown(one.peak_k, "temperature_delta", units, decimals=0),
                one.mix,
                textwrap.shorten(f"{one.cause}: {one.evidence}", _WIDE, placeholder=" ..."),
            )
            for one in found
        ],
    )


def _heat(kwh: Span, units: UnitSystem) -> str:
    from advisor.units import shown_number, shown_unit

    low, high = (shown_number(3.6e6 * one, "energy", units) for one in (kwh.low, kwh.high))
    places = 0 if units == "si" else 1
    return f"{low:,.{places}f} to {high:,.{places}f} {shown_unit('energy', units)}"


def _range(span: Span) -> str:
    return f"{span.low:,.0f} to {span.high:,.0f}"
