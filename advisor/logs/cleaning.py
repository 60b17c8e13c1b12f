"""Which readings of a log are not believed, and why. Readings are marked, never dropped."""

from __future__ import annotations

import re
from dataclasses import dataclass
from functools import cache
from typing import Any, Literal, cast

import numpy as np
import pandas as pd
from numpy.typing import NDArray

from advisor.glossary import Quantity
from advisor.logs.signals import plain_signal, signal_quantity
from advisor.logs.stretches import elapsed_s, stretches, stretches_of_equal
from advisor.settings.tables import load_table
from advisor.units import celsius_from_fahrenheit, fahrenheit_from_celsius

Floats = NDArray[np.float64]
Bools = NDArray[np.bool_]
Mark = Literal[
    "", "missing", "unit mix-up", "empty conveyor", "empty silo", "out of range", "stuck", "spike"
]
MARKS: tuple[Mark, ...] = (
    "",
    "missing",
    "unit mix-up",
    "empty conveyor",
    "empty silo",
    "out of range",
    "stuck",
    "spike",
)
_CODE = {mark: np.int8(code) for code, mark in enumerate(MARKS)}
_MAD_TO_SD = 1.4826  # standard deviations in one median deviation of a normal scatter

_AT_DISCHARGE = ("discharge_c", "hot_aggregate_c")
_FAST = (*_AT_DISCHARGE, "stack_c")
_OF_MIX = re.compile(r"discharge_c|silo_\d+_c")
_SILO = re.compile(r"silo_(\d+)_c")


@dataclass(frozen=True)
class CleaningRules:
    """Thresholds of the rules in SI; values come from config/cleaning.yaml."""

    running_rate_kgs: float
    settle_s: float
    empty_silo_kg: float
    longest_gap_s: float
    stuck_fast_s: float
    stuck_slow_s: float
    stuck_usual_times: float
    spike_window: int
    spike_deviations: float
    spike_least_k: float
    spike_longest: int
    unit_apart_k: float
    unit_agree_k: float
    unit_step_k: float
    unit_least: int


@cache
def cleaning_rules() -> CleaningRules:
    """The rules of config/cleaning.yaml."""
    table = load_table("cleaning")
    context, stuck = table.row("context"), table.row("stuck")
    spike, unit = table.row("spike"), table.row("unit mix-up")
    return CleaningRules(
        running_rate_kgs=context["running_rate"],
        settle_s=context["settle"],
        empty_silo_kg=context["empty_silo"],
        longest_gap_s=context["longest_gap"],
        stuck_fast_s=stuck["fast"],
        stuck_slow_s=stuck["slow"],
        stuck_usual_times=stuck["usual_times"],
        spike_window=int(spike["window"]),
        spike_deviations=spike["deviations"],
        spike_least_k=spike["least"],
        spike_longest=int(spike["longest"]),
        unit_apart_k=unit["apart"],
        unit_agree_k=unit["agree"],
        unit_step_k=unit["step"],
        unit_least=int(unit["least"]),
    )


@dataclass(frozen=True)
class _Context:
    """Where a reading says something about mix: ``live`` rows, and those ``settled`` since.

    ``idle`` is the mark of a reading that is not live; empty where it is believed all the same.
    """

    live: Bools
    settled: Bools
    idle: Mark


