"""Water, steam, gases and air: enthalpies, saturation, humidity and the pressure of a height.

The numbers come from the libraries ``chemicals`` (IAPWS-95, TRC ideal-gas heat capacities) and
``fluids`` (standard atmosphere). They answer one point at a time, so each curve is asked for once
per process at Chebyshev points and kept as a polynomial; the fit adds less than 1e-6 of the value.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from functools import lru_cache

import numpy as np
from numpy.polynomial import chebyshev
from numpy.typing import ArrayLike, NDArray

from advisor.errors import OutsideValidity

Values = NDArray[np.float64]

KELVIN = 273.15
GAS_CONSTANT_J_MOLK = 8.31446261815324  # exact, SI 2019
STANDARD_PRESSURE_PA = 101325.0
HEATING_VALUE_C = 25.0  # temperature the heating values refer to

# Dry air by moles: oxygen 20.95 %, argon 0.93 %, the rest counted as nitrogen (its 0.04 % of
# carbon dioxide too, so that carbon dioxide of the exhaust is the fuel's). ISO 2533:1975, rounded.
AIR_MOLES = {"O2": 0.2095, "Ar": 0.0093, "N2": 0.7812}

_CAS = {"N2": "7727-37-9", "O2": "7782-44-7", "CO2": "124-38-9", "SO2": "7446-09-5"}
GASES = ("N2", "O2", "CO2", "SO2", "Ar", "H2O")
GAS_RANGE_C = (-60.0, 600.0)
LIQUID_RANGE_C = (0.0, 250.0)
SATURATION_RANGE_C = (-40.0, 200.0)

# Ice: heat of melting from the library; heat capacity at about -10 C 2.05 kJ/(kg K), from memory.
ICE_HEAT_J_KGK = 2050.0


@dataclass(frozen=True)
class Curve:
    """A polynomial through a library's curve, over ``low`` to ``high`` of its argument."""

    name: str
    low: float
    high: float
    coefficients: Values

    def __call__(self, argument: ArrayLike) -> Values:
        """The curve at ``argument``, any shape; OutsideValidity beyond its ends."""
        x = np.asarray(argument, float)
        if np.any(x < self.low) or np.any(x > self.high):
            wrong = x[(x < self.low) | (x > self.high)].flat[0]
            raise OutsideValidity.of(
                "property-range",
                f"The {self.name} is known from {self.low:g} to {self.high:g}, not at {wrong:g}.",
                "Check the temperatures and pressures of the case.",
                value=f"{wrong:g}",
            )
        scaled = (2 * x - self.low - self.high) / (self.high - self.low)
        return np.asarray(chebyshev.chebval(scaled, self.coefficients))


def curve_of(
    name: str, one: Callable[[float], float], low: float, high: float, degree: int
) -> Curve:
    """The Curve through ``one`` at degree + 1 Chebyshev points between ``low`` and ``high``."""
    points = chebyshev.chebpts1(degree + 1)
    asked = [one(float(x)) for x in (points * (high - low) + high + low) / 2]
    fitted = np.asarray(chebyshev.chebfit(points, asked, degree), float)
    return Curve(name, low, high, fitted)


@lru_cache(maxsize=1)
def molar_masses_kg_mol() -> dict[str, float]:
    """Molar mass [kg/mol] of each gas, of the elements in fuel (C, H, O, N, S) and of 'air'."""
    from chemicals.elements import molecular_weight, simple_formula_parser

    kg = {
        name: molecular_weight(simple_formula_parser(name)) / 1000.0
        for name in (*GASES, "C", "H", "O", "N", "S")
    }
    kg["air"] = sum(share * kg[gas] for gas, share in AIR_MOLES.items())
    return kg


@lru_cache(maxsize=len(GASES))
def _gas_curve(gas: str) -> Curve:
    name = f"enthalpy of {gas} by temperature [C]"
    if gas == "Ar":  # a monatomic gas: 5/2 R at every temperature
        return curve_of(
            name, lambda t: 2.5 * GAS_CONSTANT_J_MOLK * (t - HEATING_VALUE_C), *GAS_RANGE_C, 1
        )
    if gas == "H2O":
        molar_kg = molar_masses_kg_mol()["H2O"]
        reference = _ideal_steam_j_kg(HEATING_VALUE_C)
        return curve_of(
            name, lambda t: molar_kg * (_ideal_steam_j_kg(t) - reference), *GAS_RANGE_C, 10
        )
    from chemicals.heat_capacity import TRC_gas_data, TRCCp_integral

    a = TRC_gas_data.loc[_CAS[gas], [f"a{i}" for i in range(8)]].to_numpy(float)
    zero = TRCCp_integral(HEATING_VALUE_C + KELVIN, *a)
    return curve_of(name, lambda t: float(TRCCp_integral(t + KELVIN, *a) - zero), *GAS_RANGE_C, 10)


def gas_enthalpy_j_mol(gas: str, temperature_c: ArrayLike) -> Values:
    """Enthalpy [J/mol] of an ideal gas above its own at 25 C.

    Args:
        gas: one of N2, O2, CO2, SO2, Ar, H2O (as vapour)
        temperature_c: gas temperature, any shape [C], -60 to 600

    Source: TRC equation as tabulated in ``chemicals``; water: ideal-gas part of IAPWS-95.
    """
    return _gas_curve(gas)(temperature_c)


def dry_air_enthalpy_j_kg(temperature_c: ArrayLike) -> Values:
    """Enthalpy [J/kg] of dry air above its own at 25 C.

    Args:
        temperature_c: air temperature, any shape [C]
    """
    molar = sum(share * gas_enthalpy_j_mol(gas, temperature_c) for gas, share in AIR_MOLES.items())
    return np.asarray(molar / molar_masses_kg_mol()["air"])


