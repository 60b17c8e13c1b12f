"""Truck loads against the advice for the mix they were made from: at load-out and at the paver."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Literal

import numpy as np
import pandas as pd
from numpy.typing import NDArray

from advisor.review.kernel import ReviewRules, join_timeline
from advisor.review.load_causes import load_cause
from advisor.review.result import NO_WASTE, Excursion
from advisor.review.runs import outside_runs

Floats = NDArray[np.float64]
LoadPoint = Literal["load_out", "delivery"]

_SIGNAL: dict[LoadPoint, str] = {"load_out": "load_out_c", "delivery": "delivery_c"}
_LONGEST_BETWEEN_S = 3600.0  # loads further apart are not one stretch
_MAKING_S = 600.0  # about the time it takes to make one truck load


@dataclass(frozen=True)
class Road:
    """Time planned from load-out to unloading, and its spread [s]."""

    planned_s: float
    spread_s: float


def make_times(tickets: pd.DataFrame, rows: pd.DataFrame) -> pd.Series:
    """When the mix of each ticket was made: load-out less its time in the silo.

    Mix leaves a silo in the order it came in, so the time is the silo's content over the rate at
    which it was made, mean of the hour before. ``rows`` as trace_rows returns them.
    """
    time_s = rows["time_s"].to_numpy()
    made = np.concatenate(([0.0], np.cumsum(rows["mass_kg"].to_numpy())))
    loaded_s = tickets["time"].astype("datetime64[us, UTC]").astype("int64").to_numpy() / 1e6
    place = np.searchsorted(time_s, loaded_s, side="right")
    content = np.zeros(len(tickets))
    for name in [one for one in rows.columns if one.startswith("silo_") and one.endswith("_kg")]:
        silo = name.removesuffix("_kg").replace("_", " ")
        from_it = (tickets["silo"] == silo).to_numpy()
        values = np.nan_to_num(rows[name].to_numpy(float))
        here = values[np.clip(place - 1, 0, len(values) - 1)] if len(values) else content
        content = np.where(from_it, here, content)
    # Mass made up to the moment of making = mass made until load-out less what still lies in it.
    wanted = made[np.clip(place, 0, len(made) - 1)] - content
    at = np.clip(np.searchsorted(made, wanted, side="left"), 1, max(len(time_s), 1)) - 1
    made_s = np.where(content > 0, time_s[at] if len(time_s) else loaded_s, loaded_s)
    made_s = np.minimum(made_s, loaded_s)
    return pd.Series(
        pd.to_datetime(made_s, unit="s", utc=True).astype("datetime64[us, UTC]"), tickets.index
    )


def judged_loads(
    tickets: pd.DataFrame,
    arrivals: pd.DataFrame,
    rows: pd.DataFrame,
    timeline: pd.DataFrame,
    roads: Mapping[str, Road],
) -> pd.DataFrame:
    """Every ticket with when its mix was made, its arrival, and the windows then in force.

    ``tickets`` and ``arrivals`` as the logs room returns them, ``rows`` as trace_rows does,
    ``timeline`` as timeline_frame does, ``roads`` by job.

    ``made_over_k`` and ``made_under_k`` [K] are how far outside its window it left the drum;
    ``silo_over_k`` and ``silo_under_k`` the furthest that mix made since then did;
    ``planned_road_s`` and ``road_spread_s`` [s] are those of its job.
    """
    loads = tickets.reset_index(drop=True)
    loads = loads.assign(made=make_times(loads, rows))
    joined = join_timeline(loads, timeline, at="made")
    loads = pd.concat([loads, joined.drop(columns=["job"])], axis=1)
    drum = _mean_of_making(loads, rows)
    job = loads.get("job", pd.Series("", index=loads.index))
    loads = loads.assign(
        made_over_k=drum["over_k"],
        made_under_k=drum["under_k"],
        silo_over_k=drum["most_over_k"],
        silo_under_k=drum["most_under_k"],
        planned_road_s=[roads[one].planned_s if one in roads else np.nan for one in job],
        road_spread_s=[roads[one].spread_s if one in roads else np.nan for one in job],
    )
    if len(arrivals):
        arrived = arrivals.rename(columns={"time": "arrived"})
        columns = [
            name for name in arrived.columns if name not in loads.columns or name == "ticket"
        ]
        loads = loads.merge(arrived[columns], on="ticket", how="left")
    return loads


def _mean_of_making(loads: pd.DataFrame, rows: pd.DataFrame) -> pd.DataFrame:
    """Mean distance from the window while the mix of each load was made, and the furthest such
    mean from then until it was loaded: in the silo, mix of before and after mingles."""
    time_s = rows["time_s"].to_numpy()
    end_s = loads["made"].astype("int64").to_numpy() / 1e6
    out_s = loads["time"].astype("datetime64[us, UTC]").astype("int64").to_numpy() / 1e6
    found: dict[str, Floats] = {}
    for name in ("over_k", "under_k"):
        values = rows[name].to_numpy(float)
        known = np.isfinite(values)
        total = np.concatenate(([0.0], np.cumsum(np.where(known, values, 0.0))))
        count = np.concatenate(([0], np.cumsum(known)))
        first = np.searchsorted(time_s, end_s - _MAKING_S)
        last = np.searchsorted(time_s, end_s, side="right")
        several = np.maximum(count[last] - count[first], 1)
        mean = (total[last] - total[first]) / several
        found[name] = np.where(count[last] > count[first], mean, np.nan)
        begin = np.searchsorted(time_s, time_s - _MAKING_S)
        place = np.arange(1, len(time_s) + 1)
        rolling = (total[place] - total[begin]) / np.maximum(count[place] - count[begin], 1)
        rolling[count[place] == count[begin]] = np.nan
        until = np.searchsorted(time_s, out_s, side="right")
        found[f"most_{name}"] = np.array(
            [
                float(np.nanmax(part)) if np.isfinite(part).any() else np.nan
                for part in (
                    rolling[a - 1 : b] for a, b in zip(np.maximum(last, 1), until, strict=True)
                )
            ],
            float,
        )
    return pd.DataFrame(found, index=loads.index)


def load_excursions(
    loads: pd.DataFrame, point: LoadPoint, rules: ReviewRules, sensor_sd_k: float = 0.0
) -> list[Excursion]:
    """Stretches of ``loads``, as judged_loads returns them, outside their window at ``point``.

    Oldest first. What never gets further out than the dead band of ``rules``, or than two standard
    deviations of the thermometer, ``sensor_sd_k`` [K], is not told.
    """
    dead_band_k = max(rules.dead_band_k, 2.0 * sensor_sd_k)
    signal = _SIGNAL[point]
    if signal not in loads.columns:
        return []
    found = []
    at = "time" if point == "load_out" else "arrived"
    for _, part in loads.dropna(subset=[at]).groupby("mix_id"):
        one = part.sort_values(at).reset_index(drop=True)
        time_s = one[at].astype("datetime64[us, UTC]").astype("int64").to_numpy() / 1e6
        value = one[signal].where(one.get(f"{signal}_mark", "") == "").to_numpy(float)
        for side, over in (
            ("hot", value - one[f"{point}_high_c"].to_numpy(float)),
            ("cold", one[f"{point}_low_c"].to_numpy(float) - value),
        ):
            runs = outside_runs(time_s, over, rules.dead_band_k, 0.0, _LONGEST_BETWEEN_S)
            found += [
                _excursion(one.iloc[start:end], over[start:end], point, side, at, rules)
                for start, end in zip(*runs, strict=True)
                if np.nanmax(over[start:end]) >= dead_band_k
            ]
    return sorted(found, key=lambda one: one.start)


def _excursion(
    part: pd.DataFrame, over: Floats, point: LoadPoint, side: str, at: str, rules: ReviewRules
) -> Excursion:
    mass = part["mass_kg"].to_numpy(float)
    beyond = np.maximum(np.nan_to_num(over), 0.0)
    bound = part[f"{point}_{'high' if side == 'hot' else 'low'}_c"].iloc[0]
    first, last = part[at].iloc[0], part[at].iloc[-1]
    cause = load_cause(part, point, side, rules.causes)
    return Excursion(
        point=point,
        side=side,  # type: ignore[arg-type]
        start=first.to_pydatetime(),
        end=last.to_pydatetime(),
        minutes=(last - first).total_seconds() / 60.0,
        tonnes=float(mass.sum() / 1000.0),
        peak_k=float(beyond.max()),
        mean_k=float(np.average(beyond, weights=mass)) if mass.sum() else float(beyond.mean()),
        limit_c=float(bound),
        mix=str(part["mix_id"].iloc[0]),
        job=str(part["job"].iloc[0]),
        tank=str(part["tank"].iloc[0]),
        state="production",
        waste=NO_WASTE,
        cause=cause.name,
        evidence=cause.evidence,
    )
