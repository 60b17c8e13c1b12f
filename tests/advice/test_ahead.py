"""What comes: a load, a change, a silo overnight, a tank at rest, the day; by hand and by sense."""

from __future__ import annotations

from dataclasses import replace
from datetime import UTC, datetime, timedelta
from itertools import pairwise

import numpy as np
import pandas as pd
import pytest

from advisor.advice.advise import advise
from advisor.advice.change_felt import change_felt
from advisor.advice.coming_day import day_ahead
from advisor.advice.coming_load import load_ahead
from advisor.advice.silo_hold import silo_ahead
from advisor.advice.situation import gather_situation
from advisor.advice.tank_rest import tank_ahead
from advisor.advice.tickets import ticket_told
from advisor.errors import AdvisorError, FaultyInput, MissingInput

NOW = datetime(2026, 10, 23, 9, 10, tzinfo=UTC)
EVENING = datetime(2026, 10, 22, 14, 30, tzinfo=UTC)
HOUR = timedelta(hours=1)
MONDAY = datetime(2026, 10, 26, 5, 30, tzinfo=UTC)


# --- a load


def test_a_hotter_load_waits_longer_and_rolls_longer(demo):
    situation = gather_situation(demo, NOW, "J04")
    loads = [load_ahead(situation, out_c, NOW) for out_c in (164.0, 168.0, 172.0, 176.0)]
    for cool, warm in pairwise(loads):
        assert warm.delivered_c.usual > cool.delivered_c.usual
        assert warm.wait_min.low >= cool.wait_min.low
        assert warm.wait_safe_min >= cool.wait_safe_min
        assert warm.rolling_min.usual > cool.rolling_min.usual
        assert warm.chance >= cool.chance
        assert warm.cold_share <= cool.cold_share
        assert 10.0 < cool.crust_c < warm.crust_c < warm.delivered_c.low
    first = loads[0]
    assert first.arrives_c.low < first.arrives_c.usual < first.arrives_c.high < 164.0 + 10.0
    assert first.delivered_c.usual < first.arrives_c.usual


def test_a_load_at_the_advised_target_keeps_the_need_as_surely_as_the_plant_asks(demo):
    situation = gather_situation(demo, NOW, "J04")
    advice = advise(situation)
    found = load_ahead(situation, advice.setpoint("load_out").target_c, NOW)
    assert found.need_c == pytest.approx(advice.setpoint("delivery").low_c, abs=1.0)
    assert found.delivered_c.usual == pytest.approx(advice.arrival_c, abs=1.0)
    assert found.chance > 0.9
    assert found.rolling_min.usual == pytest.approx(advice.rolling.middle_min, abs=1.0)


def test_the_wait_left_ends_where_the_load_is_down_to_its_need(demo):
    """Planned to wait as long as the middle of the band says, half of all loads keep the need."""
    situation = gather_situation(demo, NOW, "J04")
    job = situation.job
    found = load_ahead(situation, 168.0, NOW)
    assert 10.0 < found.wait_min.usual < 119.0
    longer = job.model_copy(update={"wait": found.wait_min.usual * 60.0})
    then = load_ahead(replace(situation, job=longer), 168.0, NOW)
    assert then.chance == pytest.approx(0.5, abs=0.1)


def test_a_load_too_cold_may_not_wait_at_all(demo):
    found = load_ahead(gather_situation(demo, NOW, "J04"), 140.0, NOW)
    assert found.wait_min.high == 0.0
    assert found.wait_safe_min == 0.0
    assert found.chance == 0.0
    with pytest.raises(FaultyInput, match="No mix"):
        load_ahead(gather_situation(demo, NOW, "J04"), 40.0, NOW)


def test_a_load_whose_weather_nobody_knows_is_asked_for(demo):
    blind = replace(demo, weather=None, metar=None, forecast=None)
    with pytest.raises(MissingInput, match="weather"):
        load_ahead(gather_situation(blind, NOW, "J04"), 170.0, NOW)


def test_a_ticket_is_found_by_its_number(demo):
    told = ticket_told(demo.folder, "40483")
    assert (told.load_out_c, told.job) == (157.0, "J02")
    assert told.loaded_at == datetime(2026, 10, 23, 9, 0, tzinfo=UTC)
    with pytest.raises(FaultyInput, match="last one"):
        ticket_told(demo.folder, "1")


# --- a change


def test_a_change_is_felt_after_what_lies_in_the_silo(demo):
    situation = gather_situation(demo, NOW)
    felt = change_felt(situation)
    least, usual, most = (one / 60 for one in situation.hold_s)
    assert least <= felt.truck_min.low < felt.truck_min.usual < felt.truck_min.high <= most
    assert felt.truck_min.usual == pytest.approx(usual, rel=0.35)
    road = situation.job.on_road_s / 60
    assert felt.paver_min.usual - felt.truck_min.usual == pytest.approx(road, rel=0.1)


# --- a silo


def overnight(demo, silo="silo 1", hours=14.5, **more):
    given = {"mass_kg": 80e3, "stored_c": 160.0, "air_c": 8.0} | more
    return silo_ahead(demo, silo, EVENING, EVENING + hours * HOUR, **given)


