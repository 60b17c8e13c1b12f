"""Figures: a result in, a figure out; what it shows is what the result says."""

from __future__ import annotations

import re
from dataclasses import replace
from datetime import timedelta
from itertools import combinations

import numpy as np
import plotly.graph_objects as go
import pytest

from advisor.figures.bars import cause_bars, mix_bars
from advisor.figures.drawn import Reading, Trace, verdict_of
from advisor.figures.heat_path import heat_path, heat_path_words
from advisor.figures.ink import DARK, LIGHT, contrast
from advisor.figures.thinning import thinned
from advisor.figures.trend import outside_masks, trend, trend_words
from advisor.figures.week_field import days_of, field_words, week_field
from advisor.review.ranking import cause_shares
from advisor.screens.review_parts import summary
from screens.made_up import EXCURSIONS, NOW, WEEK, ZONE, MadeUpPlant, advice, clashing, review

PLANT = MadeUpPlant()
TREND = (
    PLANT.discharge(NOW - timedelta(hours=4), NOW),
    PLANT.windows_in_force(NOW - timedelta(hours=4), NOW),
)


def figures(units, ink):
    start = NOW - timedelta(hours=4)
    return {
        "path": heat_path(advice(), PLANT.readings(NOW), units, ink),
        "no path": heat_path(clashing(), (), units, ink),
        "trend": trend(*TREND, start, NOW, ZONE, units, ink, PLANT.tickets(start, NOW)),
        "field": week_field(review(), units, ink, ()),
        "causes": cause_bars(EXCURSIONS, units, ink),
        "no causes": cause_bars((), units, ink),
        "mixes": mix_bars(review(), units, ink),
    }


@pytest.mark.parametrize("units", ["si", "us"])
@pytest.mark.parametrize("ink", [LIGHT, DARK], ids=["light", "dark"])
def test_every_figure_is_drawn_in_either_units_and_light(units, ink):
    for name, figure in figures(units, ink).items():
        assert isinstance(figure, go.Figure), name
        assert figure.to_json()
        if not name.startswith("no"):
            assert figure.data, name


def trace_named(figure, name):
    return next(one for one in figure.data if one.name == name)


def test_the_heat_path_carries_the_window_and_the_target_of_the_advice():
    made = advice()
    figure = heat_path(made, (), "si", LIGHT)
    target = trace_named(figure, "target")
    np.testing.assert_allclose(target.y, [one.target_c for one in made.path])
    np.testing.assert_allclose(target.x, [one.minutes for one in made.path])
    in_f = trace_named(heat_path(made, (), "us", LIGHT), "target")
    np.testing.assert_allclose(in_f.y, np.array(target.y) * 1.8 + 32.0)


@pytest.mark.parametrize("units", ["si", "us"])
@pytest.mark.parametrize("name", ["path", "trend"])
def test_what_is_drawn_lies_within_the_axis_in_either_units(units, name):
    figure = figures(units, LIGHT)[name]
    low, high = figure.layout.yaxis.range
    drawn = [value for one in figure.data for value in one.y if value is not None]
    assert low <= min(drawn) and max(drawn) <= high
    # and the axis is not far wider than what it shows
    assert high - low < 2.0 * (max(drawn) - min(drawn))
    assert figure.layout.yaxis.tickvals[-1] <= high


def test_words_for_those_who_do_not_see_say_what_the_figures_show():
    words = heat_path_words(advice(), PLANT.readings(NOW), "si")
    assert "156" in words and "hot" in words
    assert "no" in heat_path_words(clashing(), (), "si").lower()
    assert trend_words(*TREND, "si")
    assert "hot" in field_words(review(), "si")


@pytest.mark.parametrize(
    ("value", "doubt", "verdict"),
    [(150, "", "cold"), (151, "", "inside"), (165, "", "inside"), (165.1, "", "hot"),
     (160, "stuck", "unknown"), (None, "", "unknown"), (float("nan"), "", "unknown")],
)  # fmt: skip
def test_a_reading_is_inside_hot_cold_or_cannot_be_told(value, doubt, verdict):
    assert verdict_of(value, 151.0, 165.0, doubt) == verdict


def test_parts_of_a_trace_outside_the_window_are_marked_and_only_they():
    trace, windows = TREND
    cold, hot = outside_masks(trace, windows)
    high = np.full(len(trace.values_c), np.nan)
    low = high.copy()
    for one in windows:
        inside = (trace.times >= np.datetime64(one.start.replace(tzinfo=None))) & (
            trace.times < np.datetime64(one.end.replace(tzinfo=None))
        )
        high[inside], low[inside] = one.high_c, one.low_c
    np.testing.assert_array_equal(hot, trace.values_c > high)
    np.testing.assert_array_equal(cold, trace.values_c < low)
    assert hot.any()


