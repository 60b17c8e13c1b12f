"""The review of one plant's log against the advice that was in force: a pure function.

Tables in, a small result out; nothing here reads files, so that the same function runs in the
program, in a pool of processes or on a cluster.
"""

from __future__ import annotations

from dataclasses import dataclass
from datetime import datetime
from zoneinfo import ZoneInfo

import numpy as np
import pandas as pd
from numpy.typing import NDArray

from advisor.review.causes import CauseRules, likely_cause
from advisor.review.result import (
    NO_WASTE,
    Excursion,
    HourCell,
    MixShare,
    NoAdvice,
    SetAside,
    State,
    StateShare,
    Waste,
)
from advisor.review.runs import outside_runs, row_durations_s
from advisor.review.states import CODE, STATES, StateRules, plant_states
from advisor.review.waste import HeatPrice, excess_tk, waste_of

Floats = NDArray[np.float64]

# States in which mix is made to be sold or settled; only these can be hot or cold.
_MAKING: tuple[State, ...] = ("production", "start-up", "mix change")
_SETTLING = ("start-up", "mix change")


@dataclass(frozen=True)
class ReviewRules:
    """Dead band, delay and smoothing of the comparison; values come from config/review.yaml."""

    dead_band_k: float
    on_delay_s: float
    longest_gap_s: float
    smoothing_s: float
    states: StateRules
    causes: CauseRules


@dataclass(frozen=True)
class Findings:
    """What the log says; the parts of a Review that come from the plant's own rows."""

    states: tuple[StateShare, ...]
    cells: tuple[HourCell, ...]
    mixes: tuple[MixShare, ...]
    excursions: tuple[Excursion, ...]
    set_aside: tuple[SetAside, ...]
    tonnes: float
    in_window_tonnes: float
    hot_tonnes: float
    cold_tonnes: float
    no_advice_tonnes: float
    no_advice: tuple[NoAdvice, ...]
    waste: Waste
    start_up_waste: Waste


def join_timeline(rows: pd.DataFrame, timeline: pd.DataFrame, at: str = "time") -> pd.DataFrame:
    """``rows`` with the advice that was in force at each, by time and mix.

    ``rows`` has ``at`` (aware UTC) and mix_id; ``timeline`` has start and mix, one row per change
    of advice. Rows of a mix without advice get missing values. Order and index are kept.
    """
    left = rows[[at, "mix_id"]].rename(columns={at: "start", "mix_id": "mix"})
    left = left.assign(start=left["start"].astype("datetime64[us, UTC]"), order=range(len(left)))
    right = timeline.assign(start=timeline["start"].astype("datetime64[us, UTC]"))
    known = left.dropna(subset=["start"]).sort_values("start")
    joined = pd.merge_asof(known, right.sort_values("start"), on="start", by="mix")
    joined = joined.set_index("order").reindex(range(len(left)))
    joined.index = rows.index
    return joined.drop(columns=["mix", "start"])


def trace_rows(log: pd.DataFrame, timeline: pd.DataFrame, rules: ReviewRules) -> pd.DataFrame:
    """The log with window, state, smoothed discharge and distance from the window at every row.

    ``log`` has time (aware UTC, ascending), mix_id, discharge_c [C], rate_kgs [kg/s], burner_load
    [1], and for each signal an optional ``<signal>_mark`` with the reason a reading is not used.
    ``timeline`` has start, mix, job, tank and discharge_low_c, discharge_high_c [C].

    Adds time_s [s], lasting_s [s], mass_kg [kg], used_c and smooth_c [C], over_k and under_k [K]
    (above 0 outside), state, and the columns of the timeline in force.
    """
    rows = log.reset_index(drop=True)
    joined = join_timeline(rows, timeline)
    rows = pd.concat([rows, joined], axis=1)
    time_s = rows["time"].astype("datetime64[us, UTC]").astype("int64").to_numpy() / 1e6
    lasting_s = row_durations_s(time_s, rules.longest_gap_s)
    rate = rows["rate_kgs"].to_numpy(float)
    mark = rows.get("discharge_c_mark", pd.Series("", index=rows.index)).fillna("")
    used = rows["discharge_c"].where(mark == "").to_numpy(float)
    smooth = _smoothed(used, time_s, rules.smoothing_s)
    low, high = rows["discharge_low_c"].to_numpy(float), rows["discharge_high_c"].to_numpy(float)
    over, under = smooth - high, low - smooth
    off = np.where(over > 0, over, np.where(under > 0, -under, 0.0))
    off = np.where(np.isfinite(over), off, np.nan)
    mix_code = pd.factorize(rows["mix_id"])[0].astype(np.int64)
    burner = rows.get("burner_load", pd.Series(np.nan, index=rows.index)).to_numpy(float)
    states = plant_states(
        time_s, rate, burner, mix_code, _silo_out_kgs(rows, time_s, rate), off, rules.states
    )
    making = np.isin(states, [CODE[name] for name in _MAKING])
    return rows.assign(
        time_s=time_s,
        lasting_s=lasting_s,
        mass_kg=np.where(np.isfinite(rate), rate, 0.0) * lasting_s,
        used_c=used,
        smooth_c=smooth,
        over_k=np.where(making, over, np.nan),
        under_k=np.where(making, under, np.nan),
        state=np.array(STATES)[states],
    )


