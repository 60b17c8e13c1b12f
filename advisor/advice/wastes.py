"""What overheating, moisture and leaking air cost at one operating point, side by side."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from advisor.advice.fuel import fuel_called, kelvin_too_much, money_per_j, operation_of
from advisor.advice.situation import Situation
from advisor.dryer import (
    Range,
    combustion,
    degrees_worth_k,
    fume_growth,
    leakage_cost,
    moisture_cost,
    oxidation_growth,
)
from advisor.settings.tables import load_table

Three = tuple[float, float, float]

J_KG_PER_KWH_T = 3600.0
KG_PER_T = 1000.0
# A balance and a meter agree within this share; common practice, no source. Nothing is told surer
# than that.
MODEL_SHARE = 0.10
_POINT = 0.01  # one percent of moisture
_AIR = 0.1  # a tenth of the air the fuel needs


@dataclass(frozen=True)
class UnitCost:
    """What one unit of a waste costs: low, central, high.

    ``name`` of the waste and the ``unit`` counted; ``money_t`` and ``money_h`` are None where the
    plant gives no price. ``found_from`` says what it was worked out from, ``how_sure`` what its
    range stands for.
    """

    name: str
    unit: str
    gross_kwh_t: Three
    gross_kwh_h: Three
    co2_kg_t: Three
    money_t: Three | None
    money_h: Three | None
    found_from: str
    how_sure: str


@dataclass(frozen=True)
class Wastes:
    """Overheating, moisture and leaking air beside each other, never added up or confused.

    ``percent_in_k``: kelvin too much that cost as much as one percent of moisture [K], low,
    central, high; ``fume_of_kelvin`` and ``oxidation_of_kelvin`` (low, high): growth of fume and
    of the speed at which binder oxidises for one kelvin more [1].
    """

    overheating: UnitCost
    moisture: UnitCost
    leaking_air: UnitCost
    percent_in_k: Three
    fume_of_kelvin: float
    oxidation_of_kelvin: tuple[float, float]
    currency: str

    def each(self) -> tuple[UnitCost, UnitCost, UnitCost]:
        """The three of them."""
        return self.overheating, self.moisture, self.leaking_air


def wastes_at(situation: Situation, discharge_c: float) -> Wastes:
    """What a kelvin, a percent of moisture and a tenth of air cost at ``discharge_c`` [C]."""
    operation = operation_of(situation, discharge_c)
    kelvin = kelvin_too_much(situation, discharge_c)
    wetter = moisture_cost(operation, -_POINT)
    leaking = leakage_cost(operation, np.asarray(operation.air_ratio, float) + _AIR)
    air_j_kg = leaking.gross_j_kg
    return Wastes(
        overheating=_unit_cost(
            situation,
            kelvin.gross_j_kg_k,
            "overheating",
            "one degree Celsius too hot",
            "two heat balances a degree apart, so by the efficiency of the last degree",
            "least where the stack stays as it is; most is what field trials of cooler mix measured"
            " (NCHRP 9-47A, told second-hand)",
        ),
        moisture=_unit_cost(
            situation,
            doubted(float(wetter.gross_j_kg)),
            "moisture",
            "one percent of the dry stone",
            "two heat balances a percent of water apart, the stack held",
            "10 % either way, as balance and meter agree; published slopes lie up to a fifth lower",
        ),
        leaking_air=_unit_cost(
            situation,
            Range(np.zeros(()), air_j_kg, air_j_kg * (1.0 + MODEL_SHARE)),
            "leaking air",
            "a tenth of the air the fuel needs",
            "two heat balances a tenth of air apart, the stack held",
            "nothing where it leaks in behind the dryer, which costs the fan only; the plant's air "
            "ratio is as entered",
        ),
        percent_in_k=three(degrees_worth_k(wetter, kelvin), 1.0),
        fume_of_kelvin=float(fume_growth(discharge_c + 1.0, discharge_c)),
        oxidation_of_kelvin=oxidation_of(discharge_c + 1.0, discharge_c),
        currency=situation.facts.folder.plant.currency,
    )


def oxidation_of(to_c: float, from_c: float) -> tuple[float, float]:
    """How much faster binder oxidises at ``to_c`` than at ``from_c`` [C]: low and high [1]."""
    energies = load_table("overheating").row("oxidation of binder")
    low, high = sorted(
        float(oxidation_growth(to_c, from_c, energies[side])) for side in ("low", "high")
    )
    return low, high


def doubted(central: float, below: float = 0.0, above: float = 0.0) -> Range:
    """``central`` with the share balance and meter agree within, and further doubt on each side."""
    model = MODEL_SHARE * central
    return Range(
        np.asarray(central - np.hypot(model, below)),
        np.asarray(central),
        np.asarray(central + np.hypot(model, above)),
    )


def three(span: Range, factor: float) -> Three:
    """Low, central and high of ``span``, times ``factor``, as plain numbers."""
    return float(span.low) * factor, float(span.central) * factor, float(span.high) * factor


def times(told: Three, factor: float) -> Three:
    """``told`` times ``factor``."""
    return told[0] * factor, told[1] * factor, told[2] * factor


def _unit_cost(
    situation: Situation, gross_j_kg: Range, name: str, unit: str, found_from: str, how_sure: str
) -> UnitCost:
    dryer = situation.facts.folder.plant.dryer
    burnt = combustion(fuel_called(dryer.fuel.name))
    price = money_per_j(dryer)
    per_h = situation.rate_kgs * 3600.0 / KG_PER_T
    kwh_t = three(gross_j_kg, 1.0 / J_KG_PER_KWH_T)
    money_t = three(gross_j_kg, KG_PER_T * price) if price is not None else None
    return UnitCost(
        name=name,
        unit=unit,
        gross_kwh_t=kwh_t,
        gross_kwh_h=times(kwh_t, per_h),
        co2_kg_t=three(gross_j_kg, KG_PER_T * burnt.co2_kg_kg / burnt.gross_j_kg),
        money_t=money_t,
        money_h=times(money_t, per_h) if money_t else None,
        found_from=found_from,
        how_sure=how_sure,
    )