def _ideal_steam_j_kg(temperature_c: float) -> float:
    """Enthalpy of steam at vanishing pressure; zero is liquid water at the triple point."""
    from chemicals.iapws import iapws95_dA0_dtau, iapws95_R, iapws95_Tc

    kelvin = temperature_c + KELVIN
    tau = iapws95_Tc / kelvin
    return float(iapws95_R * kelvin * (1.0 + tau * iapws95_dA0_dtau(tau, 1.0)))


@lru_cache(maxsize=1)
def _steam_curve() -> Curve:
    return curve_of("enthalpy of steam by temperature [C]", _ideal_steam_j_kg, *GAS_RANGE_C, 10)


def steam_enthalpy_j_kg(temperature_c: ArrayLike) -> Values:
    """Enthalpy [J/kg] of water vapour in gas above liquid water at 0 C.

    Args:
        temperature_c: vapour temperature, any shape [C]

    Source: IAPWS-95, ideal-gas part. At the 0.3 atm of a dryer's exhaust real steam lies 0.1 % of
    the heat of evaporation lower.
    """
    return _steam_curve()(temperature_c)


@lru_cache(maxsize=1)
def _liquid_curve() -> Curve:
    from chemicals.iapws import iapws95_properties, iapws95_Psat

    def one(temperature_c: float) -> float:
        kelvin = temperature_c + KELVIN
        pressure = STANDARD_PRESSURE_PA + iapws95_Psat(max(kelvin, 273.16))
        return float(iapws95_properties(kelvin, pressure)[3])

    return curve_of("enthalpy of water by temperature [C]", one, *LIQUID_RANGE_C, 12)


@lru_cache(maxsize=1)
def _melting_j_kg() -> float:
    from chemicals.phase_change import Hfus

    return float(Hfus("7732-18-5")) / molar_masses_kg_mol()["H2O"]


def water_enthalpy_j_kg(temperature_c: ArrayLike) -> Values:
    """Enthalpy [J/kg] of water in stone above liquid at 0 C; below 0 C it is ice.

    Args:
        temperature_c: temperature of the water, any shape [C], to 250

    Source: IAPWS-95 at 1 atm above the vapour pressure.
    """
    celsius = np.asarray(temperature_c, float)
    frozen = celsius < 0.0
    liquid = _liquid_curve()(np.where(frozen, 0.0, celsius))
    if not np.any(frozen):
        return liquid
    return np.where(frozen, ICE_HEAT_J_KGK * celsius - _melting_j_kg(), liquid)


@lru_cache(maxsize=1)
def _saturation_curves() -> tuple[Curve, Curve]:
    from chemicals.vapor_pressure import Psat_IAPWS, Tsat_IAPWS

    low, high = SATURATION_RANGE_C
    # a little wider than the pressures, so that the ends of the one lie within the other
    log_low = float(np.log(Psat_IAPWS(low - 1.0 + KELVIN)))
    log_high = float(np.log(Psat_IAPWS(high + 1.0 + KELVIN)))
    pressure = curve_of(
        "saturation pressure of water by temperature [C]",
        lambda t: float(np.log(Psat_IAPWS(t + KELVIN))), low, high, 16,
    )  # fmt: skip
    temperature = curve_of(
        "dew point by logarithm of vapour pressure [Pa]",
        lambda x: float(Tsat_IAPWS(np.exp(x))) - KELVIN, log_low, log_high, 16,
    )  # fmt: skip
    return pressure, temperature


def saturation_pressure_pa(temperature_c: ArrayLike) -> Values:
    """Vapour pressure [Pa] of liquid water, undercooled below 0 C.

    Args:
        temperature_c: temperature, any shape [C], -40 to 200

    Source: IAPWS-IF97 saturation equation; below 0 C it is extrapolated.
    """
    return np.asarray(np.exp(_saturation_curves()[0](temperature_c)))


def dew_point_c(vapour_pressure_pa: ArrayLike) -> Values:
    """Temperature [C] at which water condenses from a gas.

    Args:
        vapour_pressure_pa: partial pressure of water, any shape [Pa]

    Source: IAPWS-IF97 saturation equation.
    """
    return _saturation_curves()[1](np.log(np.asarray(vapour_pressure_pa, float)))


def air_pressure_pa(altitude_m: float) -> float:
    """Pressure [Pa] of the standard atmosphere at a height above the sea.

    Args:
        altitude_m: height of the site [m], -500 to 5000

    Source: US Standard Atmosphere 1976 through ``fluids``.
    """
    if not -500.0 <= altitude_m <= 5000.0:
        raise OutsideValidity.of(
            "altitude",
            f"An altitude of {altitude_m:g} m is not that of a plant.",
            "Give the height of the site above the sea, -500 m to 5000 m.",
            field="altitude",
            value=f"{altitude_m:g}",
        )
    from fluids.atmosphere import ATMOSPHERE_1976

    return float(ATMOSPHERE_1976(altitude_m).P)


def humidity_ratio(
    air_c: ArrayLike, relative_humidity: ArrayLike, pressure_pa: ArrayLike
) -> Values:
    """Water [kg] carried by each kg of dry air.

    Args:
        air_c: air temperature, any shape [C]
        relative_humidity: fraction of saturation over liquid water, 0 to 1 [1]
        pressure_pa: air pressure [Pa]
    """
    vapour = np.asarray(relative_humidity, float) * saturation_pressure_pa(air_c)
    kg = molar_masses_kg_mol()
    return np.asarray(kg["H2O"] / kg["air"] * vapour / (np.asarray(pressure_pa, float) - vapour))
