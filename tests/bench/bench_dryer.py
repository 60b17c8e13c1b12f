"""Heat balances of many operating points."""

from __future__ import annotations

from functools import cache

import numpy as np

from advisor.dryer import (
    Air,
    Feed,
    Fraction,
    Operation,
    Rap,
    StackRise,
    aggregate_of_row,
    fuel_of_row,
    heat_balance,
    overheating_cost,
)
from advisor.settings.tables import load_table

POINTS = 100_000


@cache
def points() -> Operation:
    """Drums at work: discharge, moisture, RAP, air and stack all different."""
    random = np.random.default_rng(5)
    stone = aggregate_of_row(load_table("aggregates").rows[0])
    rap = random.uniform(0.0, 0.4, POINTS)
    sand = random.uniform(0.2, 0.4, POINTS)
    cold_c = random.uniform(0.0, 30.0, POINTS)
    feed = Feed(
        fractions=(
            Fraction(0.95 - rap - sand, random.uniform(0.01, 0.04, POINTS), cold_c, stone),
            Fraction(sand, random.uniform(0.03, 0.09, POINTS), cold_c, stone),
        ),
        binder_of_mix=0.05,
        binder_c=160.0,
        rap=(Rap(rap, random.uniform(0.02, 0.06, POINTS), cold_c, 0.05, stone),),
    )
    return Operation(
        fuel=fuel_of_row(load_table("fuels").rows[0]),
        feed=feed,
        air=Air(random.uniform(-5.0, 35.0, POINTS), random.uniform(0.3, 1.0, POINTS)),
        discharge_c=random.uniform(140.0, 185.0, POINTS),
        stack_c=random.uniform(95.0, 150.0, POINTS),
        air_ratio=random.uniform(1.3, 2.5, POINTS),
        casing_of_net=random.uniform(0.02, 0.1, POINTS),
    )


def bench_balance() -> int:
    """fuel, exhaust and where the heat goes, RAP and two fractions"""
    heat_balance(points())
    return POINTS


def bench_overheating() -> int:
    """what ten degrees too much cost, low, central and high"""
    overheating_cost(points(), 10.0, StackRise(0.0, 0.5, 1.0))
    return POINTS
