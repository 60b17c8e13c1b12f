"""Heat spent above the window, and what it is worth."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from advisor.review.result import Span, Waste

Floats = NDArray[np.float64]

_J_PER_KWH = 3.6e6


@dataclass(frozen=True)
class HeatPrice:
    """What one kelvin too much costs.

    ``gross_j_kgk`` is gross burner heat per kg of mix and kelvin; ``money_j`` and ``co2_kg_j``
    are per joule of gross heat.
    """

    gross_j_kgk: Span
    money_j: float
    co2_kg_j: float


def excess_tk(temperature_c: Floats, high_c: Floats, mass_kg: Floats) -> Floats:
    """Excess [tonne kelvin] of each row; the positive part is taken row by row, then summed.

    Averaging first hides most of it: what is below the window does not pay for what is above.
    Rows with a missing temperature or window count nothing.
    """
    over_k = np.maximum(temperature_c - high_c, 0.0)
    return np.where(np.isfinite(over_k), over_k, 0.0) * mass_kg / 1000.0


def waste_of(excess: float, price: HeatPrice) -> Waste:
    """Fuel, money and CO2 of an ``excess`` [tonne kelvin]."""
    gross_j = [
        excess * 1000.0 * each
        for each in (price.gross_j_kgk.low, price.gross_j_kgk.middle, price.gross_j_kgk.high)
    ]
    return Waste(
        excess_tk=excess,
        fuel_kwh=Span(*(each / _J_PER_KWH for each in gross_j)),
        money=Span(*(each * price.money_j for each in gross_j)),
        co2_kg=Span(*(each * price.co2_kg_j for each in gross_j)),
    )
