"""Words of the pages: notices few and worth reading, addresses read with care."""

from __future__ import annotations

from dataclasses import replace
from datetime import UTC, date, datetime, timedelta

import pytest

from advisor.figures.drawn import Reading
from advisor.screens.choosing import cells_of, chosen_span, span_of, toggled, value_of
from advisor.screens.notices import notices
from advisor.screens.query import days_to_times, review_query, shift_query
from advisor.screens.shift_view import shift_view
from advisor.screens.words import age_words, delta_words, temperature_words
from screens.made_up import EXCURSIONS, NOW, ZONE, MadeUpPlant, advice


class Quiet(MadeUpPlant):
    """The made-up plant with no excursion running."""

    def excursions_open(self, at, units="si"):
        return ()


def told(*readings):
    return notices(shift_view(Quiet(advice(), readings=readings), None, None), "si")


def reading(value, point="discharge", doubt="", sd=0.5):
    return Reading(point, value, sd, NOW, doubt)


def test_a_running_excursion_is_told_with_since_when_how_much_why_and_what_a_change_reaches():
    view = shift_view(MadeUpPlant(advice()), None, None)
    (first, *_) = notices(view, "si")
    assert first.kind == "hot" and "since" in first.title
    text = " ".join(first.lines)
    assert "18 min" in text and "kWh" in text and "Likely: moisture fell" in text
    assert "A change now reaches the truck at" in text and "the paver at" in text


def test_a_reading_hardly_outside_is_not_worth_a_notice():
    assert told(reading(165.4)) == ()
    assert told(reading(167.0))[0].kind == "hot"
    assert told(reading(150.6)) == ()
    assert told(reading(149.0))[0].kind == "cold"
    # a coarse sensor has to show more
    assert told(reading(167.0, sd=3.0)) == ()


def test_what_is_inside_is_no_notice_and_what_is_doubted_says_why():
    assert told(reading(156.0)) == ()
    (one,) = told(reading(190.0, doubt="stuck since 08:40"))
    assert one.kind == "unknown" and "Stuck since 08:40." in one.lines


def test_a_point_with_a_running_excursion_is_not_told_twice():
    source = MadeUpPlant(advice(), readings=(reading(168.0),))
    hot = [one for one in notices(shift_view(source, None, None), "si") if one.kind == "hot"]
    assert len(hot) == 1


def test_an_old_reading_is_no_present_one():
    old = replace(reading(168.0), taken_at=NOW - timedelta(minutes=30))
    (one,) = told(old)
    assert one.kind == "unknown" and "From 09:40." in one.lines


@pytest.mark.parametrize(
    ("search", "job", "at", "faults"),
    [
        (None, None, None, 0),
        ("?job=J-1", "J-1", None, 0),
        ("?job=J-9", None, None, 1),
        ("?at=2026-10-23T10:10", None, datetime(2026, 10, 23, 9, 10, tzinfo=UTC), 0),
        ("?at=2026-10-23T10:10%2B02:00", None, datetime(2026, 10, 23, 8, 10, tzinfo=UTC), 0),
        ("?at=soon&shift=2", None, None, 2),
    ],
)
def test_the_address_of_the_shift_is_read_with_care(search, job, at, faults):
    asked = shift_query(search, ("J-1", "J-2"), ZONE)
    assert (asked.job, asked.at, len(asked.faults)) == (job, at, faults)


def test_the_address_of_a_review_is_read_with_care():
    asked = review_query("?from=2026-10-25&to=2026-10-19")
    assert (asked.first, asked.last) == (date(2026, 10, 19), date(2026, 10, 25))
    assert len(asked.faults) == 1
    assert len(review_query("?from=x&til=2026-10-19").faults) == 2


def test_days_are_the_plant_s_own_also_where_the_clocks_change():
    start, end = days_to_times(date(2026, 10, 25), date(2026, 10, 25), ZONE)
    assert end - start == timedelta(hours=25)


def test_a_pressed_hour_is_chosen_and_pressed_again_it_is_not():
    cell = ("2026-10-23", 9)
    chosen = toggled([], [cell])
    assert chosen == [value_of(cell)] and cells_of(chosen) == (cell,)
    assert toggled(chosen, [cell]) == []
    start, end = span_of(("2026-10-25", 1), ZONE)
    assert end - start == timedelta(hours=2)  # the repeated hour
    review = MadeUpPlant().review(NOW, NOW + timedelta(days=1))
    assert chosen_span([], review, ZONE) == (review.start, review.end)


def test_numbers_are_shown_in_the_reader_s_units():
    assert temperature_words(160.0, "us") == "320 °F"
    assert delta_words(10.0, "us") == "18 °F"
    assert age_words(8) == "8 s" and "min" in age_words(400) and "h" in age_words(9000)


def test_the_evidence_of_an_excursion_is_a_sentence():
    view = shift_view(MadeUpPlant(advice()), None, None)
    for notice in notices(replace(view, excursions=EXCURSIONS[:2]), "us"):
        assert all(line.endswith(".") for line in notice.lines)
