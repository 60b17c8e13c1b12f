"""Shifts, also those that run past midnight."""

import pytest

from advisor.settings import read_plant
from advisor.settings.shifts import shift_at, shift_end
from demo_schedule import ZONE, moment


@pytest.fixture(scope="module")
def shifts(demo_folder):
    return read_plant(demo_folder).plant.shifts


@pytest.mark.parametrize(
    ("local", "name", "end"),
    [
        ("2026-10-23 05:30", "day", "2026-10-23 15:30"),
        ("2026-10-23 15:29", "day", "2026-10-23 15:30"),
        ("2026-10-23 15:30", None, None),
        ("2026-10-24 06:00", None, None),  # Saturday works at night only
        ("2026-10-24 20:00", "night", "2026-10-25 05:00"),
        ("2026-10-25 00:30", "night", "2026-10-25 05:00"),
        ("2026-10-25 05:00", None, None),
    ],
)
def test_the_shift_that_is_on_and_its_end(shifts, local, name, end):
    at = moment(local).astimezone(ZONE)
    on = shift_at(shifts, at)
    assert (on.name if on else None) == name
    assert shift_end(shifts, at) == (moment(end) if end else None)
