"""What the burner will have to do, how far off it is, and what limits the rate."""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import ArrayLike

from advisor.dryer.balance import HeatBalance, heat_balance
from advisor.dryer.change import StackRise
from advisor.dryer.operation import Operation
from advisor.dryer.properties import Values
from advisor.dryer.variant import at_discharge


@dataclass(frozen=True, eq=False)
class BurnerAdvice:
    """What to expect of the burner at an advised mix temperature.

    ``fuel_w``: net heat release [W]; ``gross_w`` [W]; ``fuel_kgs`` [kg/s]; ``load``: of the
    burner's rating, above 1 where it cannot [1]; ``stack_low_c``, ``stack_c``, ``stack_high_c``;
    ``exhaust_m3s``: at stack temperature [m3/s].
    """

    fuel_w: Values
    gross_w: Values
    fuel_kgs: Values
    load: Values
    stack_low_c: Values
    stack_c: Values
    stack_high_c: Values
    exhaust_m3s: Values
    balance: HeatBalance


def burner_advice(
    operation: Operation,
    discharge_c: ArrayLike,
    rate_kgs: ArrayLike,
    burner_w: ArrayLike,
    stack_rise: StackRise,
) -> BurnerAdvice:
    """Burner load, fuel and stack temperature to expect at an advised mix temperature.

    Args:
        operation: the dryer as it runs.
        discharge_c: mix temperature advised, any shape [C].
        rate_kgs: mix made [kg/s].
        burner_w: rating of the burner, net [W].
        stack_rise: degrees the stack moves for each degree of the mix [K/K].
    """
    wanted = [
        at_discharge(operation, discharge_c, rise)
        for rise in (stack_rise.low, stack_rise.central, stack_rise.high)
    ]
    balance = heat_balance(wanted[1])
    rate = np.asarray(rate_kgs, float)
    stacks = np.stack(np.broadcast_arrays(*(np.asarray(one.stack_c, float) for one in wanted)))
    return BurnerAdvice(
        fuel_w=balance.net_j_kg * rate,
        gross_w=balance.gross_j_kg * rate,
        fuel_kgs=balance.fuel_kg_kg * rate,
        load=balance.net_j_kg * rate / np.asarray(burner_w, float),
        stack_low_c=stacks.min(axis=0),
        stack_c=stacks[1],
        stack_high_c=stacks.max(axis=0),
        exhaust_m3s=balance.exhaust_m3_kg * rate,
        balance=balance,
    )


@dataclass(frozen=True, eq=False)
class FuelDeviation:
    """Metered fuel against the balance.

    ``over_j_kg``: gross heat above the balance [J/kg mix]; ``of_expected``: as a share of it [1];
    ``impossible``: less heat than solids and water take up, so the meter, the tonnes or the
    moisture must be wrong, or a second fuel burns.
    """

    over_j_kg: Values
    of_expected: Values
    impossible: np.ndarray


def fuel_deviation(
    balance: HeatBalance, metered_gross_w: ArrayLike, rate_kgs: ArrayLike
) -> FuelDeviation:
    """How far the fuel metered lies from the fuel the balance expects.

    Within 10 % either way model and meter agree; common practice, no source.

    Args:
        balance: balance of the dryer as it runs.
        metered_gross_w: fuel metered, as gross heat, any shape [W].
        rate_kgs: mix made, above 0 [kg/s].
    """
    metered = np.asarray(metered_gross_w, float) / np.asarray(rate_kgs, float)
    over = np.asarray(metered - balance.gross_j_kg)
    # net heat of the metered fuel, since steam of the fuel's hydrogen leaves as vapour
    net = metered * balance.net_j_kg / balance.gross_j_kg
    return FuelDeviation(
        over_j_kg=over,
        of_expected=np.asarray(over / balance.gross_j_kg),
        impossible=np.asarray(net < balance.useful_j_kg),
    )


@dataclass(frozen=True, eq=False)
class ProductionLimit:
    """Most mix per time, and what sets it: 'burner', 'fan' or 'plant' at each point.

    ``rate_kgs`` is the least of ``burner_kgs``, ``fan_kgs`` and ``plant_kgs`` [kg/s]; a limit not
    known is infinite.
    """

    rate_kgs: Values
    set_by: np.ndarray
    burner_kgs: Values
    fan_kgs: Values
    plant_kgs: Values


def production_limit(
    operation: Operation,
    burner_w: ArrayLike,
    fan_m3s: ArrayLike = np.inf,
    plant_kgs: ArrayLike = np.inf,
    casing_w: ArrayLike = 0.0,
) -> ProductionLimit:
    """Most mix per time that burner and fan allow, and which of them sets it.

    Args:
        operation: the dryer as it runs; its moisture decides most.
        burner_w: rating of the burner, net, any shape [W].
        fan_m3s: most gas the fan moves, at stack temperature and site pressure [m3/s].
        plant_kgs: most the rest of the plant can make [kg/s].
        casing_w: casing loss that stays the same at any rate, besides those in ``operation`` [W].

    Source: heat and gas are linear in the rate and in a constant loss, so both are solved directly.
    """
    balance = heat_balance(operation)
    probe_j_kg = 1e4  # any loss will do: the balance is linear in it
    lossy = heat_balance(
        replace(operation, casing_j_kg=np.asarray(operation.casing_j_kg, float) + probe_j_kg)
    )
    lost_w = np.asarray(casing_w, float)
    heat_per_lost = (lossy.net_j_kg - balance.net_j_kg) / probe_j_kg
    gas_per_lost = (lossy.exhaust_m3_kg - balance.exhaust_m3_kg) / probe_j_kg
    burner = (np.asarray(burner_w, float) - lost_w * heat_per_lost) / balance.net_j_kg
    fan = (np.asarray(fan_m3s, float) - lost_w * gas_per_lost) / balance.exhaust_m3_kg
    limits = np.stack(np.broadcast_arrays(burner, fan, np.asarray(plant_kgs, float)))
    limits = np.maximum(limits, 0.0)
    return ProductionLimit(
        rate_kgs=limits.min(axis=0),
        set_by=np.array(["burner", "fan", "plant"])[limits.argmin(axis=0)],
        burner_kgs=limits[0],
        fan_kgs=limits[1],
        plant_kgs=limits[2],
    )
