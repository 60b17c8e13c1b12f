"""Excess heat against worked examples; each number derived by hand beside it."""

import numpy as np
import pytest

from advisor.review.result import Span
from advisor.review.waste import HeatPrice, excess_tk, waste_of


def test_excess_is_summed_row_by_row_not_from_the_mean():
    # rows of 40, 50, 60, 45 t at 158, 168, 175, 162 C against 165: 50*3 + 60*10 = 750 tonne
    # kelvin; from the tonne-weighted mean it would be 335 (derived)
    temperatures = np.array([158.0, 168.0, 175.0, 162.0])
    tonnes = np.array([40.0, 50.0, 60.0, 45.0])
    assert excess_tk(temperatures, np.full(4, 165.0), tonnes * 1000).sum() == pytest.approx(750.0)
    mean = np.average(temperatures, weights=tonnes)
    assert (mean - 165.0) * tonnes.sum() == pytest.approx(335.0, abs=0.5)


def test_a_season_of_200_000_t_eight_kelvin_too_hot_is_about_680_mwh():
    # 200 000 t * 8 K * 1.527 MJ/(t K) = 2443 GJ = 678.7 MWh gross (derived)
    price = HeatPrice(Span(1300.0, 1527.0, 2340.0), money_j=0.05 / 3.6e6, co2_kg_j=0.0)
    found = waste_of(200_000 * 8.0, price)
    assert found.fuel_kwh.middle == pytest.approx(678_667, abs=1000)
    assert found.money.middle == pytest.approx(0.05 * 678_667, rel=1e-3)
    assert found.fuel_kwh.low < found.fuel_kwh.middle < found.fuel_kwh.high


def test_a_missing_reading_costs_nothing():
    assert excess_tk(np.array([np.nan]), np.array([165.0]), np.array([1e4]))[0] == 0.0


@pytest.mark.parametrize(
    ("mean_above", "phantom"), [(0.0, 1.19683), (-5.0, 0.0594797), (5.0, 5.05948)]
)
def test_noise_alone_reads_as_excess_so_it_is_taken_out_first(mean_above, phantom):
    # mean of max(0, x) for a normal reading of 3 K scatter: mu Phi(mu/s) + s phi(mu/s) (derived)
    random = np.random.default_rng(11)
    readings = 165.0 + mean_above + random.normal(0.0, 3.0, 400_000)
    found = excess_tk(readings, np.full(readings.size, 165.0), np.full(readings.size, 1000.0))
    assert found.mean() == pytest.approx(phantom, abs=0.01)
