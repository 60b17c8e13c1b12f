"""The review of the invented week against what its simulator knows."""

from __future__ import annotations

from dataclasses import replace
from datetime import UTC, timedelta

import numpy as np
import pytest

import demo_schedule as schedule
from advisor.errors import MissingInput
from advisor.logs import read_logs
from advisor.review.plant import log_span, review_plant
from demo_schedule import moment
from make_demo_plant import air_c, burner_w
from truth.known import faults, minutes, truth


@pytest.fixture(scope="module")
def week(demo):
    return review_plant(demo, *log_span(demo))


def at_drum(week, side, start, end):
    """Excursions at the drum on ``side`` that reach into the plant times given."""
    begin, until = moment(start), moment(end)
    return [
        one
        for one in week.review.excursions
        if one.point == "discharge" and one.side == side and one.start < until and one.end > begin
    ]


def test_the_hot_hour_is_found_with_its_begin_length_and_cause(week):
    start, end, hotter = schedule.HOT_HOUR
    (found,) = [one for one in at_drum(week, "hot", start, end) if one.minutes > 20]
    assert abs(found.start - moment(start)) <= timedelta(minutes=8)
    assert moment(end) - timedelta(minutes=5) <= found.end <= moment(end) + timedelta(minutes=25)
    assert found.cause == "moisture fell"
    assert found.peak_k > hotter - 3.0
    assert found.mix == "AC20R" and found.waste.fuel_kwh.low > 0


def test_the_cold_night_start_is_found_as_a_start_up(week):
    found = at_drum(week, "cold", "2026-10-24 20:00", "2026-10-24 20:30")
    assert [one.cause for one in found] == ["start-up"]
    assert found[0].start == moment("2026-10-24 20:00")
    assert found[0].minutes > 40 and found[0].peak_k > 30.0


def test_the_habit_before_nine_is_found_where_it_is_and_blamed_on_the_setpoint(week):
    for day in ("2026-10-21", "2026-10-23"):
        found = at_drum(week, "hot", f"{day} 06:00", f"{day} 08:45")
        assert sum(one.minutes for one in found) > 150
        assert {one.cause for one in found} == {"setpoint"}
    assert schedule.SAFE_MIX in week.review.sentence and "before nine" in week.review.sentence


def test_tonnes_of_every_state_and_mix_add_up_to_what_was_made(week):
    review = week.review
    parts = review.in_window_tonnes + review.hot_tonnes + review.cold_tonnes
    assert parts + review.no_advice_tonnes == pytest.approx(review.tonnes, rel=1e-9)
    assert sum(one.tonnes for one in review.mixes) == pytest.approx(review.tonnes, rel=1e-9)
    for mix in review.mixes:
        whole = mix.inside_tonnes + mix.hot_tonnes + mix.cold_tonnes + mix.no_advice_tonnes
        assert whole == pytest.approx(mix.tonnes, rel=1e-9)
    # 1.2 % of noise on the rate, minute by minute, averages out over the week
    planned = 0.0
    for run in schedule.RUNS:
        lasting = (moment(run.end) - moment(run.start)).total_seconds() / 3600.0
        halted = sum(
            (moment(end) - moment(start)).total_seconds() / 3600.0
            for start, end, _ in schedule.HALTS
            if moment(run.start) <= moment(start) < moment(run.end)
        )
        planned += run.rate_th * (lasting - halted)
    assert review.tonnes == pytest.approx(planned, rel=0.005)


def test_excess_heat_agrees_with_the_true_temperatures(week):
    """Tonne-kelvin above the windows from the readings, against the simulator's own."""
    rows = week.rows
    known = minutes()
    place = np.searchsorted(known["time_s"], rows["time_s"].to_numpy())
    place = np.clip(place, 0, len(known["time_s"]) - 1)
    same = known["time_s"][place] == rows["time_s"].to_numpy()
    # The same few minutes of mean as the review takes: noise above a limit is no excess.
    true = np.convolve(known["discharge_c"], np.ones(3) / 3.0, mode="same")[place]
    over = np.maximum(true - rows["discharge_high_c"].to_numpy(float), 0.0)
    steady = rows["state"].isin(["production"]).to_numpy() & same
    wanted = float(np.nansum(np.where(steady, over * rows["mass_kg"], 0.0)) / 1000.0)
    assert week.review.waste.excess_tk == pytest.approx(wanted, rel=0.06)


def test_fuel_too_much_agrees_with_the_burner_of_the_simulator(week):
    """What its burner would have saved with the same tonnes at the edge of their window."""
    known = minutes()
    rows = week.rows[week.rows["state"] == "production"]
    rows = rows[(rows["over_k"] > 0).to_numpy()]
    place = np.searchsorted(known["time_s"], rows["time_s"].to_numpy())
    saved_j = 0.0
    for one, wet in zip(rows.itertuples(), known["moisture"][place], strict=True):
        air = air_c(one.time.to_pydatetime())
        hot, edge = (
            burner_w(3.6 * one.mass_kg / one.lasting_s, at, air, wet)
            for at in (one.smooth_c, one.discharge_high_c)
        )
        saved_j += (hot - edge) * one.lasting_s
    gross_kwh = 1.11 * saved_j / 3.6e6  # gross over net heat of methane: 55.5 over 50.0 MJ/kg
    fuel = week.review.waste.fuel_kwh
    assert fuel.low < gross_kwh < fuel.high
    assert fuel.middle == pytest.approx(gross_kwh, rel=0.15)


