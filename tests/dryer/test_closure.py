"""What goes into a dryer comes out of it: mass and energy, at any fuel, kind, feed, air and leak.

The streams are added up here from the balance's fuel, air and gas; how it was solved is not used.
"""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from advisor.dryer import (
    Air,
    Feed,
    Filler,
    Fraction,
    Operation,
    Rap,
    aggregate_of_row,
    air_pressure_pa,
    binder_enthalpy_j_kg,
    fuel_of_row,
    heat_balance,
    humidity_ratio,
    steam_enthalpy_j_kg,
    water_enthalpy_j_kg,
)
from advisor.dryer.fuel import Combustion, combustion
from advisor.dryer.operation import STEAM_TO_STACK
from advisor.dryer.properties import (
    AIR_MOLES,
    dry_air_enthalpy_j_kg,
    gas_enthalpy_j_mol,
    molar_masses_kg_mol,
)
from advisor.settings.tables import load_table

CLOSES = 1e-9  # relative


@st.composite
def dryers(draw: st.DrawFn) -> Operation:
    """Dryers at work, anywhere between what a plant can be."""

    def between(low: float, high: float) -> float:
        return draw(st.floats(low, high))

    stone = aggregate_of_row(draw(st.sampled_from(load_table("aggregates").rows)))
    kind = draw(st.sampled_from(["counterflow", "parallel", "batch"]))
    share = draw(st.sampled_from([0.0, 0.1, 0.3, 0.5]))
    binder, filler = 0.05 - 0.05 * share, between(0.0, 0.04)
    sand = between(0.1, 0.3)
    cold_c, mix_c = between(-10.0, 35.0), between(120.0, 190.0)
    residual = between(0.0, 0.002)
    rap = Rap(share, between(0.0, 0.08), between(-5.0, 40.0), 0.05, stone,
              draw(st.sampled_from(list(STEAM_TO_STACK))))  # fmt: skip
    feed = Feed(
        fractions=(
            Fraction(1.0 - share - binder - filler - sand, between(0.005, 0.05), cold_c, stone),
            Fraction(sand, between(0.02, 0.12), cold_c, stone),
        ),
        binder_of_mix=binder,
        binder_c=between(140.0, 180.0),
        rap=(rap,) if share else (),
        filler=(Filler(filler, cold_c, stone),),
        residual_of_mix=residual,
    )
    return Operation(
        fuel=fuel_of_row(draw(st.sampled_from(load_table("fuels").rows))),
        feed=feed,
        air=Air(between(-20.0, 40.0), between(0.0, 1.0), air_pressure_pa(between(0.0, 3000.0))),
        discharge_c=mix_c,
        stack_c=between(105.0, 200.0),
        air_ratio=between(1.0, 4.0),
        casing_of_net=between(0.0, 0.2),
        kind=kind,  # type: ignore[arg-type]
        casing_j_kg=between(0.0, 2e4),
        leakage_air_kg_kg=between(0.0, 0.3),
        transfer_drop_k=between(0.0, 15.0) if kind == "batch" else 0.0,
    )


def steam_past_stack(feed: Feed) -> float:
    """Water [kg/kg mix] that leaves a mixer, not the stack; what stays is shared alike."""
    dried = 1.0 - float(feed.residual_of_mix) / float(feed.water_kg_kg)
    return sum(
        float(one.of_mix) * float(one.moisture_of_dry_mass) * dried
        for one in feed.rap
        if not STEAM_TO_STACK[one.point]
    )


def dry_gas_mol(burnt: Combustion, fuel_kg: float, air_kg: float) -> dict[str, float]:
    """Dry gas at the stack [mol/kg mix], by gas."""
    spare = (air_kg - fuel_kg * burnt.air_kg_kg) / molar_masses_kg_mol()["air"]
    gases = {gas: fuel_kg * mol for gas, mol in burnt.products_mol_kg.items() if gas != "H2O"}
    for gas, share in AIR_MOLES.items():
        gases[gas] = gases.get(gas, 0.0) + share * spare
    return gases


