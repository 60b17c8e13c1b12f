"""Fuels: air, products, heating values, carbon dioxide and air ratio."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from advisor.dryer import (
    Fuel,
    air_ratio_from_dry_oxygen,
    air_ratio_from_wet_oxygen,
    combustion,
    dry_co2,
    dry_oxygen,
    fuel_from_moles,
    fuel_of_row,
    gas_at_standard_m3,
    gross_estimate_j_kg,
    heat_balance,
    with_air_ratio,
)
from advisor.dryer.properties import GAS_CONSTANT_J_MOLK, molar_masses_kg_mol
from advisor.errors import FaultyInput, OutsideValidity
from advisor.settings.tables import load_table
from dryer.published import BTU_J, POUND_KG, Case, agrees, base, case, cases, fuel

METHANE = fuel_from_moles("methane", {"CH4": 1.0})
MMBTU_J = 1e6 * BTU_J


def test_air_of_methane() -> None:
    assert agrees(case("CMB01"), combustion(METHANE).air_kg_kg)


def test_gross_and_net_heat_of_methane() -> None:
    burnt, molar_kg = combustion(METHANE), METHANE.molar_mass_kg_mol
    assert agrees(case("CMB02"), burnt.gross_j_kg * molar_kg / 1000.0)
    assert agrees(case("CMB03"), burnt.net_j_kg * molar_kg / 1000.0)


def test_oxygen_at_80_percent_excess_air() -> None:
    one = case("CMB04")
    assert float(air_ratio_from_dry_oxygen(one.expected / 100.0, METHANE)) == pytest.approx(
        1.0 + one["excess"], abs=2e-3
    )


def test_air_ratio_from_dry_oxygen() -> None:
    one = case("CMB06")
    assert agrees(one, air_ratio_from_dry_oxygen(one["O2_dry_pct"] / 100.0, fuel("natural gas")))
    # the crude form leaves out the gas the fuel itself makes, and is 6 % too high
    crude = case("CMB07")
    assert agrees(crude, 20.95 / (20.95 - crude["O2_dry_pct"]))
    assert crude.expected > 1.06 * one.expected


def test_air_and_water_of_distillate_oil() -> None:
    burnt = combustion(fuel("No2"))
    assert agrees(case("CMB08"), burnt.air_kg_kg)
    assert agrees(case("CMB09"), burnt.water_kg_kg)


@pytest.mark.parametrize(
    ("name", "fuel_name"),
    [
        ("CMB11", "No2"),
        ("CMB12", "NG"),
        ("CMB13", "No6"),
        ("CMB16", "propane"),
    ],
)
def test_published_carbon_factors_are_in_the_table(name: str, fuel_name: str) -> None:
    assert agrees(case(name), fuel(fuel_name).co2_factor_kg_j * MMBTU_J)


@pytest.mark.parametrize(
    # carbon chemistry against the factors of 40 CFR 98 Table C-1
    ("fuel_name", "factor", "within"),
    [("NG", 53.06, 0.005), ("propane", 62.87, 0.002), ("No2", 73.96, 0.002)],
)
def test_carbon_of_the_fuel_agrees_with_its_factor(
    fuel_name: str, factor: float, within: float
) -> None:
    burnt = combustion(fuel(fuel_name))
    own = burnt.co2_kg_kg / burnt.gross_j_kg * MMBTU_J
    assert own == pytest.approx(factor, rel=within)


def test_heavy_oil_agrees_with_the_other_publication() -> None:
    # two publications differ by 5 %; carbon of 86.6 % speaks for the higher
    one = case("CMB14")
    assert agrees(one, one["lb_per_mmBtu"] * POUND_KG)
    burnt = combustion(fuel("No6"))
    assert burnt.co2_kg_kg / burnt.gross_j_kg * MMBTU_J == pytest.approx(one.expected, rel=2e-3)


def test_carbon_that_a_factor_implies() -> None:
    one = case("CMB17")
    heat_j_kg = one["HHV_Btu_lb"] * BTU_J / POUND_KG
    carbon = one["EF"] / MMBTU_J * heat_j_kg * 12.0107 / 44.0095
    assert agrees(one, carbon)
    assert fuel("No2").carbon == pytest.approx(carbon, abs=1e-3)


def test_net_heat_of_distillate_oil() -> None:
    assert agrees(case("CMB18"), combustion(fuel("No2")).net_j_kg / 1e6)


def test_dry_gas_per_heat() -> None:
    # dry F factor at 68 F (20 C); the regulation's 8710 is 0.9 % higher
    one = case("CMB19")
    burnt = combustion(fuel("natural gas"))
    m3 = burnt.dry_mol_kg * GAS_CONSTANT_J_MOLK * (20.0 + 273.15) / 101325.0
    feet3 = m3 / 0.3048**3 / burnt.gross_j_kg * MMBTU_J
    assert agrees(one, feet3)
    assert feet3 == pytest.approx(8710.0, rel=0.012)


def test_most_carbon_dioxide_in_dry_gas() -> None:
    assert agrees(case("CMB21"), 100.0 * combustion(fuel("natural gas")).co2_max)


def test_carbon_dioxide_that_belongs_to_an_oxygen_reading() -> None:
    one = case("CMB22")
    assert agrees(one, 100.0 * dry_co2(one["O2_dry_pct"] / 100.0, fuel("natural gas")))


def test_metered_gas_at_standard_conditions() -> None:
    one = case("CMB23")
    standard = gas_at_standard_m3(one["Q_m3_h"], one["p_gauge_bar"] * 1e5, one["T_C"], one["Z"])
    assert agrees(one, standard)


def test_net_over_gross_of_natural_gas() -> None:
    # the table's gas has 95 % methane, the published one is not told: 0.1 % apart
    one = case("CMB24")
    assert agrees(one, one["LHV_Btu_ft3"] / one["HHV_Btu_ft3"])
    burnt = combustion(fuel("natural gas"))
    assert burnt.net_j_kg / burnt.gross_j_kg == pytest.approx(one.expected, abs=1e-3)


@pytest.mark.parametrize(
    # computed apart from this code: MJ/kg net, air kg/kg, CO2 kg/kg, water kg/kg, CO2 % dry
    ("name", "net", "air", "co2", "water", "most"),
    [
        ("natural gas", 48.09, 16.55, 2.673, 2.135, 11.84),
        ("propane", 46.33, 15.68, 2.994, 1.634, 13.72),
        ("distillate oil", 42.78, 14.41, 3.195, 1.139, 15.58),
        ("heavy oil", 40.14, 13.71, 3.173, 0.965, 16.13),
        ("recycled oil", 40.23, 13.84, 3.041, 1.135, 15.46),
    ],
)
def test_every_fuel_of_the_table(
    name: str, net: float, air: float, co2: float, water: float, most: float
) -> None:
    burnt = combustion(fuel_of_row(load_table("fuels").row(name)))
    assert burnt.net_j_kg / 1e6 == pytest.approx(net, abs=0.01)
    assert burnt.air_kg_kg == pytest.approx(air, abs=0.01)
    assert burnt.co2_kg_kg == pytest.approx(co2, abs=1e-3)
    assert burnt.water_kg_kg == pytest.approx(water, abs=1e-3)
    assert 100.0 * burnt.co2_max == pytest.approx(most, abs=0.015)


def test_heating_values_of_the_table_follow_from_heats_of_formation() -> None:
    for name in ("natural gas", "propane"):
        row = load_table("fuels").row(name)
        worked_out = fuel_from_moles(name, row["moles"]).gross_j_kg
        assert row["gross"] == pytest.approx(worked_out, rel=1e-4)


def test_estimate_from_an_ultimate_analysis() -> None:
    # 44.96 MJ/kg for No 2 oil, 1.3 % below the measured 45.56
    row = load_table("fuels").row("distillate oil")
    assert gross_estimate_j_kg(row) / 1e6 == pytest.approx(44.96, abs=0.01)


@pytest.mark.parametrize("one", cases("CO201", "CO202"), ids=str)
def test_carbon_factors_in_other_units(one: Case) -> None:
    per_j = one["kg_mmBtu"] / MMBTU_J
    if "LHV_HHV" in one.inputs:
        assert agrees(one, per_j * 1e9 / one["LHV_HHV"])
    else:
        assert agrees(one, per_j * 3.6e6)


@pytest.mark.parametrize(
    # Ireland's net factors: within 2 % of the carbon of distillate; that of heavy oil is 4.0 % away
    ("name", "fuel_name", "within"),
    [("CO204", "No2", 0.02), ("CO205", "No6", 0.045)],
)
def test_net_factors_of_another_country(name: str, fuel_name: str, within: float) -> None:
    burnt = combustion(fuel(fuel_name))
    own = burnt.co2_kg_kg / burnt.net_j_kg * 1e9
    assert own == pytest.approx(case(name).expected, rel=within)


@given(st.floats(1.0, 6.0))
def test_air_ratio_there_and_back_by_dry_oxygen(air_ratio: float) -> None:
    balance = heat_balance(with_air_ratio(replace(base(), stack_c=160.0), air_ratio))
    back = air_ratio_from_dry_oxygen(balance.oxygen_dry, base().fuel)
    assert float(back) == pytest.approx(air_ratio, rel=1e-9)
    assert float(dry_co2(balance.oxygen_dry, base().fuel)) == pytest.approx(
        float(balance.carbon_dioxide_dry), rel=1e-9
    )


@given(st.floats(1.0, 6.0))
def test_air_ratio_there_and_back_by_a_wet_probe(air_ratio: float) -> None:
    balance = heat_balance(with_air_ratio(replace(base(), stack_c=160.0), air_ratio))
    wet = balance.oxygen_dry * (1.0 - balance.vapour_share)
    back = air_ratio_from_wet_oxygen(replace(base(), stack_c=160.0), wet)
    assert float(back) == pytest.approx(air_ratio, rel=1e-9)
    assert float(dry_oxygen(wet, balance.vapour_share)) == pytest.approx(
        float(balance.oxygen_dry), rel=1e-12, abs=1e-15
    )


def test_a_wet_probe_reads_less_oxygen() -> None:
    # 8.1 % wet is 12 % dry at 32 % vapour
    assert float(dry_oxygen(0.081, 0.32)) == pytest.approx(0.119, abs=1e-3)


@pytest.mark.parametrize("oxygen", [0.2095, 0.21, -0.01, [0.1, 0.209, 0.25]])
def test_oxygen_of_air_is_refused(oxygen: float | list[float]) -> None:
    with pytest.raises(OutsideValidity, match=r"20\.95 %"):
        air_ratio_from_dry_oxygen(oxygen, METHANE)
    with pytest.raises(OutsideValidity, match=r"20\.95 %"):
        air_ratio_from_wet_oxygen(base(), oxygen)


def test_a_fuel_that_cannot_be_is_refused_with_every_fault() -> None:
    with pytest.raises(FaultyInput) as refused:
        Fuel("odd", 0.9, -0.1, 0.0, 0.0, 0.0, 0.0, 0.0)
    assert [fault.code for fault in refused.value.faults] == [
        "fuel-share",
        "fuel-sum",
        "fuel-heat",
    ]


def test_gases_that_are_not_known_or_do_not_sum_are_refused() -> None:
    with pytest.raises(FaultyInput, match="Known: CH4"):
        fuel_from_moles("odd", {"CH4": 0.5, "CH3": 0.5})
    with pytest.raises(FaultyInput, match=r"sum to 0\.9"):
        fuel_from_moles("odd", {"CH4": 0.9})


def test_mass_of_the_products_is_that_of_fuel_and_air() -> None:
    for row in load_table("fuels").rows:
        burnt, kg = combustion(fuel_of_row(row)), molar_masses_kg_mol()
        products = sum(moles * kg[gas] for gas, moles in burnt.products_mol_kg.items())
        assert products + burnt.inert_kg_kg == pytest.approx(1.0 + burnt.air_kg_kg, rel=1e-9)
        assert np.isfinite(burnt.net_j_kg)