def mark_faults(frame: pd.DataFrame, rules: CleaningRules | None = None) -> pd.DataFrame:
    """``frame`` with a column ``<signal>_mark`` for every number in it: why a reading is not
    believed, or empty where it is.

    ``frame`` is sorted by time. Range and missing values are judged in any frame; the rules that
    need a course of time only where ``rate_kgs`` is among the columns (a plant log).
    """
    rules = rules or cleaning_rules()
    marked = frame.copy()
    is_log = "rate_kgs" in frame.columns
    time_s = frame["time"].astype("datetime64[us, UTC]").astype("int64").to_numpy() / 1e6
    for signal in [name for name in frame.columns if signal_quantity(str(name))]:
        quantity = signal_quantity(signal)
        assert quantity is not None  # noqa: S101 - filtered above
        values = frame[signal].to_numpy(dtype=float)
        codes = np.zeros(len(frame), np.int8)
        _put(codes, np.isnan(values), "missing")
        if is_log and quantity.kind == "temperature":
            context = _context(frame, signal, time_s, rules)
            others = _other_mix_sensors(frame, signal)
            _put(codes, _unit_mix_up(values, context.live, others, quantity, rules), "unit mix-up")
            _mark_temperature(codes, values, time_s, signal, quantity, context, rules)
        else:
            _put(codes, (values < quantity.low) | (values > quantity.high), "out of range")
        marked[f"{signal}_mark"] = pd.Categorical.from_codes(codes, categories=list(MARKS))
    return marked


def believed(frame: pd.DataFrame, signal: str) -> pd.Series:
    """``signal`` of a marked frame with the readings that are not believed left out (NaN)."""
    return frame[signal].where(frame[f"{signal}_mark"] == "")


def _put(codes: NDArray[np.int8], where: Bools, mark: Mark) -> None:
    """Give ``mark`` to rows that have none yet: the first reason found is the one told."""
    codes[where & (codes == 0)] = _CODE[mark]


def _mark_temperature(
    codes: NDArray[np.int8],
    values: Floats,
    time_s: Floats,
    signal: str,
    quantity: Quantity,
    context: _Context,
    rules: CleaningRules,
) -> None:
    too_low, too_high = values < quantity.low, values > quantity.high
    if context.idle:
        _put(codes, ~context.live & ~too_high, context.idle)
        _put(codes, too_low & ~context.settled, context.idle)
    _put(codes, too_high, "out of range")
    _put(codes, too_low & context.settled, "out of range")
    floor_s = rules.stuck_fast_s if signal in _FAST else rules.stuck_slow_s
    judged = context.live & (codes == 0)
    _put(codes, _stuck(values, time_s, judged, floor_s, rules), "stuck")
    judged = context.settled & (codes == 0)
    _put(codes, _spikes(values, time_s, judged, rules), "spike")


def _context(frame: pd.DataFrame, signal: str, time_s: Floats, rules: CleaningRules) -> _Context:
    everywhere = np.ones(len(frame), bool)
    running = np.nan_to_num(frame["rate_kgs"].to_numpy(dtype=float)) >= rules.running_rate_kgs
    if signal in _AT_DISCHARGE:
        return _Context(running, _after(running, time_s, rules.settle_s), "empty conveyor")
    if signal in _FAST:
        return _Context(running, _after(running, time_s, rules.settle_s), "")
    silo = _SILO.fullmatch(signal)
    content = f"silo_{silo[1]}_kg" if silo else ""
    if content in frame.columns:
        held = frame[content].ffill().to_numpy(dtype=float)
        full = ~(held < rules.empty_silo_kg)  # a content never read says nothing
        return _Context(full, _after(full, time_s, rules.settle_s), "empty silo")
    return _Context(everywhere, everywhere, "")


def _after(live: Bools, time_s: Floats, delay_s: float) -> Bools:
    """Rows of ``live`` that are at least ``delay_s`` after the begin of their stretch."""
    starts, ends = stretches(live)
    begun = np.full(len(live), np.inf)
    for start, end in zip(starts, ends, strict=True):
        begun[start:end] = time_s[start]
    late: Bools = time_s - begun >= delay_s
    return live & late


def _other_mix_sensors(frame: pd.DataFrame, signal: str) -> Floats:
    """Median of the other sensors that see mix at each row, NaN where there is none."""
    names = [str(name) for name in frame.columns if _OF_MIX.fullmatch(str(name)) and name != signal]
    if not names or not _OF_MIX.fullmatch(signal):
        return np.full(len(frame), np.nan)
    readings = frame[names].to_numpy(dtype=float).copy()
    for place, name in enumerate(names):
        quantity = signal_quantity(plain_signal(name))
        if quantity is not None:
            column = readings[:, place]
            column[~((column >= quantity.low) & (column <= quantity.high))] = np.nan
    median: Floats = pd.DataFrame(readings).median(axis=1).to_numpy(dtype=float)
    return median