def test_mix_in_a_silo_cools_with_the_hours_and_the_cone_first(demo):
    short, long = overnight(demo, hours=4), overnight(demo, hours=14.5)
    assert 160.0 > short.mean_c.usual > long.mean_c.usual > 150.0
    assert long.wall_c.usual < long.mean_c.usual
    # a heated cone holds; without its heating the first load is the coldest
    assert long.first_out_c.usual == pytest.approx(160.0)
    assert long.cone_off_c.usual < long.mean_c.usual - 5.0
    colder = overnight(demo, air_c=-5.0)
    assert colder.mean_c.usual < long.mean_c.usual
    unheated = overnight(demo, "silo 2")
    assert unheated.cone_off_c is None
    assert unheated.first_out_c.usual < unheated.mean_c.usual


def test_the_loss_overnight_is_of_the_size_of_a_lumped_balance(demo):
    """80 t with 0.35 W/m2K over its faces for 14.5 h, one body: the same within a third."""
    found = overnight(demo)
    silo = demo.folder.silo("silo 1")
    radius = float(silo.diameter) / 2
    fill = 80e3 / 1900 / (np.pi * radius**2)
    area = 2 * np.pi * radius * fill + np.pi * radius**2
    lost = float(silo.wall_u) * area * 152.0 * 14.5 * 3600 / (80e3 * 980.0)
    assert 160.0 - found.mean_c.usual == pytest.approx(lost, rel=0.35)


def test_hours_allowed_are_a_rule_counted_from_the_filling(demo):
    found = overnight(demo)
    assert found.rule_left_h == pytest.approx(18.0 - 14.5)
    assert found.counted_from_now
    earlier = overnight(demo, filled_at=EVENING - 6 * HOUR)
    assert earlier.rule_left_h == pytest.approx(18.0 - 20.5)
    assert not earlier.counted_from_now


def test_the_first_load_is_held_against_what_the_next_job_needs(demo):
    found = overnight(demo)
    assert found.needed_for.startswith("J")
    assert 120.0 < found.needed_c < 175.0
    assert overnight(demo, "silo 2").good_left_h > 0


def test_an_empty_silo_and_a_time_gone_by_are_refused(demo):
    with pytest.raises(FaultyInput, match="nothing to hold"):
        silo_ahead(demo, "silo 1", NOW, NOW + 4 * HOUR, stored_c=150.0, air_c=8.0)
    with pytest.raises(FaultyInput, match="after now"):
        overnight(demo, hours=-1)
    with pytest.raises(FaultyInput, match="silo 1"):
        overnight(demo, "silo 11")


def test_a_night_no_forecast_reaches_is_asked_for(demo):
    blind = replace(demo, forecast=None)
    with pytest.raises(MissingInput, match="air temperature"):
        silo_ahead(blind, "silo 1", EVENING, EVENING + 14 * HOUR, mass_kg=80e3, stored_c=160.0)
    told = silo_ahead(demo, "silo 1", EVENING, EVENING + 14 * HOUR, mass_kg=80e3, stored_c=160.0)
    assert 0.0 < told.air_c < 15.0


# --- a tank


def weekend(demo, tank="tank 2", **more):
    given = {"now_c": 160.0, "mass_kg": 40e3, "air_c": 7.0} | more
    return tank_ahead(demo, tank, NOW, MONDAY, **given)


def test_holding_a_tank_by_hand(demo):
    """0.5 W/m2K over the wall counted, 153 K, 68.3 h."""
    found = weekend(demo)
    hours = (MONDAY - NOW).total_seconds() / 3600
    own = demo.folder.tank("tank 2")
    whole = np.pi * 3.2 * 10 + np.pi * 3.2**2 / 2
    fill = 40e3 / 930.0 / float(own.capacity)
    kw = 0.5 * whole * (fill + 0.4 * (1 - fill)) * 153.0 / 1000
    assert found.hold_kw.usual == pytest.approx(kw, rel=0.03)
    assert found.hold_kwh.usual == pytest.approx(kw * hours, rel=0.03)


def test_setting_back_saves_and_reheats_in_time(demo):
    found = weekend(demo)
    assert 0 < found.saved_kwh.low < found.saved_kwh.usual < found.hold_kwh.usual
    assert found.setback_kwh.usual < found.hold_kwh.usual
    assert NOW < found.reheat_at < found.reheat_usual < MONDAY
    assert found.low_c <= found.lowest_c.low < 160.0
    # the heater brings 40 t up again: power less losses over mass and heat
    rise = (160.0 - found.lowest_c.usual) * 40e3 * 2090.0
    assert found.reheat_h.usual * 3600 * (90e3 - 6e3) == pytest.approx(rise, rel=0.1)
    assert any("Water may have gathered" in one.text for one in found.cautions)
    assert found.saved_money is None
    priced = weekend(demo, price_per_kwh=0.1)
    assert priced.saved_money.usual == pytest.approx(0.1 * priced.saved_kwh.usual)


