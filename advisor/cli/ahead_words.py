"""What ``advisor ahead`` prints for a person."""

from __future__ import annotations

from collections.abc import Sequence
from typing import TYPE_CHECKING
from zoneinfo import ZoneInfo

import click

from advisor.cli.output import print_table
from advisor.units import UnitSystem, shown

if TYPE_CHECKING:
    from advisor.advice.bands import Band
    from advisor.advice.change_felt import ChangeFelt
    from advisor.advice.coming_day import DayAhead
    from advisor.advice.coming_load import LoadAhead
    from advisor.advice.result import Caution
    from advisor.advice.silo_hold import SiloAhead
    from advisor.advice.tank_rest import TankAhead


def print_load(load: LoadAhead, zone: ZoneInfo, units: UnitSystem) -> None:
    """Print what becomes of a load."""
    early, usual, late = (one.astimezone(zone) for one in load.arrives_at)
    left = load.loaded_at.astimezone(zone)
    click.echo(
        f"Load for {load.job}, left {left:%a %d %b %H:%M} at "
        f"{shown(load.load_out_c, 'temperature', units)}"
    )
    click.echo(f"Arrives {usual:%H:%M} ({early:%H:%M} to {late:%H:%M}).\n")
    print_table(
        ("", "low", "usual", "high"),
        [
            ("as it arrives", *_temperatures(load.arrives_c, units)),
            (f"after {load.planned_wait_min:.0f} min wait",
             *_temperatures(load.delivered_c, units)),
            ("minutes it may wait", *_minutes(load.wait_min)),
            ("minutes of rolling", *_minutes(load.rolling_min)),
        ],
    )  # fmt: skip
    need = shown(load.need_c, "temperature", units)
    click.echo(
        f"\n- Wanted at delivery: {need}, {load.need_set_by.name} ({load.need_set_by.source})."
    )
    click.echo(
        f"- After the wait planned it keeps that in {load.chance:.0%} of cases. "
        + (
            f"It may wait {load.wait_safe_min:.0f} min with {load.confidence:.0%} confidence."
            if load.wait_safe_min >= 1.0
            else f"No wait keeps it with {load.confidence:.0%} confidence."
        )
    )
    end = shown(load.rolling_end_c, "temperature", units)
    click.echo(
        f"- Rolling until {end} (mean of the thickness), {load.rolling_wanted_min:.0f} min wanted."
    )
    click.echo(
        f"- Not remixed, {load.cold_share:.0%} of the load would be colder than {need}; its "
        f"coldest crust {shown(load.crust_c, 'temperature', units)}. "
        f"Weather: {load.weather_from}."
    )
    doubts = ", ".join(
        f"{one.name} {shown(one.sd_k, 'temperature_delta', units)}"
        for one in load.contributions[:4]
    )
    click.echo(f"- Uncertain by: {doubts} (standard deviation at delivery).")
    _cautions(load.cautions)


def print_change(felt: ChangeFelt, units: UnitSystem) -> None:
    """Print when a change is felt."""
    held = shown(felt.silo_kg, "mass", units)
    lies = f"; {held} lie in {felt.silo}" if felt.silo else ""
    click.echo(f"A change of discharge for {felt.job} made now is felt ({felt.silo_told_by}{lies})")
    print_table(
        ("minutes", "low", "usual", "high"),
        [
            ("at the trucks", *_minutes(felt.truck_min)),
            ("at the paver", *_minutes(felt.paver_min)),
        ],
    )
    click.echo("\nCounted from when the discharge itself has changed, as its gauge shows.")


def print_silo(silo: SiloAhead, zone: ZoneInfo, units: UnitSystem) -> None:
    """Print what mix in a silo will be."""
    until = silo.until.astimezone(zone)
    hours = (silo.until - silo.at).total_seconds() / 3600.0
    click.echo(
        f"{silo.silo}: {shown(silo.mass_kg, 'mass', units)} of {silo.mix} at "
        f"{shown(silo.stored_c, 'temperature', units)} ({silo.stored_told_by}), "
        f"air {shown(silo.air_c, 'temperature', units)}"
    )
    click.echo(f"At {until:%a %d %b %H:%M}, after {hours:.1f} h:\n")
    rows = [
        ("all of it", *_temperatures(silo.mean_c, units)),
        ("first out of the cone", *_temperatures(silo.first_out_c, units)),
        ("crust at the wall", *_temperatures(silo.wall_c, units)),
    ]
    if silo.cone_off_c is not None:
        rows.append(("first out, cone heating failed", *_temperatures(silo.cone_off_c, units)))
    print_table(("", "low", "usual", "high"), rows)
    left = (
        f"{silo.rule_left_h:.1f} h are left then"
        if silo.rule_left_h >= 0
        else f"over by {-silo.rule_left_h:.1f} h then"
    )
    since = "counted from now" if silo.counted_from_now else (
        f"in since {silo.filled_at.astimezone(zone):%a %H:%M}")  # fmt: skip
    click.echo(
        f"\n- {silo.rule_h:.0f} h are allowed ({silo.rule_source}), a rule and no model: {left}, "
        f"{since}."
    )
    if silo.needed_c is None:
        click.echo(f"- What the next job needs is not known: {silo.needed_for}.")
    else:
        need = shown(silo.needed_c, "temperature", units)
        verdict = (
            "the first load keeps it"
            if silo.first_out_c.low >= silo.needed_c
            else "the first load may be under it"
            if silo.first_out_c.high >= silo.needed_c
            else "the first load is under it"
        )
        good = silo.good_left_h
        lasts = (
            f"; usually good for {good:.0f} h from now" if good is not None and good < 72.0 else ""
        )
        click.echo(f"- {silo.needed_for} needs {need} at load-out: {verdict}{lasts}.")
    _cautions(silo.cautions)


