"""advisor what-if: the same job run another way, fuel and money against margin."""

from __future__ import annotations

from dataclasses import replace
from pathlib import Path
from typing import TYPE_CHECKING

import click

from advisor.cli.asked import Asked, json_option, plant_argument, us_option

if TYPE_CHECKING:
    from advisor.advice.what_if import Changes, DegreeAndWater, WhatIf
    from advisor.units import UnitSystem


@click.command("what-if")
@plant_argument
@click.option("--at", "at", metavar="TIME", help="Plant time: '2026-10-23 10:10'; else now.")
@click.option("--job", metavar="JOB", help="Code of a job; else the one that runs.")
@click.option(
    "--cooler",
    type=Asked("temperature_delta"),
    metavar="DEGREES",
    help="Discharge set lower by so much: '10 C'.",
)
@click.option(
    "--drier",
    type=Asked("fraction"),
    default="0 %",
    metavar="SHARE",
    help="Water off the stone, of dry mass: '1 %'.",
)
@click.option("--fuel", metavar="NAME", help="Another fuel of config/fuels.yaml.")
@click.option("--air-ratio", type=float, help="All air over the air needed: 1.6.")
@click.option(
    "--rap-share", type=Asked("fraction"), metavar="SHARE", help="RAP in the mix: '30 %'."
)
@click.option("--additive", metavar="NAME", help="surfactant or foam, of config/modifiers.yaml.")
@us_option
@json_option
def what_if(
    plant: Path,
    at: str | None,
    job: str | None,
    cooler: float | None,
    drier: float,
    fuel: str | None,
    air_ratio: float | None,
    rap_share: float | None,
    additive: str | None,
    units: UnitSystem,
    as_json: bool,
) -> None:
    """What would be saved, and what margin lost, if PLANT ran the job another way?

    What is named is done together. With nothing named, the usual ways are shown one by one. Where
    no degrees are named, the discharge stays, or goes to the target of the changed mix.

    \b
    Examples:
      advisor what-if demo_plant
      advisor what-if demo_plant --job J01 --additive surfactant
      advisor what-if demo_plant --cooler "10 C" --drier "1 %"
    """
    from advisor.advice.open_plant import moment_now, open_plant
    from advisor.advice.situation import gather_situation
    from advisor.advice.what_if import Changes, degree_and_water
    from advisor.advice.what_if import what_if as compared
    from advisor.cli.output import print_json

    asked = Changes(
        cooler_k=cooler,
        drier=drier,
        fuel=fuel,
        air_ratio=air_ratio,
        rap_share=rap_share,
        additive=additive,
    )
    if asked != Changes() and additive is None and cooler is None:
        asked = replace(asked, cooler_k=0.0)
    facts = open_plant(plant, latest_only=True)
    with facts.records:
        moment = moment_now(facts.folder, at)
        situation = gather_situation(replace(facts, units=units), moment, job)
        usual = _usual(float(facts.folder.plant.dryer.air_ratio))
        wanted = [asked] if asked != Changes() else usual
        found = compared(situation, wanted)
        costs = degree_and_water(situation, found[0].before.discharge_c)
    if as_json:
        print_json({"ways": found, "changes": wanted, "degree_and_water": costs})
        return
    _print(wanted, found, costs, units)


def _usual(air_ratio: float) -> list[Changes]:
    """The ways a plant can save that are most often asked about."""
    from advisor.advice.what_if import Changes, additives

    return [
        Changes(cooler_k=5.0),
        Changes(cooler_k=10.0),
        Changes(cooler_k=0.0, drier=0.01),
        Changes(cooler_k=0.0, air_ratio=max(air_ratio - 0.3, 1.0)),
        *(Changes(additive=name) for name in additives()),
    ]


def _print(
    wanted: list[Changes], found: list[WhatIf], costs: DegreeAndWater, units: UnitSystem
) -> None:
    from advisor.cli.output import print_table
    from advisor.units import shown

    before = found[0].before
    advice = before.advice
    click.echo(f"{advice.plant}: {advice.mix}, {advice.tank}, job {advice.job}")
    click.echo(
        f"As advised: discharge {shown(before.discharge_c, 'temperature', units)}, "
        f"{_heat(before.gross_kwh_t, units)} gross, {_share(before.kept)} of the mix above low.\n"
    )
    print_table(
        ("what if", "discharge", "above low", "mix above low", "saves", "money saved", "fume"),
        [
            (
                _words(one, units),
                shown(each.after.discharge_c, "temperature", units),
                _margin(each, units),
                _share(each.after.kept),
                _heat_span(each.saved.gross_kwh_t, units),
                _money_span(each),
                f"{each.fume_of_before - 1.0:+.0%}",
            )
            for one, each in zip(wanted, found, strict=True)
        ],
    )
    for each in found:
        for note in each.notes:
            click.echo(f"  {note}")
    # One degree is smaller where it is one of Fahrenheit.
    low, middle, high = (one / (1.8 if units == "us" else 1.0) for one in costs.kelvin_kwh_t)
    least, _, most = (shown(one, "temperature_delta", units, 0) for one in costs.percent_in_k)
    click.echo(
        f"\nOne degree of overheating costs {_heat_span((low, middle, high), units)} "
        f"({_heat(middle, units)} most likely); one percent of moisture "
        f"{_heat(costs.percent_kwh_t, units)}, as much as {least} to {most} too much."
    )
    click.echo(
        "\nWorked out from two heat balances and how far the stack follows the mix; no saving is "
        "told surer than 10 %. A mix below low may not coat or arrive: the site and the mix design "
        "decide. Fume by AP-42 section 11.1 (from memory)."
    )


def _heat(kwh_t: float, units: UnitSystem) -> str:
    from advisor.units import shown

    return shown(kwh_t * 3600.0, "heat_per_mass", units, None if units == "us" else 2)


def _heat_span(kwh_t: tuple[float, float, float], units: UnitSystem) -> str:
    low, high = (_heat(one, units) for one in (kwh_t[0], kwh_t[2]))
    return f"{low.split()[0]} to {high}"


def _money_span(each: WhatIf) -> str:
    money = each.saved.money_h
    return f"{money[0]:.0f} to {money[2]:.0f} {each.saved.currency}/h" if money else ""


def _margin(each: WhatIf, units: UnitSystem) -> str:
    from advisor.units import shown

    margin = each.after.above_low_k
    return "" if margin is None else shown(margin, "temperature_delta", units)


def _share(share: float | None) -> str:
    return "no window" if share is None else f"{share:.0%}"


def _words(one: Changes, units: UnitSystem) -> str:
    from advisor.units import shown

    told = []
    if one.cooler_k:
        told.append(f"{shown(one.cooler_k, 'temperature_delta', units, 0)} cooler")
    if one.drier:
        told.append(f"stone {abs(one.drier):.1%} {'drier' if one.drier > 0 else 'wetter'}")
    if one.fuel:
        told.append(one.fuel)
    if one.air_ratio is not None:
        told.append(f"air ratio {one.air_ratio:g}")
    if one.rap_share is not None:
        told.append(f"RAP {one.rap_share:.0%}")
    if one.additive:
        told.append(one.additive)
    return ", ".join(told) or "as advised"
