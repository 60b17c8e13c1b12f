"""Fuels: what a kilogram needs of air, gives off, and is worth, gross and net.

Gross (higher) heating value counts the water of combustion as liquid, net (lower) as vapour; both
at 25 C. Every name says which of the two it is.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from functools import lru_cache
from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from advisor.dryer.properties import AIR_MOLES, KELVIN, Values, molar_masses_kg_mol
from advisor.errors import Fault, FaultyInput, OutsideValidity, raise_if_any

ELEMENTS = {"carbon": "C", "hydrogen": "H", "oxygen": "O", "nitrogen": "N", "sulfur": "S"}

# Gases of a gaseous fuel: registry number by which the library knows each.
_GAS_CAS = {
    "CH4": "74-82-8",
    "C2H6": "74-84-0",
    "C3H8": "74-98-6",
    "C4H10": "106-97-8",
    "H2": "1333-74-0",
    "CO": "630-08-0",
    "N2": "7727-37-9",
    "CO2": "124-38-9",
}


@dataclass(frozen=True)
class Fuel:
    """A fuel by the mass shares of its elements.

    ``carbon`` to ``sulfur`` and ``inert`` (ash and water) are fractions of mass that sum to 1;
    ``gross_j_kg`` is the gross heating value [J/kg]; ``density_kgm3`` is that of the liquid at
    15 C, 0 where ``molar_mass_kg_mol`` of a gas is given instead, so that prices per volume can be
    read; ``co2_factor_kg_j`` is a published factor [kg per J gross], 0 where none is given.
    """

    name: str
    carbon: float
    hydrogen: float
    oxygen: float
    nitrogen: float
    sulfur: float
    inert: float
    gross_j_kg: float
    density_kgm3: float = 0.0
    molar_mass_kg_mol: float = 0.0
    co2_factor_kg_j: float = 0.0

    def __post_init__(self) -> None:
        shares = {name: getattr(self, name) for name in (*ELEMENTS, "inert")}
        faults = [
            Fault("fuel-share", f"{share:g} is not a mass share.", "Give 0 to 1.",
                  field=f"{self.name}.{name}", value=f"{share:g}")
            for name, share in shares.items() if not 0.0 <= share <= 1.0
        ]  # fmt: skip
        total = sum(shares.values())
        if abs(total - 1.0) > 1e-6:
            faults.append(Fault(
                "fuel-sum", f"The shares of {self.name} sum to {total:g}, not 1.",
                "Give carbon, hydrogen, oxygen, nitrogen, sulfur and inert by mass.",
                field=self.name, value=f"{total:g}"))  # fmt: skip
        if not self.gross_j_kg > 0.0:
            faults.append(Fault(
                "fuel-heat", f"{self.name} needs a gross heating value above 0.",
                "Give the gross (higher) heating value.", field=f"{self.name}.gross_j_kg",
                value=f"{self.gross_j_kg:g}"))  # fmt: skip
        raise_if_any(faults)


@dataclass(frozen=True)
class Combustion:
    """One kilogram of a fuel burnt completely with just enough dry air.

    Moles and masses are per kilogram of fuel; ``products_mol_kg`` holds the gas by name, water as
    vapour, with the nitrogen and argon of that air.
    """

    gross_j_kg: float
    net_j_kg: float
    air_mol_kg: float
    air_kg_kg: float
    products_mol_kg: Mapping[str, float]
    inert_kg_kg: float

    @property
    def co2_kg_kg(self) -> float:
        """Carbon dioxide [kg/kg fuel]."""
        return self.products_mol_kg["CO2"] * molar_masses_kg_mol()["CO2"]

    @property
    def water_kg_kg(self) -> float:
        """Water formed from the fuel's hydrogen [kg/kg fuel]."""
        return self.products_mol_kg["H2O"] * molar_masses_kg_mol()["H2O"]

    @property
    def so2_kg_kg(self) -> float:
        """Sulfur dioxide [kg/kg fuel]."""
        return self.products_mol_kg["SO2"] * molar_masses_kg_mol()["SO2"]

    @property
    def dry_mol_kg(self) -> float:
        """Dry gas without excess air [mol/kg fuel]."""
        return sum(moles for gas, moles in self.products_mol_kg.items() if gas != "H2O")

    @property
    def co2_max(self) -> float:
        """Carbon dioxide as a share of the dry gas without excess air [1]."""
        return self.products_mol_kg["CO2"] / self.dry_mol_kg


