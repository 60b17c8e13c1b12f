"""The next time of day and the next shift, across midnight and a change of the clocks."""

from datetime import UTC, datetime
from zoneinfo import ZoneInfo

import pytest

from advisor.errors import FaultyInput
from advisor.settings.moments import next_moment
from advisor.settings.plant import Shift
from advisor.settings.shifts import next_start

LONDON = ZoneInfo("Europe/London")


def test_a_bare_time_of_day_is_the_next_one():
    after = datetime(2026, 10, 24, 14, 30, tzinfo=UTC)  # 15:30 in London
    assert next_moment("16:00", LONDON, after) == datetime(2026, 10, 24, 15, 0, tzinfo=UTC)
    # the clocks go back in that night: 06:00 is then 06:00 UTC
    assert next_moment("6:00", LONDON, after) == datetime(2026, 10, 25, 6, 0, tzinfo=UTC)
    assert next_moment("2026-10-26 05:30", LONDON, after) == datetime(
        2026, 10, 26, 5, 30, tzinfo=UTC
    )
    for text in ("25:00", "noon", ""):
        with pytest.raises(FaultyInput):
            next_moment(text, LONDON, after)


def test_the_next_shift_starts_on_one_of_its_days():
    day = Shift.model_validate(
        {"name": "day", "start": "05:30", "end": "15:30", "days": ["mon", "tue"]}
    )
    friday = datetime(2026, 10, 23, 10, 10, tzinfo=LONDON)
    assert next_start([day], friday) == datetime(2026, 10, 26, 5, 30, tzinfo=UTC)
    monday = datetime(2026, 10, 26, 5, 30, tzinfo=LONDON)
    assert next_start([day], monday) == datetime(2026, 10, 27, 5, 30, tzinfo=UTC)
    assert next_start([], friday) is None
