"""Whose word on the weather is taken: seen before foretold, the site first, nothing from later."""

from __future__ import annotations

from dataclasses import replace
from datetime import UTC, datetime, timedelta

import pytest

from advisor.advice.advise import advise_all
from advisor.advice.case import path_case
from advisor.advice.situation import gather_situation
from advisor.advice.weather import weather_told
from advisor.records import Entry

NOW = datetime(2026, 10, 23, 9, 10, tzinfo=UTC)
HOUR = timedelta(hours=1)


def by_hand(demo, subject, at, **fact):
    """The facts of the demo with weather noted by hand."""
    from advisor.records.kinds import WeatherSeen

    written = {
        "air": "4 C", "wind": "6 m/s", "wind_height": "1.5 m", "cloud": "100 %",
        "humidity": "90 %", "rain": True, **fact,
    }  # fmt: skip
    entry = Entry(
        "w1", "weather", subject, at, at, "foreman (invented)", "", written,
        WeatherSeen.model_validate(written),
    )  # fmt: skip

    class Noted:
        def held(self, kind, about, moment, known=None):
            if kind == "weather":
                return entry if about == subject and moment >= at else None
            return demo.records.held(kind, about, moment, known)

        def all_held(self, *args, **more):
            return demo.records.all_held(*args, **more)

    return replace(demo, records=Noted())


def test_now_is_seen_and_later_is_foretold_by_the_newest_issue(demo):
    facts = replace(demo, known_at=NOW)
    station, airport, foretold = weather_told(facts, NOW, "J01")
    assert station.origin == "weather file"
    assert airport.origin == "airport report XHFN"
    assert foretold.foretold and foretold.origin == "forecast issued Fri 05:00"
    (later,) = weather_told(facts, NOW + 3 * HOUR, "J01")
    assert later.foretold
    assert later.air_c == pytest.approx(foretold.air_c, abs=8.0)


def test_nothing_is_taken_from_what_was_seen_later(demo):
    facts = replace(demo, known_at=NOW - 28 * HOUR)
    told = weather_told(facts, NOW, "J01")
    assert told and all(one.foretold for one in told)
    assert "Thu" in told[0].origin
    assert weather_told(replace(facts, known_at=NOW - 400 * HOUR), NOW, "J01") == ()


def test_between_two_hours_the_forecast_is_a_straight_line(demo):
    facts = replace(demo, known_at=NOW)
    at = datetime(2026, 10, 23, 13, 0, tzinfo=UTC)
    one, half, two = (
        weather_told(facts, at + minutes, "J01")[-1] for minutes in (timedelta(), HOUR / 2, HOUR)
    )
    assert half.air_c == pytest.approx((one.air_c + two.air_c) / 2)
    assert half.wind_ms == pytest.approx((one.wind_ms + two.wind_ms) / 2)


def test_who_stands_at_the_site_is_believed_first_and_the_others_are_named(demo):
    facts = by_hand(demo, "J01", NOW - HOUR / 4)
    situation = gather_situation(facts, NOW, "J01")
    assert situation.weather.origin == "seen by foreman (invented)"
    assert situation.weather.dew_point_c == pytest.approx(2.5, abs=0.2)  # 90 % at 4 C
    named = {one.origin for one in situation.inputs if one.name.startswith("weather")}
    assert named == {"seen by foreman (invented)", "weather file", "airport report XHFN"}
    # another job has its own site
    assert gather_situation(facts, NOW, "J02").weather.origin == "weather file"
    # taken at 1.5 m on the site, the wind is that of the mat
    assert path_case(situation).wind_ms == pytest.approx(6.0, rel=1e-6)


def test_wind_of_a_mast_is_brought_down_through_the_country_it_stands_in(demo):
    situation = gather_situation(demo, NOW, "J02")
    open_mast = path_case(situation).wind_ms
    town = replace(situation, weather=replace(situation.weather, terrain="town"))
    assert open_mast == pytest.approx(0.24 * situation.weather.wind_ms, rel=0.02)
    assert path_case(town).wind_ms > 1.5 * open_mast


def test_a_forecast_is_doubted_more_than_what_is_seen(demo):
    seen = gather_situation(demo, NOW, "J01")
    foretold = replace(seen, weather=replace(seen.weather, foretold=True))
    one, other = path_case(seen), path_case(foretold)
    assert other.air_sd_k > one.air_sd_k
    assert other.wind_log_sd > one.wind_log_sd
    first, second = advise_all([seen, foretold])
    assert second.setpoint("delivery").sd_k >= first.setpoint("delivery").sd_k


def test_a_plant_nobody_tells_the_weather_of_is_asked_for_it(demo):
    facts = replace(demo, weather=None, metar=None, forecast=None)
    (sentence,) = gather_situation(facts, NOW, "J01").missing
    assert "kind weather" in sentence
