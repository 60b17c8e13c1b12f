"""A binder tank cools, is held and is heated again; no heat appears or vanishes."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from advisor.errors import FaultyInput
from advisor.heat import (
    BinderTank,
    binder_tank,
    holding_w,
    plan_setback,
    reheat_s,
    tank_after_c,
    tank_area_m2,
)
from heat.published import cases

TANK = BinderTank(54_000.0, 88.0, 0.48, 100_000.0, 2100.0)


def test_lumped_body() -> None:
    row = next(case for case in cases("LUMP-1"))
    body = BinderTank(row["m"], row["A"], row["U"], 0.0, row["cp"])
    found = tank_after_c(row["t_s"], body, row["T0"], row["Tair"])
    assert found == pytest.approx(row.expected, abs=row.tolerance)


def test_heat_lost_by_an_insulated_tank() -> None:
    row = next(case for case in cases("TANK-EX"))
    body = BinderTank(1.0, row["A_m2"], row["U"], 0.0, 2000.0)
    assert holding_w(body, row["dT"], 0.0) == pytest.approx(row.expected, abs=row.tolerance)


def test_figures_of_a_usual_tank() -> None:
    """100 mm of wool, 88 m2, 54 t, 165 C in air of 10 C: 6.6 kW, 0.21 K/h (derived)."""
    assert holding_w(TANK, 165.0, 10.0) == pytest.approx(6600.0, rel=0.01)
    assert 165.0 - tank_after_c(3600.0, TANK, 165.0, 10.0) == pytest.approx(0.21, abs=0.005)
    # 100 kW net into 60 t are 2.86 K/h
    lossless = BinderTank(60_000.0, 1e-9, 1.0, 100_000.0, 2100.0)
    risen = tank_after_c(3600.0, lossless, 100.0, 10.0, heating_w=100_000.0) - 100.0
    assert risen == pytest.approx(2.86, abs=0.01)
    assert tank_area_m2(4.0, 5.0, 1.0) == pytest.approx(88.0, abs=0.1)
    assert tank_area_m2(4.0, 5.0, 0.5, dry_share=0.4) == pytest.approx(0.7 * 87.96, abs=0.1)
    assert binder_tank(1.0, 1.0, 1.0, 1.0, about_c=160.0).specific_heat_jkgk == pytest.approx(
        2205.0, abs=10.0
    )


@settings(max_examples=40, deadline=None)
@given(st.floats(3600.0, 4e5), st.floats(100.0, 165.0), st.floats(-10.0, 30.0), st.floats(0.3, 8.0))
def test_a_setback_ends_where_it_should(
    away_s: float, low_c: float, air_c: float, u: float
) -> None:
    tank = BinderTank(54_000.0, 88.0, u, 150_000.0, 2100.0)
    plan = plan_setback(tank, 165.0, low_c, air_c, away_s)
    assert plan.reaches
    assert 0.0 <= plan.reheat_at_s <= away_s
    assert plan.lowest_c >= low_c - 1e-9
    warm = tank_after_c(plan.reheats_s, tank, plan.lowest_c, air_c, heating_w=tank.heater_w)
    assert warm == pytest.approx(165.0, abs=0.05)
    assert plan.reheat_at_s + plan.reheats_s == pytest.approx(away_s, rel=1e-6)
    # what is saved is the heat not lost while it was colder, and never negative
    assert plan.saved_j >= -1e-6 * plan.held_j
    lost_colder = tank.loss_wk * (165.0 - low_c) * away_s
    assert plan.saved_j <= lost_colder * (1 + 1e-6) + 1.0


def test_heat_of_a_setback_is_heat_lost() -> None:
    """The tank ends as it began, so the heat spent is the heat lost on the way (summed)."""
    plan = plan_setback(TANK, 165.0, 140.0, 5.0, 60 * 3600.0)
    hours = np.linspace(0.0, 60 * 3600.0, 20_001)
    coasting = np.maximum(tank_after_c(hours, TANK, 165.0, 5.0), 140.0)
    heating = tank_after_c(
        hours - plan.reheat_at_s, TANK, plan.lowest_c, 5.0, heating_w=TANK.heater_w
    )
    at = np.where(hours < plan.reheat_at_s, coasting, heating)
    lost = holding_w(TANK, at, 5.0)
    summed = np.sum((lost[1:] + lost[:-1]) / 2 * np.diff(hours))
    assert plan.spent_j == pytest.approx(summed, rel=1e-3)


def test_a_heater_that_is_too_weak_says_so() -> None:
    weak = BinderTank(54_000.0, 88.0, 3.0, 20_000.0, 2100.0)
    assert reheat_s(weak, 120.0, 165.0, 5.0) == np.inf
    assert not plan_setback(weak, 165.0, 140.0, 5.0, 60 * 3600.0).reaches
    assert reheat_s(TANK, 170.0, 165.0, 5.0) == 0.0


def test_impossible_tanks_are_refused() -> None:
    with pytest.raises(FaultyInput, match="filled from 0 to 1"):
        tank_area_m2(4.0, 5.0, 1.2)
    with pytest.raises(FaultyInput, match="lower temperature"):
        plan_setback(TANK, 150.0, 160.0, 10.0, 3600.0)
