"""Setpoints from limits and the draws of the path: intersections, clashes, confidence."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from advisor.advice.result import Limit
from advisor.advice.solve import Coating, Leg, discharge_bounds, solve
from advisor.sampling import Draws, quantile

COUNT = 256
STILL = np.zeros(COUNT)


def path(loss_k=10.0, air_c=10.0):
    """Discharge, load-out and delivery; each step keeps a share of the excess over the air."""
    kept = 1.0 - loss_k / 150.0
    one, half = np.ones(COUNT), np.full(COUNT, np.sqrt(kept))
    return {
        "discharge": Leg(np.zeros(COUNT), one),
        "load_out": Leg((1 - half) * air_c, half),
        "delivery": Leg((1 - kept) * air_c * one, kept * one),
    }


def limit(point, side, value, authority="contract"):
    return Limit(point, side, value, f"{point} {side}", authority, "made up", "entered"), value


BASE = [limit("discharge", "low", 150.0, "computed"), limit("discharge", "high", 170.0, "supplier")]


def test_without_scatter_the_target_is_the_low_bound():
    found = solve(BASE, None, path(), STILL, 0.95)
    setpoint = found.setpoints[0]
    assert (setpoint.low_c, setpoint.target_c, setpoint.high_c) == (150.0, 150.0, 170.0)
    assert setpoint.high_set_by.authority == "supplier"


def test_scatter_lifts_the_target_so_that_19_of_20_loads_keep_the_low_bound():
    scatter = Draws(COUNT).normal("control", 0.0, 2.5)
    found = solve(BASE, None, path(), scatter, 0.95)
    target = found.setpoints[0].target_c
    assert target == pytest.approx(150 + 1.645 * 2.5, abs=0.15)
    assert np.mean(target - scatter >= 150.0) == pytest.approx(0.95, abs=0.01)


def test_a_need_at_the_paver_is_carried_back_to_the_discharge():
    legs = path(loss_k=15.0)
    found = solve([*BASE, limit("delivery", "low", 145.0)], None, legs, STILL, 0.95)
    discharge, _, delivery = found.setpoints
    assert discharge.low_set_by.point == "delivery"
    assert legs["delivery"].at_point(discharge.low_c)[0] == pytest.approx(145.0)
    assert delivery.low_c == pytest.approx(145.0)


def test_a_limit_up_the_path_asks_nothing_further_down():
    legs = path()
    found = solve([*BASE, limit("delivery", "low", 120.0)], None, legs, STILL, 0.95)
    assert found.setpoints[2].low_c == pytest.approx(120.0)
    assert found.setpoints[0].low_c == 150.0


def test_crossing_limits_give_no_number_and_name_both():
    found = solve([*BASE, limit("delivery", "low", 168.0)], None, path(), STILL, 0.95)
    assert found.setpoints == ()
    assert found.clash.lower.point == "delivery"
    assert found.clash.upper.authority == "supplier"
    assert found.clash.gap_k > 0


def test_of_two_equal_limits_the_higher_authority_is_named():
    rows = [*BASE, limit("discharge", "high", 170.0, "safety")]
    _, highs = discharge_bounds(rows, path(), 0.95)
    assert highs[0].limit.authority == "safety"


def coating(low, target, high, gives_way=True):
    return Coating(
        limit("discharge", "low", low, "computed")[0],
        target,
        limit("discharge", "high", high, "computed")[0],
        gives_way,
    )


def test_a_preferred_edge_holds_when_it_can_and_gives_way_when_it_must():
    firm = [limit("discharge", "high", 170.0, "supplier")]
    window = coating(150.0, 154.0, 158.0)
    kept = solve(firm, window, path(), STILL, 0.95)
    assert kept.setpoints[0].high_c == 158.0
    assert kept.set_aside == ()
    pushed = solve([*firm, limit("delivery", "low", 152.0)], window, path(), STILL, 0.95)
    assert pushed.setpoints[0].high_c == 170.0
    assert pushed.set_aside == (window.high,)


def test_scatter_lifts_the_target_no_further_than_the_middle_of_the_coating_window():
    firm = [limit("discharge", "high", 170.0, "supplier")]
    scatter = Draws(COUNT).normal("control", 0.0, 3.0)
    near = solve(firm, coating(150.0, 153.0, 158.0), path(), scatter, 0.95)
    assert near.setpoints[0].target_c == 153.0
    wide = solve(firm, coating(150.0, 165.0, 169.0), path(), scatter, 0.95)
    assert wide.setpoints[0].target_c == pytest.approx(150.0 + 1.645 * 3.0, abs=0.2)


def test_an_upper_edge_that_is_somebodys_limit_does_not_give_way():
    window = coating(150.0, 154.0, 158.0, gives_way=False)
    rows = [limit("discharge", "high", 170.0), limit("delivery", "low", 152.0)]
    found = solve(rows, window, path(), STILL, 0.95)
    assert found.clash.upper is window.high


def test_a_window_narrower_than_the_scatter_is_said_to_be_squeezed():
    rows = [limit("discharge", "low", 150.0), limit("discharge", "high", 152.0)]
    found = solve(rows, None, path(), Draws(COUNT).normal("control", 0.0, 5.0), 0.95)
    assert found.squeezed
    assert found.setpoints[0].target_c == pytest.approx(151.0)


@given(need=st.floats(100, 160), sd=st.floats(0, 8), confidence=st.sampled_from([0.8, 0.9, 0.95]))
def test_the_low_bound_covers_the_need_with_the_confidence_asked_for(need, sd, confidence):
    draws = Draws(COUNT).normal("need", need, sd)
    limits = [
        (limit("delivery", "low", need, "computed")[0], draws),
        limit("discharge", "high", 400.0),
    ]
    legs = path()
    found = solve(limits, None, legs, STILL, confidence)
    arriving = legs["delivery"].at_point(found.setpoints[0].low_c)
    assert np.mean(arriving >= draws - 1e-9) >= confidence - 1.5 / COUNT


@given(loss=st.floats(1, 40), extra=st.floats(0, 20))
def test_a_longer_haul_never_lowers_any_number(loss, extra):
    limits = [*BASE[1:], limit("delivery", "low", 120.0)]
    near = solve(limits, None, path(loss), STILL, 0.95).setpoints[0]
    far = solve(limits, None, path(loss + extra), STILL, 0.95)
    if far.setpoints:
        assert far.setpoints[0].low_c >= near.low_c - 1e-9
        assert far.setpoints[0].target_c >= near.target_c - 1e-9


def test_quantile_of_one_column_is_itself():
    assert float(quantile(np.full(COUNT, 7.0), 0.95)) == 7.0
