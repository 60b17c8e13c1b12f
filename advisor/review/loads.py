"""Truck loads against the advice for the mix they were made from: at load-out and at the paver."""

from __future__ import annotations

from typing import Literal

import numpy as np
import pandas as pd
from numpy.typing import NDArray

from advisor.review.kernel import ReviewRules, join_timeline
from advisor.review.result import NO_WASTE, Excursion
from advisor.review.runs import outside_runs

Floats = NDArray[np.float64]
LoadPoint = Literal["load_out", "delivery"]

_SIGNAL: dict[LoadPoint, str] = {"load_out": "load_out_c", "delivery": "delivery_c"}
_LONGEST_BETWEEN_S = 3600.0  # loads further apart are not one stretch
_MAKING_S = 600.0  # about the time it takes to make one truck load
_LONG_IN_SILO_S = 2 * 3600.0


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
    tickets: pd.DataFrame, arrivals: pd.DataFrame, rows: pd.DataFrame, timeline: pd.DataFrame
) -> pd.DataFrame:
    """Every ticket with when its mix was made, its arrival, and the windows then in force.

    ``made_over_k`` and ``made_under_k`` [K] are how far outside its window it left the drum.
    """
    loads = tickets.reset_index(drop=True)
    loads = loads.assign(made=make_times(loads, rows))
    joined = join_timeline(loads, timeline, at="made")
    loads = pd.concat([loads, joined.drop(columns=["job"])], axis=1)
    drum = _mean_of_making(loads, rows)
    loads = loads.assign(made_over_k=drum["over_k"], made_under_k=drum["under_k"])
    if len(arrivals):
        arrived = arrivals.rename(columns={"time": "arrived"})
        columns = [
            name for name in arrived.columns if name not in loads.columns or name == "ticket"
        ]
        loads = loads.merge(arrived[columns], on="ticket", how="left")
    return loads


def _mean_of_making(loads: pd.DataFrame, rows: pd.DataFrame) -> pd.DataFrame:
    """Mean distance from the window over the minutes in which the mix of each load was made."""
    time_s = rows["time_s"].to_numpy()
    end_s = loads["made"].astype("int64").to_numpy() / 1e6
    found = {}
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
    return pd.DataFrame(found, index=loads.index)


def load_excursions(loads: pd.DataFrame, point: LoadPoint, rules: ReviewRules) -> list[Excursion]:
    """Stretches of loads outside their window at ``point``, oldest first."""
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
                _excursion(one.iloc[start:end], over[start:end], point, side, at)
                for start, end in zip(*runs, strict=True)
                if np.nanmax(over[start:end]) >= rules.dead_band_k
            ]
    return sorted(found, key=lambda one: one.start)


def _excursion(part: pd.DataFrame, over: Floats, point: LoadPoint, side: str, at: str) -> Excursion:
    mass = part["mass_kg"].to_numpy(float)
    beyond = np.maximum(np.nan_to_num(over), 0.0)
    bound = part[f"{point}_{'high' if side == 'hot' else 'low'}_c"].iloc[0]
    first, last = part[at].iloc[0], part[at].iloc[-1]
    cause, evidence = _cause(part, point, side)
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
        cause=cause,
        evidence=evidence,
    )


def _cause(part: pd.DataFrame, point: LoadPoint, side: str) -> tuple[str, str]:
    """Likely cause of loads outside their window, and what supports it."""
    count = len(part)
    tickets = ", ".join(str(one) for one in part["ticket"].head(6)) + (" ..." if count > 6 else "")
    loads = f"{count} load{'s' if count > 1 else ''} ({tickets})"
    made = part["made_over_k" if side == "hot" else "made_under_k"].to_numpy(float)
    so_made = int(np.count_nonzero(made > 0.0))
    if so_made * 2 >= count:
        word = "hotter" if side == "hot" else "colder"
        return f"made {side}", f"{loads}: {so_made} left the drum {word} than its window."
    rested_s = (part["time"] - part["made"]).dt.total_seconds().to_numpy(float)
    if side == "cold" and np.median(rested_s) > _LONG_IN_SILO_S:
        return "long in the silo", f"{loads}: {np.median(rested_s) / 3600.0:.1f} h in the silo."
    if point == "load_out":
        told = "the drum was inside its window; compare the load-out thermometer with a probe."
        return "silo or thermometer", f"{loads}: {told}"
    road_min = (part["arrived"] - part["time"]).dt.total_seconds().median() / 60.0
    keeps = "more" if side == "hot" else "less"
    told = f"{road_min:.0f} min on the road; the truck keeps {keeps} heat than reckoned, or the"
    return "haul or thermometer", f"{loads}: made inside, {told} thermometer is off."
