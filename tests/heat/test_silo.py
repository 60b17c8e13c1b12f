"""Mix in a silo and on the conveyor: series, steady walls, and what must rise rises."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from advisor.errors import FaultyInput
from advisor.heat import (
    Face,
    Layer,
    MixThermal,
    Silo,
    conduct,
    cone_share,
    growing_times_s,
    hold_left_s,
    retained_in_silo,
    stored_mix,
    transfer_drop_k,
    wall_coefficient_wm2k,
)
from advisor.heat.product import Span
from heat.published import Case, cases, value

LOOSE = MixThermal(0.9, 1900.0, 950.0)


def silo(u: float, **more: object) -> Silo:
    return Silo(1.85, 7.0, 2.6, wall_wm2k=u, top_wm2k=u, cone_wm2k=u, **more)


@pytest.mark.parametrize("case", cases("CYL"), ids=str)
def test_barrel_by_bessel_series(case: Case) -> None:
    mix = MixThermal(case["k"], case["rho"], case["cp"])
    endless = Silo(case["R"], 1e9, 1.0, case["U"], 0.0, 0.0)
    excess = case["T0"] - case["Tair"]
    if case.inputs["where"] == "mean":
        kept = retained_in_silo(case["t_s"], endless, mix)
        assert case["Tair"] + excess * kept == pytest.approx(case.expected, abs=0.05)
    else:
        # The wall is taken as flat: in a day it reads 2 K too warm at most, and it is no set point.
        wall = stored_mix(case["t_s"], endless, mix, case["T0"], case["Tair"]).wall_c
        assert case.expected < wall < case.expected + 2.0


def ball_on_a_grid(radius: float, u: float, end: float) -> float:
    """Share kept by a ball: u = r (T - air) obeys the flat equation (explicit steps)."""
    cells = 200
    edge = np.linspace(0.0, radius, cells + 1)
    middle = (edge[1:] + edge[:-1]) / 2
    volume = (edge[1:] ** 3 - edge[:-1] ** 3) / 3
    width = radius / cells
    warm = np.ones(cells)
    limit = 0.4 * width**2 / LOOSE.diffusivity_m2s
    count = int(np.ceil(end / limit))
    outside = 1 / (1 / u + width / 2 / 0.9)
    for _ in range(count):
        flow = 0.9 * edge[1:-1] ** 2 * np.diff(warm) / np.diff(middle)
        gained = np.zeros(cells)
        gained[:-1] += flow
        gained[1:] -= flow
        gained[-1] -= outside * radius**2 * warm[-1]
        warm += end / count * gained / (volume * LOOSE.capacity_jm3k)
    return float((warm * volume).sum() / volume.sum())


@pytest.mark.parametrize(("u", "hours"), [(0.8, 12.0), (8.0, 4.0), (8.0, 12.0)])
def test_ball_that_stands_for_the_cone(u: float, hours: float) -> None:
    kept = Span(1.5, u, curvature=2).retained(hours * 3600, LOOSE)
    assert kept == pytest.approx(ball_on_a_grid(1.5, u, hours * 3600), abs=0.004)


@settings(max_examples=30, deadline=None)
@given(st.floats(600.0, 2e5), st.floats(0.3, 8.0), st.floats(1.0, 3.0))
def test_longer_thinner_and_smaller_loses_more(hold: float, u: float, radius: float) -> None:
    one = Silo(radius, 6.0, 2.5, u, u, u)
    usual = stored_mix(hold, one, LOOSE, 160.0, 10.0)
    assert 10.0 < usual.first_out_c < usual.mean_c < 160.0
    assert usual.wall_c < usual.mean_c
    assert stored_mix(hold + 600.0, one, LOOSE, 160.0, 10.0).mean_c < usual.mean_c
    more = Silo(radius, 6.0, 2.5, 1.1 * u, u, u)
    assert stored_mix(hold, more, LOOSE, 160.0, 10.0).mean_c < usual.mean_c
    assert stored_mix(hold, one, LOOSE, 160.0, 20.0).mean_c > usual.mean_c
    wider = Silo(1.1 * radius, 6.0, 2.5, u, u, u)
    assert retained_in_silo(hold, wider, LOOSE) > retained_in_silo(hold, one, LOOSE)


def test_a_heated_cone_warms_what_comes_out_first() -> None:
    hold = 12 * 3600.0
    heated = Silo(1.85, 7.0, 2.6, 0.8, 0.8, 25.0, cone_c=150.0)
    cold = Silo(1.85, 7.0, 2.6, 0.8, 0.8, 25.0)
    with_heat = stored_mix(hold, heated, LOOSE, 160.0, 10.0)
    without = stored_mix(hold, cold, LOOSE, 160.0, 10.0)
    assert 150.0 < with_heat.first_out_c < 160.0
    assert with_heat.first_out_c > without.first_out_c + 30.0
    assert with_heat.mean_c > without.mean_c
    # one kelvin more around the cone is the share of it in the barrel
    share = cone_share(hold, heated, LOOSE)
    assert 0.0 < share < 0.1
    # heated to what the mix has, the cone loses nothing at all
    same = Silo(1.85, 7.0, 2.6, 0.8, 0.8, 25.0, cone_c=160.0)
    assert stored_mix(hold, same, LOOSE, 160.0, 10.0).first_out_c == pytest.approx(160.0)


def test_mix_in_the_cone_shields_the_barrel() -> None:
    """A column of 2 m of cone under the barrel: in two days the barrel feels the cold below little.

    So a bare cone takes from the barrel only what its own mix has lost, not once more.
    """
    run = conduct(
        (Layer(2.0, 0.9, LOOSE.capacity_jm3k, 160.0, cells=30, spacing="top"),),
        Face(8.0, 10.0),
        growing_times_s(48 * 3600.0, 60),
        depths_m=np.array([1.0, 2.0]),
    )
    assert 160.0 - run.depth_c[1, -1, 0] < 0.05
    bare = Silo(1.85, 7.0, 2.6, 0.8, 0.8, 8.0)
    tight = Silo(1.85, 7.0, 2.6, 0.8, 0.8, 0.0)
    lost = [stored_mix(12 * 3600.0, one, LOOSE, 160.0, 10.0) for one in (bare, tight)]
    cone_m3 = bare.cone_volume_m3
    share = cone_m3 / (cone_m3 + np.pi * 1.85**2 * 7.0)
    assert lost[1].mean_c - lost[0].mean_c == pytest.approx(
        share * (160.0 - lost[0].first_out_c), rel=1e-9
    )


def test_a_share_of_the_cone_is_what_the_solver_gives() -> None:
    """A column between a sealed top and a cone that is one kelvin warmer than all else."""
    hold = 24 * 3600.0
    column = Silo(1e6, 3.0, 2.6, 0.0, 0.0, 5.0)
    run = conduct(
        (Layer(3.0, 0.9, LOOSE.capacity_jm3k, 0.0, cells=30, spacing="top"),),
        Face(5.0, 1.0),
        growing_times_s(hold, 60),
    )
    assert cone_share(hold, column, LOOSE) == pytest.approx(run.mean_c[0, -1, 0], rel=1e-3)


def test_how_long_mix_may_wait() -> None:
    limit = np.array([150.0, 158.0, 170.0])
    left = hold_left_s(limit, silo(0.8), LOOSE, 160.0, 10.0)
    at_limit = stored_mix(left[:2], silo(0.8), LOOSE, 160.0, 10.0).first_out_c
    assert at_limit == pytest.approx(limit[:2], abs=0.01)
    assert left[2] == pytest.approx(0.0, abs=1.0)
    assert hold_left_s(100.0, silo(0.4), LOOSE, 160.0, 10.0) == np.inf


def test_a_silo_filled_by_mass() -> None:
    held = Silo.holding(200_000.0, 2.0, 2.8, 1900.0, wall_wm2k=0.8, top_wm2k=0.8, cone_wm2k=0.8)
    volume = np.pi * 4.0 * held.fill_m + held.cone_volume_m3
    assert volume * 1900.0 == pytest.approx(200_000.0)


def test_insulated_wall_of_layers() -> None:
    given = next(case for case in cases("COMP-Q"))
    plain = wall_coefficient_wm2k(
        given["wool_mm"] / 1000, given["k_wool"],
        inside_wm2k=given["h_in"], outside_wm2k=given["h_out"],
    )  # fmt: skip
    # two steel skins of the row add 0.02 %
    assert plain * (given["T_in"] - given["Tair"]) == pytest.approx(value("COMP-Q"), rel=5e-4)
    skin = given["Tair"] + plain * 150.0 / given["h_out"]
    assert skin == pytest.approx(value("COMP-TS"), abs=0.01)
    row = next(case for case in cases("DE-U"))
    body = wall_coefficient_wm2k(row["R"], 1.0, outside_wm2k=row["h_out"])
    assert body == pytest.approx(row.expected, abs=row.tolerance)
    bridged = wall_coefficient_wm2k(0.06, 0.045, bridges=0.3)
    assert bridged == pytest.approx(1.3 * wall_coefficient_wm2k(0.06, 0.045))


def test_conveyor() -> None:
    """4.4, 2.2 and 1.5 K at 100, 200 and 300 t/h for a bare enclosed one (derived)."""
    rate = np.array([100.0, 200.0, 300.0]) / 3.6
    drop = transfer_drop_k(150.0, 20.0, rate, 30.0, 2.5, 12.0, 950.0)
    assert drop == pytest.approx([4.4, 2.2, 1.5], abs=0.05)
    assert transfer_drop_k(20.0, 20.0, 30.0, 30.0, 2.5, 12.0, 950.0) == 0.0
    with pytest.raises(FaultyInput, match="above 0"):
        transfer_drop_k(150.0, 20.0, 0.0, 30.0, 2.5, 12.0, 950.0)


def test_a_negative_hold_is_refused() -> None:
    with pytest.raises(FaultyInput, match="less than no time"):
        retained_in_silo(-1.0, silo(0.8), LOOSE)
