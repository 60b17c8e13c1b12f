"""Water, air, stone and binder against the rows of cases.csv and against other libraries."""

from __future__ import annotations

import numpy as np
import psychrolib
import pytest
from hypothesis import given
from hypothesis import strategies as st

from advisor.dryer import (
    Aggregate,
    aggregate_of_row,
    air_pressure_pa,
    binder_enthalpy_j_kg,
    binder_specific_heat_j_kgk,
    combined_moisture,
    dew_point_c,
    humidity_ratio,
    moisture_of_dry_mass,
    moisture_of_wet_mass,
    saturation_pressure_pa,
    steam_enthalpy_j_kg,
    water_enthalpy_j_kg,
)
from advisor.dryer.properties import (
    GAS_RANGE_C,
    dry_air_enthalpy_j_kg,
    gas_enthalpy_j_mol,
    molar_masses_kg_mol,
)
from advisor.errors import OutsideValidity
from advisor.settings.tables import load_table
from dryer.published import BTU_J, BTU_LB_F_J_KGK, POUND_KG, Case, agrees, case, cases

psychrolib.SetUnitSystem(psychrolib.SI)


@pytest.mark.parametrize("one", cases("WTR01", "WTR02"), ids=str)
def test_saturation_pressure(one: Case) -> None:
    assert agrees(one, saturation_pressure_pa(one["T_C"]))


def test_dew_point_of_a_vapour_share() -> None:
    one = case("WTR03")
    assert agrees(one, dew_point_c(one["p_Pa"]))


def test_enthalpy_of_liquid_water() -> None:
    one = case("WTR04")
    assert agrees(one, water_enthalpy_j_kg(one["T_C"]) / 1000.0)


@pytest.mark.parametrize("one", cases("WTR06", "WTR07", "WTR08"), ids=str)
def test_heat_that_a_kilogram_of_water_takes_up(one: Case) -> None:
    # Ours is the vapour at vanishing pressure: 0.1 % above real steam at 0.3 atm, 0.02 % below the
    # short form, whose own tolerance (0.01 kJ/kg) is that of its arithmetic.
    heat = steam_enthalpy_j_kg(one["T_stack_C"]) - water_enthalpy_j_kg(one["T_in_C"])
    slack = max(one.tolerance, 1.0)
    assert float(heat) / 1000.0 == pytest.approx(one.expected, abs=slack)


def test_heat_of_water_in_american_units() -> None:
    one = case("WTR09")
    start_c, end_c = (one["T_in_F"] - 32.0) / 1.8, (one["T_stack_F"] - 32.0) / 1.8
    heat = steam_enthalpy_j_kg(end_c) - water_enthalpy_j_kg(start_c)
    assert agrees(one, heat * POUND_KG / BTU_J)


def test_ice_takes_its_heat_of_melting_with_it() -> None:
    # heat of melting of ice 333.4 kJ/kg, IAPWS R10-06 (2009)
    gap = water_enthalpy_j_kg(0.0) - water_enthalpy_j_kg(-1e-9)
    assert float(gap) == pytest.approx(333.4e3, rel=1e-3)


def test_pressure_of_a_height() -> None:
    one = case("AIR02")
    assert agrees(one, air_pressure_pa(one["altitude_m"]))
    # psychrolib writes the standard atmosphere of ASHRAE with fewer digits
    assert air_pressure_pa(1500.0) == pytest.approx(
        psychrolib.GetStandardAtmPressure(1500.0), rel=1e-4
    )


def test_a_height_that_is_none_is_refused() -> None:
    with pytest.raises(OutsideValidity, match="altitude"):
        air_pressure_pa(9000.0)


@given(air_c=st.floats(0.0, 45.0), humidity=st.floats(0.05, 1.0), height_m=st.floats(0.0, 2500.0))
def test_humidity_ratio_agrees_with_ashrae(air_c: float, humidity: float, height_m: float) -> None:
    # psychrolib holds the ASHRAE saturation equation: 0.05 % from IAPWS-IF97
    pressure = air_pressure_pa(height_m)
    theirs = psychrolib.GetHumRatioFromRelHum(air_c, humidity, pressure)
    assert float(humidity_ratio(air_c, humidity, pressure)) == pytest.approx(theirs, rel=2e-3)


