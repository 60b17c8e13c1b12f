"""Heat, fuel and money at the advised temperature, and what a kelvin too much costs."""

from __future__ import annotations

from functools import lru_cache

from advisor.advice.result import Heat
from advisor.advice.situation import Situation
from advisor.dryer import (
    Aggregate,
    Air,
    Feed,
    Filler,
    Fraction,
    Fuel,
    Operation,
    OverheatingCost,
    Rap,
    StackRise,
    aggregate_of_row,
    fuel_of_row,
    heat_balance,
    money_per_gross_j,
    overheating_cost,
)
from advisor.errors import AdvisorError
from advisor.heat.sky import vapour_pressure_pa
from advisor.heat.wind import pressure_share
from advisor.settings.plant import Dryer
from advisor.settings.tables import load_table

_J_PER_KWH = 3.6e6
_KG_PER_T = 1000.0
_SEA_LEVEL_PA = 101325.0
_ADDED = {"collar": "collar", "mixer": "mixer", "with the stone": "drum"}


@lru_cache(maxsize=16)
def fuel_called(name: str) -> Fuel:
    """The fuel ``name`` of config/fuels.yaml."""
    return fuel_of_row(load_table("fuels").row(name))


def operation_of(situation: Situation, discharge_c: float) -> Operation:
    """The dryer at work on the situation's mix, discharging at ``discharge_c`` [C]."""
    plant, mix, weather = situation.facts.folder.plant, situation.mix, situation.weather
    assert weather is not None  # noqa: S101 - asked for only where nothing is missing
    stone = _aggregate()
    rap_share = mix.rap.share if mix.rap else 0.0
    new_binder = mix.binder_content - (rap_share * mix.rap.binder_content if mix.rap else 0.0)
    virgin = 1.0 - rap_share - new_binder - mix.filler_share
    rap = (
        Rap(rap_share, situation.rap_moisture, weather.air_c, mix.rap.binder_content, stone,
            _ADDED[mix.rap.added]),  # type: ignore[arg-type]
    ) if mix.rap else ()  # fmt: skip
    feed = Feed(
        fractions=(Fraction(virgin, situation.moisture, weather.air_c, stone),),
        binder_of_mix=new_binder,
        binder_c=discharge_c,
        rap=rap,
        filler=(Filler(mix.filler_share, weather.air_c, stone),) if mix.filler_share else (),
    )
    humidity = vapour_pressure_pa(weather.dew_point_c) / vapour_pressure_pa(weather.air_c)
    kind = load_table("dryer_kinds").row(plant.dryer.kind)
    return Operation(
        fuel=fuel_called(plant.dryer.fuel.name),
        feed=feed,
        air=Air(weather.air_c, humidity, _SEA_LEVEL_PA * pressure_share(plant.altitude)),
        discharge_c=discharge_c,
        stack_c=float(plant.dryer.stack),
        air_ratio=float(plant.dryer.air_ratio),
        casing_of_net=float(plant.dryer.casing_loss),
        kind=plant.dryer.kind,
        transfer_drop_k=kind["transfer_drop"],
    )


def heat_of(situation: Situation, discharge_c: float) -> Heat | None:
    """Heat and fuel per tonne at ``discharge_c``; None where the balance has no answer."""
    try:
        balance = heat_balance(operation_of(situation, discharge_c))
    except AdvisorError:
        return None
    plant = situation.facts.folder.plant
    gross = float(balance.gross_j_kg)
    money = money_per_j(plant.dryer)
    return Heat(
        gross_kwh_t=gross * _KG_PER_T / _J_PER_KWH,
        net_kwh_t=float(balance.net_j_kg) * _KG_PER_T / _J_PER_KWH,
        co2_kg_t=float(balance.co2_kg_kg) * _KG_PER_T,
        moisture_of_dry_mass=situation.moisture,
        money_t=gross * _KG_PER_T * money if money is not None else None,
        currency=plant.currency,
    )


def money_per_j(dryer: Dryer) -> float | None:
    """Money for each joule of gross heat; None where the plant gives no price."""
    price = dryer.fuel.price
    if price is None:
        return None
    return money_per_gross_j(fuel_called(dryer.fuel.name), price.amount, price.per)


def kelvin_too_much(situation: Situation, needed_c: float) -> OverheatingCost:
    """What one kelvin above ``needed_c`` [C] costs at this plant."""
    rise = load_table("dryer_kinds").row(situation.facts.folder.plant.dryer.kind)
    measured = load_table("overheating").row("measured saving")["of_fuel"]
    return overheating_cost(
        operation_of(situation, needed_c),
        1.0,
        StackRise(rise["low"], rise["central"], rise["high"]),
        measured,
    )


def _aggregate() -> Aggregate:
    return aggregate_of_row(load_table("aggregates").row("mixed aggregate"))