def _unit_mix_up(
    values: Floats, live: Bools, others: Floats, quantity: Quantity, rules: CleaningRules
) -> Bools:
    """Stretches that make sense only when read in the other temperature unit.

    A stretch counts when, once converted, it joins on to the reading before or after it or agrees
    with the other mix sensors, or when there is nothing else to go by.
    """
    found = np.zeros(len(values), bool)
    usual = values[live & (values >= quantity.low) & (values <= quantity.high)]
    known = len(usual) >= rules.unit_least
    level = float(np.median(usual)) if known else np.nan
    alone = not known and not np.isfinite(others).any()
    ways: tuple[tuple[Any, bool], ...] = (
        (celsius_from_fahrenheit(cast(Any, values)), True),
        (fahrenheit_from_celsius(cast(Any, values)), False),
    )
    for converted, from_fahrenheit in ways:
        if known:
            near = np.abs(converted - level) <= rules.unit_agree_k
            odd = live & near & (np.abs(values - level) >= rules.unit_apart_k)
        else:
            sense = (converted >= quantity.low) & (converted <= quantity.high)
            odd = live & sense & ((values > quantity.high) | (values < quantity.low))
        for start, end in zip(*stretches(odd), strict=True):
            if end - start < rules.unit_least:
                continue
            edges = [(start, start - 1), (end - 1, end)]
            joins = any(
                0 <= outside < len(values)
                and abs(converted[inside] - values[outside]) <= rules.unit_step_k
                for inside, outside in edges
            )
            gap = np.abs(converted[start:end] - others[start:end])
            agrees = bool(np.isfinite(gap).any()) and np.nanmedian(gap) <= rules.unit_step_k
            # A sensor on its way up passes every low value: then only a step proves a mix-up.
            if joins or alone or (agrees and (from_fahrenheit or not known)):
                found[start:end] = True
    return found


def _stuck(
    values: Floats, time_s: Floats, judged: Bools, floor_s: float, rules: CleaningRules
) -> Bools:
    """Stretches of one and the same reading, longer than the signal usually stands still."""
    found = np.zeros(len(values), bool)
    starts, ends = stretches_of_equal(np.where(judged, values, np.nan), time_s, rules.longest_gap_s)
    if not len(starts):
        return found
    stands_s = elapsed_s(time_s, starts, ends)
    rest = np.delete(stands_s, int(np.argmax(stands_s)))
    usual_s = _median_by_time(rest)
    for place in np.flatnonzero(stands_s > max(floor_s, rules.stuck_usual_times * usual_s)):
        found[starts[place] : ends[place]] = True
    return found


def _median_by_time(stands_s: Floats) -> float:
    """The length of stand in which the signal spends half of its time."""
    if not len(stands_s):
        return 0.0
    ordered = np.sort(stands_s)
    return float(ordered[np.searchsorted(np.cumsum(ordered), ordered.sum() / 2)])


def _spikes(values: Floats, time_s: Floats, judged: Bools, rules: CleaningRules) -> Bools:
    """Readings far from the median around them, in stretches short enough to be no change."""
    shown = pd.Series(np.where(judged, values, np.nan))
    half = rules.spike_window // 2 + 1
    middle = shown.rolling(rules.spike_window, center=True, min_periods=half).median().to_numpy()
    off = np.abs(shown.to_numpy() - middle)
    known = off[np.isfinite(off)]
    if not len(known):
        return np.zeros(len(values), bool)
    limit = max(rules.spike_deviations * _MAD_TO_SD * np.median(known), rules.spike_least_k)
    found: Bools = off > limit
    for start, end in zip(*stretches(found), strict=True):
        if end - start > rules.spike_longest or time_s[end - 1] - time_s[start] > (
            rules.longest_gap_s
        ):
            found[start:end] = False
    return found
