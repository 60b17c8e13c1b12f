"""What a change is worth: the same balance twice, and the difference by where the heat goes.

Wastes are not added up one by one as if they were independent: the balance as it runs and as it
would run are compared. Overheating and moisture stay two different numbers.
"""

from __future__ import annotations

from dataclasses import dataclass, fields

import numpy as np
from numpy.typing import ArrayLike

from advisor.dryer.balance import HeatBalance, HeatParts, heat_balance
from advisor.dryer.operation import Operation
from advisor.dryer.properties import Values
from advisor.dryer.variant import at_discharge, drier, with_air_ratio


@dataclass(frozen=True, eq=False)
class Range:
    """Low, central and high of an estimate."""

    low: Values
    central: Values
    high: Values

    def times(self, factor: ArrayLike) -> Range:
        """The range scaled by ``factor``."""
        by = np.asarray(factor, float)
        return Range(self.low * by, self.central * by, self.high * by)


@dataclass(frozen=True)
class StackRise:
    """Degrees the stack rises for each degree of the mix [K/K]: low, central and high."""

    low: float
    central: float
    high: float


@dataclass(frozen=True, eq=False)
class HeatChange:
    """Two balances and their difference, after less before; below 0 is a saving.

    ``parts``: difference of each part [J/kg mix]; they sum to ``gross_j_kg`` exactly.
    """

    before: HeatBalance
    after: HeatBalance
    parts: HeatParts
    gross_j_kg: Values
    net_j_kg: Values
    fuel_kg_kg: Values
    co2_kg_kg: Values
    exhaust_m3_kg: Values
    of_gross: Values

    def money_kg(self, price_j_before: ArrayLike, price_j_after: ArrayLike) -> Values:
        """Difference in money per kg of mix, from the money per joule of gross heat of each."""
        after = self.after.gross_j_kg * np.asarray(price_j_after, float)
        return np.asarray(after - self.before.gross_j_kg * np.asarray(price_j_before, float))


def heat_change(before: Operation, after: Operation) -> HeatChange:
    """Difference of the fuel heat of two ways to run, by where it goes.

    Args:
        before: the dryer as it runs
        after: the dryer as it would run; fuel, feed, air and temperatures may all differ
    """
    return _difference(heat_balance(before), heat_balance(after))


def _difference(first: HeatBalance, second: HeatBalance) -> HeatChange:
    parts = HeatParts(**{
        one.name: getattr(second.parts, one.name) - getattr(first.parts, one.name)
        for one in fields(HeatParts)
    })  # fmt: skip
    gross = parts.total_j_kg()
    return HeatChange(
        before=first,
        after=second,
        parts=parts,
        gross_j_kg=gross,
        net_j_kg=gross - parts.fuel_hydrogen,
        fuel_kg_kg=second.fuel_kg_kg - first.fuel_kg_kg,
        co2_kg_kg=second.co2_kg_kg - first.co2_kg_kg,
        exhaust_m3_kg=second.exhaust_m3_kg - first.exhaust_m3_kg,
        of_gross=gross / first.gross_j_kg,
    )


@dataclass(frozen=True, eq=False)
class OverheatingCost:
    """What running hotter than needed costs; every range is low, central, high.

    ``gross_j_kg_k``: gross fuel heat per kg of mix and kelvin [J/(kg K)]; ``gross_j_kg``,
    ``fuel_kg_kg``, ``co2_kg_kg``: per kg of mix for the whole excess; ``of_gross``: share of the
    fuel burnt at the needed temperature [1]; ``exhaust_of_flow``: growth of the exhaust volume [1];
    ``floor_j_kg_k``: the heat the mix itself takes up [J/(kg K)], below which no plant can be;
    ``efficiency``: that heat over the gross fuel that supplies it, the efficiency of the last
    degree [1], ordered as the costs are.
    """

    gross_j_kg_k: Range
    gross_j_kg: Range
    fuel_kg_kg: Range
    co2_kg_kg: Range
    of_gross: Range
    exhaust_of_flow: Range
    floor_j_kg_k: Values
    efficiency: Range


