"""State of the plant at every row of its log, from rate, burner, conveyor, silo and mix."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from advisor.review.result import State
from advisor.review.runs import change_edges, run_edges

Floats = NDArray[np.float64]

STATES: tuple[State, ...] = (
    "unknown",
    "off",
    "warm-up",
    "start-up",
    "production",
    "mix change",
    "stop",
    "silo only",
    "empty-out",
)
CODE: dict[State, int] = {state: code for code, state in enumerate(STATES)}


@dataclass(frozen=True)
class StateRules:
    """What tells the states apart; values come from config/review.yaml."""

    running_rate_kgs: float  # at least this much mix is made while the plant runs
    burner_on: float  # burner load above which it is lit
    short_stop_s: float  # a halt no longer than this, between two runs, is a stop
    settle_s: float  # after a start or a mix change, at most this long
    steady_s: float  # settled when the discharge stayed inside for this long
    steady_k: float  # how near to the window counts as inside
    empty_out_s: float  # after the last mix the conveyor may clear for this long


def plant_states(
    time_s: Floats,
    rate_kgs: Floats,
    burner_load: Floats,
    mix_code: NDArray[np.int64],
    silo_out_kgs: Floats,
    off_window_k: Floats,
    rules: StateRules,
) -> NDArray[np.int8]:
    """Code (index into STATES) of the state at every row.

    ``time_s`` [s] ascending; ``rate_kgs`` [kg/s] and ``burner_load`` [1], NaN where not known;
    ``mix_code`` a number per mix, -1 where none; ``silo_out_kgs`` [kg/s] drawn from the silos;
    ``off_window_k`` [K] distance of the discharge from its window, 0 inside, NaN unknown.
    """
    count = len(time_s)
    states = np.full(count, CODE["off"], np.int8)
    if count == 0:
        return states
    running = rate_kgs >= rules.running_rate_kgs
    lit = burner_load > rules.burner_on
    states[silo_out_kgs > 0] = CODE["silo only"]
    states[~running & lit] = CODE["warm-up"]
    states[running] = CODE["production"]
    starts, ends = run_edges(running)
    for run, (start, end) in enumerate(zip(starts, ends, strict=True)):
        pause_s = time_s[start] - time_s[ends[run - 1] - 1] if run else np.inf
        if pause_s <= rules.short_stop_s:
            states[ends[run - 1] : start] = CODE["stop"]
        settled = _settled(time_s, off_window_k, start, end, rules)
        states[start:settled] = CODE["start-up"]
        _mark_mix_changes(states, time_s, mix_code, off_window_k, start, end, rules)
        _mark_empty_out(states, time_s, lit, end, rules)
    unknown = np.isnan(rate_kgs)
    states[unknown & ~lit] = CODE["unknown"]
    return states


def _settled(time_s: Floats, off_k: Floats, start: int, end: int, rules: StateRules) -> int:
    """First index of ``start:end`` from which the discharge stayed near its window."""
    near = np.abs(off_k[start:end]) <= rules.steady_k
    at = time_s[start:end] - time_s[start]
    for first, last in zip(*run_edges(near), strict=True):
        if at[last - 1] - at[first] >= rules.steady_s:
            return start + int(np.searchsorted(at, min(at[first], rules.settle_s)))
    return start + int(np.searchsorted(at, rules.settle_s))


def _mark_mix_changes(
    states: NDArray[np.int8],
    time_s: Floats,
    mix_code: NDArray[np.int64],
    off_k: Floats,
    start: int,
    end: int,
    rules: StateRules,
) -> None:
    firsts, _ = change_edges(mix_code[start:end])
    for first in firsts[1:]:
        begin = start + int(first)
        settled = _settled(time_s, off_k, begin, end, rules)
        states[begin:settled] = CODE["mix change"]


def _mark_empty_out(
    states: NDArray[np.int8], time_s: Floats, lit: NDArray[np.bool_], end: int, rules: StateRules
) -> None:
    if end >= len(time_s):
        return
    last = int(np.searchsorted(time_s, time_s[end - 1] + rules.empty_out_s, side="right"))
    clearing = slice(end, last)
    still = np.isin(states[clearing], (CODE["off"], CODE["silo only"])) & ~lit[clearing]
    states[clearing][still] = CODE["empty-out"]