@lru_cache(maxsize=64)
def combustion(fuel: Fuel) -> Combustion:
    """Air, products and heating values of one kilogram of fuel.

    Args:
        fuel: the fuel

    Source: stoichiometry of complete combustion and heat of evaporation at 25 C from ``chemicals``.
    """
    from chemicals.combustion import LHV_from_HHV, combustion_stoichiometry

    kg = molar_masses_kg_mol()
    atoms = {symbol: getattr(fuel, name) / kg[symbol] for name, symbol in ELEMENTS.items()}
    made = combustion_stoichiometry(atoms)
    water = made.get("H2O", 0.0)
    air = -made["O2"] / AIR_MOLES["O2"]
    return Combustion(
        gross_j_kg=fuel.gross_j_kg,
        # the library counts heat given off as negative
        net_j_kg=-float(LHV_from_HHV(-fuel.gross_j_kg, water)),
        air_mol_kg=air,
        air_kg_kg=air * kg["air"],
        products_mol_kg={
            "N2": made.get("N2", 0.0) + AIR_MOLES["N2"] * air,
            "Ar": AIR_MOLES["Ar"] * air,
            "CO2": made.get("CO2", 0.0),
            "SO2": made.get("SO2", 0.0),
            "H2O": water,
        },
        inert_kg_kg=fuel.inert,
    )


def fuel_from_moles(
    name: str,
    moles: Mapping[str, float],
    gross_j_kg: float = 0.0,
    density_kgm3: float = 0.0,
    co2_factor_kg_j: float = 0.0,
) -> Fuel:
    """The fuel made of gases, by mole shares.

    Args:
        name: what the fuel is called.
        moles: mole share of each of CH4, C2H6, C3H8, C4H10 (normal butane), H2, CO, N2, CO2; they
            sum to 1 [1].
        gross_j_kg: gross heating value, 0 to work it out from heats of formation [J/kg].
        density_kgm3: density of the liquid at 15 C, 0 for a gas [kg/m3].
        co2_factor_kg_j: published carbon dioxide factor per gross heat, 0 for none [kg/J].

    Source: molar masses and heats of formation and combustion from ``chemicals``.
    """
    unknown = sorted(set(moles) - set(_GAS_CAS))
    if unknown:
        raise FaultyInput.of(
            "fuel-gas",
            f"{', '.join(unknown)}: not a gas this table knows.",
            f"Known: {', '.join(_GAS_CAS)}.",
            field=name,
        )
    total = sum(moles.values())
    if abs(total - 1.0) > 1e-6:
        raise FaultyInput.of(
            "fuel-sum", f"The mole shares of {name} sum to {total:g}, not 1.", field=name
        )
    from chemicals.elements import molecular_weight, simple_formula_parser

    kg = molar_masses_kg_mol()
    mass = {symbol: 0.0 for symbol in ELEMENTS.values()}
    molar_kg = 0.0
    for gas, share in moles.items():
        atoms = simple_formula_parser(gas)
        molar_kg += share * molecular_weight(atoms) / 1000.0
        for symbol, count in atoms.items():
            mass[symbol] += share * count * kg[symbol]
    shares = {word: mass[symbol] / molar_kg for word, symbol in ELEMENTS.items()}
    return Fuel(
        name=name,
        **shares,
        inert=0.0,
        gross_j_kg=gross_j_kg or _gross_j_mol(moles) / molar_kg,
        density_kgm3=density_kgm3,
        molar_mass_kg_mol=molar_kg,
        co2_factor_kg_j=co2_factor_kg_j,
    )


def _gross_j_mol(moles: Mapping[str, float]) -> float:
    """Gross heat [J] of a mole of mixed gases."""
    from chemicals.combustion import combustion_data
    from chemicals.elements import simple_formula_parser
    from chemicals.reaction import Hfg

    # the library counts heat given off as negative; nitrogen and carbon dioxide give none
    return -sum(
        float(share * combustion_data(simple_formula_parser(gas), Hf=Hfg(_GAS_CAS[gas])).HHV)
        for gas, share in moles.items()
        if gas not in ("N2", "CO2")
    )