def test_moisture_of_wet_and_of_dry_mass() -> None:
    wet, dry = case("AIR03"), case("AIR04")
    assert agrees(wet, 100.0 * moisture_of_wet_mass(wet["w_dry_pct"] / 100.0))
    assert agrees(dry, 100.0 * moisture_of_dry_mass(dry["w_wet_pct"] / 100.0))


@given(st.floats(0.0, 0.3))
def test_moisture_there_and_back(moisture: float) -> None:
    back = moisture_of_dry_mass(moisture_of_wet_mass(moisture))
    assert float(back) == pytest.approx(moisture, abs=1e-15)


def test_moisture_of_fractions_together() -> None:
    sand_and_coarse = combined_moisture([40.0, 60.0], [[0.08, 0.02], [0.05, 0.05]])
    assert sand_and_coarse == pytest.approx([0.044, 0.05])


def test_specific_heat_of_binder() -> None:
    one = case("MAT01")
    heat = binder_specific_heat_j_kgk((one["T_F"] - 32.0) / 1.8, one["d_60_60"])
    assert agrees(one, heat / BTU_LB_F_J_KGK)


@given(st.floats(0.0, 200.0))
def test_enthalpy_of_binder_is_the_integral_of_its_specific_heat(at_c: float) -> None:
    slope = (binder_enthalpy_j_kg(at_c + 0.5) - binder_enthalpy_j_kg(at_c - 0.5)) / 1.0
    assert float(slope) == pytest.approx(float(binder_specific_heat_j_kgk(at_c)), rel=1e-9)


@given(st.floats(-20.0, 400.0))
def test_enthalpy_of_stone_is_the_integral_of_its_specific_heat(at_c: float) -> None:
    rock = Aggregate("rock", 700.0, 1.7, -1.8e-3)
    slope = (rock.enthalpy_j_kg(at_c + 0.01) - rock.enthalpy_j_kg(at_c - 0.01)) / 0.02
    assert float(slope) == pytest.approx(float(rock.specific_heat_j_kgk(at_c)), rel=1e-6)


def table_stone(name: str) -> Aggregate:
    return aggregate_of_row(load_table("aggregates").row(name))


@pytest.mark.parametrize(
    ("one", "name", "at_c"),
    [(case("MAT03"), "quartz", 126.85), (case("MAT04"), "limestone", 160.0)],
    ids=["MAT03", "MAT04"],
)
def test_specific_heat_of_stone(one: Case, name: str, at_c: float) -> None:
    # the rows are the equations; the table of config/ is their parabola, within 1.1 %
    heat = float(table_stone(name).specific_heat_j_kgk(at_c)) / 1000.0
    assert heat == pytest.approx(one.expected, rel=0.011)


@pytest.mark.parametrize(
    ("one", "name"), [(case("MAT05"), "quartz"), (case("MAT06"), "limestone")], ids=["MAT05", "06"]
)
def test_mean_specific_heat_of_stone(one: Case, name: str) -> None:
    rise = table_stone(name).enthalpy_j_kg(one["T2_C"]) - table_stone(name).enthalpy_j_kg(
        one["T1_C"]
    )
    assert agrees(one, rise / (one["T2_C"] - one["T1_C"]) / 1000.0)


def test_mixed_aggregate_has_the_means_it_was_drawn_through() -> None:
    rock = table_stone("mixed aggregate")
    mean = (rock.enthalpy_j_kg(160.0) - rock.enthalpy_j_kg(15.0)) / 145.0
    assert float(mean) == pytest.approx(900.0, abs=0.5)
    assert float(rock.specific_heat_j_kgk(165.0)) == pytest.approx(980.0, abs=0.5)