def test_masses_of_the_review_are_short_tons_and_pounds_for_us_readers():
    worst = re.search(r"; (\d+) t made", field_words(review(), "si"))
    worst_us = re.search(r"; (\d+) ton made", field_words(review(), "us"))
    assert worst and worst_us
    assert float(worst_us[1]) == pytest.approx(float(worst[1]) / 0.90718, abs=1.2)
    co2 = str(summary(review(), "us"))
    assert " lb" in co2 and " kg" not in co2


def test_a_long_trace_is_thinned_without_losing_its_extremes():
    count = 50_000
    times = np.datetime64("2026-10-19") + np.arange(count).astype("timedelta64[s]")
    values = np.sin(np.arange(count) / 900.0)
    values[12_345], values[33_333] = 9.0, -9.0
    small = thinned(Trace(times, values), 2000)
    assert len(small.times) <= 2100
    assert np.nanmax(small.values_c) == 9.0 and np.nanmin(small.values_c) == -9.0
    assert (np.diff(small.times) > np.timedelta64(0)).all()


def test_causes_count_the_tonnes_of_the_drum_once_the_dearest_first():
    again = replace(EXCURSIONS[1], point="load_out", cause="made hot")
    shares = cause_shares((*EXCURSIONS, again))
    assert "made hot" not in [one.cause for one in shares]
    fuel = [one.waste.fuel_kwh.middle for one in shares]
    assert fuel == sorted(fuel, reverse=True)
    assert sum(one.count for one in shares) == len(EXCURSIONS)


def test_the_field_has_a_place_for_every_hour_and_a_mark_for_what_is_outside():
    week = review()
    figure = week_field(week, "si", LIGHT, ())
    assert len(days_of(week)) == 7
    cells = trace_named(figure, "cells")
    assert np.shape(cells.z) == (7, 24)
    outside = [one for one in week.cells if one.distance_k]
    marks = [text for one in figure.data if one.name != "cells" and one.text for text in one.text]
    assert sum("▲" in text for text in marks) == sum(one.distance_k > 0 for one in outside)
    assert sum("▼" in text for text in marks) == sum(one.distance_k < 0 for one in outside)
    assert week.start == WEEK


@pytest.mark.parametrize("ink", [LIGHT, DARK], ids=["light", "dark"])
def test_text_and_marks_stand_out_from_their_ground(ink):
    # WCAG 2.2: 4.5 to 1 for text (1.4.3), 3 to 1 for marks (1.4.11)
    for colour in (ink.text, ink.quiet, ink.hot, ink.cold):
        for ground in (ink.sheet, ink.ground):
            assert contrast(colour, ground) >= 4.5, colour
    for mark, ground in combinations((ink.target, ink.window), 2):
        assert contrast(mark, ground) >= 3.0
    # black on white is 21 to 1 by the formula of WCAG
    assert contrast("#000000", "#ffffff") == pytest.approx(21.0)


def test_numbers_of_near_points_do_not_lie_on_one_another():
    # silo and load-out so near that 'hot by' of the one would reach the mark of the other
    made = advice()
    minutes = {"drum": 0.0, "silo": 2.0, "load-out": 10.0}
    path = tuple(replace(one, minutes=minutes.get(one.name, one.minutes)) for one in made.path)
    hot = tuple(Reading(point, 171.0, 1.0, NOW, "") for point in ("discharge", "silo", "load_out"))
    figure = heat_path(replace(made, path=path), hot, "si", LIGHT)
    numbers = [one.text for one in figure.layout.annotations if "171" in one.text]
    assert len(numbers) == 3
    assert any("hot by" not in one for one in numbers)
    assert sum("hot by" in one for one in numbers) >= 1


def test_a_reading_in_doubt_is_drawn_as_such():
    doubtful = Reading("discharge", 150.0, 1.0, NOW, "stuck since 08:40")
    figure = heat_path(advice(), (doubtful,), "si", LIGHT)
    symbols = {str(one.marker.symbol) for one in figure.data if one.marker and one.marker.symbol}
    sound = heat_path(advice(), (replace(doubtful, value_c=156.0, doubt=""),), "si", LIGHT)
    usual = {str(one.marker.symbol) for one in sound.data if one.marker and one.marker.symbol}
    assert symbols != usual
