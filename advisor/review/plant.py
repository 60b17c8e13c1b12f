"""The review of a plant folder over a period: log, timeline and kernel put together."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from datetime import datetime, timedelta

import pandas as pd

from advisor.advice.advise import sensor_sd_k
from advisor.advice.facts import PlantFacts
from advisor.advice.fuel import fuel_called, kelvin_too_much, money_per_j
from advisor.advice.situation import gather_situation
from advisor.advice.timeline import TimelineRow, build_timeline, timeline_frame
from advisor.errors import AdvisorError, MissingInput
from advisor.logs import IntakeReport, PlantLog, clock_offset, clock_rules, read_logs
from advisor.review.causes import CauseRules
from advisor.review.kernel import Findings, ReviewRules, review_rows, trace_rows
from advisor.review.loads import Road, judged_loads, load_excursions
from advisor.review.result import Excursion, Review, SetAside, Span
from advisor.review.sentence import review_sentence
from advisor.review.states import StateRules
from advisor.review.waste import HeatPrice
from advisor.settings.cautions import caution_text
from advisor.settings.tables import load_table
from advisor.units import UnitSystem

_MIX_C = 160.0  # where thermometers of mix are used; their tolerance hardly changes about it


@dataclass(frozen=True, eq=False)
class PlantReview:
    """A review with what it was made from: judged rows and loads, timeline, reports of the log."""

    review: Review
    rows: pd.DataFrame
    loads: pd.DataFrame
    timeline: tuple[TimelineRow, ...]
    reports: tuple[IntakeReport, ...]


def review_rules(scatter_k: float, units: UnitSystem = "si") -> ReviewRules:
    """The rules of config/review.yaml, for a plant whose control scatters by ``scatter_k`` [K].

    ``units`` are those of the evidence.
    """
    table = load_table("review")
    excursion, states, cause = table.row("excursion"), table.row("states"), table.row("cause")
    return ReviewRules(
        dead_band_k=excursion["dead_band"],
        on_delay_s=excursion["on_delay"],
        longest_gap_s=excursion["longest_gap"],
        smoothing_s=excursion["smoothing"],
        states=StateRules(
            running_rate_kgs=states["running_rate"],
            burner_on=states["burner_on"],
            short_stop_s=states["short_stop"],
            settle_s=states["settle"],
            steady_s=states["steady"],
            steady_k=states["steady_within"],
            empty_out_s=states["empty_out"],
        ),
        causes=CauseRules(
            look_back_s=cause["look_back"],
            rate_change=cause["rate_change"],
            heat_change=cause["heat_change"],
            window_change_k=cause["window_change"],
            scatter_k=scatter_k,
            units=units,
        ),
    )


def log_span(facts: PlantFacts) -> tuple[datetime, datetime]:
    """First moment of the plant's log and the one after its last row.

    Raises MissingInput where the plant has no log.
    """
    if facts.log is None or facts.log.empty:
        raise MissingInput.of(
            "no-log",
            "There is no export of the plant log.",
            "Put the exports where signals.yaml says.",
            file=str(facts.folder.path),
        )
    first, last = facts.log["time"].iloc[0], facts.log["time"].iloc[-1]
    return first.to_pydatetime(), last.to_pydatetime() + timedelta(minutes=1)


def review_plant(
    facts: PlantFacts,
    start: datetime,
    end: datetime,
    progress: Callable[[int, int], None] | None = None,
    log: PlantLog | None = None,
) -> PlantReview:
    """The plant's log from ``start`` to ``end`` against the advice that was in force.

    ``progress`` is called with timeline rows done and rows in all; ``log`` is the plant's log where
    it has been read before. Raises MissingInput where there is no log in the period.
    """
    log = log.between(start, end) if log else read_logs(facts.folder, start, end)
    if log.frame.empty:
        zone = facts.folder.zone
        raise MissingInput.of(
            "no-log-in-period",
            f"The log holds nothing from {start.astimezone(zone):%Y-%m-%d %H:%M} to "
            f"{end.astimezone(zone):%Y-%m-%d %H:%M}.",
            "Choose another period or bring in the exports.",
        )
    timeline = build_timeline(facts, start, end, progress)
    frame = timeline_frame(timeline)
    rules = review_rules(float(facts.folder.plant.control_scatter), facts.units)
    price = heat_price(facts, timeline)
    rows = trace_rows(log.frame, frame, rules)
    findings = review_rows(rows, rules, price, facts.folder.plant.time_zone)
    roads = {
        job.code: Road(float(job.on_road_s), float(job.haul.spread)) for job in facts.folder.jobs
    }
    loads = judged_loads(log.tickets, log.arrivals, rows, frame, roads)
    excursions = [
        *findings.excursions,
        *load_excursions(loads, "load_out", rules, _sensor_sd_k(facts, "load_out_c")),
        *load_excursions(loads, "delivery", rules, _sensor_sd_k(facts, "delivery_c")),
    ]
    excursions.sort(key=lambda one: one.start)
    review = _assembled(facts, start, end, log, findings, tuple(excursions))
    return PlantReview(review, rows, loads, tuple(timeline), log.reports)


def _sensor_sd_k(facts: PlantFacts, signal: str) -> float:
    """Standard deviation [K] of a thermometer of mix, 0 where the plant does not tell it."""
    sensor = facts.folder.plant.sensors.get(signal)
    return sensor_sd_k(sensor, _MIX_C) if sensor else 0.0


def heat_price(facts: PlantFacts, timeline: list[TimelineRow]) -> HeatPrice:
    """What a kelvin too much costs, at the first operating point of the period that has advice."""
    money = money_per_j(facts.folder.plant.dryer) or 0.0
    for row in timeline:
        target = row.advice.setpoint("discharge")
        if target is None:
            continue
        try:
            situation = gather_situation(facts, row.start, row.advice.job)
            cost = kelvin_too_much(situation, target.target_c)
        except AdvisorError:
            continue
        gross = cost.gross_j_kg_k
        co2 = float(cost.co2_kg_kg.central / cost.gross_j_kg.central)
        return HeatPrice(
            Span(float(gross.low), float(gross.central), float(gross.high)), money, co2
        )
    fuel = fuel_called(facts.folder.plant.dryer.fuel.name)
    return HeatPrice(Span(0.0, 0.0, 0.0), money, fuel.co2_factor_kg_j)


def _assembled(
    facts: PlantFacts,
    start: datetime,
    end: datetime,
    log: PlantLog,
    findings: Findings,
    excursions: tuple[Excursion, ...],
) -> Review:
    plant = facts.folder.plant
    not_used = [
        (f"{report.source}: {row.reason}", row.near)
        for report in log.reports
        if report.kind == "plant_log"
        for row in report.set_aside_between(start, end)
    ]
    dropped = tuple(
        SetAside(reason, "row", len(when), *_first_and_last(when))
        for reason in dict.fromkeys(reason for reason, _ in not_used)
        if (when := [near for told, near in not_used if told == reason])
    )
    return Review(
        plant=plant.name,
        start=start,
        end=end,
        time_zone=plant.time_zone,
        rows_read=len(log.frame) + len(not_used),
        rows_used=len(log.frame),
        rows_set_aside=len(not_used),
        set_aside=(*dropped, *findings.set_aside),
        states=findings.states,
        cells=findings.cells,
        mixes=findings.mixes,
        excursions=excursions,
        tonnes=findings.tonnes,
        in_window_tonnes=findings.in_window_tonnes,
        hot_tonnes=findings.hot_tonnes,
        cold_tonnes=findings.cold_tonnes,
        no_advice_tonnes=findings.no_advice_tonnes,
        waste=findings.waste,
        start_up_waste=findings.start_up_waste,
        currency=plant.currency,
        sentence=review_sentence(findings, plant.currency, facts.units),
        cautions=(caution_text("C14"), *_clock_words(log)),
        no_advice=findings.no_advice,
    )


def _clock_words(log: PlantLog) -> tuple[str, ...]:
    """One sentence where the tickets' clock is plainly not that of the plant log."""
    found = clock_offset(log.frame, log.tickets)
    if found is None or abs(found.offset_s) < clock_rules().least_s:
        return ()
    words = (
        f"The clock of the tickets runs {abs(found.offset_s) / 60.0:.0f} min "
        f"{'ahead of' if found.offset_s > 0 else 'behind'} that of the plant log, give or take "
        f"{found.doubt_s / 60.0:.0f} min: so set, {found.fits} of {found.loads} loads fit what "
        "left the silos. Loads are judged here by the time on their ticket. Set the clock right."
    )
    return (words,)


def _first_and_last(when: list[datetime | None]) -> tuple[datetime | None, datetime | None]:
    known = sorted(one for one in when if one is not None)
    return (known[0], known[-1]) if known else (None, None)
