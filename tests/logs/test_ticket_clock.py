"""The clock of the tickets against that of the plant log."""

from __future__ import annotations

import numpy as np
import pandas as pd
import pytest

from advisor.logs import clock_offset, clock_rules, read_logs


@pytest.fixture(scope="module")
def log(demo):
    return read_logs(demo.folder)


def later(tickets, minutes):
    return tickets.assign(time=tickets["time"] + pd.Timedelta(minutes=minutes))


@pytest.mark.parametrize("minutes", [0, 1, 7, -12, 60, -60, 85])
def test_a_wrong_clock_is_found_to_the_minute(log, minutes):
    found = clock_offset(log.frame, later(log.tickets, minutes))
    assert found.offset_s == pytest.approx(60.0 * minutes, abs=1.0)
    assert found.doubt_s == 60.0
    assert found.fits > 0.95 * found.loads


def test_a_day_of_loads_is_enough(log):
    day = log.tickets[log.tickets["time"] < pd.Timestamp("2026-10-20", tz="UTC")]
    found = clock_offset(log.frame, later(day, 9))
    assert found.offset_s == 540.0 and found.loads == len(day)


@pytest.mark.parametrize("seed", range(10))
def test_tickets_of_no_load_in_the_log_give_no_offset(log, seed):
    when = np.random.default_rng(seed).choice(log.frame["time"], len(log.tickets))
    assert clock_offset(log.frame, log.tickets.assign(time=when)) is None


def test_too_little_to_go_by_gives_no_offset(log):
    few = log.tickets.head(int(clock_rules().loads) - 1)
    assert clock_offset(log.frame, few) is None
    assert clock_offset(log.frame.head(2), log.tickets) is None
    assert clock_offset(log.frame, log.tickets.drop(columns="silo")) is None
    unread = log.frame.drop(columns=["silo_1_kg", "silo_2_kg"])
    assert clock_offset(unread, log.tickets) is None