def test_a_low_limit_holds_and_colder_air_costs_more(demo):
    warm, limited = weekend(demo), weekend(demo, low_c=150.0)
    assert limited.lowest_c.low >= 150.0 - 1e-6
    assert limited.saved_kwh.usual < warm.saved_kwh.usual
    assert weekend(demo, air_c=-5.0).hold_kwh.usual > warm.hold_kwh.usual


def test_what_a_tank_must_not_be_asked_is_refused(demo):
    with pytest.raises(FaultyInput, match="do not cover the heater"):
        weekend(demo, mass_kg=5e3)
    with pytest.raises(FaultyInput, match="may not fall under"):
        weekend(demo, low_c=165.0)
    with pytest.raises(FaultyInput, match="after now"):
        tank_ahead(demo, "tank 2", MONDAY, NOW)
    with pytest.raises(MissingInput, match="No forecast"):
        weekend(demo, air_c=None)
    with pytest.raises(AdvisorError, match="tank 2"):
        weekend(demo, "tank 22")


# --- the day


def turning(demo, wind_ms, air_c, at_hour=13):
    """The demo with a forecast that turns at ``at_hour`` UTC."""
    rows = []
    for hour in range(4, 24):
        then = hour >= at_hour
        rows.append({
            "time": datetime(2026, 10, 23, hour, tzinfo=UTC),
            "air_c": air_c if then else 14.0,
            "wind_ms": wind_ms if then else 2.0,
            "cloud_of_sky": 1.0 if then else 0.3,
            "dew_point_c": -8.0,
            "rain": then,
        })  # fmt: skip
    frame = pd.DataFrame(rows)
    frame["time"] = pd.to_datetime(frame["time"], utc=True).astype("datetime64[us, UTC]")
    frame["issued"] = pd.Timestamp("2026-10-23T04:00:00Z")
    frame["issue_told"] = True
    return replace(demo, forecast=frame)


def test_the_last_good_load_leaves_before_the_weather_turns(demo):
    found = day_ahead(turning(demo, 14.0, -3.0), NOW, "J04", hours=8)
    assert found.hours[0].target_c is not None
    assert found.last_good_at is not None
    road = gather_situation(demo, NOW, "J04").job.on_road_s
    laid = found.last_good_at + timedelta(seconds=road)
    assert (
        datetime(2026, 10, 23, 11, 30, tzinfo=UTC)
        < laid
        < datetime(2026, 10, 23, 13, 15, tzinfo=UTC)
    )
    assert "clash" in found.last_words
    later = [one for one in found.hours if one.load_out_at > found.last_good_at + HOUR]
    assert later and all(one.target_c is None and one.window_k < 0 for one in later)


def test_worse_weather_later_ends_the_day_later(demo):
    early, late = (
        day_ahead(turning(demo, 14.0, -3.0, hour), NOW, "J04", hours=8).last_good_at
        for hour in (12, 15)
    )
    assert late - early == timedelta(hours=3)


def test_a_mild_day_stays_open_and_says_so(demo):
    found = day_ahead(turning(demo, 3.0, 13.0), NOW, "J04", hours=8)
    assert found.last_good_at is None
    assert "stays open through" in found.last_words
    beyond = day_ahead(turning(demo, 3.0, 13.0), NOW, "J04", hours=20)
    assert "as far as the weather is known" in beyond.last_words
    assert beyond.hours[-1].why_none


def test_a_window_shut_now_opens_when_it_warms(demo):
    cold = turning(demo, 1.0, 25.0)
    rough = cold.forecast.assign(
        wind_ms=np.where(cold.forecast["time"].dt.hour < 13, 14.0, 1.0),
        air_c=np.where(cold.forecast["time"].dt.hour < 13, -3.0, 25.0),
    )
    found = day_ahead(replace(cold, forecast=rough, weather=None, metar=None), NOW, "J04", hours=8)
    assert found.hours[0].target_c is None
    assert found.opens_at is not None and found.opens_at > NOW


def test_nothing_seen_later_reaches_the_coming_hours(demo):
    found = day_ahead(demo, NOW, "J02", hours=6)
    assert "forecast issued" in found.hours[-1].weather_from
    assert found.hours[0].weather_from == "weather file"
    for hours in (0, 40):
        with pytest.raises(FaultyInput, match="1 and 36"):
            day_ahead(demo, NOW, "J02", hours=hours)


def test_what_makes_a_load_uncertain_adds_up(demo):
    found = load_ahead(gather_situation(demo, NOW, "J04"), 168.0, NOW)
    sds = [one.sd_k for one in found.contributions]
    assert sds == sorted(sds, reverse=True)
    # 5 % to 95 % of a normal quantity are 3.29 standard deviations apart
    spread = (found.delivered_c.high - found.delivered_c.low) / 3.29
    assert np.sqrt(np.sum(np.square(sds))) == pytest.approx(spread, rel=0.15)
    names = {one.name for one in found.contributions}
    assert {"heat loss of the truck", "load-out gauge"} <= names