def print_tank(tank: TankAhead, zone: ZoneInfo, units: UnitSystem) -> None:
    """Print holding against setting back."""
    until = tank.until.astimezone(zone)
    click.echo(
        f"{tank.tank}: {shown(tank.mass_kg, 'mass', units)} of {tank.binder} "
        f"({tank.mass_told_by}) at {shown(tank.now_c, 'temperature', units)} ({tank.now_told_by})"
    )
    click.echo(
        f"Wanted at {shown(tank.wanted_c, 'temperature', units)} on {until:%a %d %b %H:%M}; "
        f"air {shown(tank.air_c, 'temperature', units)}\n"
    )
    rows = [
        ("hold: heat", *_energies(tank.hold_kwh, units)),
        ("set back: heat", *_energies(tank.setback_kwh, units)),
        ("saved", *_energies(tank.saved_kwh, units)),
    ]
    if tank.hold_money is not None and tank.saved_money is not None:
        rows.insert(1, ("hold: cost", *_money(tank.hold_money, tank.currency)))
        rows.append(("saved: cost", *_money(tank.saved_money, tank.currency)))
    rows.append(("lowest on the way", *_temperatures(tank.lowest_c, units, 1)))
    rows.append(("hours of reheating", *(f"{one:.1f}" for one in _three(tank.reheat_h))))
    print_table(("", "low", "usual", "high"), rows)
    click.echo(f"\n- {tank.advised}")
    if tank.reaches:
        early, usual = (one.astimezone(zone) for one in (tank.reheat_at, tank.reheat_usual))
        click.echo(
            f"- Heater on at {early:%a %H:%M} to be up in time 19 times in 20 "
            f"(usually {usual:%a %H:%M} would do), with {tank.heater_kw:.0f} kW."
        )
    click.echo(
        f"- It may not cool under {shown(tank.low_c, 'temperature', units)} ({tank.low_set_by})."
    )
    if tank.saved_money is None:
        click.echo("- Not priced: give --price, what a kWh of heat costs.")
    click.echo("- Heat into the binder, before what the heater itself loses.")
    _cautions(tank.cautions)


def print_day(day: DayAhead, zone: ZoneInfo, units: UnitSystem) -> None:
    """Print the coming hours."""
    at = day.at.astimezone(zone)
    click.echo(f"{day.job} {day.job_name}, {day.mix}; known at {at:%a %d %b %Y %H:%M}\n")

    def celsius(value: float | None) -> str:
        return "" if value is None else shown(value, "temperature", units)

    rows = []
    for one in day.hours:
        rolling = (
            f"{one.rolling_low_min:.0f}-{one.rolling_high_min:.0f}"
            if one.rolling_low_min is not None and one.rolling_high_min is not None
            else ""
        )
        room = "" if one.window_k is None else shown(one.window_k, "temperature_delta", units)
        rows.append((
            f"{one.load_out_at.astimezone(zone):%H:%M}", f"{one.laid_at.astimezone(zone):%H:%M}",
            celsius(one.low_c), celsius(one.target_c) or "none", celsius(one.high_c), room,
            rolling, one.weather,
        ))  # fmt: skip
    print_table(
        ("load-out", "laid", "low", "target", "high", "room", "rolling min", "weather"), rows
    )
    click.echo("\nLow, target and high at discharge; the weather is that of the laying.")
    if day.last_good_at is not None:
        last = day.last_good_at.astimezone(zone)
        click.echo(f"- Last good load-out: {last:%a %H:%M}.")
    if day.opens_at is not None:
        click.echo(f"- A window opens for loads from {day.opens_at.astimezone(zone):%a %H:%M} on.")
    if day.last_words:
        click.echo(f"- {day.last_words}")
    for origin in dict.fromkeys(one.weather_from for one in day.hours if one.weather_from):
        click.echo(f"- Weather told by: {origin}.")
    _cautions(day.cautions)


def _three(band: Band) -> tuple[float, float, float]:
    return band.low, band.usual, band.high


def _temperatures(band: Band, units: UnitSystem, decimals: int | None = None) -> list[str]:
    return [shown(one, "temperature", units, decimals) for one in _three(band)]


def _minutes(band: Band) -> list[str]:
    from advisor.advice.coming_load import LONGEST_WAIT_S

    most = LONGEST_WAIT_S / 60.0
    return [f"over {most:.0f}" if one >= most else f"{one:.0f}" for one in _three(band)]


def _energies(band: Band, units: UnitSystem) -> list[str]:
    return [shown(one * 3.6e6, "energy", units) for one in _three(band)]


def _money(band: Band, currency: str) -> list[str]:
    return [f"{one:.0f} {currency}" for one in _three(band)]


def _cautions(cautions: Sequence[Caution]) -> None:
    click.echo("\nCautions:")
    for caution in cautions:
        click.echo(f"  {caution.text}")
