"""The same dryer run another way: cooler, drier, on another fuel, with less air.

Each function returns a new ``Operation``; ``heat_change`` tells what the difference is worth.
"""

from __future__ import annotations

from dataclasses import replace

import numpy as np
from numpy.typing import ArrayLike

from advisor.dryer.balance import heat_balance
from advisor.dryer.fuel import Fuel
from advisor.dryer.operation import Operation
from advisor.dryer.properties import AIR_MOLES, Values
from advisor.errors import OutsideValidity


def at_discharge(operation: Operation, discharge_c: ArrayLike, stack_rise: ArrayLike) -> Operation:
    """The dryer at another mix temperature, its stack moved along.

    Args:
        operation: the dryer as it runs.
        discharge_c: mix temperature wanted, any shape [C].
        stack_rise: degrees the stack moves for each degree of the mix [K/K].
    """
    wanted = np.asarray(discharge_c, float)
    moved = np.asarray(stack_rise, float) * (wanted - np.asarray(operation.discharge_c, float))
    stack_c = np.asarray(operation.stack_c, float) + moved
    return replace(operation, discharge_c=wanted, stack_c=stack_c)


def drier(operation: Operation, off_of_dry_mass: ArrayLike) -> Operation:
    """The dryer with moisture taken off every virgin fraction alike, but none below dry.

    Args:
        operation: the dryer as it runs.
        off_of_dry_mass: water taken off each kilogram of dry stone, any shape; below 0 is
            wetter [1].
    """
    off = np.asarray(off_of_dry_mass, float)
    fractions = tuple(
        replace(
            one,
            moisture_of_dry_mass=np.maximum(np.asarray(one.moisture_of_dry_mass, float) - off, 0.0),
        )
        for one in operation.feed.fractions
    )
    return replace(operation, feed=replace(operation.feed, fractions=fractions))


def with_fuel(operation: Operation, fuel: Fuel) -> Operation:
    """The dryer on another fuel, at the same air ratio and temperatures.

    Args:
        operation: the dryer as it runs.
        fuel: the other fuel.
    """
    return replace(operation, fuel=fuel)


def with_air_ratio(operation: Operation, air_ratio: ArrayLike) -> Operation:
    """The dryer with more or less air, the stack temperature held.

    Args:
        operation: the dryer as it runs.
        air_ratio: all air over the air just needed, any shape [1].
    """
    return replace(operation, air_ratio=air_ratio, burner_air_ratio=None)


def air_ratio_from_wet_oxygen(operation: Operation, oxygen_wet: ArrayLike) -> Values:
    """All air over the air just needed, from a probe that sits in the wet gas [1].

    The steam of the stone thins the oxygen, so the answer needs the balance.

    Args:
        operation: the dryer as it runs; its air ratio is not used.
        oxygen_wet: oxygen as a fraction of wet gas, any shape, 0 to below 0.2095 [1].

    Source: mole balance. Oxygen less its reading, per fuel, is linear in the air ratio, so two
    balances give it exactly.
    """
    reading = np.asarray(oxygen_wet, float)
    if np.any(reading < 0.0) or np.any(reading >= AIR_MOLES["O2"]):
        raise OutsideValidity.of(
            "oxygen",
            "Oxygen of stack gas must lie between 0 and that of air, 20.95 %.",
            "Check the probe: air or a failed cell reads 20.9 %.",
            field="oxygen_wet",
        )

    def surplus(air_ratio: float) -> Values:
        balance = heat_balance(with_air_ratio(operation, air_ratio))
        oxygen = balance.oxygen_dry * balance.exhaust_dry_mol_kg
        return (oxygen - reading * balance.exhaust_wet_mol_kg) / balance.fuel_kg_kg

    low, high = 1.5, 2.5  # any two would do
    at_low, at_high = surplus(low), surplus(high)
    return np.asarray(low + (high - low) * at_low / (at_low - at_high))
