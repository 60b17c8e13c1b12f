"""The demo plant from export to advice and review."""

from __future__ import annotations

import tempfile
from datetime import timedelta
from functools import cache
from pathlib import Path
from shutil import copytree, ignore_patterns

from advisor.advice.advise import advise
from advisor.advice.facts import PlantFacts
from advisor.advice.open_plant import moment_now, open_plant
from advisor.advice.situation import gather_situation
from advisor.advice.timeline import build_timeline
from advisor.logs import PlantLog, read_logs
from advisor.review.plant import log_span, review_plant

DEMO = Path(__file__).parents[2] / "demo_plant"


@cache
def demo() -> PlantFacts:
    """The demo plant, opened from a copy."""
    folder = Path(tempfile.mkdtemp()) / "plant"
    copytree(DEMO, folder, ignore=ignore_patterns("records.sqlite*"))
    return open_plant(folder)


@cache
def log() -> PlantLog:
    """Its log, read once."""
    return read_logs(demo().folder)


def bench_advice() -> int:
    """one job's advice in full, 1 000 draws"""
    facts = demo()
    advise(gather_situation(facts, moment_now(facts.folder), "J02"), 1000)
    return 1


def bench_timeline() -> int:
    """the timeline of a week, a row for every change of an input"""
    return len(build_timeline(demo(), *log_span(demo())))


def bench_reading() -> int:
    """a week of one-minute exports read, checked and marked"""
    return len(read_logs(demo().folder).frame)


def bench_review() -> int:
    """a day against its timeline, the log read before"""
    _, last = log_span(demo())
    start = last - timedelta(days=3)
    review_plant(demo(), start, start + timedelta(days=1), log=log())
    return 1440
