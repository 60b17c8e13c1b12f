"""Heat and mass balance of a dryer: fuel needed, where its heat goes, and what leaves the stack.

The balance is drawn round dryer and mixer together. In come fuel, moist air, wet stone, recycled
material, filler and hot binder; out go the mix, the gas with all steam, and the casing's loss.
The heat that warms the binder in its tank belongs to another heater and is not part of it.
"""

from __future__ import annotations

from dataclasses import dataclass, fields
from typing import Literal

import numpy as np
from numpy.typing import ArrayLike

from advisor.dryer.fuel import Combustion, combustion
from advisor.dryer.materials import binder_enthalpy_j_kg
from advisor.dryer.operation import STEAM_TO_STACK, Fraction, Operation, Rap, refuse_impossible
from advisor.dryer.properties import (
    AIR_MOLES,
    GAS_CONSTANT_J_MOLK,
    KELVIN,
    STANDARD_PRESSURE_PA,
    Values,
    dew_point_c,
    dry_air_enthalpy_j_kg,
    gas_enthalpy_j_mol,
    humidity_ratio,
    molar_masses_kg_mol,
    steam_enthalpy_j_kg,
    water_enthalpy_j_kg,
)
from advisor.errors import OutsideValidity

STEAM_FORMED_C = 100.0  # divides evaporation from superheat in the table; the sum does not feel it


@dataclass(frozen=True, eq=False)
class HeatParts:
    """Where the gross heat of the fuel goes, each in J per kg of mix; they sum to it.

    A part below 0 brings heat in: binder hotter than the mix, steam cooler than 100 C.
    """

    aggregate: Values
    recycled: Values
    filler: Values
    binder: Values
    evaporation: Values
    superheat: Values
    residual_water: Values
    combustion_gas: Values
    excess_air: Values
    leakage_air: Values
    casing: Values
    transfer: Values
    fuel_hydrogen: Values

    def rows(self) -> tuple[tuple[str, Values], ...]:
        """Name and heat [J/kg] of each part, in the order of the fields."""
        return tuple((one.name, getattr(self, one.name)) for one in fields(self))

    def total_j_kg(self) -> Values:
        """Sum of all parts [J/kg mix]."""
        return np.asarray(sum(part for _, part in self.rows()))


@dataclass(frozen=True, eq=False)
class HeatBalance:
    """A closed balance; every field has the broadcast shape of the inputs, per kg of mix.

    ``gross_j_kg`` and ``net_j_kg``: fuel heat; ``fuel_kg_kg``, ``co2_kg_kg`` (from the fuel's
    carbon), ``so2_kg_kg``; ``dry_air_kg_kg``: all air; ``water_kg_kg``: steam off stone and RAP;
    ``exhaust_dry_mol_kg``, ``exhaust_wet_mol_kg``; ``exhaust_m3_kg``: at stack temperature and site
    pressure; ``exhaust_dry_nm3_kg``: dry at 0 C and 1 atm; ``vapour_share`` of wet gas;
    ``oxygen_dry`` and ``carbon_dioxide_dry`` of dry gas; ``air_ratio`` at the stack;
    ``dew_point_c`` of the water; ``useful_j_kg``: heat to solids and water; ``efficiency_gross``
    and ``efficiency_net``: useful heat over fuel heat; ``condensing``: stack below the dew point,
    every other field there is NaN.
    """

    gross_j_kg: Values
    net_j_kg: Values
    fuel_kg_kg: Values
    co2_kg_kg: Values
    so2_kg_kg: Values
    dry_air_kg_kg: Values
    water_kg_kg: Values
    exhaust_dry_mol_kg: Values
    exhaust_wet_mol_kg: Values
    exhaust_m3_kg: Values
    exhaust_dry_nm3_kg: Values
    vapour_share: Values
    oxygen_dry: Values
    carbon_dioxide_dry: Values
    air_ratio: Values
    dew_point_c: Values
    useful_j_kg: Values
    efficiency_gross: Values
    efficiency_net: Values
    parts: HeatParts
    condensing: np.ndarray


