"""What a degree, a percent of moisture and a leak cost."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from advisor.dryer import (
    Operation,
    StackRise,
    aggregate_of_row,
    at_discharge,
    combustion,
    degrees_worth_k,
    drier,
    heat_balance,
    heat_change,
    leakage_cost,
    moisture_cost,
    money_per_gross_j,
    overheating_cost,
    with_air_ratio,
    with_fuel,
)
from advisor.errors import FaultyInput
from advisor.settings.tables import load_table
from dryer.published import BTU_J, agrees, base, base_balance, case, fuel

RISE = StackRise(0.0, 0.5, 1.0)
MEASURED = load_table("overheating").row("measured saving")["of_fuel"]


def real_stone() -> Operation:
    """The reference plant with stone that warms harder when hot."""
    rock = aggregate_of_row(load_table("aggregates").row("mixed aggregate"))
    (fraction,) = base().feed.fractions
    return replace(
        base(), feed=replace(base().feed, fractions=(replace(fraction, aggregate=rock),))
    )


def test_efficiency_of_the_last_degree() -> None:
    # 0.769 with the stack held, equal to the average; 0.655 and 0.57 where it rises by half of the
    # mix and with the mix, worked out apart from this code
    cost = overheating_cost(base(), 10.0, RISE)
    held = float(cost.efficiency.low)
    assert held == pytest.approx(float(base_balance().efficiency_gross), rel=1e-12)
    assert held == pytest.approx(0.769, abs=1e-3)
    assert float(cost.efficiency.central) == pytest.approx(0.655, abs=4e-3)
    assert float(cost.efficiency.high) == pytest.approx(0.57, abs=8e-3)


@pytest.mark.parametrize("name", ["OVH01", "OVH02"])
def test_waste_factor(name: str) -> None:
    # the row divides a heat capacity of the mix by an efficiency; ours comes from two balances
    one = case(name)
    assert agrees(one, one["c_mix"] / one["eta_inc_gross"])
    cost = overheating_cost(real_stone(), 10.0, RISE)
    ours = cost.gross_j_kg_k.central if name == "OVH01" else cost.gross_j_kg_k.low
    assert float(ours) / 1000.0 == pytest.approx(one.expected, rel=0.05)


def test_the_high_end_is_the_one_measured_in_trials() -> None:
    one = case("OVH03")
    assert agrees(one, one["q_MJ_t"] * one["share"] / one["dT_C"])
    cost = overheating_cost(base(), 10.0, RISE, MEASURED)
    assert float(cost.gross_j_kg_k.high) / 1000.0 == pytest.approx(one.expected, rel=2e-3)
    assert case("PUB09").expected / 100.0 / (case("PUB09")["dT_F"] / 1.8) == pytest.approx(MEASURED)


def test_carbon_dioxide_of_ten_degrees() -> None:
    one = case("OVH05")
    assert agrees(one, 10.0 * one["MJ_t_C"] * 1e6 * one["kg_mmBtu"] / (1e6 * BTU_J))
    cost = overheating_cost(real_stone(), 10.0, RISE)
    assert float(cost.co2_kg_kg.central) * 1000.0 == pytest.approx(one.expected, rel=0.05)


def test_a_season_of_overheating() -> None:
    one = case("OVH06")
    assert agrees(one, one["t"] * one["excess_C"] * one["MJ_t_C"] / 3600.0)


def test_ten_degrees_at_the_reference_plant() -> None:
    # 12.6, 14.8 and 17.1 MJ/t for stack rises of 0, 5 and 10 C, worked out apart from this code for
    # stone of 0.90 kJ/(kg K) at any temperature
    even = overheating_cost(base(), 10.0, RISE).gross_j_kg
    assert [float(one) / 1000.0 for one in (even.low, even.central, even.high)] == pytest.approx(
        [12.6, 14.8, 17.1], abs=0.1
    )
    # 13.6 with 0.98 kJ/(kg K) for the last degrees: ours is 0.98 at 165 C. What the gas takes along
    # does not depend on the stone.
    cost = overheating_cost(real_stone(), 10.0, RISE)
    assert float(cost.gross_j_kg.low) / 1000.0 == pytest.approx(13.6, abs=0.1)
    for side in ("central", "high"):
        gas = [float(getattr(one, side) - one.low) for one in (cost.gross_j_kg, even)]
        assert gas[0] == pytest.approx(gas[1], rel=0.02)
    # gas grows by 3.0, 4.9, 6.7 % per 10 C: what a plant short of fan loses
    exhaust = cost.exhaust_of_flow
    assert [float(100 * part) for part in (exhaust.low, exhaust.central, exhaust.high)] == (
        pytest.approx([3.0, 4.9, 6.7], abs=0.2)
    )


def test_no_plant_is_below_the_heat_of_the_mix_itself() -> None:
    cost = overheating_cost(real_stone(), 10.0, RISE)
    assert cost.floor_j_kg_k < cost.gross_j_kg_k.low < cost.gross_j_kg_k.central
    # 2.6 kWh/t per 10 C is published: the heat in the mix at 0.94 kJ/(kg K), a floor
    assert float(cost.floor_j_kg_k) / 1000.0 == pytest.approx(1.0, rel=0.05)


def test_overheating_is_the_same_per_tonne_at_any_moisture() -> None:
    dry, wet = drier(base(), 0.02), drier(base(), -0.02)
    assert float(overheating_cost(dry, 10.0, RISE).gross_j_kg_k.low) == pytest.approx(
        float(overheating_cost(wet, 10.0, RISE).gross_j_kg_k.low), rel=1e-9
    )


def test_one_percent_moisture_is_worth_about_22_degrees() -> None:
    wetter = moisture_cost(base(), -0.01)
    worth = degrees_worth_k(wetter, overheating_cost(real_stone(), 10.0, RISE, MEASURED))
    assert worth.low < worth.central < worth.high
    assert float(worth.central) == pytest.approx(21.0, abs=1.5)


@pytest.mark.parametrize(
    ("name", "low", "high"),
    # published 7 to 8 kWh/t per 1 %, and 24 000 Btu/ton: ours is 8.2 net, 9.1 gross (28 300
    # Btu/ton). The published ones lie up to a fifth lower; a slope below 6.9 breaks the first law.
    [("PUB04", 0.8, 0.9), ("PUB05", 0.9, 1.0)],
)
def test_published_heat_of_moisture(name: str, low: float, high: float) -> None:
    change = moisture_cost(base(), -0.01)
    net_kwh_t = float(change.net_j_kg) / 3600.0
    assert low < case(name).expected / net_kwh_t < high
    water = change.parts.evaporation + change.parts.superheat
    assert float(water) / 3600.0 == pytest.approx(7.0, abs=0.05)


def test_published_saving_of_a_paved_stockpile() -> None:
    saving, per_percent = case("PUB07"), case("PUB08")
    assert agrees(per_percent, saving.expected / saving["d_moisture_pct"])
    ours = -float(moisture_cost(base(), saving["d_moisture_pct"] / 100.0).gross_j_kg)
    ours_btu_ton = ours * 907.18474 / BTU_J
    # the published plant saved 15 % less than the balance expects; neither its fuel basis nor its
    # moisture basis is told
    assert saving.expected == pytest.approx(ours_btu_ton, rel=0.18)


@pytest.mark.parametrize(("name", "more"), [("PUB02", 1.2), ("PUB03", 0.95)])
def test_published_trial_of_a_batch_plant(name: str, more: float) -> None:
    # 80 kWh/t at 1.46 % is far above the balance (starts, stops, idling), 139.75 at 9.83 % close
    one = case(name)
    (fraction,) = base().feed.fractions
    wet = replace(fraction, moisture_of_dry_mass=one["moisture_pct"] / 100.0)
    ours = heat_balance(replace(base(), feed=replace(base().feed, fractions=(wet,))))
    assert one.expected > more * float(ours.gross_j_kg) / 3600.0


def test_published_efficiency_of_a_rotary_dryer() -> None:
    # 0.89 at design, heating value not told: ours lies 4 points below it on net heat
    assert float(base_balance().efficiency_net) == pytest.approx(case("PUB10").expected, abs=0.04)


@pytest.mark.parametrize(
    ("after", "part"),
    [
        (lambda plant: at_discharge(plant, 150.0, 0.0), "aggregate"),
        (lambda plant: drier(plant, 0.01), "evaporation"),
        (lambda plant: with_air_ratio(plant, 1.8), "excess_air"),
        (lambda plant: replace(plant, casing_of_net=0.03), "casing"),
    ],
)
def test_a_saving_shows_where_the_heat_went(after, part: str) -> None:  # type: ignore[no-untyped-def]
    change = heat_change(base(), after(base()))
    by_name = dict(change.parts.rows())
    assert change.gross_j_kg < 0.0
    assert min(by_name, key=lambda name: float(by_name[name])) == part
    assert float(sum(by_name.values())) == float(change.gross_j_kg)


@given(
    mix_c=st.floats(120.0, 180.0),
    off=st.floats(-0.03, 0.05),
    air_ratio=st.floats(1.2, 4.0),
    other=st.sampled_from(["natural gas", "propane", "No2", "No6", "used oil"]),
)
def test_parts_of_a_change_sum_to_it_exactly(
    mix_c: float, off: float, air_ratio: float, other: str
) -> None:
    after = with_fuel(with_air_ratio(drier(at_discharge(base(), mix_c, 0.5), off), air_ratio),
                      fuel(other))  # fmt: skip
    change = heat_change(base(), after)
    assert float(sum(part for _, part in change.parts.rows())) == float(change.gross_j_kg)
    twice = heat_balance(after).gross_j_kg - base_balance().gross_j_kg
    assert float(change.gross_j_kg) == pytest.approx(float(twice), abs=1e-9 * 3.3e5)


def test_a_change_and_its_return_cancel() -> None:
    there = heat_change(base(), drier(base(), 0.01))
    back = heat_change(drier(base(), 0.01), base())
    assert float(there.gross_j_kg + back.gross_j_kg) == pytest.approx(0.0, abs=1e-9)


def test_no_stone_is_dried_below_dry() -> None:
    (fraction,) = drier(base(), 0.2).feed.fractions
    assert float(fraction.moisture_of_dry_mass) == 0.0


def test_leakage_costs_what_the_air_carries_out() -> None:
    # air ratio 2.2 to 2.7 costs 7.2 MJ/t, 2.2 %
    change = leakage_cost(base(), 2.7)
    assert float(change.gross_j_kg) / 1000.0 == pytest.approx(7.2, abs=0.15)
    assert float(change.of_gross) == pytest.approx(0.022, abs=5e-4)


def test_another_fuel_may_burn_more_gross_heat_and_cost_less() -> None:
    gas, oil = fuel("natural gas"), fuel("No2")
    change = heat_change(with_fuel(base(), oil), base())
    assert change.gross_j_kg > 0.0  # gas makes more water, so more gross heat is needed
    money = change.money_kg(
        money_per_gross_j(oil, 0.9, "L"), money_per_gross_j(gas, 0.041, "kWh gross")
    )
    assert money < 0.0
    assert float(change.fuel_kg_kg) == pytest.approx(
        float(change.after.gross_j_kg) / combustion(gas).gross_j_kg
        - float(change.before.gross_j_kg) / combustion(oil).gross_j_kg
    )


def test_overheating_over_arrays() -> None:
    cost = overheating_cost(base(), np.array([2.0, 10.0]), RISE)
    assert cost.gross_j_kg.central.shape == (2,)
    assert cost.gross_j_kg.central[1] > cost.gross_j_kg.central[0]


def test_wetter_than_can_be_is_refused() -> None:
    with pytest.raises(FaultyInput, match=r"not between 0 and 0\.5"):
        heat_change(base(), drier(base(), -0.6))
