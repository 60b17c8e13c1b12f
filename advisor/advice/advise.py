"""The advice for a situation: limits and draws of the path solved, written down with reasons."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace

import numpy as np

import advisor
from advisor.advice.burner import (
    aggregate_limit,
    aggregate_setpoint,
    burner_of,
    burner_words,
    most_rap,
    rap_words,
)
from advisor.advice.case import path_case
from advisor.advice.fuel import heat_of
from advisor.advice.limits import CollectedLimits, collect_limits
from advisor.advice.path import DRAWN, PathDraws, draw_path, rolling_times_s
from advisor.advice.reasons import cautions_of, expiry, reasons_of, weather_limits
from advisor.advice.remedies import remedies
from advisor.advice.result import Advice, Burner, Contribution, PathPoint, Reason, Rolling, Setpoint
from advisor.advice.situation import Situation
from advisor.advice.solve import Solution, solve
from advisor.advice.tank import tank_setpoint
from advisor.errors import AdvisorError
from advisor.heat.mat import Criterion
from advisor.sampling import Draws, contributions_sd, quantile
from advisor.settings.plant import Sensor
from advisor.settings.tables import load_table

DRAW_COUNT = 256
CRITERION: Criterion = "mean"
# A tolerance states bounds with no word on the shape between them: taken as even, so the standard
# deviation is the bound over the root of three (JCGM 100:2008, 4.3.7).
_EVEN = 3.0**0.5


def advise(situation: Situation, draw_count: int = DRAW_COUNT) -> Advice:
    """The advice for one situation, with reasons, ranking of doubts and expected fuel."""
    return advise_all([situation], draw_count)[0]


def advise_all(
    situations: Sequence[Situation], draw_count: int = DRAW_COUNT, brief: bool = False
) -> list[Advice]:
    """The advice for every situation; the heat paths of all are worked out in one call.

    ``brief`` leaves out rolling times, doubts, remedies and fuel, for a timeline.
    """
    draws = Draws(draw_count)
    paths = draw_paths(situations, draws)
    return [
        advise_on(one, path, draws, brief) if path else _missing(one)
        for one, path in zip(situations, paths, strict=True)
    ]


def draw_paths(situations: Sequence[Situation], draws: Draws) -> list[PathDraws | None]:
    """The heat path of every situation, in one call; None where something is missing."""
    known = [one for one in situations if not one.missing]
    paths = iter(draw_path([path_case(one) for one in known], draws, CRITERION) if known else [])
    return [None if one.missing else next(paths) for one in situations]


def scatter_k(situation: Situation, draws: Draws) -> np.ndarray:
    """How far the mix lies from where it is set [K], a column of draws: control and gauge."""
    plant = situation.facts.folder.plant
    gauge = plant.sensors.get("discharge_c") or plant.sensors.get("hot_aggregate_c")
    control = draws.normal("control", 0.0, plant.control_scatter)
    bias = draws.normal("gauge", 0.0, sensor_sd_k(gauge, 160.0) if gauge else 0.0)
    return np.asarray(control + bias)


def sensor_sd_k(sensor: Sensor, at_c: float) -> float:
    """Standard deviation [K] of a sensor at ``at_c``, from its own tolerance or its class."""
    if sensor.tolerance is not None:
        return float(sensor.tolerance) / _EVEN
    row = load_table("sensors").row(str(sensor.kind))
    grows = row["per_c"] * abs(at_c)
    tolerance = row["base"] + grows if row["rule"] == "sum" else max(row["base"], grows)
    return float(tolerance) / _EVEN


def advise_on(situation: Situation, path: PathDraws, draws: Draws, brief: bool = False) -> Advice:
    """The advice for a situation that lacks nothing, on its heat path as drawn."""
    folder = situation.facts.folder
    binder = situation.binder
    assert binder is not None  # noqa: S101 - asked for only where nothing is missing
    limits = collect_limits(
        folder, situation.mix, situation.job, binder, path, situation.facts.units
    )
    hottest = aggregate_limit(situation)
    if hottest:
        limits = replace(limits, path=(*limits.path, (hottest, hottest.value_c)))
    scatter = scatter_k(situation, draws)
    found = solve(limits.path, limits.coating, path.legs, scatter, float(folder.plant.confidence))
    base = _frame(situation, limits, found)
    if found.clash:
        clash = found.clash
        ways = () if brief else remedies(situation, clash, path.case, draws, CRITERION)
        return replace(base, clash=replace(clash, remedies=ways), setpoints=())
    tank, tank_cautions = tank_setpoint(situation, binder, limits.elsewhere)
    aggregate = aggregate_setpoint(situation, found.at("discharge"))
    before = tuple(one for one in (tank, aggregate) if one)
    setpoints = (*before, *found.setpoints)
    advice = replace(
        base,
        setpoints=setpoints,
        reasons=(*reasons_of(situation, found), *tank_cautions),
        cautions=cautions_of(situation, setpoints),
        passed_over=base.passed_over
        + tuple(
            f"{one.name} ({one.as_written or round(one.value_c)}): the contract has its own figure"
            for one in limits.silenced
        )
        + tuple(f"upper edge of {one.name}" for one in found.set_aside),
    )
    return advice if brief else _in_full(advice, situation, path, found, draws)


def _in_full(
    advice: Advice, situation: Situation, path: PathDraws, found: Solution, draws: Draws
) -> Advice:
    """The advice with path, rolling, doubts, fuel, and when a change is felt."""
    discharge = advice.setpoint("discharge")
    delivery = advice.setpoint("delivery")
    assert discharge and delivery  # noqa: S101 - a solution always has both
    arriving = path.legs["delivery"].at_point(discharge.target_c)
    rolling = rolling_times_s(path, arriving, CRITERION, DRAW_COUNT) / 60.0
    needed = found.lows[0].draws_c
    inputs = {DRAWN[name]: values for name, values in path.inputs.items()}
    shares = contributions_sd(needed, inputs)
    if not shares and found.lows[0].limit.sd_k:
        shares = {"viscosity of the binder": found.lows[0].limit.sd_k}
    burner, rap = _burner(situation, discharge.target_c)
    told = (burner_words(situation, burner) if burner else ()) + rap_words(
        situation, discharge.target_c, rap
    )
    hold_min, road_min = situation.hold_s[1] / 60.0, situation.job.on_road_s / 60.0
    return replace(
        advice,
        path=path_points(advice.setpoints, path, situation),
        rolling=Rolling(
            low_min=float(quantile(rolling, 0.05)),
            middle_min=float(quantile(rolling, 0.5)),
            high_min=float(quantile(rolling, 0.95)),
            wanted_min=situation.job.rolling_wanted / 60.0,
            end_c=path.case.rolling_end_c,
            criterion="mean of the thickness",
        ),
        contributions=tuple(Contribution(name, sd) for name, sd in shares.items() if sd >= 0.1),
        heat=heat_of(situation, discharge.target_c),
        burner=burner,
        most_rap_of_mix=rap,
        reasons=(*advice.reasons, *(Reason("burner", sentence) for sentence in told)),
        felt_truck_min=hold_min,
        felt_paver_min=hold_min + road_min,
        arrival_c=float(np.median(arriving)),
        arrival_sd_k=float(np.std(arriving)),
        wait_left_min=_wait_left_min(path, discharge.target_c, delivery.low_c),
    )


def _burner(situation: Situation, discharge_c: float) -> tuple[Burner | None, float | None]:
    """What burner and RAP have to do; nothing where the balance has no answer."""
    try:
        return burner_of(situation, discharge_c), most_rap(situation, discharge_c)
    except AdvisorError:
        return None, None


def _frame(situation: Situation, limits: CollectedLimits, found: Solution) -> Advice:
    """What every advice has, clash or not."""
    until, because = expiry(situation)
    every = [limit for limit, _ in limits.path]
    if limits.coating:
        every += [limits.coating.low, limits.coating.high]
    broken = weather_limits(situation, limits)
    return replace(
        _bare(situation),
        valid_until=until,
        valid_because=because,
        limits=(*every, *limits.elsewhere),
        cautions=cautions_of(situation, ()),
        reasons=tuple(
            Reason("weather-limit", f"{limit.name}: {limit.as_written or limit.value_c}, "
                   f"{limit.source}; now it is not kept.")
            for limit in broken
        ),
    )  # fmt: skip


def _missing(situation: Situation) -> Advice:
    return replace(_bare(situation), missing=situation.missing, cautions=cautions_of(situation, ()))


def _bare(situation: Situation) -> Advice:
    binder = situation.binder
    return Advice(
        plant=situation.facts.folder.plant.name,
        mix=situation.mix.code,
        mix_name=situation.mix.name,
        tank=situation.tank.name,
        job=situation.job.code,
        job_name=situation.job.name,
        at=situation.at,
        valid_until=situation.at,
        valid_because="something is missing",
        setpoints=(),
        limits=(),
        reasons=(),
        inputs=situation.inputs,
        cautions=(),
        passed_over=tuple(f"not read: {fault}" for fault in situation.facts.unread),
        confidence=float(situation.facts.folder.plant.confidence),
        provisional=bool(binder and binder.provisional),
        version=advisor.__version__,
    )


_STATIONS = (
    ("discharge", "drum"),
    ("silo", "silo"),
    ("load_out", "load-out"),
    ("delivery", "paver"),
)


def path_points(
    setpoints: Sequence[Setpoint], path: PathDraws, situation: Situation
) -> tuple[PathPoint, ...]:
    """Stations of the heat path with minutes after discharge; the last is the first roller pass."""
    by_point = {one.point: one for one in setpoints}
    hold, road = situation.hold_s[1] / 60.0, situation.job.on_road_s / 60.0
    minutes = {"discharge": 0.0, "silo": 2.0, "load_out": 2.0 + hold, "delivery": 2.0 + hold + road}
    points = [
        PathPoint(name, minutes[point], one.low_c, one.target_c, one.high_c)
        for point, name in _STATIONS
        if (one := by_point.get(point))  # type: ignore[call-overload]
    ]
    loss = float(np.median(path.paving_loss_k))
    first_pass = load_table("spreads").row("first roller pass")["usual"]
    last = points[-1]
    drop = max(loss, 0.0) + 0.5 * first_pass
    points.append(
        PathPoint(
            "first pass", last.minutes + 6.0, last.low_c - drop, last.target_c - drop,
            last.high_c - drop,
        )
    )  # fmt: skip
    return tuple(points)


def _wait_left_min(path: PathDraws, target_c: float, need_c: float) -> float | None:
    """Minutes a usual load may wait at the paver before it is down to what is needed."""
    waits, kept = path.retained_per_wait
    upstream = path.legs["load_out"]
    loaded = float(np.median(upstream.at_point(target_c)))
    arriving = path.case.air_c + kept * (loaded - path.case.air_c)
    if arriving[0] <= need_c:
        return 0.0
    if arriving[-1] > need_c:
        return float(waits[-1] / 60.0)
    return float(np.interp(-need_c, -arriving, waits) / 60.0)