def heat_balance(
    operation: Operation, condensing: Literal["refuse", "mark"] = "refuse"
) -> HeatBalance:
    """Fuel, heat by where it goes, and exhaust of a dryer at work.

    Args:
        operation: the dryer at work; its fields broadcast against each other
        condensing: what to do where the stack lies below the dew point of its water, for which the
            balance does not hold: refuse the call, or mark those points and return NaN for them

    Raises:
        FaultyInput: an input that cannot be, all of them named
        OutsideValidity: gas takes away more heat than the fuel gives, or the stack condenses

    Source: first law with enthalpies of ``properties``; linear in the loads, so it is solved
    without iteration. The fuel enters at 25 C. Heating values at 25 C, losses against net heat.
    """
    refuse_impossible(operation)
    burnt = combustion(operation.fuel)
    mix_c = np.asarray(operation.discharge_c, float)
    stack_c = np.asarray(operation.stack_c, float)

    solids = _heat_to_solids(operation, mix_c)
    evaporation, superheat, residual, steam_kg, stack_steam_kg = _heat_to_water(
        operation, mix_c, stack_c
    )
    humidity = humidity_ratio(
        operation.air.air_c, operation.air.relative_humidity, operation.air.pressure_pa
    )
    air_rise_j_kg = _moist_air_rise_j_kg(operation.air.air_c, stack_c, humidity)
    lost_j_kg = _combustion_gas_j_kg(burnt, operation, humidity)
    excess = np.asarray(operation.air_ratio, float) - 1.0
    leak_kg = np.asarray(operation.leakage_air_kg_kg, float)
    casing_j_kg = np.asarray(operation.casing_j_kg, float)
    casing_of_net = np.asarray(operation.casing_of_net, float)

    load = sum(solids.values()) + evaporation + superheat + residual
    left_j_kg = (
        burnt.net_j_kg * (1.0 - casing_of_net)
        - lost_j_kg
        - excess * burnt.air_kg_kg * air_rise_j_kg
    )
    if np.any(left_j_kg <= 0.0):
        raise OutsideValidity.of(
            "no-heat-left",
            "The gas and the casing take away all the heat the fuel gives.",
            "Check the air ratio, the stack temperature and the casing loss.",
            field="air_ratio",
        )
    fuel_kg = (load + leak_kg * air_rise_j_kg + casing_j_kg) / left_j_kg

    burner_excess = excess
    if operation.burner_air_ratio is not None:
        burner_excess = np.asarray(operation.burner_air_ratio, float) - 1.0
    parts = HeatParts(
        **solids,
        evaporation=evaporation,
        superheat=superheat,
        residual_water=residual,
        combustion_gas=fuel_kg * lost_j_kg,
        excess_air=fuel_kg * burner_excess * burnt.air_kg_kg * air_rise_j_kg,
        leakage_air=(fuel_kg * (excess - burner_excess) * burnt.air_kg_kg + leak_kg)
        * air_rise_j_kg,
        casing=fuel_kg * burnt.net_j_kg * casing_of_net + casing_j_kg,
        fuel_hydrogen=fuel_kg * (burnt.gross_j_kg - burnt.net_j_kg),
    )
    air_kg = fuel_kg * (1.0 + excess) * burnt.air_kg_kg + leak_kg
    useful = load - parts.transfer
    return _with_exhaust(
        operation, burnt, parts, condensing, fuel_kg, air_kg, humidity, steam_kg, stack_steam_kg,
        useful,
    )  # fmt: skip


