"""advisor setpoints: what to run now, between which limits, and why."""

from __future__ import annotations

from dataclasses import replace
from pathlib import Path
from typing import TYPE_CHECKING

import click

from advisor.cli.asked import json_option, plant_argument, us_option

if TYPE_CHECKING:
    from zoneinfo import ZoneInfo

    from advisor.advice.result import Advice, Limit
    from advisor.units import UnitSystem


@click.command()
@plant_argument
@click.option("--at", "at", metavar="TIME", help="Plant time, such as '2026-10-23 10:10'.")
@click.option("--job", "job", metavar="JOB", help="Code of a job; else the one that runs.")
@click.option("--tank", "tank", metavar="TANK", help="Binder tank; else that of the order sheet.")
@us_option
@json_option
def setpoints(
    plant: Path, at: str | None, job: str | None, tank: str | None, units: UnitSystem, as_json: bool
) -> None:
    """Advise temperatures for PLANT: low, target and high at every point, and why.

    Without --at it is now; an invented plant is shown at its own time. Nothing is written to any
    controller.

    \b
    Examples:
      advisor setpoints demo_plant
      advisor setpoints demo_plant --job J08 --at "2026-10-23 10:10"
    """
    from advisor.advice.advise import advise
    from advisor.advice.open_plant import moment_now, open_plant
    from advisor.advice.situation import gather_situation
    from advisor.cli.output import print_json

    facts = open_plant(plant, latest_only=True)
    with facts.records:
        moment = moment_now(facts.folder, at)
        advice = advise(gather_situation(replace(facts, units=units), moment, job, tank))
    if as_json:
        print_json(advice)
        return
    _print(advice, facts.folder.zone, units)


def _print(advice: Advice, zone: ZoneInfo, units: UnitSystem) -> None:
    from advisor.cli.output import print_table
    from advisor.units import shown

    at = advice.at.astimezone(zone)
    click.echo(f"{advice.plant}: {advice.mix} {advice.mix_name}, {advice.tank}")
    click.echo(f"Job {advice.job} {advice.job_name}; {at:%a %d %b %Y %H:%M %Z}")
    if advice.missing:
        click.echo("\nNo advice: something that decides a temperature is not known.")
        for sentence in advice.missing:
            click.echo(f"  {sentence}")
        return
    if advice.clash:
        _print_clash(advice, units)
    else:
        until = advice.valid_until.astimezone(zone)
        provisional = "PROVISIONAL. " if advice.provisional else ""
        click.echo(f"{provisional}Valid until {until:%H:%M}, {advice.valid_because}.\n")
        rows = [
            (
                one.label,
                *(
                    shown(value, "temperature", units)
                    for value in (one.low_c, one.target_c, one.high_c)
                ),
                _name(one.low_set_by),
                _name(one.high_set_by),
            )
            for one in advice.setpoints
        ]
        print_table(("point", "low", "target", "high", "low set by", "high set by"), rows)
    click.echo()
    for reason in advice.reasons:
        click.echo(f"- {reason.sentence}")
    _print_more(advice, units)
    assumed = [one for one in advice.inputs if one.assumed]
    if assumed:
        click.echo("\nAssumed, because nobody entered it:")
        for one in assumed:
            click.echo(f"  {one.name}: {one.shown} ({one.origin})")
    click.echo("\nInputs:")
    for one in advice.inputs:
        if not one.assumed:
            click.echo(f"  {one.name}: {one.shown} ({one.origin}{_age(one.age_s)})")
    if advice.passed_over:
        click.echo("\nSet aside:")
        for words in advice.passed_over:
            click.echo(f"  {words}")
    click.echo("\nCautions:")
    for caution in advice.cautions:
        click.echo(f"  {caution.text}")


def _print_clash(advice: Advice, units: UnitSystem) -> None:
    from advisor.units import shown

    clash = advice.clash
    assert clash is not None  # noqa: S101 - asked for only where there is one
    gap = shown(clash.gap_k, "temperature_delta", units)
    click.echo(f"\nNo safe window: two limits clash by {gap} at discharge.")
    for words, value, limit in (
        ("wants at least", clash.at_least_c, clash.lower),
        ("allows at most", clash.at_most_c, clash.upper),
    ):
        click.echo(
            f"  {words} {shown(value, 'temperature', units)}: {_name(limit)} ({limit.source})"
        )
    if clash.remedies:
        click.echo("What would help:")
    for one in clash.remedies:
        gain = shown(one.gain_k, "temperature_delta", units)
        enough = "enough" if one.enough else "not enough alone"
        click.echo(f"  {gain}: {one.action} ({enough}). Cost: {one.cost}. {one.caution}".rstrip())


def _print_more(advice: Advice, units: UnitSystem) -> None:
    from advisor.units import from_si, shown, to_si

    if advice.rolling:
        rolling = advice.rolling
        end = shown(rolling.end_c, "temperature", units)
        click.echo(
            f"- Rolling time at the target: {rolling.low_min:.0f} to {rolling.high_min:.0f} min, "
            f"{rolling.wanted_min:.0f} wanted, until {end} ({rolling.criterion})."
        )
    if advice.felt_truck_min is not None and advice.felt_paver_min is not None:
        click.echo(
            f"- A change now reaches the trucks in {advice.felt_truck_min:.0f} min and the paver "
            f"in {advice.felt_paver_min:.0f} min."
        )
    if advice.heat:
        heat = advice.heat
        per, t_per_ton = ("ton", to_si(1e-3, "ton", "mass")) if units == "us" else ("t", 1.0)
        money = (
            f", {heat.money_t * t_per_ton:.2f} {heat.currency}/{per}"
            if heat.money_t is not None
            else ""
        )
        of_co2 = "lb/ton" if units == "us" else "kg/t"
        co2 = from_si(1e-3 * heat.co2_kg_t, of_co2, "emission_factor")
        click.echo(
            f"- Fuel expected: {shown(heat.gross_kwh_t * 3600.0, 'heat_per_mass', units)} gross"
            f"{money}, {co2:.1f} {of_co2} of CO2, at {heat.moisture_of_dry_mass:.1%} moisture."
        )
    if advice.contributions:
        first = ", ".join(
            f"{one.name} {shown(one.sd_k, 'temperature_delta', units)}"
            for one in advice.contributions[:4]
        )
        click.echo(f"- Uncertain by: {first} (standard deviation at discharge).")


def _name(limit: Limit) -> str:
    return f"{limit.name} {limit.as_written}".strip()


def _age(age_s: float | None) -> str:
    if age_s is None:
        return ""
    for unit, seconds in (("days", 86400.0), ("h", 3600.0)):
        if age_s >= 2 * seconds:
            return f", {age_s / seconds:.0f} {unit} old"
    return f", {age_s / 60.0:.0f} min old"