def overheating_cost(
    needed: Operation,
    excess_k: ArrayLike,
    stack_rise: StackRise,
    measured_high_of_gross_k: ArrayLike = 0.0,
) -> OverheatingCost:
    """Fuel and carbon dioxide spent on mix hotter than it needs to be.

    The difference of two balances, so the efficiency is that of the last degrees. Low to high is
    the stack's answer to a hotter mix: held, or rising with it. Field trials found more than any
    balance explains, so the high end is raised to ``measured_high_of_gross_k`` where that is more.

    Args:
        needed: the dryer at the temperature needed, with the stack temperature it has there
        excess_k: mix hotter than needed, any shape, not 0 [K]
        stack_rise: stack degrees per mix degree, from the plant's log or the table of kinds [K/K]
        measured_high_of_gross_k: share of the fuel per kelvin measured in trials [1/K], 0 for none

    Source: first law; marginal, not average, efficiency.
    """
    excess = np.asarray(excess_k, float)
    base = heat_balance(needed)
    hotter_c = np.asarray(needed.discharge_c, float) + excess
    changes = [
        _difference(base, heat_balance(at_discharge(needed, hotter_c, rise)))
        for rise in (stack_rise.low, stack_rise.central, stack_rise.high)
    ]
    per_k = [change.gross_j_kg / excess for change in changes]
    measured = np.asarray(measured_high_of_gross_k, float) * base.gross_j_kg
    high = np.maximum(per_k[2], measured)
    gross_k = Range(per_k[0], per_k[1], high)
    gross = gross_k.times(excess)
    fuel_per_j = base.fuel_kg_kg / base.gross_j_kg
    floor = _solids_j_kg(changes[0].parts) / excess
    return OverheatingCost(
        gross_j_kg_k=gross_k,
        gross_j_kg=gross,
        fuel_kg_kg=gross.times(fuel_per_j),
        co2_kg_kg=gross.times(base.co2_kg_kg / base.gross_j_kg),
        of_gross=gross.times(1.0 / base.gross_j_kg),
        exhaust_of_flow=Range(*(c.exhaust_m3_kg / base.exhaust_m3_kg for c in changes)),
        floor_j_kg_k=floor,
        efficiency=Range(floor / gross_k.low, floor / gross_k.central, floor / gross_k.high),
    )


def _solids_j_kg(parts: HeatParts) -> Values:
    return np.asarray(parts.aggregate + parts.recycled + parts.filler + parts.binder)


def moisture_cost(operation: Operation, drier_of_dry_mass: ArrayLike) -> HeatChange:
    """Difference of the fuel heat if every virgin fraction were drier by the same amount.

    Args:
        operation: the dryer as it runs.
        drier_of_dry_mass: water taken off each kilogram of dry stone, any shape; below 0 is
            wetter [1].
    """
    return heat_change(operation, drier(operation, drier_of_dry_mass))


def leakage_cost(operation: Operation, air_ratio_without: ArrayLike) -> HeatChange:
    """Difference of the fuel heat if less air came in, the stack temperature held.

    Args:
        operation: the dryer as it runs.
        air_ratio_without: all air over the air just needed that would remain, any shape [1].
    """
    return heat_change(operation, with_air_ratio(operation, air_ratio_without))


def degrees_worth_k(change: HeatChange, cost: OverheatingCost) -> Range:
    """Degrees of overheating that cost as much fuel as a change, to compare the two [K].

    Args:
        change: a change of moisture, air or anything else.
        cost: what a degree costs at the same dryer.
    """
    spent = np.abs(change.gross_j_kg)
    per_k = cost.gross_j_kg_k
    return Range(spent / per_k.high, spent / per_k.central, spent / per_k.low)
