"""Causes of loads outside their window, each from the one thing that was so."""

from __future__ import annotations

import pandas as pd
import pytest

from advisor.review.causes import CauseRules
from advisor.review.load_causes import load_cause

RULES = CauseRules(
    look_back_s=1800.0, rate_change=0.15, heat_change=0.08, window_change_k=2.0, scatter_k=2.5
)
T0 = pd.Timestamp("2026-10-19 06:00", tz="UTC")
SOUND = {
    "made_over_k": -3.0, "made_under_k": -3.0, "silo_over_k": -2.0, "silo_under_k": -2.0,
    "load_out_c": 155.0, "load_out_target_c": 155.0, "delivery_c": 148.0,
    "delivery_target_c": 148.0, "delivery_low_c": 140.0, "delivery_high_c": 150.0,
    "planned_road_s": 2700.0, "road_spread_s": 360.0,
}  # fmt: skip


def loads(rested_min=20, road_min=45, **so):
    """Four loads, sound in every way but the one named."""
    return pd.DataFrame(
        {
            "ticket": ["1", "2", "3", "4"],
            "time": [T0 + pd.Timedelta(minutes=6 * n) for n in range(4)],
            **{**SOUND, **so},
        }
    ).assign(
        made=lambda one: one["time"] - pd.Timedelta(minutes=rested_min),
        arrived=lambda one: one["time"] + pd.Timedelta(minutes=road_min),
    )


@pytest.mark.parametrize(
    ("so", "point", "side", "cause", "said"),
    [
        ({"made_over_k": 6.0}, "load_out", "hot", "made hot", "4 left the drum hotter"),
        ({"made_under_k": 6.0}, "delivery", "cold", "made cold", "by 6 °C in the mean"),
        ({"rested_min": 600}, "load_out", "cold", "long in the silo", "10.0 h"),
        ({"silo_over_k": 9.0}, "load_out", "hot", "hot mix in the silo", "up to 9 °C hotter"),
        ({"road_min": 80}, "delivery", "cold", "long haul", "80 min on the road where 45"),
        ({"road_min": 20}, "delivery", "hot", "short haul", "20 min on the road where 45"),
        ({"delivery_c": 136.0}, "delivery", "cold", "more lost on the road", "lost 19 °C"),
        ({"delivery_c": 153.0}, "delivery", "hot", "less lost on the road", "7 °C is reckoned"),
        ({"delivery_c": 158.0}, "delivery", "hot", "load-out thermometer", "3 °C more"),
        ({}, "load_out", "cold", "load-out thermometer", "none of the 4 read"),
        ({"delivery_c": 130.0}, "load_out", "cold", "silo or thermometer", "inside its window"),
        ({}, "delivery", "cold", "haul or thermometer", "as planned"),
    ],
)
def test_the_cause_is_the_one_thing_that_was_so(so, point, side, cause, said):
    found = load_cause(loads(**so), point, side, RULES)
    assert found.name == cause
    assert said in found.evidence and "(1, 2, 3, 4)" in found.evidence


def test_a_difference_is_never_shown_as_a_temperature():
    us = CauseRules(1800.0, 0.15, 0.08, 2.0, 2.5, "us")
    said = load_cause(loads(made_over_k=5.0), "load_out", "hot", us).evidence
    assert "by 9 °F in the mean" in said  # 5 K is 9 F of difference, not 41 F
