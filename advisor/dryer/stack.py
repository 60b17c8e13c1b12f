"""What the stack allows: dew points below, the filter cloth above."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike

from advisor.dryer.balance import HeatBalance
from advisor.dryer.properties import KELVIN, Values, molar_masses_kg_mol
from advisor.errors import OutsideValidity

_MMHG_PA = 133.322387415  # conventional millimetre of mercury, NIST SP 811 (2008)


def acid_dew_point_c(
    vapour_share: ArrayLike, trioxide_share: ArrayLike, pressure_pa: ArrayLike
) -> Values:
    """Temperature [C] at which sulfuric acid condenses from stack gas; an upper bound here.

    Stone dust, above all limestone, takes up most sulfur trioxide before it meets the filter.

    Args:
        vapour_share: water as a mole fraction of wet gas, any shape, above 0 [1].
        trioxide_share: sulfur trioxide as a mole fraction of wet gas, above 0 [1].
        pressure_pa: pressure of the gas [Pa].

    Source: Verhoff and Banchero, Chemical Engineering Progress 70(8), 1974, 71-72.
    """
    water, acid = np.asarray(vapour_share, float), np.asarray(trioxide_share, float)
    if np.any(water <= 0.0) or np.any(acid <= 0.0):
        raise OutsideValidity.of(
            "acid-dew-point",
            "Without water and sulfur trioxide no acid can condense.",
            "Ask for gas that holds both.",
            field="trioxide_share",
        )
    millimetres = np.asarray(pressure_pa, float) / _MMHG_PA
    ln_water, ln_acid = np.log(water * millimetres), np.log(acid * millimetres)
    inverse = 2.276 - 0.0294 * ln_water - 0.0858 * ln_acid + 0.0062 * ln_water * ln_acid
    return np.asarray(1000.0 / inverse - KELVIN)


def dioxide_share(balance: HeatBalance) -> Values:
    """Sulfur dioxide as a mole fraction of wet stack gas [1].

    Args:
        balance: balance of the dryer.
    """
    moles = balance.so2_kg_kg / molar_masses_kg_mol()["SO2"]
    return np.asarray(moles / balance.exhaust_wet_mol_kg)


@dataclass(frozen=True, eq=False)
class StackLimits:
    """Between which temperatures the gas may leave.

    ``low_c``: water dew point and margin; ``high_c``: what the cloth bears; ``above_low_k`` and
    ``below_high_k``: distance of the stack from them, below 0 where it is outside; ``acid_c``: acid
    dew point, to be shown as a caution, NaN where the fuel holds no sulfur.
    """

    dew_point_c: Values
    low_c: Values
    high_c: Values
    above_low_k: Values
    below_high_k: Values
    acid_c: Values


def stack_limits(
    balance: HeatBalance,
    stack_c: ArrayLike,
    cloth_max_c: ArrayLike,
    dew_margin_k: ArrayLike,
    trioxide_of_dioxide: ArrayLike,
    pressure_pa: ArrayLike,
) -> StackLimits:
    """Dew point below and cloth above the stack, and how far it is from either.

    Args:
        balance: balance of the dryer.
        stack_c: gas as it leaves, any shape [C].
        cloth_max_c: hottest gas the filter cloth bears [C].
        dew_margin_k: least distance from the water dew point [K].
        trioxide_of_dioxide: share of the sulfur dioxide that turns to trioxide [1].
        pressure_pa: pressure of the gas [Pa].
    """
    gas_c = np.asarray(stack_c, float)
    low = np.asarray(balance.dew_point_c + np.asarray(dew_margin_k, float))
    high = np.asarray(cloth_max_c, float)
    trioxide = dioxide_share(balance) * np.asarray(trioxide_of_dioxide, float)
    sulfur = trioxide > 0.0
    acid = acid_dew_point_c(
        np.where(sulfur, balance.vapour_share, 0.1), np.where(sulfur, trioxide, 1e-6), pressure_pa
    )
    return StackLimits(
        dew_point_c=balance.dew_point_c,
        low_c=low,
        high_c=high,
        above_low_k=np.asarray(gas_c - low),
        below_high_k=np.asarray(high - gas_c),
        acid_c=np.where(sulfur, acid, np.nan)[()],
    )
