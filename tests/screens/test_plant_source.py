"""The plant in a folder as the pages ask it: what was known, from any thread, anew on change."""

from __future__ import annotations

import os
import time
from concurrent.futures import ThreadPoolExecutor
from datetime import timedelta

import pytest

from advisor.screens import plant_source
from advisor.screens.plant_source import PlantSource


@pytest.fixture(scope="module")
def source(demo_folder):
    return PlantSource(demo_folder)


def test_an_excursion_is_told_as_it_stood_and_none_that_was_still_to_come(source):
    whole = source.review(*source.data_span())
    long_ones = [one for one in whole.excursions if one.point == "discharge" and one.minutes > 10]
    one = max(long_ones, key=lambda found: found.minutes)
    half_way = (one.start + (one.end - one.start) / 2).replace(second=0, microsecond=0)
    told = source.excursions_open(half_way)
    assert [found.start for found in told] == [one.start]
    assert told[0].end <= half_way and told[0].tonnes < one.tonnes
    in_f = source.excursions_open(half_way, "us")[0].evidence
    assert in_f and "°C" not in in_f
    before = source.excursions_open(one.start - timedelta(minutes=1))
    assert all(found.start < one.start for found in before)


def test_no_reading_is_later_than_the_moment_asked_for(source):
    now = source.now()
    for reading in source.readings(now - timedelta(hours=2)):
        assert reading.taken_at <= now - timedelta(hours=2)
    assert source.last_reading_at(now) <= now


def test_many_threads_get_the_same_answer(source):
    jobs = [None, *(one.code for one in source.jobs())]
    with ThreadPoolExecutor(6) as pool:
        answers = list(pool.map(lambda job: source.current_advice(job, None), jobs * 3))
    for place, job in enumerate(jobs * 3):
        assert job is None or answers[place].job == job
        assert answers[place].setpoints == answers[place % len(jobs)].setpoints


def test_a_changed_folder_is_read_anew_and_a_faulty_one_leaves_the_last_sound(
    own_demo, monkeypatch
):
    monkeypatch.setattr(plant_source, "_LOOK_EVERY_S", 0.0)
    source = PlantSource(own_demo)
    name, file = source.plant_name, own_demo / "plant.yaml"
    sound = file.read_text()

    def written(text):
        file.write_text(text)
        os.utime(file, (time.time() + 5, time.time() + 5))

    assert name in sound
    written(sound.replace(name, "Another plant (invented)"))
    assert source.plant_name == "Another plant (invented)"
    written("name: [")
    assert source.plant_name == "Another plant (invented)"