def _heat_to_solids(operation: Operation, mix_c: Values) -> dict[str, Values]:
    feed = operation.feed
    hot_c = mix_c + np.asarray(operation.transfer_drop_k, float)
    density = feed.binder_relative_density
    aggregate = recycled = filler = transfer = np.zeros(())
    for one in feed.fractions:
        share, stone = np.asarray(one.of_mix, float), one.aggregate
        aggregate = aggregate + share * (
            stone.enthalpy_j_kg(mix_c) - stone.enthalpy_j_kg(one.cold_c)
        )
        transfer = transfer + share * (stone.enthalpy_j_kg(hot_c) - stone.enthalpy_j_kg(mix_c))
    for rap in feed.rap:
        share, old = np.asarray(rap.of_mix, float), np.asarray(rap.binder_of_rap, float)
        stone_rise = rap.aggregate.enthalpy_j_kg(mix_c) - rap.aggregate.enthalpy_j_kg(rap.cold_c)
        binder_rise = binder_enthalpy_j_kg(mix_c, density) - binder_enthalpy_j_kg(
            rap.cold_c, density
        )
        recycled = recycled + share * ((1.0 - old) * stone_rise + old * binder_rise)
    for cold in feed.filler:
        rise = cold.aggregate.enthalpy_j_kg(mix_c) - cold.aggregate.enthalpy_j_kg(cold.cold_c)
        filler = filler + np.asarray(cold.of_mix, float) * rise
    binder = np.asarray(feed.binder_of_mix, float) * (
        binder_enthalpy_j_kg(mix_c, density) - binder_enthalpy_j_kg(feed.binder_c, density)
    )
    return {
        "aggregate": aggregate,
        "recycled": recycled,
        "filler": filler,
        "binder": binder,
        "transfer": transfer,
    }


def _heat_to_water(
    operation: Operation, mix_c: Values, stack_c: Values
) -> tuple[Values, Values, Values, Values, Values]:
    """Evaporation, superheat and residual water [J/kg]; all steam and that of the stack [kg/kg]."""
    feed = operation.feed
    streams: list[tuple[Fraction | Rap, bool]] = [(one, True) for one in feed.fractions]
    streams += [(one, STEAM_TO_STACK[one.point]) for one in feed.rap]
    entering = feed.water_kg_kg
    residual_kg = np.asarray(feed.residual_of_mix, float)
    # what stays in the mix is taken from every stream in proportion
    dried = 1.0 - np.divide(
        residual_kg, entering, out=np.zeros(np.broadcast(residual_kg, entering).shape),
        where=entering > 0.0,
    )  # fmt: skip
    evaporation = superheat = residual = steam_kg = stack_kg = np.zeros(())
    for one, to_stack in streams:
        water = np.asarray(one.of_mix, float) * np.asarray(one.moisture_of_dry_mass, float)
        # dry streams may be hotter than water can be; their water weighs nothing
        cold_c = np.where(water > 0.0, np.asarray(one.cold_c, float), 0.0)
        fed = water_enthalpy_j_kg(cold_c)
        leaves_c = stack_c if to_stack else mix_c
        formed = steam_enthalpy_j_kg(np.minimum(leaves_c, STEAM_FORMED_C))
        gone = water * dried
        evaporation = evaporation + gone * (formed - fed)
        superheat = superheat + gone * (steam_enthalpy_j_kg(leaves_c) - formed)
        stays_c = np.where(water > gone, mix_c, 0.0)  # as above, where no water stays
        residual = residual + (water - gone) * (water_enthalpy_j_kg(stays_c) - fed)
        steam_kg = steam_kg + gone
        stack_kg = stack_kg + gone * to_stack
    return evaporation, superheat, residual, steam_kg, stack_kg


def _moist_air_rise_j_kg(air_c: ArrayLike, stack_c: Values, humidity: Values) -> Values:
    """Heat [J/kg dry air] that air with its vapour takes from the surroundings to the stack."""
    dry = dry_air_enthalpy_j_kg(stack_c) - dry_air_enthalpy_j_kg(air_c)
    vapour = steam_enthalpy_j_kg(stack_c) - steam_enthalpy_j_kg(air_c)
    return np.asarray(dry + humidity * vapour)