@settings(max_examples=200, deadline=None)
@given(dryers())
def test_mass_closes(dryer: Operation) -> None:
    balance, burnt, kg = heat_balance(dryer), combustion(dryer.fuel), molar_masses_kg_mol()
    fuel, air = float(balance.fuel_kg_kg), float(balance.dry_air_kg_kg)
    damp = float(humidity_ratio(dryer.air.air_c, dryer.air.relative_humidity,
                                dryer.air.pressure_pa))  # fmt: skip
    fed = 1.0 + float(dryer.feed.water_kg_kg) + fuel + air * (1.0 + damp)
    gases = dry_gas_mol(burnt, fuel, air)
    assert sum(gases.values()) == pytest.approx(float(balance.exhaust_dry_mol_kg), rel=CLOSES)
    vapour = float(balance.exhaust_wet_mol_kg - balance.exhaust_dry_mol_kg) * kg["H2O"]
    out = (
        1.0
        + float(dryer.feed.residual_of_mix)
        + steam_past_stack(dryer.feed)
        + fuel * burnt.inert_kg_kg
        + vapour
        + sum(mol * kg[gas] for gas, mol in gases.items())
    )
    assert out == pytest.approx(fed, rel=CLOSES)
    # and carbon and sulfur apart
    assert float(balance.co2_kg_kg) == pytest.approx(gases["CO2"] * kg["CO2"], rel=CLOSES)
    assert float(balance.so2_kg_kg) == pytest.approx(
        gases["SO2"] * kg["SO2"], rel=CLOSES, abs=1e-15
    )


@settings(max_examples=200, deadline=None)
@given(dryers())
def test_energy_closes(dryer: Operation) -> None:
    balance, burnt = heat_balance(dryer), combustion(dryer.fuel)
    fuel, air, feed = float(balance.fuel_kg_kg), float(balance.dry_air_kg_kg), dryer.feed
    mix_c, stack_c, air_c = (float(one) for one in (dryer.discharge_c, dryer.stack_c,
                                                    dryer.air.air_c))  # fmt: skip
    damp = float(humidity_ratio(air_c, dryer.air.relative_humidity, dryer.air.pressure_pa))

    def old_j_kg(rap: Rap, at_c: float) -> float:
        binder = float(rap.binder_of_rap)
        return float(
            (1.0 - binder) * rap.aggregate.enthalpy_j_kg(at_c)
            + binder * binder_enthalpy_j_kg(at_c, feed.binder_relative_density)
        )

    def water_j(one: Fraction | Rap) -> float:
        water = float(one.of_mix) * float(one.moisture_of_dry_mass)
        return water * float(water_enthalpy_j_kg(one.cold_c)) if water else 0.0

    fed = (
        fuel * burnt.net_j_kg
        + air * float(dry_air_enthalpy_j_kg(air_c) + damp * steam_enthalpy_j_kg(air_c))
        + sum(float(one.of_mix * one.aggregate.enthalpy_j_kg(one.cold_c))
              for one in (*feed.fractions, *feed.filler))
        + sum(float(one.of_mix) * old_j_kg(one, float(one.cold_c)) for one in feed.rap)
        + sum(water_j(one) for one in (*feed.fractions, *feed.rap))
        + float(feed.binder_of_mix * binder_enthalpy_j_kg(feed.binder_c,
                                                          feed.binder_relative_density))
    )  # fmt: skip
    # the stone between dryer and mixer loses what its drop says, out of the casing of the tower
    hot_c = mix_c + float(dryer.transfer_drop_k)
    mixed = (
        sum(float(one.of_mix * one.aggregate.enthalpy_j_kg(mix_c))
            for one in (*feed.fractions, *feed.filler))
        + sum(float(one.of_mix) * old_j_kg(one, mix_c) for one in feed.rap)
        + float(feed.binder_of_mix * binder_enthalpy_j_kg(mix_c, feed.binder_relative_density))
        + float(feed.residual_of_mix) * float(water_enthalpy_j_kg(mix_c))
    )  # fmt: skip
    past = steam_past_stack(feed)
    to_stack = float(balance.water_kg_kg) - past
    gas = (
        sum(mol * float(gas_enthalpy_j_mol(name, stack_c))
            for name, mol in dry_gas_mol(burnt, fuel, air).items())
        + fuel * burnt.products_mol_kg["H2O"] * float(gas_enthalpy_j_mol("H2O", stack_c))
        + (to_stack + air * damp) * float(steam_enthalpy_j_kg(stack_c))
        + past * float(steam_enthalpy_j_kg(mix_c))
    )  # fmt: skip
    lost = (
        float(dryer.casing_of_net) * fuel * burnt.net_j_kg
        + float(dryer.casing_j_kg)
        + sum(float(one.of_mix * (one.aggregate.enthalpy_j_kg(hot_c)
                                  - one.aggregate.enthalpy_j_kg(mix_c)))
              for one in feed.fractions)
    )  # fmt: skip
    assert mixed + gas + lost == pytest.approx(fed, rel=CLOSES)
    assert float(balance.gross_j_kg) == pytest.approx(fuel * burnt.gross_j_kg, rel=CLOSES)
    assert np.isfinite(float(balance.dew_point_c))