def _smoothed(values: Floats, time_s: Floats, width_s: float) -> Floats:
    """Mean over about ``width_s`` around each row; missing stays missing.

    Noise above the limit would read as excess that never was, so it is taken out first.
    """
    if len(time_s) < 2:
        return values
    step = float(np.median(np.diff(time_s)))
    width = max(1, round(width_s / step)) if step > 0 else 1
    smooth = pd.Series(values).rolling(width, center=True, min_periods=1).mean()
    return np.where(np.isfinite(values), smooth.to_numpy(float), np.nan)


def _silo_out_kgs(rows: pd.DataFrame, time_s: Floats, rate: Floats) -> Floats:
    """Mass drawn from all silos per time [kg/s], from their content and the rate made."""
    contents = [name for name in rows.columns if name.startswith("silo_") and name.endswith("_kg")]
    if not contents or len(time_s) < 2:
        return np.zeros(len(time_s))
    stored = rows[contents].sum(axis=1, min_count=1).to_numpy(float)
    grown = np.gradient(np.nan_to_num(stored), time_s)
    made = np.where(np.isfinite(rate), rate, 0.0)
    return np.where(made > 0, 0.0, np.maximum(-grown, 0.0))


def find_excursions(
    rows: pd.DataFrame, rules: ReviewRules, price: HeatPrice
) -> tuple[Excursion, ...]:
    """Excursions of the discharge in ``rows`` as trace_rows returns them, oldest first.

    What never gets further out than the dead band is counted in tonnes, not told one by one.
    """
    found: list[Excursion] = []
    time_s = rows["time_s"].to_numpy()
    for side, column, bound in (
        ("hot", "over_k", "discharge_high_c"),
        ("cold", "under_k", "discharge_low_c"),
    ):
        over = rows[column].to_numpy(float)
        runs = outside_runs(time_s, over, rules.dead_band_k, rules.on_delay_s, rules.longest_gap_s)
        seen = rows.assign(window_c=rows[bound])
        found += [
            _excursion(seen, start, end, side, over, rules, price)
            for start, end in zip(*runs, strict=True)
            if np.nanmax(over[start:end]) >= rules.dead_band_k
        ]
    return tuple(sorted(found, key=lambda one: one.start))


def _excursion(
    rows: pd.DataFrame,
    start: int,
    end: int,
    side: str,
    over: Floats,
    rules: ReviewRules,
    price: HeatPrice,
) -> Excursion:
    part = rows.iloc[start:end]
    mass = part["mass_kg"].to_numpy()
    beyond = np.maximum(over[start:end], 0.0)
    state = str(part["state"].mode().iloc[0])
    cause = likely_cause(rows, start, end, side, state, rules.causes)  # type: ignore[arg-type]
    excess = float((beyond * mass).sum() / 1000.0) if side == "hot" else 0.0
    first = part.iloc[0]
    return Excursion(
        point="discharge",
        side=side,  # type: ignore[arg-type]
        start=first["time"].to_pydatetime(),
        end=(
            part["time"].iloc[-1] + pd.Timedelta(seconds=float(part["lasting_s"].iloc[-1]))
        ).to_pydatetime(),
        minutes=float(part["lasting_s"].sum() / 60.0),
        tonnes=float(mass.sum() / 1000.0),
        peak_k=float(beyond.max()),
        mean_k=float(np.average(beyond, weights=mass)) if mass.sum() > 0 else float(beyond.mean()),
        limit_c=float(first["window_c"]),
        mix=str(first["mix_id"]),
        job=str(first["job"]),
        tank=str(first["tank"]),
        state=state,  # type: ignore[arg-type]
        waste=waste_of(excess, price) if excess else NO_WASTE,
        cause=cause.name,
        evidence=cause.evidence,
    )


