"""advisor what-if: the same job run another way, fuel and money against margin."""

from __future__ import annotations

from dataclasses import replace
from pathlib import Path
from typing import TYPE_CHECKING

import click

from advisor.cli.asked import Asked, json_option, plant_argument, us_option

if TYPE_CHECKING:
    from advisor.advice.otherwise import Changes
    from advisor.advice.wastes import Wastes
    from advisor.advice.what_if import WhatIf
    from advisor.settings.plant import Price
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
@click.option("--pile", metavar="NAME", help="Stone from a pile kept another way: paved, covered.")
@click.option("--fuel", metavar="NAME", help="Another fuel of config/fuels.yaml.")
@click.option(
    "--price",
    nargs=2,
    metavar="AMOUNT UNIT",
    help="What fuel costs then, as it is billed: 0.85 L, 0.04 'kWh gross'.",
)
@click.option("--air-ratio", type=float, help="All air over the air needed: 1.6.")
@click.option(
    "--rap-share", type=Asked("fraction"), metavar="SHARE", help="RAP in the mix: '30 %'."
)
@click.option(
    "--rap-moisture", type=Asked("fraction"), metavar="SHARE", help="Water in it, of dry mass."
)
@click.option(
    "--rap-added",
    type=click.Choice(["collar", "mixer", "with the stone"]),
    help="Where it is added.",
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
    pile: str | None,
    fuel: str | None,
    price: tuple[str, str] | None,
    air_ratio: float | None,
    rap_share: float | None,
    rap_moisture: float | None,
    rap_added: str | None,
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
      advisor what-if demo_plant --job J01 --rap-share "30 %" --rap-moisture "5 %"
      advisor what-if demo_plant --fuel "distillate oil" --price 0.85 L
    """
    from advisor.advice.open_plant import moment_now, open_plant
    from advisor.advice.otherwise import Changes
    from advisor.advice.situation import gather_situation
    from advisor.advice.wastes import wastes_at
    from advisor.advice.what_if import what_if as compared
    from advisor.cli.output import print_json

    asked = Changes(
        cooler_k=cooler,
        drier=drier,
        pile=pile,
        fuel=fuel,
        price=_price(price),
        air_ratio=air_ratio,
        rap_share=rap_share,
        rap_moisture=rap_moisture,
        rap_added=rap_added,
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
        costs = wastes_at(situation, found[0].before.discharge_c)
    if as_json:
        print_json({"ways": found, "changes": wanted, "wastes": costs})
        return
    _print(wanted, found, costs, units)


def _price(written: tuple[str, str] | None) -> Price | None:
    """The price an option says; refuses what is none."""
    from pydantic import ValidationError

    from advisor.errors import FaultyInput
    from advisor.settings.plant import Price

    if written is None:
        return None
    amount, per = written
    try:
        return Price.model_validate({"amount": float(amount), "per": per})
    except (ValidationError, ValueError):
        raise FaultyInput.of(
            "no-price",
            f"'{amount} {per}' is no price of fuel.",
            "Give a number above 0 and the unit it is billed in: kWh gross, kWh net, MMBtu gross, "
            "therm, m3, L, gal, kg, t or ton.",
            field="price",
            value=f"{amount} {per}",
        ) from None


def _usual(air_ratio: float) -> list[Changes]:
    """The ways a plant can save that are most often asked about."""
    from advisor.advice.otherwise import Changes, additives, piles

    return [
        Changes(cooler_k=5.0),
        Changes(cooler_k=10.0),
        Changes(cooler_k=0.0, drier=0.01),
        *(Changes(cooler_k=0.0, pile=name) for name in piles()),
        Changes(cooler_k=0.0, air_ratio=max(air_ratio - 0.3, 1.0)),
        *(Changes(additive=name) for name in additives()),
    ]


def _print(wanted: list[Changes], found: list[WhatIf], costs: Wastes, units: UnitSystem) -> None:
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
        (
            "what if",
            "discharge",
            "above low",
            "mix above low",
            "saves",
            "money saved",
            "fume",
            "oxidation",
        ),
        [
            (
                _words(one, units),
                shown(each.after.discharge_c, "temperature", units),
                _margin(each, units),
                _share(each.after.kept),
                _heat_span(each.saved.gross_kwh_t, units),
                _money_span(each),
                f"{each.fume_of_before - 1.0:+.0%}",
                _growth(each.oxidation_of_before),
            )
            for one, each in zip(wanted, found, strict=True)
        ],
    )
    _print_aggregate(wanted, found, units)
    notes: dict[str, None] = {}
    for each in found:
        for note in each.notes:
            notes.setdefault(note)
    for note in notes:
        click.echo(f"  {note}")
    click.echo("")
    _print_wastes(costs, units)
    click.echo(
        "\nSavings are worked out from two heat balances and how far the stack follows the mix; "
        "none is told surer than 10 %. A mix below low may not coat or arrive: the site and the "
        "mix design decide. Fume by AP-42 section 11.1 (from memory); oxidation by activation "
        "energies measured below 100 C."
    )


def _print_aggregate(wanted: list[Changes], found: list[WhatIf], units: UnitSystem) -> None:
    """How hot the virgin aggregate gets, where RAP or a mixer asks something of it."""
    from advisor.cli.output import print_table
    from advisor.units import shown

    ways = [("as advised", found[0].before)]
    ways += [(_words(one, units), each.after) for one, each in zip(wanted, found, strict=True)]
    rows = [
        (
            name,
            shown(way.aggregate_c, "temperature", units),
            "" if way.most_rap is None else f"{way.most_rap:.0%}",
        )
        for name, way in ways
        if way.aggregate_c is not None
    ]
    if rows:
        click.echo("")
        print_table(("what if", "virgin aggregate", "RAP it could carry at the limit"), rows)


def _print_wastes(costs: Wastes, units: UnitSystem) -> None:
    from advisor.cli.output import print_table
    from advisor.units import shown

    rows = []
    for one in costs.each():
        # One degree is smaller where it is one of Fahrenheit.
        by = 1.0 / 1.8 if units == "us" and one is costs.overheating else 1.0
        heat, money = _times(one.gross_kwh_t, by), one.money_h and _times(one.money_h, by)
        rows.append(
            (
                one.name,
                one.unit.replace("Celsius", "Fahrenheit") if units == "us" else one.unit,
                _heat_span(heat, units),
                _heat(heat[1], units),
                f"{money[0]:.1f} to {money[2]:.1f} {costs.currency}/h" if money else "",
                _mass_span(_times(one.co2_kg_t, by), units),
            )
        )
    print_table(("what costs", "for", "fuel", "most likely", "money", "CO2"), rows)
    least, _, most = (shown(one, "temperature_delta", units, 0) for one in costs.percent_in_k)
    slow, fast = costs.oxidation_of_kelvin
    kelvin = shown(1.0, "temperature_delta", units, 1 if units == "us" else 0)
    click.echo(
        f"\nOne percent of moisture costs as much fuel as {least} to {most} too much, but only "
        f"heat makes fume and ages the binder: {kelvin} more "
        f"gives {costs.fume_of_kelvin - 1.0:+.0%} fume and "
        f"{slow - 1.0:+.0%} to {fast - 1.0:+.0%} oxidation."
    )
    for one in costs.each():
        click.echo(f"  {one.name}: from {one.found_from}; {one.how_sure}.")


def _times(told: tuple[float, float, float], factor: float) -> tuple[float, float, float]:
    return told[0] * factor, told[1] * factor, told[2] * factor


def _mass_span(kg_t: tuple[float, float, float], units: UnitSystem) -> str:
    if units == "us":
        return f"{2.0 * kg_t[0]:.2f} to {2.0 * kg_t[2]:.2f} lb/ton"
    return f"{kg_t[0]:.2f} to {kg_t[2]:.2f} kg/t"


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


def _growth(span: tuple[float, float]) -> str:
    low, high = (f"{one - 1.0:+.0%}" for one in span)
    return low if low == high else f"{low} to {high}"


def _share(share: float | None) -> str:
    return "no window" if share is None else f"{share:.0%}"


def _words(one: Changes, units: UnitSystem) -> str:
    from advisor.units import shown

    told = []
    if one.cooler_k:
        degrees = shown(abs(one.cooler_k), "temperature_delta", units, 0)
        told.append(f"{degrees} {'cooler' if one.cooler_k > 0 else 'hotter'}")
    if one.drier:
        told.append(f"stone {abs(one.drier):.1%} {'drier' if one.drier > 0 else 'wetter'}")
    if one.pile:
        told.append(f"{one.pile} pile")
    if one.price:
        told.append(f"fuel at {one.price.amount:g} per {one.price.per}")
    if one.fuel:
        told.append(one.fuel)
    if one.air_ratio is not None:
        told.append(f"air ratio {one.air_ratio:g}")
    if one.rap_share is not None:
        told.append(f"RAP {one.rap_share:.0%}")
    if one.rap_moisture is not None:
        told.append(f"RAP at {one.rap_moisture:.1%} moisture")
    if one.rap_added:
        where = "" if one.rap_added == "with the stone" else "at the "
        told.append(f"RAP {where}{one.rap_added}")
    if one.additive:
        told.append(one.additive)
    return ", ".join(told) or "as advised"
