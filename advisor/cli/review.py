"""advisor review: a logged period against the advice that was in force."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING, Any

import click

from advisor.cli.asked import json_option, plant_argument

if TYPE_CHECKING:
    from zoneinfo import ZoneInfo

    from advisor.review.result import Review, Span


@click.command()
@plant_argument
@click.option("--from", "start", metavar="TIME", help="Plant time; else the log's first row.")
@click.option("--to", "end", metavar="TIME", help="Plant time; else the log's last row.")
@json_option
def review(plant: Path, start: str | None, end: str | None, as_json: bool) -> None:
    """Compare the log of PLANT with what was advised: where hot, where cold, why, what it cost.

    \b
    Examples:
      advisor review demo_plant
      advisor review demo_plant --from "2026-10-22 05:00" --to "2026-10-22 16:00" --json
    """
    from advisor.advice.open_plant import open_plant
    from advisor.cli.output import print_json
    from advisor.review.plant import log_span, review_plant
    from advisor.settings.moments import utc_of

    facts = open_plant(plant)
    with facts.records:
        first, last = log_span(facts)
        zone = facts.folder.zone
        begin = utc_of(start, zone) if start else first
        until = utc_of(end, zone) if end else last
        bar: Any = click.progressbar(
            length=100,
            label="Working out the advice of the period",
            file=click.get_text_stream("stderr"),
        )
        with bar:

            def progress(done: int, of: int) -> None:
                bar.update(round(100 * done / max(of, 1)) - bar.pos)

            found = review_plant(facts, begin, until, progress).review
    if as_json:
        print_json(found)
        return
    _print(found, zone)


def _print(found: Review, zone: ZoneInfo) -> None:
    from advisor.cli.output import print_table

    click.echo(
        f"{found.plant}, {found.start.astimezone(zone):%a %d %b %H:%M} to "
        f"{found.end.astimezone(zone):%a %d %b %H:%M %Y}\n\n{found.sentence}\n"
    )
    print_table(
        ("mix", "made", "inside", "hot", "cold", "mean", "fuel too much"),
        [
            (
                one.mix,
                f"{one.tonnes:.0f} t",
                f"{one.tonnes - one.hot_tonnes - one.cold_tonnes:.0f} t",
                f"{one.hot_tonnes:.0f} t",
                f"{one.cold_tonnes:.0f} t",
                f"{one.mean_c:.0f} °C",
                f"{_range(one.waste.fuel_kwh)} kWh",
            )
            for one in found.mixes
        ],
    )
    click.echo(
        f"\nStart-ups and mix changes, apart: {_range(found.start_up_waste.fuel_kwh)} kWh, "
        f"{_range(found.start_up_waste.money)} {found.currency}."
    )
    click.echo(f"Without advice in force: {found.no_advice_tonnes:.0f} t.\n")
    print_table(
        ("since", "where", "", "min", "t", "peak", "mix", "state", "likely cause"),
        [
            (
                f"{one.start.astimezone(zone):%a %d %H:%M}",
                one.point.replace("_", "-"),
                one.side,
                f"{one.minutes:.0f}",
                f"{one.tonnes:.0f}",
                f"{one.peak_k:.0f} K",
                one.mix,
                one.state,
                f"{one.cause}: {one.evidence}",
            )
            for one in found.excursions
        ],
    )
    click.echo(
        f"\n{found.rows_read} rows read, {found.rows_used} used, {found.rows_set_aside} set aside."
    )
    for one in found.set_aside:
        click.echo(f"  {one.signal}: {one.reason}, {one.count}")
    for caution in found.cautions:
        click.echo(f"\n{caution}")


def _range(span: Span) -> str:
    return f"{span.low:,.0f} to {span.high:,.0f}"