def fuel_of_row(row: Mapping[str, Any]) -> Fuel:
    """The fuel of a row of a table of fuels, its numbers in SI.

    Args:
        row: by column: name; moles, or carbon, hydrogen, oxygen, nitrogen, sulfur and inert;
            gross [J/kg]; density [kg/m3] and co2_factor [kg/J] where known.
    """
    more = {
        "gross_j_kg": row["gross"],
        "density_kgm3": row.get("density", 0.0),
        "co2_factor_kg_j": row.get("co2_factor", 0.0),
    }
    if "moles" in row:
        return fuel_from_moles(row["name"], row["moles"], **more)
    shares = {word: row[word] for word in (*ELEMENTS, "inert")}
    return Fuel(name=row["name"], **shares, **more)


def gross_estimate_j_kg(fuel_shares: Mapping[str, float]) -> float:
    """Gross heating value [J/kg] estimated from an ultimate analysis, to about 1.5 % for oils.

    Args:
        fuel_shares: mass share of carbon, hydrogen, oxygen, nitrogen and sulfur [1]

    Source: Boie's equation through ``chemicals``. A measured value is better.
    """
    from chemicals.combustion import HHV_Boie

    shares = {ELEMENTS[name]: share for name, share in fuel_shares.items() if name in ELEMENTS}
    return -1000.0 * float(HHV_Boie(shares))


def air_ratio_from_dry_oxygen(oxygen_dry: ArrayLike, fuel: Fuel) -> Values:
    """Total air over the air just needed, from oxygen in dry stack gas.

    Args:
        oxygen_dry: oxygen as a fraction of dry gas, any shape, 0 to below 0.2095 [1]
        fuel: the fuel burnt

    Source: mole balance; exact for complete combustion: ``1 + r x / (0.2095 - x)`` with r the dry
    gas over the air without excess.
    """
    oxygen = np.asarray(oxygen_dry, float)
    if np.any(oxygen < 0.0) or np.any(oxygen >= AIR_MOLES["O2"]):
        raise OutsideValidity.of(
            "oxygen",
            "Oxygen of stack gas must lie between 0 and that of air, 20.95 %.",
            "Check the probe: air or a failed cell reads 20.9 %.",
            field="oxygen_dry",
        )
    burnt = combustion(fuel)
    ratio = burnt.dry_mol_kg / burnt.air_mol_kg
    return np.asarray(1.0 + ratio * oxygen / (AIR_MOLES["O2"] - oxygen))


def dry_oxygen(oxygen_wet: ArrayLike, vapour_share: ArrayLike) -> Values:
    """Oxygen as a fraction of dry gas, from a probe that sits in the wet gas.

    Args:
        oxygen_wet: oxygen as a fraction of wet gas, any shape [1]
        vapour_share: water as a mole fraction of wet gas [1]
    """
    return np.asarray(oxygen_wet, float) / (1.0 - np.asarray(vapour_share, float))


def dry_co2(oxygen_dry: ArrayLike, fuel: Fuel) -> Values:
    """Carbon dioxide as a fraction of dry gas that belongs to an oxygen reading.

    A reading more than 0.003 away means a faulty analyser or air entering between two probes.

    Args:
        oxygen_dry: oxygen as a fraction of dry gas, any shape [1]
        fuel: the fuel burnt
    """
    oxygen = np.asarray(oxygen_dry, float)
    return np.asarray(combustion(fuel).co2_max * (1.0 - oxygen / AIR_MOLES["O2"]))


def gas_at_standard_m3(
    metered_m3: ArrayLike,
    gauge_pa: ArrayLike,
    temperature_c: ArrayLike,
    compressibility: ArrayLike = 1.0,
) -> Values:
    """Volume [m3] at 15 C and 1 atm of fuel gas metered under pressure.

    Args:
        metered_m3: volume as metered, any shape [m3]
        gauge_pa: pressure at the meter above 1 atm [Pa]
        temperature_c: gas temperature at the meter [C]
        compressibility: compressibility factor at the meter over that at 15 C and 1 atm [1]
    """
    atmosphere = 101325.0
    return np.asarray(
        np.asarray(metered_m3, float)
        * (np.asarray(gauge_pa, float) + atmosphere) / atmosphere
        * (15.0 + KELVIN) / (np.asarray(temperature_c, float) + KELVIN)
        / np.asarray(compressibility, float)
    )  # fmt: skip
