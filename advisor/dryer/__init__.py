"""Dryer: heat and mass balance, burner, recycled material, stack, and what a degree costs."""

from advisor.dryer.balance import HeatBalance, HeatParts, heat_balance
from advisor.dryer.change import (
    HeatChange,
    OverheatingCost,
    Range,
    StackRise,
    heat_change,
    leakage_cost,
    moisture_cost,
    overheating_cost,
)
from advisor.dryer.fuel import (
    Combustion,
    Fuel,
    air_ratio_from_dry_oxygen,
    combustion,
    dry_co2,
    dry_oxygen,
    fuel_from_moles,
    gas_at_standard_m3,
    gross_estimate_j_kg,
)
from advisor.dryer.materials import (
    Aggregate,
    binder_enthalpy_j_kg,
    binder_specific_heat_j_kgk,
)
from advisor.dryer.operation import (
    Air,
    Feed,
    Filler,
    Fraction,
    Operation,
    Rap,
    combined_moisture,
    moisture_of_dry_mass,
    moisture_of_wet_mass,
)
from advisor.dryer.properties import air_pressure_pa, dew_point_c, humidity_ratio
from advisor.dryer.recycled import hot_aggregate_needed_c, most_rap_of_mix, with_rap_share

__all__ = [
    "Aggregate",
    "Air",
    "Combustion",
    "Feed",
    "Filler",
    "Fraction",
    "Fuel",
    "HeatBalance",
    "HeatChange",
    "HeatParts",
    "Operation",
    "OverheatingCost",
    "Range",
    "Rap",
    "StackRise",
    "air_pressure_pa",
    "air_ratio_from_dry_oxygen",
    "binder_enthalpy_j_kg",
    "binder_specific_heat_j_kgk",
    "combined_moisture",
    "combustion",
    "dew_point_c",
    "dry_co2",
    "dry_oxygen",
    "fuel_from_moles",
    "gas_at_standard_m3",
    "gross_estimate_j_kg",
    "heat_balance",
    "heat_change",
    "hot_aggregate_needed_c",
    "humidity_ratio",
    "leakage_cost",
    "moisture_cost",
    "moisture_of_dry_mass",
    "moisture_of_wet_mass",
    "most_rap_of_mix",
    "overheating_cost",
    "with_rap_share",
]