def test_tables_of_stone_follow_the_library() -> None:
    from chemicals.heat_capacity import Cp_dict_JANAF_solid, Cp_dict_PerryI

    kelvin, molar = (np.array(part) for part in Cp_dict_JANAF_solid["14808-60-7"])
    points = (kelvin >= 298.0) & (kelvin <= 573.15)
    quartz = table_stone("quartz").specific_heat_j_kgk(kelvin[points] - 273.15)
    assert quartz == pytest.approx(molar[points] / 0.0600843, rel=5e-3)

    perry = Cp_dict_PerryI["471-34-1"]["c"]
    at_c = np.linspace(0.0, 300.0, 31)
    t = at_c + 273.15
    calorie = perry["Const"] + perry["Lin"] * t + perry["Quadinv"] / t**2
    limestone = table_stone("limestone").specific_heat_j_kgk(at_c)
    assert limestone == pytest.approx(4.184 * calorie / 0.1000869, rel=1.1e-2)


@pytest.mark.parametrize(
    ("gas", "to_c", "mean_kj_kgk"),
    # mean specific heats from 25 C by NASA polynomials (another source than ours)
    [
        ("N2", 100.0, 1.041), ("N2", 150.0, 1.043),
        ("O2", 100.0, 0.926), ("O2", 150.0, 0.932), ("O2", 200.0, 0.939),
        ("CO2", 100.0, 0.880), ("CO2", 150.0, 0.903), ("CO2", 200.0, 0.924),
        ("H2O", 100.0, 1.876), ("H2O", 150.0, 1.887), ("H2O", 200.0, 1.898),
    ],
)  # fmt: skip
def test_gases_against_nasa_polynomials(gas: str, to_c: float, mean_kj_kgk: float) -> None:
    mean = gas_enthalpy_j_mol(gas, to_c) / molar_masses_kg_mol()[gas] / (to_c - 25.0)
    assert float(mean) / 1000.0 == pytest.approx(mean_kj_kgk, rel=1.5e-3)


@pytest.mark.parametrize(
    ("gas", "kj_mol"), [("N2", 5.911), ("O2", 6.084), ("CO2", 8.305), ("H2O", 6.925)]
)
def test_gases_against_the_janaf_tables(gas: str, kj_mol: float) -> None:
    # enthalpy at 500 K above that at 298.15 K, NIST-JANAF tables (1998), from memory
    assert float(gas_enthalpy_j_mol(gas, 226.85)) / 1000.0 == pytest.approx(kj_mol, abs=0.012)


def test_fitted_curves_add_nothing_that_matters() -> None:
    from chemicals.heat_capacity import TRC_gas_data, TRCCp_integral
    from chemicals.iapws import iapws95_properties
    from chemicals.vapor_pressure import Psat_IAPWS

    at_c = np.linspace(*GAS_RANGE_C, 133)
    for gas, cas in (("N2", "7727-37-9"), ("CO2", "124-38-9"), ("O2", "7782-44-7")):
        a = TRC_gas_data.loc[cas, [f"a{i}" for i in range(8)]].to_numpy(float)
        exact = [TRCCp_integral(t + 273.15, *a) - TRCCp_integral(298.15, *a) for t in at_c]
        assert gas_enthalpy_j_mol(gas, at_c) == pytest.approx(exact, abs=0.1)  # of 17 000 J/mol

    at_c = np.linspace(0.0, 95.0, 40)
    exact = [iapws95_properties(t + 273.15, 101325.0 + Psat_IAPWS(t + 273.15))[3] for t in at_c]
    assert water_enthalpy_j_kg(at_c) == pytest.approx(exact, abs=1.0)  # of 400 000 J/kg

    at_c = np.linspace(-40.0, 200.0, 241)
    exact = [Psat_IAPWS(t + 273.15) for t in at_c]
    assert saturation_pressure_pa(at_c) == pytest.approx(exact, rel=1e-7)
    assert dew_point_c(saturation_pressure_pa(at_c)) == pytest.approx(at_c, abs=1e-6)


def test_mean_specific_heat_of_dry_air() -> None:
    # mean specific heat of air 1.008 to 1.015 kJ/(kg K) between 25 C and 100 to 200 C
    mean = dry_air_enthalpy_j_kg([100.0, 200.0]) / np.array([75.0, 175.0])
    assert np.all((mean > 1005.0) & (mean < 1016.0))


def test_a_gas_beyond_its_curve_is_refused() -> None:
    with pytest.raises(OutsideValidity, match="-60 to 600"):
        gas_enthalpy_j_mol("N2", [100.0, 900.0])
