"""Burner, stack, hot aggregate and RAP on the advice, for the invented plant and variants of it."""

from __future__ import annotations

from dataclasses import replace
from datetime import UTC, datetime

import numpy as np
import pytest

from advisor.advice.advise import advise
from advisor.advice.burner import aggregate_limit, hot_aggregate_c, most_rap
from advisor.advice.fuel import operation_of
from advisor.advice.open_plant import open_plant
from advisor.advice.situation import gather_situation
from advisor.dryer import heat_balance, hot_aggregate_needed_c

AT = datetime(2026, 10, 23, 9, 10, tzinfo=UTC)


def edited(folder, *changes):
    path = folder / "plant.yaml"
    text = path.read_text("utf-8")
    for old, new in changes:
        assert old in text
        text = text.replace(old, new, 1)
    path.write_text(text, "utf-8")
    return open_plant(folder)


def sentences(advice):
    return " ".join(one.sentence for one in advice.reasons if one.code == "burner")


def test_the_burner_does_what_the_balance_needs(demo):
    situation = gather_situation(replace(demo, log=None), AT)
    advice = advise(situation)
    target = advice.setpoint("discharge").target_c
    balance = heat_balance(operation_of(situation, target))
    rating = float(demo.folder.plant.dryer.burner_rating)
    wanted = float(balance.net_j_kg) * situation.rate_kgs / rating
    assert advice.burner.load == pytest.approx(wanted, rel=1e-9)
    assert advice.burner.gross_w == pytest.approx(
        advice.heat.gross_kwh_t * 3600.0 * situation.rate_kgs, rel=1e-9
    )
    assert advice.burner.load_now is None and "reads" not in sentences(advice)


def test_model_and_gauge_agree_at_the_invented_plant_and_are_told_apart_where_not(demo):
    advice = advise(gather_situation(demo, AT))
    burner = advice.burner
    assert burner.load_now == pytest.approx(burner.load_expected_now, rel=0.10)
    assert "model and gauge agree" in sentences(advice)
    wrong = demo.log.assign(burner_load=demo.log["burner_load"] * 1.4)
    told = sentences(advise(gather_situation(replace(demo, log=wrong), AT)))
    assert "more: check moisture, leaking air and the gauge" in told


def test_the_stack_lies_between_dew_point_and_cloth_and_follows_the_mix(demo):
    burner = advise(gather_situation(demo, AT)).burner
    low, high = burner.stack_limits
    assert low.value_c == pytest.approx(burner.dew_point_c + 25.0)
    assert high.value_c == pytest.approx(float(demo.folder.plant.dryer.cloth_max))
    assert burner.stack_low_c <= burner.stack_c <= burner.stack_high_c
    assert "20 to 30 K above the water dew point" in low.source and "from memory" in low.source
    assert high.source and burner.acid_dew_point_c is None


def test_a_cold_stack_and_a_small_burner_are_told(own_demo):
    facts = edited(own_demo, ("burner_rating: 22 MW", "burner_rating: 9 MW"))
    cold = facts.log.assign(stack_c=80.0, stack_c_mark="")
    with facts.records:
        advice = advise(gather_situation(replace(facts, log=cold), AT))
    assert advice.burner.load > 1.0 and advice.burner.most_set_by == "burner"
    assert advice.burner.most_kgs < advice.burner.rate_kgs
    assert "does not suffice" in sentences(advice)
    assert "The stack reads 80 °C, below" in sentences(advice)


def test_oil_with_sulfur_brings_an_acid_dew_point(own_demo):
    facts = edited(own_demo, ("name: natural gas", "name: heavy oil"), ("per: kWh gross", "per: L"))
    with facts.records:
        advice = advise(gather_situation(facts, AT))
    assert advice.burner.acid_dew_point_c > advice.burner.dew_point_c
    assert "acid may condense" in sentences(advice)


def test_a_batch_plant_gets_a_setpoint_for_its_hot_aggregate(own_demo):
    facts = edited(own_demo, ("kind: counterflow", "kind: batch"))
    with facts.records:
        situation = gather_situation(facts, AT, "J01")
        advice = advise(situation)
    points = [one.point for one in advice.setpoints]
    assert points.index("hot_aggregate") < points.index("discharge")
    hot, mix = advice.setpoint("hot_aggregate"), advice.setpoint("discharge")
    for side in ("low_c", "target_c", "high_c"):
        feed = operation_of(situation, getattr(mix, side)).feed
        wanted = hot_aggregate_needed_c(getattr(mix, side), feed, 8.0)
        assert getattr(hot, side) == pytest.approx(float(wanted), abs=1e-6)
    assert hot.target_c > mix.target_c + 8.0


def test_a_drum_mixer_has_no_setpoint_for_aggregate_but_says_how_hot_it_gets(demo):
    advice = advise(gather_situation(demo, AT, "J01"))
    assert advice.setpoint("hot_aggregate") is None
    assert "where it meets the RAP" in sentences(advice)
    without = advise(gather_situation(demo, AT, "J02"))
    assert without.most_rap_of_mix is None and "RAP" not in sentences(without)


def test_the_hottest_aggregate_allowed_limits_the_discharge(own_demo):
    facts = edited(own_demo, ("aggregate_max: 330 C", "aggregate_max: 226 C"))
    with facts.records:
        situation = gather_situation(facts, AT, "J01")
        limit = aggregate_limit(situation)
        carried = hot_aggregate_c(situation, np.array([limit.value_c]))
        assert float(carried[0]) == pytest.approx(226.0, abs=0.05)
        advice = advise(situation)
        assert most_rap(situation, 154.0) == pytest.approx(situation.mix.rap.share, abs=0.01)
    assert advice.setpoint("discharge").high_set_by.name == "aggregate no hotter than 226 C"


def test_more_than_the_aggregate_can_carry_is_a_clash(own_demo):
    facts = edited(own_demo, ("aggregate_max: 330 C", "aggregate_max: 215 C"))
    with facts.records:
        advice = advise(gather_situation(facts, AT, "J01"))
    assert advice.clash and advice.clash.upper.name == "aggregate no hotter than 215 C"