def review_rows(
    rows: pd.DataFrame, rules: ReviewRules, price: HeatPrice, time_zone: str
) -> Findings:
    """What a log says against the advice in force at each of its rows.

    ``rows`` as trace_rows returns them; hours are those of ``time_zone``.
    """
    excess = excess_tk(
        rows["smooth_c"].where(rows["over_k"].notna()).to_numpy(float),
        rows["discharge_high_c"].to_numpy(float),
        rows["mass_kg"].to_numpy(),
    )
    settling = rows["state"].isin(_SETTLING).to_numpy()
    rows = rows.assign(excess_tk=excess)
    making = rows["state"].isin(_MAKING).to_numpy()
    tonnes = np.where(making, rows["mass_kg"].to_numpy() / 1000.0, 0.0)
    known = rows["over_k"].notna().to_numpy()
    hot = known & (rows["over_k"].to_numpy() > 0)
    cold = known & (rows["under_k"].to_numpy() > 0)
    rows = rows.assign(tonnes=tonnes, hot=hot, cold=cold)
    return Findings(
        states=_state_shares(rows),
        cells=_hour_cells(rows, time_zone),
        mixes=_mix_shares(rows, price),
        excursions=find_excursions(rows, rules, price),
        set_aside=_set_aside(rows),
        tonnes=float(tonnes.sum()),
        in_window_tonnes=float(tonnes[known & ~hot & ~cold].sum()),
        hot_tonnes=float(tonnes[hot].sum()),
        cold_tonnes=float(tonnes[cold].sum()),
        no_advice_tonnes=float(tonnes[~known].sum()),
        no_advice=_no_advice(rows),
        waste=waste_of(float(excess[~settling].sum()), price),
        start_up_waste=waste_of(float(excess[settling].sum()), price),
    )


def _state_shares(rows: pd.DataFrame) -> tuple[StateShare, ...]:
    sums = rows.groupby("state")[["lasting_s", "mass_kg"]].sum()
    return tuple(
        StateShare(
            state,
            float(sums.loc[state, "lasting_s"]) / 60.0,
            float(sums.loc[state, "mass_kg"]) / 1000.0,
        )
        for state in STATES
        if state in sums.index
    )


def _hour_cells(rows: pd.DataFrame, time_zone: str) -> tuple[HourCell, ...]:
    local = rows["time"].dt.tz_convert(ZoneInfo(time_zone))
    distance = np.where(rows["hot"], rows["over_k"], np.where(rows["cold"], -rows["under_k"], 0.0))
    distance = np.where(rows["over_k"].notna(), distance, np.nan)
    table = pd.DataFrame(
        {
            "day": local.dt.strftime("%Y-%m-%d"),
            "hour": local.dt.hour,
            "tonnes": rows["tonnes"],
            "known": np.where(np.isfinite(distance), rows["tonnes"], 0.0),
            "moment": np.nan_to_num(distance) * rows["tonnes"],
            "hot": rows["tonnes"] * rows["hot"],
            "cold": rows["tonnes"] * rows["cold"],
        }
    )
    sums = table.groupby(["day", "hour"], sort=True).sum().reset_index()
    return tuple(
        HourCell(
            day=row.day,
            hour=int(row.hour),
            tonnes=float(row.tonnes),
            distance_k=float(row.moment / row.known) if row.known > 0 else None,
            hot_tonnes=float(row.hot),
            cold_tonnes=float(row.cold),
        )
        for row in sums.itertuples()
    )


def _mix_shares(rows: pd.DataFrame, price: HeatPrice) -> tuple[MixShare, ...]:
    made = rows[rows["tonnes"] > 0]
    shares = []
    for mix, part in made.groupby("mix_id"):
        tonnes = part["tonnes"].to_numpy()
        read = part["smooth_c"].notna().to_numpy()
        mean = float(np.average(part["smooth_c"][read], weights=tonnes[read])) if read.any() else 0
        shares.append(
            MixShare(
                mix=str(mix),
                tonnes=float(tonnes.sum()),
                hot_tonnes=float(tonnes[part["hot"]].sum()),
                cold_tonnes=float(tonnes[part["cold"]].sum()),
                no_advice_tonnes=float(tonnes[part["over_k"].isna()].sum()),
                mean_c=mean,
                waste=waste_of(float(part["excess_tk"].sum()), price),
            )
        )
    return tuple(sorted(shares, key=lambda one: -one.tonnes))


def _no_advice(rows: pd.DataFrame) -> tuple[NoAdvice, ...]:
    """Tonnes that could not be judged, by mix and reason, the most first."""
    part = rows[(rows["tonnes"] > 0) & rows["over_k"].isna()]
    why = part.get("why_none", pd.Series("", index=part.index)).fillna("")
    why = why.where(why != "", "no run of this mix was on the order sheet")
    why = why.where(part["used_c"].notna(), "no believed reading of the discharge")
    sums = part.groupby([part["mix_id"], why])["tonnes"].sum()
    found = [NoAdvice(str(mix), str(reason), float(sum_)) for (mix, reason), sum_ in sums.items()]
    return tuple(sorted(found, key=lambda one: -one.tonnes))


def _set_aside(log: pd.DataFrame) -> tuple[SetAside, ...]:
    found = []
    for column in [name for name in log.columns if name.endswith("_mark")]:
        marked = log.loc[log[column].fillna("") != "", ["time", column]]
        for reason, part in marked.groupby(column):
            times: list[datetime] = [part["time"].min(), part["time"].max()]
            found.append(
                SetAside(str(reason), column.removesuffix("_mark"), len(part), times[0], times[1])
            )
    return tuple(found)