def _combustion_gas_j_kg(burnt: Combustion, operation: Operation, humidity: Values) -> Values:
    """Heat [J/kg fuel] in the gas of combustion without excess air, less what its air brought."""
    stack_c, air_c = operation.stack_c, operation.air.air_c
    leaves = sum(
        moles * gas_enthalpy_j_mol(gas, stack_c) for gas, moles in burnt.products_mol_kg.items()
    )
    vapour = steam_enthalpy_j_kg(stack_c) - steam_enthalpy_j_kg(air_c)
    return np.asarray(leaves + burnt.air_kg_kg * (humidity * vapour - dry_air_enthalpy_j_kg(air_c)))


def _with_exhaust(
    operation: Operation,
    burnt: Combustion,
    parts: HeatParts,
    condensing: str,
    fuel_kg: Values,
    air_kg: Values,
    humidity: Values,
    steam_kg: Values,
    stack_steam_kg: Values,
    useful: Values,
) -> HeatBalance:
    kg = molar_masses_kg_mol()
    spare_mol = air_kg / kg["air"] - fuel_kg * burnt.air_mol_kg
    dry_mol = fuel_kg * burnt.dry_mol_kg + spare_mol
    vapour_mol = (
        fuel_kg * burnt.products_mol_kg["H2O"] + (stack_steam_kg + air_kg * humidity) / kg["H2O"]
    )
    wet_mol = dry_mol + vapour_mol
    pressure = np.asarray(operation.air.pressure_pa, float)
    share = vapour_mol / wet_mol
    dew = dew_point_c(share * pressure)
    stack_c = np.asarray(operation.stack_c, float)
    wet_stack = np.asarray(stack_c < dew)
    if condensing == "refuse" and np.any(wet_stack):
        at = tuple(int(i) for i in np.argwhere(wet_stack)[0]) if wet_stack.ndim else ()
        stack, limit = np.broadcast_to(stack_c, wet_stack.shape)[at], dew[at]
        raise OutsideValidity.of(
            "stack-condenses",
            f"The stack at {stack:.1f} C lies below the dew point of its water, {limit:.1f} C"
            f" ({int(wet_stack.sum())} of {wet_stack.size} points).",
            "Check the stack sensor; a dryer that condenses is outside this balance.",
            field="stack_c",
            value=f"{stack:.1f}",
        )
    gross = parts.total_j_kg()
    net = gross - parts.fuel_hydrogen
    shape = np.broadcast(gross, wet_stack).shape

    def shown(values: ArrayLike) -> Values:
        """The values at full shape, NaN where water condenses."""
        return np.where(wet_stack, np.nan, np.broadcast_to(np.asarray(values, float), shape))[()]

    return HeatBalance(
        gross_j_kg=shown(gross),
        net_j_kg=shown(net),
        fuel_kg_kg=shown(fuel_kg),
        co2_kg_kg=shown(fuel_kg * burnt.co2_kg_kg),
        so2_kg_kg=shown(fuel_kg * burnt.so2_kg_kg),
        dry_air_kg_kg=shown(air_kg),
        water_kg_kg=shown(steam_kg),
        exhaust_dry_mol_kg=shown(dry_mol),
        exhaust_wet_mol_kg=shown(wet_mol),
        exhaust_m3_kg=shown(wet_mol * GAS_CONSTANT_J_MOLK * (stack_c + KELVIN) / pressure),
        exhaust_dry_nm3_kg=shown(dry_mol * GAS_CONSTANT_J_MOLK * KELVIN / STANDARD_PRESSURE_PA),
        vapour_share=shown(share),
        oxygen_dry=shown(AIR_MOLES["O2"] * spare_mol / dry_mol),
        carbon_dioxide_dry=shown(fuel_kg * burnt.products_mol_kg["CO2"] / dry_mol),
        air_ratio=shown(air_kg / (fuel_kg * burnt.air_kg_kg)),
        dew_point_c=shown(dew),
        useful_j_kg=shown(useful),
        efficiency_gross=shown(useful / gross),
        efficiency_net=shown(useful / net),
        parts=HeatParts(**{name: shown(part) for name, part in parts.rows()}),
        condensing=np.broadcast_to(wet_stack, shape),
    )
