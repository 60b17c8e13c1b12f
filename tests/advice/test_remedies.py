"""Ways out of a clash: as many degrees as advice for the changed job says, each with its cost."""

from __future__ import annotations

from dataclasses import replace
from datetime import UTC, datetime

import pandas as pd
import pytest

from advisor.advice.advise import CRITERION, DRAW_COUNT, advise
from advisor.advice.case import path_case
from advisor.advice.remedies import remedies
from advisor.advice.remedy_changes import changes, later_starts
from advisor.advice.situation import gather_situation
from advisor.sampling import Draws
from advisor.settings.mixes import Truck

NOW = datetime(2026, 10, 23, 9, 10, tzinfo=UTC)


@pytest.fixture(scope="module")
def stuck(demo):
    """The job that is too far and too thin, and its clash."""
    situation = gather_situation(demo, NOW, "J08")
    return situation, advise(situation).clash


def with_job(situation, **update):
    return replace(situation, job=situation.job.model_copy(update=update))


def gain_of(clash, words):
    return next(one.gain_k for one in clash.remedies if words in one.action)


def test_each_gain_is_what_advice_for_the_changed_job_says(stuck):
    situation, clash = stuck
    job = situation.job
    insulated = Truck(body="insulated", cover="insulated", payload=job.truck.payload)
    tarped = job.truck.model_copy(update={"cover": "tarpaulin"})
    for words, update in (
        ("insulated body", {"truck": insulated}),
        ("with a tarpaulin", {"truck": tarped}),
        ("thicker", {"lift": type(job.lift)(float(job.lift) + 0.01)}),
        ("rollers done", {"rolling_wanted": type(job.lift)(float(job.rolling_wanted) - 180.0)}),
    ):
        changed = advise(with_job(situation, **update)).clash
        assert clash.gap_k - changed.gap_k == pytest.approx(gain_of(clash, words), abs=1e-6)


def test_together_they_gain_what_advice_for_both_says(stuck):
    situation, clash = stuck
    job = situation.job
    both = advise(
        with_job(
            situation,
            truck=Truck(body="insulated", cover="insulated", payload=job.truck.payload),
            lift=type(job.lift)(float(job.lift) + 0.01),
        )
    )
    assert both.clash is None  # the remedy said it is enough
    joined = next(one for one in clash.remedies if one.action.startswith("together"))
    assert joined.enough
    assert "insulated body and cover" in joined.action and "thicker" in joined.action
    assert joined.gain_k >= clash.gap_k


def test_every_way_out_has_degrees_and_a_cost_and_the_largest_is_first(stuck):
    _, clash = stuck
    singles = [one for one in clash.remedies if not one.action.startswith("together")]
    assert [one.gain_k for one in singles] == sorted((one.gain_k for one in singles), reverse=True)
    assert len(singles) >= 5
    for one in clash.remedies:
        assert one.gain_k > 0.5
        assert one.cost
        assert "not priced" in one.cost or "h later" in one.cost or "time" in one.cost
        assert one.enough == (one.gain_k >= clash.gap_k)


def test_all_that_a_site_can_do_is_looked_at(stuck, demo):
    situation, _ = stuck
    named = " ".join(one.action for one in changes(situation, path_case(situation)))
    for words in ("insulated", "tarpaulin", "less on the road", "transfer vehicle", "thicker",
                  "rollers", "warmer", "wind"):  # fmt: skip
        assert words in named
    assert "additive" not in named  # this mix has one
    plain = gather_situation(demo, NOW, "J02")
    assert "additive" in " ".join(one.action for one in changes(plain, path_case(plain)))


def test_a_transfer_vehicle_pays_where_trucks_queue(stuck):
    situation, _ = stuck
    queue = with_job(situation, wait=type(situation.job.wait)(45 * 60.0))
    assert gain_of(advise(queue).clash, "transfer vehicle") > 3.0


def test_a_hopeless_job_is_told_that_all_together_is_not_enough(stuck):
    situation, clash = stuck
    far = replace(clash, at_most_c=clash.at_most_c - 300.0)
    found = remedies(situation, far, path_case(situation), Draws(DRAW_COUNT), CRITERION)
    assert not any(one.enough for one in found)
    last = found[-1]
    assert last.action.startswith("together")
    assert last.gain_k == max(one.gain_k for one in found)
    # of two covers, or two waits for weather, only one is done
    assert ("tarpaulin" in last.action) != ("insulated body" in last.action)


def test_a_small_gap_is_closed_by_one_change_and_nothing_is_combined(stuck):
    situation, clash = stuck
    near = replace(clash, at_most_c=clash.at_least_c - 5.0)
    found = remedies(situation, near, path_case(situation), Draws(DRAW_COUNT), CRITERION)
    assert found[0].enough
    assert not any(one.action.startswith("together") for one in found)


def test_a_later_start_is_taken_from_the_forecast(stuck, demo):
    situation, clash = stuck
    rows = [
        {
            "time": datetime(2026, 10, 23, hour, tzinfo=UTC),
            "air_c": 4.0 if hour < 12 else 22.0,
            "wind_ms": 9.0 if hour < 12 else 1.0,
            "cloud_of_sky": 0.3,
            "dew_point_c": 0.0,
            "rain": False,
        }
        for hour in range(4, 22)
    ]
    frame = pd.DataFrame(rows)
    frame["time"] = pd.to_datetime(frame["time"], utc=True).astype("datetime64[us, UTC]")
    frame["issued"], frame["issue_told"] = pd.Timestamp("2026-10-23T04:00:00Z"), True
    warming = replace(situation, facts=replace(demo, forecast=frame))
    assert later_starts(replace(situation, facts=replace(demo, forecast=None))) == []
    near = replace(clash, at_most_c=clash.at_least_c - 12.0)
    found = remedies(warming, near, path_case(warming), Draws(DRAW_COUNT), CRITERION)
    start = next(one for one in found if one.action.startswith("start at"))
    assert start.enough
    assert start.action == "start at 13:10 instead"  # the first hour after it warms, plant time
    assert start.cost == "3 h later"


def test_a_limit_written_down_at_the_plant_is_not_moved_by_the_road(stuck):
    situation, clash = stuck
    elsewhere = replace(clash, lower=replace(clash.lower, point="discharge"))
    case = path_case(situation)
    assert remedies(situation, elsewhere, case, Draws(DRAW_COUNT), CRITERION) == ()
