"""Rows of a plant's log and tickets as the pages ask for them."""

from __future__ import annotations

from datetime import datetime
from itertools import pairwise

import numpy as np
import pandas as pd

from advisor.figures.drawn import WindowSpan
from advisor.logs import PlantLog


def last_before(frame: pd.DataFrame, moment: str, at: datetime) -> pd.Series | None:
    """The row of ``frame`` latest at or before ``at`` by ``moment``; None without one."""
    if moment not in frame.columns:
        return None
    times = frame[moment]
    early = frame[(times <= pd.Timestamp(at)).to_numpy()]
    return None if early.empty else early.loc[early[moment].idxmax()]


def loads_of_job(log: PlantLog, job: str | None) -> pd.DataFrame:
    """The loads of ``job`` in ``log`` with their arrival, where the exports tell the job."""
    loads = log.tickets
    if "job" in loads.columns and job is not None:
        loads = loads[(loads["job"] == job).to_numpy()]
    arrivals = log.arrivals.rename(columns={"time": "arrived"})
    if "ticket" not in loads.columns or "ticket" not in arrivals.columns or arrivals.empty:
        return loads
    fresh = [one for one in arrivals.columns if one == "ticket" or one not in loads.columns]
    return loads.merge(arrivals[fresh], on="ticket", how="left")


def value_in(row: pd.Series, signal: str) -> float | None:
    """The number of ``signal`` in a row; None where it is not there or missing."""
    value = row.get(signal)
    return None if value is None or not np.isfinite(float(value)) else float(value)


def windows_in(rows: pd.DataFrame, start: datetime, end: datetime) -> list[WindowSpan]:
    """Stretches of rows under one window, with gaps where nothing was made."""
    inside = rows[((rows["time"] >= start) & (rows["time"] < end)).to_numpy()]
    if inside.empty:
        return []
    columns = ["discharge_low_c", "discharge_target_c", "discharge_high_c"]
    made = (inside["rate_kgs"].to_numpy(float) > 0.0)[:, None]
    numbers = np.where(made, inside[columns].to_numpy(float), np.nan)
    mixes = inside["mix_id"].fillna("").astype(str).to_numpy()
    same = (numbers[1:] == numbers[:-1]) | (np.isnan(numbers[1:]) & np.isnan(numbers[:-1]))
    breaks = np.flatnonzero(~same.all(axis=1) | (mixes[1:] != mixes[:-1])) + 1
    times = [one.to_pydatetime() for one in inside["time"]]
    found = []
    edges = [0, *breaks.tolist(), len(inside)]
    for first, after in pairwise(edges):
        until = times[after] if after < len(times) else end
        low, target, high = (float(one) if np.isfinite(one) else None for one in numbers[first])
        found.append(WindowSpan(times[first], until, low, target, high, str(mixes[first])))
    return found
