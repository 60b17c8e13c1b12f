"""Money for heat, from the unit a plant buys its fuel in."""

from __future__ import annotations

from advisor.dryer.fuel import Fuel, combustion
from advisor.dryer.properties import GAS_CONSTANT_J_MOLK, KELVIN, STANDARD_PRESSURE_PA
from advisor.errors import FaultyInput, MissingInput
from advisor.units import to_si

BILLING_C = 15.0  # a cubic metre of gas is billed at 15 C and 1 atm

# Billing unit: (kind of quantity, unit, whether it counts gross or net heat).
_BILLED = {
    "kWh gross": ("energy", "kWh", "gross"),
    "kWh net": ("energy", "kWh", "net"),
    "MMBtu gross": ("energy", "MMBtu", "gross"),
    "therm": ("energy", "therm", "gross"),
    "m3": ("volume", "m3", ""),
    "L": ("volume", "L", ""),
    "gal": ("volume", "gal", ""),
    "kg": ("mass", "kg", ""),
    "t": ("mass", "t", ""),
    "ton": ("mass", "ton", ""),
}


def gross_j_per_unit(fuel: Fuel, unit: str) -> float:
    """Gross heat [J] in one billing unit of a fuel.

    A therm counts gross heat. A cubic metre is gas at 15 C and 1 atm where the fuel is a gas
    (ideal gas), else liquid at 15 C; litres and gallons are liquid at 15 C.

    Args:
        fuel: the fuel.
        unit: one of kWh gross, kWh net, MMBtu gross, therm, m3, L, gal, kg, t, ton.

    Raises:
        FaultyInput: a unit not known.
        MissingInput: a volume of a liquid whose density is not known.
    """
    if unit not in _BILLED:
        raise FaultyInput.of(
            "billing-unit",
            f"'{unit}' is not a unit fuel is billed in here.",
            f"Known: {', '.join(_BILLED)}.",
            field="price.per",
            value=unit,
        )
    kind, written, basis = _BILLED[unit]
    amount = to_si(1.0, written, kind)
    burnt = combustion(fuel)
    if basis == "gross":
        return amount
    if basis == "net":
        return amount * burnt.gross_j_kg / burnt.net_j_kg
    if kind == "mass":
        return amount * burnt.gross_j_kg
    return amount * _density_kgm3(fuel, unit) * burnt.gross_j_kg


def money_per_gross_j(fuel: Fuel, amount: float, unit: str) -> float:
    """Money for each joule of gross heat.

    Args:
        fuel: the fuel.
        amount: money for one billing unit [1].
        unit: the billing unit, as in ``gross_j_per_unit``.
    """
    return amount / gross_j_per_unit(fuel, unit)


def _density_kgm3(fuel: Fuel, unit: str) -> float:
    if unit == "m3" and fuel.molar_mass_kg_mol > 0.0:
        kelvin = BILLING_C + KELVIN
        return STANDARD_PRESSURE_PA * fuel.molar_mass_kg_mol / (GAS_CONSTANT_J_MOLK * kelvin)
    if fuel.density_kgm3 > 0.0:
        return fuel.density_kgm3
    raise MissingInput.of(
        "fuel-density",
        f"{fuel.name} is billed by {unit}, and the density of its liquid is not known.",
        "Give the density at 15 C, or a price per heat or mass.",
        field="density",
    )
