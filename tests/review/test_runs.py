"""Excursions of a series: dead band, delay, gaps."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from advisor.review.runs import change_edges, outside_runs, row_durations_s

# The series of seven readings against 170 that the literature on plant alarms uses to show what a
# dead band and a delay do; counts derived by hand.
SERIES = np.array([168.0, 171, 169, 171, 169, 171, 168])
MINUTES = np.arange(7) * 60.0


def excursions(over, dead_band=0.0, delay=0.0, time_s=MINUTES):
    return len(outside_runs(time_s, over, dead_band, delay, 300.0)[0])


def mask_of(time_s, over, dead_band, delay):
    mask = np.zeros(len(over), bool)
    for start, end in zip(*outside_runs(time_s, over, dead_band, delay, 300.0), strict=True):
        mask[start:end] = True
    return mask


@pytest.mark.parametrize(
    ("dead_band", "delay", "expected"), [(0.0, 0.0, 3), (2.0, 0.0, 1), (0.0, 120.0, 0)]
)
def test_dead_band_joins_and_delay_suppresses(dead_band, delay, expected):
    assert excursions(SERIES - 170, dead_band, delay) == expected


def test_an_excursion_begins_with_its_first_row_not_after_the_delay():
    over = np.array([-1.0, 1, 1, 1, -3, -3])
    mask = mask_of(np.arange(6) * 60.0, over, 2.0, 180.0)
    np.testing.assert_array_equal(mask, [False, True, True, True, False, False])


def test_a_gap_in_the_log_ends_an_excursion():
    time_s = np.array([0.0, 60, 120, 7320, 7380, 7440])
    starts, ends = outside_runs(time_s, np.ones(6), 2.0, 60.0, 300.0)
    np.testing.assert_array_equal(starts, [0, 3])
    np.testing.assert_array_equal(ends, [3, 6])
    assert excursions(np.ones(6), 2.0, 200.0, time_s) == 0


def test_a_missing_value_ends_an_excursion():
    over = np.array([1.0, 1.0, np.nan, -1.0, -1.0])
    mask = mask_of(np.arange(5) * 60.0, over, 2.0, 0.0)
    np.testing.assert_array_equal(mask, [True, True, False, False, False])


def test_time_nobody_saw_is_not_counted():
    np.testing.assert_array_equal(
        row_durations_s(np.array([0.0, 60, 120, 9000]), 300.0), [60, 60, 60, 60]
    )


def test_an_empty_log_has_no_runs():
    empty = np.zeros(0)
    assert outside_runs(empty, empty, 1.0, 1.0, 1.0)[0].size == 0
    assert change_edges(empty)[0].size == 0


@given(st.lists(st.floats(-10, 10), min_size=1, max_size=60), st.floats(0, 4), st.floats(0, 300))
def test_a_dead_band_never_makes_more_excursions_and_a_delay_never_more_rows(over, band, delay):
    over = np.array(over)
    time_s = np.arange(len(over)) * 60.0
    bare = mask_of(time_s, over, 0.0, 0.0)
    np.testing.assert_array_equal(bare, over > 0)
    assert excursions(over, band, 0.0, time_s) <= excursions(over, 0.0, 0.0, time_s)
    wide = mask_of(time_s, over, band, 0.0)
    assert (mask_of(time_s, over, band, delay) <= wide).all()