def test_readings_of_broken_sensors_are_counted_as_set_aside_and_heat_nobody(week):
    told = {(one.signal, one.reason): one.count for one in week.review.set_aside}
    for signal, reason in (("silo_2_c", "stuck"), ("silo_1_c", "unit mix-up")):
        ((_, start, end),) = [one for one in faults(reason) if one[0] == signal]
        rows = (end - start).total_seconds() / 60.0
        assert told[(signal, reason)] == pytest.approx(rows, rel=0.1)
    for _, start, end in faults("spike"):
        spikes = [
            one
            for one in week.review.excursions
            if one.minutes < 2 and start - timedelta(minutes=1) <= one.start <= end
        ]
        assert not spikes


def test_start_ups_are_kept_apart_from_the_waste_of_production(week):
    review = week.review
    assert review.start_up_waste.excess_tk >= 0.0
    rows = week.rows[week.rows["state"] == "production"]
    over = np.maximum((rows["smooth_c"] - rows["discharge_high_c"]).to_numpy(float), 0.0)
    wanted = np.nansum(over * rows["mass_kg"].to_numpy()) / 1000.0
    assert review.waste.excess_tk == pytest.approx(wanted, rel=1e-9)


def test_every_row_of_the_log_is_in_one_state_for_its_whole_time(week):
    minutes_of = sum(one.minutes for one in week.review.states)
    assert minutes_of == pytest.approx(week.review.rows_used, rel=0.001)


def test_a_part_of_the_week_counts_its_own_rows_and_agrees_with_the_whole(demo, week):
    start, end = moment("2026-10-22 05:00"), moment("2026-10-22 16:00")
    day = review_plant(demo, start, end)
    assert day.review.rows_used == (end - start) / timedelta(minutes=1)
    assert day.review.rows_set_aside == 0  # the line of totals stands after midnight's last row
    assert day.review.rows_read == day.review.rows_used
    assert not [one for one in day.review.set_aside if one.signal == "row"]
    inside = week.rows[(week.rows["time"] >= start) & (week.rows["time"] < end)]
    assert day.rows["mass_kg"].sum() == pytest.approx(inside["mass_kg"].sum(), rel=1e-6)
    same = [one for one in week.review.excursions if start <= one.start < end]
    assert [one.start for one in day.review.excursions] == [one.start for one in same]


def test_rows_set_aside_fall_into_one_day_each(demo, week):
    told = truth()["files"]
    of_log = [one for one in week.reports if one.kind == "plant_log"]
    for day in schedule.DAYS:
        start = moment(f"{day} 00:00")
        lasting = 25 if day == "2026-10-25" else 24  # the clocks went back on the Sunday
        rows = [
            row
            for report in of_log
            for row in report.set_aside_between(start, start + timedelta(hours=lasting))
        ]
        assert len(rows) == len(told[f"plant_{day}.csv"]["set_aside"])
    assert week.review.rows_set_aside == sum(len(one["set_aside"]) for one in told.values())
    assert week.review.rows_read == sum(one["rows_read"] for one in told.values())


def test_tonnes_without_advice_say_why(week):
    review = week.review
    assert sum(one.tonnes for one in review.no_advice) == pytest.approx(review.no_advice_tonnes)
    most = review.no_advice[0]
    assert most.mix == "SMA10" and "clashes with" in most.why


def test_the_load_out_thermometer_that_reads_low_is_suspected(week):
    since = moment(schedule.LOAD_OUT_OFFSET_K[0])
    named = [one for one in week.review.excursions if one.cause == "load-out thermometer"]
    assert named and all(one.start >= since for one in named)


def test_tickets_of_a_wrong_clock_are_told_and_not_moved(demo, week):
    assert not [one for one in week.review.cautions if "clock" in one]
    log = read_logs(demo.folder)
    late = log.tickets.assign(time=log.tickets["time"] + timedelta(minutes=11))
    start = moment("2026-10-19 05:00")
    found = review_plant(demo, start, start + timedelta(hours=6), log=replace(log, tickets=late))
    (told,) = [one for one in found.review.cautions if "clock" in one]
    assert "11 min ahead of that of the plant log" in told
    assert found.loads["time"].iloc[0] == late["time"].iloc[0]


def test_a_log_read_before_gives_the_same_review(demo, week):
    span = log_span(demo)
    again = review_plant(demo, *span, log=read_logs(demo.folder))
    assert again.review == week.review


def test_loads_are_judged_by_the_window_of_their_making(week):
    loads = week.loads
    assert len(loads) == len(truth()["loads"])
    assert (loads["made"] <= loads["time"]).all()
    kept = loads[loads["ticket"].isin(["40443", "40444"])]  # the stock of the night before
    assert ((kept["time"] - kept["made"]).dt.total_seconds() > 10 * 3600).all()
    named = [one for one in week.review.excursions if "40443" in one.evidence]
    assert {one.cause for one in named} == {"long in the silo"}


def test_a_period_without_log_says_so(demo):
    early = moment("2026-09-01 00:00").astimezone(UTC)
    with pytest.raises(MissingInput, match="The log holds nothing from 2026-09-01"):
        review_plant(demo, early, early + timedelta(days=1))
